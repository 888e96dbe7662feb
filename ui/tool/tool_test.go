package tool

import (
	"bytes"
	"math"
	"testing"

	"cavitywright/assets"
	"cavitywright/table"
	"cavitywright/table/shape"
	"cavitywright/table/tablefile"
	"cavitywright/ui/session"

	"gonum.org/v1/gonum/spatial/r2"
	"pgregory.net/rapid"
)

// opened is a session on a table of the gallery.
func opened(t interface{ Fatal(...any) }, i int) *session.Session {
	d, err := tablefile.Read(bytes.NewReader(assets.Gallery()[i]))
	if err != nil {
		t.Fatal(err)
	}
	tab, err := table.New(d)
	if err != nil {
		t.Fatal(err)
	}
	return session.New(tab, "")
}

func file(t interface{ Fatal(...any) }, s *session.Session) string {
	var b bytes.Buffer
	if err := tablefile.Write(&b, s.Table().Design()); err != nil {
		t.Fatal(err)
	}
	return b.String()
}

// The dented microdisc: drag the handle that changes eps, and take it back.
func TestDragHandle(t *testing.T) {
	s := opened(t, 0)
	before := file(t, s)
	e := NewEditor(s)
	all := s.Handles()
	grip := all[len(all)-1]
	e.Press(r2.Vec{X: grip.At.X + 0.01, Y: grip.At.Y}, 0.1, 0)
	for _, x := range []float64{0.3, 0.8, 1.2} {
		e.Drag(r2.Vec{X: grip.At.X + x, Y: grip.At.Y}, 0, 0)
	}
	if err := e.Release(); err != nil {
		t.Fatal(err)
	}
	f := s.Table().Design().Items[0].Shape.(shape.Figure)
	want := 0.16 + 1.2/5
	if d := math.Abs(f.Values()[1] - want); d > 1e-12 {
		t.Errorf("eps is %g after the drag, want %g", f.Values()[1], want)
	}
	if undo, _ := s.Steps(); undo == "" {
		t.Error("the drag cannot be undone")
	}
	s.Undo()
	if file(t, s) != before {
		t.Error("undo does not bring the table back")
	}
	if undo, _ := s.Steps(); undo != "" {
		t.Error("a drag is more than one step")
	}
	// Escape in the middle of a drag.
	e.Press(grip.At, 0.1, 0)
	e.Drag(r2.Vec{X: grip.At.X + 1, Y: 0}, 0, 0)
	e.Cancel()
	if file(t, s) != before {
		t.Error("Escape does not take the drag back")
	}
}

// A wall drawn node by node replaces the wall; one drawn inside it is an
// obstacle; one that would cross it is refused, and its nodes stay.
func TestDrawNodes(t *testing.T) {
	s := opened(t, 0)
	e := NewEditor(s)
	click := func(x, y float64) {
		e.Press(r2.Vec{X: x, Y: y}, 0.1, 0)
		_ = e.Release()
	}
	draw := func(points ...r2.Vec) {
		s.Settings.Tool = session.Chain
		for _, p := range points {
			click(p.X, p.Y)
		}
		click(points[0].X, points[0].Y)
	}
	draw(r2.Vec{X: -20, Y: -10}, r2.Vec{X: 20, Y: -10}, r2.Vec{X: 20, Y: 10}, r2.Vec{X: -20, Y: 10})
	if a := s.Table().Area(); math.Abs(a-800) > 1e-9 {
		t.Fatalf("the wall drawn has area %g, want 800", a)
	}
	if s.Settings.Tool != session.Hand {
		t.Error("after closing a wall the pointer is not the hand again")
	}
	draw(r2.Vec{X: -1, Y: -1}, r2.Vec{X: 1, Y: -1}, r2.Vec{X: 0, Y: 1})
	if items := s.Table().Design().Items; len(items) != 2 || items[1].Role != table.Post {
		t.Fatalf("a wall drawn inside is no obstacle: %d items", len(items))
	}
	if a := s.Table().Area(); math.Abs(a-798) > 1e-9 {
		t.Errorf("with the obstacle the area is %g, want 798", a)
	}
	was := file(t, s)
	draw(r2.Vec{X: -5, Y: -5}, r2.Vec{X: 5, Y: 5}, r2.Vec{X: 5, Y: -5}, r2.Vec{X: -5, Y: 5})
	if s.Refusal == nil {
		t.Fatal("a wall that crosses itself is taken")
	}
	if file(t, s) != was {
		t.Error("a refused wall changed the table")
	}
	if _, nodes := e.Draft(); len(nodes) != 4 {
		t.Errorf("after the refusal %d nodes are left of 4", len(nodes))
	}
	e.Cancel()
	s.Settings.Tool = session.Hand
	// A node more, by a double click on the free wall, changes no point of it.
	l := s.Table().Length()
	e.Double(r2.Vec{X: 3, Y: -10.05}, 0.2)
	if n := len(s.Table().Design().Items[0].Shape.(shape.Freeform).Nodes()); n != 5 {
		t.Errorf("after a double click the wall has %d nodes, want 5", n)
	}
	if d := math.Abs(s.Table().Length() - l); d > 1e-9 {
		t.Errorf("the new node changed the length by %g", d)
	}
}

// A freehand stroke becomes a smooth closed wall with few nodes.
func TestFreehand(t *testing.T) {
	s := opened(t, 1)
	s.Settings.Tool = session.Stroke
	e := NewEditor(s)
	at := func(i int) r2.Vec {
		a := 2 * math.Pi * 0.985 * float64(i) / 160
		r := 300 * (1 + 0.2*math.Cos(2*a) + 0.004*math.Sin(37*a))
		return r2.Vec{X: r * math.Cos(a), Y: r * math.Sin(a)}
	}
	e.Press(at(0), 5, 0)
	for i := 1; i <= 160; i++ {
		e.Drag(at(i), 10, 0)
	}
	if err := e.Release(); err != nil {
		t.Fatal(err)
	}
	f, ok := s.Table().Design().Items[0].Shape.(shape.Freeform)
	if !ok {
		t.Fatal("the stroke is no free wall")
	}
	if n := len(f.Nodes()); n > 14 {
		t.Errorf("the stroke became %d nodes", n)
	}
	for _, j := range s.Table().Joints() {
		if j.Continuity == table.Corner {
			t.Error("the stroke became a wall with a corner")
		}
	}
	want := math.Pi * 300 * 300 * (1 + 0.2*0.2/2)
	if d := math.Abs(s.Table().Area()/want - 1); d > 0.02 {
		t.Errorf("the area differs by %.3f of itself from that of the stroke", d)
	}
}

func TestLaunches(t *testing.T) {
	s := opened(t, 1)
	if err := ClearLaunches(s); err != nil {
		t.Fatal(err)
	}
	launches := func() []table.Launch { return s.Table().Design().Study.Launches }
	r := NewRays(s)
	r.Press(r2.Vec{X: 10, Y: 5}, 3)
	r.Drag(r2.Vec{X: 20, Y: 15}, 0)
	r.Release()
	if l := launches(); len(l) != 1 || l[0].From != table.Inside || math.Abs(l[0].Angle-math.Pi/4) > 1e-12 {
		t.Fatalf("launched %+v", l)
	}
	// On the straight bottom side, which runs along +x at y = -120: p = sin of
	// the angle from the normal.
	r.Press(r2.Vec{X: 0, Y: -119}, 3)
	r.Drag(r2.Vec{X: 30, Y: -80}, 0)
	r.Release()
	l := launches()
	if len(l) != 2 || l[1].From != table.OnWall || math.Abs(l[1].P-0.6) > 1e-9 {
		t.Fatalf("launched %+v", l)
	}
	r.Press(r2.Vec{X: 9999, Y: 0}, 3)
	r.Release()
	if len(launches()) != 2 {
		t.Error("a press outside the table launched")
	}
	p := NewPortrait(s)
	p.Press(0.3, 0.2)
	p.Drag(0.4, 0.5, 0)
	p.Release()
	if l := launches(); len(l) != 3 || l[2].Pattern != table.Sweep {
		t.Errorf("a pull in the portrait launched %+v", l)
	}
	s.Undo()
	s.Undo()
	s.Undo()
	if len(launches()) != 0 {
		t.Errorf("three undos leave %d launches", len(launches()))
	}
}

// TestRandomHands: whatever the pointer does, the table stays a table, nothing
// panics, and undo to the beginning brings back the first file byte for byte.
func TestRandomHands(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := opened(t, rapid.IntRange(0, len(assets.Gallery())-1).Draw(t, "table"))
		first := file(t, s)
		box := s.Table().Bounds()
		point := func(name string) r2.Vec {
			return r2.Vec{
				X: box.Min.X + (box.Max.X-box.Min.X)*rapid.Float64Range(-0.2, 1.2).Draw(t, name+"x"),
				Y: box.Min.Y + (box.Max.Y-box.Min.Y)*rapid.Float64Range(-0.2, 1.2).Draw(t, name+"y"),
			}
		}
		reach := 0.02 * (box.Max.X - box.Min.X)
		e, r, p := NewEditor(s), NewRays(s), NewPortrait(s)
		for range rapid.IntRange(1, 12).Draw(t, "gestures") {
			keys := Keys(rapid.IntRange(0, 3).Draw(t, "keys"))
			switch rapid.IntRange(0, 11).Draw(t, "gesture") {
			case 0, 1:
				from := point("from")
				if h := s.Handles(); len(h) > 0 {
					from = h[rapid.IntRange(0, len(h)-1).Draw(t, "handle")].At
				}
				e.Press(from, reach, keys)
				e.Drag(point("a"), reach, keys)
				e.Drag(point("b"), reach, keys)
				_ = e.Release()
			case 2:
				e.Double(point("d"), reach)
			case 3:
				_ = e.Delete()
			case 4:
				s.Settings.Tool = session.ToolName(rapid.IntRange(0, int(session.Measure)).Draw(t, "tool"))
				e.Next = shape.SpanKind(rapid.IntRange(0, 3).Draw(t, "next"))
			case 5:
				r.Press(point("r"), reach)
				r.Drag(point("s"), keys)
				r.Release()
			case 6:
				p.Press(rapid.Float64Range(-0.1, 1.1).Draw(t, "s"), rapid.Float64Range(-1.1, 1.1).Draw(t, "p"))
				p.Drag(rapid.Float64Range(-0.1, 1.1).Draw(t, "s2"), rapid.Float64Range(-1.1, 1.1).Draw(t, "p2"), keys)
				p.Release()
			case 7:
				e.Cancel()
			case 8:
				_ = SeedEvenly(s)
			case 9:
				_ = e.Align(Line(rapid.IntRange(0, int(SpreadY)).Draw(t, "line")))
			case 10:
				_ = e.Duplicate()
			case 11:
				_ = e.Copy()
				e.Hover(point("o"))
				_ = e.Paste()
			}
			_, _ = e.Draft()
			_ = e.Hint(point("h"), reach)
		}
		e.Cancel()
		for {
			undo, _ := s.Steps()
			if undo == "" {
				break
			}
			s.Undo()
		}
		if file(t, s) != first {
			t.Fatal("undo to the beginning does not bring back the first file")
		}
	})
}

// A grip of a shape goes in fine round steps of its number where nodes go to
// the grid: a coarse grid does not keep a hand from a value.
func TestGripsGoFinely(t *testing.T) {
	s := opened(t, 0)
	s.Settings.Snap = session.SnapOn
	e := NewEditor(s)
	all := s.Handles()
	grip := all[len(all)-1]
	eps := func() float64 { return s.Table().Design().Items[0].Shape.(shape.Figure).Values()[1] }
	const grid = 0.5 // as in the window: a tenth of eps
	hint := e.Hint(grip.At, 0.1)
	e.Press(grip.At, 0.1, 0)
	seen := map[float64]bool{}
	for i := range 50 {
		x := grip.At.X + 0.01*float64(i)
		e.Drag(r2.Vec{X: x, Y: grip.At.Y}, grid, 0)
		seen[eps()] = true
		if d := math.Abs(eps() - (0.16 + 0.01*float64(i)/5)); d > 1e-3 {
			t.Fatalf("eps is %g, %g from where the hand is", eps(), d)
		}
		if m := eps() * 1e4; math.Abs(m-math.Round(m)) > 1e-9 {
			t.Errorf("eps is %v, no round value", eps())
		}
	}
	if len(seen) < 45 {
		t.Errorf("a pull by 50 places gave %d values", len(seen))
	}
	e.Drag(r2.Vec{X: grip.At.X, Y: grip.At.Y}, grid, 0)
	if eps() != 0.16 {
		t.Errorf("back where it began eps is %v", eps())
	}
	e.Drag(r2.Vec{X: grip.At.X + 0.0123, Y: grip.At.Y}, grid, Free)
	if d := math.Abs(eps() - 0.16 - 0.0123/5); d > 1e-12 {
		t.Errorf("with Ctrl eps is %v, %g off", eps(), d)
	}
	_ = e.Release()
	if want := "Drag to change eps. Shift holds the direction, Ctrl takes any value."; hint != want {
		t.Errorf("the hint says %q", hint)
	}
}
