package leak

import (
	"fmt"
	"math"

	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
)

// Norm says to what a far field is normalised.
type Norm uint8

// The norms.
const (
	ToPeak Norm = iota // the highest bin is 1
	ToArea             // the integral over the full turn, in radians, is 1
)

// scaled is the far field by bin, with its standard error.
func (f *FarField) scaled(norm Norm) (value, stderr []float64) {
	all := sum(f.rows)
	total := 0.0
	peak := 0.0
	for _, w := range all.byAngle {
		total += w
		peak = math.Max(peak, w)
	}
	k := 1 / peak
	if norm == ToArea {
		k = 1 / (total * 2 * math.Pi / float64(f.Bins))
	}
	n := float64(len(f.rows))
	for i, w := range all.byAngle {
		square := 0.0
		for r := range f.rows {
			d := f.rows[r].byAngle[i] - w/n
			square += d * d
		}
		value = append(value, w*k)
		stderr = append(stderr, k*math.Sqrt(square*n/math.Max(n-1, 1)))
	}
	return value, stderr
}

func (n Norm) axis() figure.Axis {
	if n == ToArea {
		return figure.Axis{Label: "intensity", Unit: "1/rad"}
	}
	return figure.Axis{Label: "intensity / peak"}
}

// Polar is the far field against direction. program is the name and version
// that the caption ends with.
func (f *FarField) Polar(norm Norm, name, program string) figure.Polar {
	v, e := f.scaled(norm)
	c := figure.Curve{Name: name, Y: v, Err: e}
	for i := range v {
		c.X = append(c.X, (float64(i)+0.5)*2*math.Pi/float64(f.Bins))
	}
	p := figure.Polar{Radius: norm.axis(), Curves: []figure.Curve{c}, Caption: f.caption(program)}
	p.Radius.Hi = highest(v)
	return p
}

// Cartesian is the far field over the angle from -180 to 180 degrees.
func (f *FarField) Cartesian(norm Norm, name, program string) figure.Series {
	v, e := f.scaled(norm)
	c := figure.Curve{Name: name, Form: figure.Steps}
	for k := range f.Bins {
		i := (k + f.Bins/2) % f.Bins
		c.X = append(c.X, (float64(k)+0.5)*360/float64(f.Bins)-180)
		c.Y, c.Err = append(c.Y, v[i]), append(c.Err, e[i])
	}
	s := figure.Series{
		X:      figure.Axis{Label: "angle from +x", Unit: "°", Lo: -180, Hi: 180},
		Y:      norm.axis(),
		Curves: []figure.Curve{c}, Caption: f.caption(program),
	}
	s.Y.Hi = 1.05 * highest(v)
	return s
}

func highest(v []float64) float64 {
	most := 0.0
	for _, x := range v {
		most = math.Max(most, x)
	}
	return most
}

// ByPlace is what leaves by place along the wall: the share per length of it.
func (f *FarField) ByPlace(name, program string) figure.Series {
	t := f.Starts.tracer.Table()
	unit := t.Design().Unit.String()
	all := sum(f.rows)
	total := 0.0
	for _, w := range all.byPlace {
		total += w
	}
	c := figure.Curve{Name: name, Form: figure.Steps}
	cell := t.Length() / float64(f.Cells)
	n := float64(len(f.rows))
	for i, w := range all.byPlace {
		square := 0.0
		for r := range f.rows {
			d := f.rows[r].byPlace[i] - w/n
			square += d * d
		}
		c.X = append(c.X, (float64(i)+0.5)*cell)
		c.Y = append(c.Y, w/total/cell)
		c.Err = append(c.Err, math.Sqrt(square*n/math.Max(n-1, 1))/total/cell)
	}
	s := figure.Series{
		X:      figure.Axis{Label: "s", Unit: unit, Lo: 0, Hi: t.Length()},
		Y:      figure.Axis{Label: "share that leaves there", Unit: "1/" + unit, Hi: 1.05 * highest(c.Y)},
		Curves: []figure.Curve{c}, Caption: f.caption(program),
	}
	for _, j := range t.Joints() {
		s.X.Marks = append(s.X.Marks, figure.Mark{At: j.S, Kind: figure.Joint})
	}
	return s
}

// Lines are what has to be said of a far field: how the rays start, what the
// cut-off left over, and what was not followed.
func (f *FarField) Lines() []string {
	a := f.Account
	lines := []string{fmt.Sprintf("%d rays, %s, each of weight 1 and followed to weight %.1g or %d bounces.", f.Rays, f.Starts.Words(), f.Cut, f.Each)}
	text := fmt.Sprintf("Of the weight %.2f %% left", 100*a.Left/a.Started)
	if math.Abs(a.Absorbed) > 1e-9*a.Started {
		text += fmt.Sprintf(", %.2f %% was absorbed", 100*a.Absorbed/a.Started)
	}
	text += fmt.Sprintf(", %.2f %% is still inside and not in the far field.", 100*a.Kept/a.Started)
	if f.Skip > 0 {
		text += fmt.Sprintf(" %.2f %% left before path %.4g %s and is not counted.", 100*f.Skipped/a.Started, f.Skip, f.Starts.tracer.Table().Design().Unit)
	}
	lines = append(lines, text)
	if f.Watched {
		lines = append(lines, fmt.Sprintf("The wall is not convex: rays outside are not followed, and %.2f %% of what left would meet the wall again.", 100*f.Again))
	}
	if n := f.Stops.Undecided(); n > 0 {
		lines = append(lines, fmt.Sprintf("%d rays ended at a corner or along a tangent, with %.2g of the weight.", n, a.Undecided/a.Started))
	}
	return lines
}

func (f *FarField) caption(program string) []string {
	t := f.Starts.tracer.Table()
	head := fmt.Sprintf("far field, angle counter-clockwise from +x, bins of %.3g°%s.", 360/float64(f.Bins), laws(t))
	head = measure.Head(t) + head
	return append(append([]string{head}, f.Lines()...), measure.Foot(t, program))
}
