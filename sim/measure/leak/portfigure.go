package leak

import (
	"fmt"
	"math"

	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
)

// Matrix are the shares of the transmission matrix as readings: "1 to 2" is
// what comes in through opening 1 and leaves through opening 2.
func (s *Scattering) Matrix(seed uint64) figure.Scalars {
	var f figure.Scalars
	unit := s.Tracer.Table().Design().Unit.String()
	add := func(name string, value, err float64, unit, note string) {
		f.Rows = append(f.Rows, figure.Scalar{Name: name, Value: value, StdErr: err, Unit: unit, Bounces: s.Flights, Seed: seed, Note: note})
	}
	for i, p := range s.Ports {
		for j := range s.Ports {
			share, err := s.Share(i, j)
			note := "transmission"
			if i == j {
				note = "reflection"
			}
			add(fmt.Sprintf("opening %d to %d", i+1, j+1), share, err, "1", note)
		}
		elsewhere, absorbed, kept := s.Rest(i)
		for _, r := range []struct {
			value float64
			what  string
		}{{elsewhere, "left elsewhere"}, {absorbed, "absorbed"}, {kept, "still inside"}} {
			if math.Abs(r.value) > 1e-12 {
				add(fmt.Sprintf("opening %d, %s", i+1, r.what), r.value, 0, "1", fmt.Sprintf("after at most %d bounces", s.Each))
			}
		}
		mean, err := s.Dwell(i)
		add(fmt.Sprintf("opening %d, mean dwell", i+1), mean, err, unit, fmt.Sprintf("path until it leaves; the opening is %.4g %s wide", p.Width, unit))
	}
	return f
}

// Dwells is the distribution of the path between entering and leaving: the
// share per length of what comes in through each opening, as steps.
func (s *Scattering) Dwells(program string) figure.Series {
	tab := s.Tracer.Table()
	unit := tab.Design().Unit.String()
	f := figure.Series{
		X: figure.Axis{Label: "path", Unit: unit, Lo: 0, Hi: s.Paths[len(s.Paths)-1]},
		Y: figure.Axis{Label: "share", Unit: "1/" + unit, Scale: figure.Log, Lo: math.Inf(1)},
	}
	for i := range s.Ports {
		c := figure.Curve{Name: fmt.Sprintf("in through opening %d", i+1), Hue: i, Form: figure.Steps}
		before := 0.0
		for k, end := range s.Paths {
			share, err := s.of(i, func(p *passed) float64 { return p.byPath[k] })
			w := end - before
			c.X, c.Y, c.Err = append(c.X, before+w/2), append(c.Y, share/w), append(c.Err, err/w)
			if share > 0 {
				f.Y.Lo, f.Y.Hi = math.Min(f.Y.Lo, share/w), math.Max(f.Y.Hi, share/w)
			}
			before = end
		}
		f.Curves = append(f.Curves, c)
	}
	mean, err := s.Dwell(-1)
	width := 0.0
	for _, p := range s.Ports {
		width += p.Width
	}
	head := fmt.Sprintf("path from entering through an opening by the cosine law to leaving; %d rays through each of %d openings; mean %s %s, πA/W = %.5g %s.",
		s.Rays, len(s.Ports), figure.Sentence(mean, err), unit, math.Pi*tab.Area()/width, unit)
	head = measure.Head(tab) + head
	f.Caption = []string{head, measure.Foot(tab, program)}
	return f
}

// Curve is the rate against the middle of the opening, for each width, with
// the rate of a small opening in a mixing table as lines.
func (p *Places) Curve(program string) figure.Series {
	tab := p.Tracer.Table()
	unit := tab.Design().Unit.String()
	f := figure.Series{
		X: figure.Axis{Label: "s, middle of the opening", Unit: unit, Lo: 0, Hi: tab.Length()},
		Y: figure.Axis{Label: "rate", Unit: "1/" + unit},
	}
	slow, most := 0, 0.0
	for k, w := range p.Widths {
		c := figure.Curve{Name: fmt.Sprintf("width %.4g %s", w, unit), Hue: k, X: p.S,
			Y: p.Rates[k*len(p.S) : (k+1)*len(p.S)], Err: p.Errs[k*len(p.S) : (k+1)*len(p.S)]}
		line := figure.Curve{Name: naiveName, Hue: 6, Form: figure.Guide, X: []float64{0, tab.Length()}, Y: []float64{p.Naive[k], p.Naive[k]}}
		if k > 0 {
			line.Name = ""
		}
		f.Curves = append(f.Curves, c, line)
		most = math.Max(most, math.Max(highest(c.Y), p.Naive[k]))
		for i := range p.S {
			if p.Slow(k, i) {
				slow++
			}
		}
	}
	f.Y.Hi = 1.08 * most
	for _, j := range tab.Joints() {
		f.X.Marks = append(f.X.Marks, figure.Mark{At: j.S, Kind: figure.Joint})
	}
	f.Caption = p.caption(program, slow)
	return f
}

// Map is the rate against place and width, as cells between the widths, which
// must be evenly spaced.
func (p *Places) Map(program string) figure.Grid {
	tab := p.Tracer.Table()
	unit := tab.Design().Unit.String()
	n := len(p.Widths)
	step := p.Widths[0]
	if n > 1 {
		step = p.Widths[1] - p.Widths[0]
	}
	f := figure.Grid{
		X:     figure.Axis{Label: "s, middle of the opening", Unit: unit, Lo: 0, Hi: tab.Length()},
		Y:     figure.Axis{Label: "width", Unit: unit, Lo: p.Widths[0] - step/2, Hi: p.Widths[n-1] + step/2},
		Value: figure.Axis{Label: "rate × πA/W"}, Columns: len(p.S), Rows: n,
		Strip: true, StripHi: tab.Length(), Values: make([]float64, len(p.Rates)),
	}
	f.Value.Lo = math.Inf(1)
	slow := 0
	for i, r := range p.Rates {
		v := r / p.Naive[i/len(p.S)]
		f.Values[i] = v
		if !math.IsNaN(v) {
			f.Value.Lo, f.Value.Hi = math.Min(f.Value.Lo, v), math.Max(f.Value.Hi, v)
		}
		if p.Slow(i/len(p.S), i%len(p.S)) {
			slow++
		}
	}
	f.Caption = p.caption(program, slow)
	return f
}

func (p *Places) caption(program string, slow int) []string {
	tab := p.Tracer.Table()
	d := tab.Design()
	head := fmt.Sprintf("rate at which %d rays, even in ds dp and the same for all places, leave through one opening, from path %.4g to %.4g %s.", p.Rays, p.From, p.To, d.Unit)
	head = measure.Head(tab) + head
	lines := []string{head}
	if slow > 0 {
		lines = append(lines, fmt.Sprintf("At %d of %d places it slows after path %.4g %s: what is left does not fall exponentially there.", slow, len(p.Rates), p.To, d.Unit))
	}
	return append(lines, measure.Foot(tab, program))
}
