package main

import (
	"context"
	"fmt"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/leak"
)

// survival writes what is left of rays against path.
type survival struct {
	findings
	From  string  `placeholder:"START" help:"How rays start: even, trapped, area, point:X,Y, line:X,Y,X,Y, openings or opening:N; above the critical angle (trapped) where the wall has one, else even in ds dp, where none is given."`
	Until float64 `default:"0" placeholder:"T" help:"Path up to which rays are followed, in the table's unit; 0 for one that suits the table."`
	By    string  `default:"path" enum:"path,bounce" help:"Clock of the figure: path or bounce (${default})."`
	Log   bool    `help:"Logarithmic axis of the path, which shows a power law as a straight line."`
}

// survivalRow is what survival finds, in the form of its JSON.
type survivalRow struct {
	Name    string     `json:"name"`
	Unit    string     `json:"unit"`
	Start   string     `json:"start"`
	Seed    uint64     `json:"seed"`
	Rays    int        `json:"rays"`
	Bounces int64      `json:"bounces"`
	Window  *windowRow `json:"window"` // null where no stretch falls exponentially
	Bounced *windowRow `json:"window_by_bounce"`
	Tail    *tailRow   `json:"tail"` // null where there is none
	Naive   *float64   `json:"naive_rate"`
	Dwell   valued     `json:"mean_dwell"` // of what was gone by the last path
	Account accountRow `json:"account"`
	Path    clockRow   `json:"by_path"`
	Bounce  clockRow   `json:"by_bounce"`
}

type windowRow struct {
	From  float64 `json:"from"`
	To    float64 `json:"to"`
	Rate  float64 `json:"rate"`
	Err   float64 `json:"stderr"`
	Short bool    `json:"short"` // too short to show whether the rate stays
}

type tailRow struct {
	From     float64 `json:"from"`
	To       float64 `json:"to"`
	Exponent float64 `json:"exponent"`
	Err      float64 `json:"stderr"`
}

type clockRow struct {
	At   []float64  `json:"at"`
	Left []*float64 `json:"left"`
	Err  []*float64 `json:"stderr"`
}

// Run measures survival.
func (c *survival) Run(ctx context.Context, std streams) error {
	if !(c.Until >= 0) {
		return misuse("the path is %g, but must not be negative", c.Until)
	}
	format, t, err := c.begin(std)
	if err != nil {
		return err
	}
	from, err := seeding(c.From, t)
	if err != nil {
		return err
	}
	var f *leak.Fall
	err = c.measured(ctx, t, std, "survival", func(tr *sim.Tracer, run measure.Runner) (err error) {
		f, err = leak.MeasureFall(tr, run, from, c.Until, c.Effort)
		return err
	})
	if err != nil {
		return err
	}
	clock, scale := leak.ByPath, figure.Linear
	if c.By == "bounce" {
		clock = leak.ByBounce
	}
	if c.Log {
		scale = figure.Log
	}
	seed := t.Design().Study.Seed
	return c.report(ctx, t, format, f.Figure(clock, scale, program), fallen(f, t.Design().Name, t.Design().Unit.String(), seed), f.Scalars(seed), std)
}

func fallen(f *leak.Fall, name, unit string, seed uint64) *survivalRow {
	r := &survivalRow{Name: name, Unit: unit, Start: f.Starts.Words(), Seed: seed, Rays: f.Rays, Bounces: f.Flights, Account: accounted(f.Account)}
	if w := f.Window; f.HasWindow {
		r.Window = &windowRow{w.From, w.To, w.Rate, w.Err, w.Short}
	}
	if w := f.PerBounce; f.HasPerBounce {
		r.Bounced = &windowRow{w.From, w.To, w.Rate, w.Err, w.Short}
	}
	if t := f.Tail; t != nil {
		r.Tail = &tailRow{t.From, t.To, t.Exponent, t.Err}
	}
	if f.Naive > 0 {
		r.Naive = &f.Naive
	}
	r.Dwell = withError(f.Dwell())
	r.Path = clocked(f.Times, f.ByPath)
	r.Bounce = clocked(f.Bounces(), f.ByCount)
	return r
}

func clocked(at []float64, l leak.Lefts) clockRow {
	left, err := make([]float64, len(at)), make([]float64, len(at))
	for k := range at {
		left[k], err[k] = l.At(k)
	}
	return clockRow{at, numbers(left), numbers(err)}
}

// lifetime writes a map of the section.
type lifetime struct {
	page
	Of      string `default:"time" enum:"time,survivors,pasts" help:"time: path until half of what starts at a place has gone (the default). survivors: what is left of it after the bounces. pasts: the same backwards, where what has not left came from."`
	Columns int    `default:"400" placeholder:"N" help:"Cells along s (${default})."`
	Rows    int    `default:"400" placeholder:"N" help:"Cells along p (${default})."`
	Bounces int    `default:"0" placeholder:"N" help:"Bounces of the ray from each cell; 0 for 1000 for a map of times and 10 for the others."`
	Region  string `default:"" placeholder:"S0:S1:P0:P1" help:"The part of the section that is mapped: s/L from 0 to 1 and p from -1 to 1; all of it where none is given."`
}

const (
	timeBounces     = 1000
	survivorBounces = 10
)

// Run writes the map.
func (c *lifetime) Run(ctx context.Context, std streams) error {
	g, err := region(c.Region)
	if err != nil {
		return err
	}
	if c.Bounces == 0 {
		c.Bounces = survivorBounces
		if c.Of == "time" {
			c.Bounces = timeBounces
		}
	}
	switch {
	case c.Columns < 1 || c.Rows < 1 || float64(c.Columns)*float64(c.Rows) > mostCells:
		return misuse("%d by %d cells cannot be mapped; ask for at least 1 by 1 and at most %d in all", c.Columns, c.Rows, int(mostCells))
	case c.Bounces < 1 || c.Bounces > mostMapBounces:
		return misuse("the number of bounces is %d, but must lie between 1 and %d", c.Bounces, int(mostMapBounces))
	}
	format, t, err := c.open(std)
	if err != nil {
		return err
	}
	if why := leak.Leaks(t); why != "" {
		return fmt.Errorf("%s: %s", quoted(c.File), why)
	}
	if t, err = c.studied(t.Design()); err != nil {
		return err
	}
	tr := sim.Compile(t)
	field := leak.NewLife(tr, c.Of, c.Bounces)
	m := measure.NewMosaic(t, field, g, c.Columns, c.Rows)
	return c.draw(ctx, std, tr, m.Next(c.Columns*c.Rows), format, func(ran measure.Tally) figure.Figure {
		m.Take(ran.(measure.Valued))
		return m.Figure([]string{leak.MapCaption(t, m, field)}, program)
	})
}
