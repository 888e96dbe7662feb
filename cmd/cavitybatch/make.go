package main

import (
	"bytes"
	"errors"
	"fmt"
	"strconv"
	"strings"
	"text/tabwriter"

	"cavitywright/table"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/table/tablefile"
	"cavitywright/table/wall"
)

// makeTable writes the table file of one shape.
type makeTable struct {
	Shape string   `arg:"" optional:"" help:"Name of the shape; --list names them all."`
	Set   []string `arg:"" optional:"" name:"name=value" help:"Parameters of the shape (lengths in the unit), and unit=m|cm|mm|um|nm (mm), name=TEXT, seed=N, bounces=N."`
	Coat  []string `placeholder:"SHAPE:SIDE:FROM:TO:LAW[:name=value...]" sep:"none" help:"Lay a wall law on a stretch. SHAPE is the shape's name or its number, from 1; SIDE the number of the side along s, from 1, or all; FROM and TO are fractions of the side in the sense of increasing s. May be given again; a later coat covers an earlier one."`
	Bare  string   `placeholder:"LAW[:name=value...]" help:"The law of the wall where no coat lies; mirror where none is given."`
	List  bool     `help:"List the shapes and the wall laws with their parameters, units and ranges."`
	Out   string   `short:"o" placeholder:"FILE" help:"Write to a file instead of standard output."`
}

// Run writes the table.
func (m *makeTable) Run(std streams) error {
	if m.List {
		_, err := std.out.Write(catalogue())
		return err
	}
	if m.Shape == "" {
		return misuse("name a shape; cavitybatch make --list shows them")
	}
	kind := shape.Find(m.Shape)
	if kind == nil {
		return misuse("there is no shape %q; use one of %s", m.Shape, strings.Join(shapeNames(), ", "))
	}
	d, err := m.design(kind)
	if err != nil {
		return err
	}
	if _, err := table.New(d); err != nil {
		return err
	}
	var file bytes.Buffer
	if err := tablefile.Write(&file, d); err != nil {
		return err
	}
	if m.Out != "" {
		return writeFile(m.Out, file.Bytes())
	}
	_, err = std.out.Write(file.Bytes())
	return err
}

// design is the table's, of the shape with the parameters and coats given.
func (m *makeTable) design(kind *shape.Kind) (table.Design, error) {
	d := table.Design{Name: kind.Title, Unit: table.Millimetre, Study: table.DefaultStudy()}
	v := param.Defaults(kind.Specs)
	given := map[string]bool{}
	for _, s := range m.Set {
		name, text, ok := strings.Cut(s, "=")
		if !ok {
			return d, misuse("%q is no parameter; write name=value", s)
		}
		if given[name] {
			return d, misuse("%s is given twice; give it once", name)
		}
		given[name] = true
		var err error
		if i := param.Index(kind.Specs, name); i >= 0 {
			v[i], err = number(name, text)
		} else {
			err = setOther(&d, kind, name, text)
		}
		if err != nil {
			return d, err
		}
	}
	f, err := shape.New(kind.Name, v)
	if err != nil {
		return d, err
	}
	d.Items = []table.Item{{Shape: f, Place: plane.Identity()}}
	if m.Bare != "" {
		if d.Bare, err = bareLaw(m.Bare); err != nil {
			return d, err
		}
	}
	for _, text := range m.Coat {
		c, err := coat(kind, text)
		if err != nil {
			return d, err
		}
		d.Coats = append(d.Coats, c)
	}
	return d, nil
}

// setOther sets what every table has.
func setOther(d *table.Design, kind *shape.Kind, name, text string) (err error) {
	switch name {
	case "unit":
		if d.Unit, err = table.ParseUnit(text); err != nil {
			return &wrongUse{err}
		}
	case "name":
		d.Name = text
	case "seed":
		if d.Study.Seed, err = strconv.ParseUint(text, 10, 64); err != nil {
			return misuse("seed is %q, but must be a whole number from 0", text)
		}
	case "bounces":
		if d.Study.Bounces, err = strconv.Atoi(text); err != nil {
			return misuse("bounces is %q, but must be a whole number", text)
		}
	default:
		return misuse("the %s has no parameter %q; it has %s, and every shape has unit, name, seed and bounces",
			kind.Name, name, param.Names(kind.Specs))
	}
	return nil
}

func number(name, text string) (float64, error) {
	x, err := strconv.ParseFloat(text, 64)
	if err != nil {
		return 0, misuse("%s is %q, but must be a number", name, text)
	}
	return x, nil
}

// coat reads SHAPE:SIDE:FROM:TO:LAW[:name=value...].
func coat(kind *shape.Kind, text string) (table.Coat, error) {
	wrong := func(format string, args ...any) (table.Coat, error) {
		return table.Coat{}, misuse("the coat %q %s", text, fmt.Sprintf(format, args...))
	}
	part := strings.Split(text, ":")
	if len(part) < 5 {
		return wrong("is incomplete; write SHAPE:SIDE:FROM:TO:LAW")
	}
	if part[0] != kind.Name && part[0] != "1" {
		return wrong("lies on %q; the table has one shape, %s, number 1", part[0], kind.Name)
	}
	c := table.Coat{Side: table.AllSides}
	if part[1] != "all" {
		n, err := strconv.Atoi(part[1])
		if err != nil || n < 1 {
			return wrong("lies on side %q; sides are counted from 1, or all of them are called all", part[1])
		}
		c.Side = n - 1
	}
	var err error
	if c.From, err = strconv.ParseFloat(part[2], 64); err != nil {
		return wrong("begins at %q; give a fraction of the side, from 0 to 1", part[2])
	}
	if c.To, err = strconv.ParseFloat(part[3], 64); err != nil {
		return wrong("ends at %q; give a fraction of the side, from 0 to 1", part[3])
	}
	c.Law, err = law(part[4], part[5:])
	if err != nil {
		if re := (*param.RangeError)(nil); errors.As(err, &re) {
			return table.Coat{}, fmt.Errorf("the coat %q cannot be laid: %w", text, err)
		}
		return wrong("cannot be laid: %v", err)
	}
	return c, nil
}

// bareLaw reads LAW[:name=value...].
func bareLaw(text string) (wall.Law, error) {
	part := strings.Split(text, ":")
	l, err := law(part[0], part[1:])
	if re := (*param.RangeError)(nil); errors.As(err, &re) {
		return nil, fmt.Errorf("the bare wall cannot be %q: %w", text, err)
	}
	if err != nil {
		return nil, misuse("the bare wall cannot be %q: %v", text, err)
	}
	return l, nil
}

// law is the wall law called name, with parameters as name=value.
func law(name string, set []string) (wall.Law, error) {
	var names []string
	for _, k := range wall.Kinds() {
		names = append(names, k.Name)
		if k.Name != name {
			continue
		}
		v := param.Defaults(k.Specs)
		for _, s := range set {
			key, text, ok := strings.Cut(s, "=")
			i := param.Index(k.Specs, key)
			if !ok || i < 0 {
				if len(k.Specs) == 0 {
					return nil, fmt.Errorf("the law %s has no parameters, so %q means nothing", name, s)
				}
				return nil, fmt.Errorf("the law %s has no parameter %q; it has %s", name, key, param.Names(k.Specs))
			}
			x, err := number(key, text)
			if err != nil {
				return nil, err
			}
			v[i] = x
		}
		return wall.Make(name, v)
	}
	return nil, fmt.Errorf("there is no wall law %q; use one of %s", name, strings.Join(names, ", "))
}

func shapeNames() []string {
	var names []string
	for _, k := range shape.Catalogue() {
		names = append(names, k.Name)
	}
	return names
}

// catalogue is the list of shapes and laws, as text.
func catalogue() []byte {
	var b bytes.Buffer
	fmt.Fprintf(&b, "Shapes. Lengths are in the table's unit (unit=m, cm, mm, um or nm; mm where none is given).\n")
	for _, k := range shape.Catalogue() {
		fmt.Fprintf(&b, "\n%s\n  %s\n  %s\n", k.Name, k.About, k.Formula)
		specs(&b, k.Specs)
	}
	fmt.Fprintf(&b, "\nWall laws, for --coat and --bare.\n")
	for _, k := range wall.Kinds() {
		fmt.Fprintf(&b, "\n%s\n  %s\n", k.Name, k.About)
		specs(&b, k.Specs)
	}
	return b.Bytes()
}

func specs(b *bytes.Buffer, list []param.Spec) {
	w := tabwriter.NewWriter(b, 0, 0, 2, ' ', 0)
	for _, s := range list {
		unit := [...]string{param.Pure: "pure number", param.Length: "length", param.Angle: "rad", param.Count: "whole number"}[s.Unit]
		fmt.Fprintf(w, "    %s\t%s\t%g to %g\tdefault %g\t%s\n", s.Name, unit, s.Lo, s.Hi, s.Default, s.Description)
	}
	_ = w.Flush() // a bytes.Buffer does not fail
}
