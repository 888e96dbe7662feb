package shape

import (
	"math"
	"testing"

	"cavitywright/table/param"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// freed is the shape as free walls: their loops, and the greatest error.
func freed(t testing.TB, s Shape, tol float64) (list []Freed, loops []Loop, worst float64) {
	t.Helper()
	list, err := Free(s, tol)
	if err != nil {
		t.Fatal(err)
	}
	for _, w := range list {
		l := loopsOf(t, w.Wall)[0]
		if l.Side = w.Side; l.Side == Obstacle {
			l.Curves = backwards(l.Curves)
		}
		loops = append(loops, l)
		worst = math.Max(worst, w.Error)
	}
	return list, loops, worst
}

// TestConversionKeepsTheMeanChord: every shape of the catalogue as free walls
// has the area and the length, and so the mean chord pi A / L, that it had; to
// rounding where its curves are taken over, within the tolerance where they are
// followed.
func TestConversionKeepsTheMeanChord(t *testing.T) {
	for _, k := range Catalogue() {
		f := figure(t, k.Name, param.Defaults(k.Specs)...)
		was := loopsOf(t, f)
		area, length := measured(was)
		size := 0.0
		for _, l := range was {
			size = math.Max(size, plane.Diagonal(boxOf(l.Curves)))
		}
		for _, tol := range []float64{1e-4, 1e-8} {
			list, now, worst := freed(t, f, tol*size)
			a, l := measured(now)
			if worst > tol*size {
				t.Errorf("%s: %g off, asked for %g", k.Name, worst, tol*size)
			}
			chord, want := math.Pi*a/l, math.Pi*area/length
			if d := math.Abs(chord/want - 1); d > 1e-12+4*tol {
				t.Errorf("%s within %g: the mean chord changes by %g of itself", k.Name, tol, d)
			}
			nodes := 0
			for i, w := range list {
				nodes += len(w.Wall.nodes)
				if w.Exact && (worst != 0 || math.Abs(chord/want-1) > 2e-13) {
					t.Errorf("%s: exact, but off by %g, the mean chord by %g", k.Name, worst, chord/want-1)
				}
				if w.Side != was[i].Side {
					t.Errorf("%s: loop %d changes sides", k.Name, i)
				}
				// The achieved error, found anew on points that the fit did not
				// look at.
				own := was[i].Curves
				if d := w.Wall.Deviation(pointsOf(own, 173)); d > math.Max(1.1*w.Error, 1e-13*size) {
					t.Errorf("%s within %g: %g off, said %g", k.Name, tol, d, w.Error)
				}
				start := own[0].At(0).Point
				if w.Side == Obstacle {
					last := own[len(own)-1]
					start = last.At(last.Length()).Point
				}
				if d := r2.Norm(r2.Sub(w.Wall.nodes[0].At, start)); d > 1e-13*size {
					t.Errorf("%s: s starts %g away from where it did", k.Name, d)
				}
			}
			if nodes > 400 {
				t.Errorf("%s within %g takes %d nodes", k.Name, tol, nodes)
			}
		}
	}
}

// TestConversionIsFair: a smooth curve is followed with one curvature on both
// sides of each node where the tolerance leaves the room for that.
func TestConversionIsFair(t *testing.T) {
	for kind, most := range map[string]int{"limacon": 0, "quadrupole": 24} {
		f := figure(t, kind, param.Defaults(Find(kind).Specs)...)
		list, _, _ := freed(t, f, 1e-6)
		unfair := 0
		for _, n := range list[0].Wall.nodes {
			if n.Joint != Fair {
				unfair++
			}
		}
		if unfair > most || len(list[0].Wall.nodes) > 60 {
			t.Errorf("%s: %d of %d joints are not fair", kind, unfair, len(list[0].Wall.nodes))
		}
	}
}

// TestConversionLadder: for every tolerance the error is below it, and so is
// what is found between the nodes.
func TestConversionLadder(t *testing.T) {
	f := figure(t, "limacon", 1, 0.43)
	points := pointsOf(loopsOf(t, f)[0].Curves, 997)
	last := 0
	for _, tol := range []float64{1e-2, 1e-3, 1e-4, 1e-5, 1e-6, 1e-7, 1e-8, 1e-9, 1e-10} {
		list, _, worst := freed(t, f, tol)
		if d := list[0].Wall.Deviation(points); worst > tol || d > tol*1.1+1e-15 {
			t.Errorf("within %g: said %g, found %g", tol, worst, d)
		}
		if n := len(list[0].Wall.nodes); n < last || n > 300 {
			t.Errorf("within %g: %d nodes, %d before", tol, n, last)
		} else {
			last = n
		}
	}
}
