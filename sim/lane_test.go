package sim

import (
	"math"
	"math/rand/v2"
	"testing"

	"cavitywright/table"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
)

// everyKind is a table of each kind of shape of the catalogue, and some more.
func everyKind(t testing.TB) map[string]*table.Table {
	all := map[string]*table.Table{
		"limaçon 0.49":    one(t, "limacon", 1, 0.49),
		"disc as limaçon": one(t, "limacon", 1, 0),
		"60 posts":        one(t, "box-of-posts", 10, 60, 0.5),
		"700 posts":       one(t, "box-of-posts", 10, 700, 0.01),
		"90 fat posts":    one(t, "box-of-posts", 10, 90, 0.499),
	}
	f, err := shape.New("stadium", param.Values{2, 1})
	if err != nil {
		t.Fatal(err)
	}
	items := []table.Item{{Shape: f, Place: plane.Identity()}}
	for i := range 75 { // more than a word has bits
		p, err := shape.New("disc", param.Values{0.02})
		if err != nil {
			t.Fatal(err)
		}
		at := plane.Identity()
		at.Shift = r2.Vec{X: 0.38*float64(i%15) - 2.66, Y: 0.3*float64(i/15) - 0.6}
		items = append(items, table.Item{Shape: p, Place: at, Role: table.Post})
	}
	if all["75 posts in a stadium"], err = table.New(table.Design{Unit: table.Millimetre, Items: items}); err != nil {
		t.Fatal(err)
	}
	for _, k := range shape.Catalogue() {
		f, err := shape.New(k.Name, param.Defaults(k.Specs))
		if err != nil {
			t.Fatal(err)
		}
		tab, err := table.New(table.Design{Unit: table.Millimetre, Items: []table.Item{{Shape: f, Place: plane.Identity()}}})
		if err != nil {
			t.Fatal(err)
		}
		all[k.Name] = tab
	}
	return all
}

// TestShortcuts: the searches that a table's form permits find what first
// finds, which looks at every span and decides everything: the same span, and
// the place to the rounding of a crossing at a grazing angle.
func TestShortcuts(t *testing.T) {
	const n = 8000
	taken := 0
	for name, tab := range everyKind(t) {
		tr := Compile(tab)
		plain := *tr
		plain.convex, plain.quick = nil, nil
		if tr.convex != nil || tr.quick != nil {
			taken++
		}
		rnd := rand.New(rand.NewPCG(9, 0))
		w, v := tr.Walker(), plain.Walker()
		for range n {
			if w.Last().Stop != Going || rnd.IntN(30) == 0 || w.Last().N == 0 {
				w.Start(tr.Uniform(rnd.Float64(), rnd.Float64()))
			}
			if w.Last().Stop != Going {
				continue
			}
			v.lanes[0] = w.lanes[0]
			from := w.Last()
			got, want := w.Next(0.5), v.Next(0.5)
			if got.Stop != want.Stop || got.Piece != want.Piece {
				t.Fatalf("%s, from %+v: %v on piece %d, want %v on piece %d", name, from, got.Stop, got.Piece, want.Stop, want.Piece)
			}
			if got.Stop != Going {
				continue
			}
			// The error of a place along the wall is that of the line across, over
			// the cosine, at both ends.
			tol := 4e-15 * tr.size * (1 + 1/w.lanes[0].cosIn + got.Flight*math.Abs(w.lanes[0].kappa)/w.lanes[0].cosIn)
			if d := math.Hypot(got.Point.X-want.Point.X, got.Point.Y-want.Point.Y); d > tol {
				t.Errorf("%s, from %+v: the place is %g off (%g allowed)", name, from, d, tol)
			}
			if d := math.Abs(got.S - want.S); d > tol && math.Abs(d-tab.Length()) > tol {
				t.Errorf("%s, from %+v: s is %g off (%g allowed)", name, from, d, tol)
			}
			if d := math.Abs(got.P - want.P); d > tol*(1/tr.size+math.Abs(w.lanes[0].kappa)) {
				t.Errorf("%s, from %+v: p is %g off", name, from, d)
			}
		}
	}
	if taken < 12 {
		t.Errorf("only %d tables have a search of their own", taken)
	}
}

// TestTogether: orbits that are followed together are to the last bit those
// that a walker follows alone, whatever ends and begins in the other lanes.
func TestTogether(t *testing.T) {
	for name, tab := range everyKind(t) {
		tr := Compile(tab)
		const lanes, steps = 7, 120
		rnd := rand.New(rand.NewPCG(4, 0))
		w := tr.Walkers(lanes)
		var alone [lanes]*Walker
		u := make([]float64, lanes)
		for i := range alone {
			alone[i] = tr.Walker()
		}
		for n := range steps {
			for i := range lanes {
				if u[i] = rnd.Float64(); w.Last(i).Stop == Going && n%29 != i {
					continue
				}
				s := Start{State: tr.Uniform(rnd.Float64(), rnd.Float64())}
				w.Open(i, s)
				alone[i].Open(s)
			}
			w.Next(u)
			for i := range lanes {
				b := alone[i].Last()
				if b.Stop == Going {
					b = alone[i].Next(u[i])
				}
				if got := *w.Last(i); !alike(got, b) || got.Stop == Going && w.Jacobian(i) != alone[i].Jacobian() {
					t.Fatalf("%s, step %d, lane %d: together %+v, alone %+v", name, n, i, got, b)
				}
			}
		}
	}
}

// alike compares two bounces bit by bit.
func alike(a, b Bounce) bool {
	same := func(x, y float64) bool { return math.Float64bits(x) == math.Float64bits(y) }
	return a.N == b.N && a.Piece == b.Piece && a.Stop == b.Stop && same(a.S, b.S) && same(a.P, b.P) &&
		same(a.Point.X, b.Point.X) && same(a.Point.Y, b.Point.Y) && same(a.Dir.X, b.Dir.X) && same(a.Dir.Y, b.Dir.Y) &&
		same(a.Flight, b.Flight) && same(a.Weight, b.Weight) && same(a.Exit, b.Exit) && same(a.ExitP, b.ExitP)
}

// TestAngle: angles of unit vectors and sines agree with the standard library's
// to three units in the last place of 1.
func TestAngle(t *testing.T) {
	rnd := rand.New(rand.NewPCG(1, 2))
	for i := range 200_000 {
		a := 2 * math.Pi * rnd.Float64()
		if i%4 == 0 {
			a = float64(rnd.IntN(9))*math.Pi/4 + rnd.NormFloat64()*math.Pow(10, -16*rnd.Float64())
		}
		s, c := math.Sincos(a)
		want := math.Atan2(s, c)
		if want < 0 {
			want += 2 * math.Pi
		}
		if got := angle(c, s); math.Abs(got-want) > 1e-15 && math.Abs(math.Abs(got-want)-2*math.Pi) > 1e-15 {
			t.Fatalf("the angle of (%v, %v) is %v, want %v", c, s, got, want)
		}
		if s1, c1 := sincos(a - math.Pi); math.Abs(s1-math.Sin(a-math.Pi)) > 4e-16 || math.Abs(c1-math.Cos(a-math.Pi)) > 4e-16 {
			t.Fatalf("sine and cosine of %v are %v, %v", a-math.Pi, s1, c1)
		}
	}
}
