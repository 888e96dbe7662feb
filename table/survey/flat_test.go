package survey

import (
	"math"
	"strings"
	"testing"
)

// TestStrips: the widths over which parallel sides face each other, by the
// figures' own dimensions.
func TestStrips(t *testing.T) {
	type width struct{ across, along float64 }
	for _, c := range []struct {
		kind string
		v    []float64
		want []width
	}{
		{"stadium", []float64{1, 1}, []width{{2, 2}}},
		{"rectangle", []float64{2, 1}, []width{{1, 2}, {2, 1}}},
		{"triangle", []float64{3, 4, 5}, nil},
		{"drop", []float64{1, 2}, nil},
		{"belt", []float64{1, 0.5, 2}, nil},
		{"belt", []float64{1, 1, 2}, []width{{2, 2}}},
		{"wedge", []float64{2, 1, 0.4}, []width{{2, 0.4}}},
		{"polygon", []float64{5, 1}, nil},
		{"polygon", []float64{6, 1}, []width{{math.Sqrt(3), 1}, {math.Sqrt(3), 1}, {math.Sqrt(3), 1}}},
		// The disc keeps the middle half of the square from both pairs.
		{"square-with-disc", []float64{2, 0.5}, []width{{2, 1}, {2, 1}}},
		// The cap's rim faces nothing straight; the stem's sides each other.
		{"mushroom", []float64{1, 0.5, 1}, []width{{1, 1}}},
		// 32 posts a row, 1 wide, bar the rays between either pair of sides.
		{"box-of-posts", []float64{100, 1024, 0.5}, []width{{100, 68}, {100, 68}}},
		{"bow-tie", []float64{2, 1.2, 0.5}, []width{{2, 0.5}}},
		{"l-shape", []float64{3, 4, 1, 1.5}, []width{{1.5, 2}, {4, 1}, {3, 1.5}, {1, 2.5}}},
	} {
		got := of(t, 0, c.kind, c.v...).Flatness.Strips
		if len(got) != len(c.want) {
			t.Errorf("%s: %+v, want %v", c.kind, got, c.want)
			continue
		}
		for i, w := range c.want {
			if math.Abs(got[i].Across-w.across) > 1e-12*w.across || math.Abs(got[i].Along-w.along) > 1e-8*w.along {
				t.Errorf("%s: strip %d is %g across and %g along, want %v", c.kind, i, got[i].Across, got[i].Along, w)
			}
		}
	}
}

func TestDiameters(t *testing.T) {
	for _, c := range []struct {
		kind  string
		v     []float64
		sweep float64 // 0: none
	}{
		{"disc", []float64{1}, 2 * math.Pi},
		{"cut-disc", []float64{1, 0.5}, 4 * math.Pi / 3},
		{"cut-disc", []float64{1, 0}, 0},
		{"half-disc", []float64{1}, 0},
		{"stadium", []float64{1, 1}, 0},
		{"drop", []float64{1, 2}, 4 * math.Pi / 3},
		{"ring", []float64{1, 0.4, 0}, 0},             // the inner disc bars them all
		{"ring", []float64{1, 0.4, 0.5}, 2 * math.Pi}, // and here it leaves some
		{"belt", []float64{1, 0.5, 1}, 4 * math.Pi / 3},
		{"mushroom", []float64{1, 0.5, 1}, 0},
	} {
		got := of(t, 0, c.kind, c.v...).Flatness.Diameters
		switch {
		case c.sweep == 0 && len(got) > 0:
			t.Errorf("%s %v: %+v", c.kind, c.v, got)
		case c.sweep > 0 && (len(got) != 1 || math.Abs(got[0].Sweep-c.sweep) > 1e-12 || math.Abs(got[0].S1-got[0].S0-c.sweep) > 1e-12):
			t.Errorf("%s %v: %+v, want a sweep of %g", c.kind, c.v, got, c.sweep)
		}
	}
}

// TestZeros: the curvature of a limaçon touches zero at its limit, and of one
// beyond it vanishes where 1 + 2e² + 3e cos φ = 0.
func TestZeros(t *testing.T) {
	r := of(t, 0, "limacon", 1, 0.5)
	if z := r.Flatness.Zeros; len(z) != 1 || math.Abs(z[0].At.X+0.5) > 1e-7 || !r.Convexity.Convex || r.Convexity.Strict {
		t.Errorf("at the limit the zeros are %+v, %+v", z, r.Convexity)
	}
	if text := strings.Join(r.Sentences(), " "); !strings.Contains(text, "no caustic at all (Mather 1982)") {
		t.Errorf("Mather's theorem is not named: %s", text)
	}
	const e = 0.8
	z := of(t, 0, "limacon", 1, e).Flatness.Zeros
	if len(z) != 2 {
		t.Fatalf("%d zeros", len(z))
	}
	for _, p := range z {
		if cos := p.At.X / math.Hypot(p.At.X, p.At.Y); math.Abs(1+2*e*e+3*e*cos) > 1e-9 {
			t.Errorf("no zero at %+v", p)
		}
	}
}
