package chaos

import (
	"fmt"
	"math"

	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/table"
)

// Trace is how the exponent per length settles with the bounces used: the same
// orbits read off after a part of their bounces, ever twice as many. program is
// the name and version that the caption ends with.
func (t *StretchingTally) Trace(tab *table.Table, program string) figure.Series {
	unit := tab.Design().Unit.String()
	var c figure.Curve
	for k := levels - 1; k >= 0; k-- {
		n := t.counted(k)
		rate, err := t.perLength(k)
		if n > 0 {
			c.X, c.Y, c.Err = append(c.X, n), append(c.Y, rate), append(c.Err, err)
		}
	}
	caption := fmt.Sprintf("%slargest Lyapunov exponent per length of the chaotic orbits, %d of %d, each read off after %d to %d bounces; the band is one standard error, from the scatter of %d independent lattices of starts.",
		measure.Head(tab), t.Chaotic, t.Chaotic+t.Regular, Level(t.of.Each, levels-1), t.of.Each, len(t.lots.Rows))
	return settled(c, "λ", "1/"+unit, []string{caption, measure.Foot(tab, program)})
}

// Trace is how the chaotic share of the section changes with the bounces of an
// orbit, by both methods.
func (t *SharingTally) Trace(tab *table.Table, program string) figure.Series {
	names := [methods]string{"by growth", "by averages"}
	f := figure.Series{X: figure.Axis{Label: "bounces of an orbit", Scale: figure.Log}, Y: figure.Axis{Label: "chaotic share of the section"}}
	orbits := 0
	for m := range names {
		c := figure.Curve{Name: names[m], Hue: m}
		for k := levels - 1; k >= 0; k-- {
			if n := Level(t.of.Each, k); n >= leastLevel {
				share, err := t.SectionAt(Method(m), k)
				c.X, c.Y, c.Err = append(c.X, float64(n)), append(c.Y, share), append(c.Err, err)
			}
		}
		f.Curves = append(f.Curves, c)
	}
	for i := range t.lots.Rows {
		orbits += int(t.lots.Rows[i].orbits)
	}
	span(&f)
	f.Y.Lo, f.Y.Hi = math.Max(f.Y.Lo, 0), math.Min(f.Y.Hi, 1.02)
	drift := ""
	if t.Drifts(ByGrowth) {
		drift = " It still drifts."
	}
	f.Caption = []string{
		fmt.Sprintf("%schaotic share of ds dp by the bounces used of each of %d orbits; the bands are one standard error.%s", measure.Head(tab), orbits, drift),
		measure.Foot(tab, program),
	}
	return f
}

// settled is a curve by the bounces used.
func settled(c figure.Curve, label, unit string, caption []string) figure.Series {
	f := figure.Series{
		X:      figure.Axis{Label: "bounces used", Scale: figure.Log},
		Y:      figure.Axis{Label: label, Unit: unit},
		Curves: []figure.Curve{c}, Caption: caption,
	}
	span(&f)
	return f
}

// span sets the ends of the axes about the points and their errors, with a
// margin.
func span(f *figure.Series) {
	x0, x1, y0, y1 := math.Inf(1), 0.0, math.Inf(1), math.Inf(-1)
	for _, c := range f.Curves {
		for i := range c.X {
			x0, x1 = math.Min(x0, c.X[i]), math.Max(x1, c.X[i])
			if e := c.Err[i]; !math.IsNaN(c.Y[i]) && !math.IsNaN(e) {
				y0, y1 = math.Min(y0, c.Y[i]-e), math.Max(y1, c.Y[i]+e)
			}
		}
	}
	if !(x0 <= x1) || !(y0 <= y1) {
		f.X.Lo, f.X.Hi, f.Y.Lo, f.Y.Hi = 1, 10, 0, 1
		return
	}
	gap := 0.08*(y1-y0) + 1e-12*math.Abs(y1)
	f.X.Lo, f.X.Hi, f.Y.Lo, f.Y.Hi = x0/1.3, x1*1.3, y0-gap, y1+gap
}
