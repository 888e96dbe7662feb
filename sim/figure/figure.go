// Package figure holds what a measurement may yield: plain values that render
// can draw and export can write. It knows no colour, no pixel and no file; it
// says what is shown, with axes, units and the places that carry a name.
//
// Every Figure is complete in itself: whoever has it needs no table to draw it.
package figure

// Figure is one of Dots, Paths, Series, Grid, Polar, Scalars or Sheet. The set is closed: render
// switches over it once.
type Figure interface{ isFigure() }

// Axis is one axis of a plot. Lo and Hi are the ends shown, in Unit; Lo > Hi
// draws the axis reversed. Marks are named places on it, the joints of a wall
// for example. An axis with Log set has decades as ticks; Lo and Hi are then
// the values, not their logarithms.
type Axis struct {
	Label  string // the symbol or name, "s" or "p = sin χ"
	Unit   string // "" where the quantity is a pure number
	Lo, Hi float64
	Marks  []Mark
	Scale  Scale
	Coats  []Coated // of the wall, where this is its arclength; they do not overlap
	Keys   []Key    // the legend of the coats, set under the plot
}

// Scale says how values are laid along an axis.
type Scale uint8

// The scales of an axis.
const (
	Linear Scale = iota
	Log
)

// Mark is a named place on an axis. Kind says what stands there. A mark on the
// Y axis is a line right across the plot, or, where From < To, across that
// stretch of the X axis alone.
type Mark struct {
	At       float64
	Kind     MarkKind
	Name     string // "" for a tick without a word
	From, To float64
}

// MarkKind tells the marks of an axis apart.
type MarkKind uint8

// The kinds of mark.
const (
	Joint     MarkKind = iota // two sides of the wall meet here
	LoopStart                 // a loop of the wall begins here
	Critical                  // p = ± outer over inner index
	Event                     // something happens here: a birth, a limit, the end of a window
)

// Dots is a scatter of points in sets, each set one orbit: the Birkhoff
// portrait. Where Strip is set the X axis is arclength and wears the colour
// scale of the wall below it: a colour for the fraction (x - StripLo) /
// (StripHi - StripLo).
type Dots struct {
	X, Y             Axis
	Sets             []DotSet
	Strip            bool
	StripLo, StripHi float64
	Spots            []Spot   // marks that lie on top
	Caption          []string // one line each: what was computed, with units
}

// DotSet is one orbit's points, X and Y of equal length, in axis units. Hue is
// the index of the orbit's colour in the orbit palette; a negative Hue is the
// sea (ink).
type DotSet struct {
	Name string
	Hue  int
	X, Y []float64
}

// Paths is a drawing in the plane at equal scale on both axes: a table with
// its rays.
type Paths struct {
	Unit    string // unit of length of all points
	Lines   []Line
	Labels  []Label
	Keys    []Key // the legend of the wall's textures
	Caption []string
}

// Label is a word or number that stands in a drawing, centred at X, Y on the
// paper's colour.
type Label struct {
	X, Y float64
	Text string
}

// Line is one polyline of a drawing. At gives, for a wall, the fraction s/L in
// [0, 1] at each point, so that the wall can wear its colour; of all other
// roles only Coat has it. Texture is that of a Coat, Gap where all of a loop is
// open; a JointMark of texture Gap is the post of an opening.
type Line struct {
	Role    Role
	Hue     int
	Closed  bool
	Texture Texture
	X, Y    []float64
	At      []float64
}

// Role says what a line of a drawing is.
type Role uint8

// The roles of a line.
const (
	Wall      Role = iota // the table's wall, painted by s
	Ray                   // an orbit
	Ball                  // a single point: where an orbit stands
	Construct             // construction, drawn faint and dashed
	JointMark             // a short stroke across the wall at a joint
	Dimension             // a line with arrow heads at both ends
	Extension             // a hairline from the wall to a dimension
	Floor                 // closed outline filled as the inside of the table (even-odd over all Floor lines)
	Coat                  // a stretch of wall with a texture, its inside on the left
)

// Series is one or more curves over a common X axis with optional error band
// (Err nil where there is none; one standard error).
type Series struct {
	X, Y    Axis
	Curves  []Curve
	Caption []string
}

// Curve is one curve of a Series: X, Y and, where estimated, Err of equal
// length.
type Curve struct {
	Name      string
	Hue       int
	Form      Form
	X, Y, Err []float64
}

// Form says how the points of a curve of a Series are drawn.
type Form uint8

// The forms of a curve.
const (
	Joined Form = iota // joined by straight lines, and marked where they are few
	Steps              // a histogram: each value level over its class, X the classes' middles
	Guide              // a reference that was not measured: a thin line, never marked
	Points             // marks alone, with bars for their errors
)

// Scalars is a list of readings, and of those that were asked for in vain.
type Scalars struct {
	Rows []Scalar
	None []Missing
}

// Missing is a reading that a table does not have, and why in a sentence
// without its end.
type Missing struct {
	Name string `json:"name"`
	Why  string `json:"why"`
}

// Scalar is one reading: a value with its unit, its standard error (0 where it
// is exact), the number of bounces it was measured on (0 where none), the seed
// and what has to be said about it.
type Scalar struct {
	Name    string  `json:"name"`
	Value   float64 `json:"value"`
	StdErr  float64 `json:"stderr"`
	Unit    string  `json:"unit"`
	Bounces int64   `json:"bounces"`
	Seed    uint64  `json:"seed"`
	Note    string  `json:"note"`
}

func (Dots) isFigure()    {}
func (Paths) isFigure()   {}
func (Series) isFigure()  {}
func (Scalars) isFigure() {}

// Grid is a map of values over two axes: Columns by Rows cells that share the
// plane from X.Lo to X.Hi and Y.Lo to Y.Hi evenly, row by row from Y.Lo, Values
// in the unit and between the ends of Value. NaN is a cell without a value,
// left blank. Strip is as in Dots.
type Grid struct {
	X, Y, Value      Axis
	Columns, Rows    int
	Values           []float64
	Strip            bool
	StripLo, StripHi float64
	Caption          []string
}

// Polar is one or more curves of a quantity against direction: the far field.
// The angles of a curve are in radians counter-clockwise from +x; R is the
// quantity, on the axis Radius.
type Polar struct {
	Radius  Axis
	Curves  []Curve // X the angle, Y the quantity, Err its standard error or nil
	Caption []string
}

// Spot is a named mark in a plot: a periodic orbit's place on a portrait.
type Spot struct {
	X, Y float64
	Kind SpotKind
	Hue  int
}

// SpotKind says what a spot marks, and so how it is drawn.
type SpotKind uint8

// The kinds of spot.
const (
	Ring      SpotKind = iota // an elliptic orbit
	Cross                     // a hyperbolic one
	CrossRing                 // an inverse hyperbolic one
	Bar                       // a family, drawn along x
)

// Sheet is one page of several figures with a heading: a design sheet.
type Sheet struct {
	Title string
	Head  []string // lines under the title
	Rows  []SheetRow
	Foot  []string // lines at the foot of the page
}

// SheetRow is figures side by side. Height is its part of the page, relative to
// the other rows.
type SheetRow struct {
	Height float64
	Blocks []Block
}

// Block is one figure of a sheet under a heading. Width is its part of the row,
// relative to the other blocks.
type Block struct {
	Heading string
	Width   float64
	Show    Figure
}

func (Sheet) isFigure() {}
func (Grid) isFigure()  {}
func (Polar) isFigure() {}
