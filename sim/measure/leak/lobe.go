package leak

import (
	"math"

	"cavitywright/sim/measure"
)

// Share is the share of what leaves within half of a direction, both in
// radians, with its standard error.
func (f *FarField) Share(direction, half float64) (share, stderr float64) {
	return f.of(func(s *sent) float64 { return arcShare(s.byAngle, direction, half) })
}

// arcShare is the share of a histogram over the full turn within half of a
// direction; a bin that is cut counts in part.
func arcShare(bins []float64, direction, half float64) float64 {
	n := float64(len(bins))
	lo, hi := (direction-half)/(2*math.Pi)*n, (direction+half)/(2*math.Pi)*n
	in, all := 0.0, 0.0
	for i, w := range bins {
		all += w
		for turn := -2.0; turn <= 2; turn++ {
			a, b := float64(i)+turn*n, float64(i)+1+turn*n
			in += w * math.Max(0, math.Min(b, hi)-math.Max(a, lo))
		}
	}
	return in / all
}

// MeanCosine is the mean cosine of the direction from +x: 1 for all along +x,
// 0 where as much goes each way.
func (f *FarField) MeanCosine() (mean, stderr float64) {
	return f.of(func(s *sent) float64 { return s.cos / s.counted() })
}

// MeanPath is the mean path of what leaves.
func (f *FarField) MeanPath() (mean, stderr float64) {
	return f.of(func(s *sent) float64 { return s.path / s.counted() })
}

// Entropy is that of the far field relative to an even one: the sum of f ln f,
// with f the share of a bin, over bins of the width of the lobe's smoothing,
// divided by the logarithm of their number and taken negative. It is 1 where
// as much leaves in every direction, 0 where all goes into one bin.
func (f *FarField) Entropy() (entropy, stderr float64) {
	return f.of(func(s *sent) float64 {
		n := max(int(math.Round(2*math.Pi/lobeSmoothing)), 1)
		bins := make([]float64, n)
		all := 0.0
		for i, w := range s.byAngle {
			bins[min((2*i+1)*n/(2*len(s.byAngle)), n-1)] += w
			all += w
		}
		e := 0.0
		for _, w := range bins {
			if w > 0 {
				e -= w / all * math.Log(w/all)
			}
		}
		return e / math.Log(float64(n))
	})
}

// lobeSmoothing is the width (radians) of the running mean that the lobe is
// read from: 4.5 degrees, nine bins of half a degree.
const lobeSmoothing = 4.5 * math.Pi / 180

// lobeReach is how far (bins) the top of a lobe is sought at a step: ripples of
// chance that are narrower do not hold it.
const lobeReach = 9

// Lobe is the greatest lobe of the smoothed far field: its direction and its
// full width at half of its height (radians), with their standard errors. Twins
// are the other lobes that are as high within three standard errors of the
// difference, as the mirror image of a lobe is.
type Lobe struct {
	Direction, DirectionErr, Width, WidthErr float64
	Twins                                    []Lobe
}

// Lobe reads the greatest lobe.
func (f *FarField) Lobe() Lobe {
	whole := sum(f.rows)
	tops := lobes(smoothed(whole.byAngle, lobeSmoothing))
	l := f.lobeAt(tops[0])
	for _, top := range tops[1:] {
		less, err := f.of(func(s *sent) float64 {
			c := smoothed(s.byAngle, lobeSmoothing)
			return (c[tops[0]] - c[top]) / s.counted()
		})
		if less <= 3*err {
			l.Twins = append(l.Twins, f.lobeAt(top))
		}
	}
	return l
}

// lobeAt is the lobe whose top is a bin. Its errors are those of this lobe,
// also where chance makes a twin of it the greater one.
func (f *FarField) lobeAt(top int) Lobe {
	var l Lobe
	l.Direction, _ = f.of(func(s *sent) float64 { d, _ := lobe(s.byAngle, top); return d })
	_, l.DirectionErr = f.of(func(s *sent) float64 {
		d, _ := lobe(s.byAngle, top)
		return math.Remainder(d-l.Direction, 2*math.Pi)
	})
	l.Width, l.WidthErr = f.of(func(s *sent) float64 { _, w := lobe(s.byAngle, top); return w })
	return l
}

// lobes are the tops of the lobes of a smoothed far field, the greatest first:
// of each stretch above half of the greatest height the highest bin.
func lobes(c []float64) (tops []int) {
	n := len(c)
	first := 0
	for i, w := range c {
		if w > c[first] {
			first = i
		}
	}
	in := true // the greatest lobe itself, until it has fallen
	for k := range n {
		i := (first + k) % n
		switch high := c[i] >= c[first]/2; {
		case !high:
			in = false
		case !in:
			in = true
			tops = append(tops, i)
		case len(tops) > 0 && c[i] > c[tops[len(tops)-1]]:
			tops[len(tops)-1] = i
		}
	}
	if in && len(tops) > 0 { // the near side of the greatest lobe
		tops = tops[:len(tops)-1]
	}
	return append([]int{first}, tops...)
}

// smoothed is a histogram over the full turn under a running mean of a width
// in radians.
func smoothed(bins []float64, width float64) []float64 {
	n := len(bins)
	half := int(width / (2 * math.Pi) * float64(n) / 2)
	out := make([]float64, n)
	for i := range out {
		for k := -half; k <= half; k++ {
			out[i] += bins[((i+k)%n+n)%n]
		}
		out[i] /= float64(2*half + 1)
	}
	return out
}

// lobe is the direction of the lobe about a bin, the middle between the places
// where it falls to half of its height, and their distance.
func lobe(bins []float64, near int) (direction, width float64) {
	n := len(bins)
	c := smoothed(bins, lobeSmoothing)
	top := near
	for moved := true; moved; { // up the slope
		moved = false
		for k := -lobeReach; k <= lobeReach; k++ {
			if i := ((top+k)%n + n) % n; c[i] > c[top] {
				top, moved = i, true
			}
		}
	}
	half := c[top] / 2
	edge := func(step int) float64 {
		for k := 1; k <= n/2; k++ {
			a, b := c[((top+step*(k-1))%n+n)%n], c[((top+step*k)%n+n)%n]
			if b < half {
				return float64(k-1) + (a-half)/(a-b)
			}
		}
		return float64(n) / 2
	}
	up, down := edge(1), edge(-1)
	bin := 2 * math.Pi / float64(n)
	direction = (float64(top) + 0.5 + (up-down)/2) * bin
	return math.Remainder(direction, 2*math.Pi), (up + down) * bin
}

// Mirror is by how much the far field differs from its mirror image about the
// x axis, as chi squared over its degrees of freedom, with their number; about
// 1 where the difference is chance alone.
func (f *FarField) Mirror() (chi2 float64, freedom int) {
	const wide = 72
	coarse := func(s *sent) [wide]float64 {
		var c [wide]float64
		all := s.counted()
		for i, w := range s.byAngle {
			c[i*wide/len(s.byAngle)] += w / all
		}
		return c
	}
	for i := range wide / 2 {
		var m measure.Sample
		for r := range f.rows {
			c := coarse(&f.rows[r])
			m.Take(c[i] - c[wide-1-i])
		}
		if d, err := m.Mean(); err > 0 {
			chi2 += d * d / (err * err)
			freedom++
		}
	}
	return chi2 / float64(freedom), freedom
}
