package render

import (
	"math"
	"slices"
	"strconv"
	"strings"
	"testing"

	"cavitywright/sim/figure"

	"pgregory.net/rapid"
)

// ends draws the two ends of an axis over many orders of magnitude.
func ends(t *rapid.T) (lo, hi float64) {
	size := math.Pow(10, rapid.Float64Range(-12, 12).Draw(t, "size"))
	lo = rapid.Float64Range(-20, 20).Draw(t, "lo") * size
	return lo, lo + size*rapid.Float64Range(0.01, 30).Draw(t, "span")
}

// parsed reads a label as a person would.
func parsed(t interface{ Fatalf(string, ...any) }, label string) float64 {
	v, err := strconv.ParseFloat(strings.ReplaceAll(label, minus, "-"), 64)
	if err != nil {
		t.Fatalf("label %q is no number", label)
	}
	return v
}

func TestLinearTicksAreEvenAndReadBack(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		lo, hi := ends(t)
		most := rapid.IntRange(2, 12).Draw(t, "most")
		l := Ticks(lo, hi, figure.Linear, most)
		n := len(l.Major)
		if n > most+1 || n == 0 && most >= 5 {
			t.Fatalf("%d ticks for at most %d", n, most+1)
		}
		for i, tick := range l.Major {
			if tick.At < lo-slack*(hi-lo) || tick.At > hi+slack*(hi-lo) {
				t.Fatalf("tick %g outside [%g, %g]", tick.At, lo, hi)
			}
			want := parsed(t, tick.Label) * math.Pow10(l.Exp)
			if math.Abs(want-tick.At) > 1e-12*math.Max(math.Abs(lo), math.Abs(hi)) {
				t.Fatalf("tick at %g is labelled %q", tick.At, tick.Label)
			}
			if strings.Contains(tick.Label, "-") || len([]rune(tick.Label)) > 12 {
				t.Fatalf("label %q", tick.Label)
			}
			if i > 1 {
				a, b := l.Major[i-1].At-l.Major[i-2].At, tick.At-l.Major[i-1].At
				if math.Abs(a-b) > 1e-9*b || b <= 0 {
					t.Fatalf("steps %g and %g", a, b)
				}
			}
		}
		if n > 1 {
			step := l.Major[1].At - l.Major[0].At
			m := step / math.Pow(10, math.Floor(math.Log10(step)+1e-9))
			if d := min(math.Abs(m-1), math.Abs(m-2), math.Abs(m-5)); d > 1e-6 {
				t.Fatalf("step %g is not 1, 2 or 5 times a power of ten", step)
			}
			// The next finer step would give more ticks than asked for, so
			// no axis is needlessly bare.
			finer := step / 2
			if m > 4 {
				finer = step * 2 / 5
			}
			if (hi-lo)/finer < float64(most)*(1-1e-6) {
				t.Fatalf("step %g where %g would do", step, finer)
			}
		}
		r := Ticks(hi, lo, figure.Linear, most)
		if len(r.Major) != n {
			t.Fatalf("a reversed axis has %d ticks, not %d", len(r.Major), n)
		}
	})
}

func TestMinorTicksLieBetween(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		lo, hi := ends(t)
		l := Ticks(lo, hi, figure.Linear, 6)
		for _, v := range l.Minor {
			if v < lo || v > hi {
				t.Fatalf("minor tick %g outside [%g, %g]", v, lo, hi)
			}
		}
		if !slices.IsSorted(l.Minor) {
			t.Fatal("minor ticks do not ascend")
		}
	})
}

func TestLogTicks(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		lo := math.Pow(10, rapid.Float64Range(-9, 6).Draw(t, "lo"))
		hi := lo * math.Pow(10, rapid.Float64Range(0.05, 12).Draw(t, "decades"))
		most := rapid.IntRange(3, 9).Draw(t, "most")
		l := Ticks(lo, hi, figure.Log, most)
		if len(l.Major) > most+1 {
			t.Fatalf("%d ticks for at most %d", len(l.Major), most+1)
		}
		if len(l.Major) < 2 && most > 4 {
			t.Fatalf("only %d ticks on [%g, %g]", len(l.Major), lo, hi)
		}
		for i, tick := range l.Major {
			if tick.At < lo*(1-1e-6) || tick.At > hi*(1+1e-6) {
				t.Fatalf("tick %g outside [%g, %g]", tick.At, lo, hi)
			}
			if i > 0 && tick.At <= l.Major[i-1].At {
				t.Fatal("ticks do not ascend")
			}
		}
	})
}

func TestLogLabels(t *testing.T) {
	for _, c := range []struct {
		lo, hi float64
		want   string
	}{
		{1e-4, 1, "10⁻⁴ 10⁻³ 10⁻² 10⁻¹ 10⁰"},
		{0.01, 100, "0.01 0.1 1 10 100"},
		{1, 30, "1 2 5 10 20"},
		{2, 7, "2 3 4 5 6 7"},
		{1e-12, 1e12, "10⁻¹² 10⁻⁸ 10⁻⁴ 10⁰ 10⁴ 10⁸ 10¹²"},
	} {
		var got []string
		for _, tick := range Ticks(c.lo, c.hi, figure.Log, 7).Major {
			got = append(got, tick.Label)
		}
		if s := strings.Join(got, " "); s != c.want {
			t.Errorf("[%g, %g]: %s, want %s", c.lo, c.hi, s, c.want)
		}
	}
}

func TestTicksOfNothing(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	for _, e := range [][2]float64{{1, 1}, {nan, 1}, {0, inf}, {-inf, inf}, {-math.MaxFloat64, math.MaxFloat64}, {1, math.Nextafter(1, 2)}} {
		if l := Ticks(e[0], e[1], figure.Linear, 5); len(l.Major) != 0 {
			t.Errorf("[%g, %g] has ticks %v", e[0], e[1], l.Major)
		}
	}
}

func TestSharedPowerOfTen(t *testing.T) {
	l := Ticks(0, 2.5e-6, figure.Linear, 5)
	if l.Exp != -6 || l.Major[1].Label != "0.5" {
		t.Errorf("Exp %d, labels %v", l.Exp, l.Major)
	}
	if got := title(figure.Axis{Label: "s", Unit: "m"}, l.Exp); got != "s (10⁻⁶ m)" {
		t.Errorf("title %q", got)
	}
	if l := Ticks(0, 10, figure.Linear, 5); l.Exp != 0 || l.Major[5].Label != "10" {
		t.Errorf("Exp %d, labels %v", l.Exp, l.Major)
	}
}
