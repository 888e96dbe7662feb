package render

import (
	"math"

	"cavitywright/sim/figure"
)

// View lays the plane of a table on the canvas: a similarity, with y up in the
// plane and down on the canvas. Box is the area that is drawn on; Scale is
// canvas units per unit of length; Origin is where the plane's (0, 0) lies.
type View struct {
	Box    Box
	Scale  float64
	Origin Point
}

// Extent is an upright rectangle of the plane, in units of length.
type Extent struct{ X0, Y0, X1, Y1 float64 }

// ToCanvas is where a point of the plane lies on the canvas.
func (v View) ToCanvas(x, y float64) Point {
	return Point{v.Origin.X + v.Scale*x, v.Origin.Y - v.Scale*y}
}

// FromCanvas is the point of the plane at a place of the canvas.
func (v View) FromCanvas(p Point) (x, y float64) {
	return (p.X - v.Origin.X) / v.Scale, (v.Origin.Y - p.Y) / v.Scale
}

// Zoomed is the view magnified by a factor about a place of the canvas, which
// keeps showing the same point of the plane.
func (v View) Zoomed(factor float64, about Point) View {
	v.Origin = Point{about.X + factor*(v.Origin.X-about.X), about.Y + factor*(v.Origin.Y-about.Y)}
	v.Scale *= factor
	return v
}

// Shifted is the view moved by canvas units.
func (v View) Shifted(dx, dy float64) View {
	v.Origin = Point{v.Origin.X + dx, v.Origin.Y + dy}
	return v
}

// LayoutPaths lays out a drawing within a box: its walls fitted with a margin
// into what the scale bar and the caption leave free.
func LayoutPaths(f figure.Paths, box Box, look Look) View {
	room, _, _ := pathsRoom(f, box, look)
	return Fit(Bounds(f), room, look)
}

// Fit is the view that shows an extent, centred and as large as the margin and
// the width of the wall's band allow, in a box.
func Fit(e Extent, box Box, look Look) View {
	w, h := e.X1-e.X0, e.Y1-e.Y0
	inner := box.Inset(look.Margin + look.Wall)
	if inner.Empty() {
		inner = box
	}
	scale := min(inner.W()/w, inner.H()/h)
	if !finite(scale) || scale <= 0 {
		scale = 1
	}
	c := inner.Center()
	return View{box, scale, Point{c.X - scale*(e.X0+e.X1)/2, c.Y + scale*(e.Y0+e.Y1)/2}}
}

// Bounds is the extent of a drawing: of its walls, floor and joint marks where
// it has any, since a ray may leave them for good; else of all its lines. A drawing of
// nothing has a unit square about the origin.
func Bounds(f figure.Paths) Extent {
	e := Extent{math.Inf(1), math.Inf(1), math.Inf(-1), math.Inf(-1)}
	grow := func(want func(figure.Role) bool) {
		for _, l := range f.Lines {
			if !want(l.Role) {
				continue
			}
			for i := range min(len(l.X), len(l.Y)) {
				if x, y := l.X[i], l.Y[i]; finite(x) && finite(y) {
					e = Extent{min(e.X0, x), min(e.Y0, y), max(e.X1, x), max(e.Y1, y)}
				}
			}
		}
	}
	grow(func(r figure.Role) bool {
		return r == figure.Wall || r == figure.Floor || r == figure.Coat || r == figure.JointMark || r == figure.Extension
	})
	if e.X0 > e.X1 {
		grow(func(figure.Role) bool { return true })
	}
	if e.X0 > e.X1 {
		return Extent{-0.5, -0.5, 0.5, 0.5}
	}
	if e.X0 == e.X1 && e.Y0 == e.Y1 {
		return Extent{e.X0 - 0.5, e.Y0 - 0.5, e.X1 + 0.5, e.Y1 + 0.5}
	}
	return e
}
