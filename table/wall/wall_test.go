package wall

import (
	"math"
	"testing"

	"cavitywright/table/param"

	"pgregory.net/rapid"
)

// TestNothingIsMade draws laws and rays: no share is negative, and what returns
// plus what leaves plus what is absorbed is 1.
func TestNothingIsMade(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		k := rapid.SampledFrom(Kinds()).Draw(t, "law")
		v := param.Values{}
		for _, s := range k.Specs {
			v = append(v, s.Clamp(rapid.Float64Range(s.Lo, s.Hi).Draw(t, s.Name)))
		}
		l, err := Make(k.Name, v)
		if err != nil {
			t.Fatal(err)
		}
		p := rapid.Float64Range(-1, 1).Draw(t, "p")
		o := l.Scatter(Incidence{P: p}, rapid.Float64Range(0, 0.999999).Draw(t, "u"))
		for _, w := range []float64{o.Back.Weight, o.Through.Weight, o.Absorbed()} {
			if !(w >= -1e-15 && w <= 1+1e-15) {
				t.Fatalf("share %g of %+v", w, o)
			}
		}
		if k.Name != "lossy" && math.Abs(o.Absorbed()) > 1e-15 {
			t.Fatalf("%s absorbs %g", k.Name, o.Absorbed())
		}
		if math.Abs(o.Back.P) > 1 || math.Abs(o.Through.P) > 1 {
			t.Fatalf("direction out of range: %+v", o)
		}
	})
}

// TestFresnel: power reflectivities from Born and Wolf, Principles of Optics,
// 1.5, evaluated to the digits given; normal incidence ((n-1)/(n+1))^2.
func TestFresnel(t *testing.T) {
	for _, c := range []struct{ n, chiDeg, tm, te, outDeg float64 }{
		{1.5, 30, 0.10577279114504319, 0.0046075434457086440, 48.590377890729141},
		{3.3, 15, 0.51759881125903789, 0.078271110491348851, 58.660762276544416},
		{1.5, 0, 0.04, 0.04, 0},
		{3.3, 0, 0.28610059491617090, 0.28610059491617090, 0},
		{1.5, 33.690067525979787, math.NaN(), 0, 90 - 33.690067525979787}, // Brewster
		{3.3, 16.858398767738279, math.NaN(), 0, 90 - 16.858398767738279},
		{1.5, 41.8103148957786, 1, 1, math.NaN()}, // just beyond the critical angle
	} {
		in := Incidence{P: math.Sin(c.chiDeg * math.Pi / 180)}
		tm := Dielectric{c.n, 1, TM}.Scatter(in, 0)
		te := Dielectric{c.n, 1, TE}.Scatter(in, 0)
		if math.Abs(tm.Back.Weight-c.tm) > 1e-12 || math.Abs(te.Back.Weight-c.te) > 1e-12 {
			t.Errorf("n %g at %g deg: TM %.15g TE %.15g, want %.15g %.15g", c.n, c.chiDeg, tm.Back.Weight, te.Back.Weight, c.tm, c.te)
		}
		if out := math.Asin(tm.Through.P) * 180 / math.Pi; math.Abs(out-c.outDeg) > 1e-12*90 {
			t.Errorf("n %g at %g deg leaves at %.15g deg, want %.15g", c.n, c.chiDeg, out, c.outDeg)
		}
	}
	if c := (Dielectric{Index: 3.3, Outside: 1}).Critical(); math.Abs(math.Asin(c)*180/math.Pi-17.639701394236043) > 1e-12 {
		t.Errorf("critical angle %.15g", c)
	}
}
