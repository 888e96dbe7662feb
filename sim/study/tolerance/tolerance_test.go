package tolerance

import (
	"context"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/reading"
	"cavitywright/sim/run"
	"cavitywright/sim/study"
	"cavitywright/table"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/table/wall"

	"github.com/google/go-cmp/cmp"
	"gonum.org/v1/gonum/spatial/r2"
)

// tools is a kit on so many workers.
func tools(workers int) Kit {
	return Kit{
		Kit: study.Kit{Run: func(tr *sim.Tracer, seed uint64) measure.Runner {
			return func(m measure.Measurement) (measure.Tally, error) {
				return run.Run(context.Background(), run.Job{Tracer: tr, Measure: m, Seed: seed, Workers: workers})
			}
		}},
		Chance: func(stream uint64) rand.Source { return run.Chance(11, stream) },
	}
}

// one is the table of a figure.
func one(t *testing.T, bare wall.Law, kind string, v ...float64) *table.Table {
	t.Helper()
	f, err := shape.New(kind, param.Values(v))
	if err != nil {
		t.Fatal(err)
	}
	tab, err := table.New(table.Design{Unit: table.Micrometre, Bare: bare, Items: []table.Item{{Shape: f, Place: plane.Identity()}}, Study: table.DefaultStudy()})
	if err != nil {
		t.Fatal(err)
	}
	return tab
}

func glass(t *testing.T) wall.Law {
	t.Helper()
	l, err := wall.Make("dielectric", glassValues(t))
	if err != nil {
		t.Fatal(err)
	}
	return l
}

// glassValues are those of a body of index 3.3 seen in TE.
func glassValues(t *testing.T) param.Values {
	for _, k := range wall.Kinds() {
		if k.Name != "dielectric" {
			continue
		}
		v := param.Defaults(k.Specs)
		v[param.Index(k.Specs, "index")] = 3.3
		v[param.Index(k.Specs, "te")] = float64(wall.TE)
		return v
	}
	t.Fatal("there is no dielectric law")
	return nil
}

func plan(copies int, readings []string, flaws ...table.Flaw) table.Tolerance {
	return table.Tolerance{Name: "Larkmoor etch", Copies: copies, Readings: readings, Effort: 0.05, Flaws: flaws}
}

func ready(t *testing.T, base *table.Table, p table.Tolerance) *Tolerance {
	t.Helper()
	tol, err := New(base, p)
	if err != nil {
		t.Fatal(err)
	}
	return tol
}

func carried(t *testing.T, tol *Tolerance, workers int) *Result {
	t.Helper()
	r, err := tol.Run(tools(workers), nil)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// TestSizeCannotMatter: an error of size alone leaves every reading without a
// dimension as it is, to the last digit, and the program says so. That this is
// no trick is held against copies that are really enlarged and traced: by a
// power of two, under which rounding is alike, all readings scale exactly; by
// another factor those that are sums of single flights agree to rounding.
func TestSizeCannotMatter(t *testing.T) {
	base := one(t, glass(t), "limacon", 1, 0.43)
	names := []string{"perimeter", "area", "lyapunov-per-length", "lyapunov-per-bounce", "chaotic-share-section", "window-share", "back-share", "mean-cosine", "far-field-entropy", "escape-rate"}
	p := plan(5, names, table.Flaw{Kind: table.SizeFlaw, Width: 0.02})
	p.Effort = 0.02
	r := carried(t, ready(t, base, p), 2)
	for i := range r.Rows {
		if r.Rows[i].Scale == 1 {
			t.Error("a copy has the drawn size")
		}
		for k, x := range r.Nominal.Taken {
			want := float64(x.Value) * math.Pow(r.Rows[i].Scale, float64(Dimension(x.Unit, table.Micrometre)))
			if got := float64(r.Rows[i].Taken[k].Value); got != want {
				t.Errorf("copy %d: %s is %v, but scales to %v", i, x.Name, got, want)
			}
		}
	}
	if text := strings.Join(r.Lines(), " "); !strings.Contains(text, "Size cannot matter to lyapunov-per-bounce, chaotic-share-section, window-share") || !strings.Contains(text, "All copies have the same value, to the last digit") {
		t.Errorf("it does not say that size cannot matter: %s", text)
	}
	traced := func(k float64) []study.Taken {
		d := base.Design()
		d.Items = []table.Item{{Shape: d.Items[0].Shape, Place: plane.Similarity{Scale: k}}}
		big, err := table.New(d)
		if err != nil {
			t.Fatal(err)
		}
		taken, err := Take(big, names, p.Effort, tools(2).Kit)
		if err != nil {
			t.Fatal(err)
		}
		return taken
	}
	for k, x := range traced(2) {
		want := float64(r.Nominal.Taken[k].Value) * math.Pow(2, float64(Dimension(x.Unit, table.Micrometre)))
		if got := float64(x.Value); math.Abs(got-want) > 1e-12*math.Abs(want) {
			t.Errorf("traced at twice the size %s is %v, not %v", x.Name, got, want)
		}
	}
	for k, x := range traced(1.013) {
		n := r.Nominal.Taken[k]
		want := float64(n.Value) * math.Pow(1.013, float64(Dimension(x.Unit, table.Micrometre)))
		within := 5*math.Hypot(float64(x.StdErr), float64(n.StdErr)) + 1e-12*math.Abs(want)
		if got := float64(x.Value); math.Abs(got-want) > within {
			t.Errorf("traced at 1.013 of the size %s is %v, not %v", x.Name, got, want)
		}
	}
}

// TestLengthless: what is said of readings before they are taken agrees with
// their units.
func TestLengthless(t *testing.T) {
	mirror := one(t, nil, "stadium", 1, 1)
	open, err := wall.Make("opening", nil)
	if err != nil {
		t.Fatal(err)
	}
	d := mirror.Design()
	d.Coats = []table.Coat{{Item: 0, Side: 0, From: 0.3, To: 0.5, Law: open}}
	opened, err := table.New(d)
	if err != nil {
		t.Fatal(err)
	}
	seen := map[string]bool{}
	for _, tab := range []*table.Table{mirror, opened, one(t, glass(t), "limacon", 1, 0.43)} {
		var names []string
		for _, r := range reading.Readings() {
			names = append(names, r.Name)
		}
		taken, err := Take(tab, names, 0.002, tools(2).Kit)
		if err != nil {
			t.Fatal(err)
		}
		for _, x := range taken {
			if math.IsNaN(float64(x.Value)) {
				continue
			}
			seen[x.Name] = true
			if lengthless(x.Name) != (Dimension(x.Unit, table.Micrometre) == 0) {
				t.Errorf("%s is in %q", x.Name, x.Unit)
			}
		}
	}
	for _, r := range reading.Readings() {
		if !seen[r.Name] && r.Kind != reading.Asked {
			t.Errorf("no table here has a %s", r.Name)
		}
	}
}

// TestRoughness: the heights of the walls that are made have the rms and the
// correlation length that were asked for, taken from the walls themselves: each
// is compared with the wall as drawn, place by place.
func TestRoughness(t *testing.T) {
	const rms, length, copies, n = 2e-3, 0.25, 40, 200
	for _, kind := range []struct {
		name string
		v    []float64
	}{{"limacon", []float64{1, 0.43}}, {"stadium", []float64{1, 1}}, {"rectangle", []float64{3, 2}}} {
		base := one(t, nil, kind.name, kind.v...)
		tol := ready(t, base, plan(copies, []string{"area"}, table.Flaw{Kind: table.RoughFlaw, Width: rms, Length: length}))
		step := base.Length() / n
		far := int(math.Ceil(3 * length / step))
		square, worst := 0.0, 0.0
		corr := make([]float64, far)
		for i := range copies {
			c, err := tol.Copy(i, All, tools(1))
			if err != nil {
				t.Fatal(kind.name, err)
			}
			if worst = math.Max(worst, c.Misfit); c.Misfit <= 0 || c.Misfit > fitTo*rms {
				t.Errorf("%s: the wall misses its heights by %g, rms %g", kind.name, c.Misfit, rms)
			}
			h := make([]float64, n)
			for k := range h {
				p := c.Table.At((float64(k) + 0.5) / n * c.Table.Length()).Point
				s, d := base.Nearest(p)
				h[k] = math.Copysign(d, -plane.Dot(r2.Sub(p, base.At(s).Point), base.At(s).Normal()))
			}
			for k := range h {
				square += h[k] * h[k]
				for j := range corr {
					corr[j] += h[k] * h[(k+j)%n]
				}
			}
		}
		got := math.Sqrt(square / (copies * n))
		// L/length independent heights a copy, roughly: the error of the rms.
		within := 4 * rms / math.Sqrt(2*copies*base.Length()/(length*math.Sqrt(math.Pi)))
		t.Logf("%s: rms %.4g (asked %g ± %.1g), misfit %.2g", kind.name, got, rms, within, worst)
		if math.Abs(got-rms) > within {
			t.Errorf("%s: rms %g, asked for %g", kind.name, got, rms)
		}
		at := 0.0
		for j := range corr {
			if corr[j]/corr[0] < 1/math.E {
				y0, y1 := corr[j-1]/corr[0], corr[j]/corr[0]
				at = step * (float64(j-1) + (y0-1/math.E)/(y0-y1))
				break
			}
		}
		if t.Logf("%s: correlation length %.4g (asked %g)", kind.name, at, length); math.Abs(at-length) > 0.06*length {
			t.Errorf("%s: correlation length %g, asked for %g", kind.name, at, length)
		}
	}
}

// TestShorterHurtsMore: at equal rms a shorter correlation makes steeper walls
// and takes more from the window share of the limaçon.
func TestShorterHurtsMore(t *testing.T) {
	base := one(t, glass(t), "limacon", 1, 0.43)
	mean := func(length float64) (Distribution, float64) {
		p := plan(8, []string{"window-share"}, table.Flaw{Kind: table.RoughFlaw, Width: 4e-3, Length: length})
		p.Effort = 0.03
		d := carried(t, ready(t, base, p), 2).OfReading(0)
		return d, d.Nominal
	}
	long, drawn := mean(0.6)
	short, _ := mean(0.12)
	t.Logf("drawn %.4f, correlation length 0.6: %.4f ± %.4f, 0.12: %.4f ± %.4f", drawn, long.Mean, long.MeanErr, short.Mean, short.MeanErr)
	if loss := long.Mean - short.Mean; loss < 4*math.Hypot(long.MeanErr, short.MeanErr) || short.Mean > drawn {
		t.Errorf("the shorter correlation takes %g more", loss)
	}
}

// TestOffsetAndTool: a wall that is etched by h is larger by L h + pi h² (all
// corners turn inwards), and a tool of radius r leaves (4 - pi) r² in the corners
// of a rectangle.
func TestOffsetAndTool(t *testing.T) {
	for _, kind := range []struct {
		name string
		v    []float64
	}{{"rectangle", []float64{3, 2}}, {"stadium", []float64{1, 1}}, {"ellipse", []float64{2, 1}}, {"limacon", []float64{1, 0.43}}} {
		base := one(t, nil, kind.name, kind.v...)
		for _, h := range []float64{0.01, -0.01} {
			c, err := ready(t, base, plan(2, []string{"area"}, table.Flaw{Kind: table.OffsetFlaw, Mean: h})).Copy(0, All, tools(1))
			if err != nil {
				t.Fatal(kind.name, err)
			}
			want := base.Area() + h*base.Length() + math.Pi*h*h
			if kind.name == "rectangle" && h < 0 { // corners stay sharp
				want = (3 + 2*h) * (2 + 2*h)
			}
			if got := c.Table.Area(); math.Abs(got-want) > (c.Misfit+1e-11)*base.Length() || c.Misfit > 0.01*math.Abs(h) {
				t.Errorf("%s etched by %g: area %.9g, not %.9g", kind.name, h, got, want)
			}
		}
	}
	base := one(t, nil, "rectangle", 3, 2)
	c, err := ready(t, base, plan(2, []string{"area"}, table.Flaw{Kind: table.ToolFlaw, Mean: 0.25})).Copy(0, All, tools(1))
	if err != nil {
		t.Fatal(err)
	}
	if want := 6 - (4-math.Pi)*0.0625; math.Abs(c.Table.Area()-want) > 1e-9 {
		t.Errorf("cut by a tool: area %.12g, not %.12g", c.Table.Area(), want)
	}
}

// TestShares: the area of an ellipse is pi a b, so that the first-order shares of
// its axes and its size are known, and so is the yield of a limit at the median.
func TestShares(t *testing.T) {
	base := one(t, nil, "ellipse", 2, 1)
	p := plan(400, []string{"area"}, table.Flaw{Kind: table.DialFlaw, Dial: "a", Width: 0.02}, table.Flaw{Kind: table.DialFlaw, Dial: "b", Law: table.Uniform, Width: 0.03}, table.Flaw{Kind: table.SizeFlaw, Width: 0.003})
	p.Limits = []table.Limit{{Reading: "area", Lo: 2 * math.Pi, Hi: math.Inf(1)}}
	r := carried(t, ready(t, base, p), 1)
	// Relative variances: (0.02/2)², 0.03²/3, (2·0.003)².
	va, vb, vs := 1e-4, 3e-4, 3.6e-5
	for i, want := range []float64{va / (va + vb + vs), vb / (va + vb + vs), vs / (va + vb + vs)} {
		if got := r.Parts(0)[i]; math.Abs(got.Share-want) > 4*got.Err || got.Err > 0.15 {
			t.Errorf("%s: share %.3f ± %.3f, not %.3f", r.Name(i), got.Share, got.Err, want)
		}
	}
	if y := r.Yield(All); math.Abs(y.Share-0.5) > 4*y.Err || y.Lo >= y.Share || y.Hi <= y.Share {
		t.Errorf("yield %+v", y)
	}
	if text := strings.Join(r.Lines(), " "); !strings.Contains(text, "Most of it comes from b") {
		t.Error(text)
	}
}

// TestAlike: one worker or several, equal results; what one error draws does not
// hang on the others.
func TestAlike(t *testing.T) {
	base := one(t, glass(t), "limacon", 1, 0.43)
	p := plan(2, []string{"window-share", "area"}, table.Flaw{Kind: table.RoughFlaw, Width: 1e-3, Length: 0.5}, table.Flaw{Kind: table.IndexFlaw, Width: 0.02}, table.Flaw{Kind: table.SizeFlaw, Width: 0.01})
	p.Effort = 0.01
	tol := ready(t, base, p)
	a, b := carried(t, tol, 1), carried(t, tol, 5)
	if diff := cmp.Diff(a.Rows, b.Rows); diff != "" {
		t.Error(diff)
	}
	for k := range a.flaws {
		for i := range a.Rows {
			if a.Rows[i].Draws[k] == 0 || math.Abs(a.Rows[i].Draws[k]-a.Alone[k][i].Draws[k]) > 0.05*math.Abs(a.Rows[i].Draws[k]) {
				t.Errorf("%s of copy %d: %g with the others, %g alone", a.Name(k), i, a.Rows[i].Draws[k], a.Alone[k][i].Draws[k])
			}
		}
	}
}
