package leak

import "math"

// Window is a stretch of path, from From to To, over which what is left falls
// exponentially: the rate (1/length) with its standard error, which takes in
// what moving the ends of the window by a flight changes.
type Window struct {
	From, To  float64
	Rate, Err float64
	// Short says that the curve is too short or too noisy for the rate to be
	// compared between two parts of the window.
	Short bool
}

// Tail is a fall as a power of the path, t to the -Exponent, from path From to
// path To.
type Tail struct{ From, To, Exponent, Err float64 }

// curve is a survival curve at evenly spaced paths.
type curve struct {
	times  []float64
	lefts  Lefts
	flight float64 // mean flight
	share  []float64
	last   int // the last mark with a share that is more than noise
}

const (
	// noisy is the relative error of a share beyond which it is not used.
	noisy = 0.12
	// partFall is the fall, as an exponent, over one of the parts whose rates
	// are compared, and partFlights its least length in mean flights.
	partFall    = 0.6
	partFlights = 3
	// alike: the rates of the parts of a window differ from their mean by at
	// most this many errors, with this share of the rate added to the error.
	alikeErrors = 2.5
	alikeShare  = 0.02
	vague       = 0.15 // a rate with a larger share of error tells nothing
	// A tail falls more slowly than the window by this share and this many
	// errors.
	tailShare  = 0.25
	tailErrors = 3
)

func newCurve(times []float64, lefts Lefts, flight float64) curve {
	c := curve{times: times, lefts: lefts, flight: flight, share: make([]float64, len(times))}
	for k := range times {
		share, err := lefts.At(k)
		c.share[k] = share
		if share > 0 && err < noisy*share && c.last == k-1 || k == 0 {
			c.last = k
		}
	}
	return c
}

// rate is the rate between the marks a and b: the gamma for which P exp(gamma
// t) has no slope under a bump that vanishes smoothly at both ends. A bump
// forgets the steps in which survival falls where all flights are about as
// long, which the ratio of two values does not (on three posts that ratio is
// wrong by a tenth over a few flights).
func (c curve) rate(a, b int) (rate, stderr float64) {
	ta, tb := c.times[a], c.times[b]
	slope := func(row []float64, g float64) (f, df float64) {
		for k := a; k <= b; k++ {
			x := (c.times[k] - ta) / (tb - ta)
			s := math.Sin(math.Pi * x)
			h := s * s * s * math.Cos(math.Pi*x) // of sin^4
			e := h * row[k] * math.Exp(g*(c.times[k]-ta))
			f += e
			df += e * (c.times[k] - ta)
		}
		return f, df
	}
	g := math.Max(0, math.Log(c.share[a]/c.share[b])/(tb-ta))
	for range 50 {
		f, df := slope(c.share, g)
		step := f / df
		g -= step
		if math.IsNaN(g) || math.Abs(step) <= 1e-12*(math.Abs(g)+1/tb) {
			break
		}
	}
	_, df := slope(c.share, g)
	square, n := 0.0, float64(len(c.lefts))
	for _, row := range c.lefts {
		f, _ := slope(row, g)
		square += f * f
	}
	return g, math.Sqrt(square/(n*(n-1))) / math.Abs(df)
}

// steady is the rate between a and b, with an error that takes in what moving
// an end by a flight changes.
func (c curve) steady(a, b int) (rate, stderr float64) {
	rate, stderr = c.rate(a, b)
	step := int(c.flight / (c.times[1] - c.times[0]))
	lo, hi := rate, rate
	for _, move := range [][2]int{{step, 0}, {0, -step}, {step / 2, 0}, {0, -step / 2}} {
		if x, y := a+move[0], b+move[1]; y-x > (b-a)/2 && y-x > 8 {
			r, _ := c.rate(x, y)
			lo, hi = math.Min(lo, r), math.Max(hi, r)
		}
	}
	return rate, math.Hypot(stderr, (hi-lo)/2)
}

// parts are the marks that cut the curve into parts over which it falls alike.
func (c curve) parts() []int {
	cuts := []int{0}
	for cuts[0] < c.last && c.times[cuts[0]] < c.flight { // the start is not forgotten before
		cuts[0]++
	}
	for k := cuts[0] + 1; k <= c.last; k++ {
		a := cuts[len(cuts)-1]
		if c.times[k]-c.times[a] >= partFlights*c.flight && math.Log(c.share[a]/c.share[k]) >= partFall && k-a >= 8 {
			cuts = append(cuts, k)
		}
	}
	return cuts
}

// window is the longest stretch, the earliest among equals, over which the
// rate is the same, and the tail after it, if there is one; ok is false where
// there is no such stretch.
func (c curve) window() (w Window, tail *Tail, ok bool) {
	cuts := c.parts()
	n := len(cuts) - 1
	rates, errs, powers := make([]float64, n), make([]float64, n), make([]float64, n)
	for i := range n {
		rates[i], errs[i] = c.steady(cuts[i], cuts[i+1])
		a, b := c.times[cuts[i]], c.times[cuts[i+1]]
		powers[i] = (b - a) / math.Log(b/math.Max(a, c.times[1]))
	}
	best, most := -1, 0
	for i := range n {
		for j := i + 1; j <= n && alike(rates[i:j], errs[i:j], powers[i:j]); j++ {
			if j-i > most {
				best, most = i, j-i
			}
		}
	}
	switch {
	case n == 0:
		return w, nil, false
	case most < 2 && n > 1: // no two parts fall alike
		return w, c.tail(cuts[0]), false
	}
	a, b := cuts[best], cuts[best+most]
	if best+most == n {
		b = c.last
	}
	w = Window{From: c.times[a], To: c.times[b], Short: most < 2}
	w.Rate, w.Err = c.steady(a, b)
	if c.slower(w, b) || n > best+most && c.slower(w, cuts[n-1]) {
		tail = c.tail(b)
	}
	return w, tail, true
}

// slower reports whether the curve falls more slowly from a mark to its last
// than in a window, by more than chance.
func (c curve) slower(w Window, from int) bool {
	d := c.times[c.last] - c.times[from]
	if !(d > partFlights*c.flight) {
		return false
	}
	fall, err := c.lefts.Fall(from, c.last)
	return fall/d < w.Rate*(1-tailShare) && w.Rate-fall/d > tailErrors*math.Hypot(err/d, w.Err)
}

// alike reports whether rates agree with their weighted mean, and better so
// than with a fall as a power of the path: times powers, a rate is the exponent
// of such a fall over its part.
func alike(rates, errs, powers []float64) bool {
	exponents, spreads := make([]float64, len(rates)), make([]float64, len(rates))
	for i, r := range rates {
		if !(r > 0) || len(rates) > 1 && errs[i] > vague*r {
			return false
		}
		exponents[i], spreads[i] = r*powers[i], errs[i]*powers[i]
	}
	worst, misfit := scattered(rates, errs)
	_, other := scattered(exponents, spreads)
	return worst <= alikeErrors && (len(rates) == 1 || misfit < other)
}

// scattered is by how many errors values differ from their weighted mean: the
// most of any one, and the sum of squares. A share of each value is added to
// its error.
func scattered(values, errs []float64) (worst, squares float64) {
	var sum, weight float64
	for i, x := range values {
		w := 1 / (errs[i]*errs[i] + alikeShare*alikeShare*x*x)
		sum, weight = sum+w*x, weight+w
	}
	mean := sum / weight
	for i, x := range values {
		d := math.Abs(x-mean) / math.Hypot(errs[i], alikeShare*mean)
		worst, squares = math.Max(worst, d), squares+d*d
	}
	return worst, squares
}

// tail is the power by which the curve falls at its end, read over the last
// factor of three in path that lies after the mark from.
func (c curve) tail(from int) *Tail {
	a := from
	for a < c.last && c.times[a] < c.times[c.last]/3 {
		a++
	}
	if c.last-a < 8 || c.times[a] == 0 {
		return nil
	}
	fall, err := c.lefts.Fall(a, c.last)
	k := math.Log(c.times[c.last] / c.times[a])
	return &Tail{c.times[a], c.times[c.last], fall / k, err / k}
}
