package session

import (
	"math"

	"cavitywright/table"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// View says which part of the plane a pane shows: Centre in its middle,
// PixelsPerUnit pixels to a unit of length. The zero View means "fit the
// table".
type View struct {
	Centre        r2.Vec
	PixelsPerUnit float64
}

// Pixel is a point of a pane, y down, in pixels.
type Pixel struct{ X, Y float64 }

// Fit is the view that shows the box in a pane of w by h pixels with a margin.
func Fit(box r2.Box, w, h, marginPx float64) View {
	bw, bh := math.Max(box.Max.X-box.Min.X, 1e-300), math.Max(box.Max.Y-box.Min.Y, 1e-300)
	k := math.Min(math.Max(w-2*marginPx, 16)/bw, math.Max(h-2*marginPx, 16)/bh)
	return View{Centre: plane.Lerp(box.Min, box.Max, 0.5), PixelsPerUnit: k}
}

// ToPixel is where the pane of w by h pixels shows the point p.
func (v View) ToPixel(p r2.Vec, w, h float64) Pixel {
	return Pixel{w/2 + (p.X-v.Centre.X)*v.PixelsPerUnit, h/2 - (p.Y-v.Centre.Y)*v.PixelsPerUnit}
}

// ToTable is the point that the pane of w by h pixels shows at q.
func (v View) ToTable(q Pixel, w, h float64) r2.Vec {
	return r2.Vec{X: v.Centre.X + (q.X-w/2)/v.PixelsPerUnit, Y: v.Centre.Y - (q.Y-h/2)/v.PixelsPerUnit}
}

// ZoomedAt is the view enlarged by k with the point shown at q kept in place.
func (v View) ZoomedAt(q Pixel, w, h, k float64) View {
	at := v.ToTable(q, w, h)
	v.PixelsPerUnit *= k
	v.Centre = r2.Vec{X: at.X - (q.X-w/2)/v.PixelsPerUnit, Y: at.Y + (q.Y-h/2)/v.PixelsPerUnit}
	return v
}

// Panned is the view moved so that what was shown at q is shown dx, dy pixels
// further.
func (v View) Panned(dx, dy float64) View {
	v.Centre.X -= dx / v.PixelsPerUnit
	v.Centre.Y += dy / v.PixelsPerUnit
	return v
}

// zoomRange bounds the zoom of the portrait: a millionth of the section is
// still resolved by double precision.
const zoomRange = 1e-6

// ZoomedSection is the region scaled by k about the fractions fx, fy of itself
// (fx along s, fy along p from below), kept within the section.
func ZoomedSection(g table.Region, fx, fy, k float64) table.Region {
	w := math.Min(math.Max((g.S1-g.S0)*k, zoomRange), 1)
	h := math.Min(math.Max((g.P1-g.P0)*k, 2*zoomRange), 2)
	s, p := g.S0+fx*(g.S1-g.S0), g.P0+fy*(g.P1-g.P0)
	return held(table.Region{S0: s - fx*w, S1: s + (1-fx)*w, P0: p - fy*h, P1: p + (1-fy)*h})
}

// PannedSection is the region moved by fractions of its own size.
func PannedSection(g table.Region, dx, dy float64) table.Region {
	w, h := g.S1-g.S0, g.P1-g.P0
	return held(table.Region{S0: g.S0 + dx*w, S1: g.S1 + dx*w, P0: g.P0 + dy*h, P1: g.P1 + dy*h})
}

// held moves a region into the section.
func held(g table.Region) table.Region {
	if d := -g.S0; d > 0 {
		g.S0, g.S1 = 0, g.S1+d
	}
	if d := g.S1 - 1; d > 0 {
		g.S0, g.S1 = g.S0-d, 1
	}
	if d := -1 - g.P0; d > 0 {
		g.P0, g.P1 = -1, g.P1+d
	}
	if d := g.P1 - 1; d > 0 {
		g.P0, g.P1 = g.P0-d, 1
	}
	return g
}
