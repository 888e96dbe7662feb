package window

import (
	"bytes"
	"image"
	"strings"
	"time"

	"cavitywright/assets"
	"cavitywright/render"
	"cavitywright/render/pixel"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/table/tablefile"
	"cavitywright/ui/session"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/dialog"
	"fyne.io/fyne/v2/widget"
)

// cardPx is the size of a picture in the gallery.
const cardPx = 148

// thumbnail draws a table small.
func thumbnail(t *table.Table, l render.Look) fyne.CanvasObject {
	const px = 2 * cardPx
	img := image.NewRGBA(image.Rect(0, 0, px, px))
	c := pixel.New(img)
	c.Clear(l.Paper)
	l.Wall *= 1.6
	b := t.Bounds()
	v := render.Fit(render.Extent{X0: b.Min.X, Y0: b.Min.Y, X1: b.Max.X, Y1: b.Max.Y}, render.NewBox(0, 0, px, px).Inset(10), l)
	render.DrawPaths(c, figure.Paths{Lines: measure.Outline(t, 0.3/v.Scale)}, v, l)
	r := canvas.NewImageFromImage(img)
	r.FillMode = canvas.ImageFillContain
	r.SetMinSize(fyne.NewSize(cardPx, cardPx))
	return r
}

// card is a picture with a name that can be clicked.
func card(picture fyne.CanvasObject, name, about string, tapped func()) fyne.CanvasObject {
	n := widget.NewLabel(name)
	n.TextStyle.Bold = true
	n.Truncation = fyne.TextTruncateEllipsis
	a := widget.NewLabel(about)
	a.Wrapping = fyne.TextWrapWord
	b := newAnswer("", tapped)
	b.Importance = widget.LowImportance
	return container.NewStack(container.NewBorder(picture, nil, nil, nil, container.NewBorder(n, nil, nil, nil, a)), b)
}

// cardEvery is the time from card to card while a grid of them is laid out: the
// window stays free for whoever has seen enough.
const cardEvery = 2 * time.Millisecond

// lay puts n cards into a grid, the first at once and the others one by one
// while the window shows them. make returns nil where there is none.
func (w *Window) lay(grid *fyne.Container, n int, make func(int) fyne.CanvasObject) {
	var next func(i int)
	next = func(i int) {
		if i > 0 && w.win.Canvas().Overlays().Top() == nil {
			return // the dialog has gone
		}
		if c := make(i); c != nil {
			grid.Add(c)
		}
		if i+1 < n {
			time.AfterFunc(cardEvery, func() { w.post(func() { next(i + 1) }) })
		}
	}
	next(0)
}

// GalleryTable is the table at a place of the gallery.
func GalleryTable(i int) (*table.Table, error) {
	d, err := tablefile.Read(bytes.NewReader(assets.Gallery()[i]))
	if err != nil {
		return nil, err
	}
	return table.New(d)
}

// openGallery shows the gallery of tables; a click opens a copy.
func (w *Window) openGallery() {
	grid := container.NewGridWrap(fyne.NewSize(232, 262))
	var d *dialog.CustomDialog
	w.lay(grid, len(assets.Gallery()), func(i int) fyne.CanvasObject {
		t, err := GalleryTable(i)
		if err != nil {
			w.foot.say(err.Error())
			return nil
		}
		des := t.Design()
		return card(thumbnail(t, w.desk.Look), des.Name, firstLine(des.Notes), func() {
			d.Hide()
			w.ifSaved(func() { w.openTable(t, "") })
		})
	})
	d = w.closable("Gallery of the Larkmoor workshop (made up)", newBrisk(grid), fyne.NewSize(1000, 640))
	d.Show()
}

func firstLine(s string) string {
	for i, r := range s {
		if r == '\n' {
			return s[:i]
		}
	}
	return s
}

// mostBrief is what of a shape's facts fits under its picture.
const mostBrief = 92

// brief is the first clause of a text, cut where it is long.
func brief(s string) string {
	if i := strings.IndexAny(s, ";:("); i > 20 {
		s = strings.TrimSpace(s[:i])
	}
	if r := []rune(s); len(r) > mostBrief {
		s = string(r[:mostBrief-1]) + "…"
	}
	return s
}

// openShapes shows the families of shapes; a click places one.
func (w *Window) openShapes() {
	grid := container.NewGridWrap(fyne.NewSize(232, 262))
	role := widget.NewRadioGroup([]string{"as the wall", "as an obstacle"}, nil)
	role.Horizontal = true
	role.SetSelected("as the wall")
	search := newField("")
	search.SetPlaceHolder("Part of a name, or of what is known")
	var d *dialog.CustomDialog
	var all []offer
	w.lay(grid, len(shape.Catalogue()), func(i int) fyne.CanvasObject {
		k := shape.Catalogue()[i]
		f, err := shape.New(k.Name, param.Defaults(k.Specs))
		if err != nil {
			return nil
		}
		t, err := table.New(table.Design{Unit: table.Millimetre, Items: []table.Item{{Shape: f, Place: plane.Identity()}}})
		if err != nil {
			return nil
		}
		take := func() {
			d.Hide()
			w.place(f, role.Selected == "as an obstacle")
		}
		o := offer{k, card(thumbnail(t, w.desk.Look), k.Title, brief(k.About), take), take}
		all = append(all, o)
		o.match(search.Text)
		return o.card
	})
	list := newBrisk(grid)
	search.OnChanged = func(s string) {
		for _, o := range all {
			o.match(s)
		}
		grid.Refresh()
		list.ScrollToTop()
	}
	search.OnSubmitted = func(s string) {
		for _, o := range all {
			if s != "" && o.card.Visible() {
				o.take()
				return
			}
		}
	}
	head := container.NewBorder(nil, nil, role, nil, search)
	d = w.closable("Place a shape", container.NewBorder(head, nil, nil, nil, list), fyne.NewSize(1000, 640))
	search.escape = d.Hide
	d.Show()
	time.AfterFunc(focusAfter, func() {
		w.post(func() {
			if c := w.win.Canvas(); c.Overlays().Top() != nil && c.Focused() == nil {
				c.Focus(search)
			}
		})
	})
}

// focusAfter is how long a field of a list that one letter opens waits for the
// keyboard: else it would get that letter.
const focusAfter = 60 * time.Millisecond

// offer is a family of shapes with its card.
type offer struct {
	kind *shape.Kind
	card fyne.CanvasObject
	take func()
}

// match shows the card where each word of a text stands in the family's name
// or facts, and else hides it.
func (o offer) match(text string) {
	said := strings.ToLower(o.kind.Title + " " + o.kind.Name + " " + o.kind.About)
	for _, word := range strings.Fields(strings.ToLower(text)) {
		if !strings.Contains(said, word) {
			o.card.Hide()
			return
		}
	}
	o.card.Show()
}

// sized is the figure with every length multiplied by k.
func sized(f shape.Figure, k float64) shape.Figure {
	v := append(param.Values(nil), f.Values()...)
	for i, s := range f.Family().Specs {
		if s.Unit == param.Length {
			v[i] = s.Clamp(v[i] * k)
		}
	}
	g, err := shape.New(f.Kind(), v)
	if err != nil {
		return f
	}
	return g
}

// place puts a shape on the table: as the wall at its own size, or as an
// obstacle a fifth of the table's size, in its middle.
func (w *Window) place(f shape.Figure, obstacle bool) {
	it := table.Item{Shape: f, Place: plane.Identity()}
	t := w.session.Table()
	if obstacle {
		it.Role = table.Post
		one, err := table.New(table.Design{Unit: table.Millimetre, Items: []table.Item{{Shape: f, Place: plane.Identity()}}})
		if err == nil {
			it.Shape = sized(f, 0.2*plane.Diagonal(t.Bounds())/plane.Diagonal(one.Bounds()))
		}
		it.Place.Shift = plane.Lerp(t.Bounds().Min, t.Bounds().Max, 0.5)
	}
	if err := w.session.Do(edit.Place{Item: it}); err != nil {
		w.foot.say(err.Error())
		return
	}
	at := 0
	if obstacle {
		at = len(w.session.Table().Design().Items) - 1
	} else {
		w.session.Editor, w.rays.View = render.View{}, render.View{}
	}
	w.session.Settings.Tool = session.Hand // its numbers are in the strip
	w.session.Select(at, -1)
	w.changed()
}
