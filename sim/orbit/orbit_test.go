package orbit

import (
	"errors"
	"math"
	"slices"
	"testing"

	"cavitywright/table"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/table/wall"
)

// drawn is the table of one figure, walls of the law (nil for mirrors).
func drawn(t testing.TB, law wall.Law, kind string, v ...float64) *table.Table {
	t.Helper()
	f, err := shape.New(kind, param.Values(v))
	if err != nil {
		t.Fatal(err)
	}
	tab, err := table.New(table.Design{Unit: table.Millimetre, Bare: law, Items: []table.Item{{Shape: f, Place: plane.Identity()}}})
	if err != nil {
		t.Fatal(err)
	}
	return tab
}

func found(t testing.TB, tab *table.Table, upTo int) *List {
	t.Helper()
	l, err := Find(tab, Search{UpTo: upTo})
	if err != nil {
		t.Fatal(err)
	}
	return l
}

// known is an orbit that a table must have: Sets of it, and as a family or not.
type known struct {
	period        int
	length, trace float64
	copies        int
	family        bool
}

func (l *List) alike(k known) (all []*Orbit) {
	for i := range l.Orbits {
		o := &l.Orbits[i]
		if o.Period() == k.period && math.Abs(o.Length-k.length) < 1e-12*k.length && math.Abs(o.Trace()-k.trace) < 1e-11*(1+math.Abs(k.trace)) {
			all = append(all, o)
		}
	}
	return all
}

func hold(t *testing.T, l *List, wanted ...known) {
	t.Helper()
	for _, k := range wanted {
		all := l.alike(k)
		if len(all) != k.copies {
			t.Errorf("%d orbits of %d bounces, length %.16g, trace %.16g; want %d", len(all), k.period, k.length, k.trace, k.copies)
		}
		for _, o := range all {
			if (o.Family != nil) != k.family {
				t.Errorf("%d bounces, length %.16g: family %v, want %v", k.period, k.length, o.Family != nil, k.family)
			}
		}
	}
	for i := range l.Orbits {
		o := &l.Orbits[i]
		m := o.Monodromy
		if !(o.Closure <= closureTol) || math.Abs(m.Det()-1) > 1e-13*(1+math.Abs(m.SS*m.PP)+math.Abs(m.SP*m.PS)) {
			t.Errorf("%d bounces, length %.16g: closure %g, determinant %g", o.Period(), o.Length, o.Closure, o.Monodromy.Det())
		}
		for k := range i { // each begins at its least s, so that equal ones begin alike
			x := &l.Orbits[k]
			if x.Period() == o.Period() && math.Abs(x.Length-o.Length) < 1e-9 && math.Abs(x.Bounces[0].S-o.Bounces[0].S) < 1e-7 &&
				math.Abs(x.Bounces[0].P-o.Bounces[0].P) < 1e-6 && math.Abs(x.Bounces[1].S-o.Bounces[1].S) < 1e-7 {
				t.Errorf("%d bounces, length %.16g, from s = %.9g: listed twice", o.Period(), o.Length, o.Bounces[0].S)
			}
		}
	}
}

// counts wants the numbers of orbits of 2, 3, ... bounces, those that differ
// when run backwards counted twice, and all of them settled.
func counts(t *testing.T, l *List, wanted ...int) {
	t.Helper()
	for i, n := range wanted {
		if got := l.Count(i + 2); got != n || !l.Settled[i+2] {
			t.Errorf("%d orbits of %d bounces (settled: %v), want %d", got, i+2, l.Settled[i+2], n)
		}
	}
}

// Closed forms of the stadium with half-length 1 and radius 1, evaluated.
func TestStadium(t *testing.T) {
	l := found(t, drawn(t, nil, "stadium", 1, 1), 4)
	hold(t, l,
		known{2, 4, 2, 1, true},   // bouncing ball
		known{2, 8, 34, 1, false}, // horizontal
		known{3, 8.6019519928479649, -46.055019249287666, 2, false},
		known{4, 8.9442719099991588, 62, 1, false},                 // diamond
		known{4, 9.6568542494923802, 175.25483399593904, 1, false}, // rectangle
		known{4, 10.392304845413264, 98, 1, false},                 // bow-tie
	)
	ball := l.Orbits[0]
	for i, want := range []Range{{0, 2}, {2 + math.Pi, 4 + math.Pi}} {
		if got := ball.Family.Ranges[i]; math.Abs(got.From-want.From)+math.Abs(got.To-want.To) > 1e-12 || ball.Family.Closed {
			t.Errorf("the bouncing balls sweep over %v, want %v", got, want)
		}
	}
	n := 0
	for i := range l.Orbits {
		if l.Orbits[i].Family != nil {
			n++
		}
	}
	if n != 1 {
		t.Errorf("%d families, want the bouncing balls only", n)
	}
}

// Closed forms (two-bounce formula of Kogelnik and Li, Appl. Opt. 5, 1550,
// 1966), evaluated.
func TestOvals(t *testing.T) {
	l := found(t, drawn(t, nil, "limacon", 1, 0.43), 4)
	hold(t, l, known{2, 4, -2.4528196708426451, 1, false}, known{2, 4.3117816811181266, 3.5071143982981847, 1, false})
	counts(t, l, 2)
	l = found(t, drawn(t, nil, "limacon", 1, 1), 4)
	hold(t, l, known{2, 5.1961524227066319, 4.25, 1, false})
	counts(t, l, 1)
	l = found(t, drawn(t, nil, "quadrupole", 1, 0.1), 4)
	hold(t, l, known{2, 4.4, 9.9338842975206612, 1, false}, known{2, 3.6, -1.9506172839506173, 1, false}, known{4, 5.6850681614207582, -1.9989843969789397, 1, false})
	counts(t, l, 2)
}

// The bow-tie is born from the short diameter where its half-trace is -1, at
// eps = 1/9 (closed form).
func TestBirth(t *testing.T) {
	bowTies := func(eps float64) (n int) {
		l := found(t, drawn(t, nil, "quadrupole", 1, eps), 4)
		for i := range l.Orbits {
			if o := &l.Orbits[i]; o.Period() == 4 && o.Winding == 2 && o.Trace() < 2 {
				n++
			}
		}
		return n
	}
	if n := bowTies(1.0/9 - 0.002); n != 0 {
		t.Errorf("%d bow-ties below 1/9", n)
	}
	if n := bowTies(1.0/9 + 0.002); n != 1 {
		t.Errorf("%d bow-ties above 1/9, want 1", n)
	}
}

// Closed forms: Poncelet's families of the ellipse 2:1, two isolated diameters.
func TestEllipse(t *testing.T) {
	l := found(t, drawn(t, nil, "ellipse", 2, 1), 5)
	hold(t, l,
		known{2, 4, -1, 1, false}, known{2, 8, 194, 1, false},
		known{3, 8.5308416456490055, 2, 1, true},
		known{4, 8.9442719099991588, 2, 1, true},
		known{5, 9.1886572049454405, 2, 1, true},
	)
	// One more family of four bounces, with a hyperbola as caustic, and the star
	// {5/2}: every other orbit of up to five is named above.
	counts(t, l, 2, 2, 3, 4)
}

// Closed form: polygons {n/m} of the disc, 2 n sin(pi m/n), p = cos(pi m/n), a
// family each for m/n in lowest terms, m < n/2 in two senses; the diameters.
func TestDisc(t *testing.T) {
	l := found(t, drawn(t, nil, "disc", 1), 7)
	want := 0
	for n := 2; n <= 7; n++ {
		for m := 1; 2*m <= n; m++ {
			if n%m != 0 || m == 1 {
				want++
				all := l.alike(known{n, 2 * float64(n) * math.Sin(math.Pi*float64(m)/float64(n)), 2, 1, true})
				if len(all) != 1 || all[0].Family == nil || !all[0].Family.Closed || all[0].Winding != m || all[0].TwoSenses != (n > 2) {
					t.Errorf("{%d/%d}: %d families", n, m, len(all))
					continue
				}
				if lo, hi := all[0].PRange(); math.Abs(lo-math.Cos(math.Pi*float64(m)/float64(n))) > 1e-13 || math.Abs(hi-lo) > 1e-13 {
					t.Errorf("{%d/%d}: |p| from %g to %g", n, m, lo, hi)
				}
			}
		}
	}
	if len(l.Orbits) != want {
		t.Errorf("%d entries, want %d", len(l.Orbits), want)
	}
}

// Fagnano's orbit of the acute triangle 13, 14, 15 (1775; Coxeter, Introduction
// to Geometry, 1.6): length 8 D^2/(abc). An odd orbit of a polygon has the
// trace -2, and run twice it lies in a family.
func TestTriangle(t *testing.T) {
	l := found(t, drawn(t, nil, "triangle", 13, 14, 15), 6)
	hold(t, l, known{3, 20.676923076923077, -2, 1, false}, known{6, 2 * 20.676923076923077, 2, 1, true})
	counts(t, l, 0, 2, 0, 0, 2)
	if !l.Complete() {
		t.Error("the list of a polygon is not complete")
	}
}

// Closed form, by unfolding the rectangle: a family for each pair of coprime
// numbers p, q of times that its width and height are run through in one half
// of the way, of 2 (p + q) bounces and length 2 sqrt(p^2 w^2 + q^2 h^2). The
// list is complete.
func TestRectangle(t *testing.T) {
	l := found(t, drawn(t, nil, "rectangle", 2, 1), 10)
	want := 0
	for p := range 6 {
		for q := range 6 - p {
			if coprime := p+q == 1 || p > 0 && q > 0 && gcd(p, q) == 1; coprime {
				want++
				hold(t, l, known{2 * (p + q), 2 * math.Hypot(2*float64(p), float64(q)), 2, 1, true})
			}
		}
	}
	if len(l.Orbits) != want || !l.Complete() {
		t.Errorf("%d families, want %d; complete: %v", len(l.Orbits), want, l.Complete())
	}
}

func gcd(a, b int) int {
	for b > 0 {
		a, b = b, a%b
	}
	return a
}

// In a square with a disc of radius 0.35 the squares at 45 degrees pass the disc
// by 1/(2 sqrt 2) - 0.35 only: they sweep over 2 sqrt 2 times as much of each
// side (closed form), 1/600 of the wall, less than a cell.
func TestNarrowFamily(t *testing.T) {
	l := found(t, drawn(t, nil, "square-with-disc", 1, 0.35), 4)
	all := l.alike(known{4, 2 * math.Sqrt2, 2, 1, true})
	if len(all) != 1 || all[0].Family == nil {
		t.Fatalf("%d squares", len(all))
	}
	half := math.Sqrt2 * (1/(2*math.Sqrt2) - 0.35)
	for i, r := range all[0].Family.Ranges {
		if mid := float64(i) + 0.5; math.Abs(r.From-(mid-half)) > 1e-6 || math.Abs(r.To-(mid+half)) > 1e-6 {
			t.Errorf("side %d: from %.9g to %.9g, want %.9g to %.9g", i+1, r.From, r.To, mid-half, mid+half)
		}
	}
	counts(t, l, 8, 0, 14)
}

// The prime cycles of three posts: counts from the Moebius sum over
// 2^n + 2 (-1)^n (closed form), lengths and multipliers in closed form; none
// is pruned at separation 6, nor at 2.1 (the first are at 2.04822: K. T. Hansen,
// Nonlinearity 6, 753, 1993, from memory).
func TestThreePosts(t *testing.T) {
	primes := []int{3, 2, 3, 6, 9, 18, 30}
	l := found(t, drawn(t, nil, "three-posts", 1, 6), 8)
	counts(t, l, primes...)
	if !l.Complete() {
		t.Error("not every word was decided")
	}
	for _, k := range []struct {
		period             int
		length, multiplier float64
	}{{2, 8, 97.989794855664}, {3, 12.80384757729337, -1631.1370855015}} {
		for i := range l.Orbits {
			if o := &l.Orbits[i]; o.Period() == k.period {
				a, b := o.Multipliers()
				if math.Abs(o.Length-k.length) > 1e-13*k.length || math.Abs(real(a)-k.multiplier) > 1e-11*math.Abs(k.multiplier) || imag(a) != 0 || math.Abs(real(a*b)-1) > 1e-14 {
					t.Errorf("%d bounces: length %.16g, multiplier %.14g; want %.16g, %.14g", k.period, o.Length, real(a), k.length, k.multiplier)
				}
			}
		}
	}
	if n := found(t, drawn(t, nil, "three-posts", 1, 2.1), 12).Count(12); n != 335 {
		t.Errorf("%d cycles of 12 bounces at separation 2.1, want 335", n)
	}
	near := found(t, drawn(t, nil, "three-posts", 1, 2.001), 12)
	if n := near.Count(12); n >= 335 || !near.Complete() {
		t.Errorf("%d cycles of 12 bounces at separation 2.001; some must be pruned, and all decided", n)
	}
}

// TestTwists: on a smooth convex table every m/n in lowest terms below 1/2 has
// two orbits at least (Birkhoff 1927).
func TestTwists(t *testing.T) {
	for _, c := range []struct {
		kind string
		v    []float64
	}{{"limacon", []float64{1, 0.05}}, {"limacon", []float64{1, 0.3}}, {"quadrupole", []float64{1, 0.02}}} {
		l := found(t, drawn(t, nil, c.kind, c.v...), 5)
		for _, w := range [][2]int{{1, 2}, {1, 3}, {1, 4}, {1, 5}, {2, 5}} {
			n := 0
			for i := range l.Orbits {
				if o := &l.Orbits[i]; o.Period() == w[1] && o.Winding == w[0] {
					n++
				}
			}
			if n < 2 {
				t.Errorf("%s %v: %d orbits of winding %d/%d", c.kind, c.v, n, w[0], w[1])
			}
		}
	}
}

// TestConfined: of the limaçon's orbits those with |p| > 1/n at all bounces stay.
func TestConfined(t *testing.T) {
	tab := drawn(t, wall.Dielectric{Index: 3.3, Outside: 1}, "limacon", 1, 0.43)
	l := found(t, tab, 4)
	stay := 0
	for i := range l.Orbits {
		o := &l.Orbits[i]
		least, _ := o.PRange()
		if o.Confined != (least > 1/3.3) {
			t.Errorf("least |p| %g, confined %v", least, o.Confined)
		}
		if o.Confined {
			stay++
		}
	}
	if stay == 0 || stay == len(l.Orbits) || !Leaks(tab) || Leaks(drawn(t, nil, "disc", 1)) {
		t.Errorf("%d of %d stay", stay, len(l.Orbits))
	}
}

func TestLimits(t *testing.T) {
	for _, n := range []int{-1, 1, MostBounces + 1} {
		_, err := Find(drawn(t, nil, "disc", 1), Search{UpTo: n})
		if limit := (*Limit)(nil); !errors.As(err, &limit) || limit.Asked != n || limit.Greatest != MostBounces {
			t.Errorf("%d bounces: %v", n, err)
		}
	}
	stop := errors.New("stop")
	for _, tab := range []*table.Table{drawn(t, nil, "disc", 1), drawn(t, nil, "three-posts", 1, 6)} {
		if _, err := Find(tab, Search{UpTo: 3, Watch: func() error { return stop }}); !errors.Is(err, stop) {
			t.Errorf("a search that was to stop answers %v", err)
		}
	}
	if slices.Contains(found(t, drawn(t, nil, "disc", 1), 2).Settled[2:], false) {
		t.Error("the disc does not settle")
	}
}
