package study

import (
	"cmp"
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/table/dial"
	"cavitywright/table/param"
	"cavitywright/table/wall"
)

const (
	// mostCurves is the number of values of a second dial up to which each has a
	// curve of its own; more of them make a map.
	mostCurves = 6
	// mostTogether is the number of curves that can be told apart at all; more
	// combinations are drawn as points over the first dial.
	mostTogether = 16
)

// Figure is the reading over the dials: curves with one standard error about
// them, a map over two dials, or points over the first dial. program is the name
// and version that the caption ends with.
func (r *Result) Figure(name, program string) figure.Figure {
	switch {
	case r.Sweep.Sample > 0:
		return r.cloud(name, 0, program)
	case len(r.Dials) == 2 && len(r.values[1]) > mostCurves && even(r.values[0]) && even(r.values[1]):
		return r.grid(name, program)
	case r.Points()/len(r.values[0]) > mostTogether:
		return r.cloud(name, 0, program)
	}
	return r.curves(name, program)
}

// uncaptioned is a figure without what the page says once.
func uncaptioned(f figure.Figure) figure.Figure {
	switch f := f.(type) {
	case figure.Series:
		f.Caption = nil
		return f
	case figure.Grid:
		f.Caption = nil
		return f
	}
	return f
}

// even reports whether values ascend in equal steps, to their rounding.
func even(v []float64) bool {
	if len(v) < 2 {
		return false
	}
	step := (v[len(v)-1] - v[0]) / float64(len(v)-1)
	for i := range v {
		if math.Abs(v[i]-v[0]-step*float64(i)) > 1e-9*math.Abs(step) {
			return false
		}
	}
	return step > 0
}

// axis is that of dial k.
func (r *Result) axis(k int) figure.Axis {
	lo, hi := r.Sweep.Turns[k].Ends()
	if lo == hi {
		lo, hi = lo-0.5, hi+0.5
	}
	return figure.Axis{Label: r.Label(k), Unit: r.Unit(k), Lo: lo, Hi: hi}
}

// axisMarks are the marks for the axis. Where they crowd, the words of what is no
// orbit come first, then those of the shortest orbits.
func (r *Result) axisMarks() (all []figure.Mark) {
	lo, hi := r.Sweep.Turns[0].Ends()
	marks := r.Marks()
	order := make([]int, len(marks))
	for i, m := range marks {
		order[i] = i
		all = append(all, figure.Mark{At: m.At, Kind: figure.Event})
	}
	slices.SortStableFunc(order, func(a, b int) int { return cmp.Compare(marks[a].rank(), marks[b].rank()) })
	for k, i := range order {
		free := true
		for _, before := range order[:k] {
			free = free && (all[before].Name == "" || math.Abs(all[before].At-all[i].At) >= crowded*(hi-lo))
		}
		if free {
			all[i].Name = marks[i].Short
		}
	}
	return all
}

// rank is the number of bounces of the orbit that a mark is about, 0 where it is
// about none.
func (m Mark) rank() int {
	first, _, _ := strings.Cut(m.Short, ":")
	n, err := strconv.Atoi(first)
	if err != nil {
		return 0
	}
	return n
}

// crowded is the part of an axis that the word of a mark takes.
const crowded = 0.12

// curves are the reading over the first dial, a curve for each combination of
// the others.
func (r *Result) curves(name, program string) figure.Figure {
	s := figure.Series{X: r.axis(0), Y: figure.Axis{Label: name, Unit: r.unit(name)}, Caption: append(r.captionOf(name), measure.Foot(r.Base, program))}
	s.X.Marks = r.axisMarks()
	others := r.Points() / len(r.values[0])
	order := ascending(r.values[0])
	for k := range others {
		c := figure.Curve{Hue: k % hues}
		if others > 1 {
			c.Name = r.combination(r.At(k)[1:])
		}
		for _, i := range order {
			if _, done := r.Point(i*others + k); !done {
				continue
			}
			v, e, _ := r.taken(i*others+k, name)
			c.X, c.Y, c.Err = append(c.X, r.values[0][i]), append(c.Y, v), append(c.Err, e)
		}
		s.Curves = append(s.Curves, c)
	}
	s.Y.Lo, s.Y.Hi = room(s.Curves)
	return s
}

// hues is the number of colours of curves.
const hues = 8

// ascending are the indices of values in their order.
func ascending(values []float64) []int {
	all := make([]int, len(values))
	for i := range all {
		all[i] = i
	}
	slices.SortStableFunc(all, func(a, b int) int { return cmp.Compare(values[a], values[b]) })
	return all
}

// combination names values of the dials after the first.
func (r *Result) combination(at []float64) string {
	var words []string
	for k, v := range at {
		words = append(words, r.valueName(k+1, v))
	}
	return strings.Join(words, ", ")
}

// valueName is a value of dial k in words: the polarisation by its name.
func (r *Result) valueName(k int, v float64) string {
	x := r.Dials[k]
	if (x.Part == dial.Coat || x.Part == dial.Bare) && x.Name == "te" && r.Specs[k].Unit == param.Count {
		return wall.Polarisation(v).String()
	}
	return fmt.Sprintf("%s = %.6g%s", r.Label(k), v, spaced(r.Unit(k)))
}

// room is the range of curves with their errors, with a margin.
func room(curves []figure.Curve) (lo, hi float64) {
	lo, hi = math.Inf(1), math.Inf(-1)
	for _, c := range curves {
		for i, y := range c.Y {
			e := 0.0
			if i < len(c.Err) && c.Err[i] > 0 && !math.IsInf(c.Err[i], 0) {
				e = c.Err[i]
			}
			if !math.IsNaN(y) && !math.IsInf(y, 0) {
				lo, hi = min(lo, y-e), max(hi, y+e)
			}
		}
	}
	switch {
	case lo > hi:
		return 0, 1
	case lo == hi:
		d := max(0.05*math.Abs(lo), 1e-9)
		return lo - d, hi + d
	}
	d := 0.06 * (hi - lo)
	if lo >= 0 && lo-d < 0 {
		return 0, hi + d
	}
	return lo - d, hi + d
}

// grid is the reading as a map over two dials.
func (r *Result) grid(name, program string) figure.Figure {
	n, m := len(r.values[0]), len(r.values[1])
	g := figure.Grid{X: cells(r.axis(0), n), Y: cells(r.axis(1), m), Value: figure.Axis{Label: name, Unit: r.unit(name)},
		Columns: n, Rows: m, Values: make([]float64, n*m), Caption: append(r.captionOf(name), measure.Foot(r.Base, program))}
	for i := range n {
		for k := range m {
			g.Values[k*n+i], _, _ = r.taken(i*m+k, name)
		}
	}
	g.Value.Lo, g.Value.Hi = room([]figure.Curve{{Y: g.Values}})
	return g
}

// cells widens an axis so that n cells have their values in the middle.
func cells(a figure.Axis, n int) figure.Axis {
	half := 0.5 * (a.Hi - a.Lo) / float64(n-1)
	a.Lo, a.Hi = a.Lo-half, a.Hi+half
	return a
}

// cloud is the reading at each point of a sample over dial k.
func (r *Result) cloud(name string, k int, program string) figure.Figure {
	c := figure.Curve{Form: figure.Points}
	for i := range r.Points() {
		if row, done := r.Point(i); done {
			v, e, _ := r.taken(i, name)
			if math.IsNaN(v) {
				continue
			}
			c.X, c.Y, c.Err = append(c.X, row.Values[k]), append(c.Y, v), append(c.Err, e)
		}
	}
	s := figure.Series{X: r.axis(k), Y: figure.Axis{Label: name, Unit: r.unit(name)}, Curves: []figure.Curve{c}, Caption: append(r.captionOf(name), measure.Foot(r.Base, program))}
	s.Y.Lo, s.Y.Hi = room(s.Curves)
	return s
}
