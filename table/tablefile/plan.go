package tablefile

import (
	"slices"

	"cavitywright/table"
)

// What the plans of a study have in common: names, dials with their values,
// readings, effort. Whether there are such dials and readings is asked when a
// plan is carried out.

const (
	mostPlans    = 200  // of one kind
	mostTurns    = 16   // dials of a plan
	mostValues   = 5000 // of one dial
	mostReadings = 64
	mostSample   = 1000000
	mostPeriod   = 100
	leastEffort  = 1e-3
	mostEffort   = 1e4
)

// name is a text that is not empty.
func (c *cursor) name() string {
	at := c.here()
	s := c.text()
	if c.err == nil && s == "" {
		c.refuse(at, "give it a name", "is empty")
	}
	return s
}

// names are such texts in [ ], called as the plural says.
func (c *cursor) names(most int, plural string) (all []string) {
	for range c.list(most, plural) {
		all = append(all, c.name())
	}
	return all
}

func (c *cursor) effort() float64 { return c.number(leastEffort, mostEffort) }

// own refuses a name that a plan before has already.
func (c *cursor) own(at mark, name string, before []string) {
	if c.err == nil && slices.Contains(before, name) {
		c.refuse(at, "give each a name of its own", "has the name %s, which stands already", quoted(name))
	}
}

var turnKeys = []string{"dial", "from", "to", "points", "values"}

// turn is a dial with its values: a range or a list.
func (c *cursor) turn() table.Turn {
	at, seen := c.here(), seen{}
	var t table.Turn
	for key := range c.keys(turnKeys...) {
		seen.add(key)
		switch key {
		case "dial":
			t.Dial = c.name()
		case "from":
			t.From = c.anyNumber()
		case "to":
			t.To = c.anyNumber()
		case "points":
			t.Points = int(c.whole(2, mostValues))
		case "values":
			t.Values = []float64{}
			for range c.list(mostValues, "values") {
				t.Values = append(t.Values, c.anyNumber())
			}
		}
	}
	c.need(at, seen, "dial")
	if !seen["values"] {
		c.need(at, seen, "from", "to", "points")
		return t
	}
	switch {
	case len(t.Values) == 0:
		c.refuse(at, "give one at least", "has no values")
	case seen["from"] || seen["to"] || seen["points"]:
		c.refuse(at, "keep one of the two", "has both a range and values")
	}
	return t
}

func turnLine(t table.Turn) line {
	l := line{{"dial", t.Dial}}
	if len(t.Values) > 0 {
		return append(l, field{"values", numbers(t.Values)})
	}
	return append(l, field{"from", t.From}, field{"to", t.To}, field{"points", t.Points})
}
