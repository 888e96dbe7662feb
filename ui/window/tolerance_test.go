package window

import (
	"strings"
	"testing"
	"time"

	"cavitywright/sim/figure"
	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/table/wall"

	"fyne.io/fyne/v2"
)

// opened by a name in the drawer, on a body of glass that shines; wait pumps the
// window until what is waited for is there.
func glassy(t *testing.T, eps float64, name string) (w *Window, s sheet, wait func(what string, state *caption, ready func() bool)) {
	t.Helper()
	w, pump := opened(t, 0, fyne.NewSize(1280, 800))
	f, err := shape.New("limacon", []float64{5, eps})
	if err != nil {
		t.Fatal(err)
	}
	var law wall.Law
	for _, k := range wall.Kinds() {
		if k.Name == "dielectric" {
			v := make([]float64, len(k.Specs))
			for i, p := range k.Specs {
				v[i] = p.Default
				if p.Name == "index" {
					v[i] = 3.3
				}
			}
			if law, err = wall.Make(k.Name, v); err != nil {
				t.Fatal(err)
			}
		}
	}
	tab, err := table.New(table.Design{Name: "Larkmoor disc", Unit: table.Micrometre, Bare: law, Study: table.DefaultStudy(), Items: []table.Item{{Shape: f, Place: plane.Identity()}}})
	if err != nil {
		t.Fatal(err)
	}
	w.session.Open(tab, "")
	w.drawer.named(name)
	return w, w.drawer.sheets[w.drawer.open], func(what string, state *caption, ready func() bool) {
		t.Helper()
		for end := time.Now().Add(60 * time.Second); time.Now().Before(end); {
			if pump(); ready() {
				return
			}
		}
		t.Fatalf("%s: waited in vain; the sheet says %q", what, state.full)
	}
}

// TestToleranceByHand does what a person does: the form comes filled in, copies
// are made and shown, the plan is kept in the study, and an edit of the wall takes
// all away.
func TestToleranceByHand(t *testing.T) {
	w, any, wait := glassy(t, 0.43, "Tolerance")
	s := any.(*toleranceSheet)
	f := s.form
	if len(f.rows) != 2 || f.rows[0].which.Selected != "size" || f.rows[1].which.Selected != "roughness" || f.read.Selected != "window-share" {
		t.Fatalf("offered: %d rows, %q", len(f.rows), f.read.Selected)
	}
	f.copies.SetText("6")
	f.effort.SetSelected("0.03")
	f.least.SetText("0.7")
	f.add().which.SetSelected("eps")
	f.rows[2].width.SetText("no number")
	s.run.OnTapped()
	if !strings.Contains(s.state.full, "Eps") || s.work.Busy() {
		t.Fatalf("a bad number is taken: %q", s.state.full)
	}
	f.drop(f.rows[2])
	s.run.OnTapped()
	if !s.work.Busy() || s.run.Visible() || !s.stop.Visible() {
		t.Fatalf("it does not work: %q", s.state.full)
	}
	wait("the copies", s.state, func() bool { return strings.HasPrefix(s.state.full, "All done: 6") })
	if _, is := s.plate.full.(figure.Series); !is || !s.worst.box.Visible() {
		t.Error("the distribution or the worst copies are not shown")
	}
	values := map[string]string{}
	for _, row := range s.list.rows {
		values[row.Name] = row.Value
	}
	if values["By size"] != "0 % (exact)" || !strings.Contains(values["By roughness"], "±") || !strings.Contains(values["Yield"], "%") {
		t.Errorf("the list says %v", values)
	}
	if !strings.Contains(s.words.Text, "Size cannot matter to window-share") {
		t.Errorf("the words are %q", s.words.Text)
	}
	if kept := w.session.Table().Design().Study.Tolerances; len(kept) != 1 || kept[0].Name != "size, roughness" || kept[0].Copies != 6 {
		t.Errorf("the study keeps %+v", kept)
	}
	if err := w.session.Do(edit.SetValue{Item: 0, Param: 1, Value: 0.3}); err != nil {
		t.Fatal(err)
	}
	if s.result != nil || s.plate.full != nil || len(s.list.rows) != 0 {
		t.Error("copies of another wall are shown")
	}
}

// TestToleranceStops: copies are stopped by hand, and what was measured stands.
func TestToleranceStops(t *testing.T) {
	_, any, wait := glassy(t, 0.43, "Tolerance")
	s := any.(*toleranceSheet)
	s.form.copies.SetText("20000")
	s.form.effort.SetSelected("0.03")
	s.run.OnTapped()
	wait("some copies", s.state, func() bool { return s.result != nil && len(s.result.Rows) > 1 })
	s.stop.OnTapped()
	wait("the stop", s.state, func() bool { return strings.HasPrefix(s.state.full, "Stopped") })
	if len(s.list.rows) == 0 || !s.run.Visible() {
		t.Error("what was measured is gone")
	}
}
