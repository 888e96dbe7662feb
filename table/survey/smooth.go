package survey

import (
	"math"

	"cavitywright/table"
	"cavitywright/table/curve"
	"cavitywright/table/shape"
)

// Class is how smooth a wall is at its least smooth place.
type Class uint8

// The classes. C0: it has corners. C1: the tangent is continuous, the curvature
// jumps. C2: the curvature is continuous too; more is not known. Analytic: each
// loop is one analytic curve.
const (
	C0 Class = iota
	C1
	C2
	Analytic
)

func (c Class) String() string { return [...]string{"C0", "C1", "C2", "analytic"}[c] }

func classOf(t *table.Table) Class {
	class := Analytic
	for i := range t.Pieces() {
		p := &t.Pieces()[i]
		if p.Whole() {
			continue
		}
		switch q := &t.Pieces()[p.Prev]; {
		case p.Corner:
			return C0
		case !continues(t, i):
			class = C1
		case (p.Side != q.Side || p.Kind == curve.Bezier) && class > C2:
			class = C2
		}
	}
	return class
}

// Convexity says whether the outer wall is convex.
type Convexity struct {
	Open   bool      // there is no outer wall
	Convex bool      // the outer wall turns left everywhere, or goes straight
	Strict bool      // and its curvature vanishes nowhere
	Dents  []Stretch // where it turns right; a corner is a stretch of no length
	Posts  int       // obstacles, which make the table not convex
}

func convexityOf(t *table.Table) Convexity {
	c := Convexity{Open: t.Open(), Posts: len(t.Loops())}
	if c.Open {
		return c
	}
	c.Posts--
	c.Strict = true
	for i := t.Loops()[0].First; i < t.Loops()[0].Last; i++ {
		p := &t.Pieces()[i]
		if p.Corner && cornerTurn(t, i) < 0 {
			c.Dents = append(c.Dents, Stretch{p.S0, p.S0})
		}
		if p.Kind == curve.Segment || vanishes(t, p, 0) || vanishes(t, p, p.Length) {
			c.Strict = false
		}
		if p.Kind != curve.Segment && p.Turn < 0 {
			c.Dents = append(c.Dents, Stretch{p.S0, p.S0 + p.Length})
		}
	}
	c.Dents = joined(c.Dents)
	c.Convex = len(c.Dents) == 0
	c.Strict = c.Strict && c.Convex
	return c
}

// joined are the stretches with those that touch made one.
func joined(list []Stretch) []Stretch {
	var out []Stretch
	for _, s := range list {
		if k := len(out) - 1; k >= 0 && s.S0 <= out[k].S1 {
			out[k].S1 = math.Max(out[k].S1, s.S1)
			continue
		}
		out = append(out, s)
	}
	return out
}

func cornerTurn(t *table.Table, i int) float64 {
	for _, j := range t.Joints() {
		if j.Piece == i {
			return j.Turn
		}
	}
	return 0
}

// noCurvature is the curvature, relative to the inverse of the table's size,
// that counts as none: a smooth wall is cut where its curvature vanishes to
// within rounding of that place, some 1e-8 where it only touches zero.
const noCurvature = 1e-7

// vanishes reports whether the curvature is zero at the length x from the start
// of the piece, one of its ends.
func vanishes(t *table.Table, p *table.Piece, x float64) bool {
	return math.Abs(curvature(p, x)) <= noCurvature/sizeOf(t)
}

// outer reports whether piece i belongs to the outer wall.
func outer(t *table.Table, p *table.Piece) bool { return t.Loops()[p.Loop].Side == shape.Outer }
