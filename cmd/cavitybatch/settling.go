package main

import (
	"context"

	"cavitywright/render/export"
	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/chaos"
	"cavitywright/table"
)

// worked is what figures are asked that rest on more than one run.
type worked struct {
	page
	Effort float64 `default:"1" placeholder:"K" help:"Multiply the number of bounces; the error falls as its square root, or faster (${default})."`
}

// convergence writes how a number settles.
type convergence struct {
	worked
	Of      string `default:"stretching" enum:"stretching,share" help:"stretching: the largest Lyapunov exponent (the default). share: the chaotic share of the section, by both methods."`
	Bounces int    `default:"5000" placeholder:"N" help:"Most bounces of an orbit, of the share (${default})."`
}

// paths writes the distribution of flights.
type paths struct{ worked }

// correlation writes a correlation by its lag.
type correlation struct {
	worked
	Of   string `default:"p" enum:"p,flight" help:"What is correlated: p (the default) or the flight."`
	Lags int    `default:"50" placeholder:"N" help:"The greatest lag in bounces (${default})."`
}

// mostLags bounds a correlation: its work grows with the lags.
const mostLags = 5000

// Run writes the trace.
func (c *convergence) Run(ctx context.Context, std streams) error {
	if c.Bounces < 100 || c.Bounces > mostMapBounces {
		return misuse("the number of bounces is %d, but must lie between 100 and %d", c.Bounces, int(mostMapBounces))
	}
	return c.make(ctx, std, c.Of, func(tr *sim.Tracer, run measure.Runner) (figure.Figure, error) {
		t := tr.Table()
		if why := chaos.Integrable(t); why != "" {
			return nil, &measure.NotMeasured{Name: "convergence", Why: "the number is " + why}
		}
		if c.Of == "share" {
			s, err := chaos.MeasureSharing(tr, run, c.Effort, c.Bounces)
			if err != nil {
				return nil, err
			}
			return s.Trace(t, program), nil
		}
		s, err := chaos.MeasureStretching(tr, run, c.Effort)
		if err != nil {
			return nil, err
		}
		if s.Chaotic < chaos.StretchOrbits {
			return nil, &measure.NotMeasured{Name: "convergence", Why: "too few orbits are chaotic for an exponent"}
		}
		return s.Trace(t, program), nil
	})
}

// Run writes the distribution.
func (c *paths) Run(ctx context.Context, std streams) error {
	return c.make(ctx, std, "flights", func(tr *sim.Tracer, run measure.Runner) (figure.Figure, error) {
		p, err := chaos.MeasurePaths(tr, run, c.Effort)
		if err != nil {
			return nil, err
		}
		return p.Figure(tr.Table(), program), nil
	})
}

// Run writes the correlation.
func (c *correlation) Run(ctx context.Context, std streams) error {
	if c.Lags < 1 || c.Lags > mostLags {
		return misuse("the greatest lag is %d bounces, but must lie between 1 and %d", c.Lags, mostLags)
	}
	of := measure.Momentum
	if c.Of == "flight" {
		of = measure.Flight
	}
	return c.make(ctx, std, "correlation", func(tr *sim.Tracer, run measure.Runner) (figure.Figure, error) {
		p, err := chaos.MeasureCorrelation(tr, run, c.Effort, of, c.Lags)
		if err != nil {
			return nil, err
		}
		return p.Figure(tr.Table(), program), nil
	})
}

// make reads the table, has the figure made and writes it.
func (c *worked) make(ctx context.Context, std streams, title string, do func(*sim.Tracer, measure.Runner) (figure.Figure, error)) error {
	if err := checkEffort(c.Effort); err != nil {
		return err
	}
	format, t, err := c.open(std)
	if err != nil {
		return err
	}
	if why := chaos.Mirrors(t); why != "" {
		return &measure.NotMeasured{Name: title, Why: why}
	}
	if t, err = c.studied(t.Design()); err != nil {
		return err
	}
	return c.drawn(ctx, std, t, title, format, do)
}

func (c *worked) drawn(ctx context.Context, std streams, t *table.Table, title string, format export.Format, do func(*sim.Tracer, measure.Runner) (figure.Figure, error)) error {
	r := newRunner(ctx, sim.Compile(t), t.Design().Study.Seed, c.Workers, std)
	r.title = title
	f, err := do(r.tracer, r.run)
	r.close()
	if err != nil {
		return err
	}
	return c.publish(ctx, t, c.Out, format, f)
}

func checkEffort(x float64) error {
	if !(x >= leastEffort && x <= mostEffort) {
		return misuse("the effort is %g, but must lie between %g and %g", x, leastEffort, mostEffort)
	}
	return nil
}
