package pane

import (
	"fmt"
	"math"
	"strings"

	"cavitywright/render"
	"cavitywright/table"
	"cavitywright/ui/live"
	"cavitywright/ui/tool"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"
	"gonum.org/v1/gonum/spatial/r2"
)

// Rays is the pane in which balls fly.
type Rays struct {
	*Surface
	desk *Desk
	tool *tool.Rays
	View render.View // one of no Scale fits the table
	mark ring
}

// NewRays is the rays' pane on a desk.
func NewRays(d *Desk) *Rays {
	r := &Rays{desk: d, tool: tool.NewRays(d.Session), mark: newRing()}
	r.Surface = newSurface(r, d.Engine.RaysFrames.Take, func(int, int) {
		r.View = render.View{} // another size is fitted anew
		d.Changed()
	})
	r.Surface.keysElse = func(k fyne.KeyName) { d.Key(k) }
	r.Surface.marks = r.mark.objects()
	r.Surface.cursor = desktop.CrosshairCursor
	return r
}

// reachUnits is how near, in units of the window, the pointer takes hold.
const reachUnits = 9

func (r *Rays) view() render.View {
	return live.View(r.desk.Session.Table(), r.View, r.Pixels(), r.desk.Look)
}

// at is the place of the table under a pixel, and the pointer's reach there.
func (r *Rays) at(x, y float64) (p r2.Vec, reach float64) {
	v := r.view()
	px, py := v.FromCanvas(render.Point{X: x, Y: y})
	return r2.Vec{X: px, Y: py}, reachUnits * r.Scale() / v.Scale
}

// Press, Drag, Release and Cancel launch.
func (r *Rays) Press(x, y float64, _ tool.Keys) {
	r.desk.Point(Place{})
	p, reach := r.at(x, y)
	r.tool.Press(p, reach)
}

// Drag pulls the direction.
func (r *Rays) Drag(x, y float64, k tool.Keys) {
	p, _ := r.at(x, y)
	r.tool.Drag(p, k)
}

// Release launches.
func (r *Rays) Release() { r.tool.Release() }

// Cancel takes the launch back.
func (r *Rays) Cancel() { r.tool.Cancel() }

// Hover says what a press would do and points at the wall.
func (r *Rays) Hover(x, y float64) {
	p, reach := r.at(x, y)
	r.desk.Hint(r.tool.Hint(p, reach))
	t := r.desk.Session.Table()
	if s, d := t.Nearest(p); d <= reach {
		r.desk.Point(Place{Shown: Visible, S: s})
		r.desk.Note(wallNote(t, s))
		return
	}
	r.desk.Point(Place{})
	r.desk.Note(pointNote(t, p))
}

// Leave takes the marks away.
func (r *Rays) Leave() {
	r.desk.Point(Place{})
	r.desk.Hint("")
	r.desk.Note("")
}

// Double does nothing here.
func (r *Rays) Double(x, y float64) { r.Press(x, y, 0) }

// Pan moves the view.
func (r *Rays) Pan(dx, dy float64) {
	r.View = r.view().Shifted(dx, dy)
	r.desk.Changed()
}

// Zoom enlarges the view.
func (r *Rays) Zoom(x, y, k float64) {
	r.View = r.view().Zoomed(k, render.Point{X: x, Y: y})
	r.desk.Changed()
}

// Key fits the view on F.
func (r *Rays) Key(name fyne.KeyName) bool {
	if name != fyne.KeyF {
		return false
	}
	r.View = render.View{}
	r.desk.Changed()
	return true
}

// Point shows a place.
func (r *Rays) Point(p Place) {
	showPlace(r.Surface, r.mark, r.view(), r.desk, p)
}

// showPlace puts the ring, and the ray's direction, at a place of the wall.
func showPlace(s *Surface, m ring, v render.View, d *Desk, p Place) {
	if p.Shown == Hidden {
		m.hide()
		return
	}
	t := d.Session.Table()
	f := t.At(t.Wrap(p.S))
	c := v.ToCanvas(f.Point.X, f.Point.Y)
	at := s.unit(c.X, c.Y)
	m.showAt(at, d.Look.Ink)
	if p.HasP == Hidden || math.Abs(p.P) >= 1 {
		m.line.Hide()
		return
	}
	dir := r2.Add(r2.Scale(p.P, f.Tangent), r2.Scale(math.Sqrt(1-p.P*p.P), f.Normal()))
	const long = 42
	m.point(at, at.AddXY(float32(long*dir.X), float32(-long*dir.Y)), d.Look.Ink)
}

// wallNote are the numbers of a place on the wall.
func wallNote(t *table.Table, s float64) string {
	f := t.At(s)
	bend := "flat"
	if k := f.Curvature; k > 1e-9/t.Length() {
		bend = fmt.Sprintf("focusing, radius %.4g %s", 1/k, t.Design().Unit)
	} else if k < -1e-9/t.Length() {
		bend = fmt.Sprintf("dispersing, radius %.4g %s", -1/k, t.Design().Unit)
	}
	return placeNote(t, s) + " · " + bend + lawNote(t, s)
}

// placeNote is a place on the wall in the convention of the display.
func placeNote(t *table.Table, s float64) string {
	sense := ""
	if t.Design().Study.Display.Sense == table.Clockwise {
		s, sense = t.Length()-s, ", clockwise"
	}
	return fmt.Sprintf("s = %.5g %s (s/L = %.4f%s)", s, t.Design().Unit, s/t.Length(), sense)
}

func pointNote(t *table.Table, p r2.Vec) string {
	u := t.Design().Unit
	return strings.ReplaceAll(fmt.Sprintf("x = %.5g %s, y = %.5g %s", p.X, u, p.Y, u), "-", "−")
}
