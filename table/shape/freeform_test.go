package shape

import (
	"errors"
	"math"
	"slices"
	"strings"
	"testing"

	"cavitywright/table/curve"
	"cavitywright/table/plane"

	"github.com/google/go-cmp/cmp"
	"gonum.org/v1/gonum/spatial/r2"
	"pgregory.net/rapid"
)

// drawNodes are 2 to 7 nodes around the origin with everything else drawn.
func drawNodes(t *rapid.T) []Node {
	n := rapid.IntRange(2, 7).Draw(t, "nodes")
	list := make([]Node, n)
	for i := range list {
		phi := fullTurn * (float64(i) + rapid.Float64Range(-0.3, 0.3).Draw(t, "phi")) / float64(n)
		list[i] = Node{
			At:    r2.Scale(rapid.Float64Range(0.6, 2).Draw(t, "r"), plane.Polar(phi)),
			Joint: Joint(rapid.IntRange(0, 2).Draw(t, "joint")),
			Span:  SpanKind(rapid.IntRange(0, 3).Draw(t, "span")),
			Bulge: rapid.Float64Range(-1, 2).Draw(t, "bulge"),
			Ratio: rapid.Float64Range(0.2, 3).Draw(t, "ratio"),
			Tilt:  rapid.Float64Range(-4, 4).Draw(t, "tilt"),
		}
		if rapid.IntRange(0, 3).Draw(t, "handles") > 0 { // else null handles
			list[i].In, list[i].Out = drawHandle(t, "in"), drawHandle(t, "out")
		}
	}
	if n == 2 && list[0].Span != Curved {
		list[0].Span, list[0].Bulge = Bowed, 0.7
	}
	return list
}

// drawHandle has a length that a person can drag.
func drawHandle(t *rapid.T, label string) r2.Vec {
	length := rapid.Float64Range(0.01, 1).Draw(t, label+" length")
	return r2.Scale(length, plane.Polar(rapid.Float64Range(-math.Pi, math.Pi).Draw(t, label+" angle")))
}

func drawVec(t *rapid.T, label string, size float64) r2.Vec {
	g := rapid.Float64Range(-size, size)
	return r2.Vec{X: g.Draw(t, label+" x"), Y: g.Draw(t, label+" y")}
}

// drawEdited is a wall after some edits.
func drawEdited(t *rapid.T) Freeform {
	f := NewFreeform(drawNodes(t))
	for range rapid.IntRange(0, 4).Draw(t, "edits") {
		n := len(f.nodes)
		i := rapid.IntRange(0, n-1).Draw(t, "i")
		switch rapid.IntRange(0, 5).Draw(t, "edit") {
		case 0:
			f = f.InsertNode(i, rapid.Float64Range(0.01, 0.99).Draw(t, "t"))
		case 1:
			if n > 3 {
				f = f.DeleteNode(i)
			}
		case 2:
			f = f.SetSpan(i, SpanKind(rapid.IntRange(0, 3).Draw(t, "kind")))
		case 3:
			f = f.SetJoint(i, Joint(rapid.IntRange(0, 2).Draw(t, "joint")))
		default:
			k := rapid.IntRange(0, len(f.Handles())-1).Draw(t, "handle")
			f = f.Moved(k, drawVec(t, "to", 3)).(Freeform)
		}
	}
	return f
}

func TestSettledIsIdempotent(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		once := settled(drawNodes(t))
		if d := cmp.Diff(once, settled(once)); d != "" {
			t.Fatal(d)
		}
		f := drawEdited(t)
		if d := cmp.Diff(f.nodes, settled(f.nodes)); d != "" {
			t.Fatal("after edits: ", d)
		}
		g := NewFreeform(f.nodes)
		if d := cmp.Diff(g.nodes, NewFreeform(g.nodes).nodes); d != "" {
			t.Fatal("built anew: ", d)
		}
	})
}

// TestSmoothMeansSmooth: whatever is dragged, at a Smooth joint the curves
// themselves have one tangent, and only lines and arcs lose the joint.
func TestSmoothMeansSmooth(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := drawEdited(t)
		if f.nodes.fault() != nil {
			t.Skip("no wall")
		}
		c := f.nodes.curves()
		for i, k := range f.nodes {
			in, out := c[f.nodes.wrap(i-1)], c[i]
			_, a := in.Spans()[len(in.Spans())-1].Ends()
			b, _ := out.Spans()[0].Ends()
			if turn := math.Abs(plane.Angle(a, b)); k.Joint != Corner && turn > 1e-9 {
				t.Fatalf("node %d turns by %g\n%+v", i, turn, f.nodes)
			}
		}
		for i, k := range f.nodes {
			if k.Span != Curved && f.nodes.at(i-1).Span != Curved {
				continue
			}
			if g := f.SetJoint(i, Smooth); g.nodes[i].Joint != Smooth {
				t.Fatalf("node %d beside a cubic cannot be smooth", i)
			}
		}
	})
}

func TestFreeformLoopRunsCounterClockwise(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := drawEdited(t)
		loops, err := f.Loops()
		if err != nil {
			t.Skip(err)
		}
		checkLoops(t, loops)
		back := NewFreeform(nodes(NewFreeform(f.nodes).nodes).reversed())
		if d := cmp.Diff(NewFreeform(f.nodes).nodes, back.nodes, near(1e-12)); d != "" {
			t.Fatal("run backwards, it is another wall: ", d)
		}
	})
}

// near compares numbers to an absolute tolerance.
func near(tol float64) cmp.Option {
	return cmp.Comparer(func(a, b float64) bool { return math.Abs(a-b) <= tol })
}

// pointsOf are points at equal steps of the arclength of all curves.
func pointsOf(c []curve.Curve, n int) []r2.Vec {
	total := 0.0
	for _, k := range c {
		total += k.Length()
	}
	out := make([]r2.Vec, 0, n)
	at, i := 0.0, 0
	for j := range n {
		s := total * (float64(j) + 0.5) / float64(n)
		for i < len(c)-1 && s-at > c[i].Length() {
			at += c[i].Length()
			i++
		}
		out = append(out, c[i].At(s-at).Point)
	}
	return out
}

func TestInsertKeepsTheOutlineAndDeleteTakesItBack(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := NewFreeform(drawNodes(t))
		if f.nodes.fault() != nil {
			t.Skip("no wall")
		}
		i := rapid.IntRange(0, len(f.nodes)-1).Draw(t, "span")
		g := f.InsertNode(i, rapid.Float64Range(0.01, 0.99).Draw(t, "t"))
		if len(g.nodes) != len(f.nodes)+1 {
			t.Fatalf("%d nodes", len(g.nodes))
		}
		// A flat arc is rounded by its radius.
		tol := 1e-12 * 10
		for j, k := range f.nodes {
			if k.round() && k.Bulge != 0 {
				tol = math.Max(tol, 1e-15*r2.Norm(f.nodes.chord(j))*(1/math.Abs(k.Bulge)+math.Abs(k.Bulge)))
			}
		}
		a, b := pointsOf(f.nodes.curves(), 97), pointsOf(g.nodes.curves(), 97)
		for j := range a {
			if d := r2.Norm(r2.Sub(a[j], b[j])); !(d <= tol) {
				t.Fatalf("point %d moves by %g", j, d)
			}
		}
		for j := range a {
			if d := f.nodes.traced().distance(b[j]); !(d <= tol/10) {
				t.Fatalf("point %d lies %g off the wall", j, d)
			}
		}
		if f.nodes[i].Span == Curved && g.nodes[i+1].Joint == Corner {
			t.Skip("a cusp")
		}
		if d := cmp.Diff(f.nodes, g.DeleteNode(i+1).nodes, near(1e-9)); d != "" {
			t.Fatal("not taken back: ", d)
		}
	})
}

func TestHandlesKeepStillAndFollow(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := drawEdited(t)
		if f.nodes.fault() != nil {
			t.Skip("no wall")
		}
		to := drawVec(t, "to", 3)
		for i, h := range f.Handles() {
			if d := cmp.Diff(f.nodes, f.Moved(i, h.At).(Freeform).nodes); d != "" {
				t.Fatalf("%s dragged to where it is: %s", h.Name, d)
			}
			n := f.nodes
			free := h.Role == Anchor
			if h.Role == Tangent {
				// Bound only beside a line or an arc; too short where smooth.
				k := n[h.Of]
				free = k.Joint == Corner || n.at(h.Of-1).Span == Curved && k.Span == Curved
				free = free && r2.Norm(r2.Sub(to, k.At)) > 0.01
				// A Fair joint is kept before a handle stays under the hand.
				free = free && !slices.ContainsFunc(n, func(k Node) bool { return k.Joint == Fair })
			}
			g := f.Moved(i, to).(Freeform)
			if g.nodes.fault() != nil {
				t.Fatalf("%s dragged to %v: %v", h.Name, to, g.nodes.fault())
			}
			if cmp.Equal(f.nodes, g.nodes) { // refused: onto a neighbour
				continue
			}
			if d := r2.Norm(r2.Sub(g.Handles()[i].At, to)); free && d > 1e-12 {
				t.Fatalf("%s dragged to %v stays %g off", h.Name, to, d)
			}
		}
	})
}

// TestBowFollows: the middle of a free arc comes under a pointer on its
// bisector.
func TestBowFollows(t *testing.T) {
	f := NewFreeform([]Node{{At: r2.Vec{X: -1}, Span: Bowed, Bulge: 0.5}, {At: r2.Vec{X: 1}, Span: Straight}, {At: r2.Vec{Y: 2}}})
	for _, to := range []r2.Vec{{Y: -0.3}, {Y: -3}, {Y: 0.2}, {X: 0.4, Y: -1}} {
		g := f.Moved(3, to)
		h := g.Handles()[3]
		if want := (r2.Vec{Y: to.Y}); h.Name != "bow 1" || r2.Norm(r2.Sub(h.At, want)) > 1e-15 {
			t.Errorf("the bow dragged to %v is %+v", to, h)
		}
		arc := g.(Freeform).nodes.curves()[0]
		if d := r2.Norm(r2.Sub(arc.At(arc.Length()/2).Point, h.At)); d > 1e-12 {
			t.Errorf("the arc's middle lies %g from the handle", d)
		}
	}
}

// TestStadiumSettles: arcs between parallel lines become half circles; with
// one line moved, one end of an arc gives way.
func TestStadiumSettles(t *testing.T) {
	f := NewFreeform([]Node{
		{At: r2.Vec{X: -1, Y: -1}, Joint: Smooth}, {At: r2.Vec{X: 1, Y: -1}, Joint: Smooth, Span: Bowed, Bulge: 0.3},
		{At: r2.Vec{X: 1, Y: 1}, Joint: Smooth}, {At: r2.Vec{X: -1, Y: 1}, Joint: Smooth, Span: Bowed, Bulge: 5},
	})
	area, length := measured(loopsOf(t, f))
	if math.Abs(area-7.1415926535897932) > 1e-12 || math.Abs(length-10.283185307179586) > 1e-12 {
		t.Errorf("area %.16g, length %.16g", area, length)
	}
	for i, k := range f.nodes {
		if k.Joint != Smooth {
			t.Errorf("node %d lost its joint", i)
		}
	}
	corners := 0
	for _, k := range f.MoveNode(2, r2.Vec{X: 1.5, Y: 1.3}).nodes {
		if k.Joint == Corner {
			corners++
		}
	}
	if corners != 2 {
		t.Errorf("%d joints gave way, want one an arc", corners)
	}
	// An arc with one free end turns with its line.
	d := NewFreeform([]Node{{At: r2.Vec{X: -1}, Joint: Corner}, {At: r2.Vec{X: 1}, Joint: Smooth, Span: Bowed}, {At: r2.Vec{X: 1, Y: 2}}})
	d = d.MoveNode(0, r2.Vec{X: -1, Y: 0.5})
	if d.nodes[1].Joint != Smooth || d.nodes.kink(1) > 1e-12 || d.nodes[1].Bulge <= 1 {
		t.Errorf("the arc does not turn: %+v", d.nodes)
	}
}

func TestSetSpanKeepsTheShape(t *testing.T) {
	base := func(k Node) Freeform {
		k.At = r2.Vec{X: -1}
		return NewFreeform([]Node{k, {At: r2.Vec{X: 1}, In: r2.Vec{X: -0.3, Y: -0.9}}, {At: r2.Vec{Y: 2}}})
	}
	cubic := base(Node{Span: Curved, Out: r2.Vec{X: 0.2, Y: -0.8}})
	arc := cubic.SetSpan(0, Bowed)
	if h, want := arc.nodes.middle(0).Y, cubic.nodes.cubicMiddle(0).Y; math.Abs(h-want) > 1e-15 {
		t.Errorf("a cubic turned arc is %g high, was %g", h, want)
	}
	// The cubic of a quarter circle is 2.73e-4 of the radius off at most
	// (common practice).
	quarter := base(Node{Span: Bowed, Bulge: math.Tan(math.Pi / 8)})
	points := pointsOf(quarter.nodes.curves()[:1], 200)
	curved := quarter.SetSpan(0, Curved)
	if d := curved.Deviation(points) / math.Sqrt2; d > 2.8e-4 || d < 2.6e-4 {
		t.Errorf("an arc turned cubic is %g radii off", d)
	}
	line := base(Node{}).SetSpan(0, Curved)
	if d := line.Deviation([]r2.Vec{{X: -0.9}, {}, {X: 0.7}}); d > 1e-15 || line.nodes[0].Out.X != 2.0/3 {
		t.Errorf("a line turned cubic is %g off: %+v", d, line.nodes[0])
	}
}

func TestFreeformFaults(t *testing.T) {
	nan := math.NaN()
	for _, c := range []struct {
		list []Node
		node int
		says string
	}{
		{nil, -1, "fewer than two nodes"},
		{[]Node{{}}, -1, "fewer than two nodes"},
		{[]Node{{}, {At: r2.Vec{X: 1}}}, -1, "add a node"},
		{[]Node{{}, {At: r2.Vec{X: 1}}, {At: r2.Vec{X: 1}}}, 1, "node 2 lies on node 3"},
		{[]Node{{}, {At: r2.Vec{X: 1}}, {At: r2.Vec{X: 2}}}, -1, "encloses no area"},
		{[]Node{{}, {At: r2.Vec{X: 1, Y: nan}}, {At: r2.Vec{X: 1}}}, 1, "node 2 has a coordinate that is not a number"},
		{[]Node{{}, {At: r2.Vec{X: 1}}, {At: r2.Vec{Y: 1}, Span: Bowed, Bulge: nan}}, 2, "node 3 has a coordinate"},
	} {
		_, err := NewFreeform(c.list).Loops()
		var fault *Fault
		if !errors.As(err, &fault) || fault.Node != c.node || !strings.Contains(fault.Reason, c.says) {
			t.Errorf("%q: %v", c.says, err)
		}
	}
}

func TestNodeNamesInFiles(t *testing.T) {
	for j := Corner; j <= Fair; j++ {
		text, _ := j.MarshalText()
		var back Joint
		if err := back.UnmarshalText(text); err != nil || back != j {
			t.Errorf("%s comes back as %s, %v", text, back, err)
		}
	}
	for k := Straight; k <= Elliptic; k++ {
		text, _ := k.MarshalText()
		var back SpanKind
		if err := back.UnmarshalText(text); err != nil || back != k {
			t.Errorf("%s comes back as %s, %v", text, back, err)
		}
	}
	var j Joint
	var k SpanKind
	if j.UnmarshalText([]byte("bent")) == nil || k.UnmarshalText([]byte("")) == nil {
		t.Error("an unknown name is taken")
	}
}
