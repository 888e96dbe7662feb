package wall

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

// deg is an angle in radians as degrees.
const deg = 180 / math.Pi

// TestFresnel: power coefficients of Born and Wolf, Principles of Optics, 1.5,
// at five angles from inside a body of index n in air. The values at 0 degrees
// are ((n-1)/(n+1))^2; all were evaluated to 40 digits from the formulas in
// sines and tangents of the two angles (1.5.2, (21)), which the program does
// not use. The angle outside is Snell's.
func TestFresnel(t *testing.T) {
	for _, c := range []struct{ n, chiDeg, tm, te, outDeg float64 }{
		{1.5, 0, 0.04, 0.04, 0},
		{1.5, 10, 0.043887869960806426, 0.036278048349333723, 15.098086605159006},
		{1.5, 20, 0.059063225524500528, 0.024393810856743957, 30.865882473087281},
		{1.5, 30, 0.10577279114504319, 0.0046075434457086440, 48.590377890729141},
		{1.5, 40, 0.39051810856289362, 0.10006430001092708, 74.618568308020319},
		{3.3, 0, 0.28610059491617090, 0.28610059491617090, 0},
		{3.3, 5, 0.30116499484509836, 0.27111462725743673, 16.715160549877077},
		{3.3, 10, 0.35667588910943548, 0.21726824767464465, 34.962416560153378},
		{3.3, 15, 0.51759881125903789, 0.078271110491348851, 58.660762276544416},
		{3.3, 17, 0.71606479092999295, 0.0023693938233490066, 74.758563402556496},
	} {
		in := Incidence{P: math.Sin(c.chiDeg / deg)}
		for pol, want := range map[Polarisation]float64{TM: c.tm, TE: c.te} {
			o := Dielectric{c.n, 1, pol}.Scatter(in, 0)
			if math.Abs(o.Back.Weight-want) > 1e-12 || math.Abs(o.Through.Weight-(1-want)) > 1e-12 {
				t.Errorf("n %g, %g deg, %v: returns %.17g, lets out %.17g; want %.17g returned", c.n, c.chiDeg, pol, o.Back.Weight, o.Through.Weight, want)
			}
			if out := math.Asin(o.Through.P) * deg; math.Abs(out-c.outDeg) > 1e-11 {
				t.Errorf("n %g, %g deg: leaves at %.17g deg, want %.17g", c.n, c.chiDeg, out, c.outDeg)
			}
		}
	}
}

// TestFresnelByAngles holds both polarisations, at any pair of indices, to the
// formulas in sines and tangents, and to reversal: a ray that enters by the way
// that another left by is reflected alike (Stokes).
func TestFresnelByAngles(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n, m := rapid.Float64Range(1, 4).Draw(t, "inside"), rapid.Float64Range(1, 4).Draw(t, "outside")
		if math.Abs(n-m) < 1e-3 {
			return // nothing is reflected, and the quotients say nothing
		}
		i := rapid.Float64Range(0.01, 1.5).Draw(t, "angle")
		p := math.Sin(i)
		if n*p/m > 0.9999 {
			return
		}
		out := math.Asin(n * p / m)
		sine, tangent := math.Sin(i-out)/math.Sin(i+out), math.Tan(i-out)/math.Tan(i+out)
		for pol, r := range map[Polarisation]float64{TM: sine, TE: tangent} {
			o := Dielectric{n, m, pol}.Scatter(Incidence{P: p}, 0)
			if d := math.Abs(o.Back.Weight - r*r); d > 1e-12 {
				t.Fatalf("%v, %g to %g at %g: %g off", pol, n, m, i, d)
			}
			back := Dielectric{m, n, pol}.Scatter(Incidence{P: o.Through.P}, 0)
			if d := math.Abs(back.Back.Weight - o.Back.Weight); d > 1e-12 || math.Abs(back.Through.P-p) > 1e-12 {
				t.Fatalf("%v, %g to %g at %g: the way back reflects %g otherwise and leaves at %g", pol, n, m, i, d, back.Through.P)
			}
		}
	})
}

// TestBrewsterAndCritical: the angles from inside (Born and Wolf, 1.5.3 and
// 1.5.4: atan 1/n and asin 1/n, evaluated to 20 digits), and what the law does
// there.
func TestBrewsterAndCritical(t *testing.T) {
	for _, c := range []struct{ n, brewsterDeg, criticalDeg float64 }{
		{1.5, 33.690067525979786914, 41.810314895778598066},
		{3.3, 16.858398767738278834, 17.639701394236042705},
	} {
		d := Dielectric{c.n, 1, TE}
		if a := math.Asin(d.Brewster()) * deg; math.Abs(a-c.brewsterDeg) > 1e-12 {
			t.Errorf("n %g: Brewster's angle %.17g deg, want %.17g", c.n, a, c.brewsterDeg)
		}
		if a := math.Asin(d.Critical()) * deg; math.Abs(a-c.criticalDeg) > 1e-12 {
			t.Errorf("n %g: critical angle %.17g deg, want %.17g", c.n, a, c.criticalDeg)
		}
		if o := d.Scatter(Incidence{P: d.Brewster()}, 0); o.Back.Weight > 1e-24 {
			t.Errorf("n %g: TE returns %g at Brewster's angle", c.n, o.Back.Weight)
		}
		for _, pol := range []Polarisation{TM, TE} {
			law := Dielectric{c.n, 1, pol}
			if o := law.Scatter(Incidence{P: d.Critical() + 1e-12}, 0); o.Back.Weight != 1 || o.Through.Weight != 0 {
				t.Errorf("n %g, %v: beyond the critical angle %+v", c.n, pol, o)
			}
			if o := law.Scatter(Incidence{P: d.Critical() - 1e-6}, 0); !(o.Through.Weight > 1e-3 && o.Back.Weight < 1) {
				t.Errorf("n %g, %v: short of the critical angle %+v", c.n, pol, o)
			}
		}
	}
	if c := (Dielectric{Index: 1, Outside: 1.5}).Critical(); c != 1 {
		t.Errorf("into a denser body the critical sine is %g, want 1", c)
	}
}
