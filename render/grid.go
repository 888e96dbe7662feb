package render

import (
	"image"
	"image/color"
	"math"

	"cavitywright/render/letter"
	"cavitywright/sim/figure"
)

// The bar of colours above a map, in small type sizes: its height, and the gap
// below its numbers.
const (
	barThick = 0.9
	barBelow = 0.2
)

// leastBar is the least height of a box, in small type sizes, in which a map
// has its bar.
const leastBar = 14

// GridPlot is the layout of a map: its axes, and the bar of colours that says
// what they mean; an empty Bar where there is no room.
type GridPlot struct {
	Plot
	Bar   Box
	scale rule // from values to places on the bar
	ticks Ladder
	title string
}

// LayoutGrid lays out a map within a box.
func LayoutGrid(f figure.Grid, box Box, look Look) GridPlot {
	if box.H() < leastBar*look.Small {
		return GridPlot{Plot: layout(f.X, f.Y, f.Strip, f.Caption, box, look), scale: newRule(f.Value, 0, 1)}
	}
	below := box
	below.Min.Y = look.floor(below.Min.Y + barRoom(look))
	g := GridPlot{Plot: layout(f.X, f.Y, f.Strip, f.Caption, below, look)}
	g.Box = box
	top := look.floor(box.Min.Y + look.Margin + (letter.CapHeight+0.5)*look.Small)
	g.Bar = Box{Point{g.Frame.Min.X, top}, Point{g.Frame.Max.X, top + look.ceil(barThick*look.Small)}}
	lo, hi := mended(f.Value)
	g.scale = newRule(f.Value, g.Bar.Min.X, g.Bar.Max.X)
	g.ticks = Ticks(lo, hi, f.Value.Scale, int(min(max(g.Bar.W()/(5*look.Small), 2), 8)))
	g.title = title(f.Value, g.ticks.Exp)
	return g
}

// barRoom is the height that the bar takes with its title above and its
// numbers below.
func barRoom(look Look) float64 {
	return (2*letter.CapHeight+0.5+0.3+barThick+barBelow)*look.Small + look.Tick/2
}

// Fraction is the place of a value on the ramp, from 0 to 1; NaN for one that
// the scale cannot show.
func (g GridPlot) Fraction(v float64) float64 { return fraction(g.scale, v) }

func fraction(r rule, v float64) float64 {
	if r.log && v <= 0 {
		return math.NaN()
	}
	return (r.to(v) - r.from0) / (r.to0 - r.from0)
}

// ValueScale tells the place of values on the ramp, from 0 to 1, for those who
// paint the cells of a map themselves.
func ValueScale(a figure.Axis) func(v float64) float64 {
	r := newRule(a, 0, 1)
	return func(v float64) float64 { return fraction(r, v) }
}

// drawGrid draws a map with its axes and its bar.
func drawGrid(c Canvas, f figure.Grid, g GridPlot, look Look) {
	ramp := NewRamp(look)
	drawCells(c, f, g, ramp, look)
	dots := figure.Dots{X: f.X, Y: f.Y, Strip: f.Strip, StripLo: f.StripLo, StripHi: f.StripHi}
	drawFrame(c, dots, g.Plot, look)
	DrawMarks(c, dots, g.Plot, look)
	if !g.Bar.Empty() {
		drawBar(c, g, ramp, look)
	}
}

// Tiler is a Canvas that can also show a picture over a box, each of its pixels
// a plain rectangle. A map goes there as a picture where it can: a hundred
// thousand paths make a file that hardly any program opens.
type Tiler interface {
	Tiles(img *image.RGBA, box Box)
}

// drawCells paints the cells.
func drawCells(c Canvas, f figure.Grid, g GridPlot, ramp *Ramp, look Look) {
	if f.Columns <= 0 || f.Rows <= 0 || len(f.Values) < f.Columns*f.Rows || g.Frame.Empty() {
		return
	}
	t, is := c.(Tiler)
	if !is {
		fillCells(c, f, g, ramp, look)
		return
	}
	img := image.NewRGBA(image.Rect(0, 0, f.Columns, f.Rows))
	for k, v := range f.Values[:f.Columns*f.Rows] {
		img.SetRGBA(k%f.Columns, f.Rows-1-k/f.Columns, colourOf(stepOf(g, ramp, v), ramp, look))
	}
	t.Tiles(img, g.Frame)
}

// fillCells paints the cells row by row from below, runs of equal colour at
// once. A run reaches half a cell further to the right and upward, under what
// is painted after it, so that no seam shows between two.
func fillCells(c Canvas, f figure.Grid, g GridPlot, ramp *Ramp, look Look) {
	w, h := g.Frame.W()/float64(f.Columns), g.Frame.H()/float64(f.Rows)
	for row := range f.Rows {
		values := f.Values[row*f.Columns : (row+1)*f.Columns]
		for from := 0; from < f.Columns; {
			step := stepOf(g, ramp, values[from])
			to := from + 1
			for to < f.Columns && stepOf(g, ramp, values[to]) == step {
				to++
			}
			x0, x1 := g.Frame.Min.X+w*float64(from), g.Frame.Min.X+w*(float64(to)+0.5)
			y1, y0 := g.Frame.Max.Y-h*float64(row), g.Frame.Max.Y-h*(float64(row)+1.5)
			c.Fill(Box{Point{x0, max(y0, g.Frame.Min.Y)}, Point{min(x1, g.Frame.Max.X), y1}}.Path(), colourOf(step, ramp, look))
			from = to
		}
	}
}

// colourOf is the colour of a step; -1 is blank.
func colourOf(step int, ramp *Ramp, look Look) color.RGBA {
	if step < 0 {
		return look.Paper
	}
	return ramp[step]
}

// stepOf is the colour of a value, -1 for one that has none.
func stepOf(g GridPlot, ramp *Ramp, v float64) int {
	x := g.Fraction(v)
	if math.IsNaN(x) {
		return -1
	}
	return ramp.Step(x)
}

// drawBar draws the scale of colours with its numbers below and its name
// above.
func drawBar(c Canvas, g GridPlot, ramp *Ramp, look Look) {
	n := len(ramp)
	w := g.Bar.W() / float64(n)
	for i := range ramp {
		x := g.Bar.Min.X + w*float64(i)
		next := min(x+1.5*w, g.Bar.Max.X)
		c.Fill(NewBox(x, g.Bar.Min.Y, next-x, g.Bar.H()).Path(), ramp[i])
	}
	pen := Pen{Width: look.Hair, Color: look.Ink, Cap: Butt}
	c.Stroke(g.Bar.Inset(-look.Hair/2).Path(), pen)
	free := math.Inf(-1)
	for _, t := range g.ticks.Major {
		x := look.snap(g.scale.to(t.At))
		if !(x >= g.Bar.Min.X-look.Hair && x <= g.Bar.Max.X+look.Hair) {
			continue
		}
		c.Stroke(Segment(Point{x, g.Bar.Max.Y}, Point{x, g.Bar.Max.Y + look.Tick/2}), pen)
		half := look.Small * letter.Width(t.Label, letter.Regular) / 2
		if x-half < free {
			continue
		}
		free = x + half + 0.6*look.Small
		c.Text(Text{At: Point{x, g.Bar.Max.Y + look.Tick/2 + 0.3*look.Small}, Size: look.Small, String: t.Label, H: Center, V: Top, Color: look.Ink})
	}
	c.Text(Text{At: Point{g.Bar.Min.X, g.Bar.Min.Y - 0.4*look.Small}, Size: look.Small, String: g.title, Color: look.Ink})
}
