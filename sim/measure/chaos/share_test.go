package chaos_test

import (
	"cavitywright/sim/measure/chaos"
	"cavitywright/sim/run/trial"
	"math"
	"strings"
	"testing"

	"cavitywright/sim"
)

// sharing tells chaotic orbits with a seed.
func sharing(t testing.TB, tr *sim.Tracer, seed uint64, effort float64, each int) *chaos.SharingTally {
	t.Helper()
	s, err := chaos.MeasureSharing(tr, trial.Runner(tr, seed, 0), effort, each)
	if err != nil {
		t.Fatal(err)
	}
	if s.Stops[sim.Lost] != 0 {
		t.Fatalf("%d orbits were lost", s.Stops[sim.Lost])
	}
	return s
}

// The chaotic shares of a mushroom of cap 1, stem half-width 0.5 and stem
// length 1 (closed; Bunimovich, Chaos 11, 802 (2001)).
const (
	mushroomSection = 0.68415314446234185
	mushroomEnergy  = 0.76109159527619811
)

// TestShares holds chaotic shares to closed and independent values (the latter
// computed with another program and method, with the error stated). Averages
// have a slack of their own: on a mushroom's regular orbits they converge as a
// power of the number of bounces, for what is averaged has kinks there.
func TestShares(t *testing.T) {
	const byAverages = 0.015
	for _, c := range []struct {
		name                 string
		tracer               *sim.Tracer
		effort               float64
		each                 int
		section, energy      float64 // energy 0 where no value is stated
		slack, averagesSlack float64
	}{
		{"mushroom", trial.Traced(t, "mushroom", []float64{1, 0.5, 1}), 0.25, 2000, mushroomSection, mushroomEnergy, 0.001, byAverages},
		{"limaçon 0.43", trial.Traced(t, "limacon", []float64{1, 0.43}), 0.2, 2000, 0.992, 0, 0.002, byAverages},
		{"stadium", trial.Traced(t, "stadium", []float64{1, 1}), 0.05, 2000, 1, 1, 0.001, 0.001},
		{"cut disc", trial.Traced(t, "cut-disc", []float64{1, 0.5}), 0.05, 2000, 1, 1, 0, 0.001},
		// Integrable ones, which the reading would not even measure: near the
		// separatrix the averages converge late.
		{"ellipse", trial.Traced(t, "ellipse", []float64{2, 1}), 0.05, 2000, 0, 0, 0, 0.04},
		{"disc", trial.Traced(t, "disc", []float64{1}), 0.02, 2000, 0, 0, 0, 0.01},
		{"disc as limaçon", trial.Traced(t, "limacon", []float64{1, 0}), 0.1, 2000, 0, 0, 0, 0.01},
	} {
		s := sharing(t, c.tracer, 21, c.effort, c.each)
		share, err := s.Section(chaos.ByGrowth)
		other, otherErr := s.Section(chaos.ByAverages)
		energy, energyErr := s.Energy(chaos.ByGrowth)
		t.Logf("%s: section %.5f ± %.5f, by averages %.5f ± %.5f; energy %.5f ± %.5f; %d bounces",
			c.name, share, err, other, otherErr, energy, energyErr, s.Walked)
		if math.Abs(share-c.section) > 3*err+c.slack || err > 0.005 {
			t.Errorf("%s: the share of the section is %g ± %g, want %g", c.name, share, err, c.section)
		}
		if math.Abs(other-c.section) > 3*otherErr+c.averagesSlack {
			t.Errorf("%s: the share of the section by averages is %g ± %g, want %g", c.name, other, otherErr, c.section)
		}
		if (c.energy != 0 || c.section == 0) && math.Abs(energy-c.energy) > 3*energyErr+c.slack {
			t.Errorf("%s: the share of the energy surface is %g ± %g, want %g", c.name, energy, energyErr, c.energy)
		}
	}
}

// TestShareByBounces wants the share of a limaçon of eps 0.30 to grow with the
// bounces used as an independent program has it: 0.64 at 200, 0.78 at 5000,
// each ± 0.01.
func TestShareByBounces(t *testing.T) {
	tr := trial.Traced(t, "limacon", []float64{1, 0.3})
	for _, c := range []struct {
		each         int
		effort, want float64
	}{{200, 0.3, 0.64}, {5000, 1.1, 0.78}} {
		if testing.Short() && c.each > 1000 {
			continue
		}
		s := sharing(t, tr, 31, c.effort, c.each)
		share, err := s.Section(chaos.ByGrowth)
		before, _ := s.SectionAt(chaos.ByGrowth, 1)
		t.Logf("after %d bounces %.4f ± %.4f (after half of them %.4f)", c.each, share, err, before)
		if math.Abs(share-c.want) > 0.01+2*err || err > 0.01 {
			t.Errorf("after %d bounces the share is %g ± %g, want %g", c.each, share, err, c.want)
		}
		if before > share {
			t.Errorf("after half of %d bounces the share is larger: %g", c.each, before)
		}
	}
	if s := taken(t, tr, "chaotic-share-section", 0.5); !strings.Contains(s.Note, "2000 bounces an orbit") || !strings.Contains(s.Note, "still drifting") {
		t.Errorf("the note is %q", s.Note)
	}
	if s := taken(t, trial.Traced(t, "cut-disc", []float64{1, 0.5}), "chaotic-share-section", 0.02); strings.Contains(s.Note, "drifting") {
		t.Errorf("a share of 1 has the note %q", s.Note)
	}
}

// TestShareErrors wants the truth within two errors for nine seeds of ten.
func TestShareErrors(t *testing.T) {
	tr := trial.Traced(t, "mushroom", []float64{1, 0.5, 1})
	const seeds, each = 40, 1000
	inside, section, energy := 0, 0.0, 0.0
	for seed := range uint64(seeds) {
		s := sharing(t, tr, 100+seed, 0.01, each)
		share, err := s.Section(chaos.ByGrowth)
		x := (share - mushroomSection) / err
		share, err = s.Energy(chaos.ByGrowth)
		y := (share - mushroomEnergy) / err
		section, energy = section+x*x/seeds, energy+y*y/seeds
		for _, z := range []float64{x, y} {
			if math.Abs(z) < 2 {
				inside++
			}
		}
	}
	t.Logf("%d of %d within two errors, mean squares %.2f and %.2f", inside, 2*seeds, section, energy)
	// The mean square of 40 normal numbers lies in 0.4 to 1.8 but for 3 in 1000.
	if inside < 2*seeds*9/10 || min(section, energy) < 0.4 || max(section, energy) > 1.8 {
		t.Errorf("%d of %d lie within two errors, and the mean squares are %.2f and %.2f", inside, 2*seeds, section, energy)
	}
}
