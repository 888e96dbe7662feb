package leak

import (
	"math"
	"testing"

	"cavitywright/sim"
	"cavitywright/sim/measure"
)

// TestDecayExact feeds a tally with made-up rays whose rate is known in closed
// form, for guesses of the rate that are good and bad: half of the rays fly 1,
// half fly 2, and a share goes on at each bounce, so that
// q (exp(g) + exp(2 g)) / 2 = 1.
func TestDecayExact(t *testing.T) {
	const q = 0.25
	e := 0.5 * (math.Sqrt(1+8/q) - 1) // exp(g), the root of e^2 + e = 2/q
	want := math.Log(e)
	for _, guess := range []float64{want, 0.6 * want, 0.9 * want, 1.4 * want, 2.5 * want} {
		m := Escape{Points: measure.NewFibonacci(256), Shifts: make([]measure.Shift, 2), Marks: []int{2, 6}, Rate: guess, Flight: 1.4}
		tally := m.Tally().(*EscapeTally)
		n := m.Points.Size()
		for k := range 2 {
			// All 64 ways of six flights, with their weights.
			for way := range 64 {
				tally.Open(k*n + way)
				tally.Add(&sim.Bounce{Weight: 1})
				for b := 1; b <= 6; b++ {
					tally.Add(&sim.Bounce{N: b, Flight: 1 + float64(way>>(b-1)&1), Weight: math.Pow(q, float64(b))})
				}
				tally.Close()
			}
		}
		d, ok := tally.Decay(0, 1)
		if !ok || math.Abs(d.Rate-want) > 1e-9*want {
			t.Errorf("guess %g: the rate is %.15g (%v), want %.15g", guess, d.Rate, ok, want)
		}
		if d.Err > 1e-12 {
			t.Errorf("guess %g: two equal lattices have the error %g, want 0", guess, d.Err)
		}
	}
}

// TestCells wants the cells to hold the place of a lasting ray, with its
// neighbours, and nothing else.
func TestCells(t *testing.T) {
	if u, v := WholeSection().At(0.3, 0.7); u != 0.3 || v != 0.7 || WholeSection().Share() != 1 {
		t.Error("the whole section moves its places")
	}
	tally := LastingTally{starts: []int32{5*cellsASide + 0, 0, cellsASide*cellsASide - 1}}
	c := tally.Cells()
	// 3 x 3 about (0, 5), 3 x 2 about (0, 0) and about the last: around s
	// the first and the last cell do not meet.
	if got := len(c.cells); got != 9+6+6 {
		t.Fatalf("there are %d cells, want 21", got)
	}
	for i := range 2100 {
		u, v := c.At((float64(i)+0.5)/2100, 0.25)
		x, y := int(u*cellsASide), int(v*cellsASide)
		near := func(cx, cy int) bool {
			dx := (x - cx + cellsASide + 1) % cellsASide
			return dx <= 2 && y >= cy-1 && y <= cy+1
		}
		if !near(0, 5) && !near(0, 0) && !near(cellsASide-1, cellsASide-1) {
			t.Fatalf("the place (%g, %g) lies in the cell (%d, %d)", u, v, x, y)
		}
	}
}
