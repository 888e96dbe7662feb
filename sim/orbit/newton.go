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
	var sym mat.EigenSym
	if !sym.Factorize(c.hessian(), true) {
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
		e, ok := c.eigen()
		if !ok || !c.step(&e, stride, 1) || !c.fill() {
			return false
		}
		miss, enough := c.miss(), reflectTol*c.short()
		switch {
		case best < quadraticTol && miss < enough:
			return true // the step before was the last that could gain
		case miss < 0.5*best:
			best, stalled = miss, 0
		default:
			if stalled++; stalled > mostStalls {
				return miss < enough
			}
		}
	}
	return c.miss() < reflectTol*c.short()
}

// step moves the corners by Newton's step times share; false where that is not
// a number.
func (c *chain) step(e *eigen, stride, share float64) bool {
	n := len(c.s)
	d := c.trial
	clear(d)
	for k, v := range e.values {
		if math.Abs(v) <= e.least {
			continue
		}
		a := 0.0
		for i := range n {
			a -= c.g[i] * e.vectors.At(i, k)
		}
		for i := range n {
			d[i] += a / v * e.vectors.At(i, k)
		}
	}
	longest := 0.0
	for _, x := range d {
		longest = math.Max(longest, math.Abs(x))
	}
	if math.IsNaN(longest) || math.IsInf(longest, 0) {
		return false
	}
	if longest > stride {
		share *= stride / longest
	}
	for i := range n {
		c.s[i] = wrap(&c.t.Loops()[c.loop[i]], c.s[i]+share*d[i])
	}
	return true
}
