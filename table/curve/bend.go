package curve

import "math"

// bends are the zeros of the curvature's numerator in [lo, hi]. With the sum r
// of the form, and primes for derivatives by phi, it is r^2 + 2 r'^2 - r r”;
// where r is the square of the radius, r^2 + (3/4) r'^2 - r r”/2. None is
// missed: bounds of its first two derivatives say how fast it can change.
func (f *Form) bends(lo, hi float64) []float64 {
	steep, half := 2.0, 1.0
	if f.Of == Square {
		steep, half = 0.75, 0.5
	}
	w := zeros{}
	w.f = func(t float64) float64 {
		r, d1, d2, _, _ := f.sum(t)
		return float64(r*r) + float64(steep*d1*d1) - float64(half*r*d2)
	}
	w.slope = func(t float64) float64 {
		r, d1, d2, _, _ := f.sum(t)
		return float64(2*r*d1) + float64((2*steep-half)*d1*d2) - float64(half*r*f.third(t))
	}
	w.lip, w.bend = f.changes(lo, hi, steep, half)
	w.find(lo, hi)
	return w.merged(lo, hi)
}

// changes bounds the first and second derivative of the curvature's numerator
// r^2 + steep r'^2 - half r r”, by the bounds of r and its derivatives put
// together term by term. Where r has no slope the numerator is a trigonometric
// polynomial of degree 2M, and Bernstein's inequality (max |f'| <= degree max
// |f|, S. Bernstein 1912) may say more.
func (f *Form) changes(lo, hi, steep, half float64) (lip, bend float64) {
	var r [5]float64 // bounds of r and its derivatives
	for i := range f.Cos {
		a := math.Abs(f.Cos[i]) + math.Abs(f.Sin[i])
		for k := range r {
			r[k] += a
			a *= float64(i + 1)
		}
	}
	r[0] += math.Abs(f.Mean) + math.Abs(f.Slope)*math.Max(math.Abs(lo), math.Abs(hi))
	r[1] += math.Abs(f.Slope)
	mixed := math.Abs(2*steep - half)
	lip = 2*r[0]*r[1] + mixed*r[1]*r[2] + half*r[0]*r[3]
	bend = 2*(r[1]*r[1]+r[0]*r[2]) + mixed*(r[2]*r[2]+r[1]*r[3]) + half*(r[1]*r[3]+r[0]*r[4])
	if f.Slope == 0 {
		degree := 2 * float64(len(f.Cos))
		top := r[0]*r[0] + steep*r[1]*r[1] + half*r[0]*r[2] // bound of |numerator|
		lip, bend = math.Min(lip, degree*top), math.Min(bend, degree*degree*top)
	}
	return lip, bend
}

// third is the third derivative of the sum by phi.
func (f *Form) third(phi float64) float64 {
	sum := 0.0
	for k := range f.Cos {
		m := float64(k + 1)
		sin, cos := math.Sincos(m * phi)
		sum += m * m * m * (float64(f.Cos[k]*sin) - float64(f.Sin[k]*cos))
	}
	return sum
}

// zeros finds every zero of f by halving, given its derivative and bounds on
// the first (lip) and second (bend) derivative.
type zeros struct {
	f, slope  func(float64) float64
	lip, bend float64
	at        []float64
}

// undecided is the half width at which an interval that can neither be cleared
// nor shown to be monotone is taken to hold a double zero.
const undecided = 1e-8

func (z *zeros) find(lo, hi float64) {
	mid, half := 0.5*(lo+hi), 0.5*(hi-lo)
	if math.Abs(z.f(mid)) > z.lip*half {
		return
	}
	if math.Abs(z.slope(mid)) > z.bend*half { // monotone here: at most one zero
		a, b := z.f(lo), z.f(hi)
		if (a < 0) != (b < 0) {
			z.at = append(z.at, Root(z.f, lo, hi, a, b))
		}
		return
	}
	if half < undecided {
		z.at = append(z.at, mid)
		return
	}
	z.find(lo, mid)
	z.find(mid, hi)
}

// merged are the zeros with those of one double zero replaced by the place
// where the slope vanishes: a cusp must be cut exactly there.
func (z *zeros) merged(lo, hi float64) []float64 {
	var out []float64
	for i := 0; i < len(z.at); {
		j := i
		for j+1 < len(z.at) && z.at[j+1]-z.at[j] < 8*undecided {
			j++
		}
		t := 0.5 * (z.at[i] + z.at[j])
		a, b := z.at[i]-8*undecided, z.at[j]+8*undecided
		if sa, sb := z.slope(a), z.slope(b); (sa < 0) != (sb < 0) && z.isDouble(t) {
			t = Root(z.slope, a, b, sa, sb)
		}
		if t > lo && t < hi {
			out = append(out, t)
		}
		i = j + 1
	}
	return out
}

// isDouble reports whether f does not change sign about t.
func (z *zeros) isDouble(t float64) bool {
	return (z.f(t-32*undecided) < 0) == (z.f(t+32*undecided) < 0)
}
