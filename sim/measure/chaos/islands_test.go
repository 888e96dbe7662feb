package chaos_test

import (
	"math"
	"strings"
	"testing"

	"cavitywright/sim"
	"cavitywright/sim/measure/chaos"
	"cavitywright/sim/run/trial"
)

func survey(t testing.TB, tr *sim.Tracer, n, each int) *chaos.Survey {
	t.Helper()
	s, err := chaos.NewSurvey(tr, trial.Runner(tr, 3, 0), n, n, each)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// TestIslands finds the islands that are known: those of the axis orbit of a
// limaçon of eps 0.43, a chain of two at s/L = 0 and 1/2 (elliptic, for its
// trace is -2.45 by the other diameter's 3.51: closed); that of a mushroom's cap
// (closed; Bunimovich, Chaos 11, 802 (2001)); none on a stadium.
func TestIslands(t *testing.T) {
	l := survey(t, trial.Traced(t, "limacon", []float64{1, 0.4}), 70, 400)
	if len(l.Islands) < 2 || l.Islands[0].Chain != l.Islands[1].Chain || l.Islands[0].Period != 2 || l.Seas != 1 {
		t.Fatalf("the limaçon's islands are %+v, seas %d", l.Islands, l.Seas)
	}
	for _, i := range l.Islands[:2] {
		x := i.S / l.Table.Length()
		if d := math.Abs(2*x - math.Round(2*x)); d > 0.01 || math.Abs(i.P) > 0.01 || i.Winds || i.Err <= 0 {
			t.Errorf("an island lies at s/L = %g, p = %g: %+v", x, i.P, i)
		}
	}
	m := survey(t, trial.Traced(t, "mushroom", []float64{1, 0.5, 1}), 60, 500)
	if len(m.Islands) == 0 || math.Abs(m.Regular-(1-mushroomSection)) > 3*m.Islands[0].Err || m.Islands[0].Share < 0.9*m.Regular {
		t.Errorf("the mushroom's regular share is %g, its islands %+v", m.Regular, m.Islands)
	}
	if s := survey(t, trial.Traced(t, "stadium", []float64{1, 1}), 60, 500); len(s.Islands) != 0 || s.Seas != 1 || s.Regular > 0.002 {
		t.Errorf("the stadium has the islands %+v, seas %d", s.Islands, s.Seas)
	}
	// Two loops: what lies beside each other across the start of a loop is not
	// connected, and each loop is closed upon itself.
	r := survey(t, ring(t, 0), 40, 200)
	if len(r.Islands) < 2 {
		t.Errorf("the ring has the islands %+v", r.Islands)
	}
	for _, i := range r.Islands {
		if !i.Winds {
			t.Errorf("a band of the ring does not wind: %+v", i)
		}
	}
}

// TestVerdict wants one plain sentence that says what is known, with what makes
// it uncertain.
func TestVerdict(t *testing.T) {
	for _, c := range []struct {
		name        string
		tr          *sim.Tracer
		effort      float64
		want, never []string
	}{
		{"stadium", trial.Traced(t, "stadium", []float64{1, 1}), 0.05, []string{"One chaotic sea covers the whole section, at least 9", "no island of more than", "orbits of 2000"}, []string{"drifts", "islands remain"}},
		{"limaçon 0.4", trial.Traced(t, "limacon", []float64{1, 0.4}), 0.2, []string{"One chaotic sea covers 9", " ± ", "islands remain", "at s/L = 0.", "p = 0"}, nil},
		{"limaçon 0.3", trial.Traced(t, "limacon", []float64{1, 0.3}), 0.4, []string{"islands remain in", "a band around the wall at p = "}, nil},
		{"disc as limaçon", trial.Traced(t, "limacon", []float64{1, 0}), 0.02, []string{"No chaos was found: all but at most"}, []string{"sea", "island"}},
		{"disc", trial.Traced(t, "disc", []float64{1}), 1, []string{"Integrable: the table is integrable, for its circles share a centre"}, []string{"bounces"}},
		{"square with a hole", trial.Traced(t, "rectangle", []float64{1, 1}, trial.Opening(0, 0.1, 0.2)), 1, []string{"Integrable: all walls are straight", "All walls were taken as mirrors."}, nil},
	} {
		var shared *chaos.SharingTally
		var s *chaos.Survey
		if chaos.Integrable(c.tr.Table()) == "" {
			shared = sharing(t, c.tr, 7, c.effort, chaos.ShareBounces)
			s = survey(t, c.tr, 60, 400)
		}
		text := chaos.Verdict(c.tr.Table(), shared, s)
		t.Logf("%s: %s", c.name, text)
		for _, w := range c.want {
			if !strings.Contains(text, w) {
				t.Errorf("%s: the verdict %q lacks %q", c.name, text, w)
			}
		}
		for _, w := range c.never {
			if strings.Contains(text, w) {
				t.Errorf("%s: the verdict %q has %q", c.name, text, w)
			}
		}
	}
}
