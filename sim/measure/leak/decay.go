package leak

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
	if d.Rate, ok = t.solve(a, b, &from, &to); !ok {
		return d, false
	}
	_, da := t.sum(a, &from, d.Rate)
	_, db := t.sum(b, &to, d.Rate)
	// To first order lattice r moves the solution by its share of the
	// equation's residue.
	n := float64(len(t.rows))
	square := 0.0
	for r := range t.rows {
		sa, _ := t.sum(a, &t.rows[r][a], d.Rate)
		sb, _ := t.sum(b, &t.rows[r][b], d.Rate)
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
// straight in the rate, held between 0, where the later sum is at most the
// earlier, and the last node.
func (t *EscapeTally) solve(a, b int, from, to *Left) (rate float64, ok bool) {
	most := t.of.step() * (nodes - 1)
	if x, _ := t.sum(b, to, most); !(x > 0) {
		return 0, false
	} else if y, _ := t.sum(a, from, most); !(x >= y) {
		return 0, false
	}
	rate = t.of.Rate
	for range 50 {
		sa, da := t.sum(a, from, rate)
		sb, db := t.sum(b, to, rate)
		next := rate - math.Log(sb/sa)/(db/sb-da/sa)
		if math.IsNaN(next) {
			return 0, false
		}
		next = min(max(next, 0), most)
		if math.Abs(next-rate) <= 1e-13*most {
			return next, true
		}
		rate = next
	}
	return 0, false
}

// sum is the sum over what is left at mark m of w exp(rate t), and its
// derivative by the rate: the expansion about the nearest node.
func (t *EscapeTally) sum(m int, l *Left, rate float64) (sum, slope float64) {
	step := t.of.step()
	node := 0
	if step > 0 {
		node = min(int(math.Round(rate/step)), nodes-1)
	}
	shift := rate - float64(node)*step
	mean := float64(t.of.Marks[m]) * t.of.Flight
	term, series, by := 1.0, 0.0, 0.0
	for k := range terms {
		series += term * l.sums[node][k]
		if k+1 < terms {
			by += term * l.sums[node][k+1]
		}
		term *= shift / float64(k+1)
	}
	e := math.Exp(shift * mean)
	return e * series, e * (by + mean*series)
}
