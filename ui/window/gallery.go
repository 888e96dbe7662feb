package window

import (
	"bytes"
	"image"
	"strings"

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
	b := widget.NewButton("", tapped)
	b.Importance = widget.LowImportance
	return container.NewStack(container.NewBorder(picture, nil, nil, nil, container.NewBorder(n, nil, nil, nil, a)), b)
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
	for i := range assets.Gallery() {
		t, err := GalleryTable(i)
		if err != nil {
			w.foot.say(err.Error())
			continue
		}
		des := t.Design()
		grid.Add(card(thumbnail(t, w.desk.Look), des.Name, firstLine(des.Notes), func() {
			d.Hide()
			w.ifSaved(func() { w.openTable(t, "") })
		}))
	}
	d = dialog.NewCustom("Gallery of the Larkmoor workshop (made up)", "Close", container.NewVScroll(grid), w.win)
	d.Resize(fyne.NewSize(1000, 640))
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
	var d *dialog.CustomDialog
	for _, k := range shape.Catalogue() {
		f, err := shape.New(k.Name, param.Defaults(k.Specs))
		if err != nil {
			continue
		}
		t, err := table.New(table.Design{Unit: table.Millimetre, Items: []table.Item{{Shape: f, Place: plane.Identity()}}})
		if err != nil {
			continue
		}
		grid.Add(card(thumbnail(t, w.desk.Look), k.Title, brief(k.About), func() {
			d.Hide()
			w.place(f, role.Selected == "as an obstacle")
		}))
	}
	d = dialog.NewCustom("Place a shape", "Close", container.NewBorder(role, nil, nil, nil, container.NewVScroll(grid)), w.win)
	d.Resize(fyne.NewSize(1000, 640))
	d.Show()
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
	w.session.Select(at, -1)
	w.changed()
}
