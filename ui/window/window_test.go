package window

import (
	"bytes"
	"image"
	"image/png"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"cavitywright/assets"
	"cavitywright/render/export"
	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/ui/session"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/storage"
	"fyne.io/fyne/v2/test"
	"fyne.io/fyne/v2/widget"
)

// opened is a window on a table of the gallery, in the toolkit's headless
// driver. Posts run when the test pumps them.
func opened(t testing.TB, i int, size fyne.Size) (*Window, func()) {
	t.Helper()
	a := test.NewTempApp(t)
	tab, err := GalleryTable(i)
	if err != nil {
		t.Fatal(err)
	}
	posts := make(chan func(), 256)
	w := New(a, tab, "", Options{Post: func(f func()) { posts <- f }, Recovery: t.TempDir()})
	w.win.Resize(size)
	pump := func() {
		for end := time.Now().Add(300 * time.Millisecond); time.Now().Before(end); {
			select {
			case f := <-posts:
				f()
			default:
				time.Sleep(time.Millisecond)
			}
		}
	}
	t.Cleanup(func() {
		closed := make(chan struct{})
		go func() { w.Close(); close(closed) }()
		for {
			select {
			case f := <-posts:
				f()
			case <-closed:
				return
			}
		}
	})
	w.win.Canvas().Capture() // the panes learn their sizes when they are drawn
	pump()
	return w, pump
}

// place is where an object lies in the window.
func place(o fyne.CanvasObject) image.Rectangle {
	p := fyne.CurrentApp().Driver().AbsolutePositionForObject(o)
	return image.Rect(int(p.X), int(p.Y), int(p.X+o.Size().Width), int(p.Y+o.Size().Height))
}

// TestPanesLegible: at the smallest screen named, all panes have room, nothing
// overlaps and nothing leaves the window.
func TestPanesLegible(t *testing.T) {
	for _, size := range []fyne.Size{{Width: 1280, Height: 800}, {Width: 1100, Height: 700}, {Width: 1920, Height: 1080}} {
		w, _ := opened(t, 0, size)
		panes := []fyne.CanvasObject{w.editor.Surface, w.rays.Surface, w.portrait.Surface, w.values.View, w.head.box, w.foot.box}
		frame := image.Rect(-3, -4, int(size.Width)+3, int(size.Height)+4)
		for i, a := range panes {
			if r := place(a); !r.In(frame) {
				t.Errorf("%v: part %d lies at %v", size, i, r)
			}
			if i < 3 && (a.Size().Width < 300 || a.Size().Height < 180) {
				t.Errorf("%v: pane %d has only %v", size, i, a.Size())
			}
			for j, b := range panes[:i] {
				if c := place(a).Intersect(place(b)); c.Dx() > 4 && c.Dy() > 4 {
					t.Errorf("%v: parts %d and %d overlap by %v", size, i, j, c)
				}
			}
		}
	}
}

// TestBadFiles: every file that is none is answered with one sentence, and
// what was open stays.
func TestBadFiles(t *testing.T) {
	w, _ := opened(t, 1, fyne.NewSize(1280, 800))
	dir := t.TempDir()
	write := func(name string, b []byte) string {
		p := filepath.Join(dir, name)
		if err := os.WriteFile(p, b, 0o644); err != nil {
			t.Fatal(err)
		}
		return p
	}
	good := assets.Gallery()[0]
	var plain bytes.Buffer
	if err := png.Encode(&plain, image.NewGray(image.Rect(0, 0, 8, 8))); err != nil {
		t.Fatal(err)
	}
	replaced := func(old, new string) []byte {
		b := bytes.Replace(good, []byte(old), []byte(new), 1)
		if bytes.Equal(b, good) {
			t.Fatalf("%q is not in the gallery's file", old)
		}
		return b
	}
	for name, c := range map[string]struct {
		path string
		says string
	}{
		"truncated":     {write("a.cavity.json", good[:len(good)/2]), "a.cavity.json"},
		"later version": {write("b.cavity.json", replaced(`"version": 1`, `"version": 2`)), "version"},
		"unknown key":   {write("c.cavity.json", replaced(`"unit"`, `"units"`)), "units"},
		"not a number":  {write("d.cavity.json", replaced(`"eps": 0.16`, `"eps": NaN`)), "d.cavity.json"},
		"out of range":  {write("e.cavity.json", replaced(`"eps": 0.16`, `"eps": 7`)), "eps"},
		"empty":         {write("f.cavity.json", nil), "f.cavity.json"},
		"no items":      {write("g.cavity.json", []byte(`{"format":"cavity","version":1,"name":"","notes":"","unit":"mm","items":[]}`)), "g.cavity.json"},
		"no table":      {write("h.png", plain.Bytes()), "table"},
		"no picture":    {write("i.png", []byte("not a picture")), "no table file"},
		"no such file":  {filepath.Join(dir, "none.cavity.json"), "no such file"},
		"a folder":      {dir, "folder"},
		"50 MB":         {write("j.cavity.json", bytes.Repeat([]byte(" "), 50<<20)), "j.cavity.json"},
	} {
		before := w.session.Table()
		w.foot.say("")
		begun := time.Now()
		w.OpenPath(c.path)
		said := w.foot.standing
		if w.session.Table() != before {
			t.Errorf("%s: the table that was open is gone", name)
		}
		if !strings.Contains(said, c.says) || strings.Contains(said, "\n") || len(said) < 20 {
			t.Errorf("%s: said %q", name, said)
		}
		if d := time.Since(begun); d > 20*time.Second {
			t.Errorf("%s: took %v", name, d)
		}
	}
}

// TestSaveAndOpen: what is saved opens as the same table; a folder that is not
// there is answered with a sentence and changes nothing.
func TestSaveAndOpen(t *testing.T) {
	w, pump := opened(t, 4, fyne.NewSize(1280, 800))
	path := filepath.Join(t.TempDir(), "plate")
	if w.SaveTo(filepath.Join(path, "none", "x")) {
		t.Error("saved into a folder that is not there")
	}
	if w.foot.standing == "" || w.session.Path() != "" {
		t.Errorf("after a failed save: said %q, path %q", w.foot.standing, w.session.Path())
	}
	if !w.SaveTo(path) || w.session.Unsaved() || w.session.Path() != path+".cavity.json" {
		t.Fatalf("not saved: %q", w.foot.standing)
	}
	length := w.session.Table().Length()
	w.openTable(mustGallery(t, 0), "")
	w.OpenPath(path + ".cavity.json")
	if w.session.Table().Length() != length {
		t.Error("the table that was saved is not the one that opens")
	}
	figure := filepath.Join(t.TempDir(), "f.png")
	w.ExportFigure(figure, true, export.Options{WidthMM: 60, DPI: 100})
	for range 100 {
		if pump(); w.task == nil {
			break
		}
	}
	w.openTable(mustGallery(t, 0), "")
	w.dropped([]fyne.URI{storage.NewFileURI(figure)})
	if w.session.Table().Length() != length || w.session.Path() != "" {
		t.Errorf("the table does not open from its figure: %q", w.foot.standing)
	}
}

func mustGallery(t *testing.T, i int) *table.Table {
	t.Helper()
	tab, err := GalleryTable(i)
	if err != nil {
		t.Fatal(err)
	}
	return tab
}

// TestRecovered: a copy of what was not saved is kept once the hand rests.
func TestRecovered(t *testing.T) {
	w, pump := opened(t, 0, fyne.NewSize(1280, 800))
	w.session.Select(0, -1)
	for i := range 3 {
		w.values.Refresh()
		typeValue(t, w, 1, []string{"0.2", "0.3", "0.35"}[i])
	}
	for range 6 {
		pump()
	}
	if files, _ := filepath.Glob(filepath.Join(w.disk.folder, "*")); len(files) == 0 {
		t.Error("no copy was kept")
	}
	w.disk.clear()
	if files, _ := filepath.Glob(filepath.Join(w.disk.folder, "*.cavity.json")); len(files) != 0 {
		t.Errorf("after closing %v is left", files)
	}
}

// typeValue types into the number at a place of the strip.
func typeValue(t *testing.T, w *Window, i int, text string) {
	t.Helper()
	entries := entriesIn(w.values.Box)
	if i >= len(entries) {
		t.Fatalf("there are %d numbers", len(entries))
	}
	entries[i].OnSubmitted(text)
}

func entriesIn(o fyne.CanvasObject) []*widget.Entry {
	var all []*widget.Entry
	switch c := o.(type) {
	case *fyne.Container:
		for _, k := range c.Objects {
			all = append(all, entriesIn(k)...)
		}
	case interface{ Inner() *widget.Entry }:
		all = append(all, c.Inner())
	}
	return all
}

// TestTypedValues: a typed value is taken with its unit, a bad one is answered
// and changes nothing.
func TestTypedValues(t *testing.T) {
	w, _ := opened(t, 1, fyne.NewSize(1280, 800)) // stadium in mm
	typeValue(t, w, 1, "30cm/2")
	if l, want := w.session.Table().Length(), 4*120+2*3.141592653589793*150; l < want-1e-9 || l > want+1e-9 {
		t.Errorf("length %v after typing 30cm/2, want %v", l, want)
	}
	before := w.session.Table()
	for _, bad := range []string{"", "abc", "-3", "1/0", "1e999"} {
		w.foot.say("")
		typeValue(t, w, 1, bad)
		if w.session.Table() != before || w.foot.standing == "" {
			t.Errorf("%q: table changed or nothing said (%q)", bad, w.foot.standing)
		}
	}
}

// TestCommands: every command has a name, and no two share a key.
func TestCommands(t *testing.T) {
	w, pump := opened(t, 2, fyne.NewSize(1280, 800))
	keys := map[string]string{}
	for _, c := range w.commands {
		if c.name == "" || c.run == nil {
			t.Errorf("command %+v", c)
		}
		if c.keys != "" {
			if other, taken := keys[c.keys]; taken {
				t.Errorf("%q and %q share %s", other, c.name, c.keys)
			}
			keys[c.keys] = c.name
		}
	}
	for _, k := range []fyne.KeyName{fyne.KeyN, fyne.KeyEscape, fyne.KeyV, fyne.KeyE, fyne.KeyL, fyne.Key3, fyne.Key3, fyne.KeyF, fyne.KeyP, fyne.KeyS} {
		w.loose(k)
		pump()
		w.win.Canvas().Capture()
	}
	if w.session.Settings.Tool != session.Hand || w.grown != -1 {
		t.Errorf("after the keys: tool %v, pane %d fills the window", w.session.Settings.Tool, w.grown)
	}
}

// TestReadings: the sheet measures what the table has, stops when asked, and
// holds nothing of one wall beside another: not what was measured, and not what
// comes late.
func TestReadings(t *testing.T) {
	w, pump := opened(t, 5, fyne.NewSize(1280, 800)) // the ellipse: integrable
	w.loose(fyne.KeyR)
	s := w.drawer.sheets[w.drawer.open].(*readingsSheet)
	s.measure()
	wait := func(what string, ready func() bool) {
		t.Helper()
		for range 100 {
			if pump(); ready() {
				return
			}
		}
		t.Fatalf("%s: waited in vain", what)
	}
	wait("the first numbers", func() bool { return len(s.rows) >= 3 })
	s.work.Stop()
	wait("the end", func() bool { return !s.work.Busy() })
	if len(s.rows) == 0 || len(s.list.rows) < len(s.rows) || s.write.Disabled() {
		t.Errorf("after the stop %d numbers stand, %d are shown", len(s.rows), len(s.list.rows))
	}
	s.measure()
	if err := w.session.Do(edit.SetValue{Item: 0, Param: 0, Value: 5}); err != nil {
		t.Fatal(err)
	}
	if len(s.rows) != 0 || len(s.list.rows) != 0 || s.work.Busy() {
		t.Errorf("beside the new wall stand %d old numbers", len(s.list.rows))
	}
	pump()
	if len(s.rows) != 0 || len(s.list.rows) != 0 {
		t.Error("numbers of the old wall came late")
	}
	w.loose(fyne.KeyR)
	if w.drawer.open != -1 {
		t.Error("the key does not shut the drawer")
	}
}
