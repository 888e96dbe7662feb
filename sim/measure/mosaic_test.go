package measure_test

import (
	"math"
	"slices"
	"testing"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/run/trial"
	"cavitywright/table"
)

// place is a field that tells where it is: s + 100 p.
type place struct{ tr *sim.Tracer }

func (place) Value() figure.Axis { return figure.Axis{Label: "place"} }
func (f place) Along(starts []sim.State) measure.Measurement {
	return placeAlong{starts}
}

type placeAlong struct{ starts []sim.State }

func (m placeAlong) Orbits() int                             { return len(m.starts) }
func (m placeAlong) Bounces() int                            { return 1000 }
func (m placeAlong) Start(i int, _ func() float64) sim.Start { return sim.Start{State: m.starts[i]} }
func (m placeAlong) Tally() measure.Tally                    { return &placeTally{} }

type placeTally struct {
	measure.Row
	from sim.State
}

func (t *placeTally) Add(b *sim.Bounce) {
	if b.N == 0 {
		t.from = b.State
	}
}

func (t *placeTally) Enough() bool { return true }

func (t *placeTally) Close()                   { t.Keep(t.from.S + 100*t.from.P) }
func (t *placeTally) Merge(next measure.Tally) { t.Append(next.(*placeTally).Row) }

// shown is the stadium on a display of its own.
func shown(t *testing.T, d table.Display) *sim.Tracer {
	t.Helper()
	design := trial.Traced(t, "stadium", []float64{1, 1}).Table().Design()
	design.Study.Display = d
	tab, err := table.New(design)
	if err != nil {
		t.Fatal(err)
	}
	return sim.Compile(tab)
}

// TestMosaic wants every cell of a map to hold the number of the place that its
// axes say, on every display, and the same map however it is filled.
func TestMosaic(t *testing.T) {
	g := table.Region{S0: 0.1, S1: 0.7, P0: -0.5, P1: 0.9}
	for _, d := range []table.Display{{}, {Sense: table.Clockwise}, {Position: table.Fraction}, {Momentum: table.Angle, Sense: table.Clockwise, Position: table.Fraction}} {
		tr := shown(t, d)
		whole := measure.NewMosaic(tr.Table(), place{tr}, g, 53, 37)
		if err := whole.Fill(trial.Runner(tr, 1, 3)); err != nil {
			t.Fatal(err)
		}
		parts := measure.NewMosaic(tr.Table(), place{tr}, g, 53, 37)
		for rounds := 0; parts.Done() < 1; rounds++ {
			n := 101
			if rounds == 0 {
				n = parts.First()
			}
			ran, err := trial.Runner(tr, 9, 1)(parts.Next(n))
			if err != nil {
				t.Fatal(err)
			}
			parts.Take(ran.(measure.Valued))
			if rounds == 0 && (math.IsNaN(parts.Value(52, 36)) || slices.ContainsFunc(parts.Figure(nil, "").Values, math.IsNaN)) {
				t.Fatal("the first pass leaves a block empty")
			}
		}
		f := whole.Figure([]string{"what"}, "program")
		if !slices.Equal(f.Values, parts.Figure(nil, "").Values) {
			t.Fatal("a map filled in parts is another")
		}
		c := measure.NewSection(tr.Table())
		for k, v := range f.Values {
			x := f.X.Lo + (f.X.Hi-f.X.Lo)*(float64(k%53)+0.5)/53
			y := f.Y.Lo + (f.Y.Hi-f.Y.Lo)*(float64(k/53)+0.5)/37
			if s, p := c.Back(x, y); math.Abs(v-s-100*p) > 1e-9 {
				t.Fatalf("%+v: the cell at (%g, %g) holds %g, want %g", d, x, y, v, s+100*p)
			}
		}
		if f.Value.Lo != slices.Min(f.Values) || f.Value.Hi != slices.Max(f.Values) {
			t.Errorf("the axis of the values is %+v", f.Value)
		}
	}
}

// lattices are the starts of a measurement on a table.
func lattices(t testing.TB, tr *sim.Tracer, run measure.Runner, n int) measure.Lattices {
	t.Helper()
	l, err := measure.DrawnLattices(tr, run, n)
	if err != nil {
		t.Fatal(err)
	}
	return l
}

// TestFreePaths holds the moments of flights to their closed forms: on a disc
// of radius 1 pi/2 and 8/3 - pi^2/4, on the unit square pi/4 and
// 0.12645212449375976; on the others the mean alone, pi A / L (Santaló,
// Integral Geometry and Geometric Probability, 1976, ch. 3).
func TestFreePaths(t *testing.T) {
	for _, c := range []struct {
		name     string
		tr       *sim.Tracer
		variance float64
	}{
		{"disc", trial.Traced(t, "disc", []float64{1}), 0.19926556639432701},
		{"square", trial.Traced(t, "rectangle", []float64{1, 1}), 0.12645212449375976},
		{"square with disc", trial.Traced(t, "square-with-disc", []float64{1, 0.25}), 0},
		{"mushroom", trial.Traced(t, "mushroom", []float64{1, 0.5, 1}), 0},
	} {
		seeds := uint64(40)
		if c.name == "disc" { // its errors are skew, and 40 decide nothing
			seeds = 400
		}
		inside, all := 0, 0
		for seed := range seeds {
			run := trial.Runner(c.tr, 300+seed, 0)
			ran, err := run(measure.FreePaths{Tracer: c.tr, Starts: lattices(t, c.tr, run, 600), Each: 20})
			if err != nil {
				t.Fatal(err)
			}
			p := ran.(*measure.FreePathsTally)
			m, me := p.Mean()
			v, ve := p.Variance()
			if seed == 0 {
				t.Logf("%s: mean %.5f ± %.5f, variance %.5f ± %.5f", c.name, m, me, v, ve)
			}
			counted := []bool{math.Abs(m-sim.MeanChord(c.tr.Table())) < 2*me}
			if c.variance != 0 {
				counted = append(counted, math.Abs(v-c.variance) < 2*ve)
			}
			for _, in := range counted {
				all++
				if in {
					inside++
				}
			}
			if c.variance != 0 && ve > 0.05*c.variance {
				t.Errorf("%s: the error of the variance is %g", c.name, ve)
			}
		}
		t.Logf("%s: %d of %d within two errors", c.name, inside, all)
		if inside < all*9/10 {
			t.Errorf("%s: %d of %d lie within two errors", c.name, inside, all)
		}
	}
}

// TestPathFigure wants the distribution to be one: its area is 1, and it ends
// where flights do.
func TestPathFigure(t *testing.T) {
	tr := trial.Traced(t, "disc", []float64{1})
	run := trial.Runner(tr, 1, 0)
	ran, err := run(measure.FreePaths{Tracer: tr, Starts: lattices(t, tr, run, 3000), Each: 10})
	if err != nil {
		t.Fatal(err)
	}
	f := ran.(*measure.FreePathsTally).Figure(tr.Table(), "program")
	c, area := f.Curves[0], 0.0
	for i := 1; i < len(c.X); i++ {
		area += (c.X[i] - c.X[i-1]) * c.Y[i]
	}
	if math.Abs(area-1) > 1e-9 || math.Abs(c.X[len(c.X)-1]-2) > 0.03 {
		t.Errorf("the density has the area %g and ends at %g", area, c.X[len(c.X)-1])
	}
}

// TestCorrelation holds correlations to closed values: on a disc p is kept, and
// is correlated with itself by 1; on a square p returns after two bounces off
// the same wall in turn, and that of the flight of a disc is 1 as well. On a
// stadium the memory is gone after 60 bounces.
func TestCorrelation(t *testing.T) {
	disc, stadium := trial.Traced(t, "disc", []float64{1}), trial.Traced(t, "stadium", []float64{1, 1})
	for _, c := range []struct {
		name string
		tr   *sim.Tracer
		of   measure.Observable
		lag  int
		want float64
	}{
		{"disc", disc, measure.Momentum, 7, 1},
		{"disc", disc, measure.Flight, 3, 1},
		{"stadium", stadium, measure.Momentum, 0, 1},
		{"stadium", stadium, measure.Momentum, 60, 0},
	} {
		run := trial.Runner(c.tr, 4, 0)
		ran, err := run(measure.Correlation{Tracer: c.tr, Starts: lattices(t, c.tr, run, 2000), Of: c.of, Lags: 64, Each: 64})
		if err != nil {
			t.Fatal(err)
		}
		v, e := ran.(*measure.CorrelationTally).At(c.lag)
		if math.Abs(v-c.want) > 3*e+1e-9 || e > 0.03 {
			t.Errorf("%s: the correlation of %v at lag %d is %g ± %g, want %g", c.name, c.of, c.lag, v, e, c.want)
		}
	}
}
