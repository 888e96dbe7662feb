package leak_test

import (
	"errors"
	"math"
	"testing"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/leak"
	"cavitywright/sim/run/trial"
	"cavitywright/table"
	"cavitywright/table/wall"

	"gonum.org/v1/gonum/spatial/r2"
)

func fallOf(t testing.TB, tr *sim.Tracer, s leak.Seeding, until, effort float64) *leak.Fall {
	t.Helper()
	f, err := leak.MeasureFall(tr, trial.Runner(tr, 3, 0), s, until, effort)
	if err != nil {
		t.Fatal(err)
	}
	if b := f.Account.Balance(); math.Abs(b) > 1e-12 {
		t.Errorf("left, absorbed, kept and undecided add up to 1 %+g of what started", b)
	}
	return f
}

// discHole is a disc of radius 1 with an opening of angle 0.2.
func discHole(t testing.TB) *sim.Tracer {
	return trial.Traced(t, "disc", []float64{1}, trial.Opening(0, 0, 0.2/(2*math.Pi)))
}

// TestWindow holds the window of a curve to the rates that are known, and to
// the reading of the same table where that is more precise.
func TestWindow(t *testing.T) {
	for _, c := range []struct {
		name   string
		tracer *sim.Tracer
		want   float64
		slack  float64
		err    float64 // the relative error that must be reached
		effort float64
	}{
		// Gaspard and Rice, J. Chem. Phys. 90, 2225 (1989).
		{"three posts, separation 6", trial.Traced(t, "three-posts", []float64{1, 6}), 0.4103384077693465, 0, 0.03, 0.2},
		// An independent cycle expansion.
		{"three posts, separation 3", trial.Traced(t, "three-posts", []float64{1, 3}), 0.6779226895995361, 0, 0.03, 0.2},
		// An independent run of another program.
		{"cardioid with an opening", trial.CardioidHole(t), 0.014102, 0.00005, 0.03, 0.1},
	} {
		f := fallOf(t, c.tracer, leak.Seeding{}, 0, c.effort)
		w := f.Window
		t.Logf("%s: %s", c.name, f.Verdict())
		if !f.HasWindow || math.Abs(w.Rate-c.want) > 3*w.Err+c.slack || w.Err > c.err*w.Rate {
			t.Errorf("%s: the window is %+v, want the rate %g", c.name, w, c.want)
		}
		if f.Tail != nil {
			t.Errorf("%s is said to have a tail: %+v", c.name, *f.Tail)
		}
	}
}

// TestTails: t P(t) of a disc with one opening of angle 0.2 tends to
// 9.80035348053905 for starts even in ds dp, and for small openings to 64/(3
// pi^2 0.2) for starts even over the area (Bunimovich and Dettmann, Phys. Rev.
// Lett. 94, 100201 (2005); the first value by a closed sum); that of a stadium
// with an opening from h1 to h2 on a flat of half-length a to (3 ln 3 + 4)
// ((a + h1)^2 + (a - h2)^2) / (4 (4 a + 2 pi r)) (Dettmann and Georgiou,
// Physica D 238, 2395 (2009), from memory; an independent run agrees within a
// hundredth).
func TestTails(t *testing.T) {
	const a, h1, h2 = 1.0, 0.0, 1.0
	for _, c := range []struct {
		name   string
		tracer *sim.Tracer
		from   leak.Source
		path   float64
		want   float64
		slack  float64 // of the value: of order 1/t, and of the opening
		effort float64
	}{
		{"disc", discHole(t), leak.Even, 600, 9.80035348053905, 0.1, 0.2},
		{"disc, even over the area", discHole(t), leak.Area, 600, 64 / (3 * math.Pi * math.Pi * 0.2), 0.3, 0.2},
		{"stadium", trial.Traced(t, "stadium", []float64{1, 1}, trial.Opening(0, (a+h1)/2, (a+h2)/2)), leak.Even, 400,
			(3*math.Log(3) + 4) * ((a+h1)*(a+h1) + (a-h2)*(a-h2)) / (4 * (4*a + 2*math.Pi)), 0.01, 0.3},
	} {
		f := fallOf(t, c.tracer, leak.Seeding{From: c.from}, 1.5*c.path, c.effort)
		share, err := f.Left(c.path)
		got, err := share*c.path, err*c.path
		t.Logf("%s: t P(t) = %.4f ± %.4f, want %.4f; %s", c.name, got, err, c.want, f.Verdict())
		if math.Abs(got-c.want) > 3*err+c.slack || err > 0.15*got {
			t.Errorf("%s: t P(t) is %g ± %g at %g, want %g", c.name, got, err, c.path, c.want)
		}
		if f.Tail == nil || math.Abs(f.Tail.Exponent-1) > 4*f.Tail.Err+0.1 {
			t.Errorf("%s: the tail is %+v, want the exponent 1", c.name, f.Tail)
		}
	}
}

// TestCutDiscRates: the D of a disc of radius 1 cut at 0.5 with an opening 0.3
// wide (an independent run of another program; rates on path 30 to 100).
func TestCutDiscRates(t *testing.T) {
	flat := math.Sqrt(3)
	arc := 4 * math.Pi / 3
	for _, c := range []struct {
		name string
		open table.Coat
		want float64
	}{
		{"flat, centre", trial.Opening(0, 0.5-0.15/flat, 0.5+0.15/flat), 0.0302},
		{"arc, at the corner", trial.Opening(1, 0, 0.3/arc), 0.0433},
	} {
		f := fallOf(t, trial.Traced(t, "cut-disc", []float64{1, 0.5}, c.open), leak.Seeding{}, 200, 0.05)
		rate, err := f.Between(30, 100)
		t.Logf("%s: %.5f ± %.5f, want %.4f; naive %.4f; %s", c.name, rate, err, c.want, f.Naive, f.Verdict())
		if math.Abs(rate-c.want) > 0.001+3*err || err > 0.001 {
			t.Errorf("%s: the rate is %g ± %g, want %g", c.name, rate, err, c.want)
		}
		if math.Abs(f.Naive-0.0378) > 0.00005 { // w / (pi A), closed
			t.Errorf("%s: the naive rate is %g, want 0.0378", c.name, f.Naive)
		}
	}
}

// TestFallDwell wants pi A / W (closed; common practice) from rays let in by
// the cosine law, also where a curve is followed far enough.
func TestFallDwell(t *testing.T) {
	tr := trial.Traced(t, "cut-disc", []float64{1, 0.5}, trial.Opening(0, 0.2, 0.3), trial.Opening(1, 0.5, 0.6))
	f := fallOf(t, tr, leak.Seeding{From: leak.Ports}, 600, 0.02)
	_, width := leak.Openings(tr.Table())
	want := math.Pi * tr.Table().Area() / width
	mean, err := f.Dwell()
	if math.Abs(mean-want) > 3*err+0.002*want || err > 0.02*want {
		t.Errorf("the mean dwell is %g ± %g, want %g", mean, err, want)
	}
}

// TestSurvivalByBounce: every bounce of an even lossy wall keeps R of what
// comes, whatever the path.
func TestSurvivalByBounce(t *testing.T) {
	lossy := table.Coat{Side: table.AllSides, To: 1, Law: wall.Lossy{Reflectivity: 0.9}}
	f := fallOf(t, trial.Traced(t, "stadium", []float64{1, 1}, lossy), leak.Seeding{}, 60, 0.001)
	for k, n := range f.Counts {
		share, err := f.ByCount.At(k)
		if want := math.Pow(0.9, float64(n)); math.Abs(share-want) > 1e-12 || err > 1e-8 { // the error is the root of a difference of squares
			t.Errorf("after %d bounces %g ± %g is left, want %g", n, share, err, want)
		}
	}
}

// TestSurvivalWorkers wants equal bits from any number of workers.
func TestSurvivalWorkers(t *testing.T) {
	tr := discHole(t)
	var first figure.Series
	for i, n := range []int{1, 2, 7} {
		f, err := leak.MeasureFall(tr, trial.Runner(tr, 3, n), leak.Seeding{}, 100, 0.002)
		if err != nil {
			t.Fatal(err)
		}
		s := f.Figure(leak.ByPath, figure.Log, "Program 9")
		if i == 0 {
			first = s
			continue
		}
		for k := range s.Curves[0].Y {
			if s.Curves[0].Y[k] != first.Curves[0].Y[k] || s.Curves[0].Err[k] != first.Curves[0].Err[k] {
				t.Fatalf("%d workers give %g at mark %d, one gives %g", n, s.Curves[0].Y[k], k, first.Curves[0].Y[k])
			}
		}
	}
}

// TestSeedings wants each source to start its rays where it says.
func TestSeedings(t *testing.T) {
	glass := table.Coat{Side: table.AllSides, To: 1, Law: wall.Dielectric{Index: 1.5, Outside: 1}}
	tr := trial.Traced(t, "disc", []float64{1}, glass, trial.Opening(0, 0.1, 0.2))
	at := func(s leak.Seeding, u, v float64) sim.Start {
		st, err := s.On(tr)
		if err != nil {
			t.Fatal(err)
		}
		return st.At(u, v, func() float64 { return 0.3 })
	}
	for _, v := range []float64{0, 0.2, 0.49, 0.5, 0.7, 0.999} {
		if p := at(leak.Seeding{From: leak.Trapped}, 0.4, v).State.P; math.Abs(p) < 1/1.5 || math.Abs(p) > 1 {
			t.Errorf("a ray that starts above the critical angle has p = %g", p)
		}
		if s := at(leak.Seeding{From: leak.Ports}, v, 0.4).State.S / (2 * math.Pi); s < 0.1 || s > 0.2 {
			t.Errorf("a ray comes in at s/L = %g, outside the opening", s)
		}
		if p := at(leak.Seeding{From: leak.Area}, v, v).Point; r2.Norm(p) > 1 {
			t.Errorf("a ray starts at %v, outside the disc", p)
		}
		p := at(leak.Seeding{From: leak.Segment, At: r2.Vec{X: -0.5}, To: r2.Vec{X: 0.5, Y: 0.5}}, 0.2, v).Point
		if want := (r2.Vec{X: -0.5 + v, Y: 0.5 * v}); r2.Norm(r2.Sub(p, want)) > 1e-15 {
			t.Errorf("a ray starts at %v of the line, want %v", p, want)
		}
	}
	for _, s := range []leak.Seeding{{From: leak.Spot, At: r2.Vec{X: 2}}, {From: leak.Segment, To: r2.Vec{X: 2}}, {From: leak.Ports, Port: 2}} {
		if _, err := s.On(tr); !errors.As(err, new(*leak.BadSeeding)) {
			t.Errorf("%+v is refused with %v", s, err)
		}
	}
	plain := trial.Traced(t, "disc", []float64{1})
	for _, s := range []leak.Seeding{{From: leak.Trapped}, {From: leak.Ports}} {
		if _, err := s.On(plain); !errors.As(err, new(*leak.BadSeeding)) {
			t.Errorf("%+v is refused with %v on a plain disc", s, err)
		}
	}
	if _, err := leak.MeasureFall(plain, trial.Runner(plain, 1, 0), leak.Seeding{}, 0, 0.01); !errors.As(err, new(*measure.NotMeasured)) {
		t.Errorf("the survival of a closed disc is refused with %v", err)
	}
}

// TestParseSeeding holds the words of the command line to what they mean.
func TestParseSeeding(t *testing.T) {
	for text, want := range map[string]leak.Seeding{
		"even": {}, "trapped": {From: leak.Trapped}, "area": {From: leak.Area}, "openings": {From: leak.Ports},
		"opening:3": {From: leak.Ports, Port: 3}, "point:0.5,-1": {From: leak.Spot, At: r2.Vec{X: 0.5, Y: -1}},
		"line:0, 1, 2, 3": {From: leak.Segment, At: r2.Vec{Y: 1}, To: r2.Vec{X: 2, Y: 3}},
	} {
		if got, err := leak.ParseSeeding(text); err != nil || got != want {
			t.Errorf("%q is read as %+v (%v), want %+v", text, got, err, want)
		}
	}
	for _, text := range []string{"", "even:1", "point", "point:1", "point:1,x", "point:1,NaN", "line:1,2", "opening:0", "opening:", "light"} {
		if _, err := leak.ParseSeeding(text); !errors.As(err, new(*leak.BadSeeding)) {
			t.Errorf("%q is accepted (%v)", text, err)
		}
	}
}

// TestPerBounce: three posts lose a factor exp(1.6981063) a bounce at a
// separation of six radii (an independent cycle expansion), and per bounce
// there are no steps.
func TestPerBounce(t *testing.T) {
	f := fallOf(t, trial.Traced(t, "three-posts", []float64{1, 6}), leak.Seeding{}, 0, 0.2)
	for n := 2; n < 4; n++ {
		if got, err := f.ByCount.Fall(n, n+1); math.Abs(got-1.6981063) > 3*err+0.005 || err > 0.05 {
			t.Errorf("from bounce %d to %d the logarithm falls by %g ± %g, want 1.6981", n, n+1, got, err)
		}
	}
	// A mixing table with a small opening: the rate per bounce is that per path
	// times the mean chord, to the order of the opening (common practice).
	g := fallOf(t, trial.CardioidHole(t), leak.Seeding{}, 0, 0.1)
	want := g.Window.Rate * sim.MeanChord(g.Starts.Table())
	if w := g.PerBounce; !g.HasPerBounce || math.Abs(w.Rate-want) > 3*math.Hypot(w.Err, g.Window.Err*want/g.Window.Rate)+0.05*want {
		t.Errorf("per bounce the window is %+v, want the rate %g", w, want)
	}
}
