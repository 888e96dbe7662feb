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
