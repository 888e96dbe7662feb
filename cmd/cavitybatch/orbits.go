package main

import (
	"bytes"
	"context"
	"errors"

	"cavitywright/render/export"
	"cavitywright/sim/orbit"
	"cavitywright/sim/run"
	"cavitywright/table"
)

// orbits lists the periodic orbits.
type orbits struct {
	leaf
	UpTo   int    `required:"" placeholder:"N" help:"The most bounces of an orbit, from 2."`
	JSON   bool   `help:"Write JSON."`
	Out    string `short:"o" placeholder:"FILE" help:"Write to a file; its ending says how: .csv the list, one row an orbit; .png, .svg or .pdf a figure."`
	On     string `default:"table" enum:"table,portrait" help:"The figure: orbits drawn on the table (the default), or marked on the portrait: a ring where elliptic, a cross where hyperbolic, a cross in a ring where inverse hyperbolic, a bar for a family."`
	Only   []int  `placeholder:"N,M" help:"The sets that a figure shows, by their numbers in the list; all where none is given."`
	Follow string `placeholder:"NAME=LO:HI[:STEPS]" help:"Follow the orbits while a number of the table goes from LO to HI, for example eps=0.05:0.15 or 1.radius=1:2; a figure shows the trace of each."`
}

// census is what orbits finds, in the form of its JSON. Lengths are in Unit.
type census struct {
	Name    string        `json:"name"`
	Unit    string        `json:"unit"`
	Length  float64       `json:"perimeter"`
	Turns   int           `json:"turns"`   // rotations that map the wall onto itself, that by nothing counted
	Mirrors int           `json:"mirrors"` // lines in which the wall is its own mirror image
	UpTo    int           `json:"up_to"`
	Method  string        `json:"method"` // words or grids
	Periods []periodCount `json:"periods"`
	Orbits  []orbitRow    `json:"orbits"`
	list    *orbit.List
}

type periodCount struct {
	Period  int  `json:"period"`
	Listed  int  `json:"listed"`
	Count   int  `json:"count"`   // those that differ when run backwards counted twice
	Settled bool `json:"settled"` // words: all decided; grids: the last two brought nothing new
}

type orbitRow struct {
	Period     int         `json:"period"`
	Set        int         `json:"set"` // equal for orbits that are copies by symmetry
	Copies     int         `json:"copies"`
	Symmetry   string      `json:"symmetry"`
	Word       string      `json:"word"` // the sides met, by number in the order of s
	Winding    *int        `json:"winding"`
	Length     float64     `json:"length"`
	Trace      float64     `json:"trace"`
	Residue    float64     `json:"residue"`
	Kind       string      `json:"kind"`
	Multiplier complexRow  `json:"multiplier"` // the greater; the other is its inverse
	TwoSenses  bool        `json:"two_senses"` // run backwards it is another orbit
	LeastP     float64     `json:"least_p"`
	GreatestP  float64     `json:"greatest_p"`
	Confined   *bool       `json:"confined"` // null where nothing can leave
	Family     *familyRow  `json:"family"`
	Closure    float64     `json:"closure"`
	Bounces    []bounceRow `json:"bounces"`
}

type complexRow struct {
	Re float64 `json:"re"`
	Im float64 `json:"im"`
}

type familyRow struct {
	Closed bool         `json:"closed"`
	Whole  bool         `json:"whole"`  // false where it was not followed to its ends
	Ranges [][2]float64 `json:"ranges"` // s swept by each bounce
}

type bounceRow struct {
	S float64 `json:"s"`
	P float64 `json:"p"`
	X float64 `json:"x"`
	Y float64 `json:"y"`
}

// Run searches, and lists, draws or follows.
func (c *orbits) Run(ctx context.Context, std streams) error {
	format := export.CSV
	if c.Out != "" {
		var err error
		if format, err = export.FormatOf(c.Out); err != nil || format == export.JSON {
			return misuse("%s: let the name end in .csv for the list, or in .png, .svg or .pdf for a figure", quoted(c.Out))
		}
	}
	if err := checkWorkers(c.Workers); err != nil {
		return err
	}
	t, err := readTable(c.File, std)
	if err != nil {
		return err
	}
	ask := orbit.Search{UpTo: c.UpTo, Watch: ctx.Err, Spread: run.Spread(ctx, c.Workers)}
	watched, done := watching(std, &ask)
	defer done()
	if c.Follow != "" {
		return c.follow(ctx, std, t, ask, format, watched)
	}
	list, err := orbit.Find(t, ask)
	watched()
	if limit := (*orbit.Limit)(nil); errors.As(err, &limit) {
		return &wrongUse{err}
	}
	if err != nil {
		return err
	}
	found := counted(t, list)
	switch {
	case c.Out != "" && format == export.CSV:
		var out bytes.Buffer
		_ = list.WriteCSV(&out, t, program) // a buffer takes all
		err = writeFile(c.Out, out.Bytes())
	case c.Out != "":
		err = c.picture(ctx, std, t, list, format)
	}
	switch {
	case err != nil:
		return err
	case c.JSON:
		return writeJSON(std.out, found)
	case c.Out == "":
		return found.tell(std.out)
	}
	return nil
}

// counted is the list in the form of the JSON.
func counted(t *table.Table, list *orbit.List) *census {
	d := t.Design()
	c := &census{Name: d.Name, Unit: d.Unit.String(), Length: t.Length(), Turns: list.Turns, Mirrors: list.Mirrors, UpTo: list.UpTo, Method: "grids", Periods: []periodCount{}, Orbits: []orbitRow{}, list: list}
	if list.Words > 0 {
		c.Method = "words"
	}
	listed := make([]int, list.UpTo+1)
	leaks := orbit.Leaks(t)
	for i := range list.Orbits {
		o := &list.Orbits[i]
		listed[o.Period()]++
		c.Orbits = append(c.Orbits, row(o, leaks))
	}
	for n := orbit.Least; n <= list.UpTo; n++ {
		c.Periods = append(c.Periods, periodCount{n, listed[n], list.Count(n), list.Settled[n]})
	}
	return c
}

func row(o *orbit.Orbit, leaks bool) orbitRow {
	r := orbitRow{Period: o.Period(), Set: o.Class, Copies: o.Copies, Symmetry: o.Symmetry(), Word: o.Word, Length: o.Length, Trace: o.Trace(), Residue: o.Residue(), Kind: o.Kind().String(),
		TwoSenses: o.TwoSenses, Closure: o.Closure, Bounces: []bounceRow{}}
	great, _ := o.Multipliers()
	r.Multiplier = complexRow{real(great), imag(great)}
	r.LeastP, r.GreatestP = o.PRange()
	if o.Winding > 0 {
		r.Winding = &o.Winding
	}
	if leaks {
		r.Confined = &o.Confined
	}
	if f := o.Family; f != nil {
		r.Family = &familyRow{Closed: f.Closed, Whole: !f.Broken, Ranges: [][2]float64{}}
		for _, x := range f.Ranges {
			r.Family.Ranges = append(r.Family.Ranges, [2]float64{x.From, x.To})
		}
	}
	for _, b := range o.Bounces {
		r.Bounces = append(r.Bounces, bounceRow{b.S, b.P, b.Point.X, b.Point.Y})
	}
	return r
}
