package shape

import (
	"math"

	"cavitywright/table/curve"
	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

const fullTurn = 2 * math.Pi

// Catalogue lists the families of figures in the order in which a gallery
// shows them.
func Catalogue() []*Kind {
	return catalogue
}

var catalogue = []*Kind{
	&disc,
	&ellipse,
	&stadium,
	&limacon,
	&quadrupole,
	&flatQuadrupole,
	&oval,
	&harmonics,
	&harmonicsByArea,
	&spiral,
	&notchedEllipse,
	&mushroom,
	&tiltedMushroom,
	&cutDisc,
	&halfDisc,
	&halfEllipse,
	&lemon,
	&drop,
	&quarterStadium,
	&ellipticStadium,
	&belt,
	&truncatedEllipse,
	&roundedTriangle,
	&cappedRectangle,
	&bowTie,
	&discRing,
	&rectangle,
	&triangle,
	&wedge,
	&ell,
	&polygon,
	&squareWithDisc,
	&boxOfPosts,
	&threePosts,
	&ringOfPosts,
	&posts,
}

// length is a parameter in the table's unit, with the range that all lengths
// share.
func length(name string, def float64, description string) param.Spec {
	return param.Spec{Name: name, Unit: param.Length, Lo: 1e-6, Hi: 1e6, Default: def, Description: description}
}

func pure(name string, lo, hi, def float64, description string) param.Spec {
	return param.Spec{Name: name, Unit: param.Pure, Lo: lo, Hi: hi, Default: def, Description: description}
}

func count(name string, lo, hi, def float64, description string) param.Spec {
	return param.Spec{Name: name, Unit: param.Count, Lo: lo, Hi: hi, Default: def, Description: description}
}

// grip is the handle of the parameter called name.
func grip(name string, x, y float64) Handle {
	return Handle{At: r2.Vec{X: x, Y: y}, Name: name, Of: -1}
}

// ring is the single counter-clockwise loop of the curves.
func ring(c ...curve.Curve) []Loop { return []Loop{{Side: Outer, Curves: c}} }

// post is the clockwise loop of a disc-shaped obstacle. It starts at its
// rightmost point.
func post(centre r2.Vec, radius float64) Loop {
	return Loop{Side: Obstacle, Curves: []curve.Curve{curve.NewArc(centre, radius, 0, -fullTurn)}}
}

// outline are the lines of the closed polygon through the corners.
func outline(corners ...r2.Vec) []curve.Curve {
	sides := make([]curve.Curve, len(corners))
	for i, a := range corners {
		sides[i] = curve.NewLine(a, corners[(i+1)%len(corners)])
	}
	return sides
}

// box is the outline of the rectangle of the given half sides about the
// origin, from the start of its bottom side.
func box(x, y float64) []curve.Curve {
	return outline(r2.Vec{X: -x, Y: -y}, r2.Vec{X: x, Y: -y}, r2.Vec{X: x, Y: y}, r2.Vec{X: -x, Y: y})
}
