package survey

import (
	"math"
	"strings"
	"testing"
	"time"

	"cavitywright/table"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
	"pgregory.net/rapid"
)

// slowest is far above what any wall of a few dozen pieces takes; a search that
// does not end would take it.
const slowest = 5 * time.Second

// drawnWall is a figure of the catalogue far from its defaults, or a free wall
// with straight, bowed and smooth spans.
func drawnWall(t *rapid.T) shape.Shape {
	switch rapid.IntRange(0, 3).Draw(t, "sort") {
	case 0:
		return shape.Smoothed(star(t))
	case 1:
		return shape.NewPolygonal(star(t))
	case 2:
		var list []shape.Node
		for _, p := range star(t) {
			list = append(list, shape.Node{At: p, Span: shape.Bowed, Bulge: rapid.Float64Range(-0.3, 0.6).Draw(t, "bulge")})
		}
		return shape.NewFreeform(list)
	}
	k := rapid.SampledFrom(shape.Catalogue()).Draw(t, "kind")
	v := param.Defaults(k.Specs)
	for i, s := range k.Specs {
		v[i] = s.Clamp(v[i] * rapid.Float64Range(0.2, 2).Draw(t, s.Name))
	}
	f, err := shape.New(k.Name, v)
	if err != nil {
		t.Fatal(err)
	}
	return f
}

func star(t *rapid.T) []r2.Vec {
	n := rapid.IntRange(3, 9).Draw(t, "corners")
	points := make([]r2.Vec, n)
	for i := range points {
		phi := 2 * math.Pi * (float64(i) + rapid.Float64Range(-0.3, 0.3).Draw(t, "phi")) / float64(n)
		points[i] = r2.Scale(rapid.Float64Range(0.4, 1.2).Draw(t, "r"), plane.Polar(phi))
	}
	return points
}

// TestAnyWall: a report comes at once on any wall, and its numbers agree with
// one another.
func TestAnyWall(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		tab, err := table.New(table.Design{Unit: table.Millimetre, Items: []table.Item{{Shape: drawnWall(t), Place: plane.Identity()}}})
		if err != nil {
			t.Skip("no table")
		}
		began := time.Now()
		r := Of(tab, rapid.Float64Range(0.001, 0.5).Draw(t, "tool"))
		if d := time.Since(began); d > slowest {
			t.Fatalf("the report took %v", d)
		}
		total := r.Perimeter * (1 + 1e-9)
		if !(r.Tool.Length >= 0 && r.Tool.Length <= total) || !(r.Flatness.Length >= 0 && r.Flatness.Length <= total) {
			t.Fatalf("of %g there are %g out of reach, %g straight", r.Perimeter, r.Tool.Length, r.Flatness.Length)
		}
		if r.Convexity.Convex == (len(r.Convexity.Dents) > 0) && !r.Convexity.Open || r.Convexity.Strict && !r.Convexity.Convex {
			t.Fatalf("convexity is %+v", r.Convexity)
		}
		if (r.Class == C0) != (len(r.Corners) > 0) || r.Class == C1 && len(r.Jumps) == 0 {
			t.Fatalf("%v with %d corners and %d jumps", r.Class, len(r.Corners), len(r.Jumps))
		}
		samples, last := 0, math.Inf(-1)
		for _, run := range r.Bend.Runs {
			for i, s := range run.S {
				if s < last || math.IsNaN(run.Kappa[i]) {
					t.Fatalf("curvature %v at s = %v after %v", run.Kappa[i], s, last)
				}
				last = s
				samples++
				// The sharpest bend is at least as sharp as any sample.
				if k := run.Kappa[i]; k > 0 && 1/k < r.Bend.Focusing.Radius*(1-1e-6) || k < 0 && -1/k < r.Bend.Dispersing.Radius*(1-1e-6) {
					t.Fatalf("curvature %v at s = %v, sharpest %+v and %+v", k, s, r.Bend.Focusing, r.Bend.Dispersing)
				}
			}
		}
		if samples == 0 {
			t.Fatal("no curvature")
		}
		for _, s := range r.Sentences() {
			if len(s) == 0 || s[len(s)-1] != '.' {
				t.Fatalf("%q", s)
			}
		}
	})
}

// TestSmoothWalls: a spline through points is C2, straight sides that go over into arcs
// are C1.
func TestSmoothWalls(t *testing.T) {
	var points []r2.Vec
	for i := range 7 {
		points = append(points, r2.Scale(1+0.05*float64(i%2), plane.Polar(2*math.Pi*float64(i)/7)))
	}
	quarter := math.Tan(math.Pi / 8)
	for _, c := range []struct {
		s    shape.Shape
		want Class
		says string
	}{
		{shape.Smoothed(points), C2, "Douady 1982"},
		{figureOf(t, "rounded-triangle"), C1, "Hubacher 1987"},
		{shape.NewFreeform([]shape.Node{ // a square with one side bowed out
			{At: r2.Vec{}}, {At: r2.Vec{X: 1}, Span: shape.Bowed, Bulge: quarter}, {At: r2.Vec{X: 1, Y: 1}}, {At: r2.Vec{Y: 1}},
		}), C0, "4 corners"},
	} {
		tab, err := table.New(table.Design{Unit: table.Millimetre, Items: []table.Item{{Shape: c.s, Place: plane.Identity()}}})
		if err != nil {
			t.Fatal(err)
		}
		r := Of(tab, 0)
		if text := strings.Join(r.Sentences(), " "); r.Class != c.want || !strings.Contains(text, c.says) {
			t.Errorf("%s is %v, want %v: %s", c.s.Kind(), r.Class, c.want, text)
		}
	}
}

func figureOf(t *testing.T, kind string) shape.Shape {
	t.Helper()
	f, err := shape.New(kind, param.Defaults(shape.Find(kind).Specs))
	if err != nil {
		t.Fatal(err)
	}
	return f
}
