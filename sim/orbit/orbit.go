// Package orbit finds the periodic orbits of a table up to a number of bounces,
// with length, stability and, where they come in families, the extent of the
// family; and follows them while the wall changes. It starts no goroutine and
// follows no rays over long times.
//
// The orbits are those of the wall as if all of it were a mirror. They are the
// places where the length of a closed polygon with its corners on the wall is
// stationary; each is solved for as such, and then run bounce by bounce through
// the tracer, which must meet the same points: what the list holds is proved,
// to closureTol. What the list may lack depends on the table:
//
//   - Posts in the open plane, disjoint and strictly convex (curved outwards
//     everywhere, without corners). An orbit is the shortest closed string that
//     touches the posts in the order of its word: the length is convex over the
//     filled posts, so a word has at most one orbit, and every word is tried
//     (T. Morita, Trans. Amer. Math. Soc. 325, 819, 1991; P. Gaspard and
//     S. A. Rice, J. Chem. Phys. 90, 2225, 1989; both from memory). The list is
//     complete, whether or not posts shadow one another.
//
//   - Polygons. An orbit is a straight line through the images of the sides in
//     the order of its word; every word is tried in closed form, and of a family
//     every part that no wall cuts off. The list is complete. (Orbits between
//     straight pieces of other walls are found in the same way, List.Flats.)
//
//   - Any other table. Starting states are laid on a grid over the section; from
//     each the orbit is run half a period forwards and half backwards, and the
//     tangent map says whether the two ends meet for a state within the cell.
//     An orbit is found if near one of its n points the two half maps are nearly
//     linear over a cell. This is no proof. The search is repeated on finer
//     grids until two in turn bring nothing new; List.Settled says for which
//     periods it came to that. Orbits that differ only within a cell, as in the
//     narrow resonances of an almost integrable table, and orbits that are seen
//     through a narrow gap only, may be missed together on all of the grids.
//
// Symmetries of the wall are used and shown: of what they map into each other one
// part is searched, each orbit brings its images, and the images are one Class
// (List.Firsts is one of each).
//
// Follow follows the orbits while a number of the table moves, from some values
// at which all are searched for, and locates where they are born, part, and end.
//
// The work comes in pieces that the caller may spread over goroutines
// (Search.Spread); what is found depends on neither their number nor their order.
//
// Orbits that meet a corner or touch the wall along its tangent are none. Left
// out are those that bounce where the curvature jumps, to sameTol, for they have
// no derivative, and those with a chord shorter than leastChord. Where the
// length is stationary to marginalTol along some direction an orbit is taken for
// a member of a family, if it can be followed.
package orbit

import (
	"math"

	"cavitywright/sim"

	"gonum.org/v1/gonum/spatial/r2"
)

// Bounce is a corner of the orbit: the outgoing state, its place, and the loop
// of the wall on which it lies.
type Bounce struct {
	sim.State
	Point r2.Vec
	Loop  int
}

// Orbit is a prime periodic orbit, or a member of a family of them. It is
// listed once for both senses in which it can be run.
type Orbit struct {
	// Bounces in turn, from the one at the smallest s, in the sense in which
	// that one has the greater p.
	Bounces []Bounce
	// Length of one period, in the table's unit.
	Length float64
	// Monodromy is the derivative of one period at Bounces[0], in (s, p); its
	// determinant is 1.
	Monodromy sim.Jacobian
	// TwoSenses reports that the orbit run backwards is another one. It is not
	// where the orbit meets the wall at right angles and retraces itself.
	TwoSenses bool
	// Winding is how often the orbit runs round the wall: the sum of its steps
	// in s/L, each taken in (0, 1), in the sense for which it is the lesser.
	// 0 where the wall has more than one loop, for which it is not defined.
	Winding int
	// Confined reports that no bounce lies on an opening or within the critical
	// angle of a dielectric wall.
	Confined bool
	// Word is the sides of the wall that the bounces lie on, each by its number
	// in the order of s, from 1; run together where there are fewer than ten.
	Word string
	// Class is equal for orbits that a symmetry of the wall maps into each
	// other, in either sense: Copies of them. Mirrored and Turned report that
	// a reflection, or a rotation, maps the orbit onto itself, so run or
	// backwards.
	Class, Copies    int
	Mirrored, Turned bool
	// Family is the family of which this is a member; nil for an isolated orbit.
	Family *Family
	// Closure is the greatest miss of a single bounce: in s, relative to the
	// length of the wall, or in p, there divided by chain.short.
	Closure float64
}

// Family is a marginal family: orbits of equal length and period that turn into
// one another without a gap.
type Family struct {
	// Ranges are what each bounce sweeps over in s, in the order of the Orbit's
	// Bounces; From > To where the sweep passes the start of the loop. Ends are
	// good to leastChord of the wall's length, the turning points of a closed
	// family to 1e-4.
	Ranges []Range
	// Closed reports that the family returns into itself; else it ends, at a
	// joint or where a wall gets in the way.
	Closed bool
	// Broken reports that the family could not be followed to its ends within
	// the steps allowed; the ranges are then too short.
	Broken bool
}

// Range is a stretch of the arclength.
type Range struct{ From, To float64 }

// Period is the number of bounces.
func (o *Orbit) Period() int { return len(o.Bounces) }

// Trace is the trace of the monodromy matrix.
func (o *Orbit) Trace() float64 { return o.Monodromy.Trace() }

// Residue is (2 - trace) / 4 (J. M. Greene, J. Math. Phys. 20, 1183, 1979, from
// memory): in (0, 1) for elliptic orbits.
func (o *Orbit) Residue() float64 { return (2 - o.Trace()) / 4 }

// Multipliers are the eigenvalues of the monodromy matrix, the greater in
// modulus first; their product is 1.
func (o *Orbit) Multipliers() (a, b complex128) {
	h := 0.5 * o.Trace()
	switch o.Kind() {
	case Elliptic:
		im := math.Sqrt((1 - h) * (1 + h))
		return complex(h, im), complex(h, -im)
	case Parabolic:
		one := complex(math.Copysign(1, h), 0)
		return one, one
	}
	great := h + math.Copysign(math.Sqrt((math.Abs(h)-1)*(math.Abs(h)+1)), h)
	return complex(great, 0), complex(1/great, 0)
}

// Kind is what the orbit's neighbours do.
type Kind uint8

// The kinds of orbit, by the trace: above 2, between, below -2, or at 2 or -2.
const (
	Elliptic Kind = iota
	Hyperbolic
	InverseHyperbolic
	Parabolic
)

func (k Kind) String() string {
	return [...]string{"elliptic", "hyperbolic", "inverse hyperbolic", "parabolic"}[k]
}

// parabolicTol is how near to 2 or -2, relative to the entries of the monodromy
// matrix, a trace counts as that: the rounding of the product of a few tens of
// matrices, with a margin for the orbit's own.
const parabolicTol = 1e-9

// Kind of the orbit.
func (o *Orbit) Kind() Kind {
	m := o.Monodromy
	size := 1 + math.Abs(m.SS) + math.Abs(m.PP)
	switch t := m.Trace(); {
	case o.Family != nil || math.Abs(math.Abs(t)-2) <= parabolicTol*size:
		return Parabolic
	case t > 2:
		return Hyperbolic
	case t < -2:
		return InverseHyperbolic
	}
	return Elliptic
}

// PRange is the least and the greatest |p| of the bounces.
func (o *Orbit) PRange() (least, greatest float64) {
	least = 1
	for _, b := range o.Bounces {
		least, greatest = math.Min(least, math.Abs(b.P)), math.Max(greatest, math.Abs(b.P))
	}
	return least, greatest
}
