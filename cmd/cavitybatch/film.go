package main

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"path/filepath"
	"strings"

	"cavitywright/render/export"
	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/study/film"
	"cavitywright/table"
	"cavitywright/table/dial"
	"cavitywright/table/param"
	"cavitywright/table/tablefile"
)

// filmed writes how the wall and the portrait change with a number.
type filmed struct {
	File     string  `arg:"" placeholder:"FILE" help:"The table, or - for standard input."`
	Turn     string  `required:"" placeholder:"NUMBER=FROM:TO:FRAMES" help:"The number that is turned, from a value to another in so many frames: eps=0:0.5:60."`
	Out      string  `short:"o" required:"" placeholder:"FILE" help:"The film: .gif, or .png for numbered pictures beside each other (film-001.png and so on), each with its table inside."`
	Rate     float64 `default:"12" placeholder:"N" help:"Frames a second of a GIF (${default})."`
	Bounces  int     `default:"0" placeholder:"N" help:"Bounces of each orbit; the study's, at most 600, where none is given."`
	Seed     *uint64 `placeholder:"N" help:"Seed of chance; the study's where none is given."`
	Workers  int     `default:"0" placeholder:"N" help:"Number of workers, which changes no pixel; 0 for all processors."`
	WidthMM  float64 `name:"width-mm" default:"200" placeholder:"MM" help:"Width of a frame in millimetres (${default})."`
	HeightMM float64 `name:"height-mm" default:"0" placeholder:"MM" help:"Height in millimetres; 0 for three fifths of the width."`
	DPI      float64 `name:"dpi" default:"110" placeholder:"N" help:"Dots per inch (${default})."`
}

// Run makes the frames and writes them.
func (c *filmed) Run(ctx context.Context, std streams) error {
	format := strings.ToLower(filepath.Ext(c.Out))
	if format != ".gif" && format != ".png" {
		return misuse("a film is written as .gif, or as numbered .png, but %q ends in neither", c.Out)
	}
	if err := checkWorkers(c.Workers); err != nil {
		return err
	}
	if c.Bounces < 0 {
		return misuse("the number of bounces must not be negative")
	}
	f, err := c.film(std)
	if err != nil {
		return err
	}
	o := export.Options{WidthMM: c.WidthMM, HeightMM: c.HeightMM, DPI: c.DPI}
	if o.HeightMM == 0 {
		o.HeightMM = 0.6 * o.WidthMM
	}
	movie, err := export.NewFilm(o, c.Rate)
	if err != nil {
		return &wrongUse{err}
	}
	put := func(i int, s figure.Sheet) error { return movie.Add(s) }
	if format == ".png" {
		put = func(i int, s figure.Sheet) error { return writeFrame(c.Out, f, i, s, o) }
	}
	for i := range f.Len() {
		s, err := f.Frame(i, c.Bounces, func(tr *sim.Tracer, m measure.Measurement, seed uint64) (measure.Tally, error) {
			r := newRunner(ctx, tr, seed, c.Workers, std)
			defer r.close()
			r.title = fmt.Sprintf("frame %d of %d", i+1, f.Len())
			return r.run(m)
		}, program)
		if err != nil {
			return err
		}
		if err := put(i, s); err != nil {
			return err
		}
	}
	if format == ".png" {
		return nil
	}
	var b bytes.Buffer
	if err := movie.Write(&b); err != nil {
		return err
	}
	return writeFile(c.Out, b.Bytes())
}

// film is the film that is asked for.
func (c *filmed) film(std streams) (*film.Film, error) {
	turn, err := turnOf(c.Turn)
	if err != nil {
		return nil, err
	}
	t, err := readTable(c.File, std)
	if err != nil {
		return nil, err
	}
	if c.Seed != nil {
		d := t.Design()
		d.Study.Seed = *c.Seed
		if t, err = table.New(d); err != nil {
			return nil, err
		}
	}
	f, err := film.New(t, turn)
	refusal, unknown, out := (*film.Refusal)(nil), (*dial.Unknown)(nil), (*param.RangeError)(nil)
	if errors.As(err, &refusal) || errors.As(err, &unknown) || errors.As(err, &out) {
		return nil, &wrongUse{err}
	}
	return f, err
}

// writeFrame writes frame i as a picture with its table inside.
func writeFrame(to string, f *film.Film, i int, s figure.Sheet, o export.Options) error {
	var file, out bytes.Buffer
	if err := tablefile.Write(&file, f.Table(i).Design()); err != nil {
		return err
	}
	o.Table = file.Bytes()
	if err := export.Write(&out, export.PNG, s, o); err != nil {
		return err
	}
	return writeFile(film.Numbered(to, i, f.Len()), out.Bytes())
}
