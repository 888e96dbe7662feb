package window

import (
	"bytes"
	"context"

	"cavitywright/render/export"
	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/run"
	"cavitywright/sim/study/film"
	"cavitywright/table"
	"cavitywright/table/tablefile"
	"cavitywright/ui/store"
)

// takes are a film while it is made.
type takes struct {
	ctx   context.Context
	share func(float64)
	film  *film.Film
	path  string
}

// take makes a film ready, and asks first whether it has a place to go.
func take(ctx context.Context, share func(float64), t *table.Table, turn table.Turn, path string) (*takes, error) {
	if err := store.CanWrite(path); err != nil {
		return nil, err
	}
	f, err := film.New(t, turn)
	return &takes{ctx, share, f, path}, err
}

// each makes the frames and hands them out.
func (k *takes) each(put func(i int, s figure.Sheet) error) error {
	for i := range k.film.Len() {
		s, err := k.film.Frame(i, 0, func(tr *sim.Tracer, m measure.Measurement, seed uint64) (measure.Tally, error) {
			return run.Run(k.ctx, run.Job{Tracer: tr, Measure: m, Seed: seed})
		}, program)
		if err == nil {
			err = put(i, s)
		}
		if err != nil {
			return err
		}
		k.share(float64(i+1) / float64(k.film.Len()))
	}
	return k.ctx.Err()
}

// filmPage is the page of a film's pictures, of the size of its GIF.
var filmPage = export.Options{WidthMM: 200, HeightMM: 120, DPI: 110}

// gif writes them as one file.
func (k *takes) gif() error {
	movie, err := export.NewFilm(filmPage, filmRate)
	if err != nil {
		return err
	}
	if err := k.each(func(_ int, s figure.Sheet) error { return movie.Add(s) }); err != nil {
		return err
	}
	var b bytes.Buffer
	if err := movie.Write(&b); err != nil {
		return err
	}
	return store.WriteFile(k.path, b.Bytes())
}

// pictures writes each as a file with its table inside.
func (k *takes) pictures() error {
	return k.each(func(i int, s figure.Sheet) error {
		var file, out bytes.Buffer
		if err := tablefile.Write(&file, k.film.Table(i).Design()); err != nil {
			return err
		}
		o := filmPage
		o.Table = file.Bytes()
		if err := export.Write(&out, export.PNG, s, o); err != nil {
			return err
		}
		return store.WriteFile(film.Numbered(k.path, i, k.film.Len()), out.Bytes())
	})
}
