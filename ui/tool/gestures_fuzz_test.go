package tool

import (
	"math"

	"cavitywright/table/edit"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/ui/session"

	"gonum.org/v1/gonum/spatial/r2"
)

// deed is one thing that a person may do, and how often beside the others.
type deed struct {
	name  string
	often int
	do    func(*person)
	make  func(*person) edit.Command // of a command of the session
}

// gestures are what the pointer can do, and the few commands about it.
var gestures = []deed{
	{name: "press", often: 14, do: func(p *person) { p.mindless(p.e.Press) }},
	{name: "drag", often: 40, do: func(p *person) { p.e.Drag(p.near(), p.step(), p.keys()) }},
	{name: "release", often: 14, do: func(p *person) { _ = p.e.Release() }},
	{name: "whole drag", often: 30, do: func(p *person) { p.wholeDrag(false) }},
	{name: "drag with something else on the way", often: 2, do: func(p *person) { p.wholeDrag(true) }},
	{name: "click", often: 12, do: func(p *person) { p.mindless(p.e.Press); _ = p.e.Release() }},
	{name: "hover", often: 8, do: func(p *person) { p.e.Hover(p.somewhere()) }},
	{name: "double click", often: 5, do: func(p *person) { p.e.Double(p.somewhere(), p.reach) }},
	{name: "escape", often: 4, do: (*person).escape},
	{name: "stroke", often: 2, do: (*person).stroke},
	{name: "draw nodes", often: 3, do: (*person).drawNodes},
	{name: "other tool", often: 8, do: func(p *person) { p.s.Settings.Tool = session.ToolName(p.rng.IntN(6)) }},
	{name: "pull in the rays", often: 8, do: (*person).pullRays},
	{name: "pull in the portrait", often: 6, do: (*person).pullPortrait},
	{name: "zoom the portrait", often: 3, do: func(p *person) {
		p.s.Section = session.ZoomedSection(p.s.Section, p.rng.Float64(), p.rng.Float64(), math.Exp(p.rng.NormFloat64()))
		p.s.Section = session.PannedSection(p.s.Section, p.rng.NormFloat64(), p.rng.NormFloat64())
	}},
	{name: "undo", often: 10, do: func(p *person) { p.s.Undo() }},
	{name: "redo", often: 7, do: func(p *person) { p.s.Redo() }},
	{name: "select", often: 6, do: func(p *person) {
		i := p.rng.IntN(len(p.s.Table().Design().Items)+1) - 1
		k := -1
		if i >= 0 {
			k = p.rng.IntN(len(p.s.Table().Design().Items[i].Shape.Handles())+1) - 1
		}
		p.s.Select(i, k)
	}},
	{name: "select a coat", often: 4, do: func(p *person) { p.s.SelectCoat(p.rng.IntN(len(p.s.Table().Design().Coats)+1) - 1) }},
	{name: "save", often: 2, do: func(p *person) {
		p.e.Cancel()
		p.s.Saved("document.cavity.json")
		if p.s.Unsaved() {
			p.fail("a document that was just saved counts as changed")
		}
	}},
	{name: "write and read back", often: 1, do: (*person).reopen},
}

// allDeeds are what can be done.
func allDeeds() []deed { return append(append([]deed{}, gestures...), commandDeeds...) }

func (p *person) mindless(press func(r2.Vec, float64, Keys)) {
	press(p.somewhere(), p.reach, p.keys())
}

func (p *person) keys() Keys { return Keys(p.rng.IntN(4) * p.rng.IntN(2)) }

// step is the grid's, or none.
func (p *person) step() float64 {
	if p.rng.IntN(2) == 0 {
		return 0
	}
	return session.GridStep(300/p.size, 8)
}

// somewhere is a place for the pointer, mostly one where something is: a
// handle, the wall, a joint, the grips around a shape, a handle of a coat.
func (p *person) somewhere() r2.Vec {
	t := p.s.Table()
	b := t.Bounds()
	jitter := r2.Scale(0.4*p.reach*p.rng.NormFloat64(), plane.Polar(p.rng.Float64()*2*math.Pi))
	if p.rng.IntN(3) == 0 {
		jitter = r2.Vec{}
	}
	switch p.rng.IntN(9) {
	case 0, 1:
		if h := p.s.Handles(); len(h) > 0 {
			return r2.Add(h[p.rng.IntN(len(h))].At, jitter)
		}
	case 2, 3:
		return r2.Add(t.At(p.rng.Float64()*t.Length()).Point, jitter)
	case 4:
		if j := t.Joints(); len(j) > 0 {
			return r2.Add(j[p.rng.IntN(len(j))].At, jitter)
		}
	case 5:
		if f, ok := p.e.Frame(p.reach); ok {
			return []r2.Vec{f.Turn, f.Scale, f.Middle}[p.rng.IntN(3)]
		}
	case 6:
		if h := p.e.Coats().Handles(p.reach); len(h) > 0 {
			return h[p.rng.IntN(len(h))].At
		}
	case 7: // far outside
		return r2.Scale(3*p.size, plane.Polar(p.rng.Float64()*7))
	}
	return r2.Vec{
		X: b.Min.X + (1.4*p.rng.Float64()-0.2)*(b.Max.X-b.Min.X),
		Y: b.Min.Y + (1.4*p.rng.Float64()-0.2)*(b.Max.Y-b.Min.Y),
	}
}

// near is where a drag goes to: mostly not far, sometimes anywhere.
func (p *person) near() r2.Vec {
	if p.rng.IntN(4) == 0 {
		return p.somewhere()
	}
	d := p.size * math.Exp(-6*p.rng.Float64()) * 0.3
	return r2.Add(p.e.pointer, r2.Scale(d, plane.Polar(p.rng.Float64()*2*math.Pi)))
}

// wholeDrag presses, pulls and lets go; interrupted does something else on the
// way.
func (p *person) wholeDrag(interrupted bool) {
	from := p.somewhere()
	k := p.keys()
	p.e.Hover(from)
	p.e.Press(from, p.reach, k)
	to := p.near()
	for i := range 1 + p.rng.IntN(5) {
		p.e.Drag(plane.Lerp(from, to, float64(i+1)/5), p.step(), k)
		if interrupted {
			d := commandDeeds[p.rng.IntN(len(commandDeeds))]
			p.diary = append(p.diary, "(while dragging)")
			p.do(d)
		}
	}
	if p.rng.IntN(6) == 0 {
		p.escape()
		return
	}
	_ = p.e.Release()
}

// escape is the key in each pane: nothing is held after it.
func (p *person) escape() {
	p.e.Cancel()
	p.r.Cancel()
	p.q.Cancel()
	if p.s.InGesture() {
		p.fail("a gesture is still open after Escape")
	}
}

// stroke draws freehand, mostly something round.
func (p *person) stroke() {
	p.s.Settings.Tool = session.Stroke
	m := p.somewhere()
	r := p.size * (0.05 + 0.6*p.rng.Float64())
	wave := 0.4 * p.rng.Float64() * p.rng.Float64()
	n := 2 + p.rng.IntN(90)
	turn := 2 * math.Pi * (0.2 + p.rng.Float64())
	for i := range n {
		a := turn * float64(i) / float64(n)
		at := r2.Add(m, r2.Scale(r*(1+wave*math.Cos(3*a)), plane.Polar(a)))
		if i == 0 {
			p.e.Press(at, p.reach, 0)
		} else {
			p.e.Drag(at, 0, 0)
		}
	}
	_ = p.e.Release()
}

// drawNodes sets nodes one by one.
func (p *person) drawNodes() {
	p.s.Settings.Tool = session.Chain
	p.e.Symmetry = shape.Symmetry{}
	if p.rng.IntN(4) == 0 {
		p.e.Symmetry = shape.Symmetry{Mirror: p.rng.IntN(2) == 0, Fold: p.rng.IntN(4), Centre: p.somewhere(), Axis: p.rng.Float64() * 3}
	}
	p.e.As = Drawn(p.rng.IntN(3))
	p.e.Step = p.step()
	m, r := p.somewhere(), p.size*math.Exp(-4*p.rng.Float64())
	n := 1 + p.rng.IntN(7)
	var first r2.Vec
	for i := range n {
		p.e.Next = shape.SpanKind(p.rng.IntN(4))
		at := r2.Add(m, r2.Scale(r*(0.6+0.6*p.rng.Float64()), plane.Polar(2*math.Pi*float64(i)/float64(n))))
		if i == 0 {
			first = at
		}
		p.e.Hover(at)
		p.e.Press(at, p.reach, p.keys())
		if p.rng.IntN(3) == 0 {
			p.e.Drag(p.near(), p.step(), 0)
		}
		_ = p.e.Release()
		if p.rng.IntN(6) == 0 {
			_ = p.e.SetRadius(r * p.rng.Float64() * 2)
		}
	}
	switch p.rng.IntN(4) {
	case 0:
		_ = p.e.CloseChain()
	case 1, 2:
		p.e.Press(first, p.reach, 0)
		_ = p.e.Release()
	}
}

func (p *person) pullRays() {
	p.s.Settings.Bundle.Pattern = p.rngPattern()
	from := p.somewhere()
	p.r.Press(from, p.reach)
	for range p.rng.IntN(4) {
		p.r.Drag(p.somewhere(), p.keys())
	}
	if p.rng.IntN(5) == 0 {
		p.r.Cancel()
		return
	}
	p.r.Release()
}

func (p *person) pullPortrait() {
	p.q.Press(1.2*p.rng.Float64()-0.1, 2.2*p.rng.Float64()-1.1)
	for range p.rng.IntN(4) {
		p.q.Drag(1.4*p.rng.Float64()-0.2, 2.4*p.rng.Float64()-1.2, p.keys())
	}
	if p.rng.IntN(5) == 0 {
		p.q.Cancel()
		return
	}
	p.q.Release()
}
