package leak_test

import (
	"math"
	"testing"

	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/leak"
	"cavitywright/sim/run/trial"
	"cavitywright/table"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/table/wall"

	"pgregory.net/rapid"
)

// drawnLaw is any law of the wall with any values.
func drawnLaw(t *rapid.T) wall.Law {
	k := rapid.SampledFrom(wall.Kinds()).Draw(t, "law")
	var v param.Values
	for _, s := range k.Specs {
		x := rapid.Float64Range(s.Lo, s.Hi).Draw(t, s.Name)
		if s.Unit == param.Count {
			x = math.Round(x)
		}
		v = append(v, x)
	}
	l, err := wall.Make(k.Name, v)
	if err != nil {
		t.Fatal(err)
	}
	return l
}

// drawnTable is a shape of the catalogue under coats that lie anyhow.
func drawnTable(t *rapid.T) *table.Table {
	k := rapid.SampledFrom(shape.Catalogue()).Draw(t, "shape")
	f, err := shape.New(k.Name, param.Defaults(k.Specs))
	if err != nil {
		t.Fatal(err)
	}
	d := table.Design{Unit: table.Millimetre, Items: []table.Item{{Shape: f, Place: plane.Identity()}}}
	if rapid.Bool().Draw(t, "bare law") {
		d.Bare = drawnLaw(t)
	}
	bare, err := table.New(d)
	if err != nil {
		t.Skip("not a table")
	}
	last := bare.Pieces()[len(bare.Pieces())-1].Side
	for range rapid.IntRange(0, 4).Draw(t, "coats") {
		from := rapid.Float64Range(0, 0.9).Draw(t, "from")
		d.Coats = append(d.Coats, table.Coat{Side: rapid.IntRange(-1, last).Draw(t, "side"), From: from,
			To: rapid.Float64Range(from+0.01, 1).Draw(t, "to"), Law: drawnLaw(t)})
	}
	tab, err := table.New(d)
	if err != nil {
		t.Skip("not a table")
	}
	return tab
}

// ledger follows the rays of a measurement and works out from the laws of the
// wall, not from the rays, what leaves and what is absorbed.
type ledger struct {
	leak.Emission
	weight, left, absorbed, rest float64
}

func (l *ledger) Tally() measure.Tally { return &ledger{Emission: l.Emission} }
func (l *ledger) Open(int)             { l.weight = 1 }
func (l *ledger) Close()               { l.rest += l.weight }
func (l *ledger) Enough() bool         { return l.weight < l.Cut }
func (l *ledger) Merge(next measure.Tally) {
	o := next.(*ledger)
	l.left, l.absorbed, l.rest = l.left+o.left, l.absorbed+o.absorbed, l.rest+o.rest
}

func (l *ledger) Add(b *sim.Bounce) {
	switch {
	case b.N == 0 || b.Stop == sim.Corner || b.Stop == sim.Lost:
		return
	case math.IsInf(b.Flight, 1):
		l.left, l.weight = l.left+l.weight, 0
		return
	}
	var law wall.Law = l.tab().Law()
	for _, s := range l.tab().Stretches() {
		if s.Piece == b.Piece && s.S0 <= b.S && b.S <= s.S1 {
			law = s.Law
		}
	}
	if _, rough := law.(wall.Rough); rough {
		return // keeps everything, in another direction
	}
	if b.Stop == sim.Grazing {
		return
	}
	o := law.Scatter(wall.Incidence{P: b.P}, 0.5)
	l.left += l.weight * o.Through.Weight
	l.absorbed += l.weight * o.Absorbed()
	l.weight *= o.Back.Weight
}

func (l *ledger) tab() *table.Table { return l.Starts.Table() }

// TestAccount: what left, was absorbed, stays and is undecided adds up to what
// started to 1e-12, in every run; and each part is what the laws of the wall
// say it is.
func TestAccount(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		tab := drawnTable(t)
		tr := sim.Compile(tab)
		starts, err := leak.Seeding{}.On(tr)
		if err != nil {
			t.Fatal(err)
		}
		m := leak.Emission{Starts: starts, Lattice: measure.Lattices{Points: measure.NewFibonacci(89), Shifts: make([]measure.Shift, 3)},
			Bins: 90, Cells: 40, Each: 60, Cut: 1e-4}
		for i := range m.Lattice.Shifts {
			m.Lattice.Shifts[i] = measure.Shift{U: 0.17 * float64(i+1), V: 0.29 * float64(i+1)}
		}
		run := trial.Runner(tr, rapid.Uint64().Draw(t, "seed"), 0)
		ran, err := run(m)
		if err != nil {
			t.Fatal(err)
		}
		far := ran.(*leak.EmissionTally)
		a := far.Account()
		if ran, err = run(&ledger{Emission: m}); err != nil {
			t.Fatal(err)
		}
		l := ran.(*ledger)
		const tol = 1e-12
		if a.Started != 3*89 || math.Abs(a.Balance()) > tol {
			t.Fatalf("%+v is off by %g", a, a.Balance())
		}
		for _, c := range []struct {
			what      string
			got, want float64
		}{{"left", a.Left, l.left}, {"absorbed", a.Absorbed, l.absorbed}, {"stayed", a.Kept + a.Undecided, l.rest}} {
			if math.Abs(c.got-c.want) > tol*a.Started {
				t.Fatalf("%.15g %s, by the laws of the wall %.15g", c.got, c.what, c.want)
			}
		}
		angles, places := far.Weights()
		if math.Abs(angles-a.Left) > tol*a.Started || places > a.Left*(1+tol) {
			t.Fatalf("%.15g left, but the far field holds %.15g and the wall %.15g", a.Left, angles, places)
		}
	})
}
