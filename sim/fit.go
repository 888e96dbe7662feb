package sim

import "math"

// fit makes the powers of the polynomial through values at Chebyshev's nodes.
type fit struct {
	node   []float64
	cosine [][]float64 // by k, what each value contributes to the factor of T_k
	powers [][]float64 // by k, those of T_k
}

var placeFit, lengthFit = newFit(placeTerms), newFit(lengthTerms)

func newFit(n int) fit {
	f := fit{node: make([]float64, n), cosine: make([][]float64, n), powers: make([][]float64, n)}
	for k := range n {
		f.cosine[k], f.powers[k] = make([]float64, n), make([]float64, n)
		scale := 2 / float64(n)
		if k == 0 {
			scale /= 2
		}
		for j := range n {
			angle := math.Pi * (float64(j) + 0.5) / float64(n)
			f.node[j], f.cosine[k][j] = math.Cos(angle), scale*math.Cos(float64(k)*angle)
		}
		// T_k = 2 x T_(k-1) - T_(k-2)
		for i := range n {
			switch {
			case k == i && k < 2:
				f.powers[k][i] = 1
			case k >= 2:
				f.powers[k][i] = -f.powers[k-2][i]
				if i > 0 {
					f.powers[k][i] += 2 * f.powers[k-1][i-1]
				}
			}
		}
	}
	return f
}

// through fills c with the powers of the polynomial through the values: by way
// of Chebyshev's factors, which fall so fast that little is lost.
func (f *fit) through(values, c []float64) {
	for k, cosine := range f.cosine {
		factor := 0.0
		for j, v := range values {
			factor += float64(v * cosine[j])
		}
		for i, w := range f.powers[k][:k+1] {
			c[i] += float64(factor * w)
		}
	}
}

// power is the polynomial with the coefficients c at x.
func power(c []float64, x float64) float64 {
	v := 0.0
	for k := len(c) - 1; k >= 0; k-- {
		v = float64(v*x) + c[k]
	}
	return v
}
