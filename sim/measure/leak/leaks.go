package leak

import (
	"math"

	"cavitywright/sim/measure"
	"cavitywright/table"
	"cavitywright/table/wall"
)

// loses reports whether a law lets anything out or absorbs it.
func loses(l wall.Law) bool {
	for i := range measure.ProbeAngles {
		if l.Scatter(measure.Probe(i), 0.5).Back.Weight < 1 {
			return true
		}
	}
	return false
}

// Leaks is why nothing leaves the table, "" where something does.
func Leaks(t *table.Table) string {
	if t.Open() || loses(t.Law()) {
		return ""
	}
	for _, s := range t.Stretches() {
		if loses(s.Law) {
			return ""
		}
	}
	return "nothing leaves this table; lay an opening, a lossy or a dielectric coat on its wall"
}

// Opens is why rays do not leave the table through openings alone, "" where they
// do.
func Opens(t *table.Table) string {
	if why := measure.Closed(t); why != "" {
		return why
	}
	if _, width := Openings(t); width == 0 {
		return "the wall has no opening; lay one on it"
	}
	for _, s := range append(t.Stretches()[:len(t.Stretches()):len(t.Stretches())], table.Stretch{Law: t.Law()}) {
		if _, is := s.Law.(wall.Opening); !is && loses(s.Law) {
			return "openings are not the only way out, and it is measured only where they are"
		}
	}
	if math.Abs(t.Area()) == 0 {
		return "the table has no area"
	}
	return ""
}

// Emits is why nothing gets out of the table through its wall, "" where
// something does: absorbed is not out.
func Emits(t *table.Table) string {
	if t.Open() {
		return ""
	}
	for _, l := range measure.Laws(t) {
		for i := range measure.ProbeAngles {
			if l.Scatter(measure.Probe(i), 0.5).Through.Weight > 0 {
				return ""
			}
		}
	}
	return "nothing leaves through the wall of this table; lay an opening or a dielectric coat on it"
}
