// Package trial sets up tables and runs for tests: a table of one catalogue
// shape made ready for rays, and a runner with a seed. The programs do not use
// it.
package trial

import (
	"context"
	"testing"

	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/sim/run"
	"cavitywright/table"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/table/wall"
)

// Traced is a table of one shape in millimetres, ready for rays.
func Traced(t testing.TB, name string, values []float64, coats ...table.Coat) *sim.Tracer {
	t.Helper()
	f, err := shape.New(name, values)
	if err != nil {
		t.Fatal(err)
	}
	tab, err := table.New(table.Design{
		Unit: table.Millimetre, Coats: coats,
		Items: []table.Item{{Shape: f, Place: plane.Identity()}},
	})
	if err != nil {
		t.Fatal(err)
	}
	return sim.Compile(tab)
}

// Runner runs measurements with a seed on any number of workers, 0 for all
// processors.
func Runner(tr *sim.Tracer, seed uint64, workers int) measure.Runner {
	return func(m measure.Measurement) (measure.Tally, error) {
		return run.Run(context.Background(), run.Job{Tracer: tr, Measure: m, Seed: seed, Workers: workers})
	}
}

// Opening lays an opening on a side of the first item.
func Opening(side int, from, to float64) table.Coat {
	return table.Coat{Side: side, From: from, To: to, Law: wall.Opening{}}
}

// CardioidHole is the cardioid of length 8 with an opening of length 0.2
// centred at phi = 0, where s begins.
func CardioidHole(t testing.TB) *sim.Tracer {
	t.Helper()
	return Traced(t, "limacon", []float64{1, 1}, Opening(0, 0, 0.1/8), Opening(0, 1-0.1/8, 1))
}
