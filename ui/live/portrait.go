package live

import (
	"context"
	"image"
	"image/color"
	"image/draw"
	"reflect"
	"time"

	"cavitywright/render"
	"cavitywright/render/pixel"
	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/run"
	"cavitywright/table"
)

// portrait fills the portrait pane in rounds.
type portrait struct {
	req     *Request
	tracer  *sim.Tracer
	section measure.Section
	axes    figure.Dots
	plot    render.Plot
	static  *image.RGBA // axes, below the dots
	canvas  *pixel.Canvas
	density pixel.Density
	dots    *image.RGBA
	layer   layer
	ghost   ghost

	next    measure.Portrait // what the next round runs
	each    int              // bounces an orbit has so far
	rounds  int
	bounces int64
	stops   measure.Stops
	few     bool    // so few orbits of their own that each can be drawn bold
	pace    float64 // bounces a second in the last round
}

const (
	// fewOrbits is the number of orbits of their own up to which their dots are
	// drawn larger than the sea's.
	fewOrbits = 4
	// firstRound is the bounces of the first round: enough to tell an island
	// from the sea, few enough for the first frame.
	firstRound = 120
	// roundBounces bounds the work of a round on a fast table to some 10 ms.
	roundBounces = 100_000
)

// show takes a request; the points stay where nothing they depend on changed.
func (p *portrait) show(r *Request) {
	old := p.req
	p.req = r
	if old == nil || old.Table != r.Table {
		p.tracer = sim.Compile(r.Table)
		p.section = measure.NewSection(r.Table)
	}
	same := old != nil && old.Section == r.Section && old.Portrait == r.Portrait && old.Table == r.Table
	if !mapped(old, r) {
		p.layer.mosaic = nil // at once, and anew when the axes are laid out
		defer func() {
			w, h := frameSize(p.plot)
			p.layer.begin(r, p.tracer, w, h)
		}()
	}
	defer func() {
		w, h := frameSize(p.plot)
		p.ghost.show(r, w, h)
	}()
	if same && reflect.DeepEqual(old.Look, r.Look) {
		return
	}
	p.layout()
	if !same {
		p.restart()
	}
}

// mapped reports whether the map of one request is that of the next, as far as
// the tables, the axes and the size go.
func mapped(old, r *Request) bool {
	return old != nil && old.Settings.Layer == r.Settings.Layer && old.Section == r.Section && old.Portrait == r.Portrait &&
		old.Table.SameWall(r.Table) && old.Table.Design().Study.Display == r.Table.Design().Study.Display && old.Look.Sizes == r.Look.Sizes
}

func (p *portrait) restart() {
	study := p.req.Table.Design().Study
	p.density.Clear()
	p.each, p.rounds, p.bounces, p.stops = 0, 0, 0, measure.Stops{}
	p.next = measure.NewPortrait(p.tracer, study.Launches, 0)
	p.few = p.next.Coloured().Orbits() <= fewOrbits
}

// layout draws the axes.
func (p *portrait) layout() {
	r := p.req
	p.axes = p.section.Axes(r.Table, r.Section)
	p.plot = Layout(r.Table, r.Section, r.Portrait, r.Look)
	p.static = sized(p.static, r.Portrait)
	if p.canvas == nil {
		p.canvas = pixel.New(p.static)
	}
	p.canvas.Reset(p.static)
	p.canvas.Clear(r.Look.Paper)
	render.DrawAxes(p.canvas, p.axes, p.plot, r.Look)
	w, h := frameSize(p.plot)
	if dw, dh := p.density.Size(); dw != w || dh != h {
		p.density.Resize(w, h)
		p.restart()
	}
}

// Layout is where the portrait pane of the given size in pixels shows what.
func Layout(t *table.Table, g table.Region, size image.Point, look render.Look) render.Plot {
	axes := measure.NewSection(t).Axes(t, g)
	return render.LayoutDots(axes, render.NewBox(0, 0, float64(size.X), float64(size.Y)), look)
}

func frameSize(p render.Plot) (w, h int) {
	return max(int(p.Frame.W()), 1), max(int(p.Frame.H()), 1)
}

// filling reports whether there is more to fill.
func (p *portrait) filling(hold Filling) bool {
	return p.req != nil && hold == Fills && (p.dotting() || p.layer.filling() || p.ghost.filling())
}

// dotting reports whether orbits are to be followed further.
func (p *portrait) dotting() bool {
	return p.next.Orbits() > 0 && p.each < p.req.Table.Design().Study.Bounces
}

// fill runs a round. The first is run whatever holds.
func (p *portrait) fill(fresh bool, hold Filling) bool {
	dotted := p.dot(fresh, hold)
	if p.req == nil || fresh || hold != Fills {
		return dotted // the first frame after a change has no map yet
	}
	dotted = p.ghost.fill(p.plot) || dotted
	return p.layer.fill(p.tracer, p.req.Table.Design().Study.Seed) || dotted
}

func (p *portrait) dot(fresh bool, hold Filling) bool {
	if p.req == nil || p.next.Orbits() == 0 || p.rounds > 0 && !(hold == Fills && p.dotting()) {
		return false
	}
	if p.rounds > 0 && fresh {
		return false // only the look changed
	}
	most := p.req.Table.Design().Study.Bounces
	n := firstRound
	if p.rounds > 0 {
		n = max(40, p.each/12) // fills while one looks, ever faster
	}
	n = max(1, min(n, roundBounces/p.next.Orbits(), most-p.each))
	p.next.Each = n
	begun := time.Now()
	before := p.bounces
	tally, err := run.Run(context.Background(), run.Job{Tracer: p.tracer, Measure: p.next, Seed: p.req.Table.Design().Study.Seed})
	if err != nil {
		return false
	}
	p.keep(tally.(*measure.PortraitTally))
	if dt := time.Since(begun).Seconds(); dt > 0 {
		p.pace = float64(p.bounces-before) / dt
	}
	p.each += n
	p.rounds++
	return true
}

// keep counts the points of a round.
func (p *portrait) keep(t *measure.PortraitTally) {
	for _, set := range t.Sets() {
		p.bounces += int64(len(set.X))
		for i := range set.X {
			x, y := p.section.At(set.X[i], set.Y[i])
			px, py := p.plot.ToX(x)-p.plot.Frame.Min.X, p.plot.ToY(y)-p.plot.Frame.Min.Y
			p.density.Add(px, py, set.Hue)
			if set.Hue >= 0 && p.few { // an orbit of its own stands out from the sea
				p.density.Add(px+1, py, set.Hue)
				p.density.Add(px, py+1, set.Hue)
				p.density.Add(px+1, py+1, set.Hue)
			}
		}
	}
	for i, n := range t.Stops {
		p.stops[i] += n
	}
	p.next = p.next.Continued(t.Ends(), 0)
}

// draw lays the dots over the axes.
func (p *portrait) draw(img *image.RGBA) *image.RGBA {
	if p.req == nil || p.static == nil {
		return nil
	}
	img = sized(img, p.req.Portrait)
	copy(img.Pix, p.static.Pix)
	w, h := frameSize(p.plot)
	p.dots = sized(p.dots, image.Pt(w, h))
	at := image.Pt(int(p.plot.Frame.Min.X), int(p.plot.Frame.Min.Y))
	frame := image.Rectangle{Min: at, Max: at.Add(image.Pt(w, h))}
	look := p.req.Look
	if under := p.layer.paint(w, h, look); under != nil {
		draw.Draw(img, frame, under, image.Point{}, draw.Src)
		look.Sea = color.RGBA{} // the map says more of it than its dots, which would hide it
	}
	p.ghost.draw(img, frame, p.req.Look)
	p.density.Shade(p.dots, look)
	draw.Draw(img, frame, p.dots, image.Point{}, draw.Over)
	p.canvas.Reset(img)
	render.DrawMarks(p.canvas, p.axes, p.plot, p.req.Look)
	p.layer.scale(p.canvas, p.plot, p.req.Look)
	return img
}

func (p *portrait) status() Status {
	s := Status{Bounces: p.bounces, PerSecond: p.pace, Undecided: p.stops.Undecided(), Lost: p.stops[sim.Lost], Escaped: p.stops[sim.Escaped], Mapped: p.layer.done()}
	if p.req != nil {
		s.Revision = p.req.Revision
		if most := p.req.Table.Design().Study.Bounces; most > 0 && p.next.Orbits() > 0 {
			s.Done = float64(p.each) / float64(most)
		} else {
			s.Done = 1
		}
	}
	return s
}
