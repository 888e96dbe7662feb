package window

import (
	"strings"
	"testing"

	"cavitywright/sim/figure"
	"cavitywright/table/edit"
	"cavitywright/table/shape"
)

// TestWishByHand does what a person does: from a limaçon at 0.30 a better window
// share is sought, seen, and put on the table in one step that undo takes back.
func TestWishByHand(t *testing.T) {
	w, any, wait := glassy(t, 0.30, "Wish")
	s := any.(*wishSheet)
	f := s.form
	if f.goals.rows[0].read.Selected != "window-share" || len(f.rows) != 1 || f.rows[0].which.Selected != "eps" || f.rows[0].from.Text != "0.12" || f.rows[0].to.Text != "0.48" {
		t.Fatalf("offered: %q, %d rows", f.goals.rows[0].read.Selected, len(f.rows))
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
	if s.found == nil || !s.wall.box.Visible() {
		t.Error("what was found is gone with the wall that was taken")
	}
	if len(w.session.Table().Design().Study.Wishes) != 1 {
		t.Error("the study does not keep the wish")
	}
	w.session.Undo()
	if eps() != 0.30 || s.found == nil {
		t.Errorf("undo brings eps %g", eps())
	}
	if err := w.session.Do(edit.SetValue{Item: 0, Param: 1, Value: 0.2}); err != nil {
		t.Fatal(err)
	}
	if s.found != nil || s.wall.full != nil {
		t.Error("what was found from another wall is shown")
	}
}

// TestWishFront: two wishes make a front, of which a wall is picked by a press.
func TestWishFront(t *testing.T) {
	_, any, wait := glassy(t, 0.30, "Wish")
	s := any.(*wishSheet)
	f := s.form
	f.goals.rows[0].read.SetSelected("area")
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

// TestWishGoals: several goals with weights are one wish, whose weighted sum
// counts: of an area wished great and a perimeter wished small the heavier wins.
func TestWishGoals(t *testing.T) {
	w, any, wait := glassy(t, 0.30, "Wish")
	s := any.(*wishSheet)
	f := s.form
	first := f.goals.rows[0]
	if first.weighed.Visible() || first.out.Visible() {
		t.Error("a single goal asks for a weight")
	}
	first.read.SetSelected("area")
	second := f.goals.add()
	if second.read.Selected != "window-share" || !first.weighed.Visible() || !second.out.Visible() {
		t.Errorf("the second goal is %q", second.read.Selected)
	}
	second.aim.SetSelected("at the value")
	f.more.Show()
	if wide := f.box.MinSize().Width; wide > 380 {
		t.Errorf("the form is %g wide", wide)
	}
	second.aim.SetSelected("the greatest")
	second.read.SetSelected("area")
	s.run.OnTapped()
	if !strings.Contains(s.state.full, "twice") || s.work.Busy() {
		t.Errorf("a goal that stands twice is taken: %q", s.state.full)
	}
	second.read.SetSelected("perimeter")
	second.aim.SetSelected("the least")
	second.weight.SetText("no number")
	s.run.OnTapped()
	if !strings.Contains(s.state.full, "weight") || s.work.Busy() {
		t.Errorf("a bad weight is taken: %q", s.state.full)
	}
	f.tries.SetText("24")
	ends := map[string]float64{}
	for _, weight := range []string{"0.01", "100"} {
		second.weight.SetText(weight)
		s.run.OnTapped()
		wait("the search", s.state, func() bool { return strings.HasPrefix(s.state.full, "Found after") })
		ends[weight] = s.found.Best.At[0]
	}
	// Both grow with eps, the area at this size by far the more.
	if ends["0.01"] < 0.47 || ends["100"] > 0.13 {
		t.Errorf("found at %v", ends)
	}
	kept := w.session.Table().Design().Study.Wishes
	if g := kept[len(kept)-1].Goals; len(g) != 2 || g[0].Weight != 1 || g[1].Weight != 100 || g[1].Reading != "perimeter" {
		t.Errorf("the study keeps %+v", g)
	}
	f.goals.drop(first)
	if len(f.goals.rows) != 1 || second.weighed.Visible() || second.out.Visible() {
		t.Error("the goal that is left still asks for a weight")
	}
}
