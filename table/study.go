package table

import "gonum.org/v1/gonum/spatial/r2"

// Study is what is launched on the table and how it is shown. It travels with
// the design, so that a colleague sees exactly the same.
type Study struct {
	Seed     uint64
	Bounces  int // bounces an orbit of the portrait
	Launches []Launch
	Display  Display
	Sweeps   []DialSweep // each with a Name of its own
	// Tolerances and Wishes likewise.
	Tolerances []Tolerance
	Wishes     []Wish
}

// Launch is one orbit or a row of orbits that start together.
type Launch struct {
	From    Origin
	S       float64 // on the wall: fraction s/L in [0, 1)
	P       float64 // on the wall: p in (-1, 1)
	Point   r2.Vec  // inside: where
	Angle   float64 // inside: direction, radians from +x
	Pattern Pattern
	Count   int     // orbits of a fan, a beam, a sweep or an even seeding
	Spread  float64 // Fan: full angle (radians); Beam: full width (length)
	Region  Region  // Sweep: its diagonal; Even: the region seeded
}

// Origin says where a launch starts.
type Origin uint8

// The origins of a launch.
const (
	OnWall Origin = iota
	Inside
)

// Pattern says which orbits a launch makes.
type Pattern uint8

// The patterns of a launch.
const (
	Single Pattern = iota
	Fan            // equal steps of angle about the direction
	Beam           // parallel, equal steps across the direction
	Sweep          // a row of (s, p) from one end of Region's diagonal to the other
	Even           // evenly over Region in ds dp
)

// Region is a box of the section: s as fractions of L, p as sin chi.
type Region struct{ S0, S1, P0, P1 float64 }

// WholeSection is all of the section.
func WholeSection() Region { return Region{0, 1, -1, 1} }

// Display is how the section's axes are written. The kernel knows one
// convention; this changes the labels and the sense of what is shown.
type Display struct {
	Sense    Sense
	Position Position
	Momentum Momentum
}

// Sense is the sense in which s increases on the display.
type Sense uint8

// The senses: Clockwise shows L - s and -p.
const (
	CounterClockwise Sense = iota
	Clockwise
)

// Position is how the place on the wall is written.
type Position uint8

// The ways to write a place.
const (
	Arclength Position = iota // s in the table's unit
	Fraction                  // s/L
)

// Momentum is how the direction is written.
type Momentum uint8

// The ways to write a direction.
const (
	Sine  Momentum = iota // p = sin chi
	Angle                 // chi in degrees
)

// DefaultStudy is the study of a new table.
func DefaultStudy() Study {
	return Study{Seed: 1, Bounces: 2000}
}
