package pane

import (
	"image"
	"reflect"

	"cavitywright/render"
	"cavitywright/render/pixel"
	"cavitywright/sim/figure"
	"cavitywright/ui/tool"

	"fyne.io/fyne/v2"
)

// Figure is a pane that shows one figure, drawn to its size.
type Figure struct {
	*Surface
	desk    *Desk
	shown   figure.Figure // nil for none
	picture *image.RGBA
	look    render.Look // that the picture is drawn in
	// Picked, if set, is told the place of a press in the figure's own
	// coordinates, and Pointed the place that the pointer is over.
	Picked, Pointed func(x, y float64)
	// Hinted is what a press would do, for the status line.
	Hinted string
}

// NewFigure is an empty pane.
func NewFigure(d *Desk) *Figure {
	f := &Figure{desk: d}
	f.Surface = newSurface(f, func() *image.RGBA { return f.picture }, func(int, int) { f.draw() })
	f.Surface.keysElse = func(k fyne.KeyName) { d.Key(k) }
	return f
}

// Scrolls lets the wheel scroll what the figure lies in.
func (f *Figure) Scrolls(in interface{ Scrolled(*fyne.ScrollEvent) }) { f.wheelElse = in.Scrolled }

// Set shows a figure; nil shows none. The figure must not change afterwards.
func (f *Figure) Set(fig figure.Figure) {
	f.shown = fig
	f.draw()
	f.Show()
}

// Redraw draws the figure anew where the look or the size is another one.
func (f *Figure) Redraw() {
	if f.picture == nil || f.picture.Rect.Size() != f.Pixels() || !reflect.DeepEqual(f.look, f.desk.Look) {
		f.Set(f.shown)
	}
}

// draw paints the figure at the pane's size.
func (f *Figure) draw() {
	px := f.Pixels()
	if px.X < 2 || px.Y < 2 {
		return
	}
	img := image.NewRGBA(image.Rectangle{Max: px})
	c := pixel.New(img)
	c.Clear(f.desk.Look.Paper)
	if f.shown != nil {
		render.Draw(c, f.shown, f.box(), f.desk.Look)
	}
	f.picture, f.look = img, f.desk.Look
}

func (f *Figure) box() render.Box {
	px := f.Pixels()
	return render.NewBox(0, 0, float64(px.X), float64(px.Y))
}

// at is the place under a pixel in the figure's coordinates.
func (f *Figure) at(x, y float64) (fx, fy float64, inside bool) {
	if f.shown == nil {
		return 0, 0, false
	}
	p, ok := render.PlotOf(f.shown, f.box(), f.desk.Look)
	if !ok {
		return 0, 0, false
	}
	return p.FromX(x), p.FromY(y), p.Frame.Contains(render.Point{X: x, Y: y})
}

// Press picks a place.
func (f *Figure) Press(x, y float64, _ tool.Keys) {
	if fx, fy, inside := f.at(x, y); inside && f.Picked != nil {
		f.Picked(fx, fy)
	}
}

// Hover points at a place.
func (f *Figure) Hover(x, y float64) {
	f.desk.Hint(f.Hinted)
	if fx, fy, inside := f.at(x, y); inside && f.Pointed != nil {
		f.Pointed(fx, fy)
	}
}

// Leave forgets the place.
func (f *Figure) Leave() { f.desk.Hint("") }

// Double is a press.
func (f *Figure) Double(x, y float64) { f.Press(x, y, 0) }

// Drag, Release, Cancel, Pan, Zoom and Key do nothing here.
func (f *Figure) Drag(float64, float64, tool.Keys) {}

// Release does nothing.
func (f *Figure) Release() {}

// Cancel does nothing.
func (f *Figure) Cancel() {}

// Pan does nothing.
func (f *Figure) Pan(float64, float64) {}

// Zoom does nothing.
func (f *Figure) Zoom(float64, float64, float64) {}

// Key does nothing.
func (f *Figure) Key(fyne.KeyName) bool { return false }
