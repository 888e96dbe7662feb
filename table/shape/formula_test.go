package shape

import (
	"math"

	"cavitywright/table/param"

	"gonum.org/v1/gonum/mathext"
)

// closedForm is the area and length of a family by formulas of elementary
// geometry and Green's theorem, the lengths of polar walls by quadrature
// (overTurn).
var closedForm = map[string]func(v param.Values) (area, length float64){
	"disc": func(v param.Values) (float64, float64) { return math.Pi * v[0] * v[0], 2 * math.Pi * v[0] },
	// E(m), m = 1 - b²/a² (Abramowitz and Stegun, 17.3.3).
	"ellipse": func(v param.Values) (float64, float64) {
		a, b := math.Max(v[0], v[1]), math.Min(v[0], v[1])
		return math.Pi * a * b, 4 * a * mathext.CompleteE(1-b*b/(a*a))
	},
	"rectangle": func(v param.Values) (float64, float64) { return v[0] * v[1], 2 * (v[0] + v[1]) },
	"stadium": func(v param.Values) (float64, float64) {
		return 4*v[0]*v[1] + math.Pi*v[1]*v[1], 4*v[0] + 2*math.Pi*v[1]
	},
	// The length of r = R (1 + e cos φ) is 4 R (1 + e) E(4e/(1+e)²).
	"limacon": func(v param.Values) (float64, float64) {
		r, e := v[0], v[1]
		return math.Pi * r * r * (1 + e*e/2), 4 * r * (1 + e) * mathext.CompleteE(math.Min(1, 4*e/((1+e)*(1+e))))
	},
	"quadrupole": func(v param.Values) (float64, float64) {
		return math.Pi * v[0] * v[0] * (1 + v[1]*v[1]/2), v[0] * waveLength(1, 2, v[1])
	},
	// Half the mean square of r, by Parseval.
	"harmonics": func(v param.Values) (float64, float64) {
		return math.Pi * v[0] * v[0] * seriesSquare(v), v[0] * seriesLength(v)
	},
	"mushroom": func(v param.Values) (float64, float64) {
		r, w, l := v[0], v[1], v[2]
		return math.Pi*r*r/2 + 2*w*l, math.Pi*r + 2*r + 2*l
	},
	"cut-disc": func(v param.Values) (float64, float64) {
		r, d := v[0], v[1]
		h, half := math.Sqrt((r-d)*(r+d)), math.Pi-math.Acos(d/r)
		return r*r*half + d*h, 2*r*half + 2*h
	},
	// The lens of two equal circles (Weisstein, MathWorld, "Lens").
	"lemon": func(v param.Values) (float64, float64) {
		r, s := v[0], v[1]
		half := math.Acos(s / (2 * r))
		return 2*r*r*half - s/2*math.Sqrt((2*r-s)*(2*r+s)), 4 * r * half
	},
	"triangle": func(v param.Values) (float64, float64) {
		s := (v[0] + v[1] + v[2]) / 2
		return math.Sqrt(s * (s - v[0]) * (s - v[1]) * (s - v[2])), 2 * s
	},
	"polygon": func(v param.Values) (float64, float64) {
		n, r := v[0], v[1]
		return n * r * r * math.Sin(2*math.Pi/n) / 2, 2 * n * r * math.Sin(math.Pi/n)
	},
	"square-with-disc": func(v param.Values) (float64, float64) {
		return v[0]*v[0] - math.Pi*v[1]*v[1], 4*v[0] + 2*math.Pi*v[1]
	},
	"box-of-posts": func(v param.Values) (float64, float64) {
		return v[0]*v[0] - v[1]*math.Pi*v[2]*v[2], 4*v[0] + v[1]*2*math.Pi*v[2]
	},
	"three-posts": func(v param.Values) (float64, float64) { return -3 * math.Pi * v[0] * v[0], 6 * math.Pi * v[0] },
	// Half the mean of r² = R² (1 + 2 e cos 2φ) is R²/2.
	"flattened-quadrupole": func(v param.Values) (float64, float64) {
		u := func(phi float64) (float64, float64) {
			return 1 + 2*v[1]*math.Cos(2*phi), -4 * v[1] * math.Sin(2*phi)
		}
		return math.Pi * v[0] * v[0], v[0] * overTurn(func(phi float64) float64 {
			sq, d := u(phi)
			return math.Sqrt(sq + d*d/(4*sq))
		})
	},
	"oval": func(v param.Values) (float64, float64) {
		return math.Pi * v[1] * v[1] * (1 + v[2]*v[2]/2), v[1] * waveLength(1, int(v[0]), v[2])
	},
	"harmonics-by-area": func(v param.Values) (float64, float64) {
		return math.Pi * v[0] * v[0], v[0] * seriesLength(v) / math.Sqrt(seriesSquare(v))
	},
	// r dφ and dr = c dφ: the antiderivative of √(r² + c²)/c by r.
	"spiral": func(v param.Values) (float64, float64) {
		r, e := v[0], v[1]
		c := r * e / (2 * math.Pi)
		f := func(x float64) float64 { return (x*math.Hypot(x, c) + c*c*math.Asinh(x/c)) / (2 * c) }
		return math.Pi * r * r * (1 + e + e*e/3), f(r*(1+e)) - f(r) + r*e
	},
	"notched-ellipse": func(v param.Values) (float64, float64) {
		a, b, h, d := v[0], v[1], v[2]/2, v[3]
		half := math.Asin(h / b)
		x := a * math.Cos(half)
		return a*b*(math.Pi-half) + h*(a-d), ovalLength(a, b, 2*math.Pi-half) - ovalLength(a, b, half) + 2*math.Hypot(x-a+d, h)
	},
	"half-disc": func(v param.Values) (float64, float64) { return math.Pi * v[0] * v[0] / 2, (math.Pi + 2) * v[0] },
	"half-ellipse": func(v param.Values) (float64, float64) {
		return math.Pi * v[0] * v[1] / 2, 2*v[0] + ovalLength(v[0], v[1], math.Pi)
	},
	// The hull of three discs: Steiner's formula for the triangle.
	"rounded-triangle": func(v param.Values) (float64, float64) {
		a, r := v[0], v[1]
		return math.Sqrt(3)/4*a*a + 3*a*r + math.Pi*r*r, 3*a + 2*math.Pi*r
	},
	"quarter-stadium": func(v param.Values) (float64, float64) {
		a, r := v[0], v[1]
		return a*r + math.Pi*r*r/4, 2*a + 2*r + math.Pi*r/2
	},
	"elliptic-stadium": func(v param.Values) (float64, float64) {
		h, a, b := v[0], v[1], v[2]
		return 4*h*b + math.Pi*a*b, 4*h + ovalLength(a, b, 2*math.Pi)
	},
	"belt": func(v param.Values) (float64, float64) {
		p, q, d := v[0], v[1], v[2]
		t, up := math.Sqrt(d*d-(p-q)*(p-q)), math.Acos((p-q)/d)
		return (p+q)*t + up*q*q + (math.Pi-up)*p*p, 2*t + 2*up*q + 2*(math.Pi-up)*p
	},
	"truncated-ellipse": func(v param.Values) (float64, float64) {
		a, b, c := v[0], v[1], v[2]
		from := math.Acos(c / a)
		y := b * math.Sqrt(1-c*c/(a*a))
		return 2*c*y + a*b*(math.Pi-2*from), 4*y + 2*(ovalLength(a, b, math.Pi-from)-ovalLength(a, b, from))
	},
	"tilted-mushroom": func(v param.Values) (float64, float64) {
		r, w, l := v[0], v[1], v[2]
		return math.Pi*r*r/2 + 2*w*l, math.Pi*r + 2*(r-w/math.Cos(v[3])) + 2*l + 2*w
	},
	"ring": func(v param.Values) (float64, float64) {
		return math.Pi * (v[0]*v[0] - v[1]*v[1]), 2 * math.Pi * (v[0] + v[1])
	},
	"capped-rectangle": func(v param.Values) (float64, float64) {
		area, arc := segment(v[1], v[2])
		return v[0]*v[1] + 2*area, 2*v[0] + 2*arc
	},
	"bow-tie": func(v param.Values) (float64, float64) {
		area, arc := segment(v[0], (v[1]-v[2])/2)
		return v[0]*v[1] - 2*area, 2*v[1] + 2*arc
	},
	"wedge": func(v param.Values) (float64, float64) {
		return v[0] * (v[1] + v[2]) / 2, v[1] + v[2] + 2*math.Hypot(v[0], (v[1]-v[2])/2)
	},
	"l-shape": func(v param.Values) (float64, float64) {
		return v[0]*v[3] + v[2]*(v[1]-v[3]), 2 * (v[0] + v[1])
	},
	"drop": func(v param.Values) (float64, float64) {
		r, d := v[0], v[1]
		t, touch := math.Sqrt(d*d-r*r), math.Asin(r/d)
		return r*r*(math.Pi+2*touch)/2 + r*t, r*(math.Pi+2*touch) + 2*t
	},
	"posts": func(v param.Values) (float64, float64) {
		n := v[0] * v[1]
		return -n * math.Pi * v[2] * v[2], n * 2 * math.Pi * v[2]
	},
	"ring-of-posts": func(v param.Values) (float64, float64) {
		return -v[0] * math.Pi * v[1] * v[1], v[0] * 2 * math.Pi * v[1]
	},
}

// overTurn is the integral of f over a full turn by trapezia: for a smooth
// periodic f their error falls faster than any power of their number (Trefethen
// and Weideman, SIAM Review 56, 385 (2014)).
func overTurn(f func(phi float64) float64) float64 {
	const n = 20000
	sum := 0.0
	for i := range n {
		sum += f(fullTurn * float64(i) / n)
	}
	return sum * fullTurn / n
}

// waveLength is the length of r = mean + e cos mφ.
func waveLength(mean float64, m int, e float64) float64 {
	return overTurn(func(phi float64) float64 {
		sin, cos := math.Sincos(float64(m) * phi)
		return math.Hypot(mean+e*cos, float64(m)*e*sin)
	})
}

// seriesLength is the length of the harmonics for R = 1.
func seriesLength(v param.Values) float64 {
	return overTurn(func(phi float64) float64 {
		r, d := 1.0, 0.0
		for i := 1; i < len(v); i += 2 {
			m := float64(i+1) / 2
			sin, cos := math.Sincos(m * phi)
			r += v[i]*cos + v[i+1]*sin
			d += m * (v[i+1]*cos - v[i]*sin)
		}
		return math.Hypot(r, d)
	})
}

// seriesSquare is the mean of r² of the harmonics for R = 1, by Parseval.
func seriesSquare(v param.Values) float64 {
	sum := 2.0
	for _, a := range v[1:] {
		sum += a * a
	}
	return sum / 2
}

// ovalLength is the length of an ellipse from the end of a over the eccentric
// angle t in [0, 2π], b [E(π/2) - E(π/2 - t)] with the parameter 1 - a²/b²
// (Abramowitz and Stegun, 17.3); by Carlson's symmetric integrals, which take a
// parameter of either sign.
func ovalLength(a, b, t float64) float64 {
	quarter := func(u float64) float64 { // from the end of a, u in [0, π/2]
		// The integral of √(a² sin² + b² cos²): with the angle from the end of
		// b it is a E(φ, 1 - b²/a²), φ = π/2 - t.
		e := func(phi float64) float64 {
			m := 1 - b*b/(a*a)
			s, c := math.Sincos(phi)
			q := 1 - m*s*s
			return s*mathext.EllipticRF(c*c, q, 1) - m*s*s*s/3*mathext.EllipticRD(c*c, q, 1)
		}
		return a * (e(math.Pi/2) - e(math.Pi/2-u))
	}
	whole := quarter(math.Pi / 2)
	n := math.Floor(t / (math.Pi / 2))
	rest := t - n*math.Pi/2
	if math.Mod(n, 2) == 0 {
		return n*whole + quarter(rest)
	}
	return (n+1)*whole - quarter(math.Pi/2-rest)
}

// segment is the area and the arc of the segment of a circle with the given
// chord and height.
func segment(chord, high float64) (area, arc float64) {
	r := (chord*chord/4 + high*high) / (2 * high)
	sweep := 4 * math.Atan(2*high/chord)
	return r * r * (sweep - math.Sin(sweep)) / 2, r * sweep
}
