package render

import (
	"image/color"
	"math"

	"cavitywright/render/letter"
	"cavitywright/sim/figure"
)

// DrawAxes draws all of a scatter but its dots, onto whatever is there: frame,
// ticks, numbers, labels, strip, marks and caption.
func DrawAxes(c Canvas, f figure.Dots, p Plot, look Look) {
	drawFrame(c, f, p, look)
	DrawMarks(c, f, p, look)
}

func drawFrame(c Canvas, f figure.Dots, p Plot, look Look) {
	if f.Strip {
		drawStrip(c, f, p, look)
		drawCoats(c, f.X, p, look)
	}
	drawAxes(c, p, look)
	drawJoints(c, f, p, look)
	if p.detail >= titled {
		drawNames(c, f.X.Marks, p, look)
	}
}

// DrawDots draws the dots of a scatter, set by set, those within the frame.
func DrawDots(c Canvas, f figure.Dots, p Plot, look Look) {
	r := DotRadius(f, p, look)
	for _, set := range f.Sets {
		n := min(len(set.X), len(set.Y))
		xs, ys := make([]float64, 0, n), make([]float64, 0, n)
		for i := range n {
			q := Point{p.ToX(set.X[i]), p.ToY(set.Y[i])}
			if p.Frame.Contains(q) {
				xs, ys = append(xs, q.X), append(ys, q.Y)
			}
		}
		c.Dots(Dots{X: xs, Y: ys, Radius: r, Color: look.Orbit(set.Hue)})
	}
}

// Shares of the frame's area that the discs of all dots together may cover
// before they shrink, and the bounds of the change.
const (
	inkShare   = 0.20
	leastDot   = 0.60
	largestDot = 1.30
)

// DotRadius is the radius of the dots of a scatter: that of the look, somewhat
// larger where there are few and smaller where they would merge into a black.
func DotRadius(f figure.Dots, p Plot, look Look) float64 {
	n := 0
	for _, s := range f.Sets {
		n += len(s.X)
	}
	share := float64(n) * math.Pi * look.Dot * look.Dot / max(p.Frame.W()*p.Frame.H(), 1e-300)
	// The fourth root: half way, by eye, between equal dots and equal grey.
	factor := math.Pow(inkShare/max(share, 1e-300), 0.25)
	return look.Dot * min(max(factor, leastDot), largestDot)
}

// DrawMarks draws what lies over the dots: dashed critical lines, a line where
// a loop of the wall begins, and the spots.
func DrawMarks(c Canvas, f figure.Dots, p Plot, look Look) {
	for _, m := range f.X.Marks {
		x := look.snap(p.ToX(m.At))
		if m.Kind == figure.LoopStart && x > p.Frame.Min.X+look.Hair && x < p.Frame.Max.X-look.Hair {
			c.Stroke(Segment(Point{x, p.Frame.Min.Y}, Point{x, p.Frame.Max.Y}),
				Pen{Width: look.Hair, Color: look.Ink, Cap: Butt})
		}
	}
	drawLevels(c, f.Y.Marks, p, look)
	drawSpots(c, f, p, look)
}

// nameOver writes the name of a line over a stretch of the axis on paper at the
// line's right end, within the frame; none where the stretch is short.
func nameOver(c Canvas, name string, end Point, room float64, p Plot, look Look) {
	w, gap := look.Small*letter.Width(name, letter.Regular), 0.3*look.Small
	h := letter.CapHeight*look.Small + 2*gap
	if name == "" || p.detail < numbered || 2*w > room {
		return
	}
	top := end.Y - gap - h
	if top < p.Frame.Min.Y {
		top = end.Y + gap
	}
	ground := NewBox(end.X-w-3*gap, top, w+2*gap, h)
	c.Fill(ground.Path(), Fade(look.Paper, 0.85))
	c.Text(Text{At: Point{ground.Max.X - gap, top + h/2}, Size: look.Small, String: name, H: Right, V: Middle, Color: look.Ink})
}

// drawLevels draws the marks of a y axis: dashed lines right across, with
// their names beside the frame, or within it where they cross a stretch alone. A line of paper colour under the dashes keeps
// them readable across a dense sea.
func drawLevels(c Canvas, marks []figure.Mark, p Plot, look Look) {
	free := math.Inf(1)
	for i := range marks {
		m := marks[i]
		y := p.ToY(m.At)
		if !(y >= p.Frame.Min.Y && y <= p.Frame.Max.Y) {
			continue
		}
		x0, x1 := p.Frame.Min.X, p.Frame.Max.X
		if m.From < m.To {
			a, b := p.ToX(m.From), p.ToX(m.To)
			x0, x1 = max(x0, min(a, b)), min(x1, max(a, b))
		}
		if !(x0 < x1) {
			continue
		}
		line := Segment(Point{x0, look.snap(y)}, Point{x1, look.snap(y)})
		if m.Kind == figure.Critical {
			c.Stroke(line, Pen{Width: 3 * look.Hair, Color: look.Paper, Cap: Butt})
			dash := 1.6 * look.Tick
			c.Stroke(line, Pen{Width: 1.4 * look.Hair, Color: look.Ink, Dash: []float64{dash, 0.6 * dash}, Cap: Butt})
		} else {
			c.Stroke(line, Pen{Width: look.Hair, Color: look.Ink, Cap: Butt})
		}
		if m.From < m.To {
			nameOver(c, m.Name, Point{x1, y}, x1-x0, p, look)
		} else if p.detail >= numbered && m.Name != "" && math.Abs(y-free) > look.Small {
			free = y
			c.Text(Text{At: Point{p.Frame.Max.X + labelGap*look.Small, y}, Size: look.Small,
				String: m.Name, V: Middle, Color: look.Ink})
		}
	}
}

// drawStrip paints the colour of the wall under the s axis, in upright slices
// that overlap so that no seam shows between them.
func drawStrip(c Canvas, f figure.Dots, p Plot, look Look) {
	slices := min(wheelSteps/2, int(p.Strip.W()/max(look.Grid, 1e-9)))
	w := p.Strip.W() / float64(max(slices, 1))
	for i := range slices {
		x := p.Strip.Min.X + w*float64(i)
		at := (p.FromX(x+w/2) - f.StripLo) / (f.StripHi - f.StripLo)
		if !(at >= 0 && at <= 1) {
			continue
		}
		next := min(x+1.5*w, p.Strip.Max.X)
		c.Fill(NewBox(x, p.Strip.Min.Y, next-x, p.Strip.H()).Path(), look.Hue(at))
	}
}

// drawJoints draws the joints of the wall and the starts of its loops as ticks
// from the s axis through the strip.
func drawJoints(c Canvas, f figure.Dots, p Plot, look Look) {
	for _, m := range f.X.Marks {
		x := p.ToX(m.At)
		if m.Kind == figure.Critical || !(x >= p.Frame.Min.X && x <= p.Frame.Max.X) {
			continue
		}
		end := p.Frame.Max.Y + look.Tick
		if f.Strip {
			end = p.Strip.Max.Y
		}
		x = min(look.snap(x), p.Frame.Max.X-look.Hair/2)
		c.Stroke(Segment(Point{x, p.Frame.Max.Y}, Point{x, end}), Pen{Width: look.Hair, Color: look.Ink, Cap: Butt})
	}
}

// drawNames sets the names of the x marks above the frame, a loop's to the
// right of its start, a joint's over it; a name without room is left out.
func drawNames(c Canvas, marks []figure.Mark, p Plot, look Look) {
	free := math.Inf(-1)
	for _, m := range marks {
		x := p.ToX(m.At)
		if m.Name == "" || !(x >= p.Frame.Min.X && x <= p.Frame.Max.X) {
			continue
		}
		w := look.Small * letter.Width(m.Name, letter.Regular)
		left := x - w/2
		if m.Kind == figure.LoopStart {
			left = x
		}
		left = min(max(left, p.Frame.Min.X), p.Frame.Max.X-w)
		if left < free {
			continue
		}
		free = left + w + look.Small
		c.Text(Text{At: Point{left, p.Frame.Min.Y - labelGap*look.Small}, Size: look.Small,
			String: m.Name, Color: look.Ink})
	}
}

// drawAxes draws the frame with ticks inward on all sides, numbers, labels and
// the caption. The frame's lines lie just outside the plot area.
func drawAxes(c Canvas, p Plot, look Look) {
	pen := Pen{Width: look.Hair, Color: look.Ink, Cap: Butt}
	c.Stroke(p.Frame.Inset(-look.Hair/2).Path(), pen)
	for _, t := range p.X.Major {
		drawTickX(c, p.ToX(t.At), look.Tick, p, pen, look)
	}
	for _, v := range p.X.Minor {
		drawTickX(c, p.ToX(v), look.Tick/2, p, pen, look)
	}
	for _, t := range p.Y.Major {
		drawTickY(c, p.ToY(t.At), look.Tick, p, pen, look)
	}
	for _, v := range p.Y.Minor {
		drawTickY(c, p.ToY(v), look.Tick/2, p, pen, look)
	}
	if p.detail >= numbered {
		drawNumbers(c, p, look.Ink, look)
	}
	if p.detail >= titled {
		drawTitles(c, p, look)
	}
	if len(p.keys) > 0 {
		bottom := p.Box.Max.Y - look.Margin - captionHeight(p.caption, math.Inf(1), look)
		drawKeyRows(c, p.keys, p.Box.Min.X+look.Margin, bottom-float64(len(p.keys))*keyLine*look.Small, look)
	}
	drawCaption(c, p.caption, p.Box.Min.X+look.Margin, p.Box.Max.Y-look.Margin, look)
}

func drawTickX(c Canvas, x, length float64, p Plot, pen Pen, look Look) {
	if x <= p.Frame.Min.X+pen.Width || x >= p.Frame.Max.X-pen.Width {
		return
	}
	x = look.snap(x)
	c.Stroke(Segment(Point{x, p.Frame.Max.Y}, Point{x, p.Frame.Max.Y - length}), pen)
	c.Stroke(Segment(Point{x, p.Frame.Min.Y}, Point{x, p.Frame.Min.Y + length}), pen)
}

func drawTickY(c Canvas, y, length float64, p Plot, pen Pen, look Look) {
	if y <= p.Frame.Min.Y+pen.Width || y >= p.Frame.Max.Y-pen.Width {
		return
	}
	y = look.snap(y)
	c.Stroke(Segment(Point{p.Frame.Min.X, y}, Point{p.Frame.Min.X + length, y}), pen)
	c.Stroke(Segment(Point{p.Frame.Max.X, y}, Point{p.Frame.Max.X - length, y}), pen)
}

// drawNumbers sets the numbers at the ticks.
func drawNumbers(c Canvas, p Plot, ink color.RGBA, look Look) {
	top := p.numbersTop(look)
	for _, t := range p.X.Major {
		c.Text(Text{At: Point{p.ToX(t.At), top}, Size: look.Small, String: t.Label, H: Center, V: Top, Color: ink})
	}
	right := p.Frame.Min.X - labelGap*look.Small
	for _, t := range p.Y.Major {
		c.Text(Text{At: Point{right, p.ToY(t.At)}, Size: look.Small, String: t.Label, H: Right, V: Middle, Color: ink})
	}
}

// numbersTop is the top of the numbers of the x axis.
func (p Plot) numbersTop(look Look) float64 {
	return max(p.Frame.Max.Y, p.Strip.Max.Y) + labelGap*look.Small
}

// drawTitles sets the axis labels, each centred on its axis as far as the box
// allows.
func drawTitles(c Canvas, p Plot, look Look) {
	mid := p.Frame.Center()
	y := p.numbersTop(look) + (letter.CapHeight+titleGap)*look.Small
	drawTitle(c, Text{At: Point{mid.X, y}, String: p.xTitle, V: Top}, p.Box, look)
	x := p.Box.Min.X + look.Margin + (letter.Ascent-letter.Descent)*look.Text
	drawTitle(c, Text{At: Point{x, mid.Y}, String: p.yTitle, Turn: Upward}, p.Box, look)
}

// drawTitle sets one axis label, in the smaller type where the box is too short
// for it, and not at all where even that is too long.
func drawTitle(c Canvas, t Text, box Box, look Look) {
	t.H, t.Color = Center, look.Ink
	at, lo, hi := &t.At.X, box.Min.X, box.Max.X
	if t.Turn == Upward {
		at, lo, hi = &t.At.Y, box.Min.Y, box.Max.Y
	}
	for _, t.Size = range [...]float64{look.Text, look.Small} {
		if w := t.Width(); w > 0 && w <= hi-lo {
			*at = min(max(*at, lo+w/2), hi-w/2)
			c.Text(t)
			return
		}
	}
}
