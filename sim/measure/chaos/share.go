package chaos

import (
	"cavitywright/sim/measure"
	"math"

	"cavitywright/sim"
)

// Sharing tells which orbits of a table are chaotic, in two independent ways:
// by the growth of a tangent vector over Each bounces, and by weighted Birkhoff
// averages over them. The orbits start evenly in ds dp.
//
// All walls are taken as mirrors.
type Sharing struct {
	Tracer *sim.Tracer // of mirrors
	Starts measure.Lattices
	Each   int // bounces an orbit
}

// Orbits is the number of starts.
func (m Sharing) Orbits() int { return m.Starts.Size() }

// Bounces is Each.
func (m Sharing) Bounces() int { return m.Each }

// On is the table with mirrors.
func (m Sharing) On() *sim.Tracer { return m.Tracer }

// Start is a point of a lattice.
func (m Sharing) Start(i int, _ func() float64) sim.Start {
	return sim.Start{State: m.Tracer.Uniform(m.Starts.At(i))}
}

// Tally is a *SharingTally.
func (m Sharing) Tally() measure.Tally {
	return &SharingTally{of: m, vector: newVector(m.Tracer), birkhoff: newBirkhoff(m.Tracer, m.Each), lots: measure.Lots[lot]{Size: m.Starts.Points.Size()}}
}

// Method is a way to tell chaotic orbits from regular ones.
type Method uint8

// The methods.
const (
	ByGrowth   Method = iota
	ByAverages        // by weighted Birkhoff averages
)

const methods = int(ByAverages) + 1

// leastLevel is the least number of bounces after which an orbit is told: with
// fewer, growth as a power and growth as an exponential look alike.
const leastLevel = 50

// lot is a lattice's orbits: their number and path, and those of the orbits
// that are chaotic by each method and at each level.
type lot struct {
	orbits, path float64
	chaotic      [methods][levels]float64
	chaoticPath  [methods][levels]float64
}

func (l *lot) add(o *lot) {
	l.orbits += o.orbits
	l.path += o.path
	for m := range l.chaotic {
		for k := range l.chaotic[m] {
			l.chaotic[m][k] += o.chaotic[m][k]
			l.chaoticPath[m][k] += o.chaoticPath[m][k]
		}
	}
}

// SharingTally is what is chaotic of each lattice.
type SharingTally struct {
	Stops    measure.Stops
	Walked   int64 // bounces
	of       Sharing
	vector   vector
	birkhoff birkhoff
	stop     sim.Stop
	level    int                   // the next to be read off
	is       [methods][levels]bool // whether the orbit at hand is chaotic
	lots     measure.Lots[lot]
}

// Open begins orbit i.
func (t *SharingTally) Open(i int) {
	t.lots.Open(i)
	t.level, t.is = levels-1, [methods][levels]bool{}
}

// Add takes the opening bounce, and one that stopped.
func (t *SharingTally) Add(b *sim.Bounce) {
	t.stop = b.Stop
	if b.N == 0 {
		t.birkhoff.open(b)
		if b.Stop == sim.Going {
			t.vector.open(b)
		}
	}
}

// Step takes a bounce with the derivative of the step to it.
func (t *SharingTally) Step(b *sim.Bounce, j sim.Jacobian) {
	t.vector.step(j)
	t.birkhoff.add(b)
	for ; t.level >= 0 && b.N >= Level(t.of.Each, t.level); t.level-- {
		if b.N >= leastLevel {
			t.is[ByGrowth][t.level] = exponential(t.vector.growth(b), b.N)
			t.is[ByAverages][t.level] = t.birkhoff.digits() < agreeing(b.N)
		}
	}
}

// Close counts the orbit.
func (t *SharingTally) Close() {
	t.Walked += int64(len(t.birkhoff.end))
	if t.stop != sim.Going {
		t.Stops[t.stop]++
		return
	}
	row, path := t.lots.Last(), t.birkhoff.path
	row.orbits++
	row.path += path
	for m := range t.is {
		for k := range t.is[m] {
			if t.is[m][k] {
				row.chaotic[m][k]++
				row.chaoticPath[m][k] += path
			}
		}
	}
}

// Merge adds the next tally.
func (t *SharingTally) Merge(next measure.Tally) {
	o := next.(*SharingTally)
	t.Walked += o.Walked
	for i := range o.Stops {
		t.Stops[i] += o.Stops[i]
	}
	t.lots.Merge(&o.lots, (*lot).add)
}

// Section is the chaotic share of the section (of ds dp) with its standard
// error.
func (t *SharingTally) Section(by Method) (share, stderr float64) { return t.SectionAt(by, 0) }

// SectionAt is that share by the bounces of a level alone; 0 at a level of too
// few bounces.
func (t *SharingTally) SectionAt(by Method, level int) (share, stderr float64) {
	return t.ratio(func(l *lot) (float64, float64) { return l.chaotic[by][level], l.orbits })
}

// Energy is the chaotic share of the energy surface: each start counts by the
// mean flight of its orbit.
func (t *SharingTally) Energy(by Method) (share, stderr float64) {
	return t.ratio(func(l *lot) (float64, float64) { return l.chaoticPath[by][0], l.path })
}

// Drifts reports whether the share of the section still changes when the
// bounces of an orbit are doubled, by more than driftErrors of its standard
// errors.
func (t *SharingTally) Drifts(by Method) bool {
	now, err := t.SectionAt(by, 0)
	before, _ := t.SectionAt(by, 1)
	return math.Abs(now-before) > driftErrors*err
}

// driftErrors is the number of standard errors by which a doubling of the
// bounces must change a share for it to count as drifting.
const driftErrors = 2

// ratio is the share with its error. Where hardly any orbit is of the rarer
// kind the scatter tells nothing; the error is then what n orbits of one kind
// leave open: the standard deviation of Jeffreys's posterior, 0.7/n.
func (t *SharingTally) ratio(of func(*lot) (a, b float64)) (share, stderr float64) {
	orbits := 0.0
	for i := range t.lots.Rows {
		orbits += t.lots.Rows[i].orbits
	}
	share, stderr = t.lots.Ratio(of)
	return share, math.Max(stderr, math.Sqrt2/2/orbits)
}

const (
	// shareWork is the number of bounces at effort 1, ShareBounces that of
	// each orbit. It does not depend on the effort, for the share does on it.
	shareWork    = 2e7
	ShareBounces = 2000
)

// MeasureSharing tells the chaotic orbits of the table off mirrors; effort
// multiplies their number, each is the number of bounces of one. The table
// must be one that has a tangent map.
func MeasureSharing(tr *sim.Tracer, run measure.Runner, effort float64, each int) (*SharingTally, error) {
	bare, starts, err := offMirrors(tr, run, shareWork*effort/float64(each))
	if err != nil {
		return nil, err
	}
	ran, err := run(Sharing{Tracer: bare, Starts: starts, Each: each})
	if err != nil {
		return nil, err
	}
	return ran.(*SharingTally), nil
}
