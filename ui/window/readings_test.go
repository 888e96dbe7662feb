package window

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"cavitywright/render/export"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure/chaos"
	"cavitywright/sim/run/trial"
	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/table/wall"
	"cavitywright/ui/session"

	"fyne.io/fyne/v2"
)

// sheeted is a window on a table of one shape with the sheet of readings open.
func sheeted(t *testing.T, name string, values ...float64) (*Window, *readingsSheet, func(what string, ready func() bool)) {
	t.Helper()
	w, pump := opened(t, 0, fyne.NewSize(1280, 800))
	f, err := shape.New(name, values)
	if err != nil {
		t.Fatal(err)
	}
	tab, err := table.New(table.Design{Name: "Larkmoor plate", Unit: table.Millimetre, Items: []table.Item{{Shape: f, Place: plane.Identity()}}})
	if err != nil {
		t.Fatal(err)
	}
	w.session.Open(tab, "")
	w.drawer.named("Readings")
	s := w.drawer.sheets[w.drawer.open].(*readingsSheet)
	return w, s, func(what string, ready func() bool) {
		t.Helper()
		for end := time.Now().Add(90 * time.Second); time.Now().Before(end); {
			if pump(); ready() {
				return
			}
		}
		t.Fatalf("%s: waited in vain; the sheet says %q", what, s.state.full)
	}
}

// TestReadingsWhole: all numbers come with the verdict above them and their
// figures below; the exponent per second follows the speed without measuring
// again; and what stands can be written.
func TestReadingsWhole(t *testing.T) {
	_, s, wait := sheeted(t, "stadium", 1, 1)
	s.effort.Selected = "0.02"
	s.measure()
	wait("all numbers", func() bool { return s.state.full == "All measured." })
	if !strings.HasPrefix(s.verdict.Text, "One chaotic sea covers") {
		t.Errorf("the verdict is %q", s.verdict.Text)
	}
	if s.islands.box.Visible() {
		t.Errorf("a stadium has the islands %+v", s.islands.list.rows)
	}
	for _, f := range s.figures {
		if f.full == nil || !f.box.Visible() {
			t.Error("a figure is missing")
		}
	}
	n := len(s.rows)
	last := func() string { return s.list.rows[len(s.list.rows)-1].Name }
	s.speed.SetText("light")
	if len(s.rows) != n+1 || last() != perSecond || !strings.Contains(s.list.rows[n].Value, "1/s") {
		t.Errorf("with a speed the rows are %+v", s.list.rows)
	}
	s.speed.SetText("nonsense")
	if len(s.rows) != n || last() == perSecond {
		t.Errorf("without a speed the rows are %+v", s.list.rows)
	}
	path := filepath.Join(t.TempDir(), "r.csv")
	if err := writeFigure(path, s.work.on, figure.Scalars{Rows: s.rows}, 175); err != nil {
		t.Fatal(err)
	}
	if err := writeFigure(strings.Replace(path, "csv", "png", 1), s.work.on, *s.figures[0].full, 85); err != nil {
		t.Fatal(err)
	}
	text, err := os.ReadFile(path)
	if err != nil || !strings.Contains(string(text), "lyapunov-per-length,") {
		t.Errorf("the file is %q, %v", text, err)
	}
}

// TestReadingsNeverStale: whatever comes between, a launch, a refused edit, an
// edit, a stop or another table, no number stands beside a wall that it was not
// measured on, and nothing hangs.
func TestReadingsNeverStale(t *testing.T) {
	w, s, wait := sheeted(t, "limacon", 1, 0.3)
	some := func() bool { return len(s.rows) >= 2 }
	s.measure()
	wait("the first numbers", some)
	if err := w.session.Do(edit.Launch{New: []table.Launch{{S: 0.1, P: 0.2}}}); err != nil {
		t.Fatal(err)
	}
	if !some() || !s.work.Busy() {
		t.Error("a launch threw the numbers away")
	}
	// A refused edit leaves the wall, its numbers and the work.
	if err := w.session.Do(edit.SetValue{Item: 0, Param: 0, Value: -1}); err == nil {
		t.Fatal("a radius of -1 is taken")
	}
	if !some() || !s.work.Busy() {
		t.Error("a refused edit threw the numbers away")
	}
	old := s.rows[0].Value
	if err := w.session.Do(edit.SetValue{Item: 0, Param: 0, Value: 2}); err != nil {
		t.Fatal(err)
	}
	if len(s.rows) != 0 || len(s.list.rows) != 0 || s.verdict.Text != "" || s.work.Busy() || s.run.Disabled() {
		t.Errorf("beside the new wall stand %d old numbers and %q", len(s.list.rows), s.verdict.Text)
	}
	s.measure()
	wait("the numbers of the new wall", some)
	if v := s.rows[0].Value; v == old || v != w.session.Table().Length() {
		t.Errorf("the perimeter is %g, want %g", v, w.session.Table().Length())
	}
	// With the sheet shut the wall changes, and the sheet is opened again.
	w.drawer.show(-1)
	w.session.Undo()
	w.drawer.named("Readings")
	if len(s.list.rows) != 0 {
		t.Error("the sheet opened again shows numbers of another wall")
	}
	// Stopped: what was measured stands, and nothing more comes.
	s.measure()
	wait("the first numbers", some)
	s.work.Stop()
	wait("the stop", func() bool { return !s.work.Busy() })
	n := len(s.rows)
	wait("a while", func() bool { return true })
	if len(s.rows) != n || !strings.HasPrefix(s.state.full, "Stopped") || s.write.Disabled() {
		t.Errorf("after the stop: %d numbers, then %d; %q", n, len(s.rows), s.state.full)
	}
}

// TestLaunchedOrbits: each launch is told at once, with the wall it flies on,
// and anew when that changes.
func TestLaunchedOrbits(t *testing.T) {
	w, s, wait := sheeted(t, "limacon", 1, 0.3)
	l := s.orbits
	wait("no orbits", func() bool { return strings.HasPrefix(l.words.Text, "No orbit") })
	if err := w.session.Do(edit.Launch{New: []table.Launch{{S: 0, P: 0.01}, {S: 0.25, P: 0.3}}}); err != nil {
		t.Fatal(err)
	}
	wait("two orbits", func() bool { return len(l.list.rows) == 2 })
	if a, b := l.list.rows[0].Value, l.list.rows[1].Value; !strings.HasPrefix(a, "regular, rotation 0.5") || !strings.HasPrefix(b, "chaotic") {
		t.Errorf("the orbits are %q and %q", a, b)
	}
	if err := w.session.Do(edit.SetValue{Item: 0, Param: 1, Value: 1}); err != nil {
		t.Fatal(err)
	}
	if len(l.list.rows) != 0 {
		t.Error("orbits of another wall are told")
	}
	wait("the orbits of the cardioid", func() bool { return len(l.list.rows) == 2 })
	if a := l.list.rows[0].Value; !strings.HasPrefix(a, "chaotic") {
		t.Errorf("on a cardioid the orbit is %q", a)
	}
	coat := table.Coat{Side: table.AllSides, To: 1, Law: wall.Rough{Share: 0.5}}
	if err := w.session.Do(edit.SetCoats{Coats: []table.Coat{coat}}); err != nil {
		t.Fatal(err)
	}
	wait("the reason", func() bool { return strings.HasPrefix(l.words.Text, "Orbits are not told apart here") })
	if len(l.list.rows) != 0 || chaos.Mirrors(w.session.Table()) == "" {
		t.Error("orbits are told on a rough wall")
	}
}

// TestLayerChoice: the list in the portrait's header and the key choose the map.
func TestLayerChoice(t *testing.T) {
	w, _, wait := sheeted(t, "stadium", 1, 1)
	if w.session.Settings.Layer != session.NoLayer || w.ExportMap("x.png", 4, 3, export.Options{}) == nil {
		t.Fatal("a map is there from the start")
	}
	w.layers.SetSelected("Stretching")
	if w.session.Settings.Layer != session.Stretching {
		t.Errorf("the layer is %v", w.session.Settings.Layer)
	}
	path := filepath.Join(t.TempDir(), "map.csv")
	if err := w.ExportMap(path, 40, 30, export.Options{}); err != nil {
		t.Fatal(err)
	}
	wait("the map's file", func() bool { return w.task == nil })
	if text, err := os.ReadFile(path); err != nil || strings.Count(string(text), "\n") < 40*30 {
		t.Errorf("the map's file has %d bytes, %v", len(text), err)
	}
	for range w.layers.Options {
		w.loose(fyne.KeyM)
	}
	if w.session.Settings.Layer != session.Stretching {
		t.Errorf("once around the list the layer is %v", w.session.Settings.Layer)
	}
}

// TestIslandList: the largest islands are listed with their place, and none
// where there is none.
func TestIslandList(t *testing.T) {
	_, s, _ := sheeted(t, "limacon", 1, 0.3)
	tr := trial.Traced(t, "limacon", []float64{1, 0.3})
	survey, err := chaos.NewSurvey(tr, trial.Runner(tr, 1, 0), 50, 50, 300)
	if err != nil {
		t.Fatal(err)
	}
	s.islands.show(survey)
	rows := s.islands.list.rows
	if !s.islands.box.Visible() || len(rows) < 4 || len(rows) > mostIslands || !strings.Contains(rows[0].Value, "a band around") {
		t.Errorf("the islands are %+v", rows)
	}
	s.clear()
	if s.islands.box.Visible() || len(s.islands.list.rows) != 0 {
		t.Error("the islands stay")
	}
}
