package window

import (
	"bytes"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"cavitywright/sim/orbit"
	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/widget"
)

// orbited is a window on a table of one shape with the sheet of orbits open.
func orbited(t *testing.T, name string, values ...float64) (*Window, *orbitSheet, func(what string, ready func() bool)) {
	t.Helper()
	w, pump := opened(t, 0, fyne.NewSize(1280, 800))
	w.session.Open(shaped(t, name, values...), "")
	w.drawer.named("Orbits")
	s := w.drawer.sheets[w.drawer.open].(*orbitSheet)
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

func shaped(t *testing.T, name string, values ...float64) *table.Table {
	t.Helper()
	f, err := shape.New(name, param.Values(values))
	if err != nil {
		t.Fatal(err)
	}
	tab, err := table.New(table.Design{Name: "Larkmoor disc", Unit: table.Micrometre, Items: []table.Item{{Shape: f, Place: plane.Identity()}}, Study: table.DefaultStudy()})
	if err != nil {
		t.Fatal(err)
	}
	return tab
}

// TestOrbitSheet: a search lists the orbits and marks them; a row that is chosen
// stands out, also after sorting; neighbours are launched beside it; an edit of
// the wall takes all away at once.
func TestOrbitSheet(t *testing.T) {
	w, s, wait := orbited(t, "quadrupole", 1, 0.1)
	s.upTo.SetSelectedIndex(4 - orbit.Least)
	s.search()
	wait("the list", func() bool { return s.list != nil })
	if len(s.rows) != 6 || w.orbits.Marked() != len(s.list.Orbits) {
		t.Fatalf("%d rows, %d of %d orbits marked; a quadrupole of eps = 0.1 has 6 rows", len(s.rows), w.orbits.Marked(), len(s.list.Orbits))
	}
	if !strings.Contains(s.columns[1].name, "µm") || !strings.Contains(s.words.Text, "1 turn and 2 reflections") {
		t.Errorf("column %q, words %q", s.columns[1].name, s.words.Text)
	}
	for i, c := range s.columns {
		if c.name != "multipliers" {
			continue
		}
		for _, o := range s.rows {
			if text := c.text(o, ""); o.Kind() == orbit.Elliptic != strings.HasPrefix(text, "circle") {
				t.Errorf("column %d says of an orbit that is %s: %q", i, o.Kind(), text)
			}
		}
	}
	s.table.OnSelected(widget.TableCellID{Row: 0})
	chosen := s.rows[s.chosen]
	for column := range s.columns {
		for range 2 {
			s.sortBy(column)
			if s.rows[s.chosen] != chosen {
				t.Errorf("sorted by %s another row is chosen", s.columns[column].name)
			}
		}
	}
	s.sortBy(3)
	s.sortBy(4)
	for i := 1; i < len(s.rows); i++ {
		if s.rows[i].Residue() < s.rows[i-1].Residue() {
			t.Error("the rows are not sorted by the residue")
		}
	}
	s.launchBeside()
	study := w.session.Table().Design().Study
	if n := len(study.Launches); n != 1 || study.Launches[0].Count != besideCount {
		t.Fatalf("%d launches", n)
	}
	if s.list == nil || w.orbits.Marked() == 0 {
		t.Error("a launch took the list away")
	}
	g := study.Launches[0].Region
	b := chosen.Bounces[0]
	if at := b.S / w.session.Table().Length(); math.Abs((g.S0+g.S1)/2-at) > 2*besideShare || math.Abs((g.P0+g.P1)/2-b.P) > besideShare {
		t.Errorf("launched over %+v, the orbit is at %g, %g", g, at, b.P)
	}
	d := w.session.Table().Design()
	if err := w.session.Do(edit.Reshape{Item: 0, Shape: shaped(t, "quadrupole", 1, 0.11).Design().Items[0].Shape}); err != nil {
		t.Fatal(err, d.Name)
	}
	if s.list != nil || len(s.rows) != 0 || w.orbits.Marked() != 0 || !s.launch.Disabled() || !s.write.Disabled() {
		t.Error("orbits of another wall are shown")
	}
}

// TestOrbitsMarked: of many orbits the shortest are marked, and a line says so;
// the head follows the unit of a table that is opened.
func TestOrbitsMarked(t *testing.T) {
	w, s, wait := orbited(t, "stadium", 1, 1)
	if name := s.columns[1].name; name != "length (µm)" {
		t.Errorf("before a search on a table in micrometres the column is called %q", name)
	}
	s.search()
	wait("the list", func() bool { return s.list != nil })
	if n := len(s.list.Orbits); n <= mostMarked || w.orbits.Marked() != mostMarked || !strings.Contains(s.marked.full, "The 40 shortest of") {
		t.Errorf("%d of %d orbits are marked, and the sheet says %q", w.orbits.Marked(), n, s.marked.full)
	}
}

// TestOrbitSheetStops: a search is stopped by hand and by an edit, and shows
// nothing then.
func TestOrbitSheetStops(t *testing.T) {
	w, s, wait := orbited(t, "stadium", 1, 1)
	s.upTo.SetSelectedIndex(orbit.MostBounces - orbit.Least)
	s.search()
	wait("a search under way", s.work.Busy)
	s.work.Stop()
	wait("its end", func() bool { return !s.work.Busy() })
	if s.list != nil || !strings.HasPrefix(s.state.full, "Stopped") || s.run.Disabled() {
		t.Errorf("after a stop the sheet says %q", s.state.full)
	}
	s.search()
	if err := w.session.Do(edit.Reshape{Item: 0, Shape: shaped(t, "stadium", 1.1, 1).Design().Items[0].Shape}); err != nil {
		t.Fatal(err)
	}
	if s.work.Busy() || s.run.Disabled() || !strings.HasPrefix(s.state.full, "Not searched") {
		t.Errorf("after an edit the sheet says %q", s.state.full)
	}
	s.upTo.SetSelectedIndex(0)
	s.search()
	wait("the other wall's orbits", func() bool { return s.list != nil })
	for _, o := range s.list.Orbits {
		if o.Family == nil && math.Abs(o.Length-8.4) > 1e-12 { // the long diameter, 2 (2 a + 2 r)
			t.Errorf("an orbit of length %g", o.Length)
		}
	}
	w.drawer.named("Orbits")
	if w.orbits.Marked() != 0 {
		t.Error("marks stay when the sheet is closed")
	}
}

// TestOrbitsWritten: what the window writes is what the list holds.
func TestOrbitsWritten(t *testing.T) {
	_, s, wait := orbited(t, "stadium", 1, 1)
	s.upTo.SetSelectedIndex(1)
	s.search()
	wait("the list", func() bool { return s.list != nil })
	dir := t.TempDir()
	for _, name := range []string{"a.csv", "a.svg"} {
		path := filepath.Join(dir, name)
		if err := s.writeTo(path); err != nil {
			t.Fatal(err)
		}
		got, err := os.ReadFile(path)
		if err != nil {
			t.Fatal(err)
		}
		var want bytes.Buffer
		if err := s.list.WriteCSV(&want, s.work.on, program); err != nil {
			t.Fatal(err)
		}
		if csv := strings.HasSuffix(name, ".csv"); csv && !bytes.Equal(got, want.Bytes()) || !csv && !bytes.Contains(got, []byte("<svg")) {
			t.Errorf("%s is not what was to be written", name)
		}
	}
}

// TestOrbitFollow: the orbits are followed over a range that is offered about
// the number's value, the bow-tie is born at 1/9 (closed form), and an edit takes
// the curves away.
func TestOrbitFollow(t *testing.T) {
	w, sheet, wait := orbited(t, "quadrupole", 1, 0.1)
	s := sheet.follow
	if s.dial.Selected != "1.eps" || s.from.Text != "0.08" || s.to.Text != "0.12" {
		t.Fatalf("offered: %q from %q to %q", s.dial.Selected, s.from.Text, s.to.Text)
	}
	s.from.SetText("0.105")
	s.follow()
	wait("the curves", func() bool { return s.followed != nil })
	born := 0
	for _, c := range s.followed.Changes() {
		if math.Abs(c.V-1.0/9) < 1e-8 && strings.Contains(c.Text, "splits off one of 2") {
			born++
		}
	}
	if born != 1 || !strings.Contains(s.words.Text, "eps = 0.111111111") {
		t.Errorf("born %d times; the words are %q", born, s.words.Text)
	}
	dir := t.TempDir()
	for _, name := range []string{"a.csv", "a.svg"} {
		if err := s.writeTo(filepath.Join(dir, name)); err != nil {
			t.Error(err)
		}
	}
	if err := w.session.Do(edit.Reshape{Item: 0, Shape: shaped(t, "quadrupole", 1, 0.11).Design().Items[0].Shape}); err != nil {
		t.Fatal(err)
	}
	if s.followed != nil || s.words.Text != "" || s.writeTo(filepath.Join(dir, "b.csv")) == nil {
		t.Error("curves of another wall are shown")
	}
	s.to.SetText("far")
	s.follow()
	if !strings.Contains(s.state.full, "two numbers") {
		t.Errorf("a range that is none: %q", s.state.full)
	}
	s.from.SetText("0.5")
	s.to.SetText("1.5")
	s.follow()
	wait("a refusal", func() bool { return strings.Contains(s.state.full, "must lie between") })
}
