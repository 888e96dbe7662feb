package table

// Tolerance is a plan: copies of the design are made as a workshop would make
// them, and readings are taken of each. Whether there are such dials and
// readings is asked when it is carried out.
type Tolerance struct {
	Name     string
	Flaws    []Flaw // at least one
	Copies   int
	Readings []string
	Effort   float64 // multiplies the bounces of each reading, above 0
	Limits   []Limit
	// Wavelength outside any body, in the design's unit, by which it is judged
	// where rays describe the waves; 0 where none is given.
	Wavelength float64
}

// Limit is what a reading has to keep to; an end that is infinite is none.
type Limit struct {
	Reading string
	Lo, Hi  float64
}

// Flaw is one way in which a wall is made otherwise than drawn.
type Flaw struct {
	Kind FlawKind
	Dial string // of a DialFlaw: which number, as package dial writes it
	Law  Spread
	// Mean and Width are the middle of the distribution and its standard
	// deviation (Normal) or half width (Even): of SizeFlaw relative, of
	// DialFlaw in the dial's unit and added to it, of OffsetFlaw and ToolFlaw
	// lengths, of IndexFlaw pure. Of RoughFlaw Width is the rms, a length.
	Mean, Width float64
	// Length is the correlation length of RoughFlaw along the wall: where the
	// correlation of the heights has fallen to 1/e.
	Length float64
}

// FlawKind says what a flaw does to the wall.
type FlawKind uint8

// The kinds of flaw.
const (
	SizeFlaw   FlawKind = iota // everything larger by the same factor
	DialFlaw                   // one number of the design is another
	OffsetFlaw                 // the wall lies uniformly within the material: etching, a cutter's excess
	ToolFlaw                   // inner corners have the radius of the tool
	RoughFlaw                  // Gaussian roughness along the wall
	IndexFlaw                  // the refractive index of every body is another
)

// Spread is the law of a distribution.
type Spread uint8

// The distributions.
const (
	Normal  Spread = iota
	Uniform        // even within the half width
)
