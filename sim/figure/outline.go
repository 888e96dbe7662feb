package figure

// Outline is a wall ready to be handed to a workshop: closed contours of steps
// in Unit, y up, the inside of the table on the left; Metres is the length of
// the unit. It is no picture and is not drawn.
type Outline struct {
	Name     string
	Unit     string
	Metres   float64
	Contours []Contour
	Openings []Contour // stretches of wall that are open; not closed
	Points   []WallPoint
	Caption  []string // one line each: what it is, with units and convention
}

// Contour is a row of steps from its start; of a closed one the last step leads
// back to it.
type Contour struct {
	Obstacle bool
	X, Y     float64
	Steps    []ContourStep
}

// ContourStep is one step of a contour, to the point X, Y. Bulge is that of an
// arc: the tangent of a quarter of its sweep, positive to the left; Radius and
// Minor are the semi-axes of an arc, the first at Tilt (radians) from +x, Sweep
// its angle (of an ellipse the eccentric one, from From). C are the inner control points
// of a cubic: x, y of the first, then of the second.
type ContourStep struct {
	Kind                StepKind
	X, Y                float64
	Bulge               float64
	Radius, Minor, Tilt float64
	From, Sweep         float64
	C                   [4]float64
}

// StepKind says what a step is.
type StepKind uint8

// The kinds of step.
const (
	StraightStep StepKind = iota
	ArcStep
	OvalStep
	CubicStep
)

// WallPoint is a point of the wall at the arclength S of all loops together,
// with the unit normal into the table and the curvature, positive where the
// wall focuses.
type WallPoint struct {
	Loop            int
	S, X, Y, NX, NY float64
	Curvature       float64
}
