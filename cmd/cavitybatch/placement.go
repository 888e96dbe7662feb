package main

import (
	"context"
	"math"
	"strconv"
	"strings"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/leak"
	"cavitywright/table"
)

// placement writes the rate of an opening against its place.
type placement struct {
	findings
	Width  string  `required:"" placeholder:"W" help:"Width of the opening in the table's unit; several separated by commas, or LO:HI:N for N evenly spaced ones."`
	Places int     `default:"200" placeholder:"N" help:"Places along the wall (${default})."`
	Begin  float64 `default:"0" placeholder:"T" help:"Path from which the rate is read; with --end. Chosen where neither is given."`
	End    float64 `default:"0" placeholder:"T" help:"Path to which the rate is read."`
	Map    bool    `help:"Draw a map over place and width, for widths given as LO:HI:N."`
}

// placementRow is what placement finds, in the form of its JSON.
type placementRow struct {
	Name   string     `json:"name"`
	Unit   string     `json:"unit"`
	Seed   uint64     `json:"seed"`
	Rays   int        `json:"rays"`
	From   float64    `json:"from"`
	To     float64    `json:"to"`
	Places []float64  `json:"s"`
	Widths []widthRow `json:"widths"`
}

type widthRow struct {
	Width float64    `json:"width"`
	Naive float64    `json:"naive_rate"`
	Rates []*float64 `json:"rate"`
	Errs  []*float64 `json:"stderr"`
	Late  []*float64 `json:"later_rate"` // from the end of the window to twice its length
	Slow  []bool     `json:"slows"`
}

// mostSites bounds the places times the widths.
const mostSites = 20000

func (c *placement) widths() ([]float64, error) {
	wrong := misuse("the width %q is not understood; write a number, several with commas, or LO:HI:N", c.Width)
	var v []float64
	if f := strings.Split(c.Width, ":"); len(f) == 3 {
		lo, err1 := strconv.ParseFloat(f[0], 64)
		hi, err2 := strconv.ParseFloat(f[1], 64)
		n, err3 := strconv.Atoi(f[2])
		if err1 != nil || err2 != nil || err3 != nil || n < 2 || n > mostSites || !(lo > 0 && hi > lo) || math.IsInf(hi, 0) {
			return nil, wrong
		}
		for k := range n {
			v = append(v, lo+(hi-lo)*float64(k)/float64(n-1))
		}
		return v, nil
	}
	for _, f := range strings.Split(c.Width, ",") {
		x, err := strconv.ParseFloat(strings.TrimSpace(f), 64)
		if err != nil || !(x > 0) || math.IsInf(x, 0) {
			return nil, wrong
		}
		v = append(v, x)
	}
	return v, nil
}

// Run measures the rates.
func (c *placement) Run(ctx context.Context, std streams) error {
	widths, err := c.widths()
	switch {
	case err != nil:
		return err
	case c.Map && !strings.Contains(c.Width, ":"):
		return misuse("a map needs evenly spaced widths; give them as LO:HI:N")
	case c.Places < 2 || c.Places*len(widths) > mostSites:
		return misuse("%d places by %d widths cannot be measured; ask for at least 2 places and at most %d in all", c.Places, len(widths), mostSites)
	case !(c.Begin >= 0 && (c.End > c.Begin || c.End == 0 && c.Begin == 0)):
		return misuse("the rate cannot be read from path %g to %g; the end must be above the beginning", c.Begin, c.End)
	}
	format, t, err := c.begin(std)
	if err != nil {
		return err
	}
	shut, err := table.New(leak.Unopened(t.Design()))
	if err != nil {
		return err
	}
	var p *leak.Places
	err = c.measured(ctx, shut, std, "placement", func(tr *sim.Tracer, run measure.Runner) (err error) {
		p, err = leak.MeasurePlaces(tr, run, leak.PlacementPlan{Widths: widths, Places: c.Places, From: c.Begin, To: c.End, Effort: c.Effort})
		return err
	})
	if err != nil {
		return err
	}
	d := t.Design()
	r := &placementRow{Name: d.Name, Unit: d.Unit.String(), Seed: d.Study.Seed, Rays: p.Rays, From: p.From, To: p.To, Places: p.S}
	n := len(p.S)
	for k, w := range p.Widths {
		row := widthRow{Width: w, Naive: p.Naive[k], Rates: numbers(p.Rates[k*n : (k+1)*n]), Errs: numbers(p.Errs[k*n : (k+1)*n]), Late: numbers(p.Late[k*n : (k+1)*n])}
		for i := range n {
			row.Slow = append(row.Slow, p.Slow(k, i))
		}
		r.Widths = append(r.Widths, row)
	}
	var f figure.Figure = p.Curve(program)
	if c.Map {
		f = p.Map(program)
	}
	return c.report(ctx, t, format, f, r, p.Scalars(d.Study.Seed), std)
}

// transmission writes how rays pass from opening to opening.
type transmission struct{ findings }

// transmissionRow is what transmission finds, in the form of its JSON.
type transmissionRow struct {
	Name    string     `json:"name"`
	Unit    string     `json:"unit"`
	Seed    uint64     `json:"seed"`
	Rays    int        `json:"rays_each"`
	Dwell   valued     `json:"mean_dwell"` // of all openings, each by its width
	Expect  float64    `json:"pi_area_over_width"`
	Ports   []portRow  `json:"openings"`
	Account accountRow `json:"account"`
}

type portRow struct {
	From      float64  `json:"from"` // s
	To        float64  `json:"to"`
	Width     float64  `json:"width"`
	Shares    []valued `json:"shares"` // by the opening that it leaves through
	Elsewhere float64  `json:"elsewhere"`
	Absorbed  float64  `json:"absorbed"`
	Kept      float64  `json:"still_inside"`
	Dwell     valued   `json:"mean_dwell"`
}

// Run measures the matrix.
func (c *transmission) Run(ctx context.Context, std streams) error {
	format, t, err := c.begin(std)
	if err != nil {
		return err
	}
	var s *leak.Scattering
	err = c.measured(ctx, t, std, "transmission", func(tr *sim.Tracer, run measure.Runner) (err error) {
		s, err = leak.MeasureScattering(tr, run, c.Effort)
		return err
	})
	if err != nil {
		return err
	}
	d := t.Design()
	r := &transmissionRow{Name: d.Name, Unit: d.Unit.String(), Seed: d.Study.Seed, Rays: s.Rays, Dwell: withError(s.Dwell(-1)), Account: accounted(s.Account)}
	width := 0.0
	for i, p := range s.Ports {
		width += p.Width
		row := portRow{From: p.S0(), To: p.S1(), Width: p.Width, Dwell: withError(s.Dwell(i))}
		for j := range s.Ports {
			row.Shares = append(row.Shares, withError(s.Share(i, j)))
		}
		row.Elsewhere, row.Absorbed, row.Kept = s.Rest(i)
		r.Ports = append(r.Ports, row)
	}
	r.Expect = math.Pi * t.Area() / width
	return c.report(ctx, t, format, s.Dwells(program), r, s.Matrix(d.Study.Seed).Rows, std)
}
