package render

import (
	"testing"

	"cavitywright/sim/figure"
)

// Each kind of spot is drawn with strokes of its own form, within the frame, and
// one outside it is not.
func TestSpots(t *testing.T) {
	look, box := Paper(1), NewBox(0, 0, 85, 60)
	strokes := map[int]figure.SpotKind{}
	for _, kind := range []figure.SpotKind{figure.Ring, figure.Cross, figure.CrossRing, figure.Bar} {
		f := scatter()
		var without, with, off record
		p := LayoutDots(f, box, look)
		DrawMarks(&without, f, p, look)
		f.Spots = []figure.Spot{{X: f.X.Lo, Y: f.Y.Hi, Kind: kind, Hue: 1}}
		DrawMarks(&with, f, p, look)
		n := 0
		for _, s := range with.strokes[len(without.strokes):] {
			if s.color == look.Orbit(1) {
				n += len(s.path.Points)
			}
			for _, q := range s.path.Points {
				if !p.Frame.Inset(-0.5 * look.Tick).Contains(q) {
					t.Errorf("kind %d is drawn at %v, outside the frame", kind, q)
				}
			}
		}
		if other, met := strokes[n]; n == 0 || met {
			t.Errorf("kind %d has %d points, as kind %d", kind, n, other)
		}
		strokes[n] = kind
		f.Spots[0].X = f.X.Hi + 1
		DrawMarks(&off, f, p, look)
		if len(off.strokes) != len(without.strokes) {
			t.Errorf("kind %d is drawn though it is not shown", kind)
		}
	}
}
