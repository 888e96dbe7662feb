package curve

import (
	"math"
	"testing"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// A cubic whose ends lie together and whose handles there have all but no
// length runs out and back, and is cut into a few pieces. The first is one that
// a hand came upon by dragging a node of a free wall over another.
func TestSpentHandles(t *testing.T) {
	bits := math.Float64frombits
	far := r2.Vec{X: bits(0x4061604583e46b18), Y: bits(0x4080364b360d2bcc)}
	for _, p := range [][4]r2.Vec{
		{{X: bits(0x3ec05b97d64afad0)}, {X: bits(0x3ec05b97d64af9fb), Y: bits(0xbe8de6c4e139fcf8)}, far, {X: bits(0x3ebb578fc6333d1d), Y: bits(0xbea3aee85d2487db)}},
		{{}, {}, far, {X: 1e-9}},
		{{}, {X: 1e-9}, far, {}},
		{{}, {X: -1e-12, Y: 1e-13}, far, {Y: 1e-7}},
		{{}, {Y: 1e-7}, {X: 3, Y: 1}, {X: 5}},
		{{}, {Y: -1e-10}, {X: 3, Y: 1}, {X: 5}},
	} {
		for _, q := range [][4]r2.Vec{p, {p[3], p[2], p[1], p[0]}} {
			c := NewCubic(q)
			if n := len(c.Spans()); n > 12 {
				t.Errorf("%v is cut into %d pieces", q, n)
			}
			sum, steps := 0.0, 200_000
			last := q[0]
			for i := 1; i <= steps; i++ {
				u := float64(i) / float64(steps)
				at := plane.Lerp(plane.Lerp(plane.Lerp(q[0], q[1], u), plane.Lerp(q[1], q[2], u), u), plane.Lerp(plane.Lerp(q[1], q[2], u), plane.Lerp(q[2], q[3], u), u), u)
				sum += r2.Norm(r2.Sub(at, last))
				last = at
			}
			if d := math.Abs(c.Length() - sum); d > 1e-8*sum {
				t.Errorf("%v is %v long, its chords %v", q, c.Length(), sum)
			}
		}
	}
}
