package tolerance

import (
	"fmt"
	"math"
	"slices"

	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/table"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// Histogram is how reading k is distributed, with the value as drawn and the
// limits marked. program is the name and version that the caption ends with.
func (r *Result) Histogram(k int, program string) figure.Series {
	d, name := r.OfReading(k), r.Plan.Readings[k]
	s := figure.Series{X: figure.Axis{Label: name, Unit: r.unitOf(k)}, Y: figure.Axis{Label: "copies", Hi: 1},
		Caption: append([]string{measure.Head(r.Base) + r.Words(0)}, append(r.Verdict(k), measure.Foot(r.Base, program))...)}
	for i := 1; i < len(r.flaws); i++ {
		s.Caption[0] += "; " + r.Words(i)
	}
	s.Caption[0] += "."
	if len(d.Values) == 0 {
		s.X.Hi = 1
		return s
	}
	lo, hi := d.Values[0], d.Values[len(d.Values)-1]
	if hi-lo <= 1e-12*math.Abs(hi) { // all alike
		lo, hi = lo-math.Max(1e-3*math.Abs(lo), 1e-9), hi+math.Max(1e-3*math.Abs(hi), 1e-9)
	}
	n := classes(d, lo, hi)
	width := (hi - lo) / float64(n)
	// An empty class at either end closes the steps.
	c := figure.Curve{Form: figure.Steps, X: make([]float64, n+2), Y: make([]float64, n+2)}
	for i := range c.X {
		c.X[i] = lo + (float64(i)-0.5)*width
	}
	for _, v := range d.Values {
		i := 1 + min(n-1, int((v-lo)/width))
		c.Y[i]++
		s.Y.Hi = math.Max(s.Y.Hi, 1.1*c.Y[i])
	}
	s.Curves = []figure.Curve{c}
	s.X.Lo, s.X.Hi = lo-width, hi+width
	mark := func(at float64, word string) {
		if math.IsNaN(at) || math.IsInf(at, 0) {
			return
		}
		s.X.Lo, s.X.Hi = math.Min(s.X.Lo, at-width), math.Max(s.X.Hi, at+width)
		s.X.Marks = append(s.X.Marks, figure.Mark{At: at, Kind: figure.Event, Name: word})
	}
	mark(d.Nominal, "drawn")
	for _, l := range r.Plan.Limits {
		if l.Reading == name {
			mark(l.Lo, "at least")
			mark(l.Hi, "at most")
		}
	}
	return s
}

// classes is the number of classes by the rule of Freedman and Diaconis (1981),
// within what a plot shows.
func classes(d Distribution, lo, hi float64) int {
	width := 2 * (d.Quantile(0.75) - d.Quantile(0.25)) / math.Cbrt(float64(len(d.Values)))
	if width <= 0 {
		return 8
	}
	return int(math.Min(60, math.Max(5, math.Ceil((hi-lo)/width))))
}

const (
	// worstDrawn is the number of copies drawn.
	worstDrawn = 3
	// worstSamples is the number of places a loop at which a copy is compared
	// with the wall as drawn.
	worstSamples = 1440
	// seenShift is the shift, over the size of the table, to which the greatest
	// one is magnified in a drawing.
	seenShift = 0.04
)

// WorstDrawn are the worst copies of reading k over the wall as drawn, their
// distance from it magnified so that it is seen. Where size cannot matter to the
// reading it is left out.
func (r *Result) WorstDrawn(k int, kit Kit, program string) (figure.Paths, error) {
	t := r.Base
	size := plane.Diagonal(t.Bounds())
	p := figure.Paths{Unit: t.Design().Unit.String()}
	for _, l := range measure.Outline(t, 1e-4*size) {
		if l.Role == figure.Floor || l.Role == figure.Wall {
			p.Lines = append(p.Lines, l)
		}
	}
	at := r.Worst(k, worstDrawn)
	var all [][]shifted
	greatest := 0.0
	for _, i := range at {
		c, err := r.Copy(i, All, kit)
		if err != nil {
			return p, err
		}
		if lengthless(r.Plan.Readings[k]) {
			c.Scale = 1
		}
		s := compared(t, c)
		for _, l := range s {
			greatest = math.Max(greatest, l.greatest)
		}
		all = append(all, s)
	}
	by := magnified(greatest, size)
	for hue, loops := range all {
		for _, l := range loops {
			line := figure.Line{Role: figure.Ray, Hue: hue, Closed: true}
			for i, q := range l.from {
				to := r2.Add(q, r2.Scale(by, l.by[i]))
				line.X, line.Y = append(line.X, to.X), append(line.Y, to.Y)
			}
			// A drawing makes room for points of this role, not for rays.
			for _, far := range []func(...float64) float64{least, most} {
				p.Lines = append(p.Lines, figure.Line{Role: figure.Extension, X: []float64{far(line.X...)}, Y: []float64{far(line.Y...)}})
			}
			p.Lines = append(p.Lines, line)
		}
	}
	text := fmt.Sprintf("%sthe worst copies for %s over the wall as drawn", measure.Head(t), r.Plan.Readings[k])
	if by > 1 {
		text += fmt.Sprintf(", what they are off magnified %g times", by)
		if lengthless(r.Plan.Readings[k]) {
			text += " (size left out)"
		}
	}
	text += ": "
	for n, i := range at {
		v, _ := r.Rows[i].value(k)
		if n > 0 {
			text += ", "
		}
		text += fmt.Sprintf("copy %d with %.5g%s", i+1, v, spaced(r.unitOf(k)))
	}
	p.Caption = []string{text + ".", measure.Foot(t, program)}
	return p, nil
}

func least(v ...float64) float64 { return slices.Min(v) }
func most(v ...float64) float64  { return slices.Max(v) }

// magnified is a round number by which shifts are drawn larger.
func magnified(greatest, size float64) float64 {
	by := 1.0
	for greatest > 0 {
		for _, m := range []float64{2, 2.5, 2} {
			if by*m*greatest > seenShift*size {
				return by
			}
			by *= m
		}
		if by > 1e9 {
			return by
		}
	}
	return by
}

// shifted is a loop of a copy: places of the wall as drawn, and by how much the
// copy is off there.
type shifted struct {
	from, by []r2.Vec
	greatest float64
}

// compared goes along the copy and finds the nearest place of the wall as drawn.
func compared(t *table.Table, c Copy) (all []shifted) {
	for li, l := range c.Table.Loops() {
		s := shifted{}
		for i := range worstSamples {
			x := l.S0 + (l.S1-l.S0)*float64(i)/worstSamples
			p := r2.Scale(c.Scale, c.Table.At(x).Point)
			on, _ := t.NearestOn(min(li, len(t.Loops())-1), p)
			q := t.At(on).Point
			d := r2.Sub(p, q)
			s.from, s.by = append(s.from, q), append(s.by, d)
			s.greatest = math.Max(s.greatest, r2.Norm(d))
		}
		all = append(all, s)
	}
	return all
}
