package shape

import (
	"math"

	"cavitywright/table/curve"
	"cavitywright/table/param"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

var roundedTriangle = Kind{
	Name: "rounded-triangle", Title: "Rounded triangle",
	About: "Ergodic: three arcs whose circles lie within the wall, joined by straight sides " +
		"(Bunimovich, Commun. Math. Phys. 65, 295 (1979)); three-fold symmetry; convex.",
	Formula: "the hull of three discs of the radius on the corners of an equilateral triangle of the side; s starts at the left end of the bottom side",
	Specs: []param.Spec{
		length("side", 1, "length of a straight side"),
		length("radius", 0.5, "radius of the corners"),
	},
	Loops: func(v param.Values) []Loop {
		c := threeCentres(v[0])
		var sides []curve.Curve
		for i := range c {
			from := -math.Pi/2 + fullTurn*float64(i)/3
			out := r2.Scale(v[1], plane.Polar(from))
			next := c[(i+1)%3]
			sides = append(sides,
				curve.NewLine(r2.Add(c[i], out), r2.Add(next, out)),
				curve.NewArc(next, v[1], from, fullTurn/3))
		}
		return ring(sides...)
	},
	Grips: func(v param.Values) []Handle {
		c := threeCentres(v[0])
		return []Handle{grip("side", c[1].X, c[1].Y-v[1]), grip("radius", 0, c[2].Y+v[1])}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		if i == 0 {
			v[0] = 2 * to.X
		} else {
			v[1] = to.Y - threeCentres(v[0])[2].Y
		}
		return v
	},
}
