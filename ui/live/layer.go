package live

import (
	"context"
	"fmt"
	"image"
	"image/color"
	"math"
	"time"

	"cavitywright/render"
	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/run"
)

// layer is the map under the portrait. It is measured in rounds, coarse cells
// first, and thrown away at once when the wall, the region or its size changes:
// no colour stands for a place of another table.
type layer struct {
	kind    Kind
	mosaic  *measure.Mosaic // nil where nothing is mapped
	why     string          // why there is no map, where one was asked for
	picture *image.RGBA
	held    figure.Axis // of the colours; it holds still while the map is refined
}

const (
	// mostCells bounds the cells of a map on the screen: those of a larger pane
	// are wider than a pixel.
	mostCells = 160_000
	// layerSpell is how long a map is filled between two frames.
	layerSpell = 18 * time.Millisecond
	// layerCells is the cells of a round, some 100 000 bounces: two blocks of
	// work.
	layerCells = 500
)

// begin maps anew, or not at all.
func (y *layer) begin(r *Request, tr *sim.Tracer, w, h int) {
	*y = layer{picture: y.picture}
	kind, asked := KindOf(r.Settings.Layer)
	if !asked {
		return
	}
	y.kind = kind
	if y.why = kind.Why(r.Table); y.why != "" {
		return
	}
	field, err := kind.Field(tr)
	if err != nil {
		y.why = err.Error()
		return
	}
	cell := max(1, math.Sqrt(float64(w*h)/mostCells)) // side in pixels
	y.mosaic = measure.NewMosaic(r.Table, field, r.Section, max(int(float64(w)/cell), 1), max(int(float64(h)/cell), 1))
}

// filling reports whether there is more to map.
func (y *layer) filling() bool { return y.mosaic != nil && y.mosaic.Done() < 1 }

// done is the share of the map that is known.
func (y *layer) done() float64 {
	if y.mosaic == nil {
		return 1
	}
	return y.mosaic.Done()
}

// fill measures for a spell; the first pass is measured whole.
func (y *layer) fill(tr *sim.Tracer, seed uint64) bool {
	if !y.filling() {
		return false
	}
	n := layerCells
	if y.mosaic.Done() == 0 {
		n = y.mosaic.First()
	}
	for end := time.Now().Add(layerSpell); y.filling() && time.Now().Before(end); n = layerCells {
		ran, err := run.Run(context.Background(), run.Job{Tracer: tr, Measure: y.mosaic.Next(n), Seed: seed})
		if err != nil {
			return false
		}
		y.mosaic.Take(ran.(measure.Valued))
	}
	return true
}

// widening is by how much the colours' range goes beyond a value that left it,
// in ranges: the map is not coloured anew for each value that is a little
// greater.
const widening = 0.25

// axis is the axis of the colours. Its range is that of the first pass and is
// only widened, in steps.
func (y *layer) axis() figure.Axis {
	a := y.mosaic.Axis()
	if !(y.held.Lo < y.held.Hi) {
		y.held = a
		return a
	}
	to, back := func(v float64) float64 { return v }, func(v float64) float64 { return v }
	if a.Scale == figure.Log {
		to, back = math.Log, math.Exp
	}
	step := widening * (to(y.held.Hi) - to(y.held.Lo))
	if a.Hi > y.held.Hi {
		y.held.Hi = back(to(a.Hi) + step)
	}
	if a.Lo < y.held.Lo {
		least := back(to(a.Lo) - step)
		if a.Lo >= 0 {
			least = math.Max(least, 0)
		}
		y.held.Lo = least
	}
	return y.held
}

// paint is the map as a picture of w by h pixels, nil where there is none.
func (y *layer) paint(w, h int, look render.Look) *image.RGBA {
	if y.mosaic == nil {
		return nil
	}
	y.picture = sized(y.picture, image.Pt(w, h))
	ramp, at := render.NewRamp(look), render.ValueScale(y.axis())
	line := make([]color.RGBA, y.mosaic.Columns)
	before := -1
	for py := range h {
		row := y.mosaic.Rows - 1 - py*y.mosaic.Rows/h
		if row == before {
			copy(y.picture.Pix[py*y.picture.Stride:(py+1)*y.picture.Stride], y.picture.Pix[(py-1)*y.picture.Stride:py*y.picture.Stride])
			continue
		}
		before = row
		for c := range line {
			line[c] = look.Paper
			if v := at(y.mosaic.Value(c, row)); !math.IsNaN(v) {
				line[c] = ramp.At(v)
			}
		}
		pix := y.picture.Pix[py*y.picture.Stride:]
		for px := range w {
			c := line[px*len(line)/w]
			pix[4*px], pix[4*px+1], pix[4*px+2], pix[4*px+3] = c.R, c.G, c.B, c.A
		}
	}
	return y.picture
}

// scale says what the colours mean and how far the map is, or why there is
// none.
func (y *layer) scale(c render.Canvas, p render.Plot, look render.Look) {
	switch {
	case y.why != "":
		render.DrawNote(c, "No map here: "+y.why+".", p.Frame, look)
	case y.mosaic != nil:
		remark := ""
		if y.filling() {
			remark = fmt.Sprintf("%.0f %%", math.Floor(100*y.mosaic.Done()))
		}
		render.DrawScale(c, y.axis(), remark, p.Frame, look)
	}
}
