package live

import (
	"context"
	"image"
	"image/color"
	"image/draw"

	"cavitywright/render"
	"cavitywright/render/pixel"
	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/sim/run"
	"cavitywright/table"
)

// ghost is the portrait of the table that is kept to compare with: the same
// launches with the same seed on its wall, as one faint set of dots under those
// of the table at work.
type ghost struct {
	of      *table.Table // nil where none is kept
	like    *Request     // whose launches and axes it follows
	tracer  *sim.Tracer
	section measure.Section
	scale   float64 // of its lengths to those of the table at work
	next    measure.Portrait
	each    int
	density pixel.Density
	picture *image.RGBA
}

// show takes a request; the dots stay where nothing they depend on changed.
func (g *ghost) show(r *Request, w, h int) {
	if r.Reference == nil {
		*g = ghost{}
		return
	}
	if g.of != r.Reference {
		g.tracer = sim.Compile(r.Reference)
	}
	gw, gh := g.density.Size()
	if g.of == r.Reference && gw == w && gh == h && g.likeAs(r) {
		g.like = r
		return
	}
	g.of, g.like = r.Reference, r
	g.density.Resize(w, h)
	d := r.Table.Design()
	g.section = measure.NewSection(g.of)
	g.section.Display = d.Study.Display
	g.scale = g.of.Design().Unit.Metres() / d.Unit.Metres()
	g.next, g.each = measure.NewPortrait(g.tracer, g.launches(r), 0), 0
}

// likeAs reports whether the request shows the same launches on the same axes.
func (g *ghost) likeAs(r *Request) bool {
	a, b := g.like.Table.Design(), r.Table.Design()
	if g.like.Section != r.Section || a.Unit != b.Unit || a.Study.Display != b.Study.Display || a.Study.Seed != b.Study.Seed || len(a.Study.Launches) != len(b.Study.Launches) {
		return false
	}
	for i := range a.Study.Launches {
		if a.Study.Launches[i] != b.Study.Launches[i] {
			return false
		}
	}
	// Axes in units of length are as long as the table at work.
	return g.like.Table.Length() == r.Table.Length()
}

// launches are those of the table at work that start inside of this one too.
func (g *ghost) launches(r *Request) []table.Launch {
	var all []table.Launch
	for _, l := range r.Table.Design().Study.Launches {
		if l.From == table.OnWall || g.of.Contains(l.Point) {
			all = append(all, l)
		}
	}
	return all
}

// filling reports whether there is more to fill.
func (g *ghost) filling() bool {
	return g.of != nil && g.next.Orbits() > 0 && g.each < g.like.Table.Design().Study.Bounces
}

// fill runs a round.
func (g *ghost) fill(p render.Plot) bool {
	if !g.filling() {
		return false
	}
	study := g.like.Table.Design().Study
	n := max(1, min(max(firstRound, g.each/12), roundBounces/g.next.Orbits(), study.Bounces-g.each))
	g.next.Each = n
	tally, err := run.Run(context.Background(), run.Job{Tracer: g.tracer, Measure: g.next, Seed: study.Seed})
	if err != nil {
		return false
	}
	t := tally.(*measure.PortraitTally)
	k := g.scale
	if g.section.Display.Position == table.Fraction {
		k = 1
	}
	for _, set := range t.Sets() {
		for i := range set.X {
			x, y := g.section.At(set.X[i], set.Y[i])
			g.density.Add(p.ToX(k*x)-p.Frame.Min.X, p.ToY(y)-p.Frame.Min.Y, -1)
		}
	}
	g.next = g.next.Continued(t.Ends(), 0)
	g.each += n
	return true
}

// draw lays the dots over the picture.
func (g *ghost) draw(img *image.RGBA, frame image.Rectangle, look render.Look) {
	if g.of == nil {
		return
	}
	w, h := g.density.Size()
	if frame.Dx() != w || frame.Dy() != h {
		return
	}
	g.picture = sized(g.picture, image.Pt(w, h))
	look.Sea = Ghost(look)
	g.density.Shade(g.picture, look)
	draw.Draw(img, frame, g.picture, image.Point{}, draw.Over)
}

// ghostShare is how much of the ink the colour of a ghost has: seen beside
// what is at work, and not taken for it.
const ghostShare = 0.3

// Ghost is the colour of what is kept to compare with.
func Ghost(look render.Look) color.RGBA {
	mix := func(a, b uint8) uint8 { return uint8((1-ghostShare)*float64(a) + ghostShare*float64(b) + 0.5) }
	return color.RGBA{mix(look.Paper.R, look.Ink.R), mix(look.Paper.G, look.Ink.G), mix(look.Paper.B, look.Ink.B), 255}
}
