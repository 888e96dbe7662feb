package orbit

import (
	"math"

	"cavitywright/table"
	"cavitywright/table/plane"
	"cavitywright/table/survey"

	"gonum.org/v1/gonum/spatial/r2"
)

// isometry maps the wall onto itself: a rotation about the wall's centre of
// mass, or a reflection in a line through it. On the arclength it is a shift of
// each loop, run backwards by a reflection.
type isometry struct {
	mirror bool
	loops  []shifted
}

// shifted says that a loop goes to the loop to, its start to the arclength s0.
type shifted struct {
	to int
	s0 float64
}

// at is the image of the arclength s on a loop of the table.
func (g *isometry) at(t *table.Table, s float64, loop int) float64 {
	from, to := &t.Loops()[loop], &t.Loops()[g.loops[loop].to]
	d := s - from.S0
	if g.mirror {
		d = -d
	}
	return wrap(to, g.loops[loop].s0+d)
}

const (
	// symmetryTol, relative to the size of the wall, is how far an image of the
	// wall may lie from it: the rounding of a centre of mass and of an
	// arclength, with a margin, and far less than anyone draws.
	symmetryTol = 1e-9
	// mostLoops bounds the search for symmetries: a wall with more loops is
	// taken for one without.
	mostLoops = 400
)

// symmetries are the isometries of the wall but the identity, at most those of a
// polygon: a wall of circles about one centre has more, and none is given.
func symmetries(t *table.Table) (all []isometry) {
	if len(t.Loops()) > mostLoops {
		return nil
	}
	of := survey.Of(t, 0).Symmetry
	try := func(mirror bool, angle float64) {
		turn := plane.Similarity{Angle: angle, Scale: 1}
		g, ok := carried(t, mirror, func(p r2.Vec) r2.Vec {
			d := r2.Sub(p, of.Centre)
			if mirror {
				d.Y = -d.Y
			}
			return r2.Add(of.Centre, turn.Turn(d))
		})
		if ok {
			all = append(all, g)
		}
	}
	for k := 1; k < of.Order; k++ {
		try(false, 2*math.Pi*float64(k)/float64(of.Order))
	}
	for _, line := range of.Mirrors {
		try(true, 2*line)
	}
	return all
}

// carried is the map of the plane as an isometry of the wall; ok is false where
// it does not map the wall onto itself.
func carried(t *table.Table, mirror bool, image func(r2.Vec) r2.Vec) (g isometry, ok bool) {
	const samples = 41
	tol := symmetryTol * plane.Diagonal(t.Bounds())
	g.mirror = mirror
	for i, l := range t.Loops() {
		target := image(t.At(l.S0).Point)
		s, away := t.Nearest(target)
		if away > 1e3*tol { // Nearest is good to a millionth of the tolerance at best
			return g, false
		}
		to := &t.Loops()[t.LoopAt(s)]
		turn := l.S1 - l.S0
		if math.Abs(turn-(to.S1-to.S0)) > tol {
			return g, false
		}
		for range 3 {
			f := t.At(s)
			s = wrap(to, s+plane.Dot(f.Tangent, r2.Sub(target, f.Point)))
		}
		g.loops = append(g.loops, shifted{t.LoopAt(s), s})
		for k := range samples {
			x := l.S0 + turn*(float64(k)+0.5)/samples
			if away := r2.Norm(r2.Sub(t.At(g.at(t, x, i)).Point, image(t.At(x).Point))); away > tol {
				return g, false
			}
		}
	}
	return g, true
}
