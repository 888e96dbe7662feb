package chaos_test

import (
	"math"
	"slices"
	"testing"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/chaos"
	"cavitywright/sim/run/trial"
	"cavitywright/table"
)

// mapped is a filled map of a field by name.
func mapped(t testing.TB, tr *sim.Tracer, name string, n, bounces, workers int) figure.Grid {
	t.Helper()
	f, err := chaos.NewField(name, tr, bounces, figure.Linear)
	if err != nil {
		t.Fatal(err)
	}
	m := measure.NewMosaic(tr.Table(), f, table.WholeSection(), n, n)
	if err := m.Fill(trial.Runner(tr, 1, workers)); err != nil {
		t.Fatal(err)
	}
	return m.Figure(nil, "")
}

// TestGrowthDisc holds finite-time stretching to its closed form on a disc:
// after n bounces the tangent map is a shear by n k, k = 2 R cos chi / l with
// the mean chord l = pi R / 2, and its larger singular value exp(asinh(n k/2)).
func TestGrowthDisc(t *testing.T) {
	const n, bounces = 24, 150
	f := mapped(t, trial.Traced(t, "disc", []float64{3}), "growth", n, bounces, 0)
	for i, v := range f.Values {
		p := 2*(float64(i/n)+0.5)/n - 1
		k := 4 / math.Pi * math.Sqrt(1-p*p)
		if want := math.Asinh(bounces*k/2) / bounces; math.Abs(v-want) > 1e-9 {
			t.Fatalf("at p = %g the stretching is %g, want %g", p, v, want)
		}
	}
}

// TestGrowthStadium wants the mean of the map of a stadium to be its exponent
// per bounce, 0.93750 (independent, 1e10 bounces), up to the start's own share
// of some 2/n.
func TestGrowthStadium(t *testing.T) {
	const bounces = 300
	f := mapped(t, trial.Traced(t, "stadium", []float64{1, 1}), "growth", 60, bounces, 0)
	sum := 0.0
	for _, v := range f.Values {
		sum += v
	}
	if mean := sum / float64(len(f.Values)); math.Abs(mean-0.93750) > 2.0/bounces+0.005 {
		t.Errorf("the mean of the map is %g, want 0.9375", mean)
	}
}

// TestMapWorkers wants equal bits from any number of workers.
func TestMapWorkers(t *testing.T) {
	tr := trial.Traced(t, "limacon", []float64{1, 0.3})
	for _, name := range []string{"growth", "averages"} {
		one := mapped(t, tr, name, 40, 100, 1)
		if many := mapped(t, tr, name, 40, 100, 5); !slices.Equal(one.Values, many.Values) {
			t.Errorf("the map of %s depends on the workers", name)
		}
	}
}

// TestMapKinds wants the two fields to tell the same cells apart: on a mushroom
// of cap 1, stem half-width 0.5 and stem length 1 the chaotic ones are 0.684153
// of the section (closed; Bunimovich, Chaos 11, 802 (2001)).
func TestMapKinds(t *testing.T) {
	tr := trial.Traced(t, "mushroom", []float64{1, 0.5, 1})
	const n, bounces = 80, 800
	growth, digits := mapped(t, tr, "growth", n, bounces, 0), mapped(t, tr, "averages", n, bounces, 0)
	agree, chaotic := 0, 0
	for i, v := range growth.Values {
		is := v*bounces > chaos.ChaosPower*math.Log(bounces)
		if is {
			chaotic++
		}
		if is == (digits.Values[i] < math.Log10(16*bounces)) {
			agree++
		}
	}
	share := float64(chaotic) / (n * n)
	t.Logf("share %.4f, %d of %d cells agree", share, agree, n*n)
	if math.Abs(share-mushroomSection) > 2*math.Sqrt(0.25)/n || agree < 97*n*n/100 {
		t.Errorf("the chaotic share of the map is %g, want %g; %d of %d cells agree", share, mushroomSection, agree, n*n)
	}
}
