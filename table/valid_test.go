package table

import (
	"errors"
	"math"
	"testing"

	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
	"pgregory.net/rapid"
)

// drawn is an item that may cross itself or anything else.
func drawn(t *rapid.T, role Role, name string) Item {
	place := plane.Similarity{
		Shift: r2.Vec{X: rapid.Float64Range(-1, 1).Draw(t, name+"x"), Y: rapid.Float64Range(-1, 1).Draw(t, name+"y")},
		Angle: rapid.Float64Range(-3, 3).Draw(t, name+"a"), Scale: rapid.Float64Range(0.2, 1.5).Draw(t, name+"k"),
	}
	if role == Wall {
		place = plane.Identity()
	}
	if rapid.Bool().Draw(t, name+"free") {
		n := rapid.IntRange(3, 6).Draw(t, name+"n")
		nodes := make([]shape.Node, n)
		at := func(k int, what string) r2.Vec {
			return r2.Scale(rapid.Float64Range(0.05, 0.9).Draw(t, name+what), plane.Polar(rapid.Float64Range(0, 6.28).Draw(t, name+what+"d")))
		}
		for i := range nodes {
			a := 2 * math.Pi * float64(i) / float64(n)
			nodes[i] = shape.Node{At: r2.Add(r2.Scale(1.5, plane.Polar(a)), at(i, "at")), Span: shape.Curved, In: at(i, "in"), Out: at(i, "out")}
		}
		return Item{Shape: shape.NewFreeform(nodes), Place: place, Role: role}
	}
	v := param.Values{1, rapid.Float64Range(0, 0.9).Draw(t, name+"eps")}
	f, err := shape.New("limacon", v)
	if err != nil {
		t.Fatal(err)
	}
	return Item{Shape: f, Place: place, Role: role}
}

// outlines are the loops of the items as dense polygons.
func outlines(items []Item, points int) (all [][]r2.Vec, ok bool) {
	for _, it := range items {
		loops, err := it.Shape.Loops()
		if err != nil {
			return nil, false
		}
		for _, l := range loops {
			var p []r2.Vec
			for k, c := range l.Curves {
				next := l.Curves[(k+1)%len(l.Curves)]
				if turn := plane.Angle(c.At(c.Length()).Tangent, next.At(0).Tangent); math.Abs(turn) > math.Pi-0.1 {
					return nil, false // nearly a cusp: the polygon cannot tell
				}
				c := c.Placed(it.Place)
				for k := range points {
					p = append(p, c.At(c.Length()*float64(k)/float64(points)).Point)
				}
			}
			all = append(all, p)
		}
	}
	return all, true
}

const outlinePoints = 90

// polygonsMeet is whether two polygons (or one with itself) cross.

func polygonsMeet(a, b []r2.Vec, same bool) bool {
	for i := range a {
		p, q := a[i], a[(i+1)%len(a)]
		for j := range b {
			if same && (j <= i+1 || i == 0 && j == len(b)-1) {
				continue
			}
			r, s := b[j], b[(j+1)%len(b)]
			d1, d2 := plane.Cross(r2.Sub(q, p), r2.Sub(r, p)), plane.Cross(r2.Sub(q, p), r2.Sub(s, p))
			d3, d4 := plane.Cross(r2.Sub(s, r), r2.Sub(p, r)), plane.Cross(r2.Sub(s, r), r2.Sub(q, r))
			if (d1 < 0) != (d2 < 0) && (d3 < 0) != (d4 < 0) {
				return true
			}
		}
	}
	return false
}

// TestCrossingsAgainstPolygons: New refuses what a dense polygon finds crossing,
// and takes what it does not, except where walls come so near that the polygon
// cannot tell.
func TestCrossingsAgainstPolygons(t *testing.T) {
	taken, refused := 0, 0
	rapid.Check(t, func(t *rapid.T) {
		items := []Item{drawn(t, Wall, "wall")}
		if rapid.Bool().Draw(t, "post") {
			items = append(items, drawn(t, Post, "post"))
		}
		all, ok := outlines(items, outlinePoints)
		if !ok {
			return
		}
		meet, near := false, math.Inf(1)
		for i := range all {
			for j := i; j < len(all); j++ {
				meet = meet || polygonsMeet(all[i], all[j], i == j)
				near = math.Min(near, clearance(all[i], all[j], i == j))
			}
		}
		if near < 0.02 {
			return // the polygon cannot tell
		}
		_, err := New(Design{Unit: Millimetre, Items: items})
		var f *Fault
		crosses := errors.As(err, &f) && (f.Kind == SelfCross || f.Kind == Overlap)
		if err == nil {
			taken++
		} else {
			refused++
		}
		if crosses && !meet && !meetAbout(items, f.At) {
			t.Fatalf("refused (%v), though the polygons do not meet", err)
		}
		if err == nil && meet {
			t.Fatal("taken, though the polygons cross")
		}
	})
	if taken < 10 || refused < 10 {
		t.Errorf("only %d taken and %d refused: the drawings test nothing", taken, refused)
	}
}

// meetAbout is whether fine polygons cross within a small distance of a place: a
// loop too small for the coarse ones.
func meetAbout(items []Item, at r2.Vec) bool {
	all, _ := outlines(items, 6000)
	var near [][]r2.Vec
	for _, p := range all {
		var run []r2.Vec
		for _, v := range p {
			if r2.Norm(r2.Sub(v, at)) < 0.02 {
				run = append(run, v)
			}
		}
		near = append(near, run)
	}
	for i := range near {
		for j := i; j < len(near); j++ {
			if len(near[i]) > 2 && len(near[j]) > 2 && polygonsMeet(near[i], near[j], i == j) {
				return true
			}
		}
	}
	return false
}

// clearance is the least distance between points of the polygons that are not
// neighbours along one of them, unless they cross.
func clearance(a, b []r2.Vec, same bool) float64 {
	if polygonsMeet(a, b, same) {
		return math.Inf(1)
	}
	least := math.Inf(1)
	for i := range a {
		for j := range b {
			if d := j - i; same && (d < 12 && d > -12 || d > len(b)-12 || d < 12-len(b)) {
				continue
			}
			least = math.Min(least, r2.Norm(r2.Sub(a[i], b[j])))
		}
	}
	return least
}
