package pane

import (
	"image"
	"image/color"

	"cavitywright/render"
	"cavitywright/render/pixel"
	"cavitywright/sim/figure"
	"cavitywright/sim/orbit"
	"cavitywright/table"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
)

// Orbits lays periodic orbits over the portrait, as marks of their kinds, and
// one of them over the rays. They belong to one wall: beside another nothing is
// shown.
type Orbits struct {
	desk     *Desk
	portrait *Portrait
	rays     *Rays
	marks    *sheer // over the portrait
	lines    *sheer // over the rays
	of       *table.Table
	all      []*orbit.Orbit
	chosen   []*orbit.Orbit
}

// NewOrbits is an empty layer over the two panes.
func NewOrbits(d *Desk, p *Portrait, r *Rays) *Orbits {
	o := &Orbits{desk: d, portrait: p, rays: r}
	o.marks, o.lines = newSheer(p.Surface, o.paintMarks), newSheer(r.Surface, o.paintLines)
	return o
}

// Show lays orbits of a table over the panes: all of them as marks, and of the
// chosen ones, which stand out, the first as a line.
func (o *Orbits) Show(of *table.Table, all, chosen []*orbit.Orbit) {
	o.of, o.all, o.chosen = of, all, chosen
	o.Redraw()
}

// Clear takes them away.
func (o *Orbits) Clear() { o.Show(nil, nil, nil) }

// Fits reports whether what is shown belongs to the table as it is now.
func (o *Orbits) Fits() bool { return o.of != nil && o.of.SameWall(o.desk.Session.Table()) }

// Marked is the number of orbits that are marked now.
func (o *Orbits) Marked() int {
	if !o.Fits() {
		return 0
	}
	return len(o.all)
}

// Redraw follows the views, the axes and the look. Where nothing is shown it
// costs nothing.
func (o *Orbits) Redraw() {
	fits := o.Fits()
	o.marks.refresh(fits && len(o.all)+len(o.chosen) > 0)
	o.lines.refresh(fits && len(o.chosen) > 0)
}

// chosenSize and otherSize are by how much the marks of the chosen orbit are
// larger and those of the others smaller.
const chosenSize, otherSize = 1.5, 0.85

func (o *Orbits) paintMarks(c *pixel.Canvas) {
	t, look := o.desk.Session.Table(), o.desk.Look
	plot := o.portrait.plot()
	small := look
	small.Paper, small.Sea = color.RGBA{}, look.Orbit(otherHue) // without an edge, which would cover the portrait
	small.Tick *= otherSize
	render.DrawMarks(c, figure.Dots{Spots: orbit.Spots(t, o.all, -1)}, plot, small)
	look.Sea = look.Orbit(chosenHue)
	look.Tick *= chosenSize
	look.Hair *= chosenSize
	render.DrawMarks(c, figure.Dots{Spots: orbit.Spots(t, o.chosen, -1)}, plot, look)
}

// chosenHue and otherHue are the colours of the chosen orbit and of the others.
const chosenHue, otherHue = 1, 0

func (o *Orbits) paintLines(c *pixel.Canvas) {
	look := o.desk.Look
	lines := orbit.Lines(o.chosen[:1])
	draw := func(ink color.RGBA, width float64) {
		look := look
		for i := range look.Orbits {
			look.Orbits[i] = ink
		}
		look.Line = width
		render.DrawPaths(c, figure.Paths{Lines: lines}, o.rays.view(), look)
	}
	draw(render.Fade(look.Paper, 0.8), 5*look.Line) // an edge that parts it from the rays
	draw(look.Orbit(chosenHue), 2*look.Line)
}

// sheer is a picture without ground over a surface.
type sheer struct {
	s      *Surface
	raster *canvas.Raster
	paint  func(*pixel.Canvas)
}

func newSheer(s *Surface, paint func(*pixel.Canvas)) *sheer {
	h := &sheer{s: s, paint: paint}
	h.raster = canvas.NewRaster(func(int, int) image.Image { return h.draw() })
	h.raster.ScaleMode = canvas.ImageScalePixels
	h.raster.Hide()
	s.marks = append([]fyne.CanvasObject{h.raster}, s.marks...)
	return h
}

// draw paints the picture at the size of the surface.
func (h *sheer) draw() *image.RGBA {
	px := h.s.Pixels()
	if px.X < 2 || px.Y < 2 || !h.raster.Visible() {
		return image.NewRGBA(image.Rect(0, 0, 1, 1))
	}
	img := image.NewRGBA(image.Rectangle{Max: px})
	h.paint(pixel.New(img))
	return img
}

func (h *sheer) refresh(shown bool) {
	if !shown {
		if h.raster.Visible() {
			h.raster.Hide()
			h.raster.Refresh()
		}
		return
	}
	h.raster.Resize(h.s.Size())
	h.raster.Show()
	h.raster.Refresh()
}
