package session

import (
	"math"

	"cavitywright/table"
)

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
