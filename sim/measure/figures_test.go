package measure_test

import (
	"cavitywright/sim/run/trial"
	"math"
	"strings"
	"testing"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/table"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
)

// studied is a table of one shape with a study.
func studied(t *testing.T, name string, values []float64, s table.Study, coats ...table.Coat) *sim.Tracer {
	t.Helper()
	f, err := shape.New(name, values)
	if err != nil {
		t.Fatal(err)
	}
	tab, err := table.New(table.Design{
		Name: "Plate 3", Unit: table.Micrometre, Study: s, Coats: coats,
		Items: []table.Item{{Shape: f, Place: plane.Identity()}},
	})
	if err != nil {
		t.Fatal(err)
	}
	return sim.Compile(tab)
}

func portraitOf(t *testing.T, tr *sim.Tracer) figure.Dots {
	t.Helper()
	s := tr.Table().Design().Study
	ran, err := trial.Runner(tr, s.Seed, 0)(measure.NewPortrait(tr, s.Launches, s.Bounces))
	if err != nil {
		t.Fatal(err)
	}
	return measure.PortraitFigure(tr.Table(), ran.(*measure.PortraitTally), "Program 9")
}

func raysOf(t *testing.T, tr *sim.Tracer, each int) figure.Paths {
	t.Helper()
	s := tr.Table().Design().Study
	ran, err := trial.Runner(tr, s.Seed, 0)(measure.NewRays(tr, s.Launches, each))
	if err != nil {
		t.Fatal(err)
	}
	return measure.RaysFigure(tr.Table(), ran.(*measure.RaysTally), "Program 9")
}

// TestPortraitFigure follows the triangle of a disc (closed: p = 1/2, s in
// steps of a third) through the conventions of the display.
func TestPortraitFigure(t *testing.T) {
	l := 2 * math.Pi
	for _, c := range []struct {
		display table.Display
		x, y    [3]float64
	}{
		{table.Display{}, [3]float64{0.1 * l, 0.1*l + l/3, 0.1*l + 2*l/3}, [3]float64{0.5, 0.5, 0.5}},
		{table.Display{Sense: table.Clockwise}, [3]float64{0.9 * l, 0.9*l - l/3, 0.9*l - 2*l/3}, [3]float64{-0.5, -0.5, -0.5}},
		{table.Display{Position: table.Fraction, Momentum: table.Angle}, [3]float64{0.1, 0.1 + 1./3, 0.1 + 2./3}, [3]float64{30, 30, 30}},
	} {
		tr := studied(t, "disc", []float64{1}, table.Study{Seed: 4, Bounces: 2, Display: c.display, Launches: []table.Launch{{S: 0.1, P: 0.5}}})
		f := portraitOf(t, tr)
		if len(f.Sets) != 1 || len(f.Sets[0].X) != 3 {
			t.Fatalf("%+v: the sets are %v", c.display, f.Sets)
		}
		for i := range 3 {
			if math.Abs(f.Sets[0].X[i]-c.x[i]) > 1e-12*l || math.Abs(f.Sets[0].Y[i]-c.y[i]) > 1e-9 {
				t.Errorf("%+v: dot %d is (%g, %g), want (%g, %g)", c.display, i, f.Sets[0].X[i], f.Sets[0].Y[i], c.x[i], c.y[i])
			}
		}
	}
}

// TestCaption wants every caption to say what, how much, from which seed and
// with what.
func TestCaption(t *testing.T) {
	study := measure.WithLaunches(trial.Traced(t, "disc", []float64{1}).Table(), table.Study{Seed: 77, Bounces: 12}, 0)
	f := portraitOf(t, studied(t, "stadium", []float64{1, 1}, study))
	text := strings.Join(f.Caption, "\n")
	for _, want := range []string{"Plate 3", "60 orbits", "12 bounces", "even in ds dp", "10.28319 µm", "seed 77", "Program 9"} {
		if !strings.Contains(text, want) {
			t.Errorf("the caption lacks %q: %s", want, text)
		}
	}
	one := table.Study{Launches: []table.Launch{{From: table.Inside, Point: r2.Vec{X: 0.1}, Angle: math.Pi / 2}}}
	g := raysOf(t, studied(t, "disc", []float64{1}, one, trial.Opening(0, 0, 1)), 5)
	for _, want := range []string{"1 orbit of up to 5 bounces, from (0.1, 0) µm at 90°.", "1 left."} {
		if text := strings.Join(g.Caption, "\n"); !strings.Contains(text, want) {
			t.Errorf("the caption lacks %q: %s", want, text)
		}
	}
}

// TestRaysFigure wants the wall with a gap at its opening, its places ascending,
// four joints and the two ends of the opening marked, the
// marks small, and a ray through the opening drawn on for a stub.
func TestRaysFigure(t *testing.T) {
	// From the middle of a square's top side straight down.
	s := table.Study{Launches: []table.Launch{{S: 5.0 / 8}}}
	tr := studied(t, "rectangle", []float64{2, 2}, s, trial.Opening(0, 0, 1))
	f := raysOf(t, tr, 3)
	roles := map[figure.Role]int{}
	for _, l := range f.Lines {
		roles[l.Role]++
		switch l.Role {
		case figure.Wall:
			for i := 1; i < len(l.At); i++ {
				if l.At[i] <= l.At[i-1] {
					t.Errorf("the wall's places do not ascend: %v", l.At)
				}
			}
		case figure.JointMark:
			if d := math.Hypot(l.X[1]-l.X[0], l.Y[1]-l.Y[0]); math.Abs(d-0.02*math.Sqrt(8)) > 1e-9 {
				t.Errorf("a joint's mark is %g long", d)
			}
		case figure.Ray:
			n := len(l.X)
			if n != 3 || math.Abs(l.Y[0]-1) > 1e-12 || math.Abs(l.Y[1]+1) > 1e-12 || math.Abs(l.Y[2]+1+0.1*math.Sqrt(8)) > 1e-9 {
				t.Errorf("the ray runs (%v, %v)", l.X, l.Y)
			}
		}
	}
	if roles[figure.Wall] != 1 || roles[figure.Floor] != 1 || roles[figure.JointMark] != 4+2 || roles[figure.Ray] != 1 {
		t.Errorf("the drawing has the lines %v", roles)
	}
}

// TestDefaultRays wants something to draw on every kind of table, and a study
// that launches something left alone.
func TestDefaultRays(t *testing.T) {
	posts := trial.Traced(t, "three-posts", []float64{1, 6}).Table()
	disc := trial.Traced(t, "disc", []float64{1}).Table()
	for _, tab := range []*table.Table{posts, disc} {
		s := measure.WithRays(tab, table.Study{})
		if n := measure.NewRays(sim.Compile(tab), s.Launches, 3).Orbits(); n == 0 {
			t.Error("nothing is drawn")
		}
		p := measure.WithLaunches(tab, table.Study{}, 0)
		if n := measure.NewPortrait(sim.Compile(tab), p.Launches, 3).Orbits(); n < 60 {
			t.Errorf("a portrait has %d orbits", n)
		}
	}
	own := table.Study{Launches: []table.Launch{{S: 0.3}}}
	if s := measure.WithRays(disc, own); len(s.Launches) != 1 || s.Launches[0].S != 0.3 {
		t.Error("the study's own launches are replaced")
	}
	if s := measure.WithLaunches(disc, own, 9); len(s.Launches) != 1 || s.Launches[0].S != 0.3 {
		t.Error("the study's own launches are replaced")
	}
}
