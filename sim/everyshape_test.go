package sim_test

import (
	"math/rand/v2"
	"testing"

	"cavitywright/sim"
	"cavitywright/table"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
)

const (
	// everyBounces is the number of bounces that each shape is traced for.
	everyBounces = 1_000_000
	// longestOrbit ends an orbit, so that a regular island or a marginal family
	// does not take all of them.
	longestOrbit = 20_000
	// probeEvery is the number of bounces between two looks at the place of the
	// bounce, a prime so that it does not beat with short orbits.
	probeEvery = 997
)

// TestEveryShapeTraces: a million bounces in each shape of the catalogue, from
// starts that are uniform in (s, p). None is lost, every bounce probed lies on
// the wall where its s says (2e-12 of the size: arclength both ways), and of
// the undecided stops there are few: corners and grazing tangents have no area
// in (s, p).
func TestEveryShapeTraces(t *testing.T) {
	for _, k := range shape.Catalogue() {
		t.Run(k.Name, func(t *testing.T) {
			t.Parallel()
			f, err := shape.New(k.Name, param.Defaults(k.Specs))
			if err != nil {
				t.Fatal(err)
			}
			tab, err := table.New(table.Design{Unit: table.Millimetre, Items: []table.Item{{Shape: f, Place: plane.Identity()}}})
			if err != nil {
				t.Fatal(err)
			}
			traceEvery(t, tab, thorough(everyBounces, 50_000))
		})
	}
}

func traceEvery(t *testing.T, tab *table.Table, bounces int) {
	const seed = 20261201
	chance := rand.New(rand.NewPCG(seed, 0))
	tr := sim.Compile(tab)
	w := tr.Walker()
	size := plane.Diagonal(tab.Bounds())
	var stops [sim.Stops]int
	done, orbits := 0, 0
	for done < bounces {
		start := tr.Uniform(chance.Float64(), chance.Float64())
		b := w.Start(start)
		for orbits++; b.Stop == sim.Going && b.N < longestOrbit && done < bounces; done++ {
			b = w.Next(0)
			if b.Stop == sim.Going && done%probeEvery == 0 {
				if off := r2.Norm(r2.Sub(tab.At(b.S).Point, b.Point)); off > 2e-12*size {
					t.Fatalf("seed %d: from %+v, bounce %d at s = %v lies %g off the wall", seed, start, b.N, b.S, off)
				}
			}
		}
		stops[b.Stop]++
		if b.Stop == sim.Lost {
			t.Fatalf("seed %d: from %+v, lost after bounce %d", seed, start, b.N)
		}
	}
	if n := stops[sim.Corner] + stops[sim.Grazing]; n > 3 {
		t.Errorf("seed %d: of %d orbits %d end undecided: %d at a corner, %d grazing", seed, orbits, n, stops[sim.Corner], stops[sim.Grazing])
	}
	if !tab.Open() && stops[sim.Escaped] > 0 {
		t.Errorf("seed %d: %d orbits escape from a closed table", seed, stops[sim.Escaped])
	}
}
