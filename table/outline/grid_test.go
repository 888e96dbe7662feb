package outline

import (
	"math"
	"testing"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// TestMasked: whatever the number of points a polygon may have, the polygons
// cover the area of the outline, are on the grid, and none of their edges
// cross.
func TestMasked(t *testing.T) {
	for _, name := range []string{"limacon", "square-with-disc", "box-of-posts", "ring", "mushroom", "three-posts", "spiral"} {
		tab := figured(t, name)
		size := plane.Diagonal(tab.Bounds())
		grid := 1e-5 * size
		o, err := Trace(tab, Options{Form: Chords, ChordError: 1e-5 * size, Grid: grid})
		if err != nil {
			t.Fatal(err)
		}
		want, outline := 0.0, 0.0
		for i := range o.Paths {
			want += o.Paths[i].Area()
			outline += o.Paths[i].Length()
		}
		want = math.Abs(want)
		for _, most := range []int{1 << 20, 500, 60, 25} {
			polygons, bent, err := Masked(o, grid, most)
			if err != nil {
				t.Errorf("%s, at most %d: %v", name, most, err)
				continue
			}
			area := 0.0
			var all [][]r2.Vec
			for i := range polygons {
				a := polygons[i].Area()
				if a <= 0 {
					t.Errorf("%s: a polygon of area %g", name, a)
				}
				area += a
				points := polygons[i].Points()
				if len(points) > most {
					t.Errorf("%s: a polygon of %d points, at most %d", name, len(points), most)
				}
				for _, p := range points {
					if math.Abs(p.X/grid-math.Round(p.X/grid))+math.Abs(p.Y/grid-math.Round(p.Y/grid)) > 1e-6 {
						t.Fatalf("%s: %v is off the grid", name, p)
					}
				}
				all = append(all, points)
			}
			if at, met := Crossing(all); met != Apart {
				t.Errorf("%s, at most %d: edges cross at %v", name, most, at)
			}
			if d := math.Abs(area - want); d > bent*outline+1e-12*want || bent > 0.5*grid {
				t.Errorf("%s, at most %d: %d polygons, area off by %g, bent by %g", name, most, len(polygons), d, bent)
			}
			if most == 1<<20 && len(polygons) != 1 && !tab.Open() {
				t.Errorf("%s: %d polygons where one will do", name, len(polygons))
			}
		}
	}
}
