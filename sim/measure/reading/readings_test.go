package reading_test

import (
	"cavitywright/sim/measure/leak"
	"cavitywright/sim/measure/reading"
	"cavitywright/sim/run/trial"
	"errors"
	"math"
	"slices"
	"testing"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/table"
	"cavitywright/table/wall"
)

// taken takes readings of a table by name.
func taken(t *testing.T, tr *sim.Tracer, workers int, names ...string) map[string]figure.Scalar {
	t.Helper()
	wanted, err := reading.Wanted(tr.Table(), names)
	if err != nil {
		t.Fatal(err)
	}
	all := map[string]figure.Scalar{}
	for _, w := range wanted {
		s, err := w.Take(tr, trial.Runner(tr, 5, workers), 0.05, 5)
		if err != nil {
			t.Fatalf("%s: %v", w.Name, err)
		}
		if s.Name != w.Name || s.Seed != 5 || s.Unit == "" || s.Note == "" {
			t.Errorf("%s is incomplete: %+v", w.Name, s)
		}
		if (s.StdErr == 0) != (w.Kind == reading.Exact) || (s.Bounces == 0) != (w.Kind == reading.Exact) {
			t.Errorf("%s has the error %g on %d bounces", w.Name, s.StdErr, s.Bounces)
		}
		all[w.Name] = s
	}
	return all
}

// TestReadingsStadium compares with the closed forms of a stadium of
// half-length 1 and radius 1.
func TestReadingsStadium(t *testing.T) {
	got := taken(t, trial.Traced(t, "stadium", []float64{1, 1}), 0)
	for name, want := range map[string]float64{
		"perimeter": 10.283185307179586, "area": 7.1415926535897932, "mean-chord-exact": 2.1818117971465539,
	} {
		if s := got[name]; math.Abs(s.Value-want) > 1e-12*want {
			t.Errorf("%s is %.16g, want %.16g", name, s.Value, want)
		}
	}
	c := got["mean-chord"]
	if math.Abs(c.Value-2.1818117971465539) > 3*c.StdErr || c.StdErr > 0.01 {
		t.Errorf("mean-chord is %g ± %g, want 2.1818", c.Value, c.StdErr)
	}
	if len(got) != 11 {
		t.Errorf("a closed table has %d readings, want 11", len(got))
	}
	for name, unit := range map[string]string{"perimeter": "mm", "area": "mm²", "mean-chord": "mm"} {
		if got[name].Unit != unit {
			t.Errorf("%s is in %q, want %q", name, got[name].Unit, unit)
		}
	}
}

// TestMeanChordLeaky wants pi A / L on a table that rays leave, too: the law
// holds for uniform ds dp whatever the walls do afterwards.
func TestMeanChordLeaky(t *testing.T) {
	tr := trial.Traced(t, "cut-disc", []float64{1, 0.5}, trial.Opening(0, 0.2, 0.9))
	c := taken(t, tr, 0, "mean-chord")["mean-chord"]
	if want := sim.MeanChord(tr.Table()); math.Abs(c.Value-want) > 3*c.StdErr {
		t.Errorf("mean-chord is %g ± %g, want %g", c.Value, c.StdErr, want)
	}
}

// TestDwell wants pi A / W (closed; common practice) on tables all of whose
// section is reached, and less where a part is out of reach.
func TestDwell(t *testing.T) {
	for name, tr := range map[string]*sim.Tracer{
		"cut disc":         trial.Traced(t, "cut-disc", []float64{1, 0.5}, trial.Opening(0, 0.4, 0.6)),
		"cut disc, arc":    trial.Traced(t, "cut-disc", []float64{1, 0.5}, trial.Opening(1, 0.1, 0.15), trial.Opening(1, 0.12, 0.2)),
		"square with disc": trial.Traced(t, "square-with-disc", []float64{2, 0.5}, trial.Opening(0, 0, 0.2), trial.Opening(4, 0.1, 0.3)),
	} {
		_, width := leak.Openings(tr.Table())
		want := math.Pi * tr.Table().Area() / width
		s := taken(t, tr, 0, "mean-dwell")["mean-dwell"]
		t.Logf("%s: %.4f ± %.4f, want %.4f (%s)", name, s.Value, s.StdErr, want, s.Note)
		if math.Abs(s.Value-want) > 3*s.StdErr || s.StdErr > 0.02*want {
			t.Errorf("%s: the mean dwell is %g ± %g, want %g", name, s.Value, s.StdErr, want)
		}
	}
	// The cap's island of a mushroom cannot be reached from the stem's foot.
	tr := trial.Traced(t, "mushroom", []float64{1, 0.5, 1}, trial.Opening(0, 0, 1))
	_, width := leak.Openings(tr.Table())
	s := taken(t, tr, 0, "mean-dwell")["mean-dwell"]
	// Its chaotic share of the energy surface (closed; Bunimovich, Chaos 11,
	// 802 (2001)) is what rays from the foot visit.
	want := 0.76109159527619811 * math.Pi * tr.Table().Area() / width
	if math.Abs(s.Value-want) > 3*s.StdErr {
		t.Errorf("mushroom: the mean dwell is %g ± %g, want %g", s.Value, s.StdErr, want)
	}
}

// TestOpenings wants a coat that covers an opening to close it, and the bare
// wall to count.
func TestOpenings(t *testing.T) {
	mirror := func(from, to float64) table.Coat { return table.Coat{Side: 0, From: from, To: to, Law: wall.Mirror{}} }
	tr := trial.Traced(t, "rectangle", []float64{4, 2}, trial.Opening(0, 0.25, 0.75), mirror(0.5, 0.6), trial.Opening(2, 0.9, 1))
	doors, width := leak.Openings(tr.Table())
	if len(doors) != 3 || math.Abs(width-(1+0.6+0.4)) > 1e-12 {
		t.Errorf("there are %d openings of %g together, want 3 of 2: %v", len(doors), width, doors)
	}
}

var chaosReadings = []string{"lyapunov-per-length", "lyapunov-per-bounce", "chaotic-share-section", "chaotic-share-energy"}

// TestWanted holds the list of readings to the tables that have them, and the
// refusals to their kinds.
func TestWanted(t *testing.T) {
	glass := table.Coat{Side: table.AllSides, To: 1, Law: wall.Dielectric{Index: 3.3, Outside: 1}}
	offMirrors := append(slices.Clone(chaosReadings), "free-path-variance", "flight-correlation")
	far := []string{"window-share", "back-share", "lobe-width", "mean-cosine", "far-field-entropy"}
	for _, c := range []struct {
		name string
		tr   *sim.Tracer
		want []string
	}{
		{"closed", trial.Traced(t, "disc", []float64{1}), append([]string{"perimeter", "area", "mean-chord", "mean-chord-exact"}, offMirrors...)},
		{"chaotic", trial.Traced(t, "stadium", []float64{1, 1}), []string{"perimeter", "area", "mean-chord", "mean-chord-exact", "lyapunov-per-length", "lyapunov-per-bounce", "precision-horizon", "chaotic-share-section", "chaotic-share-energy", "free-path-variance", "flight-correlation"}},
		{"posts", trial.Traced(t, "three-posts", []float64{1, 6}), append([]string{"perimeter", "escape-rate"}, far...)},
		{"open", trial.Traced(t, "disc", []float64{1}, trial.Opening(0, 0, 0.1)), append([]string{"perimeter", "area", "mean-chord", "mean-chord-exact", "escape-rate", "mean-dwell"}, append(slices.Clone(offMirrors), far...)...)},
		{"glass", trial.Traced(t, "disc", []float64{1}, glass), append([]string{"perimeter", "area", "mean-chord", "mean-chord-exact", "escape-rate"}, append(slices.Clone(offMirrors), far...)...)},
		{"rough", trial.Traced(t, "disc", []float64{1}, table.Coat{Side: 0, To: 1, Law: wall.Rough{Share: 1}}), []string{"perimeter", "area", "mean-chord", "mean-chord-exact", "free-path-variance"}},
	} {
		all, err := reading.Wanted(c.tr.Table(), nil)
		var got []string
		for _, r := range all {
			got = append(got, r.Name)
		}
		if err != nil || !slices.Equal(got, c.want) {
			t.Errorf("%s: the readings are %v (%v), want %v", c.name, got, err, c.want)
		}
	}
	disc := trial.Traced(t, "disc", []float64{1}).Table()
	_, err := reading.Wanted(disc, []string{"perimeter", "escape-rate"})
	if no := (*measure.NotMeasured)(nil); !errors.As(err, &no) {
		t.Errorf("the escape rate of a closed disc is refused with %v", err)
	}
	_, err = reading.Wanted(disc, []string{"weight"})
	if no := (*reading.NoReading)(nil); !errors.As(err, &no) {
		t.Errorf("an unknown reading is refused with %v", err)
	}
}

// TestReadingsWorkers wants equal bits from any number of workers.
func TestReadingsWorkers(t *testing.T) {
	rough := table.Coat{Side: 1, To: 1, Law: wall.Rough{Share: 0.3}}
	tr := trial.Traced(t, "cut-disc", []float64{1, 0.5}, trial.Opening(0, 0.1, 0.9), rough)
	one := taken(t, tr, 1)
	for _, n := range []int{2, 7} {
		for name, s := range taken(t, tr, n) {
			if s != one[name] {
				t.Errorf("%d workers give %+v, one gives %+v", n, s, one[name])
			}
		}
	}
}

// TestChaosWorkers wants equal bits from any number of workers.
func TestChaosWorkers(t *testing.T) {
	tr := trial.Traced(t, "mushroom", []float64{1, 0.5, 1})
	one := taken(t, tr, 1, chaosReadings...)
	for name, s := range taken(t, tr, 5, chaosReadings...) {
		if s != one[name] {
			t.Errorf("5 workers give %+v, one gives %+v", s, one[name])
		}
	}
}
