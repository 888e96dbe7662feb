package render

import (
	"math"

	"cavitywright/render/letter"
	"cavitywright/sim/figure"
)

// drawPaths draws a table with its rays, fitted into a box.
func drawPaths(c Canvas, f figure.Paths, box Box, look Look) {
	room, caption, _ := pathsRoom(f, box, look)
	keys := keyRows(f.Keys, box.W()-2*look.Margin, look)
	v := Fit(Bounds(f), room, look)
	DrawPaths(c, f, v, look)
	if room == box {
		return // too small for any writing
	}
	DrawScaleBar(c, f.Unit, v, NewBox(room.Min.X, room.Max.Y, room.W(), barHeight(look)), look)
	drawKeyRows(c, keys, box.Min.X+look.Margin, room.Max.Y+barHeight(look)+keyGap*look.Small, look)
	drawCaption(c, caption, box.Min.X+look.Margin, box.Max.Y-look.Margin, look)
}

// pathsRoom is what scale bar and caption leave of the box, the caption's
// lines, and the height that both use.
func pathsRoom(f figure.Paths, box Box, look Look) (room Box, caption []string, used float64) {
	caption = wrap(f.Caption, box.W()-2*look.Margin, look.Small)
	used = barHeight(look)
	if n := float64(len(caption)); n > 0 {
		used += (n-1)*lineHeight*look.Small + (captionGap+letter.Ascent+letter.Descent)*look.Small
	}
	if len(f.Keys) > 0 {
		used += keysHeight(f.Keys, box.W()-2*look.Margin, look) + keyGap*look.Small
	}
	used += look.Margin
	if box.H() > 0 && used > box.H()/2 {
		return box, nil, 0
	}
	room = box
	room.Max.Y -= used
	return room, caption, used
}

// keyGap is between the scale bar and the legend, in small type sizes.
const keyGap = 0.3

func barHeight(look Look) float64 { return 1.1 * look.Small }

// DrawPaths draws the lines of a drawing in a view, cut off at its box:
// floor, construction, walls, joint marks, rays and balls, each kind over the
// one before, whatever their order in the figure.
func DrawPaths(c Canvas, f figure.Paths, v View, look Look) {
	drawFloor(c, f, v, look)
	for _, role := range [...]figure.Role{figure.Construct, figure.Extension, figure.Dimension, figure.Wall, figure.Coat, figure.JointMark, figure.Ray, figure.Ball} {
		for _, l := range f.Lines {
			if l.Role == role {
				drawLine(c, l, v, look)
			}
		}
	}
	for _, l := range f.Labels {
		drawLabel(c, l, v, look)
	}
}

// drawLabel sets a word on a patch of paper.
func drawLabel(c Canvas, l figure.Label, v View, look Look) {
	at := v.ToCanvas(l.X, l.Y)
	w, h := look.Small*letter.Width(l.Text, letter.Regular)/2+look.Hair, look.Small*0.6
	if patch := NewBox(at.X-w, at.Y-h, 2*w, 2*h); v.Box.Contains(at) {
		c.Fill(patch.Path(), look.Paper)
		c.Text(Text{At: at, Size: look.Small, String: l.Text, H: Center, V: Middle, Color: look.Ink})
	}
}

func drawFloor(c Canvas, f figure.Paths, v View, look Look) {
	var floor Path
	for _, l := range f.Lines {
		if l.Role == figure.Floor {
			appendLine(&floor, figure.Line{X: l.X, Y: l.Y, Closed: true}, v)
		}
	}
	if len(floor.Ops) > 0 {
		c.Fill(ClipFill(floor, v.Box, v.Box.W()), look.Floor)
	}
}

func drawLine(c Canvas, l figure.Line, v View, look Look) {
	if l.Role == figure.Ball {
		drawBall(c, l, v, look)
		return
	}
	if l.Role == figure.Wall {
		drawWall(c, l, v, look)
		return
	}
	if l.Role == figure.Coat {
		drawCoat(c, l, v, look)
		return
	}
	var p Path
	appendLine(&p, l, v)
	p = ClipStroke(p, v.Box, v.Box.W())
	switch l.Role {
	case figure.Construct:
		c.Stroke(p, Pen{Width: look.Hair, Color: look.Faint, Dash: []float64{look.Tick, look.Tick}, Cap: Butt})
	case figure.JointMark, figure.Extension:
		width := look.Hair
		if l.Texture == figure.Gap {
			width *= postWidth
		}
		c.Stroke(p, Pen{Width: width, Color: look.Ink, Cap: Butt})
	case figure.Dimension:
		c.Stroke(p, Pen{Width: look.Hair, Color: look.Ink, Cap: Butt})
		drawHeads(c, l, v, look)
	default:
		c.Stroke(p, Pen{Width: look.Line, Color: look.Orbit(l.Hue)})
	}
}

// drawHeads draws arrow heads at both ends of a line, pointing outwards.
func drawHeads(c Canvas, l figure.Line, v View, look Look) {
	n := min(len(l.X), len(l.Y))
	if n < 2 {
		return
	}
	head := func(tip, from Point) {
		d := math.Hypot(tip.X-from.X, tip.Y-from.Y)
		if !(d > 0) || !v.Box.Contains(tip) {
			return
		}
		x, y := (tip.X-from.X)/d*look.Tick*1.4, (tip.Y-from.Y)/d*look.Tick*1.4
		var p Path
		p.MoveTo(tip.X, tip.Y)
		p.LineTo(tip.X-x-y/4, tip.Y-y+x/4)
		p.LineTo(tip.X-x+y/4, tip.Y-y-x/4)
		p.Close()
		c.Fill(p, look.Ink)
	}
	at := func(i int) Point { return v.ToCanvas(l.X[i], l.Y[i]) }
	head(at(0), at(1))
	head(at(n-1), at(n-2))
}

// ballRadius is the radius of a ball in widths of a ray.
const ballRadius = 3

// drawBall draws the place of an orbit, with an edge of floor around it that
// parts it from its own ray.
func drawBall(c Canvas, l figure.Line, v View, look Look) {
	r := ballRadius * look.Line
	for i := range min(len(l.X), len(l.Y)) {
		q := v.ToCanvas(l.X[i], l.Y[i])
		if v.Box.Inset(r).Contains(q) {
			c.Fill(Disc(q, r+0.8*look.Line), look.Floor)
			c.Fill(Disc(q, r), look.Orbit(l.Hue))
		}
	}
}

// appendLine adds a line of a figure to a path on the canvas.
func appendLine(p *Path, l figure.Line, v View) {
	n := min(len(l.X), len(l.Y))
	for i := range n {
		q := v.ToCanvas(l.X[i], l.Y[i])
		if i == 0 {
			p.MoveTo(q.X, q.Y)
		} else {
			p.LineTo(q.X, q.Y)
		}
	}
	if l.Closed && n > 0 {
		p.Close()
	}
}

// DrawScaleBar draws a bar of round length with its number and unit at the
// left of a box, and to the right of it nothing.
func DrawScaleBar(c Canvas, unit string, v View, box Box, look Look) {
	s := stepAtMost(box.W() / 4 / v.Scale)
	length := s.times(1) * v.Scale
	if !finite(length) || length <= 0 || length > box.W() {
		return
	}
	label := decimal(s.mant, s.exp)
	if s.exp > 4 || s.exp < -4 {
		label = decimal(s.mant, 0) + " × 10" + superscript(s.exp)
	}
	if unit != "" {
		label += " " + unitText(unit)
	}
	y := look.snap(box.Min.Y + box.H()/2)
	x0, x1 := look.snap(box.Min.X+look.Margin), look.snap(box.Min.X+look.Margin+length)
	pen := Pen{Width: look.Hair, Color: look.Ink, Cap: Butt}
	half := look.Tick / 2
	c.Stroke(Segment(Point{x0, y}, Point{x1, y}), Pen{Width: 2 * look.Hair, Color: look.Ink, Cap: Butt})
	c.Stroke(Segment(Point{x0, y - half}, Point{x0, y + half}), pen)
	c.Stroke(Segment(Point{x1, y - half}, Point{x1, y + half}), pen)
	c.Text(Text{At: Point{x1 + labelGap*look.Small, y}, Size: look.Small, String: label, V: Middle, Color: look.Ink})
}

// nearest is the least distance on the canvas, in units, between points of a
// wall that are told apart when its band is laid beside it.
const nearest = 1e-6

// wallPoint is a point of a wall on the canvas with its place s/L.
type wallPoint struct {
	Point
	at float64
}

// wallPoints is a wall on the canvas without repeated points and without those
// that have no place in [0, 1]; its places rise even across the start of the
// loop, beyond 1.
func wallPoints(l figure.Line, v View) []wallPoint {
	n := min(len(l.X), len(l.Y), len(l.At))
	pts := make([]wallPoint, 0, n+1)
	put := func(q Point, at float64) {
		if !q.finite() || !(at >= 0 && at <= 2) {
			return
		}
		if k := len(pts); k > 0 {
			last := pts[k-1]
			if math.Hypot(q.X-last.X, q.Y-last.Y) < nearest {
				return
			}
			if at < last.at-0.5 {
				at++
			}
		}
		pts = append(pts, wallPoint{q, at})
	}
	for i := range n {
		put(v.ToCanvas(l.X[i], l.Y[i]), l.At[i])
	}
	if l.Closed && len(pts) > 2 {
		// The last stretch ends where the loop's range of s ends, which the
		// line does not tell: carry the pace of the stretch before on.
		a, b := pts[len(pts)-2], pts[len(pts)-1]
		pace := (b.at - a.at) / math.Hypot(b.X-a.X, b.Y-a.Y)
		first := pts[0]
		put(first.Point, b.at+min(pace*math.Hypot(first.X-b.X, first.Y-b.Y), 1))
	}
	return pts
}
