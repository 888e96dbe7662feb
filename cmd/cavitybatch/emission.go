package main

import (
	"context"
	"math"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/leak"
	"cavitywright/table"
	"cavitywright/table/wall"
)

// emission writes the far field of what leaves.
type emission struct {
	findings
	From         string  `placeholder:"START" help:"How rays start: even, trapped, area, point:X,Y, line:X,Y,X,Y, openings or opening:N; above the critical angle (trapped) where the wall has one, else even in ds dp, where none is given."`
	Polarisation string  `default:"drawn" enum:"drawn,tm,te,both" help:"tm: E out of plane; te: E in plane; both; drawn: as the table says (the default)."`
	Plot         string  `default:"polar" enum:"polar,cartesian,wall" help:"polar or cartesian far field, or what leaves against the place along the wall (${default})."`
	Norm         string  `default:"peak" enum:"peak,area" help:"Normalise to the peak, or to the area (${default})."`
	Towards      float64 `default:"0" placeholder:"DEG" help:"Direction of the window, in degrees counter-clockwise from +x (${default})."`
	Window       float64 `default:"30" placeholder:"DEG" help:"Half width of the window in degrees (${default})."`
	Bin          float64 `default:"0.5" placeholder:"DEG" help:"Width of a bin in degrees (${default})."`
	Bounces      int     `default:"400" placeholder:"N" help:"Most bounces of a ray (${default})."`
	Cut          float64 `default:"1e-4" placeholder:"W" help:"Weight below which a ray is given up (${default})."`
	Skip         float64 `default:"0" placeholder:"T" help:"Path before which what leaves is not counted, in the table's unit: the transient (${default})."`
}

// emissionSheet is what emission finds, in the form of its JSON.
type emissionSheet struct {
	Name    string        `json:"name"`
	Unit    string        `json:"unit"`
	Start   string        `json:"start"`
	Seed    uint64        `json:"seed"`
	Towards float64       `json:"towards_deg"`
	Window  float64       `json:"window_deg"` // half its width
	Bin     float64       `json:"bin_deg"`
	Fields  []emissionRow `json:"fields"`
}

type emissionRow struct {
	Polarisation string     `json:"polarisation"` // tm, te or drawn
	Rays         int        `json:"rays"`
	Bounces      int64      `json:"bounces"`
	WindowShare  valued     `json:"window_share"`
	BackShare    valued     `json:"back_share"` // of the window's opposite
	Lobe         valued     `json:"lobe_direction_deg"`
	LobeWidth    valued     `json:"lobe_width_deg"`
	Twins        []valued   `json:"twin_lobes_deg,omitempty"` // directions of lobes as high within their error
	MeanCosine   valued     `json:"mean_cosine"`
	Entropy      valued     `json:"entropy"`
	MeanPath     valued     `json:"mean_path"`
	MeetsAgain   *float64   `json:"meets_wall_again"` // null where the wall is convex
	Skipped      float64    `json:"skipped"`
	Account      accountRow `json:"account"`
	Angles       []float64  `json:"angle_deg"`
	Intensity    []float64  `json:"intensity"`
	Err          []float64  `json:"stderr"`
}

func (c *emission) plan() (leak.EmissionPlan, error) {
	p := leak.EmissionPlan{Rays: int(leak.EmissionRays * c.Effort), Each: c.Bounces, Cut: c.Cut, Skip: c.Skip, Bins: int(math.Round(360 / c.Bin))}
	switch {
	case !(c.Bin >= 0.01 && c.Bin <= 90):
		return p, misuse("the width of a bin is %g degrees, but must lie between 0.01 and 90", c.Bin)
	case !(c.Window > 0 && c.Window <= 180):
		return p, misuse("the half width of the window is %g degrees, but must be above 0 and at most 180", c.Window)
	case c.Bounces < 1:
		return p, misuse("the number of bounces is %d, but must be at least 1", c.Bounces)
	case !(c.Cut > 0 && c.Cut < 1):
		return p, misuse("the weight at which a ray is given up is %g, but must lie between 0 and 1", c.Cut)
	case !(c.Skip >= 0):
		return p, misuse("the transient is %g, but must not be negative", c.Skip)
	}
	return p, nil
}

// Run measures emission.
func (c *emission) Run(ctx context.Context, std streams) error {
	plan, err := c.plan()
	if err != nil {
		return err
	}
	format, t, err := c.begin(std)
	if err != nil {
		return err
	}
	from, err := seeding(c.From, t)
	if err != nil {
		return err
	}
	d := t.Design()
	sheet := &emissionSheet{Name: d.Name, Unit: d.Unit.String(), Seed: d.Study.Seed, Towards: c.Towards, Window: c.Window, Bin: 360 / float64(plan.Bins)}
	var rows []figure.Scalar
	var shown figure.Figure
	for _, pol := range c.polarisations() {
		on, name, err := polarised(t, pol)
		if err != nil {
			return err
		}
		var f *leak.FarField
		err = c.measured(ctx, on, std, "emission", func(tr *sim.Tracer, run measure.Runner) (err error) {
			f, err = leak.MeasureEmission(tr, run, from, plan)
			return err
		})
		if err != nil {
			return err
		}
		sheet.Start = f.Starts.Words()
		sheet.Fields = append(sheet.Fields, c.row(f, pol))
		rows = append(rows, f.Scalars(name, d.Study.Seed, c.Towards*math.Pi/180, c.Window*math.Pi/180)...)
		shown = leak.Overlaid(shown, c.figure(f, name))
	}
	return c.report(ctx, t, format, shown, sheet, rows, std)
}

func (c *emission) polarisations() []string {
	if c.Polarisation == "both" {
		return []string{"tm", "te"}
	}
	return []string{c.Polarisation}
}

// polarised is the table in a polarisation, and what it is called in a figure.
func polarised(t *table.Table, pol string) (*table.Table, string, error) {
	p := map[string]wall.Polarisation{"tm": wall.TM, "te": wall.TE}
	if pol == "drawn" {
		return t, "", nil
	}
	on, err := table.New(leak.Polarised(t.Design(), p[pol]))
	return on, leak.Words(p[pol]), err
}

func (c *emission) figure(f *leak.FarField, name string) figure.Figure {
	norm := leak.ToPeak
	if c.Norm == "area" {
		norm = leak.ToArea
	}
	switch c.Plot {
	case "cartesian":
		return f.Cartesian(norm, name, program)
	case "wall":
		return f.ByPlace(name, program)
	}
	return f.Polar(norm, name, program)
}

func (c *emission) row(f *leak.FarField, pol string) emissionRow {
	const deg = math.Pi / 180
	l := f.Lobe()
	r := emissionRow{
		Polarisation: pol, Rays: f.Rays, Bounces: f.Flights,
		WindowShare: withError(f.Share(c.Towards*deg, c.Window*deg)),
		BackShare:   withError(f.Share(c.Towards*deg+math.Pi, c.Window*deg)),
		Lobe:        valued{l.Direction, l.DirectionErr}.in(deg), LobeWidth: valued{l.Width, l.WidthErr}.in(deg),
		MeanCosine: withError(f.MeanCosine()), Entropy: withError(f.Entropy()), MeanPath: withError(f.MeanPath()),
		Skipped: f.Skipped / f.Account.Started, Account: accounted(f.Account),
	}
	for _, twin := range l.Twins {
		r.Twins = append(r.Twins, valued{twin.Direction, twin.DirectionErr}.in(deg))
	}
	if f.Watched {
		r.MeetsAgain = &f.Again
	}
	norm := leak.ToPeak
	if c.Norm == "area" {
		norm = leak.ToArea
	}
	curve := f.Polar(norm, "", program).Curves[0]
	for i := range curve.X {
		r.Angles = append(r.Angles, curve.X[i]/deg)
	}
	r.Intensity, r.Err = curve.Y, curve.Err
	return r
}
