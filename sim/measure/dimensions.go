package measure

import (
	"fmt"
	"math"

	"cavitywright/sim/figure"
	"cavitywright/table"
	"cavitywright/table/curve"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// Bounds of a dimensioned drawing: beyond them the numbers hide the wall.
const (
	mostStraight = 8
	mostRadii    = 6
)

// Distances in a dimensioned drawing, relative to the table's diagonal.
const (
	dimensionOff = 0.09 // from the wall to a dimension of the whole
	extensionEnd = 0.02 // beyond a dimension
	innerOff     = 0.05 // from a straight side to its number
	shortest     = 0.06 // a side below this bears no number
)

// Dimensioned is the outline of a table with its greatest width and height, the
// lengths of its straight sides and the radii of its arcs, each written once.
// The numbers are the wall's own, to five digits; nothing is measured off the
// drawing but width and height, which are good to its chords (fineChords).
func Dimensioned(t *table.Table) figure.Paths {
	size := plane.Diagonal(t.Bounds())
	d := drawing{unit: t.Design().Unit.String(), size: size}
	d.Unit = d.unit
	d.Lines = Outline(t, fineChords*size)
	for _, l := range d.Lines {
		if l.Role == figure.JointMark {
			resize(l, jointSize*size)
		}
	}
	d.whole()
	d.sides(t)
	return d.Paths
}

// drawing is a dimensioned drawing as it is made.
type drawing struct {
	figure.Paths
	unit  string
	size  float64
	known map[string]bool // lengths that are written already
}

// length is a length with the unit.
func (d *drawing) length(x float64) string { return fmt.Sprintf("%.5g %s", x, d.unit) }

func (d *drawing) line(role figure.Role, a, b r2.Vec) {
	d.Lines = append(d.Lines, figure.Line{Role: role, X: []float64{a.X, b.X}, Y: []float64{a.Y, b.Y}})
}

func (d *drawing) label(at r2.Vec, text string) {
	d.Labels = append(d.Labels, figure.Label{X: at.X, Y: at.Y, Text: text})
}

// whole writes width and height of all walls.
func (d *drawing) whole() {
	x0, y0, x1, y1 := math.Inf(1), math.Inf(1), math.Inf(-1), math.Inf(-1)
	for _, l := range d.Lines {
		if l.Role != figure.Wall {
			continue
		}
		for i := range l.X {
			x0, x1 = math.Min(x0, l.X[i]), math.Max(x1, l.X[i])
			y0, y1 = math.Min(y0, l.Y[i]), math.Max(y1, l.Y[i])
		}
	}
	off, end := dimensionOff*d.size, extensionEnd*d.size
	at := func(x, y float64) r2.Vec { return r2.Vec{X: x, Y: y} }
	for _, x := range []float64{x0, x1} {
		d.line(figure.Extension, at(x, y0-off/3), at(x, y0-off-end))
	}
	for _, y := range []float64{y0, y1} {
		d.line(figure.Extension, at(x0-off/3, y), at(x0-off-end, y))
	}
	d.line(figure.Dimension, at(x0, y0-off), at(x1, y0-off))
	d.label(at((x0+x1)/2, y0-off), d.length(x1-x0))
	d.line(figure.Dimension, at(x0-off, y0), at(x0-off, y1))
	d.label(at(x0-off, (y0+y1)/2), d.length(y1-y0))
	d.known = map[string]bool{d.length(x1 - x0): true, d.length(y1 - y0): true}
}

// sides writes the straight sides and the arcs; of several alike the first.
func (d *drawing) sides(t *table.Table) {
	pieces := t.Pieces()
	written := d.known
	straight, radii := 0, 0
	for i := 0; i < len(pieces); {
		p := &pieces[i]
		last := i
		for last+1 < len(pieces) && pieces[last+1].Item == p.Item && pieces[last+1].Side == p.Side && pieces[last+1].Loop == p.Loop {
			last++
		}
		middle := t.At(p.S0 + (pieces[last].S0+pieces[last].Length-p.S0)/2)
		i = last + 1
		switch {
		case p.Kind == curve.Segment && straight < mostStraight:
			long := pieces[last].S0 + pieces[last].Length - p.S0
			text := d.length(long)
			if long < shortest*d.size || written[text] {
				continue
			}
			written[text] = true
			straight++
			d.label(r2.Add(middle.Point, r2.Scale(innerOff*d.size, middle.Normal())), text)
		case p.Kind == curve.Circle && radii < mostRadii:
			text := "R " + d.length(p.Radius)
			if p.Radius < shortest*d.size/2 || written[text] {
				continue
			}
			written[text] = true
			radii++
			in := r2.Unit(r2.Sub(p.Centre, middle.Point))
			tip := r2.Add(middle.Point, r2.Scale(math.Min(p.Radius, d.size/4), in))
			d.line(figure.Extension, middle.Point, tip)
			d.label(r2.Add(middle.Point, r2.Scale(0.6*math.Min(p.Radius, d.size/4), in)), text)
		}
	}
}
