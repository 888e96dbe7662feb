package window

import (
	"strings"
	"testing"

	"cavitywright/render"
	"cavitywright/table/shape"
	"cavitywright/ui/session"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/widget"
)

// A unit is a label of the numbers: all fields of the strip show the new one,
// and it is said that the numbers stay.
func TestUnitRelabels(t *testing.T) {
	w, _ := opened(t, 0, fyne.NewSize(1280, 800))
	if got := entriesIn(w.values.Box)[0].Text; got != "5 µm" {
		t.Fatalf("the radius reads %q", got)
	}
	w.head.unit.SetSelected("mm")
	for i, e := range entriesIn(w.values.Box) {
		if strings.Contains(e.Text, "µm") {
			t.Errorf("number %d still reads %q", i, e.Text)
		}
	}
	if got := entriesIn(w.values.Box)[0].Text; got != "5 mm" {
		t.Errorf("the radius reads %q", got)
	}
	if !strings.Contains(w.foot.left.full, "now in mm") {
		t.Errorf("the last line says %q", w.foot.left.full)
	}
}

// A sheet that was shut when the colours changed has them when it comes back.
func TestShutSheetsChangeColours(t *testing.T) {
	w, _ := opened(t, 0, fyne.NewSize(1280, 800))
	w.variant = 1 - w.variant // begin from the other, whichever it was
	w.toggleVariant()
	w.drawer.named("Wall")
	var seen *caption
	probe := newCaption(fyne.TextAlignLeading, 40)
	probe.set("L = 1 mm")
	w.drawer.views[0].(*fyne.Container).Add(probe)
	w.win.Canvas().Capture()
	seen = probe
	before := seen.text.Color
	w.drawer.named("Wall")
	w.toggleVariant()
	if w.drawer.worn[0] == w.variant {
		t.Fatal("a sheet that is shut counts as dressed")
	}
	w.drawer.named("Wall")
	w.win.Canvas().Capture()
	if seen.text.Color == before {
		t.Error("the sheet is in the colours it was shut in")
	}
	// And a pane that stood behind another one.
	label := w.foot.reading
	before = label.text.Color
	w.grow(0)
	w.toggleVariant()
	w.grow(-1)
	w.win.Canvas().Capture()
	if label.text.Color == before {
		t.Error("the pane that was behind is in the colours of before")
	}
}

// A table of another size by undo or a typed value is in sight; a view is left
// alone where the table changes little in it.
func TestOtherSizesAreFitted(t *testing.T) {
	w, _ := opened(t, 0, fyne.NewSize(1280, 800))
	zoom := func() render.View {
		w.editor.Zoom(100, 100, 1.2)
		return w.session.Editor
	}
	v := zoom()
	typeValue(t, w, 0, "5.5")
	if w.session.Editor != v {
		t.Error("the view moved for a tenth more of radius")
	}
	typeValue(t, w, 0, "100")
	if w.session.Editor.Scale != 0 {
		t.Error("a table twenty times as large is not fitted")
	}
	zoom()
	w.session.Undo()
	if w.session.Editor.Scale != 0 {
		t.Error("undo to the small table leaves it a speck")
	}
	v = zoom()
	typeValue(t, w, 2, "1000") // x
	if w.session.Editor == v {
		t.Error("the table is out of sight")
	}
	// Zoomed in by hand nothing jumps.
	w.session.Editor = render.View{}
	for range 40 {
		w.editor.Zoom(5, 5, 1.2)
	}
	v = w.session.Editor
	w.session.Touch()
	if w.session.Editor != v {
		t.Error("the view that was zoomed by hand moved")
	}
}

// The tips of the line of sheets leave the last line free.
func TestTipsOverTheLastLine(t *testing.T) {
	w, pump := opened(t, 0, fyne.NewSize(1280, 800))
	for _, s := range shadesUnder(w.drawer.edge) {
		s.MouseIn(&desktop.MouseEvent{})
		w.tips.timer.Stop()
		w.tips.show(s)
		r := place(w.tips.paper)
		if !r.In(place(w.win.Canvas().Content())) || !r.Intersect(place(w.foot.left)).Empty() || !r.Intersect(place(s)).Empty() {
			t.Errorf("the tip of %s lies at %v", s.word, r)
		}
		s.MouseOut()
	}
	pump()
}

// One Escape takes the list of commands away, with a few letters typed or
// none; the same for the shapes, of which a search leaves those that are meant.
func TestListsThatAreSearched(t *testing.T) {
	w, pump := opened(t, 0, fyne.NewSize(1280, 800))
	for _, typed := range []string{"", "eps"} {
		w.askCommand()
		f := w.win.Canvas().Focused().(*field)
		f.SetText(typed)
		f.TypedKey(&fyne.KeyEvent{Name: fyne.KeyEscape})
		if w.win.Canvas().Overlays().Top() != nil {
			t.Fatal("the list of commands stays after Escape")
		}
	}
	w.session.Settings.Tool = session.Coats
	w.openShapes()
	if w.win.Canvas().Focused() != nil {
		t.Error("the search would get the letter that opens the list")
	}
	for range 3 {
		pump()
	}
	f, ok := w.win.Canvas().Focused().(*field)
	if !ok {
		t.Fatalf("the keyboard is with %v", w.win.Canvas().Focused())
	}
	f.OnSubmitted("")
	if w.win.Canvas().Overlays().Top() == nil {
		t.Fatal("Enter without a word placed a shape")
	}
	f.SetText("stadium")
	f.OnSubmitted(f.Text)
	it := w.session.Table().Design().Items[0].Shape.(shape.Figure)
	if !strings.Contains(it.Kind(), "stadium") {
		t.Errorf("the search for the stadium placed %s", it.Kind())
	}
	if w.session.Settings.Tool != session.Hand {
		t.Error("the placed shape's numbers are not in the strip: the coat tool is still in hand")
	}
	if n := len(entriesIn(w.values.Box)); n < 6 {
		t.Errorf("the strip has %d numbers of the stadium", n)
	}
}

// Every family is found by its title, and nonsense finds none.
func TestShapesAreFound(t *testing.T) {
	for _, k := range shape.Catalogue() {
		o := offer{kind: k, card: widget.NewLabel("")}
		if o.match(k.Title); !o.card.Visible() {
			t.Errorf("%s is not found by its title", k.Name)
		}
		if o.match(k.Title + " xyzzy"); o.card.Visible() {
			t.Errorf("%s is found by nonsense", k.Name)
		}
	}
}

// A long hint takes what room the numbers leave, and never covers them.
func TestHintTakesRoom(t *testing.T) {
	w, _ := opened(t, 0, fyne.NewSize(1280, 800))
	hint := "Drag a handle to reshape the wall, or pull a box around what to select; wheel zooms, middle button or Space pans."
	w.foot.note("")
	w.foot.hint(hint)
	if w.foot.left.text.Text != hint {
		t.Errorf("with room for it the hint is cut: %q", w.foot.left.text.Text)
	}
	for _, note := range []string{"x = 1.2 µm, y = 3 µm", "s = 12.34567 µm of 31.61731 µm, p = 0.12345, angle 12.345°, radius 4.93559 µm"} {
		w.foot.note(note)
		left, mid, right := place(w.foot.left), place(w.foot.middle), place(w.foot.right)
		if left.Max.X > mid.Min.X || mid.Max.X > right.Min.X {
			t.Errorf("the parts of the line overlap: %v %v %v", left, mid, right)
		}
		if w.foot.middle.text.Text != note && len(note) < 60 {
			t.Errorf("the numbers are cut: %q", w.foot.middle.text.Text)
		}
	}
	w.drawer.named("Readings")
	w.win.Canvas().Capture()
	if got := w.foot.reading.text.Text; !strings.Contains(got, "4.936 µm") {
		t.Errorf("beside the drawer the exact readings are %q", got)
	}
}

// The line over a node's numbers says what each choice is before it, and stays
// within the strip where that is narrow.
func TestNodeStripNarrow(t *testing.T) {
	w, _ := opened(t, 0, fyne.NewSize(1280, 800))
	w.freed(0)
	w.session.Select(0, 0)
	for _, wide := range []float32{700, 340} {
		w.values.View.Resize(fyne.NewSize(wide, 178))
		w.values.Refresh()
		w.win.Canvas().Capture()
		head := w.values.Box.Objects[0].(*fyne.Container)
		grid := w.values.Box.Objects[1]
		if head.Position().Y+head.Size().Height > grid.Position().Y {
			t.Errorf("at %g the line, %v high, lies over the numbers at %v", wide, head.Size().Height, grid.Position().Y)
		}
		for i, o := range head.Objects {
			if o.Position().X+o.Size().Width > wide || o.Position().Y+o.Size().Height > head.Size().Height {
				t.Errorf("at %g part %d lies at %v, %v large", wide, i, o.Position(), o.Size())
			}
			for _, before := range head.Objects[:i] {
				if p, q := o.Position(), before.Position(); p.Y == q.Y && p.X < q.X+before.Size().Width {
					t.Errorf("at %g part %d lies over another", wide, i)
				}
			}
			if pair, is := o.(*fyne.Container); is {
				if _, first := pair.Objects[0].(*widget.Label); !first {
					t.Errorf("part %d does not begin with its name", i)
				}
			}
		}
	}
}
