// Package chaos tells chaotic motion from regular: how fast neighbouring rays
// part, which share of the section is chaotic, and by two independent methods;
// maps of it, the islands that remain, and the character of single orbits.
//
// All walls are taken as mirrors: what leaves or is absorbed is followed
// further. Shares are of ds dp; the growth of a tangent vector is taken across
// the ray, as trail.go says.
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

// Bounces is the most that an orbit is followed for.
func (m Stretching) Bounces() int { return Patience * (m.Skip + m.Each) }

// On is the table with mirrors.
func (m Stretching) On() *sim.Tracer { return m.Tracer }

// Start is a point of a lattice.
func (m Stretching) Start(i int, _ func() float64) sim.Start {
	return sim.Start{State: m.Tracer.Uniform(m.Starts.At(i))}
}

// Tally is a *StretchingTally.
func (m Stretching) Tally() measure.Tally {
	return &StretchingTally{of: m, vector: newVector(m.Tracer), lots: measure.Lots[grown]{Size: m.Starts.Points.Size()}}
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
// bounces, at each level.
type grown [levels]struct{ growth, path, bounces float64 }

func (g *grown) add(o *grown) {
	for k := range g {
		g[k].growth += o[k].growth
		g[k].path += o[k].path
		g[k].bounces += o[k].bounces
	}
}

// levels is the number of lengths of an orbit at which a measurement is read
// off: all of its bounces, half of them, a quarter, and so on.
const levels = 8

// Level is the bounces of an orbit at a level: each at level 0, half of them at
// level 1, and so on.
func Level(each, level int) int { return each >> level }

// StretchingTally is the sums over the chaotic orbits of each lattice.
type StretchingTally struct {
	Stops   measure.Stops
	Chaotic int64 // orbits
	Regular int64
	Late    int64 // chaotic ones that did not show it in half of the bounces allowed
	Walked  int64 // bounces
	of      Stretching
	vector  vector
	orbit   stretched
	lots    measure.Lots[grown]
}

// stretched is what is known of the orbit at hand.
type stretched struct {
	stop    sim.Stop
	n       int // bounces
	counted grown
	level   int     // the next to be read off
	before  float64 // growth where the bounces that count begin
	path    float64 // since
	look    int     // bounces at which it is asked next whether it is chaotic
	chaotic bool
}

// Open begins orbit i.
func (t *StretchingTally) Open(i int) {
	t.lots.Open(i)
	t.orbit = stretched{level: levels - 1, look: t.of.Skip + t.of.Each}
}

// Add takes the opening bounce, and one that stopped.
func (t *StretchingTally) Add(b *sim.Bounce) {
	t.orbit.stop, t.orbit.n = b.Stop, b.N
	if b.N == 0 && b.Stop == sim.Going {
		t.vector.open(b)
	}
}

// Patience is how many times the bounces that count an orbit is followed at
// most, to see whether it is chaotic.
const Patience = 4

// Step takes a bounce with the derivative of the step to it.
func (t *StretchingTally) Step(b *sim.Bounce, j sim.Jacobian) {
	o := &t.orbit
	t.vector.step(j)
	o.n = b.N
	if b.N > t.of.Skip {
		o.path += b.Flight
	}
	if b.N == t.of.Skip {
		o.before = t.vector.growth(b)
	}
	for ; o.level >= 0 && b.N == t.of.Skip+Level(t.of.Each, o.level); o.level-- {
		c := &o.counted[o.level]
		c.growth, c.path, c.bounces = t.vector.growth(b)-o.before, o.path, float64(Level(t.of.Each, o.level))
	}
	if b.N == o.look {
		o.chaotic = exponential(t.vector.growth(b), b.N)
		if !o.chaotic {
			o.look *= 2
		}
	}
}

// Enough reports whether the orbit is known to be chaotic.
func (t *StretchingTally) Enough() bool { return t.orbit.chaotic }

// Close counts the orbit.
func (t *StretchingTally) Close() {
	o := &t.orbit
	t.Walked += int64(o.n)
	switch {
	case o.stop != sim.Going:
		t.Stops[o.stop]++
	case !o.chaotic:
		t.Regular++
	default:
		t.Chaotic++
		if 2*o.n > t.of.Bounces() {
			t.Late++
		}
		t.lots.Last().add(&o.counted)
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
func (t *StretchingTally) PerLength() (rate, stderr float64) { return t.perLength(0) }

// PerBounce is the same per bounce.
func (t *StretchingTally) PerBounce() (rate, stderr float64) {
	return t.rate(func(g *grown) (float64, float64) { return g[0].growth, g[0].bounces })
}

func (t *StretchingTally) perLength(level int) (rate, stderr float64) {
	return t.rate(func(g *grown) (float64, float64) { return g[level].growth, g[level].path })
}

// counted is the number of bounces that the rate at a level rests on.
func (t *StretchingTally) counted(level int) (n float64) {
	for i := range t.lots.Rows {
		n += t.lots.Rows[i][level].bounces
	}
	return n
}

// rate is a ratio of sums. To its scatter over the lattices the error adds the
// share of orbits that were late: where orbits stick with a probability that
// falls as the inverse of time, as many again are left out.
func (t *StretchingTally) rate(of func(*grown) (a, b float64)) (rate, stderr float64) {
	rate, stderr = t.lots.Ratio(of)
	return rate, math.Hypot(stderr, rate*float64(t.Late)/float64(t.Chaotic))
}

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
	bare, starts, err := offMirrors(tr, run, stretchWork*effort/StretchBounces)
	if err != nil {
		return nil, err
	}
	ran, err := run(Stretching{Tracer: bare, Starts: starts, Each: StretchBounces, Skip: StretchSkip})
	if err != nil {
		return nil, err
	}
	return ran.(*StretchingTally), nil
}
