package leak_test

import (
	"errors"
	"math"
	"testing"

	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/leak"
	"cavitywright/sim/run/trial"
	"cavitywright/table"
	"cavitywright/table/wall"
)

// TestPorts: stretches that touch are one opening, over joints and over the
// start of the loop; others are not.
func TestPorts(t *testing.T) {
	tr := trial.Traced(t, "rectangle", []float64{4, 2}, trial.Opening(0, 0, 0.25), trial.Opening(3, 0.5, 1), trial.Opening(1, 0.2, 0.4), trial.Opening(1, 0.4, 0.5), trial.Opening(2, 0.1, 0.2))
	ports := leak.PortsOf(tr.Table())
	if len(ports) != 3 {
		t.Fatalf("there are %d openings, want 3: %v", len(ports), ports)
	}
	for i, want := range []struct{ from, to, width float64 }{{11, 1, 2}, {4.4, 5, 0.6}, {6.4, 6.8, 0.4}} {
		p := ports[i]
		if math.Abs(p.S0()-want.from) > 1e-12 || math.Abs(p.S1()-want.to) > 1e-12 || math.Abs(p.Width-want.width) > 1e-12 {
			t.Errorf("opening %d runs from %g to %g, %g wide; want %v", i+1, p.S0(), p.S1(), p.Width, want)
		}
	}
}

// TestTransmission: rows add up to 1; by the reversal of rays (even flow in and
// out) W_i T_ij = W_j T_ji; and the mean dwell is pi A / W (closed; common
// practice).
func TestTransmission(t *testing.T) {
	lossy := table.Coat{Side: 1, From: 0.5, To: 0.7, Law: wall.Lossy{Reflectivity: 0.4}}
	rough := table.Coat{Side: 1, From: 0.7, To: 0.9, Law: wall.Rough{Share: 0.5}}
	for _, c := range []struct {
		name   string
		tracer *sim.Tracer
		dwell  bool // whether openings alone let anything out
	}{
		{"cut disc", trial.Traced(t, "cut-disc", []float64{1, 0.5}, trial.Opening(0, 0.2, 0.4), trial.Opening(1, 0.1, 0.15), trial.Opening(1, 0.5, 0.56)), true},
		{"square with disc", trial.Traced(t, "square-with-disc", []float64{2, 0.5}, trial.Opening(0, 0, 0.2), trial.Opening(4, 0.1, 0.3)), true},
		{"stadium", trial.Traced(t, "stadium", []float64{1, 1}, trial.Opening(0, 0.2, 0.4), trial.Opening(1, 0.9, 1)), true},
		{"cut disc, rough", trial.Traced(t, "cut-disc", []float64{1, 0.5}, trial.Opening(0, 0.2, 0.4), rough), true},
		{"cut disc, lossy", trial.Traced(t, "cut-disc", []float64{1, 0.5}, trial.Opening(0, 0.2, 0.4), trial.Opening(1, 0.1, 0.15), lossy), false},
	} {
		s, err := leak.MeasureScattering(c.tracer, trial.Runner(c.tracer, 7, 0), 0.1)
		if err != nil {
			t.Fatal(err)
		}
		width := 0.0
		for i, p := range s.Ports {
			width += p.Width
			elsewhere, absorbed, kept := s.Rest(i)
			row := elsewhere + absorbed + kept
			for j, q := range s.Ports {
				there, err := s.Share(i, j)
				back, backErr := s.Share(j, i)
				row += there
				if d := p.Width*there - q.Width*back; math.Abs(d) > 4*math.Hypot(p.Width*err, q.Width*backErr) {
					t.Errorf("%s: from %d to %d goes %g, back %g: they differ by %g", c.name, i+1, j+1, p.Width*there, q.Width*back, d)
				}
			}
			if math.Abs(row-1) > 1e-12 {
				t.Errorf("%s: row %d adds up to 1 %+g", c.name, i+1, row-1)
			}
			if (absorbed > 1e-9) == c.dwell {
				t.Errorf("%s: %g of what comes in through opening %d is absorbed", c.name, absorbed, i+1)
			}
		}
		mean, meanErr := s.Dwell(-1)
		want := math.Pi * c.tracer.Table().Area() / width
		t.Logf("%s: mean dwell %.4f ± %.4f, pi A / W = %.4f", c.name, mean, meanErr, want)
		if c.dwell && (math.Abs(mean-want) > 4*meanErr || meanErr > 0.02*want) {
			t.Errorf("%s: the mean dwell is %g ± %g, want %g", c.name, mean, meanErr, want)
		}
		if !c.dwell && mean > want-4*meanErr {
			t.Errorf("%s: the mean dwell is %g ± %g, not below %g", c.name, mean, meanErr, want)
		}
	}
	plain := trial.Traced(t, "disc", []float64{1})
	if _, err := leak.MeasureScattering(plain, trial.Runner(plain, 1, 0), 0.1); !errors.As(err, new(*measure.NotMeasured)) {
		t.Errorf("the matrix of a closed disc is refused with %v", err)
	}
}

// TestPlaces: the D of scenario four, an opening 0.3 wide on a disc of radius 1
// cut at 0.5 (an independent run of another program: on path 30 to 100 the arc
// near the corner 0.0433, the flat's centre 0.0302, to 0.001; leading formula
// 0.0378), and the late slowing of some places.
func TestPlaces(t *testing.T) {
	tr := trial.Traced(t, "cut-disc", []float64{1, 0.5})
	p, err := leak.MeasurePlaces(tr, trial.Runner(tr, 3, 0), leak.PlacementPlan{Widths: []float64{0.3}, Places: 200, From: 30, To: 100, Effort: 2})
	if err != nil {
		t.Fatal(err)
	}
	flat := math.Sqrt(3)
	for _, c := range []struct {
		name string
		s    float64
		want float64
	}{{"flat, centre", flat / 2, 0.0302}, {"arc, at the corner", flat + 0.15, 0.0433}} {
		i := int(c.s / tr.Length() * 200)
		t.Logf("%s: %.5f ± %.5f, later %.5f", c.name, p.Rates[i], p.Errs[i], p.Late[i])
		if math.Abs(p.Rates[i]-c.want) > 0.001+3*p.Errs[i] || p.Errs[i] > 0.0012 {
			t.Errorf("%s: the rate is %g ± %g, want %g", c.name, p.Rates[i], p.Errs[i], c.want)
		}
	}
	slow := 0
	for i := range p.S {
		if p.Slow(0, i) {
			slow++
		}
	}
	if slow < 20 || slow == len(p.S) {
		t.Errorf("%d of %d places are said to slow", slow, len(p.S))
	}
	if math.Abs(p.Naive[0]-0.0378) > 0.00005 {
		t.Errorf("the naive rate is %g, want 0.0378", p.Naive[0])
	}
}

// TestPlacesAgree compares the rate of a place, read off rays that pass it by,
// with that of the table with the opening cut there; over a joint, too.
func TestPlacesAgree(t *testing.T) {
	tr := trial.Traced(t, "cut-disc", []float64{1, 0.5}, trial.Opening(0, 0, 0.3))
	shut, err := table.New(leak.Unopened(tr.Table().Design()))
	if err != nil {
		t.Fatal(err)
	}
	bare := sim.Compile(shut)
	p, err := leak.MeasurePlaces(bare, trial.Runner(bare, 3, 0), leak.PlacementPlan{Widths: []float64{0.2, 0.5}, Places: 40, From: 20, To: 60, Effort: 1})
	if err != nil {
		t.Fatal(err)
	}
	for _, i := range []int{0, 11, 25} {
		for k, width := range p.Widths {
			cut, err := table.New(leak.OpeningAt(tr.Table(), p.S[i], width))
			if err != nil {
				t.Fatal(err)
			}
			if ports := leak.PortsOf(cut); len(ports) != 1 || math.Abs(ports[0].Width-width) > 1e-9 {
				t.Fatalf("at s = %g there are the openings %v", p.S[i], ports)
			}
			opened := sim.Compile(cut)
			f := fallOf(t, opened, leak.Seeding{}, 100, 0.05)
			want, err1 := f.Between(20, 60)
			n := k*len(p.S) + i
			if got := p.Rates[n]; math.Abs(got-want) > 4*math.Hypot(err1, p.Errs[n]) || p.Errs[n] > 0.05*got {
				t.Errorf("width %g at s = %g: the rate is %g ± %g, with the opening cut %g ± %g", width, p.S[i], got, p.Errs[n], want, err1)
			}
		}
	}
}

// TestLife: a disc keeps p, so that what starts at (s, p) meets the opening at
// a bounce that is known; and a map backwards is the map forwards with p
// turned.
func TestLife(t *testing.T) {
	tr := discHole(t)
	values := func(name string, each int) func(col, row int) float64 {
		m := measure.NewMosaic(tr.Table(), leak.NewLife(tr, name, each), table.WholeSection(), 60, 40)
		if err := m.Fill(trial.Runner(tr, 1, 0)); err != nil {
			t.Fatal(err)
		}
		return m.Value
	}
	life, left, past := values("time", 40), values("survivors", 12), values("pasts", 12)
	for col := range 60 {
		for row := range 40 {
			p := 2*(float64(row)+0.5)/40 - 1
			at := 2 * math.Pi * (float64(col) + 0.5) / 60
			turn := math.Pi - 2*math.Asin(p) // of the place from bounce to bounce
			chord := 2 * math.Sqrt(1-p*p)
			met := -1
			for n := 1; n <= 40; n++ {
				if a := math.Mod(at+float64(n)*turn, 2*math.Pi); a < 0.2 {
					met = n
					break
				}
			}
			want := float64(met) * chord
			if got := life(col, row); (met < 0) != math.IsNaN(got) || met > 0 && math.Abs(got-want) > 1e-9*want {
				t.Fatalf("from place %g, p = %g it leaves after %g, want %g (bounce %d)", at, p, got, want, met)
			}
			if got := left(col, row); (got == 0) != (met > 0 && met <= 12) {
				t.Fatalf("after 12 bounces %g is left from place %g, p = %g, which meets the opening at bounce %d", got, at, p, met)
			}
			if past(col, row) != left(col, 39-row) {
				t.Fatal("backwards is not forwards with p turned")
			}
		}
	}
}
