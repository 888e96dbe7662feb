package sim

import (
	"math"
	"math/bits"

	"cavitywright/table/curve"
)

// quick is the search for the first wall hit on a table of few spans that are
// all straight or round. It decides by the signs of the joints' distances from
// the ray's line, as meet does, but looks for places where the ray can leave
// the table only: from inside the first crossing is such a one. Whatever lies
// within rounding of undecided it leaves to first.
//
// It takes hardly any branch that depends on where a ray goes, so that a
// processor works on several rays at once.
type quick struct {
	joints [33]joint // loop by loop, the first of each loop again at its end
	arcs   []bow
	discs  []disc
	walls  uint64  // bit j: a straight span begins at joint j
	none   int     // the number of joints; beyond them stand some that are none
	how    [32]way // by span
	near   float64
}

// joint is where a span begins.
type joint struct {
	x, y float64
	span uint64
}

// bow is an arc between the joints a and b.
type bow struct {
	cx, cy, radius float64
	ax, ay, bx, by float64 // the ends from the centre
	a, b           uint8
	cw             uint64 // 1: clockwise
	out            uint64 // sign bit, of the half chord: where a ray leaves the table
	span           uint64
	still          float64 // least |radius^2 - off^2| that is decided
}

// marks is scratch for the distances of joints from a line.
type marks [32]float64

// disc is a full circle.
type disc struct {
	cx, cy, radius float64
	out            uint64 // as of a bow
	span           uint64
	still          float64 // least |radius^2 - off^2| that is decided
	least          uint64  // the same, as bits without the sign
}

const (
	mostQuickJoints = 24
	signBit         = 1 << 63
)

// newQuick is the quick search, nil where the table has other spans or many.
func newQuick(tr *Tracer) *quick {
	if len(tr.spans) > fewSpans || tr.open {
		return nil
	}
	q := &quick{near: passTol * tr.size}
	for i := range tr.spans {
		q.how[i] = round
		if k := tr.spans[i].kind; k != curve.Segment && k != curve.Circle {
			return nil
		}
	}
	for _, l := range tr.table.Loops() {
		if tr.spans[l.First].whole {
			s := &tr.spans[l.First]
			q.discs = append(q.discs, disc{s.centre.X, s.centre.Y, s.radius, inwards(s), uint64(l.First), tr.still(s), math.Float64bits(tr.still(s)) << 1})
			continue
		}
		for i := l.First; i < l.Last; i++ {
			s, at := &tr.spans[i], uint8(q.none)
			q.add(s, i)
			if s.kind == curve.Segment {
				q.how[i] = straight
				q.walls |= 1 << at
				continue
			}
			cw := uint64(0)
			if s.sense < 0 {
				cw = 1
			}
			q.arcs = append(q.arcs, bow{
				s.centre.X, s.centre.Y, s.radius, s.a.X - s.centre.X, s.a.Y - s.centre.Y, s.b.X - s.centre.X, s.b.Y - s.centre.Y,
				at, at + 1, cw, inwards(s), uint64(i), tr.still(s),
			})
		}
		q.add(&tr.spans[l.First], l.First)
	}
	return q
}

func (q *quick) add(s *span, i int) {
	q.joints[q.none] = joint{s.a.X, s.a.Y, uint64(i)}
	q.none++
}

// inwards is a sign bit where a ray leaves the table by the nearer of its two
// crossings with the circle, as at an obstacle, else 0.
func inwards(s *span) uint64 {
	if s.focusing {
		return 0
	}
	return signBit
}

// still is the least |radius^2 - off^2| at which a line at the distance off
// from the centre is not a tangent to rounding, with a margin of two.
func (tr *Tracer) still(s *span) float64 { return 4 * passTol * tr.size * s.radius }

// way is how the next hit of a lane was found.
type way uint64

const (
	undecided way = iota // first must look
	straight             // on a straight span
	bowed                // on an arc that focuses
	round                // on a round span, at a known distance
	curved               // on a smooth span
)

// find looks for the next hit of each lane that goes on. marks is scratch for
// the joints' distances.
func (q *quick) find(lanes []lane, d *marks) {
	none := uint(q.none)
	if none > mostQuickJoints {
		return
	}
	d[none], d[none+1] = 0, 0
next:
	for i := range lanes {
		l := &lanes[i]
		l.met, l.still = uint64(undecided), 0
		if l.last.Stop != Going {
			continue
		}
		px, py, dx, dy := l.last.Point.X, l.last.Point.Y, l.last.Dir.X, l.last.Dir.Y
		on := uint64(l.last.Piece)
		left := uint64(0) // bit j: joint j lies to the left of the line
		for j := int(none) - 1; j >= 0; j-- {
			v := &q.joints[j]
			x := float64(dx*(v.y-py)) - float64(dy*(v.x-px))
			d[j] = x
			left = left<<1 | ^math.Float64bits(x)>>63
			if math.Abs(x) < q.near {
				continue next
			}
		}
		out := ^left & (left >> 1) & q.walls
		j := uint(bits.TrailingZeros64(out|1<<none)) & 31
		a, b := &q.joints[j], &q.joints[j+1]
		w := d[j] / (d[j] - d[j+1])
		x, y := float64(a.x*(1-w))+float64(b.x*w), float64(a.y*(1-w))+float64(b.y*w)
		best := min(math.Float64bits(float64(dx*(x-px))+float64(dy*(y-py))), beyond)
		at := a.span
		if out &= out - 1; out != 0 {
			best, at = q.others(l, out, d, best, at)
		}
		for k := range q.arcs {
			c := &q.arcs[k]
			span := c.span
			x, y := px-c.cx, py-c.cy
			along, off := float64(dx*x)+float64(dy*y), float64(dy*x)-float64(dx*y)
			rest := (c.radius - off) * (c.radius + off)
			if math.Abs(rest) < c.still {
				continue next
			}
			u := math.Float64bits(math.Float64frombits(math.Float64bits(math.Sqrt(rest))^c.out) - along)
			// The point of the circle farthest from the ends' side lies on the arc.
			ea := math.Float64bits(float64(dx*c.ax)+float64(dy*c.ay)) >> 63
			eb := math.Float64bits(float64(dx*c.bx)+float64(dy*c.by)) >> 63
			sa, sb := left>>(c.a&63)&1, left>>(c.b&63)&1
			bulges := (ea ^ eb) &^ (ea ^ sa ^ c.cw)
			hits := sb&^sa | bulges&^(sa^sb)
			own := same(on, span)
			hits = hits&^own | ^(sa^sb)&^(c.out>>63)&own
			u = u&^own | math.Float64bits(-2*along)&own | (hits&1 - 1)
			if u < best {
				best = u
				at = span
			}
		}
		for k := range q.discs {
			c := &q.discs[k]
			span := c.span
			x, y := px-c.cx, py-c.cy
			along, off := float64(dx*x)+float64(dy*y), float64(dy*x)-float64(dx*y)
			rest := (c.radius - off) * (c.radius + off)
			if math.Abs(rest) < c.still {
				continue next
			}
			u := math.Float64bits(math.Float64frombits(math.Float64bits(math.Sqrt(rest))^c.out) - along)
			own := same(on, span)
			u = u&^own | (math.Float64bits(-2*along)|c.out)&own
			if u < best {
				best = u
				at = span
			}
		}
		if best == 0 || best == beyond {
			continue
		}
		l.met, l.u = found(q.how[at&31], at), best
	}
}

// same is all bits where i and k are equal, else none.
func same(i, k uint64) uint64 {
	m := uint64(0)
	if i == k {
		m = 1
	}
	return -m
}

// found is the span k with the way in which it is landed on.
func found(w way, k uint64) uint64 { return k<<3 | uint64(w) }

// others looks at the straight spans that begin at the joints out, where there
// is more than one by which the line leaves the table.
func (q *quick) others(l *lane, out uint64, d *marks, best, at uint64) (uint64, uint64) {
	px, py, dx, dy := l.last.Point.X, l.last.Point.Y, l.last.Dir.X, l.last.Dir.Y
	for ; out != 0; out &= out - 1 {
		j := uint(bits.TrailingZeros64(out)) & 31
		a, b := &q.joints[j], &q.joints[j+1]
		w := d[j] / (d[j] - d[j+1])
		x, y := float64(a.x*(1-w))+float64(b.x*w), float64(a.y*(1-w))+float64(b.y*w)
		u := math.Float64bits(float64(dx*(x-px)) + float64(dy*(y-py)))
		if u < best {
			best, at = u, a.span
		}
	}
	return best, at
}

// beyond is the bits of +Inf: those of positive distances are less, those of
// negative ones and of no number more.
const beyond = 0x7ff << 52
