package wish

import (
	"fmt"
	"math"
	"strconv"

	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/table"
	"cavitywright/table/plane"
	"cavitywright/table/survey"
)

// group is a least symmetry: rotations of an order, with mirror lines or
// without; order 0 asks for none.
type group struct {
	order   int
	mirrors bool
}

// demand refuses what cannot be asked for.
func (w *Wish) demand() error {
	d := w.Plan.Demand
	for _, x := range []float64{d.LeastRadius, d.AreaLo, d.AreaHi, d.BoxX, d.BoxY} {
		if !(x >= 0) || math.IsInf(x, 0) {
			return refuse("the wish %q demands the length or area %g; give numbers above 0", w.Plan.Name, x)
		}
	}
	switch {
	case d.AreaHi > 0 && d.AreaLo > d.AreaHi:
		return refuse("the wish %q demands an area from %g to %g; give the lower end first", w.Plan.Name, d.AreaLo, d.AreaHi)
	case (d.BoxX > 0) != (d.BoxY > 0):
		return refuse("the wish %q demands half a box; give both of its sides", w.Plan.Name)
	case w.Base.Open() && (d.Bend != table.AnyBend || d.AreaLo > 0 || d.AreaHi > 0 || d.Scaled == table.SameArea):
		return refuse("the table has no outer wall, so that nothing can be demanded of its bend and area")
	}
	if d.Symmetry == "" {
		return nil
	}
	n, err := strconv.Atoi(d.Symmetry[1:])
	if err != nil || n < 1 || d.Symmetry[0] != 'C' && d.Symmetry[0] != 'D' {
		return refuse("%q is no symmetry; write D1 for one mirror line, D2 for two, C3 for three rotations, and so on", d.Symmetry)
	}
	w.least = group{n, d.Symmetry[0] == 'D'}
	return nil
}

// within reports whether a wall's group has all that is asked for.
func (g group) within(s survey.Symmetry) bool {
	switch {
	case s.Order == 0:
		return true
	case s.Order%g.order != 0:
		return false
	}
	return !g.mirrors || len(s.Mirrors) > 0
}

// shortfall is by how much a wall misses what is demanded, 0 where it keeps to
// all of it, and the first thing that it misses.
func (w *Wish) shortfall(t *table.Table) (by float64, why string) {
	d := w.Plan.Demand
	d.Scaled = table.Unscaled
	if d == (table.Demand{}) {
		return 0, ""
	}
	miss := func(x float64, format string, args ...any) {
		if x > 0 {
			if by += x; why == "" {
				why = fmt.Sprintf(format, args...)
			}
		}
	}
	u := t.Design().Unit
	r := survey.Of(t, 0)
	if d.Bend != table.AnyBend && !r.Convexity.Convex {
		miss(0.01+dented(r)/r.Perimeter, "the wall is not convex")
	}
	if d.Bend == table.StrictlyConvex && r.Convexity.Convex && !r.Convexity.Strict {
		miss(0.01, "the wall is convex, but not strictly")
	}
	if d.LeastRadius > 0 {
		miss(float64(len(r.Corners)), "the wall has corners, where a least radius is demanded")
		for _, e := range []survey.Extreme{r.Bend.Focusing, r.Bend.Dispersing} {
			if e.Known() {
				miss(1-e.Radius/d.LeastRadius, "the wall has a radius of %.4g %s, below %.4g", e.Radius, u, d.LeastRadius)
			}
		}
	}
	if d.AreaLo > 0 {
		miss(1-r.Area/d.AreaLo, "the area is %.5g %s², below %.5g", r.Area, u, d.AreaLo)
	}
	if d.AreaHi > 0 {
		miss(r.Area/d.AreaHi-1, "the area is %.5g %s², above %.5g", r.Area, u, d.AreaHi)
	}
	if d.BoxX > 0 {
		x, y := extent(t)
		miss(math.Max(x/d.BoxX-1, 0)+math.Max(y/d.BoxY-1, 0), "the wall is %.5g by %.5g %s, which does not fit in %.5g by %.5g", x, y, u, d.BoxX, d.BoxY)
	}
	if w.least.order > 0 && !w.least.within(r.Symmetry) {
		miss(1, "the wall has the symmetry %s, not %s", r.Symmetry.Name(), d.Symmetry)
	}
	return by, why
}

// dented is the length of the outer wall that turns away.
func dented(r *survey.Report) float64 {
	sum := 0.0
	for _, d := range r.Convexity.Dents {
		x := d.S1 - d.S0
		if x < 0 {
			x += r.Perimeter
		}
		sum += x
	}
	return sum
}

// extentError is how exactly the sides of a wall are known, over its size.
const extentError = 1e-7

// extent is the width and the height of a wall, greater than they are rather
// than smaller.
func extent(t *table.Table) (x, y float64) {
	size := plane.Diagonal(t.Bounds())
	lo, hi := [2]float64{math.Inf(1), math.Inf(1)}, [2]float64{math.Inf(-1), math.Inf(-1)}
	for _, l := range measure.Outline(t, extentError*size) {
		if l.Role != figure.Wall && l.Role != figure.Floor {
			continue
		}
		for i := range l.X {
			lo[0], hi[0] = math.Min(lo[0], l.X[i]), math.Max(hi[0], l.X[i])
			lo[1], hi[1] = math.Min(lo[1], l.Y[i]), math.Max(hi[1], l.Y[i])
		}
	}
	more := 2 * extentError * size
	return hi[0] - lo[0] + more, hi[1] - lo[1] + more
}
