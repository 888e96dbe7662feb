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

// Bounces is what the opening of an orbit costs, as for Stretching: the tally
// follows the orbit itself.
func (m Sharing) Bounces() int { return m.Each / leads }

// Start is a point of a lattice.
func (m Sharing) Start(i int, _ func() float64) sim.Start {
	return sim.Start{State: m.Tracer.Uniform(m.Starts.At(i))}
}

// Tally is a *SharingTally.
func (m Sharing) Tally() measure.Tally {
	return &SharingTally{of: m, trail: newTrail(m.Tracer), birkhoff: newBirkhoff(m.Tracer, m.Each), lots: measure.Lots[lot]{Size: m.Starts.Points.Size()}}
}

// Method is a way to tell chaotic orbits from regular ones.
type Method uint8

// The methods.
const (
	ByGrowth   Method = iota
	ByHalf            // by the growth over half of the bounces
	ByAverages        // by weighted Birkhoff averages
)

const methods = int(ByAverages) + 1

// lot is a lattice's orbits: their number and path, and those of the chaotic
// ones.
type lot struct {
	orbits, path float64
	chaotic      [methods]float64
	chaoticPath  [methods]float64
}

func (l *lot) add(o *lot) {
	l.orbits += o.orbits
	l.path += o.path
	for m := range l.chaotic {
		l.chaotic[m] += o.chaotic[m]
		l.chaoticPath[m] += o.chaoticPath[m]
	}
}

// SharingTally is what is chaotic of each lattice.
type SharingTally struct {
	Stops    measure.Stops
	Walked   int64 // bounces
	of       Sharing
	trail    trail
	birkhoff birkhoff
	start    sim.State
	lots     measure.Lots[lot]
}

// Open begins orbit i.
func (t *SharingTally) Open(i int) { t.lots.Open(i) }

// Add takes the opening bounce; the rest is followed by Close.
func (t *SharingTally) Add(b *sim.Bounce) {
	if b.N == 0 {
		t.start = b.State
	}
}

// Close follows the orbit.
func (t *SharingTally) Close() {
	b := t.trail.open(t.start)
	t.birkhoff.open(&b)
	half := 0.0
	for b.Stop == sim.Going && b.N < t.of.Each {
		if b = t.trail.next(); b.Stop != sim.Going {
			break
		}
		t.birkhoff.add(&b)
		if b.N == t.of.Each/2 {
			half = t.trail.growth(&b)
		}
	}
	t.Walked += int64(b.N)
	if b.Stop != sim.Going {
		t.Stops[b.Stop]++
		return
	}
	row, path := t.lots.Last(), t.birkhoff.path
	row.orbits++
	row.path += path
	for m, is := range [methods]bool{
		ByGrowth:   exponential(t.trail.growth(&b), t.of.Each),
		ByHalf:     exponential(half, t.of.Each/2),
		ByAverages: t.birkhoff.digits() < agreeing(t.of.Each),
	} {
		if is {
			row.chaotic[m]++
			row.chaoticPath[m] += path
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
func (t *SharingTally) Section(by Method) (share, stderr float64) {
	return t.ratio(func(l *lot) (float64, float64) { return l.chaotic[by], l.orbits })
}

// Energy is the chaotic share of the energy surface: each start counts by the
// mean flight of its orbit.
func (t *SharingTally) Energy(by Method) (share, stderr float64) {
	return t.ratio(func(l *lot) (float64, float64) { return l.chaoticPath[by], l.path })
}

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
	bare, err := Mirrored(tr)
	if err != nil {
		return nil, err
	}
	starts, err := measure.DrawnLattices(bare, run, int(shareWork*effort/measure.Slowness(bare.Table())/float64(each)))
	if err != nil {
		return nil, err
	}
	ran, err := run(Sharing{Tracer: bare, Starts: starts, Each: each})
	if err != nil {
		return nil, err
	}
	return ran.(*SharingTally), nil
}
