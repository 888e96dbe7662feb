package live

import (
	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/chaos"
	"cavitywright/sim/measure/leak"
	"cavitywright/table"
	"cavitywright/ui/session"
)

// Kind is a map that can lie under the portrait.
type Kind struct {
	Layer session.Layer
	Name  string // as a person chooses it
	About string // what it shows, in one sentence
	// Why is why the table has no such map, "" where it has one.
	Why   func(*table.Table) string
	Field func(*sim.Tracer) (measure.Field, error)
}

// layerBounces is the number of bounces from each cell of a map: enough to
// tell the sea from the islands, few enough for a second of work.
const layerBounces = 200

// Layers lists the maps; a new one is an entry here.
func Layers() []Kind {
	return []Kind{
		{session.Stretching, "Stretching", "Finite-time stretching over 200 bounces off mirrors: large where neighbouring rays part fast.", chaos.Mirrors,
			func(tr *sim.Tracer) (measure.Field, error) {
				return chaos.NewField("growth", tr, layerBounces, figure.Linear)
			}},
		{session.Averages, "Regular or chaotic", "Digits in which weighted averages of the halves of an orbit agree over 200 bounces off mirrors: many where it is regular.", chaos.Mirrors,
			func(tr *sim.Tracer) (measure.Field, error) {
				return chaos.NewField("averages", tr, layerBounces, figure.Linear)
			}},
		{session.Lifetimes, "Lifetime", "Path until half of what starts at a place has left or was absorbed.", leak.Leaks,
			lives("time", 3*layerBounces)},
		{session.Survivors, "Survivors", "What is left after 10 bounces of what starts at a place.", leak.Leaks,
			lives("survivors", survivorBounces)},
		{session.Pasts, "Survivors, backwards", "What is left of a ray followed backwards over 10 bounces: where what has not left is now.", leak.Leaks,
			lives("pasts", survivorBounces)},
	}
}

// survivorBounces is the number of bounces of a map of survivors: the pattern
// of what has left is then fine, and the cells still show it.
const survivorBounces = 10

// lives is the field of a map of how long rays last.
func lives(name string, bounces int) func(*sim.Tracer) (measure.Field, error) {
	return func(tr *sim.Tracer) (measure.Field, error) { return leak.NewLife(tr, name, bounces), nil }
}

// KindOf is the map of a name; ok is false for none.
func KindOf(l session.Layer) (k Kind, ok bool) {
	for _, k := range Layers() {
		if k.Layer == l {
			return k, true
		}
	}
	return Kind{}, false
}
