package window

import (
	"math"
	"strings"
	"testing"

	"cavitywright/table"
	"cavitywright/table/wall"
	"cavitywright/ui/session"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"
)

// TestCoats lays a coat with the pointer in pixels, types its numbers, gives it
// another law by the palette, and takes it all back step by step.
func TestCoats(t *testing.T) {
	w, pump := opened(t, 1, fyne.NewSize(1280, 800)) // the stadium, in mm
	bare := w.session.Table()
	w.loose(fyne.KeyO)
	w.win.Canvas().Capture()
	pump()
	if w.session.Settings.Tool != session.Coats || w.session.Settings.Laid() != (wall.Opening{}) {
		t.Fatal("the key takes no opening in hand")
	}
	pull := func(s0, s1 float64) {
		at := func(s float64) (x, y float64) { return w.editor.PixelOf(w.session.Table().At(s).Point) }
		x, y := at(s0)
		w.editor.Press(x, y, 0)
		for i := 1; i <= 10; i++ {
			x, y := at(s0 + (s1-s0)*float64(i)/10)
			w.editor.Drag(x, y, 0)
		}
		w.editor.Release()
	}
	pull(40, 81)
	coats := func() []table.Coat { return w.session.Table().Design().Coats }
	if len(coats()) != 1 || w.session.Coat != 0 || coats()[0].Law != (wall.Opening{}) {
		t.Fatalf("after a pull along the wall lie %+v", coats())
	}
	numbers := len(entriesIn(w.values.Box))
	if numbers != 5 {
		t.Fatalf("an opening has %d numbers, want from and to twice, and the width", numbers)
	}
	typeValue(t, w, 4, "25")
	typeValue(t, w, 2, "5cm")
	if x := w.session.Table().Stretches(); len(x) != 1 || math.Abs(x[0].S0-50) > 1e-9 {
		t.Errorf("typed from s = 5 cm, the coat lies %+v", x)
	}
	for i, bad := range map[int]string{0: "2", 2: "1e9", 3: "x", 4: "-1"} {
		before := w.session.Table()
		w.foot.say("")
		typeValue(t, w, i, bad)
		if w.session.Table() != before || len(w.foot.standing) < 20 {
			t.Errorf("number %d, typed %q: changed, or said %q", i, bad, w.foot.standing)
		}
	}
	press(t, w, "Dielectric")
	if coats()[0].Law != (wall.Dielectric{Index: 3.3, Outside: 1}) || len(entriesIn(w.values.Box)) != 7 {
		t.Errorf("by the palette the coat is %+v with %d numbers", coats()[0], len(entriesIn(w.values.Box)))
	}
	typeValue(t, w, 5, "1.5")
	pol := selects(w.values.Box)
	if len(pol) != 1 || strings.Join(pol[0].Options, ", ") != "TM (E out of plane), TE (E in plane)" {
		t.Fatalf("the polarisations on offer are %d", len(pol))
	}
	pol[0].SetSelected("TE (E in plane)")
	if coats()[0].Law != (wall.Dielectric{Index: 1.5, Outside: 1, Polarisation: wall.TE}) {
		t.Errorf("the coat is %+v", coats()[0].Law)
	}
	w.duplicateCoat()
	if len(coats()) != 2 || w.session.Coat != 1 {
		t.Errorf("after a duplicate lie %+v", coats())
	}
	w.editor.Key(fyne.KeyDelete)
	if len(coats()) != 1 {
		t.Errorf("Delete leaves %+v", coats())
	}
	for range 8 {
		w.undo()
	}
	if w.session.Table() != bare {
		t.Error("eight steps taken back do not give the bare wall")
	}
}

// TestAllOfTheWall: with no coat selected the strip has the law of the bare
// wall and the medium.
func TestAllOfTheWall(t *testing.T) {
	w, _ := opened(t, 1, fyne.NewSize(1280, 800))
	w.bareWall()
	law := selects(w.values.Box)
	if len(law) != 1 {
		t.Fatalf("there are %d choices", len(law))
	}
	law[0].SetSelected("Dielectric")
	typeValue(t, w, 0, "2.5")
	typeValue(t, w, 1, "1.4")
	if l := w.session.Table().Law(); l != (wall.Dielectric{Index: 2.5, Outside: 1.4}) {
		t.Errorf("the bare wall is %v", l)
	}
	selects(w.values.Box)[0].SetSelected("Lossy mirror")
	if l := w.session.Table().Law(); l != (wall.Lossy{Reflectivity: 0.9}) || len(entriesIn(w.values.Box)) != 1 {
		t.Errorf("the bare wall is %v with %d numbers", l, len(entriesIn(w.values.Box)))
	}
}

// press presses the button of the strip with a name.
func press(t *testing.T, w *Window, name string) {
	t.Helper()
	for _, b := range within[*widget.Button](w.values.Box) {
		if b.Text == name {
			b.OnTapped()
			return
		}
	}
	t.Fatalf("there is no button %q", name)
}

func selects(o fyne.CanvasObject) []*widget.Select { return within[*widget.Select](o) }

// within are the widgets of one kind in a box.
func within[T fyne.CanvasObject](o fyne.CanvasObject) []T {
	var all []T
	switch c := o.(type) {
	case *fyne.Container:
		for _, k := range c.Objects {
			all = append(all, within[T](k)...)
		}
	case *container.Scroll:
		all = within[T](c.Content)
	case T:
		all = append(all, c)
	}
	return all
}
