// Package sheet composes the design sheet of a table: one page with the
// dimensioned outline, the readings, the portrait, how the wall bends, and what
// whoever makes the thing has to mind. It measures nothing itself but through
// the readings and figures of the packages it calls.
package sheet

import (
	"errors"
	"fmt"
	"math"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/leak"
	"cavitywright/sim/measure/reading"
	"cavitywright/table"
	"cavitywright/table/survey"
	"cavitywright/table/wall"
)

// Job is what a sheet is made from.
type Job struct {
	Tracer *sim.Tracer
	Runner measure.Runner
	Effort float64 // of the readings
	// Program is the name and version that the page ends with.
	Program string
}

// Of composes the sheet. The error is the runner's.
func Of(j Job) (figure.Sheet, error) {
	t := j.Tracer.Table()
	d := t.Design()
	report := survey.Of(t, 0)
	s := figure.Sheet{Title: d.Name, Head: head(t, report), Foot: append(Cautions(t), measure.Foot(t, j.Program))}
	if s.Title == "" {
		s.Title = "Untitled table"
	}
	numbers, err := readings(j)
	if err != nil {
		return s, err
	}
	dots, err := portrait(j)
	if err != nil {
		return s, err
	}
	bend := measure.CurvatureFigure(t, report)
	bend.Caption = nil
	last := []figure.Block{{Heading: "Curvature along the wall", Width: 1, Show: bend}}
	if leaves, err := leaving(j); err != nil {
		return s, err
	} else if leaves.Show != nil {
		last = append(last, leaves)
	}
	s.Rows = []figure.SheetRow{
		{Height: 1.15, Blocks: []figure.Block{
			{Heading: "Outline", Width: 1.1, Show: measure.Dimensioned(t)},
			{Heading: "Readings", Width: 1, Show: numbers},
		}},
		{Height: 0.95, Blocks: []figure.Block{{Heading: "Birkhoff portrait", Width: 1, Show: dots}}},
		{Height: 0.6, Blocks: last},
	}
	return s, nil
}

// head says what the table is, in two lines or three.
func head(t *table.Table, r *survey.Report) []string {
	d := t.Design()
	kinds := ""
	for i, it := range d.Items {
		if i > 0 {
			kinds += ", "
		}
		kinds += it.Shape.Kind()
	}
	lines := []string{fmt.Sprintf("%s; lengths in %s; smoothness of the wall %s, symmetry group %s.", kinds, d.Unit, r.Class, r.Symmetry.Name())}
	if d.Notes != "" {
		lines = append(lines, d.Notes)
	}
	return lines
}

// readings are all that the table has, without their notes: those stand in the
// list of readings.
func readings(j Job) (figure.Scalars, error) {
	wanted, err := reading.Wanted(j.Tracer.Table(), nil)
	if err != nil {
		return figure.Scalars{}, err
	}
	var list figure.Scalars
	seed := j.Tracer.Table().Design().Study.Seed
	for _, w := range wanted {
		row, err := w.Take(j.Tracer, j.Runner, j.Effort, seed)
		if no := (*measure.NotMeasured)(nil); errors.As(err, &no) {
			continue
		}
		if err != nil {
			return list, err
		}
		row.Note, row.Bounces = "", 0
		list.Rows = append(list.Rows, row)
	}
	return list, nil
}

// leaving is the figure of what leaves: the far field of what shines, else what
// is left against path; none of a closed table.
func leaving(j Job) (figure.Block, error) {
	t := j.Tracer.Table()
	none := (*measure.NotMeasured)(nil)
	switch {
	case leak.Emits(t) == "":
		f, err := leak.MeasureEmission(j.Tracer, j.Runner, leak.NaturalSeeding(t), leak.EmissionPlan{})
		if errors.As(err, &none) {
			return figure.Block{}, nil
		}
		if err != nil {
			return figure.Block{}, err
		}
		s := f.Cartesian(leak.ToPeak, "", j.Program)
		s.Caption = nil
		return figure.Block{Heading: "Far field", Width: 1, Show: s}, nil
	case leak.Leaks(t) == "":
		f, err := leak.MeasureFall(j.Tracer, j.Runner, leak.NaturalSeeding(t), 0, j.Effort)
		if errors.As(err, &none) {
			return figure.Block{}, nil
		}
		if err != nil {
			return figure.Block{}, err
		}
		s := f.Figure(leak.ByPath, figure.Linear, j.Program)
		s.Caption = nil
		return figure.Block{Heading: "What is left against path", Width: 1, Show: s}, nil
	}
	return figure.Block{}, nil
}

// mostBounces bounds the bounces of an orbit of a sheet's portrait: more would
// make the page black.
const mostBounces = 2000

// portrait is that of the study, or of an even seeding where it launches
// nothing.
func portrait(j Job) (figure.Dots, error) {
	t := j.Tracer.Table()
	study := measure.WithLaunches(t, t.Design().Study, 0)
	ran, err := j.Runner(measure.NewPortrait(j.Tracer, study.Launches, int(math.Min(float64(study.Bounces), mostBounces))))
	if err != nil {
		return figure.Dots{}, err
	}
	dots := measure.PortraitFigure(t, ran.(*measure.PortraitTally), j.Program)
	dots.Caption = nil
	return dots, nil
}

// Cautions are what whoever makes or runs the thing has to mind, from what the
// table is: common practice, and no replacement of the rules of the place.
func Cautions(t *table.Table) []string {
	lines := []string{
		"Rays only: no wave effects. Check against a wave calculation where the wavelength is not small against every radius, opening and roughness.",
		"Machining and etching: follow the shop's safety rules for tools, solvents and acids; remove burrs and sharp edges.",
	}
	for _, l := range measure.Laws(t) {
		if d, is := l.(wall.Dielectric); is && d.Index > 1 {
			lines = append(lines, "Optical use: laser light, scattered or leaving the wall, can blind; work under the local laser safety officer and codes.")
			break
		}
	}
	if u := t.Design().Unit; u == table.Millimetre || u == table.Centimetre || u == table.Metre {
		lines = append(lines, "Radio-frequency power: leave its handling and exposure limits to licensed staff and local codes; changes to a room's structure need a licensed engineer.")
	}
	return lines
}
