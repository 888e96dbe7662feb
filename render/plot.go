package render

import (
	"math"
	"strings"

	"cavitywright/render/letter"
	"cavitywright/sim/figure"
)

// Plot is the layout of a figure with axes: where on the canvas its parts lie
// and which value stands where. Draw uses the very same layout, so that a live
// image laid over Frame fits the axes exactly.
type Plot struct {
	Box   Box // all of it
	Frame Box // the area between the axes; its lines are drawn just outside
	Strip Box // the colour of the wall under the s axis; empty where there is none
	X, Y  Ladder

	x, y           rule
	xTitle, yTitle string
	caption        []string
	keys           []keyRow
	detail         detail
}

// detail is how much of the writing around a plot there is room for.
type detail uint8

const (
	bare     detail = iota // the frame alone
	numbered               // and numbers
	titled                 // and axis labels
	full                   // and the caption
)

// The least inner frame, in type sizes, below which writing is left out.
const (
	leastFrameW = 9
	leastFrameH = 6
)

// Gaps around the writing, in small type sizes.
const (
	labelGap   = 0.45 // from the axis to its numbers
	titleGap   = 0.55 // from the numbers to the axis label
	captionGap = 0.70 // from the axis label to the caption
	lineHeight = 1.35 // from one line of the caption to the next
)

// LayoutDots lays out a scatter of points within a box.
func LayoutDots(f figure.Dots, box Box, look Look) Plot {
	return layout(f.X, f.Y, f.Strip, f.Caption, box, look)
}

// LayoutSeries lays out curves within a box.
func LayoutSeries(f figure.Series, box Box, look Look) Plot {
	return layout(f.X, f.Y, false, f.Caption, box, look)
}

// ToX is the canvas position of a value on the x axis. It is not bounded to
// the frame; a value that a logarithmic axis cannot show has no finite place.
func (p Plot) ToX(v float64) float64 { return p.x.to(v) }

// ToY is the canvas position of a value on the y axis.
func (p Plot) ToY(v float64) float64 { return p.y.to(v) }

// FromX is the value on the x axis at a canvas position.
func (p Plot) FromX(u float64) float64 { return p.x.from(u) }

// FromY is the value on the y axis at a canvas position.
func (p Plot) FromY(u float64) float64 { return p.y.from(u) }

// rule maps the values of one axis to canvas positions.
type rule struct {
	lo, hi float64 // ends of the axis; of their logarithms where log
	from0  float64 // canvas position of lo
	to0    float64 // canvas position of hi
	log    bool
}

// newRule makes a rule of an axis, whose ends are mended where they cannot
// serve: a plot of nothing is still drawn.
func newRule(a figure.Axis, from, to float64) rule {
	lo, hi := mended(a)
	r := rule{lo: lo, hi: hi, from0: from, to0: to, log: a.Scale == figure.Log}
	if r.log {
		r.lo, r.hi = math.Log10(lo), math.Log10(hi)
	}
	return r
}

// mended is the ends of the axis, or ends near them that differ, are finite,
// and on a logarithmic axis positive.
func mended(a figure.Axis) (lo, hi float64) {
	lo, hi = a.Lo, a.Hi
	if !finite(lo) || !finite(hi) || !finite(hi-lo) {
		lo, hi = 0, 1
	}
	if a.Scale == figure.Log {
		if lo <= 0 && hi <= 0 {
			return 0.1, 1
		}
		if lo <= 0 {
			lo = hi * 1e-6
		}
		if hi <= 0 {
			hi = lo * 1e-6
		}
		if lo == hi {
			return lo / 2, lo * 2
		}
		return lo, hi
	}
	if lo == hi {
		d := max(math.Abs(lo)/2, 0.5)
		return lo - d, lo + d
	}
	return lo, hi
}

func (r rule) to(v float64) float64 {
	if r.log {
		v = math.Log10(v)
	}
	return r.from0 + (v-r.lo)/(r.hi-r.lo)*(r.to0-r.from0)
}

func (r rule) from(u float64) float64 {
	v := r.lo + (u-r.from0)/(r.to0-r.from0)*(r.hi-r.lo)
	if r.log {
		return math.Pow(10, v)
	}
	return v
}

// layout finds the most detailed layout that leaves room for the plot itself.
func layout(x, y figure.Axis, strip bool, caption []string, box Box, look Look) Plot {
	for d := full; d > bare; d-- {
		p := layoutAt(d, x, y, strip, caption, box, look)
		if p.Frame.W() >= leastFrameW*look.Small && p.Frame.H() >= leastFrameH*look.Small {
			return p
		}
	}
	return layoutAt(bare, x, y, strip, caption, box, look)
}

// layoutAt lays out from the outside in: heights first, since they do not
// depend on any number's width, then the y axis, then the x axis.
func layoutAt(d detail, x, y figure.Axis, strip bool, caption []string, box Box, look Look) Plot {
	p := Plot{Box: box, detail: d}
	frame := box.Inset(look.Margin)
	if d == full {
		p.caption = wrap(caption, frame.W(), look.Small)
		if n := float64(len(p.caption)); n > 0 {
			frame.Max.Y -= (n-1)*lineHeight*look.Small + (captionGap+letter.Ascent)*look.Small
		}
		p.keys = keyRows(x.Keys, frame.W(), look)
		frame.Max.Y -= keysHeight(x.Keys, frame.W(), look)
	}
	if d >= titled {
		frame.Max.Y -= (letter.CapHeight+letter.Descent)*look.Text + titleGap*look.Small
		if y.Label != "" {
			frame.Min.X += letter.Ascent*look.Text + titleGap*look.Small
		}
	}
	if d >= numbered {
		frame.Max.Y -= (letter.CapHeight + labelGap) * look.Small
		frame.Min.Y += letter.CapHeight / 2 * look.Small
		if d >= titled && named(x.Marks) {
			frame.Min.Y += look.Small
		}
	}
	if strip {
		frame.Max.Y -= look.Tick + coatRoom(x, look) + look.Strip
	}
	frame.Max.Y, frame.Min.Y = look.floor(frame.Max.Y), look.ceil(frame.Min.Y)
	ylo, yhi := mended(y)
	p.Y = Ticks(ylo, yhi, y.Scale, int(min(max(frame.H()/(2.4*look.Small), 2), 8)))
	if d >= numbered {
		frame.Min.X += widest(p.Y, look) + labelGap*look.Small
		frame.Max.X -= markNames(y.Marks, look)
	}
	frame.Min.X = look.ceil(frame.Min.X)
	p.layoutX(x, &frame, look)
	p.Frame = frame
	p.y = newRule(y, frame.Max.Y, frame.Min.Y)
	if strip {
		top := look.floor(frame.Max.Y + look.Tick + coatRoom(x, look))
		p.Strip = Box{Point{frame.Min.X, top}, Point{frame.Max.X, top + look.ceil(look.Strip)}}
	}
	p.xTitle, p.yTitle = title(x, p.X.Exp), title(y, p.Y.Exp)
	return p
}

// layoutX chooses as many ticks as have room for their numbers, and moves the
// right end in so far that the last number stays within the margin.
func (p *Plot) layoutX(x figure.Axis, frame *Box, look Look) {
	lo, hi := mended(x)
	right := frame.Max.X
	for most := int(min(max(frame.W()/(4*look.Small), 2), 10)); most >= 1; most-- {
		p.X = Ticks(lo, hi, x.Scale, most)
		frame.Max.X = look.floor(right)
		p.x = newRule(x, frame.Min.X, frame.Max.X)
		if p.detail < numbered {
			return
		}
		if over := p.overhang(look) - (p.Box.Max.X - look.Margin); over > 0 {
			frame.Max.X = look.floor(right - over)
			p.x = newRule(x, frame.Min.X, frame.Max.X)
		}
		if p.roomy(look) {
			return
		}
	}
}

// overhang is how far to the right the numbers of the x axis reach.
func (p *Plot) overhang(look Look) float64 {
	reach := math.Inf(-1)
	for _, t := range p.X.Major {
		reach = max(reach, p.x.to(t.At)+look.Small*letter.Width(t.Label, letter.Regular)/2)
	}
	return reach
}

// roomy says whether the numbers of the x axis stand clear of each other.
func (p *Plot) roomy(look Look) bool {
	for i := 1; i < len(p.X.Major); i++ {
		a, b := p.X.Major[i-1], p.X.Major[i]
		half := look.Small * (letter.Width(a.Label, letter.Regular) + letter.Width(b.Label, letter.Regular)) / 2
		if math.Abs(p.x.to(b.At)-p.x.to(a.At)) < half+0.8*look.Small {
			return false
		}
	}
	return true
}

// widest is the width of the longest number of a ladder.
func widest(l Ladder, look Look) float64 {
	w := 0.0
	for _, t := range l.Major {
		w = max(w, look.Small*letter.Width(t.Label, letter.Regular))
	}
	return w
}

// markNames is the room that the names of the y marks need beside the frame.
func markNames(marks []figure.Mark, look Look) float64 {
	w := 0.0
	for _, m := range marks {
		if m.Name != "" && !(m.From < m.To) {
			w = max(w, look.Small*letter.Width(m.Name, letter.Regular)+labelGap*look.Small)
		}
	}
	return w
}

// named says whether any mark has a name.
func named(marks []figure.Mark) bool {
	for _, m := range marks {
		if m.Name != "" {
			return true
		}
	}
	return false
}

// title is what is written along an axis: its label, and in brackets the unit
// with the power of ten that was taken out of the numbers.
func title(a figure.Axis, exp int) string {
	if a.Label == "" {
		return ""
	}
	unit := unitText(a.Unit)
	if exp != 0 {
		unit = strings.TrimSpace("10" + superscript(exp) + " " + unit)
	}
	if unit == "" {
		return a.Label
	}
	return a.Label + " (" + unit + ")"
}
