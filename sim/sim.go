// Package sim traces a point particle on a table: straight flight, a law at
// the wall. It proves every hit: of all crossings of the line with the wall it
// returns the first, and it never steps. What cannot be decided in double
// precision ends the orbit with a named Stop.
//
// A Walker follows one orbit, Walkers several at once, which takes less time a
// bounce. What a hit is decided by stands in hit.go, smooth.go and oval.go, and
// holds for every table. Tables of a simple form have a shorter way to the same
// hit (convex.go, quick.go); what is not clear there is left to the long one.
//
// The package has no clock, no chance of its own and no goroutine: numbers
// drawn at random are handed in.
//
// Numerical properties that hold, quoted by number in the tests:
//
//	N1  Watertight. Whether a line passes a joint on its left or right is
//	    decided once, by one expression of the joint's coordinates, the same
//	    for both pieces that meet there. No ray slips between two pieces.
//	N2  Identity. The point just left is a root of the flight's equation, and
//	    is removed by what is known of it (on one piece the signed distance
//	    from the line has at most two roots), never by an offset.
//	N3  Bracketed. On a smooth span the tangent turns one way by less than a
//	    quarter turn: the distance from a line has at most one extremum, found
//	    by bracketing, and at most two roots, bracketed by it.
//	N4  Undecided is said. Within cornerTol of a corner, or within grazeTol of
//	    the tangent direction, an orbit ends as Corner or Grazing.
//	N5  Alike on every machine: products are rounded before they are summed.
package sim

import (
	"gonum.org/v1/gonum/spatial/r2"
)

// State is a point of the section in Birkhoff coordinates: arclength S in
// [0, L) and P = sin chi in (-1, 1), chi the angle of the outgoing ray from the
// inward normal, positive towards increasing s. Steps preserve dS dP.
type State struct{ S, P float64 }

// Reversed is the state from which the ray runs back the way it came.
func (s State) Reversed() State { return State{s.S, -s.P} }

// Bounce is one event of an orbit, after the law of the wall was applied.
type Bounce struct {
	State
	N      int     // 0 opens an orbit
	Piece  int     // index in the table's pieces; -1 where State is none: inside, or at an undecided place
	Point  r2.Vec  // where
	Dir    r2.Vec  // unit direction in which the ray goes on
	Flight float64 // path length since the bounce before; +Inf when it escaped into the open plane
	Weight float64 // what goes on, after this bounce
	Exit   float64 // weight that left through the wall here
	ExitP  float64 // sine of the angle outside, from the outward normal
	Stop   Stop
}

// Stop says why an orbit ended.
type Stop uint8

// The reasons to stop. Lost is a defect of the program: a closed table in which
// no wall was hit.
const (
	Going   Stop = iota
	Spent        // all its weight was absorbed
	Escaped      // it left, through an opening or into the open plane
	Corner       // it met a corner, where the bounce is not defined
	Grazing      // it touched the wall along its tangent
	Lost
)

// Stops is the number of reasons, for arrays of counts.
const Stops = int(Lost) + 1

func (s Stop) String() string {
	return [Stops]string{"going", "spent", "escaped", "corner", "grazing", "lost"}[s]
}

// Why is the reason in a sentence.
func (s Stop) Why() string {
	return [Stops]string{
		"The ray goes on.",
		"The ray's power was absorbed by the wall.",
		"The ray left the table.",
		"The ray met a corner, where no bounce is defined.",
		"The ray touched the wall along its tangent, and double precision cannot tell whether it met it.",
		"The ray was lost: a fault of the program.",
	}[s]
}

const (
	// cornerTol, relative to the table's size, is how near to a corner a ray
	// counts as having met it. A hit's position carries an error of some
	// 1e-15; nearer than that the side that was hit is a matter of rounding.
	// Wider, and the share of orbits that stop would be felt: they are some
	// cornerTol a bounce.
	cornerTol = 1e-12
	// passTol, relative to the table's size, is how near to a corner or to a
	// tangent of a wall a ray may pass without the program saying that it
	// cannot decide: the rounding of a signed distance from the line, 4 ulp of
	// the size, with a margin.
	passTol = 4e-15
	// grazeTol is the least cosine of the angle to the normal that is
	// followed. At 1e-7 the wall recedes from the ray by as little as its
	// rounding over the next flight.
	grazeTol = 1e-7
)
