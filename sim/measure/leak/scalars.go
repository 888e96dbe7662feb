package leak

import (
	"fmt"
	"math"
	"strings"

	"cavitywright/sim/figure"
)

// Scalars are the numbers of a survival curve, each with what has to be said
// of it.
func (f *Fall) Scalars(seed uint64) []figure.Scalar {
	unit := f.Starts.tracer.Table().Design().Unit.String()
	var rows []figure.Scalar
	add := func(name string, value, err float64, unit, note string) {
		rows = append(rows, figure.Scalar{Name: name, Value: value, StdErr: err, Unit: unit, Bounces: f.Flights, Seed: seed, Note: note})
	}
	if w := f.Window; f.HasWindow {
		note := fmt.Sprintf("fall of what is left from path %.4g to %.4g %s, %s", w.From, w.To, unit, f.Starts.Words())
		if w.Short {
			note += "; the curve is too short to show whether the rate stays"
		}
		add("rate in the window", w.Rate, w.Err, "1/"+unit, note)
	}
	if w := f.PerBounce; f.HasPerBounce {
		add("rate per bounce", w.Rate, w.Err, "1/bounce", fmt.Sprintf("fall of what is left from bounce %.0f to %.0f, %s", w.From, w.To, f.Starts.Words()))
	}
	if t := f.Tail; t != nil {
		add("exponent of the tail", t.Exponent, t.Err, "1", fmt.Sprintf("what is left falls as t to the minus this power from path %.4g to %.4g %s", t.From, t.To, unit))
	}
	if f.Naive > 0 {
		rows = append(rows, figure.Scalar{Name: "rate of a small opening", Value: f.Naive, Unit: "1/" + unit, Note: "exact, W / (pi A): leading order in a mixing table (Bauer and Bertsch 1990)"})
	}
	mean, err := f.Dwell()
	add("mean path until gone", mean, err, unit, fmt.Sprintf("of these starts, what was gone by path %.4g %s, %s", f.Times[len(f.Times)-1], unit, f.Starts.Words()))
	left, err := f.ByPath.At(len(f.Times) - 1)
	add("left at the end", left, err, "1", fmt.Sprintf("share at path %.4g %s", f.Times[len(f.Times)-1], unit))
	return rows
}

// mostTwins bounds the lobes that are listed beside the greatest.
const mostTwins = 5

// Scalars are the numbers of a far field. name is the polarisation, empty
// where the table says it; the window looks towards a direction and has a half
// width (radians).
func (f *FarField) Scalars(name string, seed uint64, towards, half float64) []figure.Scalar {
	const deg = math.Pi / 180
	unit := f.Starts.tracer.Table().Design().Unit.String()
	if name != "" {
		name = ", " + name
	}
	rest := strings.TrimSuffix(strings.Join(f.Lines(), " "), ".")
	var rows []figure.Scalar
	add := func(what string, value, err float64, unit, note string) {
		rows = append(rows, figure.Scalar{Name: what + name, Value: value, StdErr: err, Unit: unit, Bounces: f.Flights, Seed: seed, Note: note})
	}
	share, err := f.Share(towards, half)
	add("window share", share, err, "1", fmt.Sprintf("within ±%.4g° of %.4g°; %s", half/deg, towards/deg, rest))
	share, err = f.Share(towards+math.Pi, half)
	add("back share", share, err, "1", fmt.Sprintf("within ±%.4g° of the opposite direction", half/deg))
	l := f.Lobe()
	add("lobe width", l.Width/deg, l.WidthErr/deg, "°", fmt.Sprintf("full width at half of the greatest lobe's height, under a running mean of %.3g°", lobeSmoothing/deg))
	add("lobe direction", l.Direction/deg, l.DirectionErr/deg, "°", "middle of the greatest lobe, counter-clockwise from +x")
	for i, twin := range l.Twins[:min(len(l.Twins), mostTwins)] {
		add(fmt.Sprintf("twin lobe %d", i+1), twin.Direction/deg, twin.DirectionErr/deg, "°", "direction of another lobe that is as high within its error, as the mirror image of a lobe is")
	}
	value, err := f.MeanCosine()
	add("mean cosine", value, err, "1", "of the direction from +x")
	value, err = f.Entropy()
	add("entropy", value, err, "1", fmt.Sprintf("of the far field in bins of %.3g°, relative to an even one", lobeSmoothing/deg))
	value, err = f.MeanPath()
	add("mean path", value, err, unit, "of what leaves")
	return rows
}

// Scalars are the best and the worst place for each width.
func (p *Places) Scalars(seed uint64) []figure.Scalar {
	unit := p.Tracer.Table().Design().Unit.String()
	var rows []figure.Scalar
	for k, w := range p.Widths {
		of := "" // which width, where there are several
		if len(p.Widths) > 1 {
			of = fmt.Sprintf(", width %.4g %s", w, unit)
		}
		best, worst := p.ends(k)
		for _, e := range []struct {
			what string
			i    int
		}{{"greatest", best}, {"least", worst}} {
			if e.i < 0 {
				continue
			}
			n := k*len(p.S) + e.i
			note := fmt.Sprintf("opening %.4g %s wide at s = %.5g %s, on path %.4g to %.4g %s", w, unit, p.S[e.i], unit, p.From, p.To, unit)
			if p.Slow(k, e.i) {
				note += fmt.Sprintf("; it slows to %.3g after that", p.Late[n])
			}
			rows = append(rows, figure.Scalar{Name: fmt.Sprintf("%s, s = %.4g %s", e.what, p.S[e.i], unit) + of, Value: p.Rates[n], StdErr: p.Errs[n], Unit: "1/" + unit, Bounces: p.Flights, Seed: seed, Note: note})
		}
		rows = append(rows, figure.Scalar{Name: "rate of a small opening" + of, Value: p.Naive[k], Unit: "1/" + unit, Note: fmt.Sprintf("exact, W / (pi A) for a width of %.4g %s", w, unit)})
	}
	return rows
}

// ends are the places of the greatest and the least rate for a width, -1 for
// none.
func (p *Places) ends(k int) (best, worst int) {
	best, worst = -1, -1
	for i := range p.S {
		r := p.Rates[k*len(p.S)+i]
		if math.IsNaN(r) {
			continue
		}
		if best < 0 || r > p.Rates[k*len(p.S)+best] {
			best = i
		}
		if worst < 0 || r < p.Rates[k*len(p.S)+worst] {
			worst = i
		}
	}
	return best, worst
}

// Overlaid is a figure with the curves of another of its kind over it; onto
// nil it is that other.
func Overlaid(onto, f figure.Figure) figure.Figure {
	switch a := onto.(type) {
	case figure.Polar:
		b := f.(figure.Polar)
		a.Curves = append(a.Curves, hued(b.Curves, len(a.Curves))...)
		a.Radius.Hi = math.Max(a.Radius.Hi, b.Radius.Hi)
		return a
	case figure.Series:
		b := f.(figure.Series)
		a.Curves = append(a.Curves, hued(b.Curves, len(a.Curves))...)
		a.Y.Lo, a.Y.Hi = math.Min(a.Y.Lo, b.Y.Lo), math.Max(a.Y.Hi, b.Y.Hi)
		return a
	}
	return f
}

// hued gives curves the colours after the first n.
func hued(curves []figure.Curve, n int) []figure.Curve {
	out := append([]figure.Curve(nil), curves...)
	for i := range out {
		out[i].Hue += n
	}
	return out
}
