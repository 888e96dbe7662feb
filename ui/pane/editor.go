package pane

import (
	"image"
	"time"

	"cavitywright/render"
	"cavitywright/render/pixel"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/table"
	"cavitywright/ui/live"
	"cavitywright/ui/session"
	"cavitywright/ui/tool"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"
	"gonum.org/v1/gonum/spatial/r2"
)

// Editor is the pane in which the table is drawn and reshaped.
type Editor struct {
	*Surface
	desk   *Desk
	tool   *tool.Editor
	mark   ring
	breath ring
	legend int // the corner that the legend of the coats stands in

	breathing *fyne.Animation
	picture   *image.RGBA
	canvas    *pixel.Canvas
	outline   []figure.Line
	of        *table.Table // whose outline it is, drawn at scale
	scale     float64
	ghost     ghost
}

// NewEditor is the editor's pane on a desk.
func NewEditor(d *Desk) *Editor {
	e := &Editor{desk: d, tool: tool.NewEditor(d.Session), mark: newRing(), breath: newRing()}
	d.Tool = e.tool
	e.Surface = newSurface(e, func() *image.RGBA { return e.picture }, func(int, int) {
		d.Session.Editor = render.View{} // another size is fitted anew
		e.Redraw()
		d.Changed()
		e.Again()
	})
	e.Surface.keysElse = func(k fyne.KeyName) { d.Key(k) }
	e.Surface.marks = append(e.mark.objects(), e.breath.objects()...)
	return e
}

// Tool is the editor's pointer, for commands that do not come from it.
func (e *Editor) Tool() *tool.Editor { return e.tool }

func (e *Editor) view() render.View {
	return live.View(e.desk.Session.Table(), e.desk.Session.Editor, e.Pixels(), e.desk.Look)
}

func (e *Editor) at(x, y float64) (p r2.Vec, reach float64) {
	v := e.view()
	px, py := v.FromCanvas(render.Point{X: x, Y: y})
	return r2.Vec{X: px, Y: py}, reachUnits * e.Scale() / v.Scale
}

// gridPx is the least distance of the grid's lines in units of the window.
const gridPx = 14

// step is the grid's step in table units, 0 where snapping is off.
func (e *Editor) step() float64 {
	if e.desk.Session.Settings.Snap == session.SnapOff {
		return 0
	}
	return session.GridStep(e.view().Scale, gridPx*e.Scale())
}

// hold keeps the view still while something is dragged: it must not follow the
// table's size.
func (e *Editor) hold() {
	if e.desk.Session.Editor.Scale == 0 {
		e.desk.Session.Editor = e.view()
	}
}

// Press takes hold, or draws.
func (e *Editor) Press(x, y float64, k tool.Keys) {
	e.hold()
	e.stopBreath()
	e.desk.Point(Place{})
	p, reach := e.at(x, y)
	e.tool.Step = e.step()
	e.tool.Press(p, reach, k)
	e.sayRefusal()
}

// sayRefusal says why the last command was refused.
func (e *Editor) sayRefusal() {
	if err := e.desk.Session.Refusal; err != nil {
		e.desk.Say(err.Error())
	}
}

// Drag follows.
func (e *Editor) Drag(x, y float64, k tool.Keys) {
	p, _ := e.at(x, y)
	e.tool.Drag(p, e.step(), k)
	e.sayRefusal()
}

// Release lets go.
func (e *Editor) Release() {
	if err := e.tool.Release(); err != nil {
		e.desk.Say(err.Error())
	}
}

// Cancel takes back what was not released.
func (e *Editor) Cancel() { e.tool.Cancel() }

// Hover says what a press would do and points at the wall.
func (e *Editor) Hover(x, y float64) {
	p, reach := e.at(x, y)
	e.tool.Hover(p)
	e.desk.Hint(e.tool.Hint(p, reach))
	e.cursor = desktop.DefaultCursor
	if _, ok := e.tool.HandleAt(p, reach); ok {
		e.cursor = desktop.PointerCursor
	} else if e.desk.Session.Settings.Tool != session.Hand {
		e.cursor = desktop.CrosshairCursor
	}
	t := e.desk.Session.Table()
	if s, d := t.Nearest(p); d <= reach {
		e.desk.Point(Place{Shown: Visible, S: s})
		e.desk.Note(wallNote(t, s))
		return
	}
	e.desk.Point(Place{})
	e.desk.Note(pointNote(t, p))
}

// Leave takes the marks away.
func (e *Editor) Leave() {
	e.desk.Point(Place{})
	e.desk.Hint("")
	e.desk.Note("")
}

// Double adds a node, or closes a chain.
func (e *Editor) Double(x, y float64) {
	p, reach := e.at(x, y)
	e.tool.Double(p, reach)
	e.sayRefusal()
}

// Pan moves the view.
func (e *Editor) Pan(dx, dy float64) {
	e.desk.Session.Editor = e.view().Shifted(dx, dy)
	e.Redraw()
}

// Zoom enlarges the view.
func (e *Editor) Zoom(x, y, k float64) {
	e.desk.Session.Editor = e.view().Zoomed(k, render.Point{X: x, Y: y})
	e.Redraw()
}

// Key: Delete takes out, Enter closes a chain, F fits the view.
func (e *Editor) Key(name fyne.KeyName) bool {
	switch name {
	case fyne.KeyDelete, fyne.KeyBackspace:
		if err := e.tool.Delete(); err != nil {
			e.desk.Say(err.Error())
		}
	case fyne.KeyReturn, fyne.KeyEnter:
		if err := e.tool.CloseChain(); err != nil {
			e.desk.Say(err.Error())
		}
	case fyne.KeyF:
		e.desk.Session.Editor = render.View{}
		e.Redraw()
	default:
		return false
	}
	return true
}

// Point shows a place.
func (e *Editor) Point(p Place) { showPlace(e.Surface, e.mark, e.view(), e.desk, p) }

// Redraw draws the picture anew and shows it.
func (e *Editor) Redraw() {
	size := e.Pixels()
	if size.X < 2 || size.Y < 2 {
		return
	}
	if e.picture == nil || e.picture.Rect.Size() != size {
		e.picture = image.NewRGBA(image.Rectangle{Max: size})
	}
	if e.canvas == nil {
		e.canvas = pixel.New(e.picture)
	}
	e.canvas.Reset(e.picture)
	look := e.desk.Look
	e.canvas.Clear(look.Paper)
	v := e.view()
	t := e.desk.Session.Table()
	if e.of != t || e.scale != v.Scale {
		e.outline, e.of, e.scale = measure.Outline(t, 0.2/v.Scale), t, v.Scale
	}
	f := figure.Paths{Unit: t.Design().Unit.String(), Lines: e.outline}
	e.drawGrid(v, look)
	e.drawGhost(v, look)
	render.DrawPaths(e.canvas, f, v, look)
	e.drawOrigin(t, v, look)
	e.drawLegend(v, look)
	e.drawHandles(v, look)
	e.drawFree(v, look)
	e.drawDraft(v, look)
	e.drawRefusal(v, look)
	render.DrawScaleBar(e.canvas, f.Unit, v, live.ScaleBox(size, look), look)
	e.Show()
}

// Breathe lets a ring about the topmost handle breathe, so that a newcomer
// sees what can be dragged.
func (e *Editor) Breathe() {
	all := e.desk.Session.Handles()
	if len(all) == 0 || e.Pixels().X < 2 {
		return
	}
	h := all[len(all)-1]
	a := fyne.NewAnimation(breathTime, func(f float32) {
		v := e.view()
		c := v.ToCanvas(h.At.X, h.At.Y)
		p := e.unit(c.X, c.Y)
		r := 8 + 16*f
		col := e.desk.Look.Accent
		col = render.Fade(col, float64(1-f))
		e.breath.circle.StrokeColor = col
		e.breath.circle.StrokeWidth = 3
		e.breath.circle.Position1, e.breath.circle.Position2 = p.SubtractXY(r, r), p.AddXY(r, r)
		e.breath.circle.Show()
		e.breath.circle.Refresh()
		if f >= 1 {
			e.breath.hide()
		}
	})
	a.RepeatCount = 2
	e.breathing = a
	a.Start()
}

// stopBreath ends it: the hand has found what to do.
func (e *Editor) stopBreath() {
	if e.breathing != nil {
		e.breathing.Stop()
		e.breathing = nil
		e.breath.hide()
	}
}

// breathTime is the time of one breath.
const breathTime = 1400 * time.Millisecond

// HandlePlaces are the places of the handles in units of the window, from the
// pane's corner.
func (e *Editor) HandlePlaces() []fyne.Position {
	if e.Pixels().X < 2 {
		return nil
	}
	if e.laysCoats() {
		return e.coatPlaces()
	}
	v := e.view()
	var all []fyne.Position
	for _, h := range e.desk.Session.Handles() {
		c := v.ToCanvas(h.At.X, h.At.Y)
		all = append(all, e.unit(c.X, c.Y))
	}
	return all
}
