package reading_test

import (
	"errors"
	"math"
	"strings"
	"testing"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/reading"
	"cavitywright/sim/run/trial"
	"cavitywright/table"
	"cavitywright/table/wall"
)

// TestTaker wants the readings that rest on one measurement to be those of the
// measurement, whatever was taken before, and the same as taken alone.
func TestTaker(t *testing.T) {
	tr := trial.Traced(t, "stadium", []float64{1, 1})
	wanted, err := reading.Wanted(tr.Table(), []string{"lyapunov-per-bounce", "precision-horizon", "lyapunov-per-length", "lyapunov-per-second", "free-path-variance", "flight-correlation"})
	if err != nil {
		t.Fatal(err)
	}
	k := reading.NewTaker(tr, trial.Runner(tr, 5, 0), 0.05, 5, reading.SoundSpeed)
	got := map[string]figure.Scalar{}
	for _, r := range wanted {
		if got[r.Name], err = k.Take(r); err != nil {
			t.Fatal(err)
		}
		alone, err := r.Take(tr, trial.Runner(tr, 5, 2), 0.05, 5)
		if r.Name == "lyapunov-per-second" {
			if no := (*measure.NotMeasured)(nil); !errors.As(err, &no) {
				t.Errorf("without a speed there is an exponent per second: %v", err)
			}
			continue
		}
		if err != nil || alone != got[r.Name] {
			t.Errorf("taken alone it is %+v (%v), not %+v", alone, err, got[r.Name])
		}
	}
	// ln 2^53 = 36.7; some 39 bounces on this stadium (independent exponent
	// 0.93750 per bounce).
	if h := got["precision-horizon"]; math.Abs(h.Value-36.7368/0.93750) > 3*h.StdErr || h.StdErr > 0.2 || h.Unit != "bounces" {
		t.Errorf("the horizon is %+v, want 39.19", h)
	}
	// 343 m/s on a table in millimetres: the exponent per length by 343,000.
	l, s := got["lyapunov-per-length"], got["lyapunov-per-second"]
	if math.Abs(s.Value-343_000*l.Value) > 1e-9*s.Value || math.Abs(s.StdErr-343_000*l.StdErr) > 1e-9*s.StdErr || s.Unit != "1/s" || !strings.Contains(s.Note, "343 m/s") {
		t.Errorf("per second it is %+v, per length %+v", s, l)
	}
	if v := got["flight-correlation"]; v.StdErr <= 0 || math.Abs(v.Value) > 0.3 {
		t.Errorf("the correlation of flights is %+v", v)
	}
}

// TestPerSecondInGlass wants a body's index to slow its waves, and its unit to
// count.
func TestPerSecondInGlass(t *testing.T) {
	d := trial.Traced(t, "stadium", []float64{1, 1}).Table().Design()
	d.Unit = table.Micrometre
	d.Coats = []table.Coat{{Side: table.AllSides, To: 1, Law: wall.Dielectric{Index: 2, Outside: 1}}}
	tab, err := table.New(d)
	if err != nil {
		t.Fatal(err)
	}
	tr := sim.Compile(tab)
	k := reading.NewTaker(tr, trial.Runner(tr, 5, 0), 0.005, 5, reading.LightSpeed)
	var v [2]float64
	for i, name := range []string{"lyapunov-per-length", "lyapunov-per-second"} {
		wanted, err := reading.Wanted(tab, []string{name})
		if err != nil {
			t.Fatal(err)
		}
		s, err := k.Take(wanted[0])
		if err != nil {
			t.Fatal(err)
		}
		v[i] = s.Value
	}
	if want := v[0] * 299792458e6 / 2; math.Abs(v[1]-want) > 1e-9*want {
		t.Errorf("the exponent is %g 1/s, want %g", v[1], want)
	}
}

// TestParseSpeed wants names and numbers read, and all else refused.
func TestParseSpeed(t *testing.T) {
	for text, want := range map[string]reading.Speed{"": 0, "light": 299792458, "sound": 343, "2e5": 2e5} {
		if v, err := reading.ParseSpeed(text); err != nil || v != want {
			t.Errorf("%q is %g, %v", text, v, err)
		}
	}
	for _, text := range []string{"fast", "-3", "0", "NaN", "Inf", "3 m/s"} {
		if v, err := reading.ParseSpeed(text); err == nil {
			t.Errorf("%q is taken for %g", text, v)
		}
	}
}

// TestTakerVerdict wants the verdict of an integrable table at once, and that
// of a chaotic one from what was measured.
func TestTakerVerdict(t *testing.T) {
	for name, want := range map[string]string{"disc": "Integrable", "cut-disc": "One chaotic sea"} {
		tr := trial.Traced(t, name, map[string][]float64{"disc": {1}, "cut-disc": {1, 0.5}}[name])
		k := reading.NewTaker(tr, trial.Runner(tr, 5, 0), 0.02, 5, 0)
		if text, err := k.Verdict(); err != nil || !strings.HasPrefix(text, want) {
			t.Errorf("the verdict on a %s is %q, %v", name, text, err)
		}
	}
}
