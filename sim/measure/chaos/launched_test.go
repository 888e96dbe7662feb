package chaos_test

import (
	"math"
	"testing"

	"cavitywright/sim"
	"cavitywright/sim/measure/chaos"
	"cavitywright/sim/run/trial"
	"cavitywright/table"
	"cavitywright/table/wall"

	"gonum.org/v1/gonum/spatial/r2"
)

// launched tells the character of launches from states of the wall, s in units
// of length, or from a place inside.
func launched(t testing.TB, tr *sim.Tracer, each int, all ...table.Launch) []chaos.Portrayed {
	t.Helper()
	d := tr.Table().Design()
	d.Study.Launches = all
	tab, err := table.New(d)
	if err != nil {
		t.Fatal(err)
	}
	tr = sim.Compile(tab)
	m, err := chaos.NewLaunched(tr, each)
	if err != nil {
		t.Fatal(err)
	}
	ran, err := trial.Runner(tr, 1, 0)(m)
	if err != nil {
		t.Fatal(err)
	}
	return ran.(*chaos.LaunchedTally).All
}

// TestRotation holds rotation numbers on an ellipse of axes 2:1 to the closed
// form F/2K (S. Tabachnikov, Geometry and Billiards, 2005, from memory) for the
// caustics of parameter 0.5 and 0.25: at the vertex of the longer axis
// p^2 = 1 - parameter. On a disc it is arccos(p)/pi.
func TestRotation(t *testing.T) {
	ellipse, disc := trial.Traced(t, "ellipse", []float64{2, 1}), trial.Traced(t, "disc", []float64{2})
	if at := ellipse.Table().At(0).Point; r2.Norm(r2.Sub(at, r2.Vec{X: 2})) > 1e-12 {
		t.Fatalf("s = 0 lies at %v", at)
	}
	for _, c := range []struct {
		tr      *sim.Tracer
		p, want float64
	}{
		{ellipse, math.Sqrt(0.5), 0.17901796020838520},
		{ellipse, math.Sqrt(0.75), 0.12041544776926698},
		{ellipse, -math.Sqrt(0.75), 1 - 0.12041544776926698},
		{disc, 0.3, math.Acos(0.3) / math.Pi},
	} {
		o := launched(t, c.tr, 4000, table.Launch{P: c.p})[0]
		if math.Abs(o.Rotation-c.want) > 1e-11 || o.RotationDigits < 9 || o.Character != chaos.Regular {
			t.Errorf("p = %g: the rotation number is %.16g to %.1f digits (%v), want %.16g", c.p, o.Rotation, o.RotationDigits, o.Character, c.want)
		}
	}
}

// TestCharacter wants orbits told apart, their extent in p, and whether
// something leaves them.
func TestCharacter(t *testing.T) {
	glass := table.Coat{Side: table.AllSides, To: 1, Law: wall.Dielectric{Index: 2, Outside: 1}}
	all := launched(t, trial.Traced(t, "limacon", []float64{1, 0.3}, glass), 3000,
		table.Launch{S: 0, P: 0.02},    // on the island of the axis
		table.Launch{S: 0.25, P: 0.3},  // in the sea
		table.Launch{S: 0.25, P: 0.99}, // along the wall
		table.Launch{From: table.Inside, Point: r2.Vec{X: 0.1}, Angle: 0.5 * math.Pi}, // from inside
		table.Launch{Pattern: table.Even, Count: 9, Region: table.WholeSection()},     // no orbit of its own
	)
	if len(all) != 4 {
		t.Fatalf("%d orbits are told, want 4", len(all))
	}
	for i, want := range []struct {
		character chaos.Character
		confined  bool
	}{{chaos.Regular, false}, {chaos.Chaotic, false}, {chaos.Regular, true}, {chaos.Chaotic, false}} {
		if o := all[i]; o.Character != want.character || o.Confined != want.confined || !o.Leaves || o.Bounces < 2999 {
			t.Errorf("orbit %d is %+v, want %v", i, o, want)
		}
	}
	if a := all[0]; a.LeastP > 0.001 || a.MostP > 0.2 || math.Abs(a.Rotation-0.5) > 1e-6 {
		t.Errorf("the orbit on the axis is %+v", a)
	}
	if w := all[2]; w.LeastP < 0.9 || w.PerBounce > 0.01 {
		t.Errorf("the orbit along the wall is %+v", w)
	}
	// Off mirrors nothing could leave, and an obstacle has no rotation.
	o := launched(t, trial.Traced(t, "square-with-disc", []float64{1, 0.2}), 500, table.Launch{S: 0.03, P: 0.2})[0]
	if o.Leaves || !o.Confined || !math.IsNaN(o.Rotation) || o.Character != chaos.Chaotic {
		t.Errorf("the orbit about the obstacle is %+v", o)
	}
	// The two-bounce orbit of a rectangle's corner stops.
	c := launched(t, trial.Traced(t, "rectangle", []float64{2, 1}), 500, table.Launch{From: table.Inside, Angle: math.Atan2(1, 2)})[0]
	if c.Stop != sim.Corner || c.Character != chaos.Undecided {
		t.Errorf("the orbit into the corner is %+v", c)
	}
}
