package sheet_test

import (
	"math"
	"strings"
	"testing"

	"cavitywright/sim/figure"
	"cavitywright/sim/measure/sheet"
	"cavitywright/sim/run/trial"
)

// TestSheet holds a stadium's page to what the table is: dimensions 4 by 2 with
// the radius written once, area and perimeter in closed form among the
// readings, a portrait, the curvature, and the cautions.
func TestSheet(t *testing.T) {
	tr := trial.Traced(t, "stadium", []float64{1, 1})
	s, err := sheet.Of(sheet.Job{Tracer: tr, Runner: trial.Runner(tr, 1, 0), Effort: 1e-3, Program: "Program 9"})
	if err != nil {
		t.Fatal(err)
	}
	if len(s.Rows) != 3 || s.Title != "Untitled table" {
		t.Fatalf("%d rows under %q", len(s.Rows), s.Title)
	}
	labels := map[string]int{}
	for _, l := range s.Rows[0].Blocks[0].Show.(figure.Paths).Labels {
		labels[l.Text]++
	}
	if labels["4 mm"] != 1 || labels["2 mm"] != 1 || labels["R 1 mm"] != 1 || len(labels) != 3 {
		t.Errorf("the drawing says %v", labels)
	}
	found := 0
	for _, r := range s.Rows[0].Blocks[1].Show.(figure.Scalars).Rows {
		switch r.Name {
		case "area":
			found++
			if math.Abs(r.Value-(4+math.Pi)) > 1e-11 {
				t.Errorf("area %g", r.Value)
			}
		case "perimeter":
			found++
			if math.Abs(r.Value-(4+2*math.Pi)) > 1e-11 {
				t.Errorf("perimeter %g", r.Value)
			}
		}
	}
	if found != 2 {
		t.Error("area and perimeter are not among the readings")
	}
	if sets := s.Rows[1].Blocks[0].Show.(figure.Dots).Sets; len(sets) == 0 {
		t.Error("the portrait is empty")
	}
	foot := strings.Join(s.Foot, "\n")
	for _, want := range []string{"Rays only", "safety rules", "licensed staff", "Program 9"} {
		if !strings.Contains(foot, want) {
			t.Errorf("the foot lacks %q", want)
		}
	}
	if strings.Contains(foot, "laser") {
		t.Error("a mirror plate warns of lasers")
	}
}
