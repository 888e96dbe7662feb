package table

// Wish is a plan: a wall is sought by turning dials, for readings that are to
// be great, small, or at a value. Whether there are such dials and readings is
// asked when it is carried out.
type Wish struct {
	Name    string
	Goals   []Goal // at least one; their weighted sum counts
	Against []Goal // a second wish, for a front between the two; none for one wish
	Free    []Freedom
	Demand  Demand
	Effort  float64 // multiplies the bounces of each reading, above 0
	Tries   int     // walls that are measured at most
	Method  Method
	// Under is the name of the tolerance whose copies of each wall are measured
	// in place of the wall, Copies their number; empty for the wall as drawn.
	Under  string
	Over   Robust
	Copies int
}

// Goal is a reading, or a number of a periodic orbit, with what is wanted of it.
type Goal struct {
	Reading string
	Aim     Aim
	Value   float64 // of Hold, in the reading's unit
	Weight  float64 // above 0
}

// Aim says what is wanted of a number.
type Aim uint8

// The aims.
const (
	Maximise Aim = iota
	Minimise
	Hold // as near to a value as can be
)

// Freedom is a dial that may be turned, within a range.
type Freedom struct {
	Dial   string
	Lo, Hi float64
}

// Demand is what every wall has to keep to. What is zero is not asked for.
type Demand struct {
	Bend        Bending
	LeastRadius float64 // no bend is sharper, either way; corners count as sharper
	AreaLo      float64
	AreaHi      float64
	BoxX, BoxY  float64 // the wall fits in a box of these sides, unturned
	Symmetry    string  // the least group, as the wall report names it: "D1", "C3"
	Scaled      Scaling
}

// Bending says how the outer wall has to bend.
type Bending uint8

// The ways to bend.
const (
	AnyBend Bending = iota
	Convex
	StrictlyConvex
)

// Scaling says what of the design as drawn is held by scaling every wall tried.
type Scaling uint8

// The quantities held.
const (
	Unscaled Scaling = iota
	SamePerimeter
	SameArea
)

// Method is how a wish is sought.
type Method uint8

// The methods: the simplex of Nelder and Mead, begun anew where it ends; or
// evolution of a population by CMA-ES, and the simplex after it.
const (
	Simplex Method = iota
	Evolution
)

// Robust says what counts of the copies of a wall.
type Robust uint8

// What counts.
const (
	MeanOfCopies Robust = iota
	WorstOfCopies
)
