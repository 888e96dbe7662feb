package tablefile

import (
	"cavitywright/table"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/table/wall"

	"gonum.org/v1/gonum/spatial/r2"
)

// encode lays the design out. It checks only what could not be laid out: what
// it writes of a bad design, decode refuses.
func encode(d table.Design) ([]byte, error) {
	top := block{{"format", Format}, {"version", Version}}
	if d.Name != "" {
		top = append(top, field{"name", d.Name})
	}
	if d.Notes != "" {
		top = append(top, field{"notes", d.Notes})
	}
	top = append(top, field{"unit", string(d.Unit)})
	if d.Bare != nil {
		top = append(top, field{"bare", append(line{}, lawFields(d.Bare)...)})
	}
	items := list{}
	for _, it := range d.Items {
		b, err := itemBlock(it)
		if err != nil {
			return nil, err
		}
		items = append(items, b)
	}
	top = append(top, field{"items", items})
	if len(d.Coats) > 0 {
		coats := list{}
		for _, c := range d.Coats {
			coats = append(coats, coatLine(c))
		}
		top = append(top, field{"coats", coats})
	}
	top = append(top, field{"study", studyBlock(d.Study)})
	return append(layout(nil, top, 0), '\n'), nil
}

func itemBlock(it table.Item) (block, error) {
	b := block{{"role", word(roleWords, int(it.Role))}}
	if it.Shape == nil {
		return nil, &BadValue{Place{Path: "items"}, "holds an item without a shape", "take it out"}
	}
	b = append(b, field{"shape", it.Shape.Kind()}, field{"at", xy(it.Place.Shift)})
	if !zero(it.Place.Angle) {
		b = append(b, field{"angle", it.Place.Angle})
	}
	if it.Place.Scale != plane.Identity().Scale {
		b = append(b, field{"scale", it.Place.Scale})
	}
	switch s := it.Shape.(type) {
	case shape.Figure:
		return append(b, field{"parameters", parameterBlock(s)}), nil
	case shape.Freeform:
		b = append(b, field{"nodes", nodeLines(s)})
		if k := s.Symmetry(); !k.None() {
			b = append(b, field{"symmetry", symmetryLine(k)})
		}
		return b, nil
	}
	return nil, &BadValue{Place{Path: "items"}, "holds the shape " + quoted(it.Shape.Kind()) + ", which no file can hold", "take it out"}
}

func parameterBlock(f shape.Figure) block {
	b := block{}
	for k, s := range f.Family().Specs {
		b = append(b, field{s.Name, f.Values()[k]})
	}
	return b
}

// nodeLines are the nodes as the wall runs, from the inside on their left: made
// anew, nodes that a drag has turned clockwise are in that order.
func nodeLines(f shape.Freeform) list {
	all := list{}
	for _, n := range f.Forward().Nodes() {
		l := line{{"at", xy(n.At)}}
		if n.Joint != shape.Corner {
			l = append(l, field{"joint", word(jointWords, int(n.Joint))})
		}
		if !zero(n.In.X) || !zero(n.In.Y) {
			l = append(l, field{"in", xy(n.In)})
		}
		if !zero(n.Out.X) || !zero(n.Out.Y) {
			l = append(l, field{"out", xy(n.Out)})
		}
		if n.Span != shape.Straight {
			l = append(l, field{"span", word(spanWords, int(n.Span))})
		}
		if !zero(n.Bulge) {
			l = append(l, field{"bulge", n.Bulge})
		}
		if !zero(n.Ratio) {
			l = append(l, field{"ratio", n.Ratio})
		}
		if !zero(n.Tilt) {
			l = append(l, field{"tilt", n.Tilt})
		}
		if !zero(n.Fillet) {
			l = append(l, field{"fillet", n.Fillet})
		}
		all = append(all, l)
	}
	return all
}

func symmetryLine(s shape.Symmetry) line {
	l := line{}
	if s.Fold > 1 {
		l = append(l, field{"fold", s.Fold})
	}
	if s.Mirror {
		l = append(l, field{"mirror", s.Axis})
	}
	if s.Centre != (r2.Vec{}) {
		l = append(l, field{"centre", xy(s.Centre)})
	}
	return l
}

func coatLine(c table.Coat) line {
	l := line{{"item", c.Item}}
	if c.Side == table.AllSides {
		l = append(l, field{"side", allSides})
	} else {
		l = append(l, field{"side", c.Side})
	}
	l = append(l, field{"from", c.From}, field{"to", c.To})
	if c.Law == nil {
		return l
	}
	return append(l, lawFields(c.Law)...)
}

// lawFields are the law's name and parameters. Those of a law that is not in
// wall.Kinds have no names; the name alone is then refused.
func lawFields(l wall.Law) []field {
	fields := []field{{"law", l.Name()}}
	for _, k := range wall.Kinds() {
		if k.Name != l.Name() {
			continue
		}
		for i, v := range l.Values() {
			fields = append(fields, field{k.Specs[i].Name, v})
		}
	}
	return fields
}

func studyBlock(s table.Study) block {
	b := block{{"seed", s.Seed}, {"bounces", s.Bounces}}
	if len(s.Launches) > 0 {
		launches := list{}
		for _, l := range s.Launches {
			launches = append(launches, launchLine(l))
		}
		b = append(b, field{"launches", launches})
	}
	b = append(b, field{"display", line{
		{"sense", word(senseWords, int(s.Display.Sense))},
		{"position", word(positionWords, int(s.Display.Position))},
		{"momentum", word(momentumWords, int(s.Display.Momentum))},
	}})
	if len(s.Sweeps) > 0 {
		b = append(b, field{"sweeps", sweepBlocks(s.Sweeps)})
	}
	if len(s.Tolerances) > 0 {
		b = append(b, field{"tolerances", toleranceBlocks(s.Tolerances)})
	}
	if len(s.Wishes) > 0 {
		b = append(b, field{"wishes", wishBlocks(s.Wishes)})
	}
	return b
}

// launchLine has just the keys that matter to the launch. A count below 1 means
// one orbit.
func launchLine(l table.Launch) line {
	g := l.Region
	values := map[string]any{
		"pattern": word(patternWords, int(l.Pattern)), "origin": word(originWords, int(l.From)),
		"s": l.S, "p": l.P, "point": xy(l.Point), "angle": l.Angle,
		"count": max(l.Count, 1), "spread": l.Spread, "region": numbers{g.S0, g.S1, g.P0, g.P1},
	}
	var fields line
	for _, key := range launchKeys(l.From, l.Pattern) {
		fields = append(fields, field{key, values[key]})
	}
	return fields
}

func xy(v r2.Vec) numbers { return numbers{v.X, v.Y} }

// word is the word at i, or one that is none where there is no such word.
func word(words []string, i int) string {
	if i >= len(words) {
		return "unknown"
	}
	return words[i]
}
