package outline

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"
	"time"

	"cavitywright/table"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// limacon are n points of r = R (1 + eps cos phi), evenly in phi.
func limacon(n int, radius, eps float64) []r2.Vec {
	p := make([]r2.Vec, n)
	for i := range p {
		phi := 2 * math.Pi * float64(i) / float64(n)
		p[i] = r2.Scale(radius*(1+eps*math.Cos(phi)), plane.Polar(phi))
	}
	return p
}

// TestFacetedLimacon: 160 points of a limaçon, fitted, have its area pi R² (1 +
// eps²/2) within 1e-4, and the residual that is stated is that of the points.
func TestFacetedLimacon(t *testing.T) {
	for _, eps := range []float64{0.2, 0.43} {
		points := limacon(160, 5, eps)
		f, r, err := Fitted(points, Fit{Tolerance: 0.001}, table.Micrometre)
		if err != nil {
			t.Fatal(err)
		}
		tab := compiled(t, table.Item{Shape: f, Place: plane.Identity()})
		area := math.Pi * 25 * (1 + eps*eps/2)
		if math.Abs(tab.Area()/area-1) > 1e-4 {
			t.Errorf("eps %g: area %.9g, want %.9g", eps, tab.Area(), area)
		}
		facets := swept(points)
		if math.Abs(tab.Area()-area) > 0.3*math.Abs(facets-area) {
			t.Errorf("eps %g: the fit, off by %g, is hardly better than the facets, off by %g", eps, tab.Area()-area, facets-area)
		}
		if r.Greatest > 0.001 || r.Points != 160 || r.Nodes != len(f.Nodes()) || r.Nodes > 40 {
			t.Errorf("eps %g: residual %+v", eps, r)
		}
		found := f.Deviation(points)
		if math.Abs(found-r.Greatest) > 1e-6 {
			t.Errorf("eps %g: the greatest distance is stated as %g, found %g", eps, r.Greatest, found)
		}
		if d := math.Abs(tab.SmallestRadius() - smallest(5, eps)); d > 0.1*smallest(5, eps) {
			t.Errorf("eps %g: smallest radius off by %g", eps, d)
		}
		t.Logf("eps %g: %d nodes, rms %.3g, greatest %.3g um, area off by %.2g", eps, r.Nodes, r.RMS, r.Greatest, tab.Area()/area-1)
	}
}

// smallest is the smallest radius of curvature of a limaçon, by the formula of
// curvature in polar coordinates at 10^5 places.
func smallest(radius, eps float64) float64 {
	least := math.Inf(1)
	for i := range 100_000 {
		phi := 2 * math.Pi * float64(i) / 100_000
		r, r1, r2 := 1+eps*math.Cos(phi), -eps*math.Sin(phi), -eps*math.Cos(phi)
		least = math.Min(least, math.Pow(r*r+r1*r1, 1.5)/math.Abs(r*r+2*r1*r1-r*r2))
	}
	return radius * least
}

// TestFitLadder: whatever the tolerance, it is kept, with more nodes where it
// is smaller.
func TestFitLadder(t *testing.T) {
	points := limacon(1000, 1, 0.4)
	last := 0
	for _, tol := range []float64{1e-2, 1e-3, 1e-4, 1e-5, 1e-6, 1e-7} {
		_, r, err := Fitted(points, Fit{Tolerance: tol}, table.Millimetre)
		if err != nil {
			t.Fatal(err)
		}
		if r.Greatest > tol || r.Nodes < last {
			t.Errorf("tolerance %g: %+v", tol, r)
		}
		last = r.Nodes
	}
}

// TestFitCorners: corners stay, sides between them are lines and arcs where
// those will do.
func TestFitCorners(t *testing.T) {
	random := rand.New(rand.NewPCG(1, 2))
	// A quarter stadium in 0.5 mm steps with 0.01 mm of noise.
	var points []r2.Vec
	line := func(a, b r2.Vec) {
		n := int(r2.Norm(r2.Sub(b, a)) / 0.5)
		for i := range n {
			points = append(points, plane.Lerp(a, b, float64(i)/float64(n)))
		}
	}
	line(r2.Vec{}, r2.Vec{X: 76})
	for i := range 125 {
		points = append(points, r2.Add(r2.Vec{X: 36}, r2.Scale(40, plane.Polar(math.Pi/2*float64(i)/125))))
	}
	line(r2.Vec{X: 36, Y: 40}, r2.Vec{Y: 40})
	line(r2.Vec{Y: 40}, r2.Vec{})
	for i := range points {
		points[i] = r2.Add(points[i], r2.Vec{X: 0.01 * (2*random.Float64() - 1), Y: 0.01 * (2*random.Float64() - 1)})
	}
	f, r, err := Fitted(points, Fit{Tolerance: 0.03}, table.Millimetre)
	if err != nil {
		t.Fatal(err)
	}
	tab := compiled(t, table.Item{Shape: f, Place: plane.Identity()})
	want := 36*40 + math.Pi*1600/4
	if r.Corners != 4 && r.Corners != 3 || math.Abs(tab.Area()/want-1) > 3e-4 || r.RMS > 0.01 {
		t.Errorf("%+v, area %g, want %g", r, tab.Area(), want)
	}
	// A square of four sides of many points is a square.
	points = nil
	for i, c := range []r2.Vec{{}, {X: 10}, {X: 10, Y: 10}, {Y: 10}} {
		line(c, []r2.Vec{{X: 10}, {X: 10, Y: 10}, {Y: 10}, {}}[i])
	}
	f, r, err = Fitted(points, Fit{Tolerance: 0.01}, table.Millimetre)
	if err != nil || len(f.Nodes()) != 4 || r.Greatest > 1e-12 {
		t.Errorf("a square: %d nodes, %+v, %v", len(f.Nodes()), r, err)
	}
}

// TestFitHuge: 10^5 noisy points are fitted within seconds.
func TestFitHuge(t *testing.T) {
	random := rand.New(rand.NewPCG(3, 4))
	points := limacon(100_000, 30, 0.43)
	for i := range points {
		points[i] = r2.Add(points[i], r2.Vec{X: 1e-3 * random.NormFloat64(), Y: 1e-3 * random.NormFloat64()})
	}
	begun := time.Now()
	f, r, err := Fitted(points, Fit{Tolerance: 0.006}, table.Millimetre)
	if err != nil {
		t.Fatal(err)
	}
	t.Logf("%d nodes, %+v in %v", len(f.Nodes()), r, time.Since(begun))
	if took := time.Since(begun); took > 20*time.Second {
		t.Errorf("it took %v", took)
	}
	if r.RMS < 0.95e-3 || r.RMS > 1.3e-3 || r.Greatest > 0.006 {
		t.Errorf("noise of 1e-3 mm across the wall is read as %+v", r)
	}
	tab := compiled(t, table.Item{Shape: f, Place: plane.Identity()})
	if area := math.Pi * 900 * (1 + 0.43*0.43/2); math.Abs(tab.Area()/area-1) > 1e-5 {
		t.Errorf("area %g, want %g", tab.Area(), area)
	}
}

// TestFitRefused: what cannot be fitted is one sentence.
func TestFitRefused(t *testing.T) {
	saw := make([]r2.Vec, 4000)
	for i := range saw {
		saw[i] = r2.Scale(1+0.02*float64(i%2), plane.Polar(2*math.Pi*float64(i)/4000))
	}
	for _, c := range []struct {
		points []r2.Vec
		f      Fit
		says   string
	}{
		{limacon(5, 1, 0), Fit{Tolerance: 0.01}, "The outline has only 5 points; a smooth wall needs 8, so take the polygon as it is."},
		{limacon(50, 1, 0), Fit{Tolerance: 0.5}, "The tolerance of the fit is 0.5 mm; it must be above 0 and below a tenth of the outline's size, 0.283 mm."},
		{saw, Fit{Tolerance: 1e-3, CornerDeg: 175}, "No smooth wall of up to 400 nodes follows the outline within 0.001 mm: 0.0"},
	} {
		_, _, err := Fitted(c.points, c.f, table.Millimetre)
		if got := fmt.Sprint(err); len(got) < len(c.says) || got[:len(c.says)] != c.says {
			t.Errorf("%v, want %s", err, c.says)
		}
	}
}

// TestScatter: the scatter of points is found to a tenth or so, and what is
// suggested lets a fit be smooth.
func TestScatter(t *testing.T) {
	random := rand.New(rand.NewPCG(5, 6))
	points := limacon(400, 5, 0.43)
	if s := Scatter(points); s > 1e-5 {
		t.Errorf("points on the wall scatter by %g", s)
	}
	for i := range points {
		points[i] = r2.Add(points[i], r2.Vec{X: 0.004 * random.NormFloat64(), Y: 0.004 * random.NormFloat64()})
	}
	if s := Scatter(points); math.Abs(s-0.004) > 0.0007 {
		t.Errorf("a scatter of 0.004 is read as %g", s)
	}
	_, r, err := Fitted(points, Fit{Tolerance: FitWithin(points)}, table.Micrometre)
	if err != nil || r.Nodes > 12 || math.Abs(r.RMS-0.004) > 0.002 {
		t.Errorf("within %g: %+v, %v", FitWithin(points), r, err)
	}
}
