package orbit

import (
	"math/rand/v2"
	"testing"
)

// TestSeeds looks for orbits in another way than the searches do, from polygons
// with their corners anywhere on the wall, and wants none that is not listed.
func TestSeeds(t *testing.T) {
	seed := rand.Uint64()
	chance := rand.New(rand.NewPCG(seed, 1))
	for _, c := range []struct {
		kind string
		v    []float64
		upTo int
	}{
		{"stadium", []float64{1, 1}, 5},
		{"limacon", []float64{1, 0.43}, 5},
		{"square-with-disc", []float64{1, 0.25}, 4},
		{"three-posts", []float64{1, 3}, 5},
	} {
		tab := drawn(t, nil, c.kind, c.v...)
		l := found(t, tab, c.upTo)
		p, err := newProver(tab)
		if err != nil {
			t.Fatal(err)
		}
		met := map[int]bool{}
		for range 6000 {
			s := make([]float64, 2+chance.IntN(c.upTo-1))
			for i := range s {
				s[i] = chance.Float64() * tab.Length()
			}
			chain := newChain(p.mirror, s)
			if !chain.polish(0.05 * tab.Length()) {
				continue
			}
			o, ok := p.prove(chain)
			if !ok || !p.prime(&o) {
				continue
			}
			at := -1
			for i := range l.Orbits {
				if p.same(&l.Orbits[i], &o) {
					at = i
				}
			}
			if at < 0 {
				b := newBook(p, c.upTo)
				if b.marginal(chain) && inFamily(l, &o) {
					continue
				}
				t.Errorf("seed %d, %s %v: an orbit of %d bounces, length %.12g, trace %.8g, first at s = %.8g, p = %.8g is not listed",
					seed, c.kind, c.v, o.Period(), o.Length, o.Trace(), o.Bounces[0].S, o.Bounces[0].P)
				continue
			}
			met[at] = true
		}
		t.Logf("%s: met %d of %d listed", c.kind, len(met), len(l.Orbits))
		if len(met) < len(l.Orbits)/3 {
			t.Errorf("%s: only %d of %d met; the check is too weak", c.kind, len(met), len(l.Orbits))
		}
	}
}

// TestTwoWays finds the orbits of polygons by words and by grids, and wants the
// same.
func TestTwoWays(t *testing.T) {
	for _, c := range []struct {
		kind string
		v    []float64
	}{{"triangle", []float64{13, 14, 15}}, {"triangle", []float64{1, 1, 1.3}}, {"polygon", []float64{5, 1}}, {"polygon", []float64{6, 1}}, {"rectangle", []float64{1.7, 1}}} {
		const upTo = 6
		tab := drawn(t, nil, c.kind, c.v...)
		p, err := newProver(tab)
		if err != nil {
			t.Fatal(err)
		}
		byWords, byGrids := newBook(p, upTo), newBook(p, upTo)
		ask := Search{}.ready()
		if err := byWords.level(&List{UpTo: upTo, Settled: make([]bool, upTo+1)}, ask); err != nil {
			t.Fatal(err)
		}
		for _, side := range []int{150, 211} {
			if err := byGrids.scan(upTo, side, byGrids.columns(side), ask, func(float64) {}); err != nil {
				t.Fatal(err)
			}
		}
		for n := range byWords.of {
			if len(byWords.of[n]) != len(byGrids.of[n]) {
				t.Errorf("%s %v: %d entries of %d bounces by words, %d by grids", c.kind, c.v, len(byWords.of[n]), n, len(byGrids.of[n]))
			}
		}
	}
}

// inFamily reports whether a family of the orbit's period and length is listed.
func inFamily(l *List, o *Orbit) bool {
	for _, x := range l.alike(known{period: o.Period(), length: o.Length, trace: 2}) {
		if x.Family != nil {
			return true
		}
	}
	return false
}
