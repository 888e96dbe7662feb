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
	if len(f.rows) != 2 || f.rows[0].which.Selected != "size" || f.rows[1].which.Selected != "roughness" || f.reads.rows[0].which.Selected != "window-share" {
		t.Fatalf("offered: %d rows, %q", len(f.rows), f.reads.rows[0].which.Selected)
	}
	f.copies.SetText("6")
	f.effort.SetSelected("0.03")
	f.reads.rows[0].least.SetText("0.7")
	f.add().which.SetSelected("eps")
	f.rows[2].width.SetText("no number")
	s.run.OnTapped()
	if !strings.Contains(s.state.full, `"no number"`) || s.work.Busy() {
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

// TestToleranceReadings: several readings are taken of the same copies, each with
// its own limits, and shown one after the other.
func TestToleranceReadings(t *testing.T) {
	w, any, wait := glassy(t, 0.43, "Tolerance")
	s := any.(*toleranceSheet)
	f := s.form
	if f.reads.rows[0].out.Visible() {
		t.Error("the only reading can be taken out")
	}
	second := f.reads.add()
	if second.which.Selected == f.reads.rows[0].which.Selected || !second.out.Visible() {
		t.Errorf("the second reading is %q", second.which.Selected)
	}
	if wide := f.box.MinSize().Width; wide > 380 {
		t.Errorf("the form is %g wide", wide)
	}
	f.reads.rows[0].which.SetSelected("perimeter")
	second.which.SetSelected("area")
	f.drop(f.rows[1])
	f.copies.SetText("20")
	f.reads.rows[0].most.SetText("1000")
	second.least.SetText("no number")
	s.run.OnTapped()
	if !strings.Contains(s.state.full, "Area, good from") || s.work.Busy() {
		t.Fatalf("a bad limit is taken: %q", s.state.full)
	}
	second.least.SetText("1000")
	s.run.OnTapped()
	wait("the copies", s.state, func() bool { return strings.HasPrefix(s.state.full, "All done: 20") })
	shown := func() map[string]string {
		values := map[string]string{}
		for _, row := range s.list.rows {
			values[row.Name] = row.Value
		}
		return values
	}
	label := func() string { return s.plate.full.(figure.Series).X.Label }
	if v := shown(); !s.choice.Visible() || label() != "perimeter" || !strings.HasPrefix(v["Yield"], "100 %") || !strings.HasPrefix(v["Yield, all limits"], "0 %") {
		t.Errorf("of %s: %v", label(), v)
	}
	first := s.worst.full
	s.which.SetSelected("area")
	if v := shown(); label() != "area" || !strings.HasPrefix(v["Yield"], "0 %") || !strings.Contains(v["As drawn"], "µm²") && !strings.Contains(v["As drawn"], "um²") {
		t.Errorf("of %s: %v", label(), v)
	}
	if !s.worst.box.Visible() || strings.Join(s.worst.full.(figure.Paths).Caption, "") == strings.Join(first.(figure.Paths).Caption, "") {
		t.Error("the worst copies are those of the other reading")
	}
	kept := w.session.Table().Design().Study.Tolerances
	if len(kept) != 1 || len(kept[0].Readings) != 2 || len(kept[0].Limits) != 2 {
		t.Errorf("the study keeps %+v", kept)
	}
}
