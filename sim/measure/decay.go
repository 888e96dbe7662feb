package measure

import (
	"math"
)

// Decay is the rate (1/length) at which what is left falls per path length,
// between two counts of bounces, with its standard error.
type Decay struct {
	Rate, Err float64
	From, To  int   // bounces
	Rays      int64 // left at To
	parts     []float64
}

// Decay is the rate between the marks a and b > a: the gamma at which the sum
// of w exp(gamma t) over the rays left at b is that at a. It counts by bounces
// and weighs by path, so that the steps in which survival falls, one a flight,
// do not enter. Once the start is forgotten the two sums agree for the escape
// rate alone: gamma is where the transfer operator weighted by exp(gamma t) has
// the eigenvalue 1 (Gaspard and Rice, J. Chem. Phys. 90, 2225 (1989)).
// ok is false where too little is left to solve for it.
func (t *EscapeTally) Decay(a, b int) (d Decay, ok bool) {
	from, to := t.Left(a), t.Left(b)
	d = Decay{From: t.of.Marks[a], To: t.of.Marks[b], Rays: to.Rays}
	if to.Rays == 0 || len(t.rows) < 2 {
		return d, false
	}
	shift, ok := t.solve(a, b, &from, &to)
	if !ok {
		return d, false
	}
	d.Rate = t.of.Rate + shift
	_, da := t.near(a, &from, shift)
	_, db := t.near(b, &to, shift)
	// To first order lattice r moves the solution by its share of the
	// equation's residue.
	n := float64(len(t.rows))
	square := 0.0
	for r := range t.rows {
		sa, _ := t.near(a, &t.rows[r][a], shift)
		sb, _ := t.near(b, &t.rows[r][b], shift)
		x := n * (sa - sb) / (db - da)
		d.parts = append(d.parts, x)
		square += x * x
	}
	d.Err = math.Sqrt(square / (n * (n - 1)))
	return d, true
}

// Apart is by how many standard errors of their difference two decays of one
// tally differ.
func (d Decay) Apart(o Decay) float64 {
	n := float64(len(d.parts))
	square := 0.0
	for r := range d.parts {
		x := d.parts[r] - o.parts[r]
		square += x * x
	}
	return math.Abs(d.Rate-o.Rate) / math.Sqrt(square/(n*(n-1)))
}

// solve is Newton's method on the logarithms of the two sums, which are nearly
// straight in the rate. shift counts from the guessed rate.
func (t *EscapeTally) solve(a, b int, from, to *Left) (shift float64, ok bool) {
	for range 50 {
		sa, da := t.near(a, from, shift)
		sb, db := t.near(b, to, shift)
		step := math.Log(sb/sa) / (db/sb - da/sa)
		shift -= step
		if math.IsNaN(shift) {
			return 0, false
		}
		if math.Abs(step) <= 1e-13*(math.Abs(t.of.Rate)+math.Abs(shift)) {
			return shift, true
		}
	}
	return 0, false
}

// near is the sum over what is left at mark m of w exp((Rate + shift) t), and
// its derivative by shift.
func (t *EscapeTally) near(m int, l *Left, shift float64) (sum, slope float64) {
	mean := float64(t.of.Marks[m]) * t.of.Flight
	term, series, by := 1.0, 0.0, 0.0
	for k := range terms {
		series += term * l.sums[k]
		if k+1 < terms {
			by += term * l.sums[k+1]
		}
		term *= shift / float64(k+1)
	}
	e := math.Exp(shift * mean)
	return e * series, e * (by + mean*series)
}
