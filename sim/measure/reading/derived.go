package reading

import (
	"errors"
	"fmt"
	"math"

	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/chaos"
	"cavitywright/table"
)

// lyapunovPerSecond is the exponent per length at the speed given.
func lyapunovPerSecond(b bench) (figure.Scalar, error) {
	if b.speed == 0 {
		return figure.Scalar{}, &measure.NotMeasured{Name: "lyapunov-per-second", Why: "it needs a speed, and none is given"}
	}
	s, err := lyapunovPerLength(b)
	if err != nil {
		if no := (*measure.NotMeasured)(nil); errors.As(err, &no) {
			err = &measure.NotMeasured{Name: "lyapunov-per-second", Why: no.Why}
		}
		return s, err
	}
	t := b.tracer.Table()
	n := index(t)
	k := float64(b.speed) / n / t.Design().Unit.Metres()
	s.Value, s.StdErr, s.Unit = s.Value*k, s.StdErr*k, "1/s"
	note := fmt.Sprintf("at %.9g m/s", float64(b.speed))
	if n != 1 {
		note += fmt.Sprintf(" by the index %g", n)
	}
	s.Note = note + "; " + s.Note
	return s, nil
}

// parts is why neighbouring rays do not part exponentially, "" where they may.
func parts(t *table.Table) string {
	if why := chaos.Mirrors(t); why != "" {
		return why
	}
	if chaos.Integrable(t) != "" {
		return "neighbouring rays part no faster than the path, and precision is lost as slowly"
	}
	return ""
}

// doubleBits is the number of binary digits of a double.
const doubleBits = 53

// precisionHorizon is where an error of half a unit in the last place has grown
// to the table's size.
func precisionHorizon(b bench) (figure.Scalar, error) {
	const name = "precision-horizon"
	t, err := b.stretching()
	if err != nil {
		return figure.Scalar{}, err
	}
	if t.Chaotic < chaos.StretchOrbits {
		return figure.Scalar{}, &measure.NotMeasured{Name: name, Why: "too few orbits are chaotic for an exponent"}
	}
	rate, stderr := t.PerBounce()
	all := doubleBits * math.Ln2
	return figure.Scalar{
		Value: all / rate, StdErr: all / rate * stderr / rate, Unit: "bounces", Bounces: t.Walked,
		Note: fmt.Sprintf("%.4g by the exponent per bounce; a single chaotic orbit means nothing beyond, averages over many do", all) + b.asMirrors() + t.Stops.Remark(),
	}, nil
}

func freePathVariance(b bench) (figure.Scalar, error) {
	t, err := b.paths()
	if err != nil {
		return figure.Scalar{}, err
	}
	s := figure.Scalar{Unit: b.unit() + "²", Bounces: t.Count}
	if s.Value, s.StdErr = t.Variance(); math.IsNaN(s.Value) {
		return s, &measure.NotMeasured{Name: "free-path-variance", Why: noneFollowed}
	}
	m, me := t.Mean()
	s.Note = fmt.Sprintf("starts even in ds dp; the mean is %s %s", figure.Sentence(m, me), b.unit()) + b.asMirrors() + t.Stops.Remark()
	return s, nil
}

// flightLags is how far flights are correlated.
const flightLags = 20

func flightCorrelation(b bench) (figure.Scalar, error) {
	t, err := b.flights()
	if err != nil {
		return figure.Scalar{}, err
	}
	s := figure.Scalar{Unit: "1", Bounces: t.Walked}
	if s.Value, s.StdErr = t.At(1); math.IsNaN(s.Value) {
		return s, &measure.NotMeasured{Name: "flight-correlation", Why: "no orbit could be followed, or all flights are alike"}
	}
	two, twoErr := t.At(2)
	s.Note = fmt.Sprintf("one bounce later; two bounces later %s; starts even in ds dp", figure.Sentence(two, twoErr)) + b.asMirrors() + t.Stops.Remark()
	return s, nil
}
