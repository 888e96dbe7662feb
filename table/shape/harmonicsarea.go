package shape

import (
	"math"

	"cavitywright/table/param"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

var harmonicsByArea = Kind{
	Name: "harmonics-by-area", Title: "Harmonics of given area",
	About: "The harmonics with their area kept: whatever the amplitudes, it is that of the disc of the radius, " +
		"so that shapes can be compared at one area; regular and chaotic motion mostly together.",
	Formula: "r = R (1 + Σ a_m cos mφ + b_m sin mφ)/√(1 + Σ (a_m² + b_m²)/2), m = 1 to 8; s starts at φ = 0",
	Specs:   harmonicSpecs("radius R of the disc of the same area"),
	Fits:    harmonicFits,
	Loops:   func(v param.Values) []Loop { return harmonics.Loops(ofArea(v)) },
	Grips:   func(v param.Values) []Handle { return harmonics.Grips(ofArea(v)) },
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		if i == 0 {
			v[0] *= to.X / harmonicRadius(ofArea(v), 0)
			return v
		}
		v[2*i-1] = amplitudeAt(v, i, plane.Dot(to, plane.Polar(math.Pi/float64(i)))/v[0])
		return v
	},
}

// ofArea are the values of the harmonics that have the area π v[0]².
func ofArea(v param.Values) param.Values { return v.With(0, v[0]/math.Sqrt(meanSquare(v))) }

// meanSquare is the mean of (r/R)² (Parseval).
func meanSquare(v param.Values) float64 {
	sum := 2.0
	for _, a := range v[1:] {
		sum += a * a
	}
	return sum / 2
}

// amplitudeAt is the a_m for which r/R = out at φ = π/m: the root of
// (rest - a)² = out² (others + a²/2), rest and others being what the other
// amplitudes make of r/R and of its mean square.
func amplitudeAt(v param.Values, m int, out float64) float64 {
	a := v[2*m-1]
	out = math.Max(0, out)
	rest := harmonicRadius(v, math.Pi/float64(m))/v[0] + a
	others := meanSquare(v) - a*a/2
	under := math.Max(0, others*(1-out*out/2)+rest*rest/2)
	return (rest - out*math.Sqrt(others)) * (rest + out*math.Sqrt(others)) / (rest + out*math.Sqrt(under))
}
