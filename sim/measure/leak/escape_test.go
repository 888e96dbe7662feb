package leak_test

import (
	"cavitywright/sim/measure/leak"
	"cavitywright/sim/run/trial"
	"errors"
	"math"
	"testing"

	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/table"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/table/wall"
)

func escape(t testing.TB, tr *sim.Tracer, seed uint64, effort float64) leak.EscapeRate {
	t.Helper()
	r, err := leak.MeasureEscape(tr, trial.Runner(tr, seed, 0), effort)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// TestEscapePublished holds the rate to published and independent values.
func TestEscapePublished(t *testing.T) {
	for _, c := range []struct {
		name   string
		tracer *sim.Tracer
		want   float64
		slack  float64 // of the value itself
		effort float64
		err    float64 // the relative error that the effort must reach
	}{
		// Gaspard and Rice, J. Chem. Phys. 90, 2225 (1989); Cvitanović and
		// Eckhardt, Phys. Rev. Lett. 63, 823 (1989).
		{"three posts, separation 6", trial.Traced(t, "three-posts", []float64{1, 6}), 0.4103384077693464893, 0, 0.07, 0.006},
		// An independent cycle expansion.
		{"three posts, separation 3", trial.Traced(t, "three-posts", []float64{1, 3}), 0.6779226895995361, 0, 0.07, 0.012},
		// An independent run of another program.
		{"cardioid with an opening", trial.CardioidHole(t), 0.014102, 0.00005, 0.1, 0.02},
		// A uniformly lossy mixing wall: (1 - R) / mean chord to leading order
		// in the loss, here 1e-3 (common practice); 2.18... is pi A / L.
		{"stadium, every bounce loses 1/1000", trial.Traced(t, "stadium", []float64{1, 1},
			table.Coat{Side: table.AllSides, To: 1, Law: wall.Lossy{Reflectivity: 0.999}}),
			0.001 / 2.1818117971465539, 0.001 * 0.01, 0.02, 0.02},
	} {
		r := escape(t, c.tracer, 11, c.effort)
		t.Logf("%s: %.6f ± %.6f, want %.6f, from %d to %d bounces", c.name, r.Rate, r.Err, c.want, r.From, r.To)
		if d := math.Abs(r.Rate - c.want); d > 3*r.Err+c.slack {
			t.Errorf("%s: %g ± %g, want %g", c.name, r.Rate, r.Err, c.want)
		}
		if r.Err > c.err*r.Rate {
			t.Errorf("%s: the error is %g of the rate, want at most %g", c.name, r.Err/r.Rate, c.err)
		}
	}
}

// TestEscapeErrorHonest counts in how many of 40 runs the truth lies within two
// standard errors; for the error of 32 lattices 38 are expected.
func TestEscapeErrorHonest(t *testing.T) {
	const runs, least = 40, 36
	if testing.Short() {
		t.Skip("80 runs")
	}
	for _, c := range []struct {
		name   string
		tracer *sim.Tracer
		want   float64
	}{
		{"separation 6", trial.Traced(t, "three-posts", []float64{1, 6}), 0.4103384077693464893},
		{"separation 3", trial.Traced(t, "three-posts", []float64{1, 3}), 0.6779226895995361},
	} {
		within, mean, square := 0, 0.0, 0.0
		for seed := range uint64(runs) {
			r := escape(t, c.tracer, seed, 0.007)
			if math.Abs(r.Rate-c.want) <= 2*r.Err {
				within++
			}
			mean += r.Rate / runs
			square += r.Err * r.Err
		}
		t.Logf("%s: %d of %d within two errors; mean %.5f ± %.5f", c.name, within, runs, mean, math.Sqrt(square)/runs)
		if within < least {
			t.Errorf("%s: the truth is within two standard errors in %d of %d runs, want at least %d", c.name, within, runs, least)
		}
		if d := math.Abs(mean - c.want); d > 3*math.Sqrt(square)/runs {
			t.Errorf("%s: the mean of all runs is off by %g, want at most %g", c.name, d, 3*math.Sqrt(square)/runs)
		}
	}
}

// TestEscapeForgets shows why the window begins late: at the first bounce the
// rate is wrong by more than a hundred errors, at the window it is not.
func TestEscapeForgets(t *testing.T) {
	tr := trial.Traced(t, "three-posts", []float64{1, 3})
	e := leak.Escape{Tracer: tr, Points: measure.NewFibonacci(30000), Marks: []int{1, 3, 6, 8}, Rate: 0.68, Flight: 1.15}
	for i := range 32 {
		e.Shifts = append(e.Shifts, measure.Shift{U: math.Mod(float64(i)*0.618, 1), V: math.Mod(float64(i)*0.414, 1)})
	}
	ran, err := trial.Runner(tr, 1, 0)(e)
	if err != nil {
		t.Fatal(err)
	}
	tally := ran.(*leak.EscapeTally)
	early, ok1 := tally.Decay(0, 1)
	late, ok2 := tally.Decay(2, 3)
	if !ok1 || !ok2 {
		t.Fatal("too little is left")
	}
	const want = 0.6779226895995361
	if (early.Rate-want)/early.Err < 20 {
		t.Errorf("from the first bounce on the rate is %g ± %g, the same as the late %g", early.Rate, early.Err, want)
	}
	if math.Abs(late.Rate-want) > 3*late.Err {
		t.Errorf("from the sixth bounce on the rate is %g ± %g, want %g", late.Rate, late.Err, want)
	}
}

// TestEscapeSlows holds the flag to tables whose survival is a power of time in
// the end (Bunimovich and Dettmann, Phys. Rev. Lett. 94, 100201 (2005) for the
// disc), and to one that is exponential.
func TestEscapeSlows(t *testing.T) {
	disc := trial.Traced(t, "disc", []float64{1}, trial.Opening(0, 0, 0.2/(2*math.Pi)))
	if r := escape(t, disc, 1, 0.05); !r.Slows() {
		t.Errorf("the disc falls at %g ± %g, then at %g: not said to slow", r.Rate, r.Err, r.Next.Rate)
	}
	if r := escape(t, trial.CardioidHole(t), 1, 0.05); r.Slows() {
		t.Errorf("the cardioid falls at %g ± %g, then at %g: said to slow", r.Rate, r.Err, r.Next.Rate)
	}
}

// TestEscapeNone asks for rates that do not exist.
func TestEscapeNone(t *testing.T) {
	for name, tr := range map[string]*sim.Tracer{
		// A single convex post: no ray meets it twice.
		"one post": postAlone(t),
		// Beyond the critical angle the disc keeps its rays for ever.
		"glass disc": trial.Traced(t, "disc", []float64{1}, table.Coat{Side: table.AllSides, To: 1, Law: wall.Dielectric{Index: 1.5, Outside: 1}}),
	} {
		_, err := leak.MeasureEscape(tr, trial.Runner(tr, 1, 0), 0.02)
		if no := (*measure.NotMeasured)(nil); !errors.As(err, &no) {
			t.Errorf("%s: the error is %v, want a NotMeasured", name, err)
		}
	}
}

func postAlone(t testing.TB) *sim.Tracer {
	f, err := shape.New("disc", []float64{1})
	if err != nil {
		t.Fatal(err)
	}
	tab, err := table.New(table.Design{Unit: table.Millimetre, Items: []table.Item{{Shape: f, Place: plane.Identity(), Role: table.Post}}})
	if err != nil {
		t.Fatal(err)
	}
	return sim.Compile(tab)
}

// TestEscapeWorkers wants equal bits from any number of workers.
func TestEscapeWorkers(t *testing.T) {
	tr := trial.Traced(t, "three-posts", []float64{1, 6})
	var first leak.EscapeRate
	for i, n := range []int{1, 2, 7} {
		r, err := leak.MeasureEscape(tr, trial.Runner(tr, 3, n), 0.02)
		if err != nil {
			t.Fatal(err)
		}
		if i == 0 {
			first = r
		} else if r.Rate != first.Rate || r.Err != first.Err || r.Next.Rate != first.Next.Rate || r.Flights != first.Flights {
			t.Errorf("%d workers give %v ± %v, one gives %v ± %v", n, r.Rate, r.Err, first.Rate, first.Err)
		}
	}
}
