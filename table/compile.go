package table

import (
	"errors"
	"math"

	"cavitywright/table/curve"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
)

// New compiles a design. The error is a *Fault that says what is wrong, where,
// and what to do; the design is then no table.
func New(d Design) (*Table, error) {
	t := &Table{design: d, box: plane.Around()}
	if f := d.checkHead(); f != nil {
		return nil, f
	}
	order, f := d.order()
	if f != nil {
		return nil, f
	}
	for _, i := range order {
		if f := t.addItem(i); f != nil {
			return nil, f
		}
	}
	if f := t.checkSlivers(); f != nil {
		return nil, f
	}
	if f := t.measure(); f != nil {
		return nil, f
	}
	t.findJoints()
	for _, check := range []func() *Fault{t.checkCorners, t.checkCrossings, t.checkNesting, t.addCoats, t.checkLaunches} {
		if f := check(); f != nil {
			return nil, f
		}
	}
	return t, nil
}

func (d Design) checkHead() *Fault {
	if d.Unit.Metres() == 0 {
		return d.fault(BadNumber, -1, "The unit of length %q is unknown; use m, cm, mm, um or nm.", string(d.Unit))
	}
	if len(d.Items) == 0 {
		return d.fault(Empty, -1, "Nothing is drawn yet; place a shape or draw a wall.")
	}
	for i, it := range d.Items {
		if !plane.Finite(it.Place.Shift) || math.IsNaN(it.Place.Angle) || math.IsInf(it.Place.Angle, 0) ||
			!(it.Place.Scale > 0) || math.IsInf(it.Place.Scale, 0) {
			return d.fault(BadNumber, i, "The place of the %s is not a number; type its position, angle and scale anew.", d.itemName(i))
		}
	}
	return nil
}

// order is the items with the outer wall first.
func (d Design) order() ([]int, *Fault) {
	walls, order := 0, make([]int, 0, len(d.Items))
	for i, it := range d.Items {
		if it.Role == Wall && hasOuter(it.Shape) {
			walls++
			if walls > 1 {
				return nil, d.fault(TwoWalls, i, "There are two outer walls; make the %s an obstacle, or take it out.", d.itemName(i))
			}
			order = append([]int{i}, order...)
			continue
		}
		order = append(order, i)
	}
	return order, nil
}

func hasOuter(s shape.Shape) bool {
	loops, err := s.Loops()
	return err != nil || len(loops) > 0 && loops[0].Side == shape.Outer
}

// addItem appends the item's loops.
func (t *Table) addItem(i int) *Fault {
	it := t.design.Items[i]
	loops, err := it.Shape.Loops()
	if err != nil {
		kind := BadShape
		if re := (*param.RangeError)(nil); errors.As(err, &re) {
			kind = BadNumber
		}
		f := t.design.fault(kind, i, "The %s cannot be built: %v.", t.design.itemName(i), err)
		f.cause = err
		return f
	}
	sides := 0
	for _, l := range loops {
		n := len(l.Curves)
		curves := make([]curve.Curve, n)
		numbers := make([]int, n)
		for k, c := range l.Curves {
			at := k
			if it.Role == Post && l.Side == shape.Outer {
				at, c = n-1-k, c.Reversed()
			}
			if it.Place != plane.Identity() {
				c = c.Placed(it.Place)
			}
			curves[at], numbers[at] = c, sides+k
		}
		side := l.Side
		if it.Role == Post {
			side = shape.Obstacle
		}
		if f := t.addLoop(i, side, curves, numbers); f != nil {
			return f
		}
		sides += n
	}
	return nil
}

// closeTol is the distance, relative to a loop's size, by which the end of one
// side may miss the start of the next: the rounding of two evaluations by
// different formulas, with a wide margin. The end is then moved onto the start.
const closeTol = 1e-9

func (t *Table) addLoop(item int, side shape.Side, curves []curve.Curve, numbers []int) *Fault {
	l := Loop{Side: side, Item: item, First: len(t.pieces), S0: t.length, Box: plane.Around()}
	for k, c := range curves {
		for _, sp := range c.Spans() {
			if !plane.Finite(sp.A) || !plane.Finite(sp.B) || math.IsNaN(sp.Length) {
				return t.design.fault(BadNumber, item, "Side %d of the %s has a coordinate that is not a number; type it anew.", numbers[k]+1, t.design.itemName(item))
			}
			t.pieces = append(t.pieces, Piece{Span: sp, Item: item, Side: numbers[k], Loop: len(t.loops)})
		}
	}
	l.Last = len(t.pieces)
	n := l.Last - l.First
	for i := l.First; i < l.Last; i++ {
		p := &t.pieces[i]
		p.Prev = l.First + (i-l.First+n-1)%n
		p.Next = l.First + (i-l.First+1)%n
		p.S0 = t.length
		t.length += p.Length
		l.Box = plane.Join(l.Box, p.Bounds())
	}
	l.S1 = t.length
	size := plane.Diagonal(l.Box)
	for i := l.First; i < l.Last; i++ {
		p, q := &t.pieces[i], &t.pieces[t.pieces[i].Next]
		if gap := r2.Norm(r2.Sub(q.A, p.B)); gap > closeTol*size {
			return t.design.faultAt(Gap, item, p.B, "The wall of the %s has a gap of %.3g %s at %s; bring the two ends together.",
				t.design.itemName(item), gap, t.design.Unit, t.design.place(p.B))
		}
		p.B = q.A
	}
	t.box = plane.Join(t.box, l.Box)
	t.loops = append(t.loops, l)
	return nil
}

// measure fills the area, and holds every loop to its sense.
func (t *Table) measure() *Fault {
	for li := range t.loops {
		l := &t.loops[li]
		area := 0.0
		origin := t.pieces[l.First].A
		for i := l.First; i < l.Last; i++ {
			p := &t.pieces[i]
			area += p.Swept(origin)
			l.parts = append(l.parts, p.Parts()...)
		}
		if (area > 0) != (l.Side == shape.Outer) {
			return t.design.faultAt(Backwards, l.Item, origin, "The wall of the %s encloses nothing, or crosses itself; drag its nodes apart.", t.design.itemName(l.Item))
		}
		t.area += area
	}
	if t.Open() {
		t.area = 0
	}
	return nil
}

// addCoats lays the design's coats along s.
func (t *Table) addCoats() *Fault {
	d := t.design
	for ci, c := range d.Coats {
		if c.Item < 0 || c.Item >= len(d.Items) {
			return d.fault(BadCoat, -1, "Coat %d lies on item %d, but there are %d items.", ci+1, c.Item+1, len(d.Items))
		}
		if !(c.From >= 0 && c.From < c.To && c.To <= 1) {
			return d.fault(BadCoat, c.Item, "Coat %d runs from %v to %v of its side; it must run from a fraction to a greater one within 0 and 1.", ci+1, c.From, c.To)
		}
		laid := false
		for i := range t.pieces {
			p := &t.pieces[i]
			if p.Item != c.Item || c.Side != AllSides && p.Side != c.Side {
				continue
			}
			laid = true
			t.coatPiece(i, ci, c)
		}
		if !laid {
			return d.fault(BadCoat, c.Item, "Coat %d lies on side %d of the %s, which has no such side.", ci+1, c.Side+1, d.itemName(c.Item))
		}
	}
	return nil
}

func (t *Table) coatPiece(i, ci int, c Coat) {
	p := &t.pieces[i]
	s0, s1, _ := t.SideRange(c.Item, p.Side)
	lo, hi := s0+c.From*(s1-s0), s0+c.To*(s1-s0)
	lo, hi = math.Max(lo, p.S0), math.Min(hi, p.S0+p.Length)
	if lo < hi {
		t.stretches = append(t.stretches, Stretch{Piece: i, Coat: ci, S0: lo, S1: hi, Law: c.Law})
	}
}
