package outline

import (
	"math"

	"cavitywright/table"
	"cavitywright/table/curve"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

const (
	// straightOn is the turn (radians) of a joint below which the moved wall
	// needs neither an arc nor a trim: the gap is that part of the bias.
	straightOn = 1e-9
	// tightest is the part of the bias that must be left of a radius.
	tightest = 1e-6
	// bendSamples is the number of places of a span at which its radius is
	// held against the bias; what is between them, the crossings show.
	bendSamples = 64
)

// stretches are the pieces first to last-1 of the table, moved, not joined.
// Pieces of one cubic that follow each other are one stretch.
func stretches(t *table.Table, first, last int, bias float64) ([]stretch, error) {
	var list []stretch
	for i := first; i < last; i++ {
		p := &t.Pieces()[i]
		if n := len(list); n > 0 && p.Kind == curve.Bezier && list[n-1].kind == Cubic && list[n-1].span.Kind == curve.Bezier &&
			list[n-1].span.Coef == p.Coef && list[n-1].t1 == p.T0 && t.Pieces()[i-1].Side == p.Side {
			whole := *list[n-1].span
			whole.B, whole.T1 = p.B, p.T1
			list[n-1].span, list[n-1].t1 = &whole, p.T1
			list[n-1].b, _ = list[n-1].at(1)
			if err := bends(t, p, bias); err != nil {
				return nil, err
			}
			continue
		}
		s, err := one(t, p, bias)
		if err != nil {
			return nil, err
		}
		list = append(list, s)
	}
	return list, nil
}

// one is a piece of wall, moved.
func one(t *table.Table, p *table.Piece, bias float64) (stretch, error) {
	s := stretch{kind: Cubic, span: &p.Span, t0: p.T0, t1: p.T1, bias: bias, a: p.A, b: p.B, home: p.A}
	switch p.Kind {
	case curve.Segment:
		n := r2.Scale(-bias, plane.Left(plane.Unit(r2.Sub(p.B, p.A))))
		return stretch{kind: Line, a: r2.Add(p.A, n), b: r2.Add(p.B, n), home: p.A}, nil
	case curve.Circle:
		radius := p.Radius + bias*p.Sense()
		if radius <= tightest*math.Abs(bias) {
			return s, tooTight(t, p.A, p.Radius, bias)
		}
		base := math.Atan2(p.Axis.Y, p.Axis.X)
		s = stretch{kind: Arc, centre: p.Centre, radius: radius, from: base + p.T0, sweep: p.T1 - p.T0, a: p.A, b: p.B, home: p.A}
		if bias != 0 {
			s.a = r2.Add(s.centre, r2.Scale(radius, plane.Polar(s.from)))
			s.b = r2.Add(s.centre, r2.Scale(radius, plane.Polar(s.from+s.sweep)))
		}
		return s, nil
	}
	if err := bends(t, p, bias); err != nil {
		return s, err
	}
	s.a, _ = s.at(0)
	s.b, _ = s.at(1)
	return s, nil
}

// bends refuses a piece that bends tighter than the bias.
func bends(t *table.Table, p *table.Piece, bias float64) error {
	if bias == 0 {
		return nil
	}
	for k := range bendSamples + 1 {
		f := p.FrameAt(p.T0 + (p.T1-p.T0)*float64(k)/bendSamples)
		if 1+bias*f.Curvature <= tightest {
			return tooTight(t, f.Point, 1/math.Abs(f.Curvature), bias)
		}
	}
	return nil
}

func tooTight(t *table.Table, at r2.Vec, radius, bias float64) error {
	u := t.Design().Unit
	return refuseAt(at, "The wall has a radius of %.4g %s at (%.6g, %.6g) %s, which a bias of %.4g %s would use up; choose a smaller bias, or widen the bend.", radius, u, at.X, at.Y, u, bias, u)
}

// moved is a loop of the table after the bias: the gap at a corner that opens
// is rounded by an arc about the corner, and where the sides overlap they are
// cut where they cross, so that every point of the wall has moved by the bias.
func moved(t *table.Table, l table.Loop, bias float64) (chain, error) {
	list, err := stretches(t, l.First, l.Last, bias)
	c := chain{side: l.Side, list: list}
	if err != nil || bias == 0 {
		return c, err
	}
	lo, hi := make([]float64, len(list)), make([]float64, len(list))
	fill := make([]*stretch, len(list)) // before stretch i
	for i := range list {
		hi[i] = 1
	}
	for i := range list {
		k := (i + len(list) - 1) % len(list)
		turn := cornerTurn(t, l, list, k, i)
		at := list[i].home
		switch {
		case math.Abs(turn) <= straightOn:
		case turn*bias > 0:
			from := r2.Scale(-bias, plane.Left(list[k].tangent(1)))
			fill[i] = &stretch{kind: Arc, centre: at, radius: math.Abs(bias), from: math.Atan2(from.Y, from.X), sweep: turn, a: list[k].b, b: list[i].a}
		default:
			f, g, ok := meeting(&list[k], &list[i])
			if !ok {
				u := t.Design().Unit
				return c, refuseAt(at, "A bias of %.4g %s uses up a side at (%.6g, %.6g) %s; choose a smaller bias.", bias, u, at.X, at.Y, u)
			}
			hi[k], lo[i] = f, g
		}
	}
	c.list = nil
	for i := range list {
		if lo[i] >= hi[i] {
			u, at := t.Design().Unit, list[i].home
			return c, refuseAt(at, "A bias of %.4g %s uses up a side at (%.6g, %.6g) %s; choose a smaller bias.", bias, u, at.X, at.Y, u)
		}
		if fill[i] != nil {
			c.list = append(c.list, *fill[i])
		}
		c.list = append(c.list, list[i].part(lo[i], hi[i]))
	}
	for i := range c.list { // one point a joint
		c.list[i].b = c.list[(i+1)%len(c.list)].a
	}
	return c, nil
}

// cornerTurn is the turn from the end of stretch k to the start of stretch i;
// at a cusp its sign is that of the table's joint.
func cornerTurn(t *table.Table, l table.Loop, list []stretch, k, i int) float64 {
	turn := plane.Angle(list[k].tangent(1), list[i].tangent(0))
	if math.Abs(turn) < math.Pi-straightOn {
		return turn
	}
	for _, j := range t.Joints() {
		if t.Pieces()[j.Piece].Loop == t.Pieces()[l.First].Loop && math.Abs(j.Turn) > math.Pi-1e-6 {
			return math.Copysign(turn, j.Turn)
		}
	}
	return turn
}

// between is the wall from the arclength s0 over length, moved, with gaps and
// overlaps at its corners left as they are.
func between(t *table.Table, s0, length, bias float64) (chain, error) {
	i, x := t.Locate(t.Wrap(s0))
	c := chain{open: true, side: t.Loops()[t.Pieces()[i].Loop].Side}
	for left := length; left > 1e-12*length; {
		p := &t.Pieces()[i]
		s, err := one(t, p, bias)
		if err != nil {
			return c, err
		}
		end := math.Min(x+left, p.Length)
		t0, t1 := p.T(x), p.T(end)
		w := p.T1 - p.T0
		c.list = append(c.list, s.part((t0-p.T0)/w, (t1-p.T0)/w))
		left -= end - x
		i, x = p.Next, 0
	}
	return c, nil
}
