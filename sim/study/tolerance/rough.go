package tolerance

import (
	"math"
	"math/rand/v2"
)

// rough draws heights along a wall: Gaussian roughness with the correlation
// function rms² exp(-x²/length²) (J. A. Ogilvy, Theory of Wave Scattering from
// Random Rough Surfaces, 1991, ch. 2, from memory), made periodic over each loop.
type rough struct {
	rms, length float64
	r           *rand.Rand
	square, on  float64 // the integral of the squared heights drawn so far, and its length
}

// heights are drawn heights over a loop: a Fourier series, exact at every place.
type heights struct {
	period   float64
	cos, sin []float64 // of wave m
}

const (
	// lastWave is the product of wave number and correlation length at which the
	// series ends: the power beyond is exp(-lastWave²/4) of that at its
	// beginning, 5e-6.
	lastWave = 7
	// mostWaves is the number of correlation lengths on a wall at most: the
	// spline takes four nodes for each.
	mostWaves = 1000
)

// over draws the heights of a loop of a length. The power of wave m goes as
// exp(-(k length / 2)²), the transform of the correlation function; the weights
// add up to rms².
func (g *rough) over(period float64) heights {
	n := int(math.Ceil(lastWave * period / (2 * math.Pi * g.length)))
	h := heights{period: period, cos: make([]float64, n+1), sin: make([]float64, n+1)}
	weight, sum := make([]float64, n+1), 0.0
	for m := range weight {
		k := 2 * math.Pi * float64(m) / period
		weight[m] = math.Exp(-0.25 * k * k * g.length * g.length)
		if m == 0 {
			weight[m] *= 0.5 // the constant has no sine beside it
		}
		sum += weight[m]
	}
	for m := range weight {
		sigma := g.rms * math.Sqrt(weight[m]/sum)
		h.cos[m], h.sin[m] = sigma*g.r.NormFloat64(), sigma*g.r.NormFloat64()
		power := 0.5 * (h.cos[m]*h.cos[m] + h.sin[m]*h.sin[m])
		if m == 0 {
			h.sin[m] = 0
			power = h.cos[m] * h.cos[m]
		}
		g.square += period * power
	}
	g.on += period
	return h
}

// found is the rms of the heights drawn.
func (g *rough) found() float64 { return math.Sqrt(g.square / g.on) }

// at is the height at s from the start of the loop.
func (h heights) at(s float64) float64 {
	if len(h.cos) == 0 {
		return 0
	}
	// By Clenshaw's recurrence, with one sine and cosine.
	sin, cos := math.Sincos(2 * math.Pi * s / h.period)
	var a1, a2, b1, b2 float64
	for m := len(h.cos) - 1; m > 0; m-- {
		a1, a2 = h.cos[m]+2*cos*a1-a2, a1
		b1, b2 = h.sin[m]+2*cos*b1-b2, b1
	}
	return h.cos[0] + cos*a1 - a2 + sin*b1
}

// bend is the rms of the second derivative of the heights by s: for the
// correlation function above it is sqrt(12) rms/length².
func (g *rough) bend() float64 { return math.Sqrt(12) * g.rms / (g.length * g.length) }
