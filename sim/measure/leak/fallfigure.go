package leak

import (
	"fmt"
	"math"
	"slices"

	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
)

// Clock is what time is counted in.
type Clock uint8

// The clocks.
const (
	ByPath   Clock = iota // true path
	ByBounce              // bounces
)

const (
	// drawnMarks is the number of points of a curve on a linear axis.
	drawnMarks = 200
	// naiveName and fitName are the reference lines of a survival curve.
	naiveName = "W/(πA)"
	// flatExponent is the power below which a tail is called flat.
	flatExponent = 0.3
)

// Figure is the survival curve over a linear or a logarithmic axis of the
// path, or of bounces, with the exponential window and the rate of a small
// opening as lines. program is the name and version that the caption ends with.
func (f *Fall) Figure(clock Clock, scale figure.Scale, program string) figure.Series {
	unit := f.Starts.tracer.Table().Design().Unit.String()
	s := figure.Series{
		X: figure.Axis{Label: "path t", Unit: unit, Scale: scale},
		Y: figure.Axis{Label: "left P", Scale: figure.Log},
	}
	times, lefts := f.Times, f.ByPath
	if clock == ByBounce {
		s.X.Label, s.X.Unit = "bounces n", ""
		times, lefts = f.Bounces(), f.ByCount
	}
	all := figure.Curve{Name: "left", Hue: 0}
	least := 1.0
	last := len(times) - 1
	next := 0.0
	for k, at := range times {
		if scale == figure.Log && at <= 0 || scale == figure.Linear && at < next && k < last {
			continue
		}
		share, err := lefts.At(k)
		if !(share > 0) || share < 1e-12 {
			break
		}
		next += times[len(times)-1] / drawnMarks
		if scale == figure.Log {
			next = 0
		}
		all.X, all.Y, all.Err = append(all.X, at), append(all.Y, share), append(all.Err, err)
		least = math.Min(least, share)
	}
	if scale == figure.Log {
		all = thinned(all)
	}
	s.Curves = []figure.Curve{all}
	if n := len(all.X); n > 0 {
		s.X.Lo, s.X.Hi = all.X[0], all.X[n-1]
		if scale == figure.Linear {
			s.X.Lo = 0
		}
	}
	s.Y.Lo, s.Y.Hi = math.Pow(10, math.Floor(math.Log10(least)*4)/4), 1
	if clock == ByPath {
		f.lines(&s)
	} else if f.HasPerBounce {
		k, _ := slices.BinarySearch(f.Counts, int((f.PerBounce.From+f.PerBounce.To)/2))
		share, _ := f.ByCount.At(k)
		windowed(&s, f.PerBounce, float64(f.Counts[k]), share, "")
	}
	s.Caption = f.caption(program)
	return s
}

// thinned keeps of a curve's points those that are at least a hundredth of a
// decade apart.
func thinned(c figure.Curve) figure.Curve {
	out := figure.Curve{Name: c.Name, Hue: c.Hue}
	at := 0.0
	for i, x := range c.X {
		if x >= at*math.Pow(10, 0.01) || i == len(c.X)-1 {
			out.X, out.Y, out.Err = append(out.X, x), append(out.Y, c.Y[i]), append(out.Err, c.Err[i])
			at = x
		}
	}
	return out
}

// exponential adds a straight line of the semi-log plot: share at the clock's
// reading at, falling at a rate.
func exponential(s *figure.Series, name string, hue int, at, share, rate, from, to float64) {
	c := figure.Curve{Name: name, Hue: hue, Form: figure.Guide}
	for i := range drawnMarks + 1 {
		t := from + (to-from)*float64(i)/drawnMarks
		y := share * math.Exp(-rate*(t-at))
		if t > 0 && y >= s.Y.Lo*0.99 || t == 0 && s.X.Scale == figure.Linear {
			c.X, c.Y = append(c.X, t), append(c.Y, y)
		}
	}
	s.Curves = append(s.Curves, c)
}

// windowed adds the exponential of a window, through a share of the curve, and
// marks its ends.
func windowed(s *figure.Series, w Window, at, share float64, unit string) {
	name := fmt.Sprintf("exp(−n × %.4g)", w.Rate)
	if unit != "" {
		name = fmt.Sprintf("exp(−t × %.4g/%s)", w.Rate, unit)
	}
	exponential(s, name, 3, at, share, w.Rate, w.From, w.To)
	for _, m := range []figure.Mark{{At: w.From, Kind: figure.Event}, {At: w.To, Kind: figure.Event}} {
		if m.At > s.X.Lo && m.At < s.X.Hi {
			s.X.Marks = append(s.X.Marks, m)
		}
	}
}

// lines adds what the curve by path is compared with.
func (f *Fall) lines(s *figure.Series) {
	if f.HasWindow {
		mid := (f.Window.From + f.Window.To) / 2
		share, _ := f.Left(mid)
		windowed(s, f.Window, mid, share, f.Starts.tracer.Table().Design().Unit.String())
	}
	if f.Naive > 0 {
		exponential(s, naiveName, 6, 0, 1, f.Naive, s.X.Lo, s.X.Hi)
	}
	if f.Tail != nil {
		c := figure.Curve{Name: "t to the power " + figure.Sentence(-f.Tail.Exponent, f.Tail.Err), Hue: 4, Form: figure.Guide}
		share, _ := f.Left(f.Tail.To)
		for i := range drawnMarks + 1 {
			t := f.Tail.From * math.Pow(f.Tail.To/f.Tail.From, float64(i)/drawnMarks)
			c.X, c.Y = append(c.X, t), append(c.Y, share*math.Pow(t/f.Tail.To, -f.Tail.Exponent))
		}
		s.Curves = append(s.Curves, c)
	}
}

// Verdict says in sentences what the curve shows.
func (f *Fall) Verdict() string {
	unit := f.Starts.tracer.Table().Design().Unit.String()
	text := "No stretch of path has one rate."
	if w := f.Window; f.HasWindow {
		text = fmt.Sprintf("From path %.4g to %.4g %s what is left falls exponentially, at %s per %s.", w.From, w.To, unit, figure.Sentence(w.Rate, w.Err), unit)
		if w.Short {
			text = fmt.Sprintf("From path %.4g to %.4g %s what is left falls at %s per %s; the curve is too short to show whether the rate stays.", w.From, w.To, unit, figure.Sentence(w.Rate, w.Err), unit)
		}
	}
	if w := f.PerBounce; f.HasPerBounce {
		text += fmt.Sprintf(" Per bounce it is %s, from bounce %.0f to %.0f.", figure.Sentence(w.Rate, w.Err), w.From, w.To)
	}
	if f.Naive > 0 {
		text += fmt.Sprintf(" A small opening in a mixing table would give W/(πA) = %.4g per %s.", f.Naive, unit)
	}
	if t := f.Tail; t != nil && t.Exponent < flatExponent {
		share, err := f.Left(t.To)
		text += fmt.Sprintf(" Later it goes flat: %s of what started is still inside at path %.4g %s.", figure.Sentence(share, err), t.To, unit)
	} else if t != nil {
		word := "Later it slows"
		if !f.HasWindow {
			word = "It falls"
		}
		text += fmt.Sprintf(" %s: from %.4g to %.4g %s as t to the power %s.", word, t.From, t.To, unit, figure.Sentence(-t.Exponent, t.Err))
	}
	return text
}

func (f *Fall) caption(program string) []string {
	t := f.Starts.tracer.Table()
	head := measure.Head(t) + fmt.Sprintf("weight left of %d rays, %s; band: one standard error.", f.Rays, f.Starts.Words())
	lines := []string{head, f.Verdict()}
	if f.Short > 1e-6 {
		lines = append(lines, fmt.Sprintf("%.2g of the weight, on rays that creep along the wall, was counted as left when its bounces were used up.", f.Short))
	}
	if n := f.Stops.Undecided(); n > 0 {
		lines = append(lines, fmt.Sprintf("%d rays ended at a corner or along a tangent and count as left.", n))
	}
	return append(lines, measure.Foot(t, program))
}
