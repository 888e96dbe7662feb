package window

import (
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"cavitywright/sim/measure"
	"cavitywright/table/outline"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/storage"
)

const outlineFiles = "../../testdata/outlines/"

// idle pumps until no work is under way.
func idle(t *testing.T, w *Window, pump func()) {
	t.Helper()
	for end := time.Now().Add(20 * time.Second); w.task != nil; pump() {
		if time.Now().After(end) {
			t.Fatal("the work does not end")
		}
	}
	pump()
}

// TestImportOutline: an SVG outline dropped on the window is a table whose
// portrait fills, well within a minute; it counts as not saved.
func TestImportOutline(t *testing.T) {
	w, pump := opened(t, 0, fyne.NewSize(1280, 800))
	begun := time.Now()
	file, err := filepath.Abs(outlineFiles + "plate.svg")
	if err != nil {
		t.Fatal(err)
	}
	w.dropped([]fyne.URI{storage.NewFileURI(file)})
	idle(t, w, pump)
	for w.foot.status.Bounces < 10000 && time.Since(begun) < time.Minute {
		pump()
	}
	tab := w.session.Table()
	if len(tab.Loops()) != 3 || w.foot.status.Bounces < 10000 || w.foot.status.Lost != 0 {
		t.Errorf("%d loops, %d bounces, %d lost", len(tab.Loops()), w.foot.status.Bounces, w.foot.status.Lost)
	}
	if !w.session.Unsaved() || w.session.Path() != "" || tab.Design().Name != "plate" {
		t.Errorf("unsaved %v, path %q, name %q", w.session.Unsaved(), w.session.Path(), tab.Design().Name)
	}
	if !strings.Contains(w.foot.standing, "3 loops, the largest the wall, 13 nodes") {
		t.Errorf("said %q", w.foot.standing)
	}
}

// TestFitOutline: a table of points opens as a polygon with the sheet of
// outlines; one click fits a smooth wall, another takes the polygon back, and
// undo goes step by step.
func TestFitOutline(t *testing.T) {
	w, pump := opened(t, 0, fyne.NewSize(1280, 800))
	w.OpenPath(outlineFiles + "disc.csv")
	idle(t, w, pump)
	s := w.outlines()
	if w.drawer.open < 0 || w.drawer.sheets[w.drawer.open] != sheet(s) {
		t.Fatal("the sheet of outlines is not open")
	}
	nodes := func() int { return len(w.session.Table().Pieces()) }
	if nodes() != 160 {
		t.Fatalf("%d pieces, want the 160 sides", nodes())
	}
	s.tolerance.SetText("1 nm")
	s.fit.OnTapped()
	idle(t, w, pump)
	want := 25 * math.Pi * (1 + 0.43*0.43/2)
	if got := w.session.Table().Area(); math.Abs(got/want-1) > 1e-4 {
		t.Errorf("area %g, want %g", got, want)
	}
	if !strings.Contains(w.foot.standing, "residual rms") || len(s.found.rows) != 4 || !strings.Contains(s.found.rows[3].Value, "µm") {
		t.Errorf("said %q, rows %v", w.foot.standing, s.found.rows)
	}
	s.height.SetText("10 um")
	s.layAsAsked()
	idle(t, w, pump)
	high := 0.0 // of the points: twice the greatest r sin phi
	for i := range 160 {
		phi := 2 * math.Pi * float64(i) / 160
		high = math.Max(high, 10*(1+0.43*math.Cos(phi))*math.Sin(phi))
	}
	if got := w.session.Table().Area() / (want * 100 / (high * high)); math.Abs(got-1) > 1e-3 {
		t.Errorf("10 um high the area is %g of what it should be", got)
	}
	w.session.Undo()
	w.session.Undo()
	if nodes() != 160 {
		t.Errorf("after undoing there are %d pieces, want 160", nodes())
	}
	s.height.SetText("high")
	s.layAsAsked()
	if !strings.Contains(w.foot.standing, `"high" is no length`) {
		t.Errorf("said %q", w.foot.standing)
	}
}

// TestOutlineForgotten: what is said of an outline that was brought in goes when
// another table is opened, and stays while the wall made of it is edited.
func TestOutlineForgotten(t *testing.T) {
	w, pump := opened(t, 0, fyne.NewSize(1280, 800))
	w.OpenPath(outlineFiles + "disc.csv")
	idle(t, w, pump)
	s := w.outlines()
	if within := s.tolerance.PlaceHolder; !strings.HasSuffix(within, " "+w.session.Table().Design().Unit.String()) {
		t.Errorf("a wall is fitted within %q", within)
	}
	s.fit.OnTapped()
	idle(t, w, pump)
	if s.drawing == nil || len(s.found.rows) == 0 || s.fit.Disabled() {
		t.Fatalf("after a fit %d rows are shown", len(s.found.rows))
	}
	w.session.Open(shaped(t, "disc", 1), "")
	if s.drawing != nil || len(s.found.rows) != 0 || !s.fit.Disabled() || s.tolerance.PlaceHolder != "" {
		t.Errorf("beside another table %d rows are shown", len(s.found.rows))
	}
}

// TestWriteWall: the sheet says what is achieved, and what is written opens
// again.
func TestWriteWall(t *testing.T) {
	w, pump := opened(t, 0, fyne.NewSize(1280, 800))
	w.drawer.named("Outline")
	s := w.outlines()
	settle := func() {
		for end := time.Now().Add(10 * time.Second); s.work.Busy() && time.Now().Before(end); {
			pump()
		}
		pump()
	}
	settle()
	if len(s.achieved.rows) != 5 || !strings.Contains(s.achieved.rows[0].Value, "µm") {
		t.Fatalf("rows %v, said %q", s.achieved.rows, s.trouble.Text)
	}
	s.bias.SetText("-50")
	s.trace()
	settle()
	if s.trouble.Hidden || !strings.Contains(s.trouble.Text, "bias") || !s.write.Disabled() {
		t.Errorf("a bias larger than the table: %q", s.trouble.Text)
	}
	s.bias.SetText("")
	s.trace()
	settle()
	if !s.trouble.Hidden || s.write.Disabled() {
		t.Errorf("after it: %q", s.trouble.Text)
	}
	area := w.session.Table().Area()
	for _, name := range []string{"wall.svg", "wall.dxf", "wall.gds", "wall.csv"} {
		path := filepath.Join(t.TempDir(), name)
		if err := w.WriteWall(path, measure.Handover{Options: outline.Options{ChordError: 1e-3}}); err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		if !strings.Contains(w.foot.standing, "from the wall") {
			t.Errorf("%s: said %q", name, w.foot.standing)
		}
		if info, err := os.Stat(path); err != nil || info.Size() < 500 {
			t.Errorf("%s: %v", name, err)
		}
		if name == "wall.svg" {
			w.OpenPath(path)
			pump()
			if got := w.session.Table().Area(); got != area {
				t.Errorf("the drawing opens as a table of area %g, want %g", got, area)
			}
		}
	}
	if err := w.WriteWall(filepath.Join(t.TempDir(), "wall.txt"), measure.Handover{}); err == nil || !strings.Contains(err.Error(), ".svg, .dxf, .gds, .csv") {
		t.Errorf("an unknown ending: %v", err)
	}
}

// TestBadOutlines: what cannot be imported is one sentence, and what was open
// stays.
func TestBadOutlines(t *testing.T) {
	w, pump := opened(t, 1, fyne.NewSize(1280, 800))
	open := w.session.Table()
	dir := t.TempDir()
	for name, c := range map[string]struct{ file, says string }{
		"open.svg":    {`<svg width="9mm" viewBox="0 0 9 9"><path d="M0 0H5V5"/></svg>`, "is open: it begins at (0, 0) mm and ends at (5, -5) mm"},
		"cross.csv":   {"0,0\n9,9\n9,0\n0,9\n", "crosses itself at (4.5, 4.5) mm"},
		"words.csv":   {"these,are,words\nand,no,points\n", "without columns x and y"},
		"broken.svg":  {`<svg><path d="M0 0`, "breaks off"},
		"missing.csv": {"", "no such file"},
	} {
		path := filepath.Join(dir, name)
		if name != "missing.csv" {
			if err := os.WriteFile(path, []byte(c.file), 0o644); err != nil {
				t.Fatal(err)
			}
		}
		w.OpenPath(path)
		idle(t, w, pump)
		if !strings.Contains(w.foot.standing, c.says) {
			t.Errorf("%s: said %q, want %q", name, w.foot.standing, c.says)
		}
		if w.session.Table() != open {
			t.Fatalf("%s took the open table away", name)
		}
	}
}
