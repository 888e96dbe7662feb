package chaos_test

import (
	"math"
	"strings"
	"testing"

	"cavitywright/sim/figure"
	"cavitywright/sim/measure/chaos"
	"cavitywright/sim/run/trial"
)

// at is the value of a curve and its error where x is.
func at(t testing.TB, c figure.Curve, x float64) (y, err float64) {
	t.Helper()
	for i := range c.X {
		if c.X[i] == x {
			return c.Y[i], c.Err[i]
		}
	}
	t.Fatalf("the curve has no point at %g: %v", x, c.X)
	return 0, 0
}

// TestShareTrace wants the share of a limaçon of eps 0.30 by the bounces used as
// an independent program has it: 0.64 at 200, 0.78 at 5000 (± 0.01 each), the
// latter between what is read off at 3200 and at 6400.
func TestShareTrace(t *testing.T) {
	tr := trial.Traced(t, "limacon", []float64{1, 0.3})
	f := sharing(t, tr, 31, 1.5, 6400).Trace(tr.Table(), "program")
	if len(f.Curves) != 2 || f.X.Scale != figure.Log || !strings.Contains(f.Caption[0], "bounces used") {
		t.Errorf("the trace is %+v", f.Caption)
	}
	early, e0 := at(t, f.Curves[0], 200)
	mid, _ := at(t, f.Curves[0], 3200)
	late, e1 := at(t, f.Curves[0], 6400)
	t.Logf("%.4f ± %.4f at 200, %.4f at 3200, %.4f ± %.4f at 6400", early, e0, mid, late, e1)
	if math.Abs(early-0.64) > 0.01+2*e0 || mid > 0.79+2*e1 || late < 0.77-2*e1 || !(early < mid && mid < late) {
		t.Errorf("the share is %g at 200, %g at 3200, %g at 6400", early, mid, late)
	}
}

// TestStretchingTrace wants the trace of the exponent to end at the number that
// is read off, on all bounces that count, and to close in on it.
func TestStretchingTrace(t *testing.T) {
	tr := trial.Traced(t, "stadium", []float64{1, 1})
	s := stretching(t, tr, 3, 0.05)
	c := s.Trace(tr.Table(), "program").Curves[0]
	rate, err := s.PerLength()
	last := len(c.X) - 1
	if last < 5 || c.Y[last] != rate || c.Err[last] != err || c.X[last] != float64(s.Chaotic*chaos.StretchBounces) {
		t.Errorf("the trace ends at %g ± %g after %g bounces", c.Y[last], c.Err[last], c.X[last])
	}
	for i := range c.X {
		if math.Abs(c.Y[i]-0.42968) > 4*c.Err[i] { // independent, 1e10 bounces
			t.Errorf("after %g bounces the exponent is %g ± %g", c.X[i], c.Y[i], c.Err[i])
		}
		if i > 0 && c.X[i] < 1.9*c.X[i-1] {
			t.Errorf("the bounces do not double: %v", c.X)
		}
	}
	if c.Err[0] < 2*err {
		t.Errorf("the error falls from %g to %g only", c.Err[0], err)
	}
}
