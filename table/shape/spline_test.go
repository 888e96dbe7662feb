package shape

import (
	"math"
	"testing"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/spatial/r2"
	"pgregory.net/rapid"
)

// TestCyclicSolves holds the cyclic solver to a dense one.
func TestCyclicSolves(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(3, 12).Draw(t, "n")
		step, v := make([]float64, n), make([]float64, n)
		for i := range step {
			step[i] = rapid.Float64Range(0.1, 3).Draw(t, "step")
			v[i] = rapid.Float64Range(-5, 5).Draw(t, "value")
		}
		a, b := mat.NewDense(n, n, nil), mat.NewVecDense(n, nil)
		for i := range step {
			p, q := (i+n-1)%n, (i+1)%n
			a.Set(i, p, a.At(i, p)+1/step[p])
			a.Set(i, q, a.At(i, q)+1/step[i])
			a.Set(i, i, a.At(i, i)+2/step[p]+2/step[i])
			b.SetVec(i, 3*(v[i]-v[p])/(step[p]*step[p])+3*(v[q]-v[i])/(step[i]*step[i]))
		}
		var x mat.VecDense
		if err := x.SolveVec(a, b); err != nil {
			t.Fatal(err)
		}
		for i, d := range newCyclic(step).slopes(v) {
			if math.Abs(d-x.AtVec(i)) > 1e-10*(1+math.Abs(d)) {
				t.Fatalf("slope %d is %g, want %g", i, d, x.AtVec(i))
			}
		}
	})
}

// TestSmoothedIsSmooth: through the points, with one tangent and one curvature
// on both sides of each.
func TestSmoothedIsSmooth(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(3, 12).Draw(t, "n")
		points := make([]r2.Vec, n)
		for i := range points {
			phi := fullTurn * (float64(i) + rapid.Float64Range(-0.2, 0.2).Draw(t, "phi")) / float64(n)
			points[i] = r2.Scale(rapid.Float64Range(0.7, 1.4).Draw(t, "r"), plane.Polar(phi))
		}
		f := Smoothed(append(points, points[n-1], points[0]))
		if len(f.nodes) != n {
			t.Fatalf("%d nodes", len(f.nodes))
		}
		c := loopsOf(t, f)[0].Curves
		for i := range c {
			if d := r2.Norm(r2.Sub(f.nodes[i].At, points[i])); d > 1e-15 {
				t.Fatalf("node %d is %g off its point", i, d)
			}
			in := c[(i+n-1)%n].Spans()
			out := c[i].Spans()
			a, b := in[len(in)-1].FrameAt(in[len(in)-1].T1), out[0].FrameAt(out[0].T0)
			if d := math.Abs(plane.Angle(a.Tangent, b.Tangent)); f.nodes[i].Joint != Fair || d > 1e-12 {
				t.Fatalf("node %d has a kink of %g", i, d)
			}
			if d := math.Abs(a.Curvature - b.Curvature); d > 1e-9*(1+math.Abs(a.Curvature)) {
				t.Fatalf("node %d: the curvature jumps from %g to %g", i, a.Curvature, b.Curvature)
			}
		}
	})
}

// TestSmoothedConverges: the spline through n points of a circle is off by
// n^-4 (the order of a cubic spline; Ahlberg, Nilson and Walsh 1967).
func TestSmoothedConverges(t *testing.T) {
	last := 0.0
	for _, n := range []int{8, 16, 32, 64} {
		points := make([]r2.Vec, n)
		for i := range points {
			points[i] = plane.Polar(fullTurn * float64(i) / float64(n))
		}
		worst := 0.0
		for _, p := range pointsOf(Smoothed(points).nodes.curves(), 501) {
			worst = math.Max(worst, math.Abs(r2.Norm(p)-1))
		}
		if ratio := last / worst; last > 0 && (ratio < 13 || ratio > 19) {
			t.Errorf("%d points: off by %g, a %g-th of before", n, worst, ratio)
		}
		last = worst
	}
	if last > 1e-6 {
		t.Errorf("64 points: off by %g", last)
	}
}

func TestSmoothedTakesFewPoints(t *testing.T) {
	for _, points := range [][]r2.Vec{nil, {{}}, {{}, {}}, {{}, {X: 1}, {X: 1}, {}}, {{X: math.NaN()}, {}}} {
		if _, err := Smoothed(points).Loops(); err == nil {
			t.Errorf("%v makes a wall", points)
		}
	}
}
