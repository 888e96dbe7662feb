package tablefile

import (
	"math"

	"cavitywright/table"
)

const (
	mostTries = 1000000
	mostGoals = 16
)

var (
	wishKeys    = []string{"name", "goals", "against", "free", "demand", "effort", "tries", "method", "under", "over", "copies"}
	goalKeys    = []string{"reading", "aim", "value", "weight"}
	freedomKeys = []string{"dial", "from", "to"}
	demandKeys  = []string{"bend", "least-radius", "area-from", "area-to", "box", "symmetry", "same"}

	aimWords     = []string{table.Maximise: "maximise", table.Minimise: "minimise", table.Hold: "hold"}
	methodWords  = []string{table.Simplex: "simplex", table.Evolution: "evolution"}
	robustWords  = []string{table.MeanOfCopies: "mean", table.WorstOfCopies: "worst"}
	bendWords    = []string{table.AnyBend: "any", table.Convex: "convex", table.StrictlyConvex: "strictly convex"}
	scalingWords = []string{table.Unscaled: "nothing", table.SamePerimeter: "perimeter", table.SameArea: "area"}
)

// wishes are the wishes of the study.
func (c *cursor) wishes() (all []table.Wish) {
	var before []string
	for range c.list(mostPlans, "wishes") {
		at := c.here()
		w := c.wish()
		c.own(at, w.Name, before)
		all, before = append(all, w), append(before, w.Name)
	}
	return all
}

// wish is one of them; its effort is 1 where none is given.
func (c *cursor) wish() table.Wish {
	at, seen := c.here(), seen{}
	w := table.Wish{Effort: 1}
	for key := range c.keys(wishKeys...) {
		seen.add(key)
		switch key {
		case "name":
			w.Name = c.name()
		case "goals":
			w.Goals = c.goals()
		case "against":
			w.Against = c.goals()
		case "free":
			for range c.list(mostTurns, "dials") {
				w.Free = append(w.Free, c.freedom())
			}
		case "demand":
			w.Demand = c.demand()
		case "effort":
			w.Effort = c.effort()
		case "tries":
			w.Tries = int(c.whole(1, mostTries))
		case "method":
			w.Method = table.Method(c.word(methodWords))
		case "under":
			w.Under = c.name()
		case "over":
			w.Over = table.Robust(c.word(robustWords))
		case "copies":
			w.Copies = int(c.whole(1, mostCopies))
		}
	}
	c.need(at, seen, "name", "goals", "free", "tries")
	switch {
	case c.err != nil:
	case len(w.Goals) == 0:
		c.refuse(at, "give one at least", "has no goals")
	case len(w.Free) == 0:
		c.refuse(at, "give one at least", "has no dials that are free")
	case seen["under"] != seen["copies"] || seen["over"] && !seen["under"]:
		c.refuse(at, `give "under" and "copies" together, or neither`, "says only half of what its copies are")
	}
	return w
}

func (c *cursor) goals() (all []table.Goal) {
	for range c.list(mostGoals, "goals") {
		all = append(all, c.goal())
	}
	return all
}

// goal is one goal; its weight is 1 where none is given.
func (c *cursor) goal() table.Goal {
	at, seen := c.here(), seen{}
	g := table.Goal{Weight: 1}
	for key := range c.keys(goalKeys...) {
		seen.add(key)
		switch key {
		case "reading":
			g.Reading = c.name()
		case "aim":
			g.Aim = table.Aim(c.word(aimWords))
		case "value":
			g.Value = c.anyNumber()
		case "weight":
			g.Weight = c.number(math.SmallestNonzeroFloat64, math.MaxFloat64)
		}
	}
	c.need(at, seen, "reading", "aim")
	if c.err == nil && (g.Aim == table.Hold) != seen["value"] {
		c.refuse(at, `give "value" with "hold", and only there`, "has an aim and a value that do not go together")
	}
	return g
}

func (c *cursor) freedom() table.Freedom {
	at, seen := c.here(), seen{}
	var f table.Freedom
	for key := range c.keys(freedomKeys...) {
		seen.add(key)
		switch key {
		case "dial":
			f.Dial = c.name()
		case "from":
			f.Lo = c.anyNumber()
		case "to":
			f.Hi = c.anyNumber()
		}
	}
	c.need(at, seen, freedomKeys...)
	if c.err == nil && f.Lo >= f.Hi {
		c.refuse(at, `make "to" greater than "from"`, "is free over no range")
	}
	return f
}

func (c *cursor) demand() table.Demand {
	var d table.Demand
	length := func() float64 { return c.number(math.SmallestNonzeroFloat64, math.MaxFloat64) }
	for key := range c.keys(demandKeys...) {
		switch key {
		case "bend":
			d.Bend = table.Bending(c.word(bendWords))
		case "least-radius":
			d.LeastRadius = length()
		case "area-from":
			d.AreaLo = length()
		case "area-to":
			d.AreaHi = length()
		case "box":
			at := c.here()
			p := c.point()
			if c.err == nil && !(p.X > 0 && p.Y > 0) {
				c.refuse(at, "give two lengths above 0", "is no box")
			}
			d.BoxX, d.BoxY = p.X, p.Y
		case "symmetry":
			d.Symmetry = c.name()
		case "same":
			d.Scaled = table.Scaling(c.word(scalingWords))
		}
	}
	return d
}

func wishBlocks(all []table.Wish) list {
	blocks := list{}
	for _, w := range all {
		b := block{{"name", w.Name}, {"goals", goalLines(w.Goals)}}
		if len(w.Against) > 0 {
			b = append(b, field{"against", goalLines(w.Against)})
		}
		free := list{}
		for _, f := range w.Free {
			free = append(free, line{{"dial", f.Dial}, {"from", f.Lo}, {"to", f.Hi}})
		}
		b = append(b, field{"free", free})
		if l := demandLine(w.Demand); len(l) > 0 {
			b = append(b, field{"demand", l})
		}
		b = append(b, field{"effort", w.Effort}, field{"tries", w.Tries}, field{"method", word(methodWords, int(w.Method))})
		if w.Under != "" {
			b = append(b, field{"under", w.Under}, field{"over", word(robustWords, int(w.Over))}, field{"copies", w.Copies})
		}
		blocks = append(blocks, b)
	}
	return blocks
}

func goalLines(goals []table.Goal) list {
	all := list{}
	for _, g := range goals {
		l := line{{"reading", g.Reading}, {"aim", word(aimWords, int(g.Aim))}}
		if g.Aim == table.Hold {
			l = append(l, field{"value", g.Value})
		}
		all = append(all, append(l, field{"weight", g.Weight}))
	}
	return all
}

func demandLine(d table.Demand) line {
	var l line
	put := func(key string, v float64) {
		if v != 0 {
			l = append(l, field{key, v})
		}
	}
	if d.Bend != table.AnyBend {
		l = append(l, field{"bend", word(bendWords, int(d.Bend))})
	}
	put("least-radius", d.LeastRadius)
	put("area-from", d.AreaLo)
	put("area-to", d.AreaHi)
	if d.BoxX != 0 {
		l = append(l, field{"box", numbers{d.BoxX, d.BoxY}})
	}
	if d.Symmetry != "" {
		l = append(l, field{"symmetry", d.Symmetry})
	}
	if d.Scaled != table.Unscaled {
		l = append(l, field{"same", word(scalingWords, int(d.Scaled))})
	}
	return l
}
