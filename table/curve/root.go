package curve

import "math"

// Root is the zero of f in [lo, hi], where flo = f(lo) and fhi = f(hi) differ
// in sign: Brent's method (R. P. Brent, Algorithms for Minimization without
// Derivatives, 1973, ch. 4), to the last bits of the argument.
func Root(f func(float64) float64, lo, hi, flo, fhi float64) float64 {
	a, b, fa, fb := lo, hi, flo, fhi
	if fa == 0 {
		return a
	}
	c, fc := a, fa
	d := b - a
	e := d
	for range 200 {
		if (fb > 0) == (fc > 0) {
			c, fc = a, fa
			d = b - a
			e = d
		}
		if math.Abs(fc) < math.Abs(fb) {
			a, b, c = b, c, b
			fa, fb, fc = fb, fc, fb
		}
		tol := 2 * 0x1p-53 * math.Abs(b)
		m := 0.5 * (c - b)
		if math.Abs(m) <= tol || fb == 0 {
			return b
		}
		if math.Abs(e) < tol || math.Abs(fa) <= math.Abs(fb) {
			d, e = m, m
		} else {
			d, e = brentStep(a, b, c, fa, fb, fc, d, e, tol)
		}
		a, fa = b, fb
		if math.Abs(d) > tol {
			b += d
		} else {
			b += math.Copysign(tol, m)
		}
		fb = f(b)
	}
	return b
}

// brentStep is the interpolated step, or a bisection where that is no better.
func brentStep(a, b, c, fa, fb, fc, d, e, tol float64) (step, last float64) {
	m := 0.5 * (c - b)
	s := fb / fa
	var p, q float64
	if a == c {
		p, q = 2*m*s, 1-s
	} else {
		u, r := fa/fc, fb/fc
		p = s * (2*m*u*(u-r) - (b-a)*(r-1))
		q = (u - 1) * (r - 1) * (s - 1)
	}
	if p > 0 {
		q = -q
	}
	p = math.Abs(p)
	if 2*p < math.Min(3*m*q-math.Abs(tol*q), math.Abs(e*q)) {
		return p / q, d
	}
	return m, m
}
