package shape

import (
	"cavitywright/table/curve"
	"cavitywright/table/param"

	"gonum.org/v1/gonum/spatial/r2"
)

var limacon = Kind{
	Name: "limacon", Title: "Limaçon",
	About: "Convex to eps = 1/2; the chaotic sea grows with eps, up to the ergodic cardioid with its cusp at eps = 1 " +
		"(Robnik, J. Phys. A 16, 3971 (1983)).",
	Formula: "r = R (1 + eps cos φ); s starts at φ = 0",
	Specs: []param.Spec{
		length("radius", 1, "mean radius R"),
		pure("eps", 0, 1, 0.43, "deformation eps; 0 is the disc, 1 the cardioid"),
	},
	Loops: func(v param.Values) []Loop {
		return ring(wave(v[0], []float64{v[1]}, []float64{0}))
	},
	Grips: func(v param.Values) []Handle {
		return []Handle{grip("radius", 0, v[0]), grip("eps", -v[0]*(1-v[1]), 0)}
	},
	Pull: func(v param.Values, i int, to r2.Vec) param.Values {
		if i == 0 {
			v[0] = to.Y
		} else {
			v[1] = 1 + to.X/v[0]
		}
		return v
	},
}

// wave is the closed curve r = radius (1 + sum of cos[m-1] cos mφ +
// sin[m-1] sin mφ), once around from φ = 0.
func wave(radius float64, cos, sin []float64) curve.Curve {
	return curve.NewPolar(curve.Polar{Form: waveForm(radius, cos, sin), Sweep: fullTurn})
}

// waveForm leaves out the highest harmonics where they are zero: a curve's
// work grows with their number.
func waveForm(radius float64, cos, sin []float64) *curve.Form {
	n := len(cos)
	for n > 1 && cos[n-1] == 0 && sin[n-1] == 0 {
		n--
	}
	f := &curve.Form{Mean: radius, Cos: make([]float64, n), Sin: make([]float64, n)}
	for i := range n {
		f.Cos[i], f.Sin[i] = radius*cos[i], radius*sin[i]
	}
	return f
}
