package table

import (
	"math"

	"cavitywright/table/curve"
)

// SmallestRadius is the smallest radius of curvature of the wall, corners left
// out; +Inf where the wall is straight. On smooth spans the curvature is
// sampled at radiusSamples places a span, which turns by less than a quarter;
// the value is then good to some 1e-3 of itself.
func (t *Table) SmallestRadius() float64 {
	least := math.Inf(1)
	for i := range t.pieces {
		p := &t.pieces[i]
		switch p.Kind {
		case curve.Segment:
			continue
		case curve.Circle:
			least = math.Min(least, p.Radius)
			continue
		}
		for k := range radiusSamples + 1 {
			f := p.FrameAt(p.T0 + (p.T1-p.T0)*float64(k)/radiusSamples)
			if f.Curvature != 0 {
				least = math.Min(least, 1/math.Abs(f.Curvature))
			}
		}
	}
	return least
}

const radiusSamples = 32
