package tolerance

import (
	"errors"
	"math"
	"testing"

	"cavitywright/sim"
	"cavitywright/table"
	"cavitywright/table/outline"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/table/wall"
)

// TestEveryShape makes a copy of every shape of the catalogue with each error of
// the wall: it is a table within the error stated, on which rays run without a
// wall being missed, or it is refused in a sentence.
func TestEveryShape(t *testing.T) {
	refusals := 0
	for _, k := range shape.Catalogue() {
		base := one(t, nil, k.Name, param.Defaults(k.Specs)...)
		size := plane.Diagonal(base.Bounds())
		for _, f := range []table.Flaw{
			{Kind: table.RoughFlaw, Width: 1e-3 * size, Length: 0.1 * size},
			{Kind: table.OffsetFlaw, Mean: 2e-3 * size},
			{Kind: table.OffsetFlaw, Mean: -2e-3 * size},
			{Kind: table.ToolFlaw, Mean: 5e-3 * size},
		} {
			tol, err := New(base, plan(2, []string{"perimeter"}, f))
			if err != nil {
				t.Fatal(k.Name, err)
			}
			c, err := tol.Copy(0, All, tools(1))
			if err != nil {
				own, of, fault := (*Refusal)(nil), (*outline.Refusal)(nil), (*table.Fault)(nil)
				if !errors.As(err, &own) && !errors.As(err, &of) && !errors.As(err, &fault) {
					t.Errorf("%s: %T %v", k.Name, err, err)
				}
				t.Logf("%s, %s: %v", k.Name, tol.Words(0), err)
				refusals++
				continue
			}
			if c.Misfit > fitTo*math.Max(f.Width, math.Abs(f.Mean)) {
				t.Errorf("%s: misfit %g of %s", k.Name, c.Misfit, tol.Words(0))
			}
			if by := math.Abs(c.Table.Length() - base.Length()); by > 0.1*base.Length() {
				t.Errorf("%s, %s: the wall is longer by %g of %g", k.Name, tol.Words(0), by, base.Length())
			}
			tr := sim.Compile(c.Table)
			w := tr.Walker()
			for i := range 20 {
				b := w.Start(tr.Uniform(float64(i)/20, math.Mod(0.37+0.618*float64(i), 1)))
				for b.Stop == sim.Going && b.N < 50 {
					b = w.Next(0.5)
				}
				if b.Stop == sim.Lost || b.Stop == sim.Escaped && !c.Table.Open() {
					t.Errorf("%s, %s: a ray is %s", k.Name, tol.Words(0), b.Stop)
				}
			}
		}
	}
	if refusals > 4 {
		t.Errorf("%d copies are refused", refusals)
	}
}

// TestOpeningStays: an opening keeps its place and its width on rough, etched and
// cut walls.
func TestOpeningStays(t *testing.T) {
	open, err := wall.Make("opening", nil)
	if err != nil {
		t.Fatal(err)
	}
	d := one(t, nil, "stadium", 1, 1).Design()
	d.Coats = []table.Coat{{Item: 0, Side: 0, From: 0.3, To: 0.5, Law: open}}
	base, err := table.New(d)
	if err != nil {
		t.Fatal(err)
	}
	ends := func(t *table.Table) (a, b float64) {
		s := t.Stretches()
		return s[0].S0, s[len(s)-1].S1
	}
	a0, b0 := ends(base)
	for _, f := range []table.Flaw{{Kind: table.RoughFlaw, Width: 1e-3, Length: 0.2}, {Kind: table.OffsetFlaw, Mean: 0.01}} {
		c, err := ready(t, base, plan(2, []string{"perimeter"}, f)).Copy(0, All, tools(1))
		if err != nil {
			t.Fatal(err)
		}
		a, b := ends(c.Table)
		for _, x := range [][2]float64{{a0, a}, {b0, b}} {
			p, q := base.At(x[0]).Point, c.Table.At(x[1]).Point
			if d := math.Hypot(p.X-q.X, p.Y-q.Y); d > 0.011 {
				t.Errorf("an end of the opening has moved by %g", d)
			}
		}
		if math.Abs((b-a)-(b0-a0)) > 1e-3 {
			t.Errorf("the opening is %g wide, not %g", b-a, b0-a0)
		}
	}
}
