package modes

import (
	"errors"
	"math"
	"sort"
	"testing"

	"cavitywright/table"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"pgregory.net/rapid"
)

// failer is what testing.T and rapid.T have in common.
type failer interface {
	Helper()
	Fatal(args ...any)
}

func made(t failer, unit table.Unit, kind string, v ...float64) *table.Table {
	t.Helper()
	f, err := shape.New(kind, v)
	if err != nil {
		t.Fatal(err)
	}
	tab, err := table.New(table.Design{Unit: unit, Items: []table.Item{{Shape: f, Place: plane.Identity()}}})
	if err != nil {
		t.Fatal(err)
	}
	return tab
}

func law(t failer, w Wall, kind string, v ...float64) Weyl {
	t.Helper()
	n, err := Of(made(t, table.Metre, kind, v...), w)
	if err != nil {
		t.Fatal(err)
	}
	return n
}

// rectangleModes are the wave numbers below top of the rectangle a × b, in
// order (closed form, separation of variables).
func rectangleModes(w Wall, a, b, top float64) []float64 {
	first := 1
	if w == Neumann {
		first = 0
	}
	var list []float64
	for l := first; math.Pi*float64(l)/a <= top; l++ {
		for m := first; math.Pi*float64(m)/b <= top; m++ {
			if k := math.Pi * math.Hypot(float64(l)/a, float64(m)/b); k < top {
				list = append(list, k)
			}
		}
	}
	sort.Float64s(list)
	return list
}

// TestRectangle: exact counts 77 at 5 GHz and 328 at 10 GHz in 0.40 × 0.25 m,
// 76.8 and 328.1 by Weyl's law (closed forms).
func TestRectangle(t *testing.T) {
	n := law(t, Dirichlet, "rectangle", 0.4, 0.25)
	air := Medium{Speed: LightSpeed, Unit: table.Metre}
	for _, c := range []struct {
		hertz, weyl float64
		exact       int
	}{{5e9, 76.8, 77}, {10e9, 328.1, 328}} {
		k := air.K(c.hertz)
		if got := len(rectangleModes(Dirichlet, 0.4, 0.25, k)); got != c.exact {
			t.Errorf("%g Hz: %d modes, want %d", c.hertz, got, c.exact)
		}
		if got := n.Count(k); math.Abs(got-c.weyl) > 0.05 {
			t.Errorf("%g Hz: the law counts %.4f, want %.1f", c.hertz, got, c.weyl)
		}
	}
	if n.Corners != 0.25 || n.Bend != 0 { // four right angles, 1/16 each
		t.Errorf("the rectangle's constant is %v and %v", n.Corners, n.Bend)
	}
}

// TestQuarterStadium: 1065 levels by Weyl's law at 17.5 GHz (closed form; a
// published superconducting plate of this shape has about 1060, from memory).
func TestQuarterStadium(t *testing.T) {
	n := law(t, Dirichlet, "quarter-stadium", 0.36, 0.2)
	if got := n.Count(Medium{LightSpeed, table.Metre}.K(17.5e9)); math.Abs(got-1065) > 0.5 {
		t.Errorf("the law counts %.2f, want 1065", got)
	}
	if math.Abs(n.Area-0.10342) > 5e-6 || math.Abs(n.Perimeter-1.43416) > 5e-6 {
		t.Errorf("area %.6f, perimeter %.6f", n.Area, n.Perimeter)
	}
}

// zerosOf are the zeros of f between lo and hi, a step apart at least.
func zerosOf(f func(x float64) float64, lo, hi, step float64) []float64 {
	var list []float64
	for a := lo; a < hi; a += step {
		b := a + step
		if (f(a) < 0) == (f(b) < 0) {
			continue
		}
		x, y := a, b
		for range 60 {
			if mid := 0.5 * (x + y); (f(x) < 0) == (f(mid) < 0) {
				x = mid
			} else {
				y = mid
			}
		}
		list = append(list, 0.5*(x+y))
	}
	return list
}

// discModes are the wave numbers below top of the unit disc, in order: zeros of
// Jm, or of its derivative; those of m > 0 twice, in the half disc under
// Dirichlet walls once and without m = 0.
func discModes(w Wall, top float64, times func(m int) int) []float64 {
	var list []float64
	for m := 0; float64(m) < top; m++ { // the first zero lies above m
		f := func(x float64) float64 { return math.Jn(m, x) }
		if w == Neumann {
			f = func(x float64) float64 {
				if m == 0 {
					return -math.J1(x)
				}
				return 0.5 * (math.Jn(m-1, x) - math.Jn(m+1, x))
			}
		}
		for range times(m) {
			list = append(list, zerosOf(f, math.Max(float64(m), 0.5), top, 0.05)...)
		}
		if w == Neumann && m == 0 {
			list = append(list, 0) // the constant mode
		}
	}
	sort.Float64s(list)
	return list[:sort.SearchFloat64s(list, top)]
}

func onceOrTwice(m int) int {
	if m == 0 {
		return 1
	}
	return 2
}

func TestDisc(t *testing.T) {
	// Abramowitz and Stegun, table 9.5; DLMF 10.21.
	want := []float64{2.4048255576957728, 3.8317059702075123, 3.8317059702075123, 5.1356223018406826, 5.1356223018406826, 5.5200781102863106}
	got := discModes(Dirichlet, 5.6, onceOrTwice)
	if len(got) != len(want) {
		t.Fatalf("%v, want %v", got, want)
	}
	n := law(t, Dirichlet, "disc", 1)
	for i, k := range want {
		if math.Abs(got[i]-k) > 1e-13*k {
			t.Errorf("mode %d at %.17g, want %.17g", i+1, got[i], k)
		}
		// The law runs through the middle of the staircase, give or take one.
		if d := n.Count(k) - float64(i) - 0.5; math.Abs(d) > 1 {
			t.Errorf("at mode %d the law is %g off", i+1, d)
		}
	}
}

// offset is the mean over k from lo to hi of the law minus the exact count.
func offset(count func(k float64) float64, exact []float64, lo, hi float64) float64 {
	const n = 20000
	sum := 0.0
	for i := range n {
		k := lo + (hi-lo)*(float64(i)+0.5)/n
		sum += count(k) - float64(sort.SearchFloat64s(exact, k))
	}
	return sum / n
}

// TestConstants: the exact counts of shapes that separate, averaged over many
// modes, show the law's constant: a sign that is wrong, or a corner or the
// curvature left out, moves it by 1/16 at least (half of a half disc's corner
// term) and mostly far more.
func TestConstants(t *testing.T) {
	const top = 60
	for _, c := range []struct {
		name  string
		law   Weyl
		exact []float64
	}{
		{"disc", law(t, Dirichlet, "disc", 1), discModes(Dirichlet, top, onceOrTwice)},
		{"disc, Neumann", law(t, Neumann, "disc", 1), discModes(Neumann, top, onceOrTwice)},
		{"half disc", law(t, Dirichlet, "half-disc", 1), discModes(Dirichlet, top, func(m int) int { return min(m, 1) })},
		{"half disc, Neumann", law(t, Neumann, "half-disc", 1), discModes(Neumann, top, func(int) int { return 1 })},
		{"rectangle", law(t, Dirichlet, "rectangle", 1.3, 1), rectangleModes(Dirichlet, 1.3, 1, top)},
		{"rectangle, Neumann", law(t, Neumann, "rectangle", 1.3, 1), rectangleModes(Neumann, 1.3, 1, top)},
	} {
		if d := offset(c.law.Count, c.exact, 5, top); math.Abs(d) > 0.05 {
			t.Errorf("%s: the law is %.4f off on the average of %d modes", c.name, d, len(c.exact))
		}
	}
}

func TestInverse(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		kind := rapid.SampledFrom([]string{"disc", "stadium", "mushroom", "l-shape", "limacon", "square-with-disc"}).Draw(t, "kind")
		n := law(t, Wall(rapid.IntRange(0, 1).Draw(t, "wall")), kind, param.Defaults(shape.Find(kind).Specs)...)
		count := math.Pow(10, rapid.Float64Range(0.3, 6).Draw(t, "log count"))
		k := n.At(count)
		if d := math.Abs(n.Count(k) - count); !(d <= 1e-12*(count+n.Perimeter*k)) {
			t.Fatalf("%v: count %v at k = %v is off by %v", n, count, k, d)
		}
		h := 1e-4 * k
		if d := (n.Count(k+h)-n.Count(k-h))/(2*h) - n.Density(k); math.Abs(d) > 1e-7*n.Density(k) {
			t.Fatalf("%v: the density at %v is off by %v", n, k, d)
		}
		m := Medium{Speed: math.Pow(10, rapid.Float64Range(2, 9).Draw(t, "log speed")), Unit: table.Micrometre}
		if d := math.Abs(m.K(m.Hertz(k)) - k); d > 1e-14*k {
			t.Fatalf("k = %v comes back off by %v", k, d)
		}
	})
	if k := law(t, Dirichlet, "disc", 1).At(-9); !math.IsNaN(k) {
		t.Errorf("a negative count is reached at %v", k)
	}
}

// TestUnits: a plate in millimetres has the counts of the one in metres.
func TestUnits(t *testing.T) {
	big, err1 := Of(made(t, table.Metre, "stadium", 0.2, 0.1), Dirichlet)
	small, err2 := Of(made(t, table.Millimetre, "stadium", 200, 100), Dirichlet)
	if err1 != nil || err2 != nil {
		t.Fatal(err1, err2)
	}
	a := big.Count(Medium{LightSpeed, table.Metre}.K(9e9))
	b := small.Count(Medium{LightSpeed, table.Millimetre}.K(9e9))
	if math.Abs(a-b) > 1e-10*a || a < 100 {
		t.Errorf("%v modes and %v", a, b)
	}
}

func TestOpenIsRefused(t *testing.T) {
	tab := made(t, table.Metre, "three-posts", 1, 6)
	if _, err := Of(tab, Dirichlet); !errors.Is(err, ErrOpen) {
		t.Errorf("Of: %v", err)
	}
	if _, err := PlateOf(tab, Metal, 1); !errors.Is(err, ErrOpen) {
		t.Errorf("PlateOf: %v", err)
	}
}
