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
		if sum := o.Back.Weight + o.Through.Weight + o.Absorbed(); math.Abs(sum-1) > 1e-15 {
			t.Fatalf("what returns, leaves and is absorbed is %.17g of %+v", sum, o)
		}
		if d, ok := l.(Lossy); ok && math.Abs(o.Absorbed()-(1-d.Reflectivity)) > 1e-15 {
			t.Fatalf("%+v absorbs %g", d, o.Absorbed())
		}
		if k.Name != "lossy" && math.Abs(o.Absorbed()) > 1e-15 {
			t.Fatalf("%s absorbs %g", k.Name, o.Absorbed())
		}
		if math.Abs(o.Back.P) > 1 || math.Abs(o.Through.P) > 1 {
			t.Fatalf("direction out of range: %+v", o)
		}
	})
}
