package tablefile

import (
	"fmt"
	"math"

	"cavitywright/table"
	"cavitywright/table/param"
	"cavitywright/table/wall"
)

var (
	topKeys  = []string{"format", "version", "name", "notes", "unit", "bare", "items", "coats", "study"}
	coatKeys = append([]string{"item", "side", "from", "to", "law"}, lawParameters()...)
	bareKeys = append([]string{"law"}, lawParameters()...)
)

// readDesign reads the design; the syntax is known to hold.
func readDesign(src []byte, h head) (table.Design, error) {
	c := newCursor(src, h.unit)
	d := table.Design{Study: table.DefaultStudy()}
	at, seen := c.here(), seen{}
	for key := range c.keys(topKeys...) {
		seen.add(key)
		switch key {
		case "format":
			c.word([]string{Format})
		case "version":
			c.whole(Version, Version)
		case "name":
			d.Name = c.text()
		case "notes":
			d.Notes = c.text()
		case "unit":
			d.Unit = table.Units()[c.word(unitWords())]
		case "bare":
			d.Bare = c.bare()
		case "items":
			for range c.list(mostItems, "items") {
				d.Items = append(d.Items, c.item())
			}
		case "coats":
			for range c.list(mostCoats, "coats") {
				d.Coats = append(d.Coats, c.coat())
			}
		case "study":
			d.Study = c.study()
		}
	}
	c.need(at, seen, "version", "unit", "items")
	return d, c.err
}

func unitWords() []string {
	var words []string
	for _, u := range table.Units() {
		words = append(words, string(u))
	}
	return words
}

// seen are the keys that a record had.
type seen map[string]bool

func (s seen) add(key string) { s[key] = true }

// need refuses a record that lacks one of the keys.
func (c *cursor) need(at mark, s seen, keys ...string) {
	for _, key := range keys {
		if !s[key] {
			c.refuse(at, "write it in", "lacks %q", key)
			return
		}
	}
}

// given is a parameter as it stands in a file.
type given struct {
	name  string
	value float64
	at    mark
}

func (c *cursor) given(name string) given {
	at := c.here()
	return given{name, c.anyNumber(), at}
}

// values puts parameters into the order of the specs. owner is whose they are,
// for a sentence; at is the record that must give them.
func (c *cursor) values(at mark, owner string, specs []param.Spec, list []given) param.Values {
	v, have := param.Defaults(specs), make([]bool, len(specs))
	for _, g := range list {
		i := param.Index(specs, g.name)
		if i < 0 {
			remedy := "take it out, or use " + either(names(specs))
			if len(specs) == 0 {
				remedy = "take it out"
			}
			c.refuse(g.at, remedy, "is no parameter of the %s", owner)
			return nil
		}
		if specs[i].Check(g.value) != nil {
			c.refuse(g.at, c.rangeOf(specs[i]), "is %v", g.value)
			return nil
		}
		v[i], have[i] = g.value, true
	}
	for i, s := range specs {
		if !have[i] {
			c.refuse(at, c.rangeOf(s), "lacks the parameter %q of the %s", s.Name, owner)
			return nil
		}
	}
	return v
}

func names(specs []param.Spec) []string {
	n := make([]string, len(specs))
	for i, s := range specs {
		n[i] = s.Name
	}
	return n
}

// rangeOf says what may be given for the parameter, with its unit.
func (c *cursor) rangeOf(s param.Spec) string {
	switch s.Unit {
	case param.Count:
		return fmt.Sprintf("give a whole number from %v to %v", s.Lo, s.Hi)
	case param.Length:
		return within(s.Lo, s.Hi) + " " + short(c.unit)
	case param.Angle:
		return within(s.Lo, s.Hi) + " radians"
	}
	return within(s.Lo, s.Hi)
}

// bare is the law of the bare wall.
func (c *cursor) bare() wall.Law {
	at, seen, kind, list := c.here(), seen{}, 0, []given(nil)
	for key := range c.keys(bareKeys...) {
		seen.add(key)
		if key == "law" {
			kind = c.word(lawWords())
			continue
		}
		list = append(list, c.given(key))
	}
	c.need(at, seen, "law")
	return c.law(at, kind, list)
}

// coat is a law on a stretch of wall. Whether the table has such a stretch is
// decided when it is compiled.
func (c *cursor) coat() table.Coat {
	at, seen, kind, list := c.here(), seen{}, 0, []given(nil)
	var coat table.Coat
	for key := range c.keys(coatKeys...) {
		seen.add(key)
		switch key {
		case "item":
			coat.Item = int(c.whole(0, mostItems))
		case "side":
			coat.Side = c.side()
		case "from":
			coat.From = c.number(0, 1)
		case "to":
			coat.To = c.number(0, 1)
		case "law":
			kind = c.word(lawWords())
		default:
			list = append(list, c.given(key))
		}
	}
	c.need(at, seen, "item", "side", "from", "to", "law")
	coat.Law = c.law(at, kind, list)
	return coat
}

// side is the number of a side, or the word for all.
func (c *cursor) side() int {
	if c.err == nil && c.dec.PeekKind() == '"' {
		c.word([]string{allSides})
		return table.AllSides
	}
	return int(c.whole(0, math.MaxInt32))
}

// allSides is table.AllSides as files write it.
const allSides = "all"

func (c *cursor) law(at mark, kind int, list []given) wall.Law {
	if c.err != nil {
		return nil
	}
	k := wall.Kinds()[kind]
	v := c.values(at, k.Name+" law", k.Specs, list)
	if c.err != nil {
		return nil
	}
	l, err := wall.Make(k.Name, v)
	if err != nil {
		c.refuse(at, "give it other values", "makes no law of the wall")
	}
	return l
}

func lawWords() []string {
	var words []string
	for _, k := range wall.Kinds() {
		words = append(words, k.Name)
	}
	return words
}

// lawParameters are the parameters of all laws, which stand beside a law's
// name.
func lawParameters() []string {
	var all []string
	for _, k := range wall.Kinds() {
		all = append(all, names(k.Specs)...)
	}
	return all
}
