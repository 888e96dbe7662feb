package leak

import (
	"cavitywright/sim/measure"
	"cavitywright/table/wall"
	"fmt"

	"cavitywright/table"
)

// laws names the dielectric walls of a table, for a caption: index and
// polarisation.
func laws(t *table.Table) string {
	text := ""
	said := map[wall.Dielectric]bool{}
	for _, l := range measure.Laws(t) {
		d, is := l.(wall.Dielectric)
		if !is || said[d] {
			continue
		}
		said[d] = true
		text += fmt.Sprintf("; n = %.4g", d.Index)
		if d.Outside != 1 {
			text += fmt.Sprintf(" in %.4g", d.Outside)
		}
		text += ", " + Words(d.Polarisation)
	}
	return text
}

// Words are the name of a polarisation with what it means, since some
// communities swap the two.
func Words(p wall.Polarisation) string {
	if p == wall.TE {
		return "TE (E in plane)"
	}
	return "TM (E out of plane)"
}

// Polarised is a design with all its dielectric walls in one polarisation.
func Polarised(d table.Design, p wall.Polarisation) table.Design {
	turned := func(l wall.Law) wall.Law {
		if g, is := l.(wall.Dielectric); is {
			g.Polarisation = p
			return g
		}
		return l
	}
	if d.Bare != nil {
		d.Bare = turned(d.Bare)
	}
	coats := make([]table.Coat, len(d.Coats))
	for i, c := range d.Coats {
		c.Law = turned(c.Law)
		coats[i] = c
	}
	d.Coats = coats
	return d
}
