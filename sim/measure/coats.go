package measure

import (
	"cmp"
	"fmt"
	"slices"

	"cavitywright/sim/figure"
	"cavitywright/table"
	"cavitywright/table/wall"
)

// Coated is a stretch of one loop of the wall, from S0 to S1 > S0, on which one
// law acts; it may run over joints, and over the loop's start, where S1 lies
// beyond the loop's end. Whole is the loop from end to end.
type Coated struct {
	Loop   int
	S0, S1 float64
	Law    wall.Law
	Whole  bool
}

// Coats are the stretches of wall whose law is no mirror, in the order of s, as
// they act: of coats that overlap the later one counts, and where none lies the
// law of the bare wall.
func Coats(t *table.Table) []Coated {
	on := make([][]table.Stretch, len(t.Pieces()))
	for _, s := range t.Stretches() {
		on[s.Piece] = append(on[s.Piece], s)
	}
	var all []Coated
	for li, l := range t.Loops() {
		var runs []Coated
		for i := l.First; i < l.Last; i++ {
			runs = appendActing(runs, t, i, on[i])
		}
		all = append(all, overStart(runs, t.Loops()[li])...)
	}
	return all
}

// overStart joins the last stretch of a loop to the first where they are one.
func overStart(runs []Coated, l table.Loop) []Coated {
	n := len(runs)
	if n == 0 || runs[0].S0 != l.S0 || runs[n-1].S1 != l.S1 || runs[0].Law != runs[n-1].Law {
		return runs
	}
	if n == 1 {
		runs[0].Whole = true
		return runs
	}
	runs[n-1].S1 += runs[0].S1 - l.S0
	return runs[1:]
}

// appendActing adds what acts on piece i, which the stretches lie on.
func appendActing(runs []Coated, t *table.Table, i int, on []table.Stretch) []Coated {
	p := &t.Pieces()[i]
	end := p.S0 + p.Length
	cuts := []float64{p.S0, end}
	for _, s := range on {
		cuts = append(cuts, s.S0, s.S1)
	}
	slices.Sort(cuts)
	for k, a := range cuts[:len(cuts)-1] {
		b := cuts[k+1]
		if a == b {
			continue
		}
		law := t.Law()
		for _, s := range on {
			if s.S0 <= a && s.S1 >= b {
				law = s.Law // the last that lies here
			}
		}
		if n := len(runs); n > 0 && runs[n-1].S1 == a && runs[n-1].Law == law {
			runs[n-1].S1 = b
		} else if (law != wall.Mirror{}) {
			runs = append(runs, Coated{Loop: p.Loop, S0: a, S1: b, Law: law})
		}
	}
	return runs
}

// TextureOf is how a law is drawn.
func TextureOf(l wall.Law) figure.Texture {
	switch l.(type) {
	case wall.Opening:
		return figure.Gap
	case wall.Lossy:
		return figure.Dotted
	case wall.Dielectric:
		return figure.Double
	case wall.Rough:
		return figure.Saw
	}
	return figure.Plain
}

// Keys is the legend of the laws that occur on a table: one line a texture.
func Keys(t *table.Table) []figure.Key { return keysOf(t, func(wall.Law) string { return "" }) }

// keysOf adds to each law that is alone in its texture what remark says of it.
func keysOf(t *table.Table, remark func(wall.Law) string) []figure.Key {
	laws := map[figure.Texture][]wall.Law{}
	widths := map[figure.Texture]float64{}
	for _, c := range Coats(t) {
		x := TextureOf(c.Law)
		if !slices.Contains(laws[x], c.Law) {
			laws[x] = append(laws[x], c.Law)
		}
		widths[x] += c.S1 - c.S0
	}
	var keys []figure.Key
	for x, l := range laws {
		text := fmt.Sprintf("%s (%d kinds)", wall.Title(l[0]), len(l))
		if len(l) == 1 {
			text = wall.Short(l[0]) + remark(l[0])
		}
		if x == figure.Gap {
			text += fmt.Sprintf(", width %.4g %s", widths[x], t.Design().Unit)
		}
		keys = append(keys, figure.Key{Texture: x, Text: text})
	}
	slices.SortFunc(keys, func(a, b figure.Key) int { return cmp.Compare(a.Texture, b.Texture) })
	return keys
}

// criticalRemark says where the critical lines of a dielectric lie.
func criticalRemark(l wall.Law) string {
	if d, ok := l.(wall.Dielectric); ok && d.Critical() < 1 {
		return fmt.Sprintf(", dashed at the critical p = ±%.4g", d.Critical())
	}
	return ""
}
