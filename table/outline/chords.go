package outline

import (
	"math"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// chords puts down chords of equal error. With a grid the rounding of the
// corners comes on top.
func (w *writer) chords(s *stretch) error {
	cuts, err := w.cuts(s)
	if err != nil {
		return err
	}
	return w.putChords(s, cuts)
}

// cuts are the fractions between which chords keep the error: as many as the
// curvature asks for, and more until the greatest distance holds.
func (w *writer) cuts(s *stretch) ([]float64, error) {
	if s.kind == Line {
		return []float64{0, 1}, nil
	}
	places, weight := s.places(w.o.ChordError)
	n := math.Max(1, math.Ceil(weight-1e-6))
	if s.kind == Arc { // exactly: the sagitta of equal chords
		n = math.Ceil(math.Abs(s.sweep)/(2*math.Acos(math.Max(-1, 1-w.o.ChordError/s.radius))) - 1e-9)
		n = math.Max(n, 1)
	}
	for range 60 {
		if float64(len(w.path.Steps))+n > mostSteps {
			return nil, refuse("A chord error of %.3g %s takes more than %d corners; ask for a greater one.", w.o.ChordError, w.unit, mostSteps)
		}
		cuts := places.cut(int(n))
		if s.sagitta(cuts) <= w.o.ChordError*(1+1e-9) {
			return cuts, nil
		}
		n = math.Ceil(n*1.06 + 0.5)
	}
	p, _ := s.at(0)
	return nil, refuseAt(p, "The wall cannot be followed to %.3g %s at (%.6g, %.6g) %s; ask for a greater chord error.", w.o.ChordError, w.unit, p.X, p.Y, w.unit)
}

// putChords puts down the chords between the cuts, measured as they are put.
func (w *writer) putChords(s *stretch, cuts []float64) error {
	for i := 1; i < len(cuts); i++ {
		p, _ := s.at(cuts[i])
		if cuts[i] == 1 {
			p = s.b
		}
		a, b := w.last(), w.o.snapped(p)
		if a == b { // the grid is wider than the chord
			w.miss = math.Max(w.miss, distance(p, a, b))
			continue
		}
		w.put(Step{Kind: Line, To: b}, s.farthest(cuts[i-1], cuts[i], a, b))
	}
	return nil
}

// farthest is the greatest distance of the stretch between two fractions from
// the chord ab: at its ends, or where its tangent is along the chord.
func (s *stretch) farthest(lo, hi float64, a, b r2.Vec) float64 {
	p, _ := s.at(lo)
	q, _ := s.at(hi)
	worst := math.Max(distance(p, a, b), distance(q, a, b))
	if s.kind == Line {
		return worst
	}
	chord := r2.Sub(b, a)
	side := func(f float64) float64 { return plane.Cross(chord, s.tangent(f)) }
	x, y := lo, hi
	sx, sy := side(x), side(y)
	if sx*sy > 0 { // tilted by the grid more than it is bent
		m, _ := s.at(0.5 * (lo + hi))
		return math.Max(worst, distance(m, a, b))
	}
	for range 40 {
		m := 0.5 * (x + y)
		if sm := side(m); sm*sx > 0 {
			x, sx = m, sm
		} else {
			y = m
		}
	}
	m, _ := s.at(0.5 * (x + y))
	return math.Max(worst, distance(m, a, b))
}

// sagitta is the greatest distance of the stretch from the chords of its cuts.
func (s *stretch) sagitta(cuts []float64) float64 {
	worst := 0.0
	for i := 1; i < len(cuts); i++ {
		a, _ := s.at(cuts[i-1])
		b, _ := s.at(cuts[i])
		worst = math.Max(worst, s.farthest(cuts[i-1], cuts[i], a, b))
		if s.kind == Arc {
			break // all are alike
		}
	}
	return worst
}

// distance is that of p from the segment ab.
func distance(p, a, b r2.Vec) float64 {
	d := r2.Sub(b, a)
	f := 0.0
	if l := plane.Dot(d, d); l > 0 {
		f = math.Min(1, math.Max(0, plane.Dot(r2.Sub(p, a), d)/l))
	}
	return r2.Norm(r2.Sub(p, plane.Lerp(a, b, f)))
}

// density is the number of chords that the wall takes up to a place, at places
// in equal steps of the parameter.
type density []float64

const densitySteps = 256

// places is the density of chords of error e: the root of curvature over 8 e,
// integrated over the length.
func (s *stretch) places(e float64) (density, float64) {
	d := make(density, densitySteps+1)
	if s.kind == Line || s.kind == Arc {
		for i := range d {
			d[i] = float64(i)
		}
		return d, 1
	}
	last := 0.0
	for i := range d {
		f := float64(i) / densitySteps
		_, v := s.at(f)
		k := math.Abs(s.curvature(f))
		now := math.Sqrt(k/(8*e)) * r2.Norm(v)
		if math.IsInf(k, 0) || math.IsNaN(now) { // a cusp: the speed vanishes as well
			now = last
		}
		if i > 0 {
			d[i] = d[i-1] + 0.5*(now+last)/densitySteps
		}
		last = now
	}
	return d, d[densitySteps]
}

// cut are n+1 fractions with equal shares of the density.
func (d density) cut(n int) []float64 {
	cuts := make([]float64, n+1)
	total, j := d[len(d)-1], 0
	for k := 1; k < n; k++ {
		want := total * float64(k) / float64(n)
		for d[j+1] < want {
			j++
		}
		x := 0.5
		if w := d[j+1] - d[j]; w > 0 {
			x = (want - d[j]) / w
		}
		cuts[k] = (float64(j) + x) / float64(len(d)-1)
	}
	cuts[n] = 1
	return cuts
}
