package main

import (
	"context"
	"fmt"
	"math"

	"cavitywright/render/export"
	"cavitywright/sim/measure/modes"
	"cavitywright/table"
)

// countModes counts modes by Weyl's law.
type countModes struct {
	File      string    `arg:"" placeholder:"FILE" help:"The table, or - for standard input."`
	Wall      string    `default:"dirichlet" enum:"dirichlet,neumann" help:"What the wave does at the wall: dirichlet (it vanishes; a metal cavity) or neumann (its slope vanishes; sound at a rigid wall)."`
	Height    float64   `placeholder:"H" help:"Height of the cavity, in the table's unit; without it the plane alone is counted."`
	Frequency []float64 `placeholder:"F" help:"Count the modes below this frequency, in Hz; several with commas."`
	Count     []float64 `placeholder:"N" help:"Say below which frequency there are so many modes; several with commas. Without frequency and count: 1, 10, 100 and 1000."`
	Speed     float64   `placeholder:"V" help:"Speed of the waves, in m/s: light in vacuum (299792458) for dirichlet, sound in air (343.2) for neumann."`
	JSON      bool      `help:"Write JSON."`
	Out       string    `short:"o" placeholder:"FILE" help:"Write the count against frequency as a figure; the ending says the format: .png, .svg, .pdf or .csv."`
	WidthMM   float64   `name:"width-mm" default:"85" placeholder:"MM" help:"Width of the figure in millimetres (${default})."`
	DPI       float64   `name:"dpi" default:"600" placeholder:"N" help:"Dots per inch of a PNG (${default})."`
}

// modeAccount is the JSON of modes. Lengths are in Unit, frequencies in hertz.
type modeAccount struct {
	Name  string      `json:"name"`
	Unit  string      `json:"unit"`
	Wall  string      `json:"wall"`
	Speed float64     `json:"speed_m_per_s"`
	Law   lawAccount  `json:"law"`
	Plate *plate      `json:"plate"` // null without a height
	Modes []modeCount `json:"modes"`
}

// lawAccount are the terms of N(k) = area k²/4π + edge k/4π + bend + corners.
type lawAccount struct {
	Area    float64 `json:"area"`
	Edge    float64 `json:"edge"` // the perimeter, negative for Dirichlet
	Bend    float64 `json:"bend"`
	Corners float64 `json:"corners"`
}

type plate struct {
	Height     float64 `json:"height"`
	Limit      float64 `json:"two_dimensional_below_hz"`
	Convention string  `json:"convention"`
	Volume     float64 `json:"volume"`
	Surface    float64 `json:"surface"`
	FreePath   float64 `json:"mean_free_path"` // 4 V / S
}

// modeCount is a pair of frequency and count, one of them asked for.
type modeCount struct {
	Asked     string   `json:"asked"` // frequency or count
	Frequency *float64 `json:"frequency_hz"`
	K         *float64 `json:"wavenumber"` // per unit
	Count     float64  `json:"count"`
	Spacing   *float64 `json:"mean_spacing_hz"`
	// Of the cavity of the height; null without one.
	PlateFrequency *float64 `json:"plate_frequency_hz"`
	PlateCount     *float64 `json:"plate_count"`
}

// Run counts.
func (c *countModes) Run(ctx context.Context, std streams) error {
	if err := c.check(); err != nil {
		return err
	}
	format, to := export.PNG, leaf{File: c.File, WidthMM: c.WidthMM, DPI: c.DPI}
	t, err := (*table.Table)(nil), error(nil)
	if c.Out == "" {
		t, err = readTable(c.File, std)
	} else {
		format, t, err = to.openFor(c.Out, std)
	}
	if err != nil {
		return err
	}
	q, err := c.question(t)
	if err != nil {
		if c.File == "-" {
			return fmt.Errorf("standard input: %w", err)
		}
		return fmt.Errorf("%s: %w", quoted(c.File), err)
	}
	a := c.answer(t, q)
	if c.Out != "" {
		if err := to.publish(ctx, t, c.Out, format, modes.Figure(q.law, q.plate, q.medium, a.top())); err != nil {
			return err
		}
	}
	switch {
	case c.JSON:
		return writeJSON(std.out, a)
	case c.Out == "":
		return a.tell(std.out)
	}
	return nil
}

func (c *countModes) check() error {
	positive := func(name, unit string, x float64) error {
		if !(x > 0) || math.IsInf(x, 0) {
			return misuse("%s is %g, but must be above 0%s", name, x, unit)
		}
		return nil
	}
	if c.Height != 0 {
		if err := positive("the height", ", in the table's unit", c.Height); err != nil {
			return err
		}
	}
	if c.Speed != 0 {
		if err := positive("the speed", " m/s", c.Speed); err != nil {
			return err
		}
	}
	for _, f := range c.Frequency {
		if err := positive("a frequency", " Hz", f); err != nil {
			return err
		}
	}
	for _, n := range c.Count {
		if err := positive("a count", "", n); err != nil {
			return err
		}
	}
	return nil
}

// question is what is counted: the plane's law, the plate where there is a
// height, and the waves.
type question struct {
	law    modes.Weyl
	plate  *modes.Plate
	medium modes.Medium
}

func (c *countModes) question(t *table.Table) (question, error) {
	w, field, speed := modes.Dirichlet, modes.Metal, float64(modes.LightSpeed)
	if c.Wall == "neumann" {
		w, field, speed = modes.Neumann, modes.Sound, modes.SoundSpeed
	}
	if c.Speed > 0 {
		speed = c.Speed
	}
	q := question{medium: modes.Medium{Speed: speed, Unit: t.Design().Unit}}
	var err error
	if q.law, err = modes.Of(t, w); err != nil || c.Height == 0 {
		return q, err
	}
	p, err := modes.PlateOf(t, field, c.Height)
	q.plate = &p
	return q, err
}

func (c *countModes) answer(t *table.Table, q question) modeAccount {
	a := modeAccount{
		Name: t.Design().Name, Unit: t.Design().Unit.String(), Wall: c.Wall, Speed: q.medium.Speed,
		Law: lawAccount{q.law.Area, q.law.Edge(), q.law.Bend, q.law.Corners},
	}
	if p := q.plate; p != nil {
		a.Plate = &plate{p.Height, q.medium.Hertz(p.Cutoff()), p.Field.Convention(), p.Volume(), p.Surface(), p.FreePath()}
	}
	counts := c.Count
	if len(counts) == 0 && len(c.Frequency) == 0 {
		counts = []float64{1, 10, 100, 1000}
	}
	for _, f := range c.Frequency {
		a.Modes = append(a.Modes, q.below(f))
	}
	for _, n := range counts {
		a.Modes = append(a.Modes, q.reaching(n))
	}
	return a
}

// top is the highest frequency that is spoken of, 1 Hz where there is none.
func (a modeAccount) top() float64 {
	top := 1.0
	for _, c := range a.Modes {
		for _, f := range []*float64{c.Frequency, c.PlateFrequency} {
			if f != nil {
				top = max(top, *f)
			}
		}
	}
	return top
}

// below counts the modes below a frequency.
func (q question) below(hertz float64) modeCount {
	k := q.medium.K(hertz)
	c := modeCount{Asked: "frequency", Frequency: &hertz, K: &k, Count: q.law.Count(k), Spacing: q.spacing(k)}
	if q.plate != nil {
		n := q.plate.Count(k)
		c.PlateFrequency, c.PlateCount = &hertz, &n
	}
	return c
}

// reaching finds the frequency below which there are so many modes.
func (q question) reaching(count float64) modeCount {
	k := q.law.At(count)
	c := modeCount{Asked: "count", Frequency: finite(q.medium.Hertz(k)), K: finite(k), Count: count, Spacing: q.spacing(k)}
	if q.plate != nil {
		c.PlateFrequency, c.PlateCount = finite(q.medium.Hertz(q.plate.At(count))), &count
	}
	return c
}

// spacing is the mean distance of neighbouring modes of the plane in frequency;
// nil where the law has none.
func (q question) spacing(k float64) *float64 {
	if d := q.law.Density(k); d > 0 {
		return finite(q.medium.Hertz(1 / d))
	}
	return nil
}
