package chaos_test

import (
	"cavitywright/sim/measure/chaos"
	"cavitywright/sim/measure/reading"
	"cavitywright/sim/run/trial"
	"errors"
	"math"
	"strings"
	"testing"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/table"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/table/wall"
)

// stretching follows orbits with a seed.
func stretching(t testing.TB, tr *sim.Tracer, seed uint64, effort float64) *chaos.StretchingTally {
	t.Helper()
	s, err := chaos.MeasureStretching(tr, trial.Runner(tr, seed, 0), effort)
	if err != nil {
		t.Fatal(err)
	}
	if s.Stops[sim.Lost] != 0 {
		t.Fatalf("%d orbits were lost", s.Stops[sim.Lost])
	}
	return s
}

// TestStretching holds exponents to independent values (computed with another
// program and method; the tables were studied by Benettin and Strelcyn, Phys.
// Rev. A 17, 773 (1978), and Bäcker and Dullin, J. Phys. A 30, 1991 (1997)),
// each with the error that it is stated with, where one is.
func TestStretching(t *testing.T) {
	for _, c := range []struct {
		name                string
		tracer              *sim.Tracer
		length, lengthSlack float64 // per length
		bounce, bounceSlack float64 // per bounce; 0 where no value is stated
		effort, reach       float64 // and the relative error that it must reach
	}{
		{"stadium", trial.Traced(t, "stadium", []float64{1, 1}), 0.42968, 2e-5, 0.93750, 5e-5, 0.1, 0.003},
		{"stadium twice as large", trial.Traced(t, "stadium", []float64{2, 2}), 0.21484, 1e-5, 0.93750, 5e-5, 0.05, 0.004},
		{"longer stadium", trial.Traced(t, "stadium", []float64{2, 1}), 0.34397, 6e-5, 0, 0, 0.1, 0.004},
		{"cardioid", trial.Traced(t, "limacon", []float64{1, 1}), 0.352774, 1e-5, 0.65291, 3e-5, 0.1, 0.002},
		{"cut disc", trial.Traced(t, "cut-disc", []float64{1, 0.5}), 0.382, 0.002, 0.512, 0.0005, 0.05, 0.002},
		{"limaçon 0.43", trial.Traced(t, "limacon", []float64{1, 0.43}), 0.1965, 0.002, 0, 0, 0.1, 0.01},
	} {
		s := stretching(t, c.tracer, 11, c.effort)
		l, le := s.PerLength()
		b, be := s.PerBounce()
		t.Logf("%s: %.5f ± %.5f per length, %.5f ± %.5f per bounce; %d chaotic, %d regular, %d late", c.name, l, le, b, be, s.Chaotic, s.Regular, s.Late)
		if math.Abs(l-c.length) > 3*le+c.lengthSlack || le > c.reach*l {
			t.Errorf("%s: the exponent is %g ± %g per length, want %g", c.name, l, le, c.length)
		}
		if c.bounce != 0 && (math.Abs(b-c.bounce) > 3*be+c.bounceSlack || be > c.reach*b) {
			t.Errorf("%s: the exponent is %g ± %g per bounce, want %g", c.name, b, be, c.bounce)
		}
	}
}

// TestStretchingErrors wants the truth within two errors for nine seeds of ten.
func TestStretchingErrors(t *testing.T) {
	tr := trial.Traced(t, "stadium", []float64{1, 1})
	const seeds = 80
	inside, chi2 := 0, 0.0
	for seed := range uint64(seeds) {
		rate, err := stretching(t, tr, 100+seed, 0.005).PerLength()
		x := (rate - 0.42968) / err // independent, 1e10 bounces
		chi2 += x * x
		if math.Abs(x) < 2 {
			inside++
		}
	}
	t.Logf("%d of %d within two errors, mean square %.2f", inside, seeds, chi2/seeds)
	// The mean square of 80 normal numbers lies in 0.5 to 1.6 but for 2 in 1000.
	if inside < seeds*9/10 || chi2/seeds < 0.5 || chi2/seeds > 1.6 {
		t.Errorf("%d of %d lie within two errors, and the mean square is %.2f", inside, seeds, chi2/seeds)
	}
}

// ring is a disc with a round obstacle in it.
func ring(t testing.TB, off float64) *sim.Tracer {
	t.Helper()
	outer, err := shape.New("disc", []float64{1})
	if err != nil {
		t.Fatal(err)
	}
	inner, err := shape.New("disc", []float64{0.3})
	if err != nil {
		t.Fatal(err)
	}
	place := plane.Identity()
	place.Shift.X = off
	tab, err := table.New(table.Design{Unit: table.Millimetre, Items: []table.Item{
		{Shape: outer, Place: plane.Identity()}, {Shape: inner, Place: place, Role: table.Post},
	}})
	if err != nil {
		t.Fatal(err)
	}
	return sim.Compile(tab)
}

var chaosReadings = []string{"lyapunov-per-length", "lyapunov-per-bounce", "chaotic-share-section", "chaotic-share-energy"}

// TestIntegrable wants exactly 0, with the reason, where that can be proved,
// and a measured number where a table is only near such a one. Polygons: Katok,
// Commun. Math. Phys. 111, 151 (1987), from memory; ellipses: Berry, Eur. J.
// Phys. 2, 91 (1981); arcs about one centre and mirrors through it: closed.
func TestIntegrable(t *testing.T) {
	turned := trial.Traced(t, "cut-disc", []float64{1, 0}).Table().Design()
	turned.Items[0].Place = plane.Similarity{Scale: 3, Angle: 0.7}
	turned.Items[0].Place.Shift.X = 5
	half, err := table.New(turned)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		name   string
		tracer *sim.Tracer
		reason string // "" where it is measured
	}{
		{"disc", trial.Traced(t, "disc", []float64{1}), "angular momentum about it"},
		{"half disc", sim.Compile(half), "angular momentum about it"},
		{"ring", ring(t, 0), "angular momentum about it"},
		{"ellipse", trial.Traced(t, "ellipse", []float64{2, 1}), "foci"},
		{"rectangle", trial.Traced(t, "rectangle", []float64{2, 1}), "straight"},
		{"glass rectangle", trial.Traced(t, "rectangle", []float64{2, 1}, trial.Opening(0, 0.1, 0.2)), "walls taken as mirrors"},
		{"ring off centre", ring(t, 1e-3), ""},
		{"cut disc", trial.Traced(t, "cut-disc", []float64{1, 1e-3}), ""},
		{"square with disc", trial.Traced(t, "square-with-disc", []float64{1, 0.2}), ""},
	} {
		names := chaosReadings
		if c.reason == "" {
			names = names[2:3]
		}
		for _, name := range names {
			s := taken(t, c.tracer, name, 1e-3)
			switch {
			case c.reason == "" && (s.StdErr == 0 || s.Bounces == 0):
				t.Errorf("%s: %s is said to be exact: %+v", c.name, name, s)
			case c.reason != "" && (s.Value != 0 || s.StdErr != 0 || !strings.HasPrefix(s.Note, "exactly 0") || !strings.Contains(s.Note, c.reason)):
				t.Errorf("%s: %s is %+v, want exactly 0 for %q", c.name, name, s, c.reason)
			}
		}
	}
}

// taken takes one reading of a table with the seed 5.
func taken(t testing.TB, tr *sim.Tracer, name string, effort float64) figure.Scalar {
	t.Helper()
	wanted, err := reading.Wanted(tr.Table(), []string{name})
	if err != nil {
		t.Fatal(err)
	}
	s, err := wanted[0].Take(tr, trial.Runner(tr, 5, 0), effort, 5)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// TestChaosMirrors wants the numbers of a leaky table to be those of the same
// table with mirrors for walls, and refusals where there is no tangent map.
func TestChaosMirrors(t *testing.T) {
	shape := []float64{1, 0.43}
	bare := trial.Traced(t, "limacon", shape)
	glass := trial.Traced(t, "limacon", shape, trial.Opening(0, 0.2, 0.3),
		table.Coat{Side: 0, From: 0.5, To: 1, Law: wall.Dielectric{Index: 1.5, Outside: 1}})
	for _, name := range []string{chaosReadings[0], chaosReadings[2]} {
		a, b := taken(t, bare, name, 0.01), taken(t, glass, name, 0.01)
		if a.Value != b.Value || a.StdErr != b.StdErr || a.Bounces != b.Bounces {
			t.Errorf("%s is %+v with mirrors, %+v with openings", name, a, b)
		}
		if strings.Contains(a.Note, "mirrors") || !strings.Contains(b.Note, "mirrors") {
			t.Errorf("%s: the notes are %q and %q", name, a.Note, b.Note)
		}
	}
	rough := trial.Traced(t, "disc", []float64{1}, table.Coat{Side: 0, To: 0.1, Law: wall.Rough{Share: 0.1}})
	for _, tr := range []*sim.Tracer{rough, trial.Traced(t, "three-posts", []float64{1, 6})} {
		for _, name := range chaosReadings {
			_, err := reading.Wanted(tr.Table(), []string{name})
			if no := (*measure.NotMeasured)(nil); !errors.As(err, &no) {
				t.Errorf("%s is refused with %v", name, err)
			}
		}
	}
}

// TestNotChaotic measures a limaçon of eps 0, a disc that the program does not
// know for one: no orbit is chaotic, and the exponent is 0 within its bound.
func TestNotChaotic(t *testing.T) {
	s := taken(t, trial.Traced(t, "limacon", []float64{1, 0}), "lyapunov-per-bounce", 1e-3)
	if s.Value != 0 || !(s.StdErr > 0 && s.StdErr < 0.02) || !strings.HasPrefix(s.Note, "0 of 32 orbits are chaotic") {
		t.Errorf("the exponent is %+v", s)
	}
}
