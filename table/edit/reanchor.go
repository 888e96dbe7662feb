package edit

import (
	"slices"

	"cavitywright/table"
	"cavitywright/table/curve"

	"gonum.org/v1/gonum/spatial/r2"
)

// What keeps a coat in its place when the sides of its item change: a node more
// or less, a fillet, another kind of shape of the same outline.

// sides is the number of sides of an item.
func sides(t *table.Table, item int) int {
	n := 0
	for i := range t.Pieces() {
		if p := &t.Pieces()[i]; p.Item == item {
			n = max(n, p.Side+1)
		}
	}
	return n
}

// reanchored is the design d, which was made of the table t by changing one of
// its items into those listed, with the coats of that item where they were:
// each end goes to the nearest place of the new wall.
func reanchored(t *table.Table, d table.Design, item int, into []int) (*table.Table, error) {
	kept, moved := []table.Coat{}, []table.Coat{}
	for _, c := range t.Design().Coats {
		switch {
		case c.Item != item:
			kept = append(kept, c)
		case c.Side == table.AllSides:
			for _, k := range into {
				c.Item = k
				kept = append(kept, c)
			}
		default:
			moved = append(moved, c)
		}
	}
	d.Coats = kept
	bare, err := table.New(d)
	if err != nil || len(moved) == 0 {
		return bare, err
	}
	for _, c := range moved {
		d.Coats = append(d.Coats, relaid(t, bare, c, into)...)
	}
	return table.New(d)
}

// fewest is the share of a loop's length below which a part of a coat is a
// rounding of its ends.
const fewest = 1e-6

// relaid is a coat of t as coats of the items of the table next.
func relaid(t, next *table.Table, c table.Coat, into []int) []table.Coat {
	s0, s1, ok := t.SideRange(c.Item, c.Side)
	if !ok {
		return nil
	}
	from, to := s0+c.From*(s1-s0), s0+c.To*(s1-s0)
	middle := t.At(0.5 * (from + to)).Point
	best, least := -1, 0.0
	for k, l := range next.Loops() {
		if !slices.Contains(into, l.Item) {
			continue
		}
		if _, d := next.NearestOn(k, middle); best < 0 || d < least {
			best, least = k, d
		}
	}
	if best < 0 {
		return nil
	}
	l := next.Loops()[best]
	whole := l.S1 - l.S0
	place := func(p r2.Vec) float64 {
		s, _ := next.NearestOn(best, p)
		return s
	}
	a, mid, b := place(t.At(from).Point), place(middle), place(endOf(t, s1, to).Point)
	// From a on to the middle and to b, once around at most.
	ahead := func(x, y float64) float64 {
		d := y - x
		for d < 0 {
			d += whole
		}
		for d >= whole {
			d -= whole
		}
		return d
	}
	first := ahead(a, mid)
	b = a + first + ahead(mid, b)
	if b-a > whole {
		b = a + whole
	}
	var out []table.Coat
	for turn := range 2 {
		shift := float64(turn) * whole
		for i := l.First; i < l.Last; i++ {
			p := &next.Pieces()[i]
			if i > l.First && next.Pieces()[i-1].Side == p.Side {
				continue
			}
			u0, u1, _ := next.SideRange(p.Item, p.Side)
			lo, hi := max(a, u0+shift), min(b, u1+shift)
			if hi-lo < fewest*whole {
				continue
			}
			n := c
			n.Item, n.Side = p.Item, p.Side
			n.From, n.To = rounded((lo-shift-u0)/(u1-u0)), rounded((hi-shift-u0)/(u1-u0))
			out = append(out, n)
		}
	}
	return out
}

// endOf is the wall at the end of a stretch on a side that ends at s1: there,
// not at the start of the next side.
func endOf(t *table.Table, s1, s float64) curve.Frame {
	if s >= s1 {
		s = s1 * (1 - 1e-12)
	}
	return t.At(t.Wrap(s))
}

// rounded is a fraction of a side, with the ends met that it nearly meets.
func rounded(x float64) float64 {
	const near = 1e-7 // ten times what the search for the nearest place leaves
	switch {
	case x < near:
		return 0
	case x > 1-near:
		return 1
	}
	return x
}
