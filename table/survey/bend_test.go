package survey

import (
	"math"
	"strings"
	"testing"

	"cavitywright/table/plane"
)

// TestCurvatureAgainstFormula: ellipse ab/(a² sin² + b² cos²)^(3/2) by the
// eccentric angle, limaçon (1 + 2e² + 3e cos φ)/(1 + e² + 2e cos φ)^(3/2) by
// the polar angle (both closed forms, r = 1).
func TestCurvatureAgainstFormula(t *testing.T) {
	const a, b, e = 2.0, 1.0, 0.43
	for _, c := range []struct {
		kind string
		v    []float64
		want func(x, y float64) float64
	}{
		{"ellipse", []float64{a, b}, func(x, y float64) float64 {
			sin, cos := y/b, x/a
			return a * b / math.Pow(a*a*sin*sin+b*b*cos*cos, 1.5)
		}},
		{"limacon", []float64{1, e}, func(x, y float64) float64 {
			cos := x / math.Hypot(x, y)
			return (1 + 2*e*e + 3*e*cos) / math.Pow(1+e*e+2*e*cos, 1.5)
		}},
	} {
		tab := placed(t, plane.Identity(), c.kind, c.v...)
		runs := Of(tab, 0).Bend.Runs
		if len(runs) != 1 || len(runs[0].S) < runSamples {
			t.Fatalf("%s: %d runs", c.kind, len(runs))
		}
		for i, s := range runs[0].S {
			f := tab.At(tab.Wrap(s))
			if got, want := runs[0].Kappa[i], c.want(f.Point.X, f.Point.Y); math.Abs(got-want) > 1e-12*want {
				t.Errorf("%s: curvature %.16g at s = %g, want %.16g", c.kind, got, s, want)
			}
		}
	}
}

func TestSharpestBends(t *testing.T) {
	for _, c := range []struct {
		kind                 string
		v                    []float64
		focusing, dispersing float64 // NaN: none
	}{
		{"ellipse", []float64{2, 1}, 0.5, math.NaN()}, // b²/a
		{"ellipse", []float64{1, 3}, 1.0 / 3, math.NaN()},
		{"stadium", []float64{1, 0.7}, 0.7, math.NaN()},
		{"square-with-disc", []float64{2, 0.5}, math.NaN(), 0.5},
		{"rectangle", []float64{2, 1}, math.NaN(), math.NaN()},
		{"limacon", []float64{1, 1}, 0, math.NaN()}, // the cusp
		// At φ = 0 r = 1 + e, r'' = -4e: (1 + e)²/(1 + 5e); at φ = π/2 the same
		// with -e (closed forms).
		{"quadrupole", []float64{1, 0.3}, 1.69 / 2.5, 0.49 / 0.5},
		// At φ = 0 r² = u = 1.2 and u'' = -0.8: √u³/(u - u''/2).
		{"flattened-quadrupole", []float64{1, 0.1}, math.Pow(1.2, 1.5) / 1.6, math.NaN()},
		// The arc through the waist: (c²/4 + h²)/(2h), c = 2, h = 0.35.
		{"bow-tie", []float64{2, 1.2, 0.5}, math.NaN(), (1 + 0.35*0.35) / 0.7},
	} {
		b := of(t, 0, c.kind, c.v...).Bend
		for _, side := range []struct {
			got  Extreme
			want float64
		}{{b.Focusing, c.focusing}, {b.Dispersing, c.dispersing}} {
			if math.IsNaN(side.want) != math.IsNaN(side.got.Radius) || math.Abs(side.got.Radius-side.want) > 1e-12*math.Max(side.want, 1) {
				t.Errorf("%s %v: radius %.15g at %v, want %.15g", c.kind, c.v, side.got.Radius, side.got.Place, side.want)
			}
		}
	}
	// The ellipse bends most at the ends of its long axis.
	if at := of(t, 0, "ellipse", 1, 3).Bend.Focusing.Place.At; math.Abs(at.X) > 1e-7 || math.Abs(math.Abs(at.Y)-3) > 1e-12 {
		t.Errorf("the ellipse bends most at %v", at)
	}
}

// TestJumpsAndCorners: the stadium's caps begin and end with a jump of 1/r; the
// drop's tip has twice the arcsine of r over its distance.
func TestJumpsAndCorners(t *testing.T) {
	r := of(t, 0, "stadium", 1, 0.5)
	if len(r.Jumps) != 4 || len(r.Corners) != 0 || len(r.Bend.Runs) != 4 {
		t.Fatalf("%d jumps, %d corners, %d runs", len(r.Jumps), len(r.Corners), len(r.Bend.Runs))
	}
	for i, j := range r.Jumps {
		if d := math.Abs(j.After-j.Before) - 2; math.Abs(d) > 1e-12 || (j.After > j.Before) != (i%2 == 1) {
			t.Errorf("jump %d is %+v", i, j)
		}
	}
	drop := of(t, 0, "drop", 1, 2)
	if len(drop.Corners) != 1 || math.Abs(drop.Corners[0].Angle-math.Pi/3) > 1e-12 || len(drop.Jumps) != 2 {
		t.Errorf("the drop has corners %+v and %d jumps", drop.Corners, len(drop.Jumps))
	}
	cusp := of(t, 0, "limacon", 1, 1)
	if len(cusp.Corners) != 1 || math.Abs(cusp.Corners[0].Angle-2*math.Pi) > 1e-9 {
		t.Errorf("the cusp is %+v", cusp.Corners)
	}
	if text := strings.Join(cusp.Sentences(), " "); !strings.Contains(text, "tends to zero at the cusp") {
		t.Errorf("the cusp is not named: %s", text)
	}
}
