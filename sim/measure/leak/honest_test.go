package leak_test

import (
	"math"
	"testing"

	"cavitywright/sim/measure/leak"
	"cavitywright/sim/run/trial"
	"cavitywright/table/wall"
)

// TestErrorsHonest takes each number with 24 seeds: the numbers scatter about
// their mean as their standard errors say. The root mean square of 24 scores
// lies within 0.7 and 1.4 but for one time in a hundred (chi squared on 23); the
// errors themselves come from some 33 lattices.
func TestErrorsHonest(t *testing.T) {
	if testing.Short() {
		t.Skip("72 runs")
	}
	const seeds = 24
	disc := trial.Traced(t, "limacon", []float64{1, 0.43}, glass(3.3, wall.TM))
	hole := trial.Traced(t, "cut-disc", []float64{1, 0.5}, trial.Opening(0, 0.4, 0.6))
	shut := trial.Traced(t, "cut-disc", []float64{1, 0.5})
	values, errs := map[string][]float64{}, map[string][]float64{}
	for seed := range uint64(seeds) {
		add := func(name string, v, err float64) {
			values[name], errs[name] = append(values[name], v), append(errs[name], err)
		}
		far, err := leak.MeasureEmission(disc, trial.Runner(disc, seed, 0), leak.Seeding{From: leak.Trapped}, leak.EmissionPlan{Rays: 2500})
		if err != nil {
			t.Fatal(err)
		}
		share, e := far.Share(0, math.Pi/6)
		add("window share", share, e)
		cosine, e := far.MeanCosine()
		add("mean cosine", cosine, e)
		fall, err := leak.MeasureFall(hole, trial.Runner(hole, seed, 0), leak.Seeding{}, 120, 0.02)
		if err != nil {
			t.Fatal(err)
		}
		rate, e := fall.Between(20, 80)
		add("rate between paths", rate, e)
		dwell, e := fall.Dwell()
		add("mean dwell", dwell, e)
		s, err := leak.MeasureScattering(hole, trial.Runner(hole, seed, 0), 0.01)
		if err != nil {
			t.Fatal(err)
		}
		mean, e := s.Dwell(0)
		add("dwell through the opening", mean, e)
		p, err := leak.MeasurePlaces(shut, trial.Runner(shut, seed, 0), leak.PlacementPlan{Widths: []float64{0.3}, Places: 20, Effort: 0.1})
		if err != nil {
			t.Fatal(err)
		}
		add("rate of a place", p.Rates[3], p.Errs[3])
	}
	for name, v := range values {
		mean, square := 0.0, 0.0
		for _, x := range v {
			mean += x / seeds
		}
		for i, x := range v {
			square += math.Pow((x-mean)/errs[name][i], 2) / (seeds - 1)
		}
		t.Logf("%s: %.5g, scores of %.2f", name, mean, math.Sqrt(square))
		if z := math.Sqrt(square); z < 0.7 || z > 1.4 {
			t.Errorf("%s: the numbers scatter by %.2f of their errors", name, z)
		}
	}
}
