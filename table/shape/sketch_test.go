package shape

import (
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// The outlines that a hand may follow, by an angle.
func circleAt(phi float64) r2.Vec  { return plane.Polar(phi) }
func ellipseAt(phi float64) r2.Vec { return r2.Vec{X: 2 * math.Cos(phi), Y: math.Sin(phi)} }
func limaconAt(phi float64) r2.Vec { return r2.Scale(1+0.43*math.Cos(phi), plane.Polar(phi)) }
func peanutAt(phi float64) r2.Vec  { return r2.Scale(1+0.4*math.Cos(2*phi), plane.Polar(phi)) }
func eightAt(phi float64) r2.Vec   { return r2.Vec{X: math.Sin(phi), Y: 0.6 * math.Sin(2*phi)} }

// stroked is a hand's stroke along an outline: uneven steps, tremor of the
// given standard deviation, every tenth point twice.
func stroked(at func(float64) r2.Vec, n int, tremor, from, to float64) []r2.Vec {
	g := rand.New(rand.NewPCG(7, 1))
	var out []r2.Vec
	for phi := from; phi < to; phi += (to - from) / float64(n) * (0.2 + 1.6*g.Float64()) {
		p := r2.Add(at(phi), r2.Scale(tremor, r2.Vec{X: g.NormFloat64(), Y: g.NormFloat64()}))
		out = append(out, p)
		if g.Float64() < 0.1 {
			out = append(out, p)
		}
	}
	return out
}

func around(at func(float64) r2.Vec) []r2.Vec {
	out := make([]r2.Vec, 400)
	for i := range out {
		out[i] = at(fullTurn * float64(i) / float64(len(out)))
	}
	return out
}

func TestSketchFollowsTheHand(t *testing.T) {
	const tol = 0.03
	for _, c := range []struct {
		name string
		at   func(float64) r2.Vec
		most int     // nodes
		true float64 // distance of the outline itself
	}{
		{"circle", circleAt, 5, 0.012},
		{"ellipse", ellipseAt, 6, 0.015},
		{"limaçon", limaconAt, 6, 0.015},
		{"peanut", peanutAt, 9, 0.03},
	} {
		for _, n := range []int{60, 300, 2000} {
			for _, tremor := range []float64{0, 0.002, 0.006} {
				s := stroked(c.at, n, tremor, 0.3, 0.3+0.97*fullTurn)
				f, err := Sketch(s, tol)
				if err != nil {
					t.Errorf("%s, %d points, tremor %g: %v", c.name, n, tremor, err)
					continue
				}
				loops := loopsOf(t, f)
				area, _ := measured(loops)
				if area <= 0 || f.nodes.selfCrosses() {
					t.Errorf("%s: area %g, or it crosses itself", c.name, area)
				}
				for i, k := range f.nodes {
					if k.Joint != Fair || k.Span != Curved {
						t.Errorf("%s: node %d is %+v", c.name, i, k)
					}
				}
				if len(f.nodes) > c.most || len(f.nodes) < fewestKnots {
					t.Errorf("%s, %d points, tremor %g: %d nodes", c.name, n, tremor, len(f.nodes))
				}
				if d := f.Deviation(s); d > tol {
					t.Errorf("%s, %d points, tremor %g: %g off the stroke", c.name, n, tremor, d)
				}
				if d := f.Deviation(around(c.at)); d > c.true {
					t.Errorf("%s, %d points, tremor %g: %g off the outline", c.name, n, tremor, d)
				}
			}
		}
	}
}

// TestSketchLadder: a smaller tolerance is kept too, with more nodes.
func TestSketchLadder(t *testing.T) {
	s := stroked(peanutAt, 400, 0, 0, fullTurn)
	last := 0
	for _, tol := range []float64{0.1, 0.03, 0.01, 0.003, 0.001} {
		f, err := Sketch(s, tol)
		if err != nil {
			t.Fatalf("within %g: %v", tol, err)
		}
		if d := f.Deviation(s); d > tol {
			t.Errorf("within %g: off by %g", tol, d)
		}
		if len(f.nodes) < last || len(f.nodes) > 30 {
			t.Errorf("within %g: %d nodes, %d before", tol, len(f.nodes), last)
		}
		last = len(f.nodes)
	}
}

func TestSketchClosesTheStroke(t *testing.T) {
	outward := func(phi float64) r2.Vec { return r2.Scale(1+0.01*phi, limaconAt(phi)) }
	inward := func(phi float64) r2.Vec { return r2.Scale(1-0.01*phi, limaconAt(phi)) }
	backwards := stroked(limaconAt, 300, 0.003, 0.3, 6.5)
	slices.Reverse(backwards)
	far := stroked(limaconAt, 300, 0.003, 0.3, 6.5)
	for i := range far {
		far[i] = r2.Add(r2.Scale(1e-3, far[i]), r2.Vec{X: 50, Y: -70})
	}
	for _, c := range []struct {
		name        string
		s           []r2.Vec
		scale, area float64 // of the wall, against the outline
	}{
		{"a gap", stroked(limaconAt, 300, 0.003, 0.3, 5.9), 1, 0.03},
		{"an overlap", stroked(limaconAt, 300, 0.003, 0.3, 7.1), 1, 0.03},
		{"an overlap outside", stroked(outward, 300, 0.003, 0, 6.9), 1.035, 0.05},
		{"an overlap inside", stroked(inward, 300, 0.003, 0, 6.9), 0.965, 0.05},
		{"a clockwise stroke", backwards, 1, 0.03},
		{"a small one far away", far, 1e-3, 0.03},
	} {
		f, err := Sketch(c.s, 0.03*math.Min(1, c.scale))
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
			continue
		}
		area, _ := measured(loopsOf(t, f))
		// The limaçon's area: closed form, evaluated independently.
		want := 3.4320328944141696 * c.scale * c.scale
		if math.Abs(area-want) > c.area*want || len(f.nodes) > 8 {
			t.Errorf("%s: area %g, want %g, %d nodes", c.name, area, want, len(f.nodes))
		}
		for i := range f.nodes {
			if f.nodes.kink(i) > 1e-9 {
				t.Errorf("%s: a kink at node %d", c.name, i)
			}
		}
	}
}

// TestSketchTakesAnything: a scribble is refused or made a wall that closes.
func TestSketchTakesAnything(t *testing.T) {
	g := rand.New(rand.NewPCG(3, 1))
	for n := 0; n < 40; n += 3 {
		for _, jump := range []float64{0, 0.1, 1, 5} {
			s := make([]r2.Vec, n)
			for i := range s {
				s[i] = r2.Add(ellipseAt(fullTurn*float64(i)/float64(n)), r2.Scale(jump, r2.Vec{X: g.NormFloat64(), Y: g.NormFloat64()}))
			}
			f, err := Sketch(s, []float64{0, 0.003, 0.1, 0.5}[g.IntN(4)])
			if err == nil {
				checkLoops(t, loopsOf(t, f))
			}
		}
	}
}

func TestSketchRefuses(t *testing.T) {
	line := func(x float64) r2.Vec { return r2.Vec{X: x} }
	toAndFro := func(phi float64) r2.Vec { return r2.Vec{X: math.Cos(phi)} }
	for _, c := range []struct {
		name, says string
		s          []r2.Vec
		tol        float64
	}{
		{"nothing", "too small", nil, 0.03},
		{"a dot", "too small", stroked(circleAt, 100, 0.003, 0, fullTurn), 0.5},
		{"six points", "too short", stroked(circleAt, 6, 0, 0, fullTurn), 0.03},
		{"half a circle", "all the way round", stroked(circleAt, 100, 0.003, 0, math.Pi), 0.03},
		{"a line", "all the way round", stroked(line, 100, 0.003, 0, 3), 0.03},
		{"to and fro", "encloses nothing", stroked(toAndFro, 100, 0.003, 0, 6.2), 0.03},
		{"an eight", "crosses itself", stroked(eightAt, 300, 0.003, 0.3, 6.5), 0.03},
		{"two rounds", "crosses itself", stroked(limaconAt, 300, 0.003, 0.3, 12.8), 0.03},
		{"less than the tremor", "draw more steadily", stroked(circleAt, 300, 0.01, 0.3, 6.5), 0.004},
	} {
		f, err := Sketch(c.s, c.tol)
		if err == nil || !strings.Contains(err.Error(), c.says) {
			t.Errorf("%s: %d nodes, %v", c.name, len(f.nodes), err)
		}
	}
}
