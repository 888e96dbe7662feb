package survey

import (
	"math"
	"testing"
)

// TestToolAtCorners: between straight sides a round tool stays R/tan(α/2) short
// of the corner along each, and R (1/sin(α/2) - 1) from it (closed forms).
func TestToolAtCorners(t *testing.T) {
	const tool = 0.1
	for _, c := range []struct {
		kind    string
		v       []float64
		angle   float64
		corners int
	}{
		{"rectangle", []float64{2, 1}, math.Pi / 2, 4},
		{"polygon", []float64{6, 1}, 2 * math.Pi / 3, 6},
		{"triangle", []float64{2, 2, 2}, math.Pi / 3, 3},
		{"l-shape", []float64{2, 2, 1, 1}, math.Pi / 2, 5},
		{"drop", []float64{1, 2}, math.Pi / 3, 1},
	} {
		got := of(t, tool, c.kind, c.v...).Tool
		if len(got.Beyond) != c.corners {
			t.Errorf("%s: %+v", c.kind, got.Beyond)
			continue
		}
		side := tool / math.Tan(c.angle/2)
		if d := math.Abs(got.Length - 2*side*float64(c.corners)); d > 1e-4*side {
			t.Errorf("%s: %g of wall is not touched, off by %g", c.kind, got.Length, d)
		}
		for _, b := range got.Beyond {
			if left := tool * (1/math.Sin(c.angle/2) - 1); b.Why != AtCorner || math.Abs(b.Left-left) > 1e-12 {
				t.Errorf("%s: %+v, want %g left", c.kind, b, left)
			}
		}
	}
}

// TestToolInBends: a tool just fits a rounded corner of its own radius; a
// greater one R stays (R - r)/tan(α/2) short of it on each side.
func TestToolInBends(t *testing.T) {
	const r = 0.25
	if got := of(t, r, "rounded-triangle", 1, r).Tool; len(got.Beyond) != 0 || !got.Checked {
		t.Errorf("a tool of the corner's radius leaves %+v", got.Beyond)
	}
	const tool = 0.3
	got := of(t, tool, "rounded-triangle", 1, r).Tool
	if len(got.Beyond) != 3 {
		t.Fatalf("%+v", got.Beyond)
	}
	want := 3 * (r*2*math.Pi/3 + 2*(tool-r)/math.Tan(math.Pi/6))
	if d := math.Abs(got.Length - want); d > 1e-3*want {
		t.Errorf("%g of wall is not touched, want %g", got.Length, want)
	}
	for _, b := range got.Beyond {
		if b.Why != TightBend || !math.IsNaN(b.Left) {
			t.Errorf("%+v", b)
		}
	}
	// The smallest radius of an ellipse is b²/a = 0.5, at two places.
	if got := of(t, 0.499, "ellipse", 2, 1).Tool; len(got.Beyond) != 0 {
		t.Errorf("in the ellipse a small tool leaves %+v", got.Beyond)
	}
	if got := of(t, 0.55, "ellipse", 2, 1).Tool; len(got.Beyond) != 2 || got.Beyond[0].Why != TightBend || got.Beyond[1].Why != TightBend {
		t.Errorf("in the ellipse a great tool leaves %+v", got.Beyond)
	}
}

// TestToolInNarrows: between the circles of a ring a tool of radius q lies
// against the outer one where its centre, R - q from the middle, is r + q or
// more from the inner centre (law of cosines).
func TestToolInNarrows(t *testing.T) {
	const big, small, off, tool = 1.0, 0.4, 0.3, 0.2
	got := of(t, tool, "ring", big, small, off).Tool
	if len(got.Beyond) != 2 || got.Beyond[0].Why != Narrow || got.Beyond[1].Why != Narrow {
		t.Fatalf("%+v", got.Beyond)
	}
	d, e := big-tool, small+tool
	phi := math.Acos((d*d + off*off - e*e) / (2 * d * off))
	b := got.Beyond[0]
	if math.Abs(b.S1-phi) > 1e-5 || math.Abs(b.S0-(2*math.Pi-phi)) > 1e-5 {
		t.Errorf("not touched from %g to %g, want ±%g", b.S0, b.S1, phi)
	}
}
