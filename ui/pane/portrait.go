package pane

import (
	"fmt"
	"math"
	"strings"

	"cavitywright/render"
	"cavitywright/sim/measure"
	"cavitywright/table"
	"cavitywright/ui/live"
	"cavitywright/ui/session"
	"cavitywright/ui/tool"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"
)

// Portrait is the pane of the section (s, p).
type Portrait struct {
	*Surface
	desk *Desk
	tool *tool.Portrait
	mark cross
}

// NewPortrait is the portrait's pane on a desk.
func NewPortrait(d *Desk) *Portrait {
	p := &Portrait{desk: d, tool: tool.NewPortrait(d.Session), mark: newCross()}
	p.Surface = newSurface(p, d.Engine.PortraitFrames.Take, func(int, int) { d.Changed() })
	p.Surface.keysElse = func(k fyne.KeyName) { d.Key(k) }
	p.Surface.marks = p.mark.objects()
	p.Surface.cursor = desktop.CrosshairCursor
	return p
}

func (p *Portrait) plot() render.Plot {
	return live.Layout(p.desk.Session.Table(), p.desk.Session.Section, p.Pixels(), p.desk.Look)
}

// at is the state under a pixel: s as a fraction of L, and p. inside says
// whether the pixel lies within the axes.
func (p *Portrait) at(x, y float64) (s, sine float64, inside bool) {
	plot := p.plot()
	t := p.desk.Session.Table()
	s, sine = measure.NewSection(t).Back(plot.FromX(x), plot.FromY(y))
	return s / t.Length(), sine, plot.Frame.Contains(render.Point{X: x, Y: y})
}

// Press launches at (s, p).
func (p *Portrait) Press(x, y float64, _ tool.Keys) {
	if s, sine, inside := p.at(x, y); inside {
		p.tool.Press(s, sine)
	}
}

// Drag sweeps a row of launches.
func (p *Portrait) Drag(x, y float64, k tool.Keys) {
	s, sine, _ := p.at(x, y)
	p.tool.Drag(s, sine, k)
}

// Release keeps them.
func (p *Portrait) Release() { p.tool.Release() }

// Cancel takes them back.
func (p *Portrait) Cancel() { p.tool.Cancel() }

// Hover points at (s, p), or at the wall from the strip below.
func (p *Portrait) Hover(x, y float64) {
	s, sine, inside := p.at(x, y)
	t := p.desk.Session.Table()
	switch {
	case s < 0 || s >= 1:
		p.Leave()
	case inside:
		p.desk.Point(Place{Shown: Visible, S: s * t.Length(), P: sine, HasP: Visible})
		p.desk.Note(stateNote(t, s*t.Length(), sine))
		p.desk.Hint("Press to launch at this place and angle, pull to sweep a row of launches; wheel zooms.")
	default:
		p.desk.Point(Place{Shown: Visible, S: s * t.Length()})
		p.desk.Note(wallNote(t, s*t.Length()))
		p.desk.Hint("The wall, unrolled: the colour under s is the colour of the wall.")
	}
}

// stateNote are the numbers of a state.
func stateNote(t *table.Table, s, p float64) string {
	if math.Abs(p) > 1 {
		return ""
	}
	shown := p
	if t.Design().Study.Display.Sense == table.Clockwise {
		shown = -p
	}
	return placeNote(t, s) + strings.ReplaceAll(fmt.Sprintf(" · p = %.5f · χ = %.3f°", shown, math.Asin(shown)*180/math.Pi), "-", "−")
}

// Leave takes the marks away.
func (p *Portrait) Leave() {
	p.desk.Point(Place{})
	p.desk.Hint("")
	p.desk.Note("")
}

// Double does nothing of its own.
func (p *Portrait) Double(x, y float64) { p.Press(x, y, 0) }

// Pan moves the region.
func (p *Portrait) Pan(dx, dy float64) {
	f := p.plot().Frame
	sign := p.sense()
	p.desk.Session.Section = session.PannedSection(p.desk.Session.Section, -sign*dx/f.W(), sign*dy/f.H())
	p.desk.Changed()
}

// sense is -1 where the display runs clockwise, which turns both axes about.
func (p *Portrait) sense() float64 {
	if p.desk.Session.Table().Design().Study.Display.Sense == table.Clockwise {
		return -1
	}
	return 1
}

// Zoom enlarges the region about the pointer.
func (p *Portrait) Zoom(x, y, k float64) {
	g := p.desk.Session.Section
	s, sine, _ := p.at(x, y)
	fx, fy := (s-g.S0)/(g.S1-g.S0), (sine-g.P0)/(g.P1-g.P0)
	fx, fy = math.Min(math.Max(fx, 0), 1), math.Min(math.Max(fy, 0), 1)
	p.desk.Session.Section = session.ZoomedSection(g, fx, fy, 1/k)
	p.desk.Changed()
}

// Key shows the whole section on F.
func (p *Portrait) Key(name fyne.KeyName) bool {
	if name != fyne.KeyF {
		return false
	}
	p.desk.Session.Section = table.WholeSection()
	p.desk.Changed()
	return true
}

// Point shows a place.
func (p *Portrait) Point(at Place) {
	if at.Shown == Hidden {
		p.mark.hide()
		return
	}
	plot := p.plot()
	x, y := measure.NewSection(p.desk.Session.Table()).At(at.S, at.P)
	px, py := plot.ToX(x), plot.ToY(y)
	f := plot.Frame
	if px < f.Min.X || px > f.Max.X {
		p.mark.hide()
		return
	}
	showLine(p.mark.at, p.unit(px, f.Min.Y), p.unit(px, plot.Strip.Max.Y), p.desk.Look.Ink)
	if at.HasP == Hidden || py < f.Min.Y || py > f.Max.Y {
		p.mark.level.Hide()
		return
	}
	showLine(p.mark.level, p.unit(f.Min.X, py), p.unit(f.Max.X, py), render.Fade(p.desk.Look.Ink, 0.5))
}
