package wish

import (
	"encoding/binary"
	"math"
	"slices"

	"gonum.org/v1/gonum/mat"
)

// alike is the distance in the unit box within which two places are one: a search
// that is begun anew comes back to its best by another rounding.
const alike = 1e-12

// key is the place of a try in the unit box.
func key(x []float64) string {
	b := make([]byte, 0, 8*len(x))
	for _, v := range x {
		b = binary.LittleEndian.AppendUint64(b, uint64(math.Round(v/alike)))
	}
	return string(b)
}

const (
	// confirmed is the number of the best tries that are measured anew.
	confirmed = 3
	// modelTries is the number of tries, over that of the coefficients of the
	// quadratic model, from which it is fitted at least: the best ones, and as
	// many more as it takes until it bends by curved of its own errors along
	// every dial. mostModel bounds its dials.
	modelTries = 3
	curved     = 4
	mostModel  = 6
)

// settle ends a search under noise: a quadratic through the tries about the best
// says where the least cost lies and how well that is known, and that wall and
// the best tried are measured anew, with more bounces. The best of these is the
// answer.
func (s *search) settle() {
	s.BestErr = make([]float64, len(s.Dials))
	for k := range s.BestErr {
		s.BestErr[k] = math.NaN()
	}
	best := s.best()
	if best == nil || best.CostErr == 0 || s.failed != nil {
		return
	}
	sorted := s.sorted()
	places := [][]float64{}
	for _, y := range sorted[:min(confirmed, len(sorted))] {
		places = append(places, y.At)
	}
	at, errs, ok := s.model(sorted)
	if ok {
		places = append(places, at)
	}
	var answer *Try
	for _, at := range places {
		y, err := s.try(at, settledEffort*s.Plan.Effort, s.kit)
		if err != nil {
			s.failed = err
			break
		}
		y.N = len(s.Tries)
		if y.Sound() && (answer == nil || y.Cost < answer.Cost) {
			answer = y
		}
	}
	if answer == nil {
		return
	}
	s.Best = answer
	if ok {
		s.BestErr = errs
		for k := range errs { // as far as the answer lies from the model's
			s.BestErr[k] = math.Max(errs[k], math.Abs(answer.At[k]-at[k]))
		}
	}
}

// sorted are the sound tries, the best first.
func (s *search) sorted() (all []*Try) {
	for _, y := range s.Tries {
		if y.Sound() {
			all = append(all, y)
		}
	}
	slices.SortStableFunc(all, func(a, b *Try) int {
		switch {
		case a.Cost < b.Cost:
			return -1
		case a.Cost > b.Cost:
			return 1
		}
		return 0
	})
	return all
}

// model is the least place of a quadratic fitted to the best tries, each weighted
// by its error, with the standard errors that the readings' errors give it. ok is
// false where there are too few tries, or they show no least place among them.
func (s *search) model(sorted []*Try) (at, errs []float64, ok bool) {
	d := len(s.Dials)
	p := 1 + d + d*(d+1)/2
	if d > mostModel || len(sorted) < p+2 {
		return nil, nil, false
	}
	for n := min(len(sorted), modelTries*p); n <= len(sorted); n++ {
		if at, errs, ok = s.modelOf(sorted[:n]); ok {
			return at, errs, ok
		}
	}
	return nil, nil, false
}

// modelOf is the model of these tries.
func (s *search) modelOf(used []*Try) (at, errs []float64, ok bool) {
	d := len(s.Dials)
	p := 1 + d + d*(d+1)/2
	x0, reach := s.folded(used[0].At), make([]float64, d)
	for _, y := range used {
		for k, v := range s.folded(y.At) {
			reach[k] = math.Max(reach[k], math.Abs(v-x0[k]))
		}
	}
	a, b := mat.NewDense(len(used), p, nil), mat.NewVecDense(len(used), nil)
	for i, y := range used {
		if y.CostErr <= 0 || slices.Contains(reach, 0) {
			return nil, nil, false
		}
		u := s.folded(y.At)
		for k := range u {
			u[k] = (u[k] - x0[k]) / reach[k]
		}
		for j, v := range monomials(u) {
			a.Set(i, j, v/y.CostErr)
		}
		b.SetVec(i, y.Cost/y.CostErr)
	}
	var normal mat.SymDense
	normal.SymOuterK(1, a.T())
	var chol mat.Cholesky
	if !chol.Factorize(&normal) || chol.Cond() > 1e12 {
		return nil, nil, false
	}
	var right, coef mat.VecDense
	right.MulVec(a.T(), b)
	if chol.SolveVecTo(&coef, &right) != nil {
		return nil, nil, false
	}
	u, ok := leastOf(coef.RawVector().Data, d)
	if !ok {
		return nil, nil, false
	}
	var cov mat.SymDense
	if chol.InverseTo(&cov) != nil {
		return nil, nil, false
	}
	if !bends(coef.RawVector().Data, &cov, d) {
		return nil, nil, false
	}
	// What the quadratic does not follow counts as error too.
	var miss mat.VecDense
	miss.MulVec(a, &coef)
	miss.SubVec(b, &miss)
	more := math.Max(1, mat.Norm(&miss, 2)/math.Sqrt(float64(len(used)-p)))
	errs = spreadOf(coef.RawVector().Data, &cov, d)
	x := make([]float64, d)
	for k := range x {
		if math.Abs(u[k]) > 1 || math.IsNaN(errs[k]) { // beyond what was tried
			return nil, nil, false
		}
		x[k] = math.Min(1, math.Max(0, x0[k]+reach[k]*u[k]))
		errs[k] *= more * reach[k] * (s.Plan.Free[k].Hi - s.Plan.Free[k].Lo)
	}
	return s.unfolded(x), errs, true
}

// monomials are 1, the coordinates, and their products of two.
func monomials(u []float64) []float64 {
	m := append([]float64{1}, u...)
	for i := range u {
		for j := i; j < len(u); j++ {
			m = append(m, u[i]*u[j])
		}
	}
	return m
}

// bends reports whether the quadratic bends upwards along every dial, beyond its
// errors.
func bends(c []float64, cov *mat.SymDense, d int) bool {
	n := 1 + d
	for i := range d {
		if c[n] < curved*math.Sqrt(cov.At(n, n)) {
			return false
		}
		n += d - i
	}
	return true
}

// leastOf is the least place of the quadratic with coefficients on the monomials;
// ok is false where it has none.
func leastOf(c []float64, d int) (u []float64, ok bool) {
	h, g := mat.NewSymDense(d, nil), mat.NewVecDense(d, nil)
	n := 1 + d
	for i := range d {
		g.SetVec(i, -c[1+i])
		for j := i; j < d; j++ {
			v := c[n]
			if i == j {
				v *= 2
			}
			h.SetSym(i, j, v)
			n++
		}
	}
	var chol mat.Cholesky
	var x mat.VecDense
	if !chol.Factorize(h) || chol.SolveVecTo(&x, g) != nil {
		return nil, false
	}
	return x.RawVector().Data, true
}

// spreadOf are the standard errors of the least place, to first order in those
// of the coefficients.
func spreadOf(c []float64, cov *mat.SymDense, d int) []float64 {
	base, _ := leastOf(c, d)
	slope := mat.NewDense(d, len(c), nil)
	for j := range c {
		step := 1e-4 * math.Sqrt(cov.At(j, j))
		near := slices.Clone(c)
		near[j] += step
		u, ok := leastOf(near, d)
		for k := range d {
			if !ok || step == 0 {
				slope.Set(k, j, math.NaN())
				continue
			}
			slope.Set(k, j, (u[k]-base[k])/step)
		}
	}
	var m, v mat.Dense
	m.Mul(slope, cov)
	v.Mul(&m, slope.T())
	errs := make([]float64, d)
	for k := range errs {
		errs[k] = math.Sqrt(v.At(k, k))
	}
	return errs
}
