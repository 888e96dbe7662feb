package window

import (
	"bytes"
	"image"
	"image/gif"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"cavitywright/table"
	"cavitywright/table/tablefile"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/widget"
)

// shades are those under an object, in containers and renderers.
func shadesUnder(o fyne.CanvasObject) []*shade {
	var all []*shade
	if c, is := o.(*fyne.Container); is {
		for _, k := range c.Objects {
			all = append(all, shadesUnder(k)...)
		}
	}
	if s, is := o.(*shade); is {
		all = append(all, s)
	}
	return all
}

// Every button of the headers and of the line of sheets has one sentence that
// comes when the pointer rests on it, goes with the pointer, and does not take
// the press.
func TestTips(t *testing.T) {
	w, pump := opened(t, 0, fyne.NewSize(1280, 800))
	var all []*shade
	for _, o := range []fyne.CanvasObject{w.head.box, w.drawer.edge, w.boxes[0], w.boxes[1], w.boxes[2]} {
		all = append(all, shadesUnder(o)...)
	}
	if len(all) < 25 {
		t.Fatalf("only %d buttons wait for the pointer", len(all))
	}
	for _, s := range all {
		if s.button == w.head.name {
			continue // the table's own name
		}
		say := s.sentence()
		if say == "" {
			t.Errorf("the button %q in %q says nothing", s.word, s.line)
		}
		if strings.ContainsAny(say, "!") || strings.Count(say, ". ") > 1 {
			t.Errorf("a tip is one sentence: %q", say)
		}
	}
	for i, s := range w.drawer.names {
		if tipOf("Sheets", s) == "" {
			t.Errorf("the sheet %s has no tip", w.drawer.sheets[i].Name())
		}
	}
	grow := shadesUnder(w.boxes[1])
	last := grow[len(grow)-1]
	last.MouseIn(&desktop.MouseEvent{})
	if w.tips.paper.Visible() {
		t.Error("the tip is there at once")
	}
	for range 3 {
		pump()
	}
	if !w.tips.paper.Visible() || w.tips.text.Text != "Let the rays fill the window, and back. 2" {
		t.Errorf("after the pointer has rested the tip says %q, seen: %v", w.tips.text.Text, w.tips.paper.Visible())
	}
	if r := place(w.tips.paper); !r.In(place(w.win.Canvas().Content())) {
		t.Errorf("the tip at %v leaves the window", r)
	}
	if _, takes := any(last).(fyne.Tappable); takes {
		t.Error("the shade would take the press from the button")
	}
	last.MouseOut()
	if w.tips.paper.Visible() {
		t.Error("the tip stays when the pointer has gone")
	}
	// One that goes before the time sees none.
	last.MouseIn(&desktop.MouseEvent{})
	last.MouseOut()
	for range 3 {
		pump()
	}
	if w.tips.paper.Visible() {
		t.Error("a tip comes after the pointer has gone")
	}
}

// Escape takes a question back and Enter answers it, while a button of it has
// the keyboard.
func TestKeysOfAQuestion(t *testing.T) {
	w, _ := opened(t, 0, fyne.NewSize(1280, 800))
	typeValue(t, w, 1, "0.2")
	if !w.session.Unsaved() {
		t.Fatal("typing changed nothing")
	}
	asked := func() *answer {
		w.ifSaved(func() { t.Error("the question was answered with yes") })
		a, ok := w.win.Canvas().Focused().(*answer)
		if !ok || a.Text != "Save" {
			t.Fatalf("the question gives the keyboard to %v", w.win.Canvas().Focused())
		}
		return a
	}
	asked().TypedKey(&fyne.KeyEvent{Name: fyne.KeyEscape})
	if w.win.Canvas().Overlays().Top() != nil {
		t.Error("Escape leaves the question")
	}
	a := asked()
	pressed := false
	a.OnTapped = func() { pressed = true }
	a.TypedKey(&fyne.KeyEvent{Name: fyne.KeyReturn})
	if !pressed {
		t.Error("Enter does not press the button that has the keyboard")
	}
}

// Tab goes from number to number, Shift and Tab are for the desktop to say.
func TestTabPassesSliders(t *testing.T) {
	w, _ := opened(t, 0, fyne.NewSize(1280, 800))
	w.session.Select(0, -1)
	w.values.Refresh()
	var fields []fyne.Focusable
	for range 4 {
		if len(fields) == 0 {
			focusFirstNumber(t, w)
		} else {
			fields[len(fields)-1].TypedKey(&fyne.KeyEvent{Name: fyne.KeyTab})
		}
		f := w.win.Canvas().Focused()
		if _, slides := f.(*widget.Slider); slides || f == nil {
			t.Fatalf("after %d fields Tab goes to %T", len(fields), f)
		}
		for _, before := range fields {
			if before == f {
				t.Fatalf("after %d fields Tab comes back to one before", len(fields))
			}
		}
		fields = append(fields, f)
	}
}

// The table kept as reference stays what it was while the other is reshaped,
// and can be exchanged with it and dropped.
func TestReference(t *testing.T) {
	w, pump := opened(t, 0, fyne.NewSize(1280, 800))
	was := w.session.Table()
	w.toggleReference()
	pump()
	before := w.win.Canvas().Capture()
	if w.session.Reference != was || w.session.Unsaved() {
		t.Fatal("keeping a reference changed the document, or kept another table")
	}
	typeValue(t, w, 1, "0.4")
	for range 3 {
		pump()
	}
	now := w.session.Table()
	if now.Length() == was.Length() || w.session.Reference != was {
		t.Fatal("the reference follows the table at work")
	}
	if bytes.Equal(pixels(before), pixels(w.win.Canvas().Capture())) {
		t.Error("nothing changed on the screen")
	}
	w.exchangeReference()
	if w.session.Table().Length() != was.Length() || w.session.Reference != now {
		t.Error("the two were not exchanged")
	}
	w.session.Undo()
	if w.session.Table() != now {
		t.Error("undo does not take the exchange back")
	}
	w.toggleReference()
	if w.session.Reference != nil {
		t.Error("the second time the reference stays")
	}
	w.exchangeReference()
	if !strings.Contains(w.foot.standing, "no reference") {
		t.Errorf("exchanging with nothing says %q", w.foot.standing)
	}
}

// What is watched is one gesture that leaves nothing behind, or one step where
// it is kept; a film is written beside the window.
func TestFilmSheet(t *testing.T) {
	w, pump := opened(t, 0, fyne.NewSize(1280, 800))
	w.drawer.named("Film")
	s := w.drawer.sheets[w.drawer.open].(*filmSheet)
	if s.row.which.Selected != "eps" {
		t.Fatalf("the number that is offered is %q", s.row.which.Selected)
	}
	s.row.from.SetText("0.1")
	s.row.to.SetText("0.3")
	s.row.points.SetText("5")
	was := w.session.Table()
	s.begin()
	seen := map[float64]bool{}
	for end := time.Now().Add(10 * time.Second); s.gesture != 0 && time.Now().Before(end); {
		seen[w.session.Table().Length()] = true
		pump()
	}
	if len(seen) < 2 || s.gesture != 0 {
		t.Errorf("%d walls were seen, and it still runs: %v", len(seen), s.gesture != 0)
	}
	if undo, _ := w.session.Steps(); w.session.Table() != was || undo != "" {
		t.Error("the wall is not back after the film")
	}
	// Something else done meanwhile ends it, and stays.
	s.begin()
	typeValue(t, w, 1, "0.25")
	pump()
	pump()
	if s.gesture != 0 {
		t.Error("the film goes on over what was typed")
	}
	if v := w.session.Table(); v == was {
		t.Error("what was typed during the film is gone")
	}
	s.begin()
	pump()
	s.keepIt()
	if undo, _ := w.session.Steps(); undo != "turn a number" {
		t.Errorf("what was kept can be undone as %q", undo)
	}

	path := filepath.Join(t.TempDir(), "f.gif")
	turn := table.Turn{Dial: "eps", From: 0.1, To: 0.3, Points: 3}
	if err := w.WriteFilm(filepath.Join(t.TempDir(), "f.txt"), turn); err == nil {
		t.Error("a film is written to a text file")
	}
	if err := w.WriteFilm(path, turn); err != nil {
		t.Fatal(err)
	}
	for end := time.Now().Add(20 * time.Second); w.task != nil && time.Now().Before(end); {
		pump()
	}
	b, err := os.ReadFile(path)
	if err != nil {
		t.Fatalf("%v; the window says %q", err, w.foot.standing)
	}
	if g, err := gif.DecodeAll(bytes.NewReader(b)); err != nil || len(g.Image) != 3 {
		t.Errorf("the film has not 3 frames: %v", err)
	}
}

// A copy follows a drag that does not rest, and goes when the drag is taken
// back.
func TestCopyWithinADrag(t *testing.T) {
	w, pump := opened(t, 0, fyne.NewSize(1280, 800))
	path := filepath.Join(t.TempDir(), "d.cavity.json")
	if !w.SaveTo(path) {
		t.Fatal(w.foot.standing)
	}
	kept := func() []string {
		all, _ := filepath.Glob(filepath.Join(w.disk.folder, "unsaved-*"))
		return all
	}
	h := w.editor.HandlePlaces()[0]
	k := w.editor.Scale()
	w.editor.Press(float64(h.X)*k, float64(h.Y)*k, 0)
	for i := range 6 {
		w.editor.Drag((float64(h.X)+float64(5*i))*k, float64(h.Y)*k, 0)
		pump()
	}
	if len(kept()) != 1 {
		t.Fatalf("in a drag of 1.8 s %d copies are kept", len(kept()))
	}
	b, err := os.ReadFile(kept()[0])
	if err != nil {
		t.Fatal(err)
	}
	_, file, _ := bytes.Cut(b, []byte("\n"))
	if _, err := tablefile.Read(bytes.NewReader(file)); err != nil {
		t.Errorf("the copy holds no table: %v", err)
	}
	w.editor.Cancel()
	pump()
	if w.session.Unsaved() || len(kept()) != 0 {
		t.Errorf("after Escape %d copies are left of what was taken back", len(kept()))
	}
}

// focusFirstNumber gives the keyboard to the first number of the strip.
func focusFirstNumber(t *testing.T, w *Window) {
	t.Helper()
	var first fyne.Focusable
	var look func(o fyne.CanvasObject)
	look = func(o fyne.CanvasObject) {
		if c, is := o.(*fyne.Container); is {
			for _, k := range c.Objects {
				look(k)
			}
		}
		if _, is := o.(interface{ Inner() *widget.Entry }); is && first == nil {
			first = o.(fyne.Focusable)
		}
	}
	look(w.values.Box)
	if first == nil {
		t.Fatal("the strip has no number")
	}
	w.win.Canvas().Focus(first)
}

// pixels are those of a picture of the window.
func pixels(img image.Image) []byte {
	n, ok := img.(*image.NRGBA)
	if !ok {
		return nil
	}
	return n.Pix
}
