package tool

import (
	"math"
	"slices"

	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/table/wall"
	"cavitywright/ui/session"
)

// CoatRun is a coat as a person sees it: one stretch of one law, which is a
// coat of the design on each side that it crosses. Those are neighbours in the
// design's list, First to Last, and adjoin at joints. A coat on all sides of an
// item is one too, but has no ends that could be moved: Loop is -1 then.
type CoatRun struct {
	First, Last int
	Law         wall.Law
	Loop        int
	From, Width float64 // arclength of the start, and the length
}

// SelectedCoat is the coat that is selected; false where none is.
func SelectedCoat(s *session.Session) (CoatRun, bool) {
	if s.Coat < 0 {
		return CoatRun{}, false
	}
	return RunOf(s.Table(), s.Coat), true
}

// sideOf is a side of a loop on the arclength.
type sideOf struct {
	item, side int
	s0, s1     float64
}

// sidesOf are the sides of a loop in the order of s.
func sidesOf(t *table.Table, loop int) []sideOf {
	var all []sideOf
	l := t.Loops()[loop]
	for _, p := range t.Pieces()[l.First:l.Last] {
		if n := len(all); n > 0 && all[n-1].side == p.Side {
			all[n-1].s1 = p.S0 + p.Length
			continue
		}
		all = append(all, sideOf{p.Item, p.Side, p.S0, p.S0 + p.Length})
	}
	return all
}

// loopOf is the loop on which a side of an item lies, and its place among the
// sides of the loop; -1 where there is none.
func loopOf(t *table.Table, item, side int) (loop, at int) {
	for _, p := range t.Pieces() {
		if p.Item == item && p.Side == side {
			sides := sidesOf(t, p.Loop)
			return p.Loop, slices.IndexFunc(sides, func(s sideOf) bool { return s.side == side })
		}
	}
	return -1, -1
}

// RunOf is the coat that coat i of the design belongs to.
func RunOf(t *table.Table, i int) CoatRun {
	coats := t.Design().Coats
	r := CoatRun{First: i, Last: i, Law: coats[i].Law, Loop: -1}
	loop, _ := loopOf(t, coats[i].Item, coats[i].Side)
	if loop < 0 || coats[i].Side == table.AllSides {
		return r
	}
	sides := sidesOf(t, loop)
	for r.First > 0 && r.Last-r.First+1 <= len(sides) && adjoin(t, coats[r.First-1], coats[r.First]) {
		r.First--
	}
	for r.Last+1 < len(coats) && r.Last-r.First+1 <= len(sides) && adjoin(t, coats[r.Last], coats[r.Last+1]) {
		r.Last++
	}
	_, at := loopOf(t, coats[r.First].Item, coats[r.First].Side)
	r.Loop, r.From = loop, sides[at].at(coats[r.First].From)
	for _, c := range coats[r.First : r.Last+1] {
		_, at := loopOf(t, c.Item, c.Side)
		r.Width += (c.To - c.From) * (sides[at].s1 - sides[at].s0)
	}
	return r
}

func (s sideOf) at(fraction float64) float64 { return s.s0 + fraction*(s.s1-s.s0) }

// adjoin reports whether coat b goes on where coat a ends, over a joint, with
// the same law.
func adjoin(t *table.Table, a, b table.Coat) bool {
	if a.Law != b.Law || a.To != 1 || b.From != 0 || a.Side == table.AllSides || b.Side == table.AllSides {
		return false
	}
	la, i := loopOf(t, a.Item, a.Side)
	lb, j := loopOf(t, b.Item, b.Side)
	return la == lb && la >= 0 && j == (i+1)%len(sidesOf(t, la)) && (i != j || a.From > b.To)
}

// leastCoat is the length, relative to its loop's, below which no coat is laid
// by hand, and a rest of one on the next side is dropped: a millionth.
const leastCoat = 1e-6

// lay is the coats of a stretch of a loop that begins at from and is width
// long, one a side; all sides whole where it goes around the loop.
func lay(t *table.Table, loop int, from, width float64, law wall.Law) []table.Coat {
	l := t.Loops()[loop]
	round := l.S1 - l.S0
	var coats []table.Coat
	sides := sidesOf(t, loop)
	if width >= round*(1-leastCoat) {
		for _, s := range sides {
			coats = append(coats, table.Coat{Item: s.item, Side: s.side, From: 0, To: 1, Law: law})
		}
		return coats
	}
	from = l.S0 + wrapped(from-l.S0, round)
	for _, turn := range []float64{0, round} {
		for _, s := range sides {
			a, b := s.s0+turn, s.s1+turn
			lo, hi := math.Max(a, from), math.Min(b, from+width)
			if hi-lo < leastCoat*round && (width >= 2*leastCoat*round || hi <= lo) {
				continue
			}
			c := table.Coat{Item: s.item, Side: s.side, From: (lo - a) / (b - a), To: (hi - a) / (b - a), Law: law}
			c.From, c.To = tidy(c.From), tidy(c.To)
			coats = append(coats, c)
		}
	}
	return coats
}

// tidy puts a fraction that misses an end of its side by rounding onto the end.
func tidy(f float64) float64 {
	const rounding = 1e-9
	switch {
	case f < rounding:
		return 0
	case f > 1-rounding:
		return 1
	}
	return f
}

// wrapped is x brought into [0, round).
func wrapped(x, round float64) float64 {
	x = math.Mod(x, round)
	if x < 0 {
		x += round
	}
	return x
}

// replaced is the coats of a design with first to last replaced by others; with
// last < first the others are put in before first.
func replaced(coats []table.Coat, first, last int, by []table.Coat) []table.Coat {
	return slices.Concat(coats[:first], by, coats[last+1:])
}

// coating is the command that gives a table other coats.
func coating(t *table.Table, coats []table.Coat, name string) edit.Command {
	return edit.Coating{Bare: t.Design().Bare, Coats: coats, Name: name}
}
