package main

import (
	"bytes"
	"context"
	"errors"
	"fmt"

	"cavitywright/render/export"
	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/table"
	"cavitywright/table/tablefile"
)

// leaf is what every figure is asked.
type leaf struct {
	File     string  `arg:"" placeholder:"FILE" help:"The table, or - for standard input."`
	Seed     *uint64 `placeholder:"N" help:"Seed of chance; the study's where none is given."`
	Workers  int     `default:"0" placeholder:"N" help:"Number of workers, which changes no number; 0 for all processors."`
	WidthMM  float64 `name:"width-mm" default:"85" placeholder:"MM" help:"Width of the figure in millimetres (${default})."`
	HeightMM float64 `name:"height-mm" default:"0" placeholder:"MM" help:"Height in millimetres; 0 for what suits the figure."`
	DPI      float64 `name:"dpi" default:"600" placeholder:"N" help:"Dots per inch of a PNG (${default})."`
}

// page is a figure that must have a file.
type page struct {
	leaf
	Out string `short:"o" required:"" placeholder:"FILE" help:"The figure's file; its ending says the format: .png, .svg, .pdf or .csv."`
}

// portrait writes the Birkhoff portrait.
type portrait struct {
	page
	Orbits  int `default:"0" placeholder:"N" help:"Seed N orbits evenly in ds dp instead of the study's launches; where it has none, 60 are seeded, or 2000 among posts without a wall."`
	Bounces int `default:"0" placeholder:"N" help:"Bounces of each orbit; the study's where none is given."`
}

// rays writes the drawing of a table with rays.
type rays struct {
	page
	Bounces int `default:"40" placeholder:"N" help:"Bounces drawn of each ray (${default}). Where the study launches nothing, one ray is drawn, or a fan among posts without a wall."`
}

// mostDots bounds the points of a figure: beyond, the page is black and the
// machine out of memory.
const mostDots = 2e7

// Run writes the portrait.
func (c *portrait) Run(ctx context.Context, std streams) error {
	if c.Orbits < 0 || c.Bounces < 0 {
		return misuse("the numbers of orbits and bounces must not be negative")
	}
	format, t, err := c.open(std)
	if err != nil {
		return err
	}
	d := t.Design()
	if c.Orbits > 0 {
		d.Study.Launches = nil
	}
	d.Study = measure.WithLaunches(t, d.Study, c.Orbits)
	if c.Bounces > 0 {
		d.Study.Bounces = c.Bounces
	}
	if t, err = c.studied(d); err != nil {
		return err
	}
	tr := sim.Compile(t)
	m := measure.NewPortrait(tr, d.Study.Launches, d.Study.Bounces)
	if dots := float64(m.Orbits()) * float64(m.Each+1); dots > mostDots {
		return misuse("%d orbits of %d bounces are more than %d points; ask for fewer", m.Orbits(), m.Each, int(mostDots))
	}
	return c.draw(ctx, std, tr, m, format, func(ran measure.Tally) figure.Figure {
		return measure.PortraitFigure(t, ran.(*measure.PortraitTally), program)
	})
}

// Run writes the drawing.
func (c *rays) Run(ctx context.Context, std streams) error {
	if c.Bounces < 1 {
		return misuse("the number of bounces is %d, but must be at least 1", c.Bounces)
	}
	format, t, err := c.open(std)
	if err != nil {
		return err
	}
	d := t.Design()
	d.Study = measure.WithRays(t, d.Study)
	if t, err = c.studied(d); err != nil {
		return err
	}
	tr := sim.Compile(t)
	m := measure.NewRays(tr, d.Study.Launches, c.Bounces)
	if points := float64(m.Orbits()) * float64(m.Each+1); points > mostDots {
		return misuse("%d rays of %d bounces are more than %d points; ask for fewer bounces", m.Orbits(), m.Each, int(mostDots))
	}
	return c.draw(ctx, std, tr, m, format, func(ran measure.Tally) figure.Figure {
		return measure.RaysFigure(t, ran.(*measure.RaysTally), program)
	})
}

// open checks the flags and reads the table.
func (c *page) open(std streams) (export.Format, *table.Table, error) { return c.openFor(c.Out, std) }

// openFor checks the flags and reads the table, for a figure's file.
func (c *leaf) openFor(out string, std streams) (export.Format, *table.Table, error) {
	if err := checkWorkers(c.Workers); err != nil {
		return 0, nil, err
	}
	format, err := export.FormatOf(out)
	if err != nil {
		return 0, nil, &wrongUse{err}
	}
	if format == export.JSON {
		return 0, nil, misuse("a figure is written as .png, .svg, .pdf or .csv, but %s ends in .json", out)
	}
	t, err := readTable(c.File, std)
	return format, t, err
}

// studied is the table with the study that the figure is made from, so that
// the file inside the figure makes the same figure again.
func (c *leaf) studied(d table.Design) (*table.Table, error) {
	if c.Seed != nil {
		d.Study.Seed = *c.Seed
	}
	return table.New(d)
}

// draw carries out a measurement and writes its figure.
func (c *page) draw(ctx context.Context, std streams, tr *sim.Tracer, m measure.Measurement, format export.Format,
	make func(measure.Tally) figure.Figure) error {
	if m.Orbits() == 0 {
		return fmt.Errorf("%s: no launch of the study starts inside the table; move one, or take them out", quoted(c.File))
	}
	t := tr.Table()
	r := newRunner(ctx, tr, t.Design().Study.Seed, c.Workers, std)
	r.title = "tracing"
	ran, err := r.run(m)
	r.close()
	if err != nil {
		return err
	}
	return c.publish(ctx, t, c.Out, format, make(ran))
}

// publish writes a figure of a table, with the table inside.
func (c *leaf) publish(ctx context.Context, t *table.Table, to string, format export.Format, f figure.Figure) error {
	var file, out bytes.Buffer
	if err := tablefile.Write(&file, t.Design()); err != nil {
		return err
	}
	o := export.Options{WidthMM: c.WidthMM, HeightMM: c.HeightMM, DPI: c.DPI, Table: file.Bytes(), Header: header(t)}
	if err := export.Write(&out, format, f, o); err != nil {
		if size := (*export.BadSize)(nil); errors.As(err, &size) {
			return &wrongUse{err}
		}
		return err
	}
	if err := ctx.Err(); err != nil {
		return err
	}
	return writeFile(to, out.Bytes())
}

// header is the head of a CSV file.
func header(t *table.Table) []string {
	d := t.Design()
	return []string{
		program,
		fmt.Sprintf("lengths in %s; seed %d", d.Unit, d.Study.Seed),
		"s runs with the inside on its left, through the outer wall and then each obstacle; p = sin of the angle of the outgoing ray from the inward normal, positive towards increasing s",
	}
}
