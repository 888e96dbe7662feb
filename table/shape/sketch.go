package shape

import (
	"math"
	"slices"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// Sketch is a smooth wall of few nodes along a freehand stroke: 50 to 2000
// points, uneven, trembling and perhaps not quite closed. It is a periodic
// cubic spline, so that tangent and curvature are continuous, on the fewest
// knots found with which no point of the stroke lies farther from the wall than
// tol (in the unit of the points). The end that was drawn over the start is cut
// off, a gap is closed smoothly. The error is a *Fault.
func Sketch(stroke []r2.Vec, tol float64) (Freeform, error) {
	t, err := cleaned(stroke, tol)
	if err != nil {
		return Freeform{}, err
	}
	c := t.sampled()
	crossings := 0
	for n := fewestKnots; n <= mostKnots; n += 1 + n/stride {
		p, ok := c.placed(n, tol)
		if !ok {
			continue
		}
		f := NewFreeform(p.nodes())
		if !f.nodes.selfCrosses() {
			return f, nil
		}
		if crossings++; crossings == patience {
			return Freeform{}, misfit("the stroke crosses itself; draw a wall that does not")
		}
	}
	return Freeform{}, misfit("no smooth wall of up to %d nodes follows the stroke within the tolerance; draw more steadily, or larger", mostKnots)
}

const (
	// A circle on four knots would be a visible square.
	fewestKnots, mostKnots = 5, 40
	// stride makes the number of knots grow by one up to here, and faster
	// beyond.
	stride = 12
	// hopeless is the distance in tolerances beyond which shifting the knots
	// is not tried, gain the part of its distance to which each sweep must
	// bring it to go on, unless it is within the headroom.
	hopeless, gain, headroom = 4, 0.9, 1.5
	// patience is the number of fits that cross themselves within the
	// tolerance after which it is the stroke that does.
	patience = 3
	// sweeps is how often every knot is shifted to and fro, polish how often
	// once the spline is within the tolerance.
	sweeps, polish = 6, 2
	// roughKnots is the number of knots of the first fit, from which the
	// curvature is read.
	roughKnots = 20
)

// placed is a spline on n knots, shifted until no point of the stroke lies
// farther than tol from it, and a little further to lie better; false where
// that does not succeed.
func (c *samples) placed(n int, tol float64) (*periodic, bool) {
	now := c.follow(c.startKnots(n), 4)
	var good *periodic
	shift := 0.2 / float64(n)
	last := hopeless * tol
	for left := sweeps; now.spline != nil; left-- {
		switch greatest := now.samples.greatest(now.spline); {
		case greatest <= tol:
			if good == nil {
				left = min(left, polish)
			}
			good = now.spline
		case good == nil && greatest > last:
			return nil, false
		default:
			last = math.Max(greatest*gain, headroom*tol)
		}
		if left == 0 {
			break
		}
		next, moved := now.swept(shift)
		if now = next; !moved {
			shift /= 2
		}
	}
	return good, good != nil
}

// swept is a with every knot shifted to the side that is better, if one is.
func (a attempt) swept(shift float64) (best attempt, moved bool) {
	best = a
	for k := range a.spline.knot {
		for _, d := range [2]float64{shift, -shift} {
			knot, ok := shifted(best.spline.knot, k, d)
			if !ok {
				continue
			}
			if next := best.samples.follow(knot, 2); next.spline != nil && next.fourth < best.fourth {
				best, moved = next, true
				break
			}
		}
	}
	return best, moved
}

// attempt is a spline with the samples projected onto it, and the mean fourth
// power of their distances.
type attempt struct {
	spline  *periodic
	samples *samples
	fourth  float64
}

// follow fits a spline on the knots and lets the parameters follow it, some
// rounds, leaving c as it is.
func (c *samples) follow(knot []float64, rounds int) attempt {
	own := *c
	own.u = slices.Clone(c.u)
	a := attempt{samples: &own}
	for range rounds {
		p, ok := own.fitted(knot)
		if !ok {
			return attempt{}
		}
		a.spline, a.fourth = p, own.project(p)
	}
	return a
}

// shifted are the knots with knot k moved by d, if it keeps a share of the
// interval on either side.
func shifted(knot []float64, k int, d float64) ([]float64, bool) {
	n := len(knot)
	before, after := knot[(k+n-1)%n], knot[(k+1)%n]
	if k == 0 {
		before--
	}
	if k == n-1 {
		after++
	}
	x, least := knot[k]+d, 0.25/float64(n)
	if x-before < least || after-x < least {
		return nil, false
	}
	out := slices.Clone(knot)
	out[k] = x - math.Floor(x)
	slices.Sort(out)
	return out, true
}

// startKnots are n knots with equal shares of the square root of curvature,
// taken from a rough fit, and of the length.
func (c *samples) startKnots(n int) []float64 {
	density := make([]float64, len(c.at))
	rough := make([]float64, roughKnots)
	for k := range rough {
		rough[k] = float64(k) / roughKnots
	}
	p, ok := c.fitted(rough)
	sum := 0.0
	for j, u := range c.u {
		density[j] = 1
		if ok {
			_, d1, d2 := p.jet(u)
			v2 := plane.Dot(d1, d1)
			kappa := math.Abs(plane.Cross(d1, d2)) / (v2 * math.Sqrt(v2))
			density[j] = 0.5*math.Sqrt(math.Sqrt(v2)/fullTurn) + math.Sqrt(kappa*math.Sqrt(v2)/fullTurn)
		}
		sum += density[j]
	}
	var knot []float64
	acc := 0.0
	for j := range density {
		if len(knot) < n && acc >= sum*float64(len(knot))/float64(n) {
			knot = append(knot, float64(j)/float64(len(density)))
		}
		acc += density[j]
	}
	for len(knot) < n {
		return evenKnots(n)
	}
	return knot
}

func evenKnots(n int) []float64 {
	knot := make([]float64, n)
	for k := range knot {
		knot[k] = float64(k) / float64(n)
	}
	return knot
}
