package sim

import (
	"math"
	"testing"

	"cavitywright/table"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
)

// one is the table of a single catalogue shape, in millimetres.
func one(t testing.TB, kind string, v ...float64) *table.Table {
	t.Helper()
	f, err := shape.New(kind, param.Values(v))
	if err != nil {
		t.Fatal(err)
	}
	tab, err := table.New(table.Design{Unit: table.Millimetre, Items: []table.Item{{Shape: f, Place: plane.Identity()}}})
	if err != nil {
		t.Fatal(err)
	}
	return tab
}

// TestDiscKeepsP: in a disc p is conserved exactly (the angle at both ends of a
// chord is the same; closed form).
func TestDiscKeepsP(t *testing.T) {
	n := 1_000_000
	if testing.Short() {
		n = 10_000
	}
	tr := Compile(one(t, "disc", 1))
	for _, p := range []float64{0, 0.3, -0.5, 0.99, 0.999999} {
		w := tr.Walker()
		b := w.Start(State{S: 1, P: p})
		worst := 0.0
		for b.N < n && b.Stop == Going {
			b = w.Next(0)
			worst = math.Max(worst, math.Abs(b.P-p))
		}
		if b.N != n || worst > 1e-12 {
			t.Errorf("p = %g: after %d bounces off by %g (%v)", p, b.N, worst, b.Stop)
		}
	}
}

// TestEllipseKeepsFociProduct: in an ellipse the product of the angular momenta
// about the foci is constant (M. V. Berry, Eur. J. Phys. 2, 91, 1981).
func TestEllipseKeepsFociProduct(t *testing.T) {
	n := 1_000_000
	if testing.Short() {
		n = 10_000
	}
	tr := Compile(one(t, "ellipse", 2, 1))
	c := math.Sqrt(3)
	product := func(b Bounce) float64 {
		l := func(fx float64) float64 { return (b.Point.X-fx)*b.Dir.Y - b.Point.Y*b.Dir.X }
		return l(-c) * l(c)
	}
	for _, st := range []State{{0.3, 0.2}, {1, -0.7}, {2.4221, 0.05}, {4, 0.95}} {
		w := tr.Walker()
		b := w.Start(st)
		want, worst := product(b), 0.0
		for b.N < n && b.Stop == Going {
			b = w.Next(0)
			worst = math.Max(worst, math.Abs(product(b)-want))
		}
		if b.N != n || worst > 1e-10 {
			t.Errorf("%v: after %d bounces off by %g (%v)", st, b.N, worst, b.Stop)
		}
	}
}

// TestStadiumOrbits: lengths and traces of the shortest orbits of the stadium
// with half-length 1 and radius 1 (closed forms, check values).
func TestStadiumOrbits(t *testing.T) {
	tr := Compile(one(t, "stadium", 1, 1))
	// s = 0 at the start of the bottom side; sides: bottom 2, right arc pi, top 2, left arc pi.
	right := 2 + math.Pi/2 // the middle of the right arc
	for _, c := range []struct {
		name          string
		at            State
		n             int
		length, trace float64
	}{
		{"horizontal", State{right, 0}, 2, 8, 34},
		{"bouncing ball", State{1.3, 0}, 2, 4, 2},
		{"diamond", State{1, 2 / math.Sqrt(5)}, 4, 8.9442719099991588, 62},
	} {
		w := tr.Walker()
		b := w.Start(c.at)
		j, length := Identity(), 0.0
		for range c.n {
			b = w.Next(0)
			length += b.Flight
			j = w.Jacobian().Times(j)
		}
		if d := math.Abs(b.S-c.at.S) + math.Abs(b.P-c.at.P); d > 1e-12 {
			t.Errorf("%s does not close: %v", c.name, b)
		}
		if math.Abs(length-c.length) > 1e-12 || math.Abs(j.Trace()-c.trace) > 1e-9 || math.Abs(j.Det()-1) > 1e-10 {
			t.Errorf("%s: length %.15g trace %.15g det %.15g, want %.15g, %.15g, 1", c.name, length, j.Trace(), j.Det(), c.length, c.trace)
		}
	}
}
