package main

import (
	"context"
	"fmt"
	"math"
	"strconv"
	"strings"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/chaos"
	"cavitywright/table"
)

// stretching writes the map of finite-time stretching.
type stretching struct {
	page
	Of      string `default:"growth" enum:"growth,averages" help:"growth: stretching by the tangent map (the default). averages: digits in which weighted Birkhoff averages of an orbit's halves agree, many where it is regular."`
	Columns int    `default:"400" placeholder:"N" help:"Cells along s (${default})."`
	Rows    int    `default:"400" placeholder:"N" help:"Cells along p (${default})."`
	Bounces int    `default:"200" placeholder:"N" help:"Bounces of the orbit from each cell (${default})."`
	Region  string `default:"" placeholder:"S0:S1:P0:P1" help:"The part of the section that is mapped: s/L from 0 to 1 and p from -1 to 1; all of it where none is given."`
	Log     bool   `help:"Colour growth by its logarithm."`
}

const (
	// mostCells bounds a map: beyond, a page cannot show them and the file is
	// larger than anybody opens.
	mostCells = 4e6
	// mostMapBounces bounds the orbit of a cell.
	mostMapBounces = 1e6
)

// Run writes the map.
func (c *stretching) Run(ctx context.Context, std streams) error {
	g, err := region(c.Region)
	if err != nil {
		return err
	}
	switch {
	case c.Columns < 1 || c.Rows < 1 || float64(c.Columns)*float64(c.Rows) > mostCells:
		return misuse("%d by %d cells cannot be mapped; ask for at least 1 by 1 and at most %d in all", c.Columns, c.Rows, int(mostCells))
	case c.Bounces < 2 || c.Bounces > mostMapBounces:
		return misuse("the number of bounces is %d, but must lie between 2 and %d", c.Bounces, int(mostMapBounces))
	}
	format, t, err := c.open(std)
	if err != nil {
		return err
	}
	if why := chaos.Mirrors(t); why != "" {
		return &measure.NotMeasured{Name: "map of stretching", Why: why}
	}
	d := t.Design()
	if t, err = c.studied(d); err != nil {
		return err
	}
	tr := sim.Compile(t)
	field, err := chaos.NewField(c.Of, tr, c.Bounces, scale(c.Log))
	if err != nil {
		return err
	}
	m := measure.NewMosaic(t, field, g, c.Columns, c.Rows)
	return c.draw(ctx, std, tr, m.Next(c.Columns*c.Rows), format, func(ran measure.Tally) figure.Figure {
		m.Take(ran.(measure.Valued))
		return m.Figure([]string{chaos.MapCaption(t, m, field)}, program)
	})
}

func scale(log bool) figure.Scale {
	if log {
		return figure.Log
	}
	return figure.Linear
}

// region reads a part of the section.
func region(text string) (table.Region, error) {
	if text == "" {
		return table.WholeSection(), nil
	}
	fields := strings.Split(text, ":")
	var v [4]float64
	for i := range v {
		x, err := 0.0, error(nil)
		if i < len(fields) {
			x, err = strconv.ParseFloat(strings.TrimSpace(fields[i]), 64)
		}
		if len(fields) != len(v) || err != nil || math.IsNaN(x) {
			return table.Region{}, misuse("the region %q is not understood; write s0:s1:p0:p1, for example 0:0.5:-0.2:0.2", text)
		}
		v[i] = x
	}
	g := table.Region{S0: v[0], S1: v[1], P0: v[2], P1: v[3]}
	if !(0 <= g.S0 && g.S0 < g.S1 && g.S1 <= 1 && -1 <= g.P0 && g.P0 < g.P1 && g.P1 <= 1) {
		return g, misuse("the region %s does not lie in the section; it needs 0 <= s0 < s1 <= 1 and -1 <= p0 < p1 <= 1", fmt.Sprintf("%q", text))
	}
	return g, nil
}
