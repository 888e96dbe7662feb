package reading

import (
	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/chaos"
	"cavitywright/sim/measure/leak"
)

// Taker takes readings of one table, one after another, and keeps the
// measurements that several readings are made from. It is for one goroutine.
type Taker struct {
	bench bench
	seed  uint64
}

// kept are the measurements that were made already.
type kept struct {
	stretching *chaos.StretchingTally
	sharing    *chaos.SharingTally
	paths      *measure.FreePathsTally
	flights    *measure.CorrelationTally
	momentum   *measure.CorrelationTally
	survey     *chaos.Survey
	farField   *leak.FarField
}

// NewTaker takes readings of the tracer's table. run knows the seed, which is
// only noted here; effort multiplies the number of bounces. speed is that of
// the waves or particles outside any body, in metres a second; 0 where none is
// known, and then there are no readings per second.
func NewTaker(tr *sim.Tracer, run measure.Runner, effort float64, seed uint64, speed Speed) *Taker {
	return &Taker{bench{tr, run, effort, speed, &kept{}}, seed}
}

// Take takes a reading, which must be Wanted on the table. The error is a
// *measure.NotMeasured where it comes out that there is no such number, or the
// runner's.
func (k *Taker) Take(r Reading) (figure.Scalar, error) {
	s, err := r.take(k.bench)
	s.Name, s.Seed = r.Name, k.seed
	return s, err
}

// At is a taker of the same measurements at another speed.
func (k *Taker) At(speed Speed) *Taker {
	next := *k
	next.bench.speed = speed
	return &next
}

// Stretching is the measurement of the exponent.
func (k *Taker) Stretching() (*chaos.StretchingTally, error) { return k.bench.stretching() }

// Sharing is that of the chaotic share.
func (k *Taker) Sharing() (*chaos.SharingTally, error) { return k.bench.sharing() }

// Paths is that of the flights between bounces.
func (k *Taker) Paths() (*measure.FreePathsTally, error) { return k.bench.paths() }

// Momentum is the correlation of p with itself some bounces later.
func (k *Taker) Momentum() (*measure.CorrelationTally, error) {
	b := k.bench
	return once(&b.kept.momentum, func() (*measure.CorrelationTally, error) {
		return chaos.MeasureCorrelation(b.tracer, b.run, b.effort, measure.Momentum, momentumLags)
	})
}

// momentumLags is how far p is correlated.
const momentumLags = 50

// Survey is the map of seas and islands.
func (k *Taker) Survey() (*chaos.Survey, error) { return k.bench.survey() }

// Verdict says in plain sentences what the table does.
func (k *Taker) Verdict() (string, error) {
	t := k.bench.tracer.Table()
	if chaos.Integrable(t) != "" {
		return chaos.Verdict(t, nil, nil), nil
	}
	shared, err := k.Sharing()
	if err != nil {
		return "", err
	}
	survey, err := k.Survey()
	if err != nil {
		return "", err
	}
	return chaos.Verdict(t, shared, survey), nil
}

func (b bench) stretching() (t *chaos.StretchingTally, err error) {
	return once(&b.kept.stretching, func() (*chaos.StretchingTally, error) {
		return chaos.MeasureStretching(b.tracer, b.run, b.effort)
	})
}

func (b bench) sharing() (*chaos.SharingTally, error) {
	return once(&b.kept.sharing, func() (*chaos.SharingTally, error) {
		return chaos.MeasureSharing(b.tracer, b.run, b.effort, chaos.ShareBounces)
	})
}

func (b bench) survey() (*chaos.Survey, error) {
	return once(&b.kept.survey, func() (*chaos.Survey, error) {
		return chaos.MeasureSurvey(b.tracer, b.run, b.effort)
	})
}

func (b bench) paths() (*measure.FreePathsTally, error) {
	return once(&b.kept.paths, func() (*measure.FreePathsTally, error) {
		return chaos.MeasurePaths(b.tracer, b.run, b.effort)
	})
}

func (b bench) flights() (*measure.CorrelationTally, error) {
	return once(&b.kept.flights, func() (*measure.CorrelationTally, error) {
		return chaos.MeasureCorrelation(b.tracer, b.run, b.effort, measure.Flight, flightLags)
	})
}

// once is what was kept, or what is measured now and kept.
func once[T any](at **T, take func() (*T, error)) (*T, error) {
	if *at == nil {
		t, err := take()
		if err != nil {
			return nil, err
		}
		*at = t
	}
	return *at, nil
}
