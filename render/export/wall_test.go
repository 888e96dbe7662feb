package export

import (
	"bufio"
	"bytes"
	"fmt"
	"math"
	"strings"
	"testing"

	"cavitywright/sim/measure"
	"cavitywright/table"
	"cavitywright/table/outline"
	"cavitywright/table/outline/intake"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/table/tablefile"
	"cavitywright/table/wall"

	"gonum.org/v1/gonum/spatial/r2"
)

// everyWall are the tables of the catalogue and a free wall of all kinds of
// span with an obstacle and an opening.
func everyWall(t *testing.T) map[string]*table.Table {
	t.Helper()
	all := map[string]*table.Table{}
	put := func(name string, d table.Design) {
		d.Study, d.Name = table.DefaultStudy(), name
		tab, err := table.New(d)
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		all[name] = tab
	}
	for _, k := range shape.Catalogue() {
		f, err := shape.New(k.Name, param.Defaults(k.Specs))
		if err != nil {
			t.Fatal(err)
		}
		put(k.Name, table.Design{Unit: table.Millimetre, Items: []table.Item{{Shape: f, Place: plane.Similarity{Shift: r2.Vec{X: 3, Y: -2}, Angle: 0.3, Scale: 1}}}})
	}
	free := shape.NewFreeform([]shape.Node{
		{At: r2.Vec{}, Span: shape.Straight}, {At: r2.Vec{X: 10}, Span: shape.Bowed, Bulge: 0.3},
		{At: r2.Vec{X: 10, Y: 8}, Span: shape.Curved, Out: r2.Vec{X: -1, Y: 3}}, {At: r2.Vec{X: 2, Y: 9}, In: r2.Vec{X: 2, Y: 1}, Span: shape.Elliptic, Bulge: 0.2, Ratio: 0.5, Tilt: 0.4},
	})
	post := shape.NewPolygonal([]r2.Vec{{X: 4, Y: 3}, {X: 6, Y: 3}, {X: 5, Y: 5}})
	put("free", table.Design{Unit: table.Micrometre, Items: []table.Item{
		{Shape: free, Place: plane.Identity()}, {Shape: post, Place: plane.Identity(), Role: table.Post},
	}, Coats: []table.Coat{{Item: 0, Side: 1, From: 0.2, To: 0.6, Law: wall.Opening{}}}})
	return all
}

// handed writes the wall of a table, and says what it differs by.
func handed(t *testing.T, tab *table.Table, format WallFormat, o outline.Options) ([]byte, outline.Account) {
	t.Helper()
	h := measure.Handover{Options: o, For: map[WallFormat]measure.Recipient{WallSVG: measure.Drawing, WallDXF: measure.Machine, WallGDS: measure.Mask, WallCSV: measure.PointTable}[format]}
	f, a, err := measure.HandedOver(tab, h, "test")
	if err != nil {
		t.Fatalf("%s: %v", tab.Design().Name, err)
	}
	var table, out bytes.Buffer
	if err := tablefile.Write(&table, tab.Design()); err != nil {
		t.Fatal(err)
	}
	if err := WriteWall(&out, format, f, WallOptions{Table: table.Bytes(), Grid: o.Grid}); err != nil {
		t.Fatalf("%s: %v", tab.Design().Name, err)
	}
	return out.Bytes(), a
}

// TestWallSVGRoundTrip: out as SVG and in again, by its lines alone, the wall
// is the same to 1e-9 of its size; by what it carries, the same table.
func TestWallSVGRoundTrip(t *testing.T) {
	for name, tab := range everyWall(t) {
		size := plane.Diagonal(tab.Bounds())
		svg, _ := handed(t, tab, WallSVG, outline.Options{ChordError: 4e-10 * size})
		inside, err := TableInSVG(bytes.NewReader(svg))
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		d, err := tablefile.Read(bytes.NewReader(inside))
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		if same, err := table.New(d); err != nil || same.Area() != tab.Area() || same.Length() != tab.Length() {
			t.Errorf("%s: the table inside is another: %v", name, err)
		}
		if tab.Open() {
			continue // without an outer wall the largest post would be taken for one
		}
		drawing, err := intake.Read(bytes.NewReader(svg))
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		back, _, err := drawing.Design(intake.Options{Unit: tab.Design().Unit})
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		again, err := table.New(back)
		if err != nil {
			t.Fatal(err)
		}
		if far := math.Max(apartBy(tab, again), apartBy(again, tab)); far > 1e-9*size || len(again.Loops()) != len(tab.Loops()) {
			t.Errorf("%s: the wall that came back is up to %.3g of its size away", name, far/size)
		}
		if d := again.Area() - tab.Area(); math.Abs(d) > 1e-9*size*tab.Length() {
			t.Errorf("%s: area off by %g", name, d)
		}
		if d := again.Length() - tab.Length(); math.Abs(d) > 1e-8*size {
			t.Errorf("%s: perimeter off by %g", name, d)
		}
	}
}

// apartBy is the greatest distance of points of a from the wall of b: the
// least about the nearest of many places.
func apartBy(a, b *table.Table) float64 {
	const n = 3000
	places := make([]r2.Vec, n)
	for k := range places {
		places[k] = b.At(b.Length() * float64(k) / n).Point
	}
	worst := 0.0
	for k := range 100 {
		x := a.At(a.Length() * (float64(k) + 0.37) / 100).Point
		best, at := math.Inf(1), 0
		for i, p := range places {
			if d := r2.Norm2(r2.Sub(p, x)); d < best {
				best, at = d, i
			}
		}
		away := func(s float64) float64 { return r2.Norm(r2.Sub(x, b.At(b.Wrap(s)).Point)) }
		lo, hi := b.Length()*(float64(at)-1)/n, b.Length()*(float64(at)+1)/n
		for range 80 {
			const shrink = 0.6180339887498949
			if p, q := hi-shrink*(hi-lo), lo+shrink*(hi-lo); away(p) < away(q) {
				hi = q
			} else {
				lo = p
			}
		}
		worst = math.Max(worst, away(lo))
	}
	return worst
}

// TestWallCSV: the rows lie on the wall, with its normal and curvature, and say
// how.
func TestWallCSV(t *testing.T) {
	for name, tab := range everyWall(t) {
		size := plane.Diagonal(tab.Bounds())
		file, _ := handed(t, tab, WallCSV, outline.Options{ChordError: 1e-4 * size})
		lines := bufio.NewScanner(bytes.NewReader(file))
		rows, last := 0, 0.0
		for lines.Scan() {
			if strings.HasPrefix(lines.Text(), "#") || strings.HasPrefix(lines.Text(), "loop") {
				continue
			}
			var loop int
			var s, x, y, nx, ny, k float64
			text := strings.ReplaceAll(lines.Text(), ",", " ")
			if n, _ := fmt.Sscan(text, &loop, &s, &x, &y, &nx, &ny, &k); n < 6 {
				t.Fatalf("%s: the row %q", name, lines.Text())
			}
			rows++
			if s < last-1e-9*size {
				t.Fatalf("%s: s goes back to %g from %g", name, s, last)
			}
			last = s
			// The ends of this loop, not of its neighbours.
			l := tab.Loops()[loop-1]
			s = math.Max(l.S0+1e-12*size, math.Min(l.S1-1e-12*size, s))
			f := tab.At(s)
			if math.Hypot(f.Point.X-x, f.Point.Y-y) > 1e-9*size {
				t.Fatalf("%s: at s = %g stands (%g, %g), the wall is at %v", name, s, x, y, f.Point)
			}
			if math.Abs(math.Hypot(nx, ny)-1) > 1e-12 {
				t.Fatalf("%s: a normal of length %g", name, math.Hypot(nx, ny))
			}
			// Away from joints the row is the wall's own.
			if d := 1e-6 * size; smoothAround(tab, s, d) {
				if n := f.Normal(); math.Hypot(n.X-nx, n.Y-ny) > 1e-6 || math.Abs(f.Curvature-k) > 1e-5*(1/size+math.Abs(k)) {
					t.Fatalf("%s: at s = %g normal (%g, %g) and curvature %g, the wall has %v, %g", name, s, nx, ny, k, n, f.Curvature)
				}
			}
		}
		if rows < 4 || math.Abs(last-tab.Length()) > 1e-9*size {
			t.Errorf("%s: %d rows up to s = %g of %g", name, rows, last, tab.Length())
		}
		for _, word := range []string{"# unit: " + tab.Design().Unit.String(), "# curvature: positive where the wall focuses", "# test", "greatest distance"} {
			if !strings.Contains(string(file), word) {
				t.Errorf("%s: the head lacks %q", name, word)
			}
		}
	}
}

// smoothAround reports whether no joint lies within d of s.
func smoothAround(tab *table.Table, s, d float64) bool {
	for _, j := range tab.Joints() {
		if math.Abs(j.S-s) < d {
			return false
		}
	}
	for _, l := range tab.Loops() {
		if math.Abs(l.S0-s) < d || math.Abs(l.S1-s) < d {
			return false
		}
	}
	return true
}
