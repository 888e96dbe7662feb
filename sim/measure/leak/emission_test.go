package leak_test

import (
	"errors"
	"math"
	"slices"
	"testing"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/leak"
	"cavitywright/sim/run/trial"
	"cavitywright/table"
	"cavitywright/table/wall"

	"gonum.org/v1/gonum/spatial/r2"
)

func glass(index float64, p wall.Polarisation) table.Coat {
	return table.Coat{Side: table.AllSides, To: 1, Law: wall.Dielectric{Index: index, Outside: 1, Polarisation: p}}
}

func farOf(t testing.TB, tr *sim.Tracer, s leak.Seeding, p leak.EmissionPlan) *leak.FarField {
	t.Helper()
	f, err := leak.MeasureEmission(tr, trial.Runner(tr, 3, 0), s, p)
	if err != nil {
		t.Fatal(err)
	}
	if b := f.Account.Balance(); math.Abs(b) > 1e-12 {
		t.Errorf("left, absorbed, kept and undecided add up to 1 %+g of what started", b)
	}
	return f
}

// TestLimacon holds the far field of the limaçon, n = 3.3, to an independent
// run of another program (20,000 rays even in (s, p) with |p| > 1/n, unit
// weight, stop at weight 1e-4 or 400 bounces, bins of 0.5 deg; window shares
// to 0.01, lobe widths rounded to 1 deg under 4.5 deg of smoothing; one lobe of
// about 30 deg: Yan et al., Appl. Phys. Lett. 94, 251101 (2009)).
func TestLimacon(t *testing.T) {
	const deg = math.Pi / 180
	for _, c := range []struct {
		eps          float64
		p            wall.Polarisation
		share, width float64 // width in degrees; 0 where none is known
	}{{0.40, wall.TM, 0.50, 27}, {0.40, wall.TE, 0.72, 0}, {0.43, wall.TM, 0.52, 33}, {0.43, wall.TE, 0.75, 0}} {
		f := farOf(t, trial.Traced(t, "limacon", []float64{1, c.eps}, glass(3.3, c.p)), leak.NaturalSeeding(trial.Traced(t, "limacon", []float64{1, c.eps}, glass(3.3, c.p)).Table()), leak.EmissionPlan{})
		share, err := f.Share(0, 30*deg)
		back, backErr := f.Share(math.Pi, 30*deg)
		l := f.Lobe()
		chi2, n := f.Mirror()
		t.Logf("eps %g, %s: share %.4f ± %.4f, back %.4f ± %.4f, lobe %.1f ± %.1f at %.1f ± %.1f, mirror %.2f on %d", c.eps, leak.Words(c.p), share, err, back, backErr,
			l.Width/deg, l.WidthErr/deg, l.Direction/deg, l.DirectionErr/deg, chi2, n)
		if math.Abs(share-c.share) > 0.01+3*err || err > 0.005 {
			t.Errorf("eps %g, %s: the window share is %g ± %g, want %g", c.eps, leak.Words(c.p), share, err, c.share)
		}
		// The other program's width is rounded, and has an error like ours.
		if tol := 0.5*deg + 3*math.Sqrt2*l.WidthErr; c.width > 0 && (math.Abs(l.Width-c.width*deg) > tol || tol > 4*deg) {
			t.Errorf("eps %g: the lobe is %g ± %g deg wide, want %g", c.eps, l.Width/deg, l.WidthErr/deg, c.width)
		}
		if math.Abs(l.Direction) > 3*l.DirectionErr+0.5*deg {
			t.Errorf("eps %g: the lobe points to %g ± %g deg, want 0", c.eps, l.Direction/deg, l.DirectionErr/deg)
		}
		if len(l.Twins) != 0 {
			t.Errorf("eps %g: the only lobe has the twins %+v", c.eps, l.Twins)
		}
		if back > share/3 || chi2 > 1+5*math.Sqrt(2/float64(n)) {
			t.Errorf("eps %g: back share %g, mirror image off by %g", c.eps, back, chi2)
		}
		for half, want := range map[float64]float64{math.Pi: 1, math.Pi / 2: 1} { // the two halves of the turn
			a, _ := f.Share(0.3, half)
			b, _ := f.Share(0.3+math.Pi, math.Pi-half)
			if math.Abs(a+b-want) > 1e-12 {
				t.Errorf("shares add up to 1 %+g", a+b-want)
			}
		}
	}
}

// TestTwins: of a wall that is its own mirror image about both axes every lobe
// is listed with its mirror images, each with an error of its own.
func TestTwins(t *testing.T) {
	const deg = math.Pi / 180
	tr := trial.Traced(t, "quadrupole", []float64{1, 0.12}, glass(1.5, wall.TM))
	l := farOf(t, tr, leak.NaturalSeeding(tr.Table()), leak.EmissionPlan{}).Lobe()
	all := append([]leak.Lobe{l}, l.Twins...)
	for _, one := range all {
		t.Logf("%.2f ± %.2f deg, %.1f ± %.1f deg wide", one.Direction/deg, one.DirectionErr/deg, one.Width/deg, one.WidthErr/deg)
		if !(one.DirectionErr < 3*deg) {
			t.Errorf("the error of the direction is %g deg", one.DirectionErr/deg)
		}
		for _, image := range []float64{-one.Direction, math.Pi - one.Direction} {
			if !slices.ContainsFunc(all, func(o leak.Lobe) bool {
				return math.Abs(math.Remainder(o.Direction-image, 2*math.Pi)) < 4*math.Hypot(o.DirectionErr, one.DirectionErr)+0.5*deg
			}) {
				t.Errorf("the lobe at %g deg has no image at %g deg", one.Direction/deg, image/deg)
			}
		}
	}
	if len(all) < 2 {
		t.Error("a lobe of a wall with two mirrors has no twin")
	}
}

// BenchmarkEmission is 20,000 rays of the limaçon to weight 1e-4: two seconds on
// two processors are wanted.
func BenchmarkEmission(b *testing.B) {
	tr := trial.Traced(b, "limacon", []float64{1, 0.4}, glass(3.3, wall.TM))
	for b.Loop() {
		if f := farOf(b, tr, leak.Seeding{From: leak.Trapped}, leak.EmissionPlan{}); f.Rays < 19000 {
			b.Fatalf("%d rays", f.Rays)
		}
	}
}

// TestOutward compares the direction of what leaves with Snell's law applied
// to the wall's own frame.
func TestOutward(t *testing.T) {
	for name, tr := range map[string]*sim.Tracer{
		"limacon": trial.Traced(t, "limacon", []float64{1, 0.3}, glass(1.5, wall.TM)),
		"opening": trial.Traced(t, "cut-disc", []float64{1, 0.5}, trial.Opening(0, 0, 1), trial.Opening(1, 0, 1)),
	} {
		w := tr.Walker()
		tab, left := tr.Table(), 0
		for i := range 200 {
			b := w.Start(tr.Uniform(math.Mod(0.618*float64(i), 1), math.Mod(0.414*float64(i)+0.01, 1)))
			in := b.Dir
			if b = w.Next(0.5); b.Exit == 0 {
				continue
			}
			left++
			f := tab.At(b.S)
			sine := in.X*f.Tangent.X + in.Y*f.Tangent.Y
			if name == "limacon" {
				sine *= 1.5
			}
			n := f.Normal()
			want := r2.Sub(r2.Scale(sine, f.Tangent), r2.Scale(math.Sqrt(1-sine*sine), n))
			if got := leak.Outward(&b); r2.Norm(r2.Sub(got, want)) > 1e-7 {
				t.Fatalf("%s: at s = %g it leaves along %v, want %v", name, b.S, got, want)
			}
		}
		if left < 50 {
			t.Errorf("%s: only %d rays left", name, left)
		}
	}
}

// TestEvenFarField: a disc shines evenly, so its window share is its width,
// its mean cosine 0 and its entropy 1.
func TestEvenFarField(t *testing.T) {
	f := farOf(t, trial.Traced(t, "disc", []float64{1}, glass(1.5, wall.TE)), leak.Seeding{}, leak.EmissionPlan{Rays: 40000})
	for _, half := range []float64{math.Pi / 6, 0.0301} {
		if share, err := f.Share(1.234, half); math.Abs(share-half/math.Pi) > 4*err+1e-4 {
			t.Errorf("the share within ±%g is %g ± %g, want %g", half, share, err, half/math.Pi)
		}
	}
	if c, err := f.MeanCosine(); math.Abs(c) > 4*err {
		t.Errorf("the mean cosine is %g ± %g, want 0", c, err)
	}
	if e, _ := f.Entropy(); e < 0.999 || e > 1 {
		t.Errorf("the entropy is %g, want 1", e)
	}
	// Even rays in a disc of n = 1.5: the strip |p| < 1/n leaves, the rest stays.
	if kept := f.Account.Kept / f.Account.Started; math.Abs(kept-(1-1/1.5)) > 0.01 {
		t.Errorf("%g of the weight stays, want a third", kept)
	}
}

// TestSkip: what leaves before the transient's end is not in the far field, but
// accounted for.
func TestSkip(t *testing.T) {
	tr := trial.Traced(t, "limacon", []float64{1, 0.43}, glass(3.3, wall.TM))
	all := farOf(t, tr, leak.Seeding{}, leak.EmissionPlan{Rays: 4000})
	late := farOf(t, tr, leak.Seeding{}, leak.EmissionPlan{Rays: 4000, Skip: 30})
	if all.Skipped != 0 || late.Skipped < 0.2*late.Account.Left || all.Account != late.Account {
		t.Errorf("skipped %g of %g; the accounts are %+v and %+v", late.Skipped, late.Account.Left, all.Account, late.Account)
	}
	a, _ := all.Share(0, 0.5)
	b, err := late.Share(0, 0.5)
	if math.Abs(a-b) < 3*err {
		t.Errorf("without its start the far field is the same: %g and %g ± %g", a, b, err)
	}
}

// TestMeetsAgain: what leaves a half moon's hollow meets its other horn, and
// nothing leaves a convex wall twice.
func TestMeetsAgain(t *testing.T) {
	dented := farOf(t, trial.Traced(t, "limacon", []float64{1, 0.9}, glass(1.5, wall.TM)), leak.Seeding{}, leak.EmissionPlan{Rays: 4000})
	if !dented.Watched || !(dented.Again > 0.001 && dented.Again < 0.5) {
		t.Errorf("of what leaves a dented limaçon %g meets the wall again", dented.Again)
	}
	round := farOf(t, trial.Traced(t, "limacon", []float64{1, 0.4}, glass(1.5, wall.TM)), leak.Seeding{}, leak.EmissionPlan{Rays: 4000})
	if round.Watched || round.Again != 0 {
		t.Error("a convex wall is said to be met twice")
	}
}

// TestEmissionNone asks where nothing leaves.
func TestEmissionNone(t *testing.T) {
	lossy := table.Coat{Side: table.AllSides, To: 1, Law: wall.Lossy{Reflectivity: 0.5}}
	for _, tr := range []*sim.Tracer{trial.Traced(t, "disc", []float64{1}), trial.Traced(t, "disc", []float64{1}, lossy)} {
		if _, err := leak.MeasureEmission(tr, trial.Runner(tr, 1, 0), leak.Seeding{}, leak.EmissionPlan{}); !errors.As(err, new(*measure.NotMeasured)) {
			t.Errorf("the error is %v", err)
		}
	}
}

// TestEmissionWorkers wants equal bits from any number of workers, in every
// figure.
func TestEmissionWorkers(t *testing.T) {
	tr := trial.Traced(t, "limacon", []float64{1, 0.43}, glass(3.3, wall.TE))
	var first figure.Curve
	for i, n := range []int{1, 2, 7} {
		f, err := leak.MeasureEmission(tr, trial.Runner(tr, 3, n), leak.Seeding{From: leak.Area}, leak.EmissionPlan{Rays: 3000})
		if err != nil {
			t.Fatal(err)
		}
		c := f.Polar(leak.ToArea, "", "Program 9").Curves[0]
		if i == 0 {
			first = c
			area := 0.0
			for _, y := range c.Y {
				area += y * 2 * math.Pi / float64(len(c.Y))
			}
			if math.Abs(area-1) > 1e-12 {
				t.Errorf("the area under the far field is 1 %+g", area-1)
			}
			continue
		}
		for k := range c.Y {
			if c.Y[k] != first.Y[k] || c.Err[k] != first.Err[k] {
				t.Fatalf("%d workers give %g in bin %d, one gives %g", n, c.Y[k], k, first.Y[k])
			}
		}
	}
}

// TestPolarised turns every dielectric wall, and no other.
func TestPolarised(t *testing.T) {
	d := trial.Traced(t, "disc", []float64{1}, glass(1.5, wall.TM), trial.Opening(0, 0, 0.1)).Table().Design()
	d.Bare = wall.Dielectric{Index: 2, Outside: 1}
	got := leak.Polarised(d, wall.TE)
	if got.Bare != (wall.Dielectric{Index: 2, Outside: 1, Polarisation: wall.TE}) || got.Coats[0].Law != glass(1.5, wall.TE).Law || got.Coats[1].Law != (wall.Opening{}) {
		t.Errorf("the laws are %v and %v", got.Bare, got.Coats)
	}
	if d.Coats[0].Law != glass(1.5, wall.TM).Law {
		t.Error("the design itself was changed")
	}
}
