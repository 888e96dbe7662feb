package live

import (
	"context"
	"image"
	"image/color"
	"math"

	"cavitywright/render"
	"cavitywright/render/pixel"
	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/run"
	"cavitywright/table"
	"cavitywright/table/plane"
	"cavitywright/ui/session"

	"gonum.org/v1/gonum/spatial/r2"
)

// balls draws the rays and moves a ball along each.
type balls struct {
	req    *Request
	figure figure.Paths
	view   render.View
	static *image.RGBA
	canvas *pixel.Canvas
	all    []ball
	size   float64 // of the table
}

// ball is one orbit on the move: it flies from the vertex before to the last
// one of its track.
type ball struct {
	start  sim.Start
	hue    int
	walker *sim.Walker
	from   r2.Vec
	to     r2.Vec
	leg    float64 // length of this flight; +Inf for one that escaped, 0 for one that stopped
	gone   float64 // of it, flown
	stop   sim.Stop
	trail  []r2.Vec // the vertices behind, newest last
}

const (
	mostBalls    = 240  // balls on the table at once
	mostSegments = 3000 // ray segments drawn at once
	fullyDrawn   = 10   // rays up to which each is drawn for all its bounces
	trailed      = 40   // balls that carry a trail
	trailLength  = 0.45 // of the table's size
)

// show takes a request. Balls go on from where they are unless the table or
// its launches changed.
func (b *balls) show(r *Request, tr *sim.Tracer) {
	old := b.req
	b.req = r
	b.size = plane.Diagonal(r.Table.Bounds())
	if old == nil || old.Table != r.Table || old.Settings.Drawn != r.Settings.Drawn {
		b.launch(tr)
	}
	b.layout()
}

// launch opens every orbit and traces what is drawn of it: all but the sea.
func (b *balls) launch(tr *sim.Tracer) {
	study := b.req.Table.Design().Study
	b.all = b.all[:0]
	p := measure.NewPortrait(tr, study.Launches, 0)
	for i := range min(p.Orbits(), mostBalls) {
		b.all = append(b.all, newBall(tr, p.Start(i, nil), p.Hue(i)))
	}
	b.figure = figure.Paths{Unit: b.req.Table.Design().Unit.String()}
	drawn := measure.NewRays(tr, study.Launches, 0)
	if drawn.Orbits() == 0 || drawn.Hue(0) == measure.Sea || b.req.Settings.Drawn == 0 {
		return
	}
	// Of many rays each is drawn for a shorter while, so that one can still be
	// told from another.
	drawn.Each = max(4, min(b.req.Settings.Drawn, fullyDrawn*b.req.Settings.Drawn/drawn.Orbits()))
	drawn.Each = max(1, min(drawn.Each, mostSegments/drawn.Orbits()))
	tally, err := run.Run(context.Background(), run.Job{Tracer: tr, Measure: drawn, Seed: study.Seed})
	if err == nil {
		b.figure.Lines = tally.(*measure.RaysTally).Lines()
	}
}

func newBall(tr *sim.Tracer, s sim.Start, hue int) ball {
	b := ball{start: s, hue: hue, walker: tr.Walker()}
	b.open()
	return b
}

// open puts the ball back to its start.
func (b *ball) open() {
	first := b.walker.Open(b.start)
	b.to, b.stop, b.gone, b.trail = first.Point, first.Stop, 0, b.trail[:0]
	b.fly()
}

// fly begins the next flight.
func (b *ball) fly() {
	b.from = b.to
	if b.stop != sim.Going {
		b.leg = 0
		return
	}
	n := b.walker.Next(0.5)
	b.to, b.leg, b.stop = n.Point, n.Flight, n.Stop
	if math.IsInf(n.Flight, 0) {
		b.to = r2.Add(n.Point, n.Dir)
	}
}

// at is where the ball is.
func (b *ball) at() r2.Vec {
	if b.leg == 0 {
		return b.from
	}
	if math.IsInf(b.leg, 0) {
		return r2.Add(b.from, r2.Scale(b.gone, r2.Sub(b.to, b.from)))
	}
	return plane.Lerp(b.from, b.to, b.gone/b.leg)
}

// advance moves the balls on by dt seconds; false where none moves.
func (b *balls) advance(dt float64) bool {
	if !b.moving() {
		return false
	}
	step := math.Min(dt, 0.1) * b.req.Settings.Pace * b.size
	for i := range b.all {
		b.all[i].move(step, trailLength*b.size)
	}
	return true
}

// awayFor is how long, in lengths of its trail, a ball that left or stopped
// stays away before it is launched anew.
const awayFor = 4

// mostFlights bounds the bounces of a ball from frame to frame, in a cusp or
// along a wall.
const mostFlights = 64

func (b *ball) move(step, trail float64) {
	b.gone += step
	for range mostFlights {
		if b.gone < b.leg || b.leg == 0 {
			break
		}
		b.gone -= b.leg
		b.trail = append(b.trail, b.to)
		b.fly()
	}
	if b.leg == 0 || math.IsInf(b.leg, 0) {
		if b.gone > awayFor*trail {
			b.open() // it left, or stopped, some time ago
		}
	}
	b.cut(trail)
}

// cut drops the vertices of the trail that lie farther back than length.
func (b *ball) cut(length float64) {
	last, sum := b.at(), 0.0
	for i := len(b.trail) - 1; i >= 0; i-- {
		sum += r2.Norm(r2.Sub(last, b.trail[i]))
		last = b.trail[i]
		if sum > length {
			b.trail = append(b.trail[:0], b.trail[i:]...)
			return
		}
	}
}

func (b *balls) moving() bool {
	return b.req != nil && b.req.Settings.Motion == session.Running && len(b.all) > 0
}

// View is what the rays pane of the given size shows: the request's view, or
// one that fits the table.
func View(t *table.Table, v render.View, size image.Point, look render.Look) render.View {
	if v.Scale > 0 {
		return v
	}
	b, box := t.Bounds(), render.NewBox(0, 0, float64(size.X), float64(size.Y))
	room := box.Inset(1.5 * look.Margin)
	room.Max.Y -= 1.5 * look.Small // for the scale bar
	room.Min.X += 2 * look.Small   // for the name of s = 0
	room.Max.X -= 2 * look.Small
	v = render.Fit(render.Extent{X0: b.Min.X, Y0: b.Min.Y, X1: b.Max.X, Y1: b.Max.Y}, room, look)
	v.Box = box
	return v
}

// ScaleBox is where a pane of the given size carries its scale bar: along its
// lower edge.
func ScaleBox(size image.Point, look render.Look) render.Box {
	h := 2 * look.Small
	return render.NewBox(0, float64(size.Y)-h, float64(size.X), h)
}

// layout draws what stands still.
func (b *balls) layout() {
	r := b.req
	b.view = View(r.Table, r.RaysView, r.Rays, r.Look)
	b.static = sized(b.static, r.Rays)
	if b.canvas == nil {
		b.canvas = pixel.New(b.static)
	}
	b.canvas.Reset(b.static)
	b.canvas.Clear(r.Look.Paper)
	f := b.figure
	f.Lines = append(measure.Outline(r.Table, 0.2/b.view.Scale), b.figure.Lines...)
	render.DrawPaths(b.canvas, f, b.view, r.Look)
	render.DrawScaleBar(b.canvas, f.Unit, b.view, ScaleBox(r.Rays, r.Look), r.Look)
}

// draw lays trails and balls over it.
func (b *balls) draw(img *image.RGBA) *image.RGBA {
	if b.req == nil || b.static == nil {
		return nil
	}
	img = sized(img, b.req.Rays)
	copy(img.Pix, b.static.Pix)
	b.canvas.Reset(img)
	look := b.req.Look
	for i := range b.all {
		o := &b.all[i]
		if i < trailed && o.hue >= 0 {
			b.drawTrail(o, look)
		}
	}
	for i := range b.all {
		o := &b.all[i]
		at := b.view.ToCanvas(o.at().X, o.at().Y)
		radius := 4.5 * look.Hair
		if o.hue < 0 {
			radius = 2 * look.Hair
		} else {
			b.canvas.Dots(render.Dots{X: []float64{at.X}, Y: []float64{at.Y}, Radius: radius + 1.5*look.Hair, Color: look.Paper})
		}
		b.canvas.Dots(render.Dots{X: []float64{at.X}, Y: []float64{at.Y}, Radius: radius, Color: look.Orbit(o.hue)})
	}
	return img
}

// drawTrail draws the way behind a ball, fading with its length.
func (b *balls) drawTrail(o *ball, look render.Look) {
	left := trailLength * b.size
	p := o.at()
	for i := len(o.trail) - 1; i >= 0 && left > 0; i-- {
		q := o.trail[i]
		d := r2.Norm(r2.Sub(p, q))
		b.fade(p, q, d, left, look.Orbit(o.hue), look)
		left -= d
		p = q
	}
	if left > 0 && len(o.trail) == 0 {
		b.fade(p, o.from, r2.Norm(r2.Sub(p, o.from)), left, look.Orbit(o.hue), look)
	}
}

// fadeSteps is the number of strokes in which a trail's opacity falls.
const fadeSteps = 6

// fade strokes from p to q, of length d, in strokes that fade with the length
// of trail left.
func (b *balls) fade(p, q r2.Vec, d, left float64, col color.RGBA, look render.Look) {
	whole := trailLength * b.size
	n := max(1, int(math.Ceil(fadeSteps*d/whole)))
	for k := range n {
		f0, f1 := float64(k)/float64(n), float64(k+1)/float64(n)
		rest := (left - d*(f0+f1)/2) / whole
		if rest <= 0 {
			return
		}
		a, c := plane.Lerp(p, q, f0), plane.Lerp(p, q, f1)
		b.canvas.Stroke(render.Segment(b.view.ToCanvas(a.X, a.Y), b.view.ToCanvas(c.X, c.Y)),
			render.Pen{Width: 2.4 * look.Hair, Color: render.Fade(col, rest)})
	}
}
