package tolerance

import (
	"math"

	"cavitywright/table"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
)

// shift moves every loop of the copy's wall along its normal, into the material
// where the height is positive, by the offset and the roughness. A wall of sides
// takes the offset first, side by side, its corners rounded as the front of an
// etch is.
func (c *Copy) shift(offset float64, g *rough) (err error) {
	if c.Table, err = parted(c.Table); err != nil {
		return err
	}
	if offset != 0 && len(c.Table.Joints()) > 0 {
		if c.Table, c.Misfit, err = etched(c.Table, offset); err != nil {
			return err
		}
		offset = 0
	}
	if g == nil && offset == 0 {
		return nil
	}
	walls := make([]shape.Freeform, len(c.Table.Loops()))
	for li := range walls {
		l := &c.Table.Loops()[li]
		m := moving{t: c.Table, loop: l, offset: offset}
		fine, reach := math.Abs(offset), 0.0
		if g != nil {
			m.h = g.over(l.S1 - l.S0)
			fine, reach = g.rms, g.length
		}
		wall, miss, err := m.fitted(fitTo*fine, reach)
		if err != nil {
			return err
		}
		walls[li], c.Misfit = wall, math.Max(c.Misfit, miss)
	}
	c.Table, err = remade(c.Table, walls)
	return err
}

func cornered(t *table.Table) bool {
	for _, j := range t.Joints() {
		if j.Continuity == table.Corner {
			return true
		}
	}
	return false
}

const (
	// fitTo is the error of a fitted wall at most, relative to the rms of the
	// roughness or to the offset.
	fitTo = 0.01
	// eachLength is the number of nodes a correlation length, and leastNodes
	// that of a smooth loop; both are doubled until the fit is good enough, up
	// to mostNodes.
	eachLength = 4
	leastNodes = 48
	mostNodes  = 8 * mostWaves
	// flatJump is the jump of curvature, over the size of the table, below which
	// a joint needs no node of its own.
	flatJump = 1e-3
	// sharpest is the cosine below which the sides of a corner run against each
	// other so nearly that no copy of it is made: an angle of 26 degrees.
	sharpest = -0.9
	// leftOf is what must be left of a radius of curvature, as a part of it.
	leftOf = 0.05
)

// moving is a loop whose wall is moved.
type moving struct {
	t      *table.Table
	loop   *table.Loop
	offset float64
	h      heights
}

// height is that at s from the start of the loop.
func (m *moving) height(x float64) float64 { return m.offset + m.h.at(x) }

// tract is a stretch of the loop without a corner or a jump of the curvature, from
// x0 to x1 along it; of a closed one x1-x0 is the whole. slide is by how much
// the ends move along the wall, so that they meet those of their neighbours;
// corner reports that they do.
type tract struct {
	x0, x1       float64
	pieces       [2]int // the first and the last
	slide        [2]float64
	ends         [2]r2.Vec
	corner       [2]bool
	closed       bool
	reachOfSlide float64
}

// fitted is the moved loop as a free wall, within an error, whose waves are no
// shorter than reach (0 for none but the wall's own).
func (m *moving) fitted(within, reach float64) (shape.Freeform, float64, error) {
	runs, err := m.runs()
	if err != nil {
		return shape.Freeform{}, 0, err
	}
	whole := m.loop.S1 - m.loop.S0
	step := whole / leastNodes
	if reach > 0 {
		step = math.Min(step, reach/eachLength)
	}
	for {
		list, miss, err := m.nodes(runs, step)
		if err != nil {
			return shape.Freeform{}, 0, err
		}
		if miss <= within {
			return shape.NewFreeform(list), miss, nil
		}
		if step /= 2; whole/step > mostNodes {
			u := m.t.Design().Unit
			return shape.Freeform{}, 0, refuse("The moved wall cannot be followed within %.3g %s by %d nodes; make the error larger, or its correlation length.", within, u, mostNodes)
		}
	}
}

// runs cuts the loop where it has corners or its curvature jumps.
func (m *moving) runs() ([]tract, error) {
	size := plane.Diagonal(m.t.Bounds())
	var cuts []table.Joint
	for _, j := range m.t.Joints() {
		if j.Piece >= m.loop.First && j.Piece < m.loop.Last && (j.Continuity == table.Corner || math.Abs(j.Jump)*size > flatJump) {
			cuts = append(cuts, j)
		}
	}
	whole := m.loop.S1 - m.loop.S0
	if len(cuts) == 0 {
		return []tract{{x1: whole, closed: true}}, nil
	}
	runs := make([]tract, len(cuts))
	for i, j := range cuts {
		next := cuts[(i+1)%len(cuts)]
		r := &runs[i]
		r.x0, r.x1 = j.S-m.loop.S0, next.S-m.loop.S0
		if i == len(cuts)-1 {
			r.x1 += whole
		}
		r.pieces = [2]int{j.Piece, m.t.Pieces()[next.Piece].Prev}
		r.corner = [2]bool{j.Continuity == table.Corner, next.Continuity == table.Corner}
		r.reachOfSlide = 0.5 * (r.x1 - r.x0)
	}
	for i := range runs {
		if err := m.meet(&runs[(i+len(runs)-1)%len(runs)], &runs[i], cuts[i]); err != nil {
			return nil, err
		}
	}
	return runs, nil
}

// meet finds where two runs meet: at a corner where the moved sides cross, to
// first order in the height.
func (m *moving) meet(before, after *tract, j table.Joint) error {
	p, q := &m.t.Pieces()[before.pieces[1]], &m.t.Pieces()[after.pieces[0]]
	in, out := p.FrameAt(p.T1), q.FrameAt(q.T0)
	cos := plane.Dot(in.Tangent, out.Tangent)
	u := m.t.Design().Unit
	if cos < sharpest {
		return refuse("The corner at (%.4g, %.4g) %s is too sharp for its sides to be moved; round it first.", j.At.X, j.At.Y, u)
	}
	h := m.height(j.S - m.loop.S0)
	by := r2.Scale(-h/(1+cos), r2.Add(in.Normal(), out.Normal()))
	at := r2.Add(j.At, by)
	before.ends[1], after.ends[0] = at, at
	before.slide[1], after.slide[0] = plane.Dot(by, in.Tangent), plane.Dot(by, out.Tangent)
	for _, r := range []*tract{before, after} {
		if 8*math.Max(math.Abs(r.slide[0]), math.Abs(r.slide[1])) > r.reachOfSlide {
			return refuse("The side at the corner (%.4g, %.4g) %s is too short for the wall to be moved by %.3g %s; make the error smaller.", j.At.X, j.At.Y, u, h, u)
		}
	}
	return nil
}

// at is the moved wall at x along the loop, on a tract.
func (m *moving) at(r *tract, x float64) r2.Vec {
	whole := m.loop.S1 - m.loop.S0
	local := math.Mod(x, whole)
	i, y := m.t.Locate(math.Min(m.loop.S0+local, m.loop.S1))
	switch { // the ends of a tract belong to its own side of the joint
	case !r.closed && x <= r.x0:
		i, y = r.pieces[0], 0
	case !r.closed && x >= r.x1:
		i = r.pieces[1]
		y = m.t.Pieces()[i].Length
	}
	p := &m.t.Pieces()[i]
	f := p.FrameAt(p.T(y))
	to := r2.Sub(f.Point, r2.Scale(m.height(local), f.Normal()))
	for k, slide := range r.slide {
		share := 1 - math.Abs(x-[2]float64{r.x0, r.x1}[k])/r.reachOfSlide
		if slide != 0 && share > 0 {
			to = r2.Add(to, r2.Scale(slide*share*share, f.Tangent))
		}
	}
	return to
}

// tooBent says where the heights use up the wall's radius.
func (m *moving) tooBent(step float64) error {
	u := m.t.Design().Unit
	for x := 0.0; x < m.loop.S1-m.loop.S0; x += step {
		f := m.t.At(m.loop.S0 + x)
		if h := m.height(x); 1+h*f.Curvature < leftOf {
			return refuse("The wall has a radius of %.4g %s at (%.4g, %.4g) %s, which a shift of %.3g %s uses up; make the error smaller.",
				1/math.Abs(f.Curvature), u, f.Point.X, f.Point.Y, u, h, u)
		}
	}
	return nil
}
