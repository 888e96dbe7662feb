package sim

import (
	"math"
	"math/bits"

	"cavitywright/table/curve"

	"gonum.org/v1/gonum/spatial/r2"
)

// convex is the search for the first wall hit on a table whose outer wall is
// convex. A line leaves a convex wall in one place, and the signs of the
// joints' distances from the line say on which span; obstacles that a ray meets
// lie before. Whatever lies within rounding of undecided it leaves to first.
//
// It takes no branch that depends on where a ray goes, so that a processor
// works on several rays at once.
type convex struct {
	centre r2.Vec
	joints int         // of the outer wall
	fours  [][4]r2.Vec // the joints, from the centre, the last ones again to fill the last four
	how    [64]way     // by span of it
	bowed  uint64      // bit i: span i can be met from itself
	all    uint64      // a bit a span
	last   uint        // span
	near   uint64      // the least distance that is decided, as bits without the sign
	discs  []disc      // the obstacles, where they are few
	grid   *grid       // else
}

const (
	// mostConvexJoints is the number of joints up to which looking at all of
	// them pays.
	mostConvexJoints = 16
	mostDiscs        = 8
	// convexTurn is the turn to the right (radians) that a joint of a convex
	// wall may show by rounding.
	convexTurn = -1e-9
)

// newConvex is the search on a table of a convex outer wall and few round
// obstacles, nil for another.
func newConvex(tr *Tracer) *convex {
	if tr.open {
		return nil
	}
	b := tr.table.Bounds()
	c := &convex{near: math.Float64bits(2*passTol*tr.size) << 1, centre: r2.Scale(0.5, r2.Add(b.Min, b.Max))}
	for i, l := range tr.table.Loops() {
		if i > 0 {
			s := &tr.spans[l.First]
			if !s.whole || s.kind != curve.Circle {
				return nil
			}
			c.discs = append(c.discs, disc{s.centre.X, s.centre.Y, s.radius, inwards(s), uint64(l.First), tr.still(s), math.Float64bits(tr.still(s)) << 1})
			continue
		}
		for k := range tr.spans[:l.Last] {
			s := &tr.spans[k]
			if s.whole || s.kind == curve.Oval || !(tr.table.Pieces()[k].Turn >= 0) {
				return nil
			}
			if c.joints == mostConvexJoints {
				return nil
			}
			if c.how[k] = straight; s.kind != curve.Segment {
				if c.how[k] = bowed; s.kind != curve.Circle {
					c.how[k] = curved
				}
				c.bowed |= 1 << (k & 63)
			}
			c.all |= 1 << (k & 63)
			c.last = uint(k)
			at := r2.Sub(s.a, c.centre)
			if c.joints%4 == 0 {
				c.fours = append(c.fours, [4]r2.Vec{at, at, at, at})
			}
			for i := c.joints % 4; i < 4; i++ {
				c.fours[c.joints/4][i] = at
			}
			c.joints++
		}
	}
	for _, j := range tr.table.Joints() {
		if j.Piece < c.joints && j.Turn < convexTurn {
			return nil
		}
	}
	if len(c.discs) > mostDiscs {
		c.grid, c.discs = newGrid(b, tr.size, c.discs), nil
	}
	for k := range c.joints {
		if c.how[k] == curved && tr.spans[k].fine == nil {
			return nil
		}
	}
	return c
}

// find looks for the next hit of each lane: first which span of the outer wall
// its line leaves by, then which obstacle comes before.
func (c *convex) find(lanes []lane) {
	for i := range lanes {
		if l := &lanes[i]; c.grid == nil || l.last.Stop == Going && !c.grid.shade(l) {
			c.leave(l)
		}
	}
	for k := range c.discs {
		c.discs[k].shade(lanes)
	}
}

// leave finds the span of the outer wall by which the lane's line leaves.
func (c *convex) leave(l *lane) {
	dx, dy := l.last.Dir.X, l.last.Dir.Y
	line := float64(dx*(l.last.Point.Y-c.centre.Y)) - float64(dy*(l.last.Point.X-c.centre.X))
	near := c.near
	right, still := uint64(0), uint64(0) // bit j: joint j lies to the right of the line
	for k := len(c.fours) - 1; k >= 0; k-- {
		// Written out: a loop's own work would be a third of this.
		f := &c.fours[k]
		d0 := math.Float64bits(float64(dx*f[0].Y) - float64(dy*f[0].X) - line)
		d1 := math.Float64bits(float64(dx*f[1].Y) - float64(dy*f[1].X) - line)
		d2 := math.Float64bits(float64(dx*f[2].Y) - float64(dy*f[2].X) - line)
		d3 := math.Float64bits(float64(dx*f[3].Y) - float64(dy*f[3].X) - line)
		right = right<<4 | d3>>63<<3 | d2>>63<<2 | d1>>63<<1 | d0>>63
		still |= (d0<<1 - near) | (d1<<1 - near) | (d2<<1 - near) | (d3<<1 - near)
	}
	// The span from a joint on the right to one on the left, else that which
	// the ray leaves.
	right &= c.all
	out := right &^ (right>>1 | right<<(c.last&63))
	own := uint64(1) << min(uint(l.last.Piece), 63) & c.bowed
	if out == 0 {
		out = own
	}
	j := bits.TrailingZeros64(out | 1<<63)
	l.met, l.u, l.still = found(c.how[j], uint64(j)), beyond, still>>63
}

// shade looks for the lanes that meet the disc before what they met so far.
func (c *disc) shade(lanes []lane) {
	cx, cy, radius, least := c.cx, c.cy, c.radius, c.least
	span, hit := uint64(c.span), found(round, uint64(c.span))
	for i := range lanes {
		l := &lanes[i]
		dx, dy := l.last.Dir.X, l.last.Dir.Y
		x, y := l.last.Point.X-cx, l.last.Point.Y-cy
		along, off := float64(dx*x)+float64(dy*y), float64(dy*x)-float64(dx*y)
		rest := (radius - off) * (radius + off)
		u := math.Float64bits(-along-math.Sqrt(rest)) | same(uint64(l.last.Piece), span)
		met, best := l.met, l.u
		if u < best {
			met = hit
		}
		l.met, l.u = met, min(u, best)
		l.still |= (math.Float64bits(rest)<<1 - least) >> 63
	}
}
