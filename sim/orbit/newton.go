package orbit

import (
	"math"

	"gonum.org/v1/gonum/mat"
)

// marginalTol is the size, relative to the greatest, below which an eigenvalue
// of the second derivative counts as none: the orbit is then one of a family.
// One carries an error of some 1e-15, and of the size of the displacement while
// the chain is not yet polished; below that, Newton's step along it is noise.
const marginalTol = 1e-7

// eigen is the decomposition of the second derivative: values ascending, with
// their vectors as columns.
type eigen struct {
	values  []float64
	vectors mat.Dense
	least   float64 // the size that counts as none
}

func (c *chain) eigen() (eigen, bool) {
	h := mat.NewSymDense(len(c.s), nil)
	c.hessian(func(i, j int, v float64) { h.SetSym(i, j, h.At(i, j)+v) })
	var sym mat.EigenSym
	if !sym.Factorize(h, true) {
		return eigen{}, false
	}
	e := eigen{values: sym.Values(nil)}
	sym.VectorsTo(&e.vectors)
	for _, v := range e.values {
		e.least = math.Max(e.least, marginalTol*math.Abs(v))
	}
	return e, true
}

// null is the direction in s along which the length stays stationary, nearest
// to the given one (nil for any); ok is false where there is none.
func (e *eigen) null(near []float64) (d []float64, ok bool) {
	n := len(e.values)
	d = make([]float64, n)
	for k, v := range e.values {
		if math.Abs(v) > e.least {
			continue
		}
		share := 1.0
		if near != nil {
			share = 0
			for i := range n {
				share += near[i] * e.vectors.At(i, k)
			}
		} else if ok {
			continue
		}
		ok = true
		for i := range n {
			d[i] += share * e.vectors.At(i, k)
		}
	}
	norm := 0.0
	for _, x := range d {
		norm = math.Max(norm, math.Abs(x))
	}
	if !ok || norm == 0 {
		return nil, false
	}
	for i := range d {
		d[i] /= norm
	}
	return d, true
}

const (
	// polishSteps bounds Newton's steps. From within a cell it takes five.
	polishSteps = 30
	// reflectTol is the miss in p of the law of reflection that a polished
	// orbit may keep (times short): some thousand roundings, far below
	// closureTol.
	reflectTol = 2e-13
	// quadraticTol is the miss from which a Newton step leads to the rounding.
	quadraticTol = 1e-9
	// mostStalls is the number of steps without gain that are allowed.
	mostStalls = 8
)

// polish solves for a stationary length by Newton's method, along marginal
// directions not at all. No corner moves by more than stride in a step. false
// where it does not converge.
func (c *chain) polish(stride float64) bool {
	if !c.fill() {
		return false
	}
	best, stalled := c.miss(), 0
	for range polishSteps {
		if !c.solve() {
			e, ok := c.eigen()
			if !ok {
				return false
			}
			c.along(&e)
		}
		if !c.step(stride, 1) || !c.fill() {
			return false
		}
		miss, enough := c.miss(), reflectTol*c.short()
		switch {
		case best < quadraticTol && miss < enough:
			c.settle()
			return true // the step before was the last that could gain
		case miss < 0.5*best:
			best, stalled = miss, 0
		default:
			if stalled++; stalled > mostStalls {
				c.settle()
				return miss < enough
			}
		}
	}
	c.settle()
	return c.miss() < reflectTol*c.short()
}

// clearPivot is the least pivot, relative to the greatest, with which Newton's
// step is taken by elimination; below it the eigenvalues are looked at, so that
// no step is taken along a marginal direction. Pivots and eigenvalues differ by
// a factor of the size of the matrix, marginalTol is far below.
const clearPivot = 1e-4

// solve fills trial with Newton's step, by elimination with pivots; false where
// the length may be stationary in some direction.
func (c *chain) solve() bool {
	n := len(c.s)
	w := n + 1
	if len(c.rows) < n*w {
		c.rows = make([]float64, n*w)
	}
	m := c.rows[:n*w]
	clear(m)
	c.hessian(func(i, j int, v float64) {
		m[i*w+j] += v
		if i != j {
			m[j*w+i] += v
		}
	})
	for i, g := range c.g {
		m[i*w+n] = -g
	}
	least, greatest := math.Inf(1), 0.0
	for k := range n {
		at := k
		for i := k + 1; i < n; i++ {
			if math.Abs(m[i*w+k]) > math.Abs(m[at*w+k]) {
				at = i
			}
		}
		if at != k {
			for j := k; j < w; j++ {
				m[k*w+j], m[at*w+j] = m[at*w+j], m[k*w+j]
			}
		}
		pivot := m[k*w+k]
		least, greatest = math.Min(least, math.Abs(pivot)), math.Max(greatest, math.Abs(pivot))
		if !(least > clearPivot*greatest) {
			return false
		}
		for i := k + 1; i < n; i++ {
			f := m[i*w+k] / pivot
			if f == 0 {
				continue
			}
			for j := k + 1; j < w; j++ {
				m[i*w+j] -= float64(f * m[k*w+j])
			}
		}
	}
	for i := n - 1; i >= 0; i-- {
		sum := m[i*w+n]
		for j := i + 1; j < n; j++ {
			sum -= float64(m[i*w+j] * c.trial[j])
		}
		c.trial[i] = sum / m[i*w+i]
	}
	return true
}

// along fills trial with Newton's step along all directions but the marginal.
func (c *chain) along(e *eigen) {
	d := c.trial
	clear(d)
	for k, v := range e.values {
		if math.Abs(v) <= e.least {
			continue
		}
		a := 0.0
		for i := range d {
			a -= c.g[i] * e.vectors.At(i, k)
		}
		for i := range d {
			d[i] += a / v * e.vectors.At(i, k)
		}
	}
}

// step moves the corners by the step in trial times share; false where that is
// not a number.
func (c *chain) step(stride, share float64) bool {
	longest := 0.0
	for _, x := range c.trial {
		if math.IsNaN(x) {
			return false
		}
		longest = math.Max(longest, math.Abs(x))
	}
	if math.IsInf(longest, 0) {
		return false
	}
	if longest > stride {
		share *= stride / longest
	}
	for i, x := range c.trial {
		c.shift(i, share*x)
	}
	return true
}
