package window

import (
	"bytes"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"time"

	"cavitywright/sim/figure"
	"cavitywright/sim/study/part"
	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/table/tablefile"

	"fyne.io/fyne/v2"
)

// studied is a window on a table of one shape with the sheet of studies open.
func studied(t *testing.T, name string, values ...float64) (*Window, *studiesSheet, func(what string, ready func() bool)) {
	t.Helper()
	w, pump := opened(t, 0, fyne.NewSize(1280, 800))
	f, err := shape.New(name, values)
	if err != nil {
		t.Fatal(err)
	}
	tab, err := table.New(table.Design{Name: "Larkmoor plate", Unit: table.Millimetre, Study: table.DefaultStudy(), Items: []table.Item{{Shape: f, Place: plane.Identity()}}})
	if err != nil {
		t.Fatal(err)
	}
	w.session.Open(tab, "")
	w.drawer.named("Studies")
	s := w.drawer.sheets[w.drawer.open].(*studiesSheet)
	return w, s, func(what string, ready func() bool) {
		t.Helper()
		for end := time.Now().Add(60 * time.Second); time.Now().Before(end); {
			if pump(); ready() {
				return
			}
		}
		t.Fatalf("%s: waited in vain; the sheet says %q", what, s.state.full)
	}
}

// only ticks just these readings.
func (f *studyForm) only(names ...string) {
	for name, c := range f.ticks {
		c.SetChecked(slices.Contains(names, name))
	}
}

// finished reports whether all of the study is done.
func (s *studiesSheet) finished() bool { return s.result.Whole() && !s.work.Busy() }

func eps(w *Window) float64 {
	return w.session.Table().Design().Items[0].Shape.(shape.Figure).Values()[1]
}

// TestStudyByHand does what a person does: the form comes filled in for the
// wall, a run brings curves, a press on a point puts its wall on the table in one
// step that undo takes back, and the result is written.
func TestStudyByHand(t *testing.T) {
	w, s, wait := studied(t, "limacon", 1, 0.4)
	f := s.form
	if f.turns[0].which.Selected != "eps" || f.turns[0].from.Text != "0.28" || f.turns[0].to.Text != "0.52" || f.turns[1].box.Visible() || len(f.readings()) != 1 {
		t.Fatalf("offered: %q from %q to %q, readings %v", f.turns[0].which.Selected, f.turns[0].from.Text, f.turns[0].to.Text, f.readings())
	}
	f.only("area", "perimeter")
	f.turns[0].from.SetText("0.2")
	f.turns[0].to.SetText("0.6")
	f.turns[0].points.SetText("5")
	f.births.SetSelected("to 2 bounces")
	s.run.OnTapped()
	wait("the study", s.finished)
	if len(s.plates) != 2 || !s.body.Visible() || s.goOn.Visible() || s.stop.Visible() {
		t.Fatalf("%d figures", len(s.plates))
	}
	drawn := s.plates[1].full.(figure.Series)
	// A = pi (1 + eps^2/2).
	if c := drawn.Curves[0]; len(c.X) != 5 || math.Abs(c.Y[2]-math.Pi*1.08) > 1e-9 {
		t.Errorf("the curve is %+v", c)
	}
	// The axis orbit of the limaçon is elliptic up to sqrt 2 - 1, and the wall
	// convex up to 1/2 (both closed form).
	marked := map[string]bool{}
	for _, m := range s.result.Marks() {
		marked["axis"] = marked["axis"] || math.Abs(m.At-(math.Sqrt2-1)) < 1e-5
		marked["convex"] = marked["convex"] || math.Abs(m.At-0.5) < 1e-6 && m.Short == "convex"
	}
	if !marked["axis"] || !marked["convex"] {
		t.Errorf("the marks are %+v", s.result.Marks())
	}
	if n := len(w.session.Table().Design().Study.Sweeps); n != 1 {
		t.Errorf("the study holds %d sweeps", n)
	}

	s.plates[1].pane.Picked(0.31, math.Pi*1.05)
	if v := eps(w); math.Abs(v-0.3) > 1e-12 {
		t.Fatalf("on the table is eps = %v", v)
	}
	if c := s.plates[1].full.(figure.Series).Curves; c[len(c)-1].Name != "on the table" || c[len(c)-1].X[0] != 0.3 {
		t.Errorf("the point on the table is drawn as %+v", c[len(c)-1])
	}
	if !s.body.Visible() || s.picked != 1 || !strings.HasPrefix(s.point.Text, "At eps = 0.3") || len(s.list.rows) != 2 {
		t.Errorf("the sheet tells point %d: %q, %v", s.picked, s.point.Text, s.list.rows)
	}
	s.plates[0].pane.Picked(0.59, 7)
	if v := eps(w); math.Abs(v-0.6) > 1e-12 {
		t.Errorf("on the table is eps = %v", v)
	}
	w.session.Undo()
	w.session.Undo()
	if v := eps(w); v != 0.4 || !s.body.Visible() || s.picked != 2 {
		t.Errorf("after two undos eps = %v", v)
	}

	// Another wall: what was found is put away, and comes back.
	if err := w.session.Do(edit.SetValue{Item: 0, Param: 0, Value: 2}); err != nil {
		t.Fatal(err)
	}
	if s.body.Visible() || s.words.Visible() || !strings.Contains(s.state.full, "another wall") {
		t.Errorf("beside another wall the sheet says %q", s.state.full)
	}
	s.plates[0].pane.Picked(0.31, 3)
	if v := eps(w); v != 0.4 {
		t.Error("a press beside another wall changed it")
	}
	w.session.Undo()
	if !s.body.Visible() {
		t.Error("an undo does not bring the study back")
	}
	if err := w.session.Do(edit.SetValue{Item: 0, Param: 1, Value: 0.45}); err != nil {
		t.Fatal(err)
	}
	if !s.body.Visible() || s.picked >= 0 {
		t.Error("a wall between two points is not taken for one of the sweep")
	}
	for _, ending := range []string{"csv", "json", "jsonl", "svg"} {
		if err := s.writeTo(filepath.Join(t.TempDir(), "study."+ending)); err != nil {
			t.Errorf("%s: %v", ending, err)
		}
	}
}

// TestStudyStopped: a study that is stopped keeps what it has, goes on from
// there, and comes to what one run brings, to the byte.
func TestStudyStopped(t *testing.T) {
	w, s, wait := studied(t, "limacon", 1, 0.4)
	s.form.only("mean-chord")
	s.form.turns[0].points.SetText("9")
	s.form.effort.Selected = "0.1"
	s.run.OnTapped()
	wait("some rows", func() bool { return len(s.result.Rows) >= 2 })
	s.stop.OnTapped()
	wait("the stop", func() bool { return !s.work.Busy() })
	n := len(s.result.Rows)
	if s.result.Whole() {
		t.Skip("it was done before it was stopped")
	}
	if !s.goOn.Visible() || !strings.HasPrefix(s.state.full, "Stopped after") {
		t.Errorf("stopped after %d rows it says %q", n, s.state.full)
	}
	half := filepath.Join(t.TempDir(), "half.jsonl")
	if err := s.writeTo(half); err != nil {
		t.Fatal(err)
	}
	b, err := os.ReadFile(half)
	if err != nil {
		t.Fatal(err)
	}
	if f, err := part.Read(b); err != nil || len(f.Rows) != n || f.Damage != nil {
		t.Errorf("what was written has %d rows of %d, %v", len(f.Rows), n, err)
	}
	s.goOn.OnTapped()
	wait("the end", s.finished)
	first, err := part.Written(s.result, program)
	if err != nil {
		t.Fatal(err)
	}
	// Run again, all of it stands in the record; without that, it is done anew.
	s.run.OnTapped()
	wait("what stands", s.finished)
	kept, err := part.Written(s.result, program)
	if err != nil {
		t.Fatal(err)
	}
	records, err := filepath.Glob(filepath.Join(w.recordsFolder(), "*.jsonl"))
	if err != nil || len(records) != 1 {
		t.Fatalf("%d records, %v", len(records), err)
	}
	whole, err := os.ReadFile(records[0])
	if err != nil || !bytes.Equal(kept, first) {
		t.Errorf("what stands is another result, %v", err)
	}
	// As after a crash: half of the record, another wall of the sweep on the
	// table, and a launch more.
	if err := os.WriteFile(records[0], whole[:len(whole)*2/3], 0o600); err != nil {
		t.Fatal(err)
	}
	s.plates[0].pane.Picked(0.3, 1.5)
	if err := w.session.Do(edit.Launch{New: []table.Launch{{S: 0.1, P: 0.2}}}); err != nil {
		t.Fatal(err)
	}
	s.run.OnTapped()
	wait("the second run", s.finished)
	if b, err := os.ReadFile(records[0]); err != nil || !bytes.Equal(b, whole) {
		t.Errorf("the record that was gone on with is another file, %v", err)
	}
	if err := os.Remove(records[0]); err != nil {
		t.Fatal(err)
	}
	w.session.Undo()
	w.session.Undo()
	s.run.OnTapped()
	wait("the third run", s.finished)
	second, err := part.Written(s.result, program)
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(first, second) {
		t.Error("a run that was stopped comes to another result")
	}
}

// TestStudyMap: two numbers make a map, whose cells are picked; a sweep that the
// file keeps is offered, and what the form cannot be is said.
func TestStudyMap(t *testing.T) {
	w, s, wait := studied(t, "limacon", 1, 0.4)
	f := s.form
	f.only("area")
	f.turns[0].points.SetText("4")
	f.turns[1].which.SetSelected("radius")
	f.turns[1].from.SetText("1 mm")
	f.turns[1].to.SetText("0.2 cm")
	f.turns[1].points.SetText("9")
	s.run.OnTapped()
	wait("the map", s.finished)
	if g, is := s.plates[0].full.(figure.Grid); !is || g.Columns != 4 || g.Rows != 9 {
		t.Fatalf("the figure is %T", s.plates[0].full)
	}
	s.plates[0].pane.Picked(0.29, 1.49)
	if v := w.session.Table().Design().Items[0].Shape.(shape.Figure).Values(); math.Abs(v[0]-1.5) > 1e-12 || math.Abs(v[1]-0.28) > 1e-12 {
		t.Errorf("on the table is %v", v)
	}
	// The file that is saved now carries the sweep.
	var file bytes.Buffer
	if err := tablefile.Write(&file, w.session.Table().Design()); err != nil || !strings.Contains(file.String(), `"sweeps"`) {
		t.Errorf("%v in\n%s", err, file.String())
	}
	name := "eps and radius"
	if !slices.Contains(f.kept.Options, name) {
		t.Fatalf("kept: %v", f.kept.Options)
	}
	f.turns[1].which.SetSelected(nothingMore)
	f.kept.SetSelected(name)
	if got, err := f.sweep(); err != nil || len(got.Turns) != 2 || got.Turns[1].Points != 9 {
		t.Errorf("the kept sweep is %+v, %v", got, err)
	}
	f.turns[0].points.SetText("3")
	if f.ready != nil || f.kept.Selected != "" {
		t.Error("a form that is touched still stands for the kept sweep")
	}
	for _, c := range []struct {
		says string
		do   func()
	}{
		{"The range is empty", func() { f.turns[0].to.SetText(f.turns[0].from.Text) }},
		{"is not a number", func() { f.turns[0].to.SetText("wide") }},
		{"write a whole number", func() { f.turns[0].to.SetText("0.5"); f.turns[0].points.SetText("1") }},
		{"tick what is to be read", func() { f.turns[0].points.SetText("5"); f.only() }},
		{"twice", func() { f.only("area"); f.turns[1].which.SetSelected("eps") }},
	} {
		c.do()
		s.run.OnTapped()
		if !strings.Contains(strings.ToLower(s.state.full), strings.ToLower(c.says)) {
			t.Errorf("says %q, want %q", s.state.full, c.says)
		}
		if s.work.Busy() {
			t.Errorf("%s: it runs", c.says)
		}
	}
}
