package outline

import (
	"math"

	"cavitywright/table"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/integrate/quad"
	"gonum.org/v1/gonum/spatial/r2"
)

// Sample is a point of the wall after the bias: S is the arclength there (of
// the moved wall; without a bias it is the table's s), Normal points into the
// table, Curvature is positive where the wall focuses. At a corner there are
// two samples, one of either side.
type Sample struct {
	Loop          int
	S             float64
	Point, Normal r2.Vec
	Curvature     float64
}

// Samples are points along the wall, on every stretch as far apart as chords of
// the error of o may be, both ends included. The greatest distance of the
// chords between them from the wall is the second value.
func Samples(t *table.Table, o Options) ([]Sample, float64, error) {
	var list []Sample
	s, worst := 0.0, 0.0
	for i, l := range t.Loops() {
		c, err := moved(t, l, o.Bias)
		if err != nil {
			return nil, 0, err
		}
		for k := range c.list {
			e := &c.list[k]
			w := writer{o: Options{Form: Chords, ChordError: o.ChordError}, unit: t.Design().Unit, path: Path{Start: e.a}}
			cuts, err := w.cuts(e)
			if err != nil {
				return nil, 0, err
			}
			worst = math.Max(worst, e.sagitta(cuts))
			for j, f := range cuts {
				if j > 0 {
					s += e.length(cuts[j-1], f)
				}
				p, _ := e.at(f)
				list = append(list, Sample{i, s, p, plane.Left(e.tangent(f)), e.curvature(f)})
			}
			if len(list) > mostSteps {
				return nil, 0, refuse("A chord error of %.3g %s takes more than %d points; ask for a greater one.", o.ChordError, t.Design().Unit, mostSteps)
			}
		}
	}
	return list, worst, nil
}

// length is that of the stretch between two near fractions.
func (s *stretch) length(lo, hi float64) float64 {
	switch s.kind {
	case Line:
		return (hi - lo) * r2.Norm(r2.Sub(s.b, s.a))
	case Arc:
		return (hi - lo) * s.radius * math.Abs(s.sweep)
	}
	return quad.Fixed(func(f float64) float64 {
		_, d := s.at(f)
		return r2.Norm(d)
	}, lo, hi, 16, nil, 0)
}
