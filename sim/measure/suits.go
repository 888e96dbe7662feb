package measure

import (
	"math"

	"cavitywright/table"
	"cavitywright/table/curve"
	"cavitywright/table/wall"
)

// Closed is why rays may fly off the table for want of an outer wall, "" where
// they cannot.
func Closed(t *table.Table) string {
	if t.Open() {
		return "the table has no outer wall"
	}
	return ""
}

// Laws are all laws that the wall of a table has somewhere.
func Laws(t *table.Table) []wall.Law {
	laws := []wall.Law{t.Law()}
	for _, s := range t.Stretches() {
		laws = append(laws, s.Law)
	}
	return laws
}

// ProbeAngles is the number of angles at which a law is asked what it does.
const ProbeAngles = 32

// Probe is the incidence at which a law is asked for the i-th time.
func Probe(i int) wall.Incidence {
	return wall.Incidence{P: (2*float64(i)+1)/ProbeAngles - 1}
}

// Slowness is how many times longer a bounce takes than on a stadium, roughly
// (measured: three times on smooth spans, and growing as the root of the
// number of pieces, most of which a flight passes by): it divides the work of
// a reading, so that a reading takes about the same time on any table.
func Slowness(t *table.Table) float64 {
	pieces := t.Pieces()
	slow := math.Max(1, math.Sqrt(float64(len(pieces)))/2)
	for i := range pieces {
		if k := pieces[i].Kind; k == curve.Bezier || k == curve.Harmonic {
			return 3 * slow
		}
	}
	return slow
}
