package window

import (
	"strings"
	"testing"

	"cavitywright/sim/figure"
	"cavitywright/table/shape"
)

// TestWishByHand does what a person does: from a limaçon at 0.30 a better window
// share is sought, seen, and put on the table in one step that undo takes back.
func TestWishByHand(t *testing.T) {
	w, any, wait := glassy(t, 0.30, "Wish")
	s := any.(*wishSheet)
	f := s.form
	if f.goal.read.Selected != "window-share" || len(f.rows) != 1 || f.rows[0].which.Selected != "eps" || f.rows[0].from.Text != "0.12" || f.rows[0].to.Text != "0.48" {
		t.Fatalf("offered: %q, %d rows", f.goal.read.Selected, len(f.rows))
	}
	f.tries.SetText("8")
	f.effort.SetSelected("0.03")
	f.bend.SetSelected("convex")
	s.run.OnTapped()
	wait("the search", s.state, func() bool { return strings.HasPrefix(s.state.full, "Found after") })
	if _, is := s.portrait.full.(figure.Dots); !is || !s.wall.box.Visible() || s.put.Disabled() {
		t.Fatal("the best wall is not shown with its portrait")
	}
	drawn, best := s.found.Drawn.Terms[0].Value, s.found.Best.Terms[0].Value
	if best <= drawn || !strings.Contains(s.words.Text, "Best: window-share") {
		t.Errorf("from %g to %g; %q", drawn, best, s.words.Text)
	}
	at := s.found.Best.At[0]
	s.put.OnTapped()
	eps := func() float64 { return w.session.Table().Design().Items[0].Shape.(shape.Figure).Values()[1] }
	if eps() != at {
		t.Errorf("eps is %g, not %g", eps(), at)
	}
	if len(w.session.Table().Design().Study.Wishes) != 1 {
		t.Error("the study does not keep the wish")
	}
	w.session.Undo()
	if eps() != 0.30 {
		t.Errorf("undo brings eps %g", eps())
	}
}

// TestWishFront: two wishes make a front, of which a wall is picked by a press.
func TestWishFront(t *testing.T) {
	_, any, wait := glassy(t, 0.30, "Wish")
	s := any.(*wishSheet)
	f := s.form
	f.goal.read.SetSelected("area")
	f.against.aim.SetSelected("the least")
	f.against.read.SetSelected("perimeter")
	f.tries.SetText("20")
	s.run.OnTapped()
	wait("the front", s.state, func() bool { return strings.HasPrefix(s.state.full, "Found after") })
	if len(s.found.Front) < 2 {
		t.Fatalf("%d walls on the front", len(s.found.Front))
	}
	x, y := s.found.Heights(s.found.Front[0])
	s.course.pane.Picked(x, y)
	if s.chosen != s.found.Front[0] || !strings.HasPrefix(s.state.full, "Eps = ") {
		t.Errorf("picked another wall; %q", s.state.full)
	}
}
