package main

import (
	"bytes"
	"context"
	"fmt"
	"strconv"
	"strings"

	"cavitywright/render/export"
	"cavitywright/sim/figure"
	"cavitywright/sim/study/wish"
	"cavitywright/table"
	"cavitywright/table/tablefile"
)

// seek finds a wall for a wish.
type seek struct {
	leaf
	Name        string   `placeholder:"NAME" help:"The wish of the study to carry out; without it and --free the only one there is."`
	Free        []string `placeholder:"DIAL=LO:HI" help:"A number of the table that may be turned, within a range: eps=0.2:0.5, 1.node3.x=1:2, coat1.at=0.1:0.9."`
	Maximise    []string `placeholder:"NAME[*W]" help:"A reading to be made great; several count with their weights W."`
	Minimise    []string `placeholder:"NAME[*W]" help:"A reading to be made small."`
	Hold        []string `placeholder:"NAME=V[*W]" help:"A reading to be brought to a value."`
	Against     []string `placeholder:"NAME" help:"A second wish, for a front between the two: --against=NAME to be made great, --against=-NAME to be made small."`
	Bend        string   `default:"any" enum:"any,convex,strict" help:"How the outer wall must bend: any, convex, or strict for strictly convex."`
	LeastRadius float64  `default:"0" placeholder:"R" help:"No bend may be sharper, and no corner stand."`
	Area        string   `placeholder:"LO:HI" help:"The range of the area."`
	Box         string   `placeholder:"X:Y" help:"The box that the wall must fit in."`
	Symmetry    string   `placeholder:"G" help:"The least symmetry: D1 for one mirror line, C3 for three rotations."`
	Same        string   `default:"nothing" enum:"nothing,perimeter,area" help:"What of the table as drawn every wall is scaled to: perimeter or area."`
	Under       string   `placeholder:"NAME" help:"A tolerance of the study, whose copies of each wall count in place of the wall."`
	Over        string   `default:"mean" enum:"mean,worst" help:"What counts of the copies: their mean, or the worst."`
	Copies      int      `default:"8" placeholder:"N" help:"Copies of each wall under a tolerance (${default})."`
	Tries       int      `default:"0" placeholder:"N" help:"Walls tried at most; the study's, or 60."`
	Method      string   `default:"" enum:",simplex,evolution" help:"simplex (Nelder and Mead) or evolution (CMA-ES, the simplex after it); the study's, or simplex."`
	Effort      float64  `default:"0" placeholder:"K" help:"Multiply the number of bounces of each reading; the study's, or 0.1."`
	JSON        bool     `help:"Write JSON."`
	Out         string   `short:"o" placeholder:"FILE" help:"Write to a file; its ending says how: .json the table that was found, .png, .svg or .pdf a figure."`
	Course      bool     `help:"The figure: the course of the search, or the front, in place of the wall."`
}

// Help explains goals above the flags.
func (*seek) Help() string {
	return "What is wished for is any reading (cavitybatch readings --help), or " + wish.OrbitForms + ". All walls are measured with the same seed."
}

// Run seeks the wall.
func (c *seek) Run(ctx context.Context, std streams) error {
	if err := checkWorkers(c.Workers); err != nil {
		return err
	}
	t, err := readTable(c.File, std)
	if err != nil {
		return err
	}
	if t, err = c.studied(t.Design()); err != nil {
		return err
	}
	plan, err := c.plan(t)
	if err != nil {
		return err
	}
	w, err := wish.New(t, plan)
	if err != nil {
		return described(c.Free, err)
	}
	format := export.JSON
	if c.Out != "" {
		if format, err = export.FormatOf(c.Out); err != nil {
			return &wrongUse{err}
		}
		if format == export.CSV {
			return misuse("what was found is a table (.json) or a figure (.png, .svg, .pdf), but %s ends in .csv; --json writes all walls tried", c.Out)
		}
	}
	bar := newTaskBar(std, "walls", plan.Tries)
	f, err := w.Search(kitOf(ctx, t.Design().Study.Seed, c.Workers), func(*wish.Found, *wish.Try) { bar.step() })
	bar.close()
	if err != nil && (f.Best == nil || ctx.Err() == nil) {
		return err
	}
	if err != nil { // stopped by hand: the best so far is answered
		ctx = context.WithoutCancel(ctx)
		complain(std, fmt.Sprintf("stopped after %d walls; what follows is the best of them", len(f.Tries)))
	}
	if err := c.write(ctx, f, format); err != nil {
		return err
	}
	if c.JSON {
		b, err := f.JSON()
		if err != nil {
			return err
		}
		_, err = std.out.Write(b)
		return err
	}
	for _, line := range f.Lines() {
		fmt.Fprintln(std.out, line)
	}
	if f.Best == nil {
		return fmt.Errorf("nothing was found")
	}
	return nil
}

// write writes the table or the figure.
func (c *seek) write(ctx context.Context, f *wish.Found, format export.Format) error {
	if c.Out == "" || f.Best == nil {
		return nil
	}
	if format == export.JSON {
		var b bytes.Buffer
		if err := tablefile.Write(&b, f.Best.Table.Design()); err != nil {
			return err
		}
		return writeFile(c.Out, b.Bytes())
	}
	var fig figure.Figure = f.Wall(f.Best, program)
	if c.Course {
		fig = f.Course(program)
	}
	return c.publish(ctx, f.Best.Table, c.Out, format, fig)
}

// plan is the study's wish, or one that the flags make.
func (c *seek) plan(t *table.Table) (table.Wish, error) {
	const triesMade, effortMade = 60, 0.1
	p := table.Wish{Name: "command line", Tries: triesMade, Effort: effortMade}
	var err error
	if len(c.Free) == 0 {
		if p, err = named(t.Design().Study.Wishes, c.Name, "wish", func(w table.Wish) string { return w.Name }); err != nil {
			return p, err
		}
	} else if err = c.fill(&p); err != nil {
		return p, err
	}
	if c.Tries != 0 {
		p.Tries = c.Tries
	}
	if c.Effort != 0 {
		if err := checkEffort(c.Effort); err != nil {
			return p, err
		}
		p.Effort = c.Effort
	}
	switch c.Method {
	case "simplex":
		p.Method = table.Simplex
	case "evolution":
		p.Method = table.Evolution
	}
	return p, nil
}

// fill fills the wish from the flags.
func (c *seek) fill(p *table.Wish) (err error) {
	for _, text := range c.Free {
		name, rest, _ := strings.Cut(text, "=")
		lo, hi, err := ends(rest)
		if err != nil {
			return misuse("%q is not understood; write DIAL=LO:HI, eps=0.2:0.5 for example", text)
		}
		p.Free = append(p.Free, table.Freedom{Dial: name, Lo: lo, Hi: hi})
	}
	for i, list := range [][]string{c.Maximise, c.Minimise, c.Hold} {
		for _, text := range list {
			g, err := goal(table.Aim(i), text)
			if err != nil {
				return err
			}
			p.Goals = append(p.Goals, g)
		}
	}
	for _, text := range c.Against {
		aim := table.Maximise
		if rest, small := strings.CutPrefix(text, "-"); small {
			aim, text = table.Minimise, rest
		}
		g, err := goal(aim, text)
		if err != nil {
			return err
		}
		p.Against = append(p.Against, g)
	}
	d := &p.Demand
	d.Bend = map[string]table.Bending{"any": table.AnyBend, "convex": table.Convex, "strict": table.StrictlyConvex}[c.Bend]
	d.Scaled = map[string]table.Scaling{"nothing": table.Unscaled, "perimeter": table.SamePerimeter, "area": table.SameArea}[c.Same]
	d.LeastRadius, d.Symmetry = c.LeastRadius, c.Symmetry
	if c.Area != "" {
		if d.AreaLo, d.AreaHi, err = ends(c.Area); err != nil {
			return misuse("the area %q is not understood; write LO:HI", c.Area)
		}
	}
	if c.Box != "" {
		if d.BoxX, d.BoxY, err = ends(c.Box); err != nil {
			return misuse("the box %q is not understood; write X:Y", c.Box)
		}
	}
	if c.Under != "" {
		p.Under, p.Copies = c.Under, c.Copies
		if c.Over == "worst" {
			p.Over = table.WorstOfCopies
		}
	}
	return nil
}

// ends are LO:HI.
func ends(text string) (lo, hi float64, err error) {
	a, b, ok := strings.Cut(text, ":")
	if !ok {
		return 0, 0, strconv.ErrSyntax
	}
	if lo, err = strconv.ParseFloat(a, 64); err == nil {
		hi, err = strconv.ParseFloat(b, 64)
	}
	return lo, hi, err
}

// goal is NAME, NAME=V or either with *W.
func goal(aim table.Aim, text string) (g table.Goal, err error) {
	g = table.Goal{Aim: aim, Weight: 1}
	rest, weight, weighed := strings.Cut(text, "*")
	if weighed {
		if g.Weight, err = strconv.ParseFloat(weight, 64); err != nil {
			return g, misuse("the weight in %q is no number", text)
		}
	}
	if g.Reading = rest; aim == table.Hold {
		g.Reading, g.Value, err = setting(rest)
	}
	return g, err
}
