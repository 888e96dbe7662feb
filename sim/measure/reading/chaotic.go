package reading

import (
	"fmt"
	"math"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/chaos"
)

func chaoticSection(b bench) (figure.Scalar, error) {
	return b.chaotic("chaotic-share-section", (*chaos.SharingTally).Section, "starts even in ds dp")
}

func chaoticEnergy(b bench) (figure.Scalar, error) {
	return b.chaotic("chaotic-share-energy", (*chaos.SharingTally).Energy, "starts even on the energy surface")
}

// chaotic is a chaotic share, by growth.
func (b bench) chaotic(name string, share func(*chaos.SharingTally, chaos.Method) (float64, float64), starts string) (figure.Scalar, error) {
	if why := chaos.Integrable(b.tracer.Table()); why != "" {
		return figure.Scalar{Unit: "1", Note: why + b.asMirrors()}, nil
	}
	t, err := b.sharing()
	if err != nil {
		return figure.Scalar{}, err
	}
	s := figure.Scalar{Unit: "1", Bounces: t.Walked}
	if s.Value, s.StdErr = share(t, chaos.ByGrowth); math.IsNaN(s.Value) {
		return s, &measure.NotMeasured{Name: name, Why: noneFollowed}
	}
	other, otherErr := share(t, chaos.ByAverages)
	s.Note = fmt.Sprintf("%s; by growth over %d bounces an orbit, %s by weighted Birkhoff averages", starts, chaos.ShareBounces, figure.Sentence(other, otherErr))
	if t.Drifts(chaos.ByGrowth) {
		before, _ := t.SectionAt(chaos.ByGrowth, 1)
		s.Note += fmt.Sprintf("; still drifting: %.5f of the section over %d bounces", before, chaos.ShareBounces/2)
	}
	s.Note += b.asMirrors() + t.Stops.Remark()
	return s, nil
}

func lyapunovPerLength(b bench) (figure.Scalar, error) {
	return b.lyapunov("lyapunov-per-length", "1/"+b.unit(), (*chaos.StretchingTally).PerLength, sim.MeanChord(b.tracer.Table()))
}

func lyapunovPerBounce(b bench) (figure.Scalar, error) {
	return b.lyapunov("lyapunov-per-bounce", "1/bounce", (*chaos.StretchingTally).PerBounce, 1)
}

// lyapunov is the exponent by a clock that advances by step a bounce.
func (b bench) lyapunov(name, unit string, rate func(*chaos.StretchingTally) (float64, float64), step float64) (figure.Scalar, error) {
	if why := chaos.Integrable(b.tracer.Table()); why != "" {
		return figure.Scalar{Unit: unit, Note: why + b.asMirrors()}, nil
	}
	t, err := b.stretching()
	if err != nil {
		return figure.Scalar{}, err
	}
	s := figure.Scalar{Unit: unit, Bounces: t.Walked}
	all := t.Chaotic + t.Regular
	if all == 0 {
		return s, &measure.NotMeasured{Name: name, Why: noneFollowed}
	}
	horizon := chaos.Patience * (chaos.StretchSkip + chaos.StretchBounces)
	if t.Chaotic < chaos.StretchOrbits {
		s.StdErr = chaos.ChaosPower * math.Log(float64(horizon)) / float64(horizon) / step
		s.Note = fmt.Sprintf("%d of %d orbits are chaotic over %d bounces, too few; the error is the least rate that would show", t.Chaotic, all, horizon)
	} else {
		s.Value, s.StdErr = rate(t)
		s.Note = fmt.Sprintf("starts even in ds dp; %d bounces of each of the %d of %d orbits that are chaotic within %d", chaos.StretchBounces, t.Chaotic, all, horizon)
	}
	if t.Late > 0 {
		s.Note += fmt.Sprintf("; %d of them stuck for half of these, and as many may be missed, which the error takes in", t.Late)
	}
	s.Note += b.asMirrors() + t.Stops.Remark()
	return s, nil
}

const noneFollowed = "every orbit met a corner or touched the wall along its tangent"

// asMirrors says, as the end of a note, that coats were disregarded.
func (b bench) asMirrors() string {
	if chaos.BareMirrors(b.tracer.Table()) {
		return ""
	}
	return "; all walls taken as mirrors"
}
