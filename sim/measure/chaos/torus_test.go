package chaos_test

import (
	"math"
	"testing"

	"cavitywright/sim"
	"cavitywright/sim/run/trial"
)

// TestTorus follows one long orbit in a square of side 1 with mirrors for
// walls and a disc of radius 0.25 in its middle, and counts by hits of the
// disc: mirrored in its walls the square is a torus of side 1 with one disc.
// Per hit a vector grows by exp(2.76290 ± 0.00004) (independent), and the path
// from disc to disc is (1 - pi r^2)/(2 r) exactly (closed). The tangent map is
// multiplied up here anew, without what the measurements use.
func TestTorus(t *testing.T) {
	const r, batches, each = 0.25, 100, 40_000
	tr := trial.Traced(t, "square-with-disc", []float64{1, r})
	disc := tr.Table().Loops()[1].S0
	w := tr.Walker()
	var rates, paths []float64
	b := w.Start(sim.State{S: 0.123456, P: 0.3217})
	for len(rates) < batches {
		ds, dp, log, path, hits := 1.0, 0.0, 0.0, 0.0, 0
		for range each {
			if b = w.Next(0); b.Stop != sim.Going {
				t.Fatalf("the orbit ended: %v", b.Stop)
			}
			ds, dp = w.Jacobian().Apply(ds, dp)
			norm := math.Hypot(ds, dp)
			ds, dp, log = ds/norm, dp/norm, log+math.Log(norm)
			path += b.Flight
			if b.S >= disc {
				hits++
			}
		}
		rates, paths = append(rates, log/float64(hits)), append(paths, path/float64(hits))
	}
	for _, c := range []struct {
		name               string
		of                 []float64
		want, slack, reach float64 // reach is the relative error that it must reach
	}{
		{"exponent per hit", rates, 2.76290, 0.00004, 0.002},
		// Along the corridors between the discs of the torus flights are as
		// long as one likes, and their variance is infinite.
		{"path from disc to disc", paths, (1 - math.Pi*r*r) / (2 * r), 0, 0.015},
	} {
		sum, sum2 := 0.0, 0.0
		for _, x := range c.of {
			sum, sum2 = sum+x, sum2+x*x
		}
		mean := sum / batches
		stderr := math.Sqrt((sum2/batches - mean*mean) / (batches - 1))
		t.Logf("%s: %.5f ± %.5f, want %.5f", c.name, mean, stderr, c.want)
		if math.Abs(mean-c.want) > 3*stderr+c.slack || stderr > c.reach*c.want {
			t.Errorf("the %s is %g ± %g, want %g", c.name, mean, stderr, c.want)
		}
	}
	// The measured exponent per length, by the exact path from disc to disc.
	s := stretching(t, tr, 17, 0.1)
	rate, err := s.PerLength()
	path := (1 - math.Pi*r*r) / (2 * r)
	t.Logf("measured %.5f ± %.5f per hit", rate*path, err*path)
	if math.Abs(rate*path-2.76290) > 3*err*path+0.00004 || err > 0.004*rate {
		t.Errorf("the exponent is %g ± %g per hit, want 2.7629", rate*path, err*path)
	}
}
