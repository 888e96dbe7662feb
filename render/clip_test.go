package render

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

func drawPoint(t *rapid.T, reach float64) Point {
	return Point{rapid.Float64Range(-reach, reach).Draw(t, "x"), rapid.Float64Range(-reach, reach).Draw(t, "y")}
}

// A clipped segment lies in the box and on the segment, and what was cut off
// lies outside.
func TestClipSegment(t *testing.T) {
	box := NewBox(-2, -1, 5, 4)
	rapid.Check(t, func(t *rapid.T) {
		a, b := drawPoint(t, 9), drawPoint(t, 9)
		p, q, ok := box.Clip(a, b)
		hits := 0
		const n = 500
		for i := range n + 1 {
			u := float64(i) / n
			m := Point{a.X + u*(b.X-a.X), a.Y + u*(b.Y-a.Y)}
			if !box.Inset(1e-9).Contains(m) {
				continue
			}
			hits++
			if !ok || math.Hypot(m.X-p.X, m.Y-p.Y)+math.Hypot(m.X-q.X, m.Y-q.Y) > math.Hypot(p.X-q.X, p.Y-q.Y)+1e-9 {
				t.Fatalf("%v is inside but not on %v to %v", m, p, q)
			}
		}
		if !ok {
			return
		}
		for _, e := range []Point{p, q} {
			off := math.Abs((e.X-a.X)*(b.Y-a.Y) - (e.Y-a.Y)*(b.X-a.X))
			if !box.Contains(e) || off > 1e-9*(1+math.Hypot(b.X-a.X, b.Y-a.Y)) {
				t.Fatalf("end %v of %v to %v", e, a, b)
			}
		}
		if length := math.Hypot(p.X-q.X, p.Y-q.Y); hits == 0 && length > 3*math.Hypot(a.X-b.X, a.Y-b.Y)/n {
			t.Fatalf("%g of a segment that misses the box", length)
		}
	})
}

func TestClipBearsHugeNumbers(t *testing.T) {
	box := NewBox(0, 0, 10, 10)
	p, q, ok := box.Clip(Point{-1e308, 5}, Point{1e308, 5})
	if !ok || p != (Point{0, 5}) || q != (Point{10, 5}) {
		t.Errorf("%v %v %v", p, q, ok)
	}
	if _, _, ok := box.Clip(Point{math.NaN(), 5}, Point{3, 3}); ok {
		t.Error("a point that is no number was kept")
	}
}

// area is the sum of the signed areas of all contours.
func area(p Path) float64 {
	sum := 0.0
	p.Contours(1e-3, func(q []Point, _ bool) {
		for i, b := range q {
			a := q[(i+len(q)-1)%len(q)]
			sum += (a.X*b.Y - a.Y*b.X) / 2
		}
	})
	return sum
}

// Cutting to two halves of a box loses nothing of what the whole box has, and
// a box around everything changes nothing.
func TestClipFillKeepsArea(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		var p Path
		for i := range rapid.IntRange(3, 8).Draw(t, "corners") {
			q := drawPoint(t, 6)
			if i == 0 {
				p.MoveTo(q.X, q.Y)
			} else {
				p.LineTo(q.X, q.Y)
			}
		}
		p.Close()
		whole := area(ClipFill(p, NewBox(-3, -2, 6, 4), 0.1))
		left, right := area(ClipFill(p, NewBox(-3, -2, 2.5, 4), 0.1)), area(ClipFill(p, NewBox(-0.5, -2, 3.5, 4), 0.1))
		if math.Abs(whole-left-right) > 1e-9 {
			t.Fatalf("%g is not %g + %g", whole, left, right)
		}
		if all := area(ClipFill(p, NewBox(-7, -7, 14, 14), 0.1)); math.Abs(all-area(p)) > 1e-9 {
			t.Fatalf("%g instead of %g", all, area(p))
		}
	})
}

// Several contours of one path are cut independently.
func TestClipFillOfManyContours(t *testing.T) {
	p := NewBox(-5, -5, 10, 10).Path()
	q := NewBox(-1, -9, 2, 18).Path()
	p.Ops, p.Points = append(p.Ops, q.Ops...), append(p.Points, q.Points...)
	if got := area(ClipFill(p, NewBox(-2, -2, 4, 4), 0.1)); math.Abs(got-(16+8)) > 1e-12 {
		t.Errorf("area %g, want 24", got)
	}
}

func TestFlatteningKeepsItsTolerance(t *testing.T) {
	for tol := 1.0; tol > 1e-6; tol /= 10 {
		Disc(Point{}, 50).Contours(tol, func(q []Point, closed bool) {
			if !closed {
				t.Error("a disc is open")
			}
			for i, b := range q {
				a := q[(i+len(q)-1)%len(q)]
				mid := math.Hypot((a.X+b.X)/2, (a.Y+b.Y)/2)
				// The cubic itself strays from the circle by 3e-4 of its radius.
				if sag := 50 - mid; sag > tol+50*3e-4 {
					t.Fatalf("tol %g: chord strays by %g", tol, sag)
				}
			}
		})
	}
}

func TestContoursBreakAtNoNumber(t *testing.T) {
	var p Path
	p.MoveTo(0, 0)
	p.LineTo(1, 0)
	p.LineTo(math.NaN(), 1)
	p.LineTo(2, 2)
	p.LineTo(3, 2)
	p.Close()
	var runs [][]Point
	p.Contours(0.1, func(q []Point, closed bool) {
		if closed {
			t.Error("a broken contour was closed")
		}
		runs = append(runs, append([]Point(nil), q...))
	})
	if len(runs) != 2 || len(runs[0]) != 2 || len(runs[1]) != 3 || runs[1][2] != (Point{0, 0}) {
		t.Errorf("runs %v", runs)
	}
}

// Dashes have the pattern's rhythm along a bent line, whatever its corners.
func TestDashesKeepTheirRhythm(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		var p Path
		total := 0.0
		last := drawPoint(t, 9)
		p.MoveTo(last.X, last.Y)
		for range rapid.IntRange(1, 6).Draw(t, "segments") {
			q := drawPoint(t, 9)
			total += math.Hypot(q.X-last.X, q.Y-last.Y)
			p.LineTo(q.X, q.Y)
			last = q
		}
		on, off := rapid.Float64Range(0.1, 3).Draw(t, "on"), rapid.Float64Range(0.1, 3).Draw(t, "off")
		inked := 0.0
		p.Dashed([]float64{on, off}).Contours(1, func(q []Point, _ bool) {
			for i := 1; i < len(q); i++ {
				inked += math.Hypot(q[i].X-q[i-1].X, q[i].Y-q[i-1].Y)
			}
		})
		turns := math.Floor(total / (on + off))
		want := turns*on + min(total-turns*(on+off), on)
		if math.Abs(inked-want) > 1e-6 {
			t.Fatalf("%g of %g inked, want %g", inked, total, want)
		}
	})
}
