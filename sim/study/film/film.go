// Package film turns a number of a design from one value to another, frame by
// frame, and makes of each frame a figure: the wall beside its portrait. It
// draws nothing and writes no file; every frame is a table of its own, so that
// it can be opened again.
package film

import (
	"fmt"
	"math"
	"path/filepath"
	"slices"
	"strconv"
	"strings"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/study"
	"cavitywright/table"
	"cavitywright/table/dial"
	"cavitywright/table/param"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

const (
	// MostFrames bounds the frames of a film: a minute at ten a second.
	MostFrames = 600
	// MostBounces is the bounces of an orbit in a frame where none are asked for
	// and the study has more: more make the small portrait black.
	MostBounces = 600
)

// Film is a turn of a number of a table.
type Film struct {
	Label  string // what is turned, "eps"
	tables []*table.Table
	values []float64
	spec   param.Spec
	unit   table.Unit
	box    r2.Box // of all walls
}

// Refusal says why there is no such film.
type Refusal struct{ Text string }

func (e *Refusal) Error() string { return e.Text }

// New is the film of a turn. All walls are made at once, so that a value which
// makes no table is known before the first frame. The error is a *Refusal, a
// *dial.Unknown, a *param.RangeError or that of table.New, with the value.
func New(t *table.Table, turn table.Turn) (*Film, error) {
	d := t.Design()
	x, err := dial.Find(d, turn.Dial)
	if err != nil {
		return nil, err
	}
	spec, err := x.Spec(d)
	if err != nil {
		return nil, err
	}
	values := slices.Clone(turn.All())
	for i, v := range values {
		if spec.Unit == param.Count {
			values[i] = math.Round(v)
		}
	}
	if len(values) < 2 || len(values) > MostFrames {
		return nil, &Refusal{fmt.Sprintf("a film has 2 to %d frames, not %d; ask for another number", MostFrames, len(values))}
	}
	f := &Film{Label: study.Label(d, x), values: values, spec: spec, unit: d.Unit, box: plane.Around()}
	d.Study.Sweeps, d.Study.Tolerances, d.Study.Wishes = nil, nil, nil
	for i, v := range values {
		turned, err := x.Turned(d, v)
		if err != nil {
			return nil, err
		}
		next, err := table.New(turned)
		if err != nil {
			return nil, fmt.Errorf("frame %d of %d, %s: %w", i+1, len(values), f.Says(i), err)
		}
		f.tables = append(f.tables, next)
		f.box = plane.Join(f.box, next.Bounds())
	}
	return f, nil
}

// Len is the number of frames.
func (f *Film) Len() int { return len(f.values) }

// Table is that of frame i.
func (f *Film) Table(i int) *table.Table { return f.tables[i] }

// Says is the number in frame i with its unit, "eps = 0.25".
func (f *Film) Says(i int) string { return f.Label + " = " + f.written(f.values[i]) }

// Numbered is the name of frame i of n where a film is written as pictures:
// "film.png" becomes "film-07.png", with as many digits as the last needs.
func Numbered(name string, i, n int) string {
	ext := filepath.Ext(name)
	digits := len(strconv.Itoa(n))
	return fmt.Sprintf("%s-%0*d%s", strings.TrimSuffix(name, ext), digits, i+1, ext)
}

// Runner carries out a measurement of a frame.
type Runner func(tr *sim.Tracer, m measure.Measurement, seed uint64) (measure.Tally, error)

// Frame is frame i: the wall, to one scale in all frames, and the portrait of
// the study's launches, or of an even seeding where it has none. bounces are
// those of each orbit, 0 for the study's up to MostBounces; program is the name
// and version that the foot ends with. The error is the runner's.
func (f *Film) Frame(i, bounces int, run Runner, program string) (figure.Sheet, error) {
	t := f.tables[i]
	s := measure.WithLaunches(t, t.Design().Study, 0)
	if bounces == 0 {
		bounces = min(s.Bounces, MostBounces)
	}
	tr := sim.Compile(t)
	ran, err := run(tr, measure.NewPortrait(tr, s.Launches, bounces), s.Seed)
	if err != nil {
		return figure.Sheet{}, err
	}
	dots := measure.PortraitFigure(t, ran.(*measure.PortraitTally), program)
	dots.Caption = nil
	name := t.Design().Name
	if name == "" {
		name = "Untitled table"
	}
	return figure.Sheet{
		Title: f.Says(i),
		Head:  []string{fmt.Sprintf("%s; %d bounces of each orbit, seed %d.", name, bounces, s.Seed)},
		Rows: []figure.SheetRow{{Height: 1, Blocks: []figure.Block{
			{Heading: "Wall", Width: 1, Show: f.wall(t)},
			{Heading: "Birkhoff portrait", Width: 1.5, Show: dots},
		}}},
		Foot: []string{measure.Foot(t, program)},
	}, nil
}

// chords is how near the drawn wall is to the wall, as a share of its size.
const chords = 3e-4

// wall is the drawing of the wall, in the room that the walls of all frames
// take: two corners of it are lines of no length.
func (f *Film) wall(t *table.Table) figure.Paths {
	p := figure.Paths{Unit: t.Design().Unit.String(), Lines: measure.Outline(t, chords*plane.Diagonal(f.box)), Keys: measure.Keys(t)}
	for _, c := range []r2.Vec{f.box.Min, f.box.Max} {
		p.Lines = append(p.Lines, figure.Line{Role: figure.Floor, Closed: true, X: []float64{c.X, c.X}, Y: []float64{c.Y, c.Y}})
	}
	return p
}

func (f *Film) written(v float64) string {
	short := func(v float64) string { return strconv.FormatFloat(v, 'g', 5, 64) }
	switch f.spec.Unit {
	case param.Angle:
		return short(v*180/math.Pi) + "°"
	case param.Length:
		return short(v) + " " + f.unit.String()
	}
	return short(v)
}
