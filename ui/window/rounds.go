package window

import (
	"context"
	"errors"
	"fmt"
	"strings"

	"cavitywright/render"
	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/table"
	"cavitywright/ui/pane"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/widget"
)

// rounds measures for a sheet that keeps up with the wall: a short first round
// that is shown at once, then longer ones beside the window, each of which
// takes the place of the one before.
type rounds struct {
	*work
	state   *caption
	stop    *widget.Button // shown while a longer round is under way
	line    fyne.CanvasObject
	refines bool   // a longer round is under way
	done    bool   // all rounds are done
	seen    func() // called when a first round is shown; nil for nobody
}

func newRounds(w *Window) *rounds {
	r := &rounds{work: newWork(w), state: newCaption(fyne.TextAlignLeading, 120)}
	r.stop = quiet("stop", "Stop", r.Stop)
	r.stop.Hide()
	r.line = container.New(tall(34), container.NewBorder(nil, nil, nil, r.stop, r.state))
	return r
}

// Begin measures anew: do with each of the efforts in turn. It runs beside the
// window and gives back how its result is shown. A first round under way is let
// end, a longer one is dropped.
func (r *rounds) Begin(do func(d desk, effort float64) (show func(), err error), efforts ...float64) {
	if r.refines {
		r.Drop()
	}
	r.refining(false)
	r.done = false
	r.state.set("Measuring.")
	var show func()
	r.Follow(func(d desk) (err error) {
		show, err = do(d, efforts[0])
		return err
	}, func(err error) {
		if r.ended(err) {
			return
		}
		show()
		if r.seen != nil {
			r.seen()
		}
		if len(efforts) > 1 {
			r.refine(do, efforts[1:])
		}
	})
}

// refine runs the longer rounds.
func (r *rounds) refine(do func(d desk, effort float64) (func(), error), efforts []float64) {
	r.refining(true)
	all := 0.0
	for _, e := range efforts {
		all += e
	}
	r.Start(func(d desk) error {
		before := 0.0
		for _, e := range efforts {
			show, err := do(d.part(before/all, (before+e)/all), e)
			before += e
			if err != nil {
				return err
			}
			d.show(show)
		}
		return nil
	}, func(x float64) {
		r.state.set(fmt.Sprintf("Refining, %.0f %%.", 100*x))
	}, func(err error) {
		r.refining(false)
		if !r.ended(err) {
			r.done = true
			r.state.set("")
		}
	})
}

// refining says whether a longer round is under way, which can be stopped.
func (r *rounds) refining(is bool) {
	r.refines = is
	if is {
		r.stop.Show()
	} else {
		r.stop.Hide()
	}
}

// Drop ends the work and forgets what it was for.
func (r *rounds) Drop() {
	r.work.Drop()
	r.refining(false)
}

// ended says how a round failed, if it did.
func (r *rounds) ended(err error) bool {
	if err == nil {
		return false
	}
	if errors.Is(err, context.Canceled) {
		r.state.set("Stopped; what is shown is not refined to the end.")
	} else {
		r.state.set(sentence(err.Error()))
	}
	return true
}

// on is a tracer of another table, and what runs on it within the same work.
func (d desk) on(t *table.Table) (*sim.Tracer, measure.Runner) {
	tr := sim.Compile(t)
	return tr, d.running(tr)
}

// readoutRows are numbers as a list shows them.
func readoutRows(rows []figure.Scalar) []readoutRow {
	var out []readoutRow
	for _, s := range rows {
		unit := s.Unit
		if unit == "1" {
			unit = ""
		}
		about := sentence(s.Note)
		if s.Bounces > 0 {
			about += fmt.Sprintf(" %s bounces, seed %d.", count(s.Bounces), s.Seed)
		}
		out = append(out, readoutRow{s.Name, strings.TrimSpace(fmt.Sprint(render.Written(s), " ", unit)), about})
	}
	return out
}

// plate is a figure of a sheet with its name, which can be written to a file.
type plate struct {
	box  *fyne.Container
	pane *pane.Figure
	full figure.Figure // nil for none
}

// newPlate is an empty plate of a height; on is the table that its figure is of.
func newPlate(w *Window, name string, height float32, on func() *table.Table, controls ...fyne.CanvasObject) *plate {
	p := &plate{pane: pane.NewFigure(w.desk)}
	ending := "-" + strings.ReplaceAll(strings.ToLower(name), " ", "-") + ".png"
	write := quiet("save", "", func() {
		if t := on(); p.full != nil && t != nil {
			w.askFigureFile("Write the figure as (.png, .svg, .pdf or .csv)", ending, t, p.full, 85)
		}
	})
	head := append([]fyne.CanvasObject{title(name)}, controls...)
	row := container.NewHBox(append(head, layout.NewSpacer(), write)...)
	p.box = container.NewVBox(row, container.New(tall(height), p.pane.Surface))
	return p
}

// set shows a figure without its caption, which the sheet says in words; nil
// shows none.
func (p *plate) set(f figure.Figure) {
	p.full = f
	switch bare := f.(type) {
	case figure.Series:
		bare.Caption = nil
		f = bare
	case figure.Polar:
		bare.Caption = nil
		f = bare
	case figure.Grid:
		bare.Caption = nil
		f = bare
	}
	p.pane.Set(f)
}
