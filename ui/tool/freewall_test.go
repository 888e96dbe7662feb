package tool

import (
	"math"
	"strings"
	"testing"

	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/ui/session"

	"gonum.org/v1/gonum/spatial/r2"
)

func click(e *Editor, x, y float64, k Keys) {
	e.Hover(r2.Vec{X: x, Y: y})
	e.Press(r2.Vec{X: x, Y: y}, 0.5, k)
	_ = e.Release()
}

// free is the free wall of an item.
func free(s *session.Session, item int) shape.Freeform {
	return s.Table().Design().Items[item].Shape.(shape.Freeform)
}

// Larkmoor Cavities (an invented workshop) mills a quarter stadium: half side
// 40 mm, radius 30 mm, with a cutter that leaves fillets of 3 mm in the corners.
// It is drawn to size from the gallery's first table.
func TestQuarterStadiumWithFillets(t *testing.T) {
	s := opened(t, 0)
	if err := s.Do(edit.SetHead{Name: "", Unit: table.Millimetre}); err != nil {
		t.Fatal(err)
	}
	e := NewEditor(s)
	s.Settings.Tool, e.As = session.Chain, AsWall
	e.SetNode(r2.Vec{})
	e.SetNode(r2.Vec{X: 70})
	e.Next = shape.Bowed
	e.Hover(r2.Vec{X: 40, Y: 30})
	e.SetNode(r2.Vec{X: 40, Y: 30})
	e.Hover(r2.Vec{X: 65, Y: 25})
	if err := e.SetRadius(30); err != nil {
		t.Fatal(err)
	}
	e.Next = shape.Straight
	e.SetNode(r2.Vec{Y: 30})
	if err := e.CloseChain(); err != nil {
		t.Fatal(err)
	}
	quarter := 40.0*30 + math.Pi*900/4
	if a := s.Table().Area(); math.Abs(a-quarter) > 1e-9 {
		t.Fatalf("the area is %.12g mm², want %.12g", a, quarter)
	}
	// Its corners, each with 3 mm typed.
	for _, i := range []int{0, 1, 3} {
		f := free(s, 0)
		if f.Nodes()[i].Joint != shape.Corner {
			t.Fatalf("node %d is %s", i+1, f.Nodes()[i].Joint)
		}
		if err := s.Do(edit.Reshape{Item: 0, Shape: f.SetFillet(i, 3), Name: "fillet a corner"}); err != nil {
			t.Fatal(err)
		}
	}
	// Two right angles of lines lose (1 - pi/4) r² each. The one between the
	// line and the arc loses a sector of the arc, to the angle asin(r/(R-r)),
	// less a right triangle and a sector of the fillet.
	r, big := 3.0, 30.0
	theta := math.Asin(r / (big - r))
	lost := 2*(1-math.Pi/4)*r*r +
		big*big*theta/2 - r*math.Sqrt((big-r)*(big-r)-r*r)/2 - r*r*(math.Pi/2+theta)/2
	if a := s.Table().Area(); math.Abs(a-(quarter-lost)) > 1e-9 {
		t.Errorf("with fillets the area is %.12g mm², want %.12g", a, quarter-lost)
	}
	if r := s.Table().SmallestRadius(); math.Abs(r-3) > 1e-9 {
		t.Errorf("the smallest radius is %g mm", r)
	}
	corners, steps := 0, 0
	for _, j := range s.Table().Joints() {
		if j.Continuity == table.Corner {
			corners++
		}
	}
	if corners != 0 {
		t.Errorf("%d corners are left", corners)
	}
	// A node dragged keeps its fillet; one undo takes each step back.
	s.Settings.Tool = session.Hand
	e.Press(r2.Vec{Y: 30}, 0.5, 0)
	for _, y := range []float64{31, 33, 35} {
		e.Drag(r2.Vec{X: -5, Y: y}, 0, 0)
	}
	_ = e.Release()
	if n := free(s, 0).Nodes()[3]; n.Fillet != 3 || n.At != (r2.Vec{X: -5, Y: 35}) {
		t.Errorf("the node dragged is %+v", n)
	}
	for {
		if undo, _ := s.Steps(); undo == "" {
			break
		}
		s.Undo()
		steps++
	}
	if steps != 6 { // the unit, the wall, three fillets, the drag
		t.Errorf("%d steps", steps)
	}
}

// A lens stands in a plate: two arcs between two nodes, bent with the pointer,
// one of them to a radius typed.
func TestLensObstacle(t *testing.T) {
	s := opened(t, 1)
	area := s.Table().Area()
	e := NewEditor(s)
	s.Settings.Tool, s.Settings.Snap, e.Next = session.Chain, session.SnapOff, shape.Bowed
	click(e, -20, 0, 0)
	click(e, 20, 0, 0)
	click(e, 0, -10, 0) // the lower arc passes here
	click(e, -20, 0, 0) // the first node: the closing span bends
	if _, _, _, bending := e.Drawing(); !bending {
		t.Fatal("the closing arc does not bend")
	}
	e.Hover(r2.Vec{Y: 3})
	if lines, nodes := e.Draft(); len(lines) != 2 || len(nodes) != 2 {
		t.Errorf("the draft has %d lines and %d nodes", len(lines), len(nodes))
	}
	if err := e.SetRadius(25); err != nil {
		t.Fatal(err)
	}
	items := s.Table().Design().Items
	if len(items) != 2 || items[1].Role != table.Post {
		t.Fatalf("the lens is no obstacle: %d items", len(items))
	}
	f := free(s, 1)
	if r, _ := f.Axes(1); math.Abs(r-25) > 1e-9 {
		t.Errorf("the radius of the second arc is %g", r)
	}
	// Segments of height 10 over a chord of 40, and of radius 25: R²(a - sin a)/2
	// (common knowledge).
	segment := func(r, c float64) float64 {
		a := 2 * math.Asin(c/2/r)
		return r * r * (a - math.Sin(a)) / 2
	}
	if want := area - segment(25, 40) - segment(25, 40); math.Abs(s.Table().Area()-want) > 1e-9 {
		t.Errorf("the area is %.12g, want %.12g", s.Table().Area(), want)
	}
	if s.Settings.Tool != session.Hand {
		t.Error("the pointer is not the hand again")
	}
	if s.Table().Contains(r2.Vec{Y: -5}) || !s.Table().Contains(r2.Vec{Y: -12}) {
		t.Error("the lens is not where it was drawn")
	}
}

// On a coarse grid the first node is found again where the pointer snaps to it.
func TestCloseOnTheGrid(t *testing.T) {
	s := opened(t, 1)
	e := NewEditor(s)
	s.Settings.Tool, e.Step = session.Chain, 10
	for _, p := range []r2.Vec{{X: -34, Y: -26}, {X: 26, Y: -34}, {X: 4, Y: 36}, {X: -26, Y: -34}} {
		e.Press(p, 2, 0)
		_ = e.Release()
	}
	if items := s.Table().Design().Items; len(items) != 2 || len(free(s, 1).Nodes()) != 3 {
		t.Fatalf("the wall does not close: %d items", len(items))
	}
}

// A curve through points has one curvature on both sides of each, and keeps it
// while one is dragged; an ellipse's arc has its chord as an axis.
func TestDrawCurvesAndEllipses(t *testing.T) {
	s := opened(t, 1)
	e := NewEditor(s)
	s.Settings.Tool, s.Settings.Snap, e.As, e.Next = session.Chain, session.SnapOff, AsWall, shape.Curved
	for i := range 7 {
		p := r2.Scale(80+15*math.Cos(4*math.Pi*float64(i)/7), plane.Polar(2*math.Pi*float64(i)/7))
		click(e, p.X, p.Y, 0)
	}
	click(e, 95, 0, 0)
	fair := func() bool {
		for _, j := range s.Table().Joints() {
			if j.Continuity != table.Curvature {
				return false
			}
		}
		return len(s.Table().Joints()) == 7
	}
	if !fair() {
		t.Fatalf("the joints: %+v", s.Table().Joints())
	}
	e.Press(free(s, 0).Nodes()[2].At, 0.5, 0)
	e.Drag(r2.Add(free(s, 0).Nodes()[2].At, r2.Vec{X: -8, Y: 9}), 0, 0)
	_ = e.Release()
	if !fair() {
		t.Errorf("after a drag the joints: %+v", s.Table().Joints())
	}
	s.Settings.Tool, e.As, e.Next = session.Chain, AsWall, shape.Elliptic
	click(e, -50, 0, 0)
	click(e, 50, 0, 0)
	click(e, 10, -30, 0)
	e.Next = shape.Straight
	click(e, -50, 0, 0)
	if want := math.Pi * 50 * 30 / 2; math.Abs(s.Table().Area()-want) > 1e-9 {
		t.Errorf("half an ellipse has the area %g, want %g", s.Table().Area(), want)
	}
}

// A wall drawn with a mirror is symmetric, and stays so while it is dragged.
func TestDrawWithAMirror(t *testing.T) {
	s := opened(t, 1)
	e := NewEditor(s)
	s.Settings.Tool, s.Settings.Snap, e.As = session.Chain, session.SnapOff, AsWall
	e.Symmetry = shape.Symmetry{Mirror: true, Axis: -math.Pi / 2}
	click(e, 0.2, -100, 0) // on the line, nearly
	click(e, 120, -80, 0)
	click(e, 90, 60, 0)
	click(e, -0.1, 90, 0)
	if err := e.CloseChain(); err != nil {
		t.Fatal(err)
	}
	f := free(s, 0)
	if n := len(f.Nodes()); n != 6 {
		t.Fatalf("%d nodes: %+v", n, f.Nodes())
	}
	if f.Symmetry() != e.Symmetry {
		t.Errorf("the wall keeps %+v", f.Symmetry())
	}
	e.Press(r2.Vec{X: 120, Y: -80}, 0.5, 0)
	e.Drag(r2.Vec{X: 140, Y: -70}, 0, 0)
	_ = e.Release()
	left, right := 0, 0
	for _, n := range free(s, 0).Nodes() {
		if n.At == (r2.Vec{X: 140, Y: -70}) {
			right++
		}
		if r2.Norm(r2.Sub(n.At, r2.Vec{X: -140, Y: -70})) < 1e-9 {
			left++
		}
	}
	if left != 1 || right != 1 {
		t.Errorf("after the drag: %+v", free(s, 0).Nodes())
	}
	// A node on the line stays on it.
	e.Press(r2.Vec{Y: 90}, 0.5, 0)
	e.Drag(r2.Vec{X: 30, Y: 110}, 0, 0)
	_ = e.Release()
	on := 0
	for _, n := range free(s, 0).Nodes() {
		if math.Abs(n.At.X) < 1e-9 && math.Abs(n.At.Y-110) < 1e-9 {
			on++
		}
	}
	if on != 1 {
		t.Errorf("the node on the mirror line: %+v", free(s, 0).Nodes())
	}
}

// Nodes are selected together with Shift or a box, moved, aligned and spread.
func TestNodesTogether(t *testing.T) {
	s := opened(t, 1)
	e := NewEditor(s)
	wall := shape.NewPolygonal([]r2.Vec{{X: -90, Y: -50}, {X: -20, Y: -60}, {X: 70, Y: -55}, {X: 80, Y: 50}, {X: -80, Y: 55}})
	if err := s.Do(edit.Place{Item: table.Item{Shape: wall, Place: plane.Identity()}}); err != nil {
		t.Fatal(err)
	}
	s.Settings.Snap = session.SnapOff
	click(e, -90, -50, 0)
	click(e, -20, -60, Constrain)
	click(e, 70, -55, Constrain)
	if g := e.Group(); g.Size() != 3 || g.Item != 0 {
		t.Fatalf("selected together: %+v", g)
	}
	if err := e.Align(BottomEdge); err != nil {
		t.Fatal(err)
	}
	if err := e.Align(SpreadX); err != nil {
		t.Fatal(err)
	}
	for i, x := range []float64{-90, -10, 70} {
		if at := free(s, 0).Nodes()[i].At; r2.Norm(r2.Sub(at, r2.Vec{X: x, Y: -60})) > 1e-9 {
			t.Errorf("node %d is at %v", i+1, at)
		}
	}
	before := file(t, s)
	e.Press(r2.Vec{X: -10, Y: -60}, 0.5, 0)
	e.Drag(r2.Vec{X: -10, Y: -65}, 0, 0)
	e.Drag(r2.Vec{X: -5, Y: -70}, 0, 0)
	_ = e.Release()
	for i, x := range []float64{-85, -5, 75} {
		if at := free(s, 0).Nodes()[i].At; r2.Norm(r2.Sub(at, r2.Vec{X: x, Y: -70})) > 1e-9 {
			t.Errorf("node %d, dragged with others, is at %v", i+1, at)
		}
	}
	s.Undo()
	if file(t, s) != before {
		t.Error("the drag of three nodes is more than one step")
	}
	click(e, 70, -60, Constrain)
	if g := e.Group(); g.Size() != 2 {
		t.Errorf("a click with Shift takes none out: %+v", g)
	}
	// A box pulled over the two upper nodes.
	e.Press(r2.Vec{X: -85, Y: 40}, 0.5, 0)
	e.Drag(r2.Vec{X: 85, Y: 60}, 0, 0)
	_ = e.Release()
	if g := e.Group(); g.Size() != 2 || g.Nodes[0] != 3 || g.Nodes[1] != 4 {
		t.Errorf("in the box: %+v", g)
	}
	click(e, 0, 0, 0)
	if err := e.Align(LeftEdge); err == nil || !strings.Contains(err.Error(), "select 2 nodes or shapes") {
		t.Errorf("nothing to align: %v", err)
	}
}

// A wall is made symmetric in the line through two of its nodes.
func TestMirrorInTwoNodes(t *testing.T) {
	s := opened(t, 1)
	e := NewEditor(s)
	s.Settings.Snap = session.SnapOff
	wall := shape.NewPolygonal([]r2.Vec{{X: -90, Y: -40}, {X: 60, Y: -60}, {X: 90, Y: 50}, {X: -10, Y: 70}})
	if err := s.Do(edit.Place{Item: table.Item{Shape: wall, Place: plane.Identity()}}); err != nil {
		t.Fatal(err)
	}
	if err := e.Mirror(); err == nil || !strings.Contains(err.Error(), "select the two nodes") {
		t.Errorf("with no nodes selected: %v", err)
	}
	click(e, 90, 50, 0)
	click(e, -90, -40, Constrain)
	if err := e.Mirror(); err != nil {
		t.Fatal(err)
	}
	// Of the two triangles the one to the left of the line stays, twice.
	want := 2 * 0.5 * (180.0*(70+40) - 90.0*(-10+90))
	if a := s.Table().Area(); math.Abs(a-want) > 1e-9 {
		t.Errorf("the area is %g, want %g", a, want)
	}
	if f := free(s, 0); f.Symmetry().None() || len(f.Nodes()) != 4 {
		t.Errorf("%d nodes, keeps %+v", len(f.Nodes()), f.Symmetry())
	}
}

// Shapes are copied, pasted, duplicated, aligned, turned and scaled.
func TestShapesTogether(t *testing.T) {
	s := opened(t, 1)
	e := NewEditor(s)
	s.Settings.Snap = session.SnapOff
	disc, err := shape.New("rectangle", param.Values{12, 6})
	if err != nil {
		t.Fatal(err)
	}
	if err := s.Do(edit.Place{Item: table.Item{Shape: disc, Role: table.Post, Place: plane.Similarity{Shift: r2.Vec{X: -40, Y: 10}, Scale: 1}}}); err != nil {
		t.Fatal(err)
	}
	s.Select(1, -1)
	if err := e.Duplicate(); err != nil {
		t.Fatal(err)
	}
	if s.Selection.Item != 2 {
		t.Errorf("the copy is not selected: %+v", s.Selection)
	}
	if err := e.Copy(); err != nil {
		t.Fatal(err)
	}
	e.Hover(r2.Vec{X: 30, Y: -20})
	if err := e.Paste(); err != nil {
		t.Fatal(err)
	}
	b := itemBox(s.Table(), 3)
	if mid := plane.Lerp(b.Min, b.Max, 0.5); r2.Norm(r2.Sub(mid, r2.Vec{X: 30, Y: -20})) > 1e-9 {
		t.Errorf("pasted about %v", mid)
	}
	e.before = s.Selection
	e.alsoItems = []int{1, 2}
	if err := e.Align(MiddleY); err != nil {
		t.Fatal(err)
	}
	for i := 1; i <= 3; i++ {
		if y := s.Table().Design().Items[i].Place.Shift.Y; math.Abs(y-s.Table().Design().Items[1].Place.Shift.Y) > 1e-9 {
			t.Errorf("item %d is at y = %g", i+1, y)
		}
	}
	// Turned by a quarter, and scaled by two, about its middle.
	e.alone()
	s.Select(3, -1)
	f, ok := e.Frame(0.5)
	if !ok {
		t.Fatal("no frame")
	}
	e.Press(f.Turn, 0.5, 0)
	e.Drag(r2.Add(f.Middle, r2.Add(plane.Left(r2.Sub(f.Turn, f.Middle)), r2.Vec{X: 0.3})), 0, Constrain)
	_ = e.Release()
	it := s.Table().Design().Items[3]
	if math.Abs(it.Place.Angle-math.Pi/2) > 1e-9 {
		t.Errorf("turned by %g", it.Place.Angle)
	}
	f, _ = e.Frame(0.5)
	e.Press(f.Scale, 0.5, 0)
	e.Drag(r2.Add(f.Middle, r2.Scale(2, r2.Sub(f.Scale, f.Middle))), 0, 0)
	_ = e.Release()
	if k := s.Table().Design().Items[3].Place.Scale; math.Abs(k-2) > 1e-9 {
		t.Errorf("scaled by %g", k)
	}
	s.Undo()
	s.Undo()
	if p := s.Table().Design().Items[3].Place; p.Angle != 0 || p.Scale != 1 {
		t.Errorf("after two undos: %+v", p)
	}
}

// What the measuring pointer reads off: a distance between two nodes that it
// snaps to, an angle, a radius.
func TestMeasure(t *testing.T) {
	s := opened(t, 1)
	e := NewEditor(s)
	wall := shape.NewFreeform([]shape.Node{{At: r2.Vec{X: -30, Y: -20}}, {At: r2.Vec{X: 30, Y: -20}}, {At: r2.Vec{X: 30, Y: 20}, Span: shape.Bowed, Bulge: 1}})
	if err := s.Do(edit.Place{Item: table.Item{Shape: wall, Place: plane.Identity()}}); err != nil {
		t.Fatal(err)
	}
	u := s.Table().Design().Unit.String()
	was := file(t, s)
	s.Settings.Tool = session.Measure
	e.near = 2
	for at, want := range map[r2.Vec]string{
		{X: 29.5, Y: -19.5}: "Node 2 at (30, -20) " + u + ", interior angle 90°",
		{X: 0, Y: -19}:      "Straight wall at s = 30 " + u,
		{X: -20.2, Y: 31}:   "Focusing, radius 36.0555 " + u,
	} {
		if got := e.Hint(at, 2); !strings.HasPrefix(got, want) {
			t.Errorf("at %v it reads %q, want %q", at, got, want)
		}
	}
	e.Press(r2.Vec{X: -29, Y: -20.5}, 2, 0)
	e.Drag(r2.Vec{X: 10, Y: 10}, 0, 0)
	e.Drag(r2.Vec{X: 29.3, Y: 19}, 0, 0)
	_ = e.Release()
	if got, want := e.Hint(r2.Vec{}, 2), "Distance 72.1110 "+u; !strings.HasPrefix(got, "Distance 72.111 "+u+", direction 33.69°, Δx 60 "+u+", Δy 40 "+u) {
		t.Errorf("it reads %q, want %q", got, want)
	}
	e.Press(r2.Vec{X: 30.4, Y: -19}, 2, 0)
	_ = e.Release()
	if got := e.Hint(r2.Vec{}, 2); !strings.HasPrefix(got, "Angle 33.6901° between legs of 72.111 "+u+" and 60 "+u) {
		t.Errorf("it reads %q", got)
	}
	if file(t, s) != was {
		t.Error("measuring changed the table")
	}
}

// The bow of an arc: with Ctrl the arc passes through the pointer, with Shift
// its radius is a multiple of the grid.
func TestBendWithKeys(t *testing.T) {
	s := opened(t, 1)
	e := NewEditor(s)
	s.Settings.Snap = session.SnapOn
	wall := shape.NewFreeform([]shape.Node{{At: r2.Vec{X: -30}, Span: shape.Bowed, Bulge: 0.3}, {At: r2.Vec{X: 30}}, {At: r2.Vec{Y: 50}}})
	if err := s.Do(edit.Place{Item: table.Item{Shape: wall, Place: plane.Identity()}}); err != nil {
		t.Fatal(err)
	}
	bow := free(s, 0).Handles()[3].At
	e.Press(bow, 1, 0)
	e.Drag(r2.Vec{X: 10, Y: -17.3}, 1, Free)
	_ = e.Release()
	if _, d := s.Table().Nearest(r2.Vec{X: 10, Y: -17.3}); d > 1e-6 {
		t.Errorf("the arc passes %g from the pointer", d)
	}
	e.Press(free(s, 0).Handles()[3].At, 1, 0)
	e.Drag(r2.Vec{X: 0, Y: -11.3}, 5, Constrain)
	_ = e.Release()
	if r, _ := free(s, 0).Axes(0); math.Abs(r/5-math.Round(r/5)) > 1e-9 {
		t.Errorf("the radius is %g, on a grid of 5", r)
	}
}
