package tablefile

import "cavitywright/table"

var sweepKeys = []string{"name", "dials", "sample", "readings", "effort", "orbits"}

// sweeps are the sweeps of the study.
func (c *cursor) sweeps() (all []table.DialSweep) {
	var before []string
	for range c.list(mostPlans, "sweeps") {
		at := c.here()
		s := c.sweep()
		c.own(at, s.Name, before)
		all, before = append(all, s), append(before, s.Name)
	}
	return all
}

// sweep is one sweep; its effort is 1 where none is given.
func (c *cursor) sweep() table.DialSweep {
	at, seen := c.here(), seen{}
	s := table.DialSweep{Effort: 1}
	for key := range c.keys(sweepKeys...) {
		seen.add(key)
		switch key {
		case "name":
			s.Name = c.name()
		case "dials":
			for range c.list(mostTurns, "dials") {
				s.Turns = append(s.Turns, c.turn())
			}
		case "sample":
			s.Sample = int(c.whole(1, mostSample))
		case "readings":
			s.Readings = c.names(mostReadings, "readings")
		case "effort":
			s.Effort = c.effort()
		case "orbits":
			s.Orbits = int(c.whole(0, mostPeriod))
		}
	}
	c.need(at, seen, "name", "dials", "readings")
	switch {
	case c.err == nil && len(s.Turns) == 0:
		c.refuse(at, "give one at least", "has no dials")
	case c.err == nil && s.Orbits > 0 && len(s.Turns) > 1:
		c.refuse(at, `take "orbits" out, or all dials but one`, "follows orbits along %d dials", len(s.Turns))
	}
	return s
}

func sweepBlocks(all []table.DialSweep) list {
	blocks := list{}
	for _, s := range all {
		dials := list{}
		for _, t := range s.Turns {
			dials = append(dials, turnLine(t))
		}
		b := block{{"name", s.Name}, {"dials", dials}}
		if s.Sample > 0 {
			b = append(b, field{"sample", s.Sample})
		}
		b = append(b, field{"readings", texts(s.Readings)}, field{"effort", s.Effort})
		if s.Orbits > 0 {
			b = append(b, field{"orbits", s.Orbits})
		}
		blocks = append(blocks, b)
	}
	return blocks
}
