package chaos

import (
	"cavitywright/sim/measure"
	"math"

	"cavitywright/sim"
)

// Stretching measures how fast neighbouring rays part: the largest Lyapunov
// exponent, by the tangent map, averaged over the chaotic orbits alone. The
// orbits start evenly in ds dp, which the map preserves: growth and path of
// each chaotic one have the same expectations, however long its memory is, and
// the exponent is the ratio of their sums.
//
// An orbit whose growth over Each bounces is not exponential is followed to
// Patience times as many before it counts as regular; if it turns out chaotic, its
// first Each bounces count like those of any other. Left out, those that stick
// somewhere at first would make the exponent too large.
//
// All walls are taken as mirrors.
type Stretching struct {
	Tracer *sim.Tracer // of mirrors
	Starts measure.Lattices
	Each   int // bounces of an orbit that count
	Skip   int // bounces before, in which the tangent vector turns to the direction that grows
}

// Orbits is the number of starts.
func (m Stretching) Orbits() int { return m.Starts.Size() }

// Bounces is what the opening of an orbit costs whoever runs the measurement.
// The tally follows the orbit itself: the tangent map is its walker's, and no
// bounce carries it.
func (m Stretching) Bounces() int { return m.Each / leads }

// leads is which part of an orbit is run before the tally runs all of it. It
// sizes the blocks in which orbits are shared out: of some 800 000 bounces, a
// fifth of a second.
const leads = 16

// Start is a point of a lattice.
func (m Stretching) Start(i int, _ func() float64) sim.Start {
	return sim.Start{State: m.Tracer.Uniform(m.Starts.At(i))}
}

// Tally is a *StretchingTally.
func (m Stretching) Tally() measure.Tally {
	return &StretchingTally{of: m, trail: newTrail(m.Tracer), lots: measure.Lots[grown]{Size: m.Starts.Points.Size()}}
}

// ChaosPower is the power of n beyond which the growth over n bounces counts
// as exponential. Regular orbits reach the power 1, with a factor that grows
// near separatrices: up to 1.7 on an ellipse of axes 2:1 at n = 200, up to 1.5
// at n = 2000. Long orbits of the chaotic sea lie far beyond, with hardly any
// between 2 and 3.5 at n = 2000; at n = 200 those that stick to islands fill
// the gap, and the share falls by 0.04 from the power 2 to the power 2.75 on a
// limaçon of eps = 0.3: what sticks that long counts as regular.
const ChaosPower = 2.75

// exponential reports whether a growth over n bounces, as a logarithm, is that
// of a chaotic orbit.
func exponential(growth float64, n int) bool { return growth > ChaosPower*math.Log(float64(n)) }

// grown is what the chaotic orbits of a lattice grew by and flew, in how many
// bounces.
type grown struct{ growth, path, bounces float64 }

func (g *grown) add(o *grown) {
	g.growth += o.growth
	g.path += o.path
	g.bounces += o.bounces
}

// StretchingTally is the sums over the chaotic orbits of each lattice.
type StretchingTally struct {
	Stops   measure.Stops
	Chaotic int64 // orbits
	Regular int64
	Late    int64 // chaotic ones that did not show it in half of the bounces allowed
	Walked  int64 // bounces
	of      Stretching
	trail   trail
	start   sim.State
	lots    measure.Lots[grown]
}

// Open begins orbit i.
func (t *StretchingTally) Open(i int) { t.lots.Open(i) }

// Add takes the opening bounce; the rest is followed by Close.
func (t *StretchingTally) Add(b *sim.Bounce) {
	if b.N == 0 {
		t.start = b.State
	}
}

// Patience is how many times the bounces that count an orbit is followed at
// most, to see whether it is chaotic.
const Patience = 4

// Close follows the orbit.
func (t *StretchingTally) Close() {
	b := t.trail.open(t.start)
	counted := grown{bounces: float64(t.of.Each)}
	end := t.of.Skip + t.of.Each
	chaotic, late := false, false
	for n := end; !chaotic && n <= Patience*end && b.Stop == sim.Going; n *= 2 {
		for b.Stop == sim.Going && b.N < n {
			if b = t.trail.next(); b.Stop != sim.Going {
				break
			}
			if b.N > t.of.Skip && b.N <= end {
				counted.path += b.Flight
			}
			switch b.N {
			case t.of.Skip:
				counted.growth = -t.trail.growth(&b)
			case end:
				counted.growth += t.trail.growth(&b)
			}
		}
		if b.Stop == sim.Going {
			chaotic, late = exponential(t.trail.growth(&b), n), 2*n > Patience*end
		}
	}
	t.Walked += int64(b.N)
	switch {
	case b.Stop != sim.Going:
		t.Stops[b.Stop]++
	case !chaotic:
		t.Regular++
	default:
		t.Chaotic++
		if late {
			t.Late++
		}
		t.lots.Last().add(&counted)
	}
}

// Merge adds the next tally.
func (t *StretchingTally) Merge(next measure.Tally) {
	o := next.(*StretchingTally)
	t.Chaotic, t.Regular, t.Late, t.Walked = t.Chaotic+o.Chaotic, t.Regular+o.Regular, t.Late+o.Late, t.Walked+o.Walked
	for i := range o.Stops {
		t.Stops[i] += o.Stops[i]
	}
	t.lots.Merge(&o.lots, (*grown).add)
}

// PerLength is the exponent per path length (1/length) with its standard
// error; NaN where no orbit is chaotic.
func (t *StretchingTally) PerLength() (rate, stderr float64) {
	return t.rate(func(g *grown) (float64, float64) { return g.growth, g.path })
}

// PerBounce is the same per bounce.
func (t *StretchingTally) PerBounce() (rate, stderr float64) {
	return t.rate(func(g *grown) (float64, float64) { return g.growth, g.bounces })
}

// rate is a ratio of sums. To its scatter over the lattices the error adds the
// share of orbits that were late: where orbits stick with a probability that
// falls as the inverse of time, as many again are left out.
func (t *StretchingTally) rate(of func(*grown) (a, b float64)) (rate, stderr float64) {
	rate, stderr = t.lots.Ratio(of)
	return rate, math.Hypot(stderr, rate*float64(t.Late)/float64(t.Chaotic))
}

// trail follows an orbit off mirrors with a tangent vector: a ray infinitely
// near it. The vector's length is taken across the ray, as
//
//	(ds cos chi / l)^2 + (dp / cos chi)^2
//
// with the table's mean chord l: shift and turn of the beam. On a circle it
// grows at most as the path, however near to grazing the orbit is. The vector
// is not needed by its direction, but by its growth.
type trail struct {
	walker *sim.Walker
	unit   float64 // l, in the table's unit
	ds, dp float64
	log    float64 // of what was taken out of the vector
}

func newTrail(tr *sim.Tracer) trail {
	return trail{walker: tr.Walker(), unit: sim.MeanChord(tr.Table())}
}

// Bounds within which a vector is left as it is: one bounce multiplies it by
// some 1e14 at most (two grazing cosines of 1e-7), and 1e300 is the largest
// square.
const (
	vectorHigh = 1e100
	vectorLow  = 1e-100
)

// open starts an orbit with a vector of length 1, half of it shift and half
// turn.
func (t *trail) open(st sim.State) sim.Bounce {
	b := t.walker.Start(st)
	cos := cosine(b.P)
	t.ds, t.dp, t.log = math.Sqrt2/2*t.unit/cos, math.Sqrt2/2*cos, 0
	return b
}

// next follows the orbit to its next bounce.
func (t *trail) next() sim.Bounce {
	b := t.walker.Next(0)
	if b.Stop != sim.Going {
		return b
	}
	t.ds, t.dp = t.walker.Jacobian().Apply(t.ds, t.dp)
	if m := math.Max(math.Abs(t.ds)/t.unit, math.Abs(t.dp)); m > vectorHigh || m < vectorLow {
		t.log += math.Log(m)
		t.ds, t.dp = t.ds/m, t.dp/m
	}
	return b
}

// growth is the logarithm of the vector's length at the bounce b, which the
// orbit stands at.
func (t *trail) growth(b *sim.Bounce) float64 {
	cos := cosine(b.P)
	return t.log + math.Log(math.Hypot(t.ds*cos/t.unit, t.dp/cos))
}

func cosine(p float64) float64 { return math.Sqrt((1 - p) * (1 + p)) }

const (
	// stretchWork is the number of bounces that count at effort 1,
	// StretchBounces that of each orbit and StretchSkip of those before: the
	// part of the vector across the growing direction vanishes as the square
	// of its growth.
	stretchWork    = 2e7
	StretchBounces = 1000
	StretchSkip    = 100
	// StretchOrbits is the least number of orbits from which a rate is read.
	StretchOrbits = 8
)

// MeasureStretching follows orbits of the table off mirrors; effort multiplies
// their number. The table must be one that has a tangent map.
func MeasureStretching(tr *sim.Tracer, run measure.Runner, effort float64) (*StretchingTally, error) {
	bare, err := Mirrored(tr)
	if err != nil {
		return nil, err
	}
	starts, err := measure.DrawnLattices(bare, run, int(stretchWork*effort/measure.Slowness(bare.Table())/StretchBounces))
	if err != nil {
		return nil, err
	}
	ran, err := run(Stretching{Tracer: bare, Starts: starts, Each: StretchBounces, Skip: StretchSkip})
	if err != nil {
		return nil, err
	}
	return ran.(*StretchingTally), nil
}
