package chaos

import (
	"cavitywright/sim/measure"
	"math"

	"cavitywright/sim"
	"cavitywright/table"
	"cavitywright/table/curve"
	"cavitywright/table/plane"
	"cavitywright/table/wall"

	"gonum.org/v1/gonum/spatial/r2"
)

// alike, relative to the table's size, is how near two places must be to count
// as one: the rounding of a placed shape's coordinates, with a margin. Wider,
// and a table that is a little off an integrable one would be called so.
const alike = 1e-14

// Integrable is why no orbit of the table off mirrors is chaotic, as a note;
// "" where that is not known beforehand.
func Integrable(t *table.Table) string {
	straight, round, oval := true, true, true
	var first *table.Piece // the first curved one
	for i := range t.Pieces() {
		if p := &t.Pieces()[i]; p.Kind != curve.Segment {
			first = p
			break
		}
	}
	if first != nil {
		straight = false
		tol := alike * plane.Diagonal(t.Bounds())
		for i := range t.Pieces() {
			p := &t.Pieces()[i]
			if p.Kind == curve.Segment {
				round = round && passes(p, first.Centre, tol)
				oval = oval && onAxis(p, first, tol)
				continue
			}
			same := r2.Norm(r2.Sub(p.Centre, first.Centre)) <= tol
			round = round && same && p.Kind == curve.Circle
			oval = oval && same && p.Kind == curve.Oval && math.Abs(p.Radius-first.Radius) <= tol &&
				math.Abs(p.Minor-first.Minor) <= tol && math.Abs(plane.Cross(p.Axis, first.Axis)) <= alike
		}
	}
	switch {
	case straight:
		return "exactly 0: all walls are straight, and neighbouring rays part no faster than the path"
	case round:
		return "exactly 0: the table is integrable, for its circles share a centre and the size of the angular momentum about it is kept"
	case oval:
		return "exactly 0: the table is integrable, for the product of the angular momenta about the foci is kept (Berry 1981)"
	}
	return ""
}

// passes reports whether the line of a straight piece runs through a point.
func passes(p *table.Piece, c r2.Vec, tol float64) bool {
	d := plane.Unit(r2.Sub(p.B, p.A))
	return math.Abs(plane.Cross(d, r2.Sub(c, p.A))) <= tol
}

// onAxis reports whether a straight piece lies on an axis of an ellipse: a
// mirror there keeps the foci, or swaps them.
func onAxis(p, ellipse *table.Piece, tol float64) bool {
	d := plane.Unit(r2.Sub(p.B, p.A))
	across, along := math.Abs(plane.Cross(d, ellipse.Axis)), math.Abs(plane.Dot(d, ellipse.Axis))
	return passes(p, ellipse.Centre, tol) && math.Min(across, along) <= alike
}

// Mirrors is why the table has no tangent map, "" where it has one: rays must
// stay inside, and return at the angle at which they came.
func Mirrors(t *table.Table) string {
	if why := measure.Closed(t); why != "" {
		return why
	}
	if scatters(t.Law()) {
		return "the wall is rough, and neighbouring rays part by chance"
	}
	for _, s := range t.Stretches() {
		if scatters(s.Law) {
			return "a part of the wall is rough, and neighbouring rays part by chance there"
		}
	}
	return ""
}

// scatters reports whether a law sends back rays at another angle.
func scatters(l wall.Law) bool {
	for i := range measure.ProbeAngles {
		in := measure.Probe(i)
		// A law that scatters a share of the rays does so for some u.
		for _, u := range [...]float64{0, 0.25, 0.5, 0.75, 1 - 1e-12} {
			if o := l.Scatter(in, u); o.Back.Weight > 0 && o.Back.P != in.P {
				return true
			}
		}
	}
	return false
}

// BareMirrors reports whether every wall is a mirror.
func BareMirrors(t *table.Table) bool {
	if t.Law() != (wall.Mirror{}) {
		return false
	}
	for _, s := range t.Stretches() {
		if s.Law != (wall.Mirror{}) {
			return false
		}
	}
	return true
}

// Mirrored is the table with bare mirrors for walls, made ready for rays.
func Mirrored(tr *sim.Tracer) (*sim.Tracer, error) {
	t := tr.Table()
	if BareMirrors(t) {
		return tr, nil
	}
	d := t.Design()
	d.Bare, d.Coats = nil, nil
	bare, err := table.New(d)
	if err != nil {
		return nil, err
	}
	return sim.Compile(bare), nil
}
