package main

import (
	"context"
	"errors"
	"math"
	"path/filepath"
	"strings"

	"cavitywright/sim/orbit"
	"cavitywright/table"
)

// orbits lists the periodic orbits.
type orbits struct {
	File string `arg:"" placeholder:"FILE" help:"The table, or - for standard input."`
	UpTo int    `required:"" placeholder:"N" help:"The most bounces of an orbit, from 2."`
	JSON bool   `help:"Write JSON."`
	Out  string `short:"o" placeholder:"FILE.csv" help:"Write the list as CSV to a file, one row an orbit."`
}

// census is what orbits finds, in the form of its JSON. Lengths are in Unit.
type census struct {
	Name    string        `json:"name"`
	Unit    string        `json:"unit"`
	Length  float64       `json:"perimeter"`
	UpTo    int           `json:"up_to"`
	Method  string        `json:"method"` // words or grids
	Periods []periodCount `json:"periods"`
	Orbits  []orbitRow    `json:"orbits"`
}

type periodCount struct {
	Period  int  `json:"period"`
	Listed  int  `json:"listed"`
	Count   int  `json:"count"`   // those that differ when run backwards counted twice
	Settled bool `json:"settled"` // words: all decided; grids: the last two brought nothing new
}

type orbitRow struct {
	Period     int         `json:"period"`
	Set        int         `json:"set"` // equal for orbits of equal period, length and trace: copies by symmetry
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

// Run searches and lists.
func (c *orbits) Run(ctx context.Context, std streams) error {
	if c.Out != "" && !strings.EqualFold(filepath.Ext(c.Out), ".csv") {
		return misuse("%s: orbits are written as CSV; let the name end in .csv", quoted(c.Out))
	}
	t, err := readTable(c.File, std)
	if err != nil {
		return err
	}
	list, err := orbit.Find(t, c.UpTo, ctx.Err)
	if limit := (*orbit.Limit)(nil); errors.As(err, &limit) {
		return &wrongUse{err}
	}
	if err != nil {
		return err
	}
	found := counted(t, list)
	if c.Out != "" {
		if err := writeFile(c.Out, found.csv()); err != nil {
			return err
		}
	}
	switch {
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
	c := &census{Name: d.Name, Unit: d.Unit.String(), Length: t.Length(), UpTo: list.UpTo, Method: "grids", Periods: []periodCount{}, Orbits: []orbitRow{}}
	if list.Words > 0 {
		c.Method = "words"
	}
	listed := make([]int, list.UpTo+1)
	leaks, set := orbit.Leaks(t), 0
	for i := range list.Orbits {
		o := &list.Orbits[i]
		listed[o.Period()]++
		r := row(o, leaks)
		if set == 0 || !alike(&c.Orbits[i-1], &r) {
			set++
		}
		r.Set = set
		c.Orbits = append(c.Orbits, r)
	}
	for n := orbit.Least; n <= list.UpTo; n++ {
		c.Periods = append(c.Periods, periodCount{n, listed[n], list.Count(n), list.Settled[n]})
	}
	return c
}

// alike reports whether two rows agree in period, length and trace.
func alike(a, b *orbitRow) bool {
	const tol = 1e-9 // relative: both come from equal formulas at mirrored places
	return a.Period == b.Period && math.Abs(a.Length-b.Length) <= tol*a.Length &&
		math.Abs(a.Trace-b.Trace) <= tol*(1+math.Abs(a.Trace)) && (a.Family == nil) == (b.Family == nil)
}

func row(o *orbit.Orbit, leaks bool) orbitRow {
	r := orbitRow{Period: o.Period(), Length: o.Length, Trace: o.Trace(), Residue: o.Residue(), Kind: o.Kind().String(),
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
