package tablefile

import (
	"math"

	"cavitywright/table"
)

const (
	mostFlaws  = 64
	mostCopies = 100000
)

var (
	toleranceKeys = []string{"name", "errors", "copies", "readings", "effort", "limits", "wavelength"}
	flawKeys      = []string{"kind", "dial", "law", "mean", "width", "rms", "correlation"}
	limitKeys     = []string{"reading", "at-least", "at-most"}

	flawWords = []string{table.SizeFlaw: "size", table.DialFlaw: "dial", table.OffsetFlaw: "offset", table.ToolFlaw: "tool",
		table.RoughFlaw: "roughness", table.IndexFlaw: "index"}
	spreadWords = []string{table.Normal: "normal", table.Uniform: "uniform"}
)

// tolerances are the tolerances of the study.
func (c *cursor) tolerances() (all []table.Tolerance) {
	var before []string
	for range c.list(mostPlans, "tolerances") {
		at := c.here()
		t := c.tolerance()
		c.own(at, t.Name, before)
		all, before = append(all, t), append(before, t.Name)
	}
	return all
}

// tolerance is one of them; its effort is 1 where none is given.
func (c *cursor) tolerance() table.Tolerance {
	at, seen := c.here(), seen{}
	t := table.Tolerance{Effort: 1}
	for key := range c.keys(toleranceKeys...) {
		seen.add(key)
		switch key {
		case "name":
			t.Name = c.name()
		case "errors":
			for range c.list(mostFlaws, "errors") {
				t.Flaws = append(t.Flaws, c.flaw())
			}
		case "copies":
			t.Copies = int(c.whole(1, mostCopies))
		case "readings":
			t.Readings = c.names(mostReadings, "readings")
		case "effort":
			t.Effort = c.effort()
		case "limits":
			for range c.list(mostReadings, "limits") {
				t.Limits = append(t.Limits, c.limit())
			}
		case "wavelength":
			t.Wavelength = c.number(math.SmallestNonzeroFloat64, math.MaxFloat64)
		}
	}
	c.need(at, seen, "name", "errors", "copies", "readings")
	if c.err == nil && len(t.Flaws) == 0 {
		c.refuse(at, "give one at least", "has no errors")
	}
	return t
}

// flawFields are the keys that matter to a kind.
func flawFields(k table.FlawKind) []string {
	switch k {
	case table.RoughFlaw:
		return []string{"kind", "rms", "correlation"}
	case table.DialFlaw:
		return []string{"kind", "dial", "law", "mean", "width"}
	}
	return []string{"kind", "law", "mean", "width"}
}

// flaw is one flaw. It has just the keys that matter to its kind; a mean that is
// left out is 0.
func (c *cursor) flaw() table.Flaw {
	at, seen, marks := c.here(), seen{}, map[string]mark{}
	var f table.Flaw
	for key := range c.keys(flawKeys...) {
		seen.add(key)
		marks[key] = c.here()
		switch key {
		case "kind":
			f.Kind = table.FlawKind(c.word(flawWords))
		case "dial":
			f.Dial = c.name()
		case "law":
			f.Law = table.Spread(c.word(spreadWords))
		case "mean":
			f.Mean = c.anyNumber()
		case "width", "rms":
			f.Width = c.number(0, math.MaxFloat64)
		case "correlation":
			f.Length = c.number(math.SmallestNonzeroFloat64, math.MaxFloat64)
		}
	}
	for _, key := range flawFields(f.Kind) {
		if key != "mean" {
			c.need(at, seen, key)
		}
		delete(marks, key)
	}
	for _, key := range flawKeys {
		if m, there := marks[key]; there {
			c.refuse(m, "take it out", "does not matter to an error of this kind")
		}
	}
	return f
}

// limit is one limit, with one end at least.
func (c *cursor) limit() table.Limit {
	at, seen := c.here(), seen{}
	l := table.Limit{Lo: math.Inf(-1), Hi: math.Inf(1)}
	for key := range c.keys(limitKeys...) {
		seen.add(key)
		switch key {
		case "reading":
			l.Reading = c.name()
		case "at-least":
			l.Lo = c.anyNumber()
		case "at-most":
			l.Hi = c.anyNumber()
		}
	}
	c.need(at, seen, "reading")
	switch {
	case c.err != nil:
	case !seen["at-least"] && !seen["at-most"]:
		c.refuse(at, `give "at-least", "at-most" or both`, "has no end")
	case l.Lo > l.Hi:
		c.refuse(at, "exchange the two", "has its ends the wrong way round")
	}
	return l
}

func toleranceBlocks(all []table.Tolerance) list {
	blocks := list{}
	for _, t := range all {
		flaws := list{}
		for _, f := range t.Flaws {
			flaws = append(flaws, flawLine(f))
		}
		b := block{{"name", t.Name}, {"errors", flaws}, {"copies", t.Copies}, {"readings", texts(t.Readings)}, {"effort", t.Effort}}
		if len(t.Limits) > 0 {
			limits := list{}
			for _, l := range t.Limits {
				limits = append(limits, limitLine(l))
			}
			b = append(b, field{"limits", limits})
		}
		if t.Wavelength != 0 {
			b = append(b, field{"wavelength", t.Wavelength})
		}
		blocks = append(blocks, b)
	}
	return blocks
}

func flawLine(f table.Flaw) line {
	values := map[string]any{
		"kind": word(flawWords, int(f.Kind)), "dial": f.Dial, "law": word(spreadWords, int(f.Law)),
		"mean": f.Mean, "width": f.Width, "rms": f.Width, "correlation": f.Length,
	}
	var l line
	for _, key := range flawFields(f.Kind) {
		if key == "mean" && zero(f.Mean) {
			continue
		}
		l = append(l, field{key, values[key]})
	}
	return l
}

func limitLine(l table.Limit) line {
	out := line{{"reading", l.Reading}}
	if !math.IsInf(l.Lo, -1) {
		out = append(out, field{"at-least", l.Lo})
	}
	if !math.IsInf(l.Hi, 1) {
		out = append(out, field{"at-most", l.Hi})
	}
	return out
}
