package pane

import (
	"image/color"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
)

// Place is a place that all panes show: S on the wall and, where the pointer
// is over the portrait or a bounce, P.
type Place struct {
	Shown Visibility
	S, P  float64
	HasP  Visibility
}

// Visibility says whether something is shown.
type Visibility uint8

// Hidden or Visible.
const (
	Hidden Visibility = iota
	Visible
)

// ring is the mark of a place on a wall: a small circle, and a thin line along
// the outgoing ray where there is one.
type ring struct {
	circle *canvas.Circle
	line   *canvas.Line
}

func newRing() ring {
	r := ring{canvas.NewCircle(color.Transparent), canvas.NewLine(color.Black)}
	r.circle.StrokeWidth, r.line.StrokeWidth = 1.6, 1.2
	r.hide()
	return r
}

func (r ring) objects() []fyne.CanvasObject { return []fyne.CanvasObject{r.circle, r.line} }

func (r ring) hide() {
	r.circle.Hide()
	r.line.Hide()
}

const ringRadius = 7

func (r ring) showAt(p fyne.Position, ink color.Color) {
	r.circle.StrokeColor = ink
	r.circle.Position1 = p.SubtractXY(ringRadius, ringRadius)
	r.circle.Position2 = p.AddXY(ringRadius, ringRadius)
	r.circle.Show()
	r.circle.Refresh()
}

func (r ring) point(from, to fyne.Position, ink color.Color) {
	r.line.StrokeColor = ink
	r.line.Position1, r.line.Position2 = from, to
	r.line.Show()
	r.line.Refresh()
}

// cross is the mark of a place on the portrait: a line at s from top to
// bottom, and one at p where there is one.
type cross struct{ at, level *canvas.Line }

func newCross() cross {
	c := cross{canvas.NewLine(color.Black), canvas.NewLine(color.Black)}
	c.at.StrokeWidth, c.level.StrokeWidth = 1, 1
	c.hide()
	return c
}

func (c cross) objects() []fyne.CanvasObject { return []fyne.CanvasObject{c.at, c.level} }

func (c cross) hide() {
	c.at.Hide()
	c.level.Hide()
}

func showLine(l *canvas.Line, a, b fyne.Position, ink color.Color) {
	l.StrokeColor = ink
	l.Position1, l.Position2 = a, b
	l.Show()
	l.Refresh()
}
