package shape

import (
	"math"
	"slices"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/spatial/r2"
)

const (
	// sameBend is the jump of the curvature at a Fair joint, relative to the
	// curvatures and to the wall's size, that is left alone; ten times below
	// what a table takes for none (1e-8). Setting it anew goes below finerBend,
	// so that settling twice changes nothing.
	sameBend, finerBend = 1e-9, 1e-11
	// fairSteps bounds the steps of Newton's method.
	fairSteps = 40
	// fairReach is the number of nodes on either side of a joint whose handles
	// give way first; all of them do where those do not suffice.
	fairReach = 4
)

// curvatures are the signed curvatures at node i of the span that arrives and
// of the one that leaves. Not a number where a cubic has no handle there.
func (n nodes) curvatures(i int) (in, out float64) {
	return n.curvatureAt(i-1, Leaves), n.curvatureAt(i, Arrives)
}

// curvatureAt is the curvature of span i at its start (where it Arrives from
// its node) or at its end.
func (n nodes) curvatureAt(i int, end End) float64 {
	a := n.at(i)
	switch a.Span {
	case Bowed, Elliptic:
		// The circle's curvature is 2 sin(sweep/2) / chord. A linear map of
		// determinant ratio divides it by the cube of the tangent's stretch.
		chord := a.toCircle(n.chord(i))
		u, k := bend(a.Bulge), 2*bend(a.Bulge).Y/r2.Norm(chord)
		if a.Span == Bowed {
			return k
		}
		tangent := turnedBack(plane.Unit(chord), u)
		if end == Leaves {
			tangent = turned(plane.Unit(chord), u)
		}
		stretch := r2.Norm(a.toOval(tangent))
		return k * a.Ratio / (stretch * stretch * stretch)
	case Curved:
		// Of a Bézier cubic: 2/3 of the cross product of two legs of its
		// polygon, over the cube of the first (common practice).
		p := n.controls(i)
		first, second := r2.Sub(p[1], p[0]), r2.Sub(p[2], p[1])
		l := r2.Norm(first)
		if end == Leaves {
			first, second = r2.Sub(p[2], p[1]), r2.Sub(p[3], p[2])
			l = r2.Norm(second)
		}
		return 2.0 / 3 * plane.Cross(first, second) / (l * l * l)
	}
	return 0
}

// unfair is the jump of the curvature at node i in units of what is small
// there, so that below 1 it is below sameBend.
func (n nodes) unfair(i int, size float64) float64 {
	in, out := n.curvatures(i)
	return (out - in) / (math.Abs(in) + math.Abs(out) + 1/size)
}

func (n nodes) isFair(i int, size float64) bool { return math.Abs(n.unfair(i, size)) <= sameBend }

// settleCurvature makes the curvature continuous at the Fair joints: of all
// ways to change the directions and the logarithms of the lengths of the
// handles that do, the least (Newton's method with steps of least norm). A
// joint where that fails becomes Smooth. A handle that is held stays, if it can.
func (n nodes) settleCurvature(held *grasp) {
	var off []int
	size := n.size()
	for i := range n {
		if n[i].Joint == Fair && !n.isFair(i, size) {
			off = append(off, i)
		}
	}
	if len(off) == 0 {
		return
	}
	all := make([]bool, len(n))
	for i := range all {
		all[i] = true
	}
	_ = n.madeFair(n.about(off), held) || n.madeFair(all, held) || held != nil && n.madeFair(all, nil)
	for i := range n {
		if n[i].Joint == Fair && !n.isFair(i, size) {
			n[i].Joint = Smooth
		}
	}
}

// about marks the nodes within fairReach of those listed.
func (n nodes) about(list []int) []bool {
	near := make([]bool, len(n))
	for _, i := range list {
		for k := -fairReach; k <= fairReach; k++ {
			near[n.wrap(i+k)] = true
		}
	}
	return near
}

// madeFair turns and stretches the handles of the free nodes until every Fair
// joint that they bear on has one curvature. Where it fails n is as it was.
func (n nodes) madeFair(free []bool, held *grasp) bool {
	work := n.clone()
	knobs := slices.DeleteFunc(work.knobs(free), held.holds)
	size := n.size()
	var at []int // the joints that the knobs bear on
	for i := range n {
		if n[i].Joint == Fair && (free[i] || free[n.wrap(i-1)] || free[n.wrap(i+1)]) {
			at = append(at, i)
		}
	}
	if len(knobs) < len(at) {
		return false
	}
	worst := func(w nodes) (float64, *mat.VecDense) {
		r, most := mat.NewVecDense(len(at), nil), 0.0
		for k, i := range at {
			u := w.unfair(i, size)
			if math.IsNaN(u) {
				return math.Inf(1), r
			}
			r.SetVec(k, u)
			most = math.Max(most, math.Abs(u))
		}
		return most, r
	}
	most, r := worst(work)
	for range fairSteps {
		if most <= finerBend {
			break
		}
		var step mat.VecDense
		if !leastStep(&step, work.turns(at, knobs, size), r) {
			break
		}
		next, nextMost, nextR := work, most, r
		for share := 1.0; share > 1e-3; share /= 2 {
			trial := work.clone()
			for k, b := range knobs {
				trial.turn(b, -share*step.AtVec(k))
			}
			if m, res := worst(trial); m < most {
				next, nextMost, nextR = trial, m, res
				break
			}
		}
		if nextMost >= most {
			break
		}
		work, most, r = next, nextMost, nextR
	}
	if most > sameBend/10 || !work.wieldy(n) {
		return false
	}
	copy(n, work)
	return true
}

// longestHandle is the length of a handle, as a multiple of its chord, beyond
// which a fair wall would be far from what was drawn.
const longestHandle = 4

// wieldy reports whether no handle has become much longer or shorter than its
// chord that was not in the nodes before.
func (n nodes) wieldy(before nodes) bool {
	fine := func(now, was r2.Vec, chord float64) bool {
		l := r2.Norm(now)
		return now == was || l < longestHandle*chord && l > leastHandle*chord
	}
	for i := range n {
		if !fine(n[i].In, before[i].In, r2.Norm(n.chord(i-1))) || !fine(n[i].Out, before[i].Out, r2.Norm(n.chord(i))) {
			return false
		}
	}
	return true
}

// grasp is a handle that is held while the others give way.
type grasp struct {
	node int
	end  End
}

// holds reports whether turning the knob would move the handle that is held.
func (g *grasp) holds(b knob) bool {
	if g == nil || b.node != g.node {
		return false
	}
	if g.end == Arrives {
		return b.kind != outLen && b.kind != outDir
	}
	return b.kind != inLen && b.kind != inDir
}

// leastStep is the shortest solution of jac step = r; false where there is
// none.
func leastStep(step *mat.VecDense, jac *mat.Dense, r *mat.VecDense) bool {
	var normal mat.Dense
	normal.Mul(jac, jac.T())
	var y mat.VecDense
	if err := y.SolveVec(&normal, r); err != nil {
		return false
	}
	step.MulVec(jac.T(), &y)
	return !math.IsNaN(mat.Norm(step, 2))
}

// knob is what can be turned at a node: the direction of its handles, or the
// length of one.
type knob struct {
	node int
	kind knobKind
}

type knobKind uint8

const (
	both   knobKind = iota // the direction of both handles of a smooth node
	inDir                  // the direction of a handle
	outDir                 //
	inLen                  // the logarithm of a length
	outLen                 //
)

// knobs are those of the free nodes.
func (n nodes) knobs(free []bool) []knob {
	var list []knob
	for i := range n {
		if !free[i] {
			continue
		}
		k := &n[i]
		in, out := k.In != (r2.Vec{}), k.Out != (r2.Vec{})
		switch {
		case k.Joint.tangent() && in && out:
			list = append(list, knob{i, both}, knob{i, inLen}, knob{i, outLen})
		case k.Joint.tangent():
			// The direction is that of the line or arc beside it.
			if in {
				list = append(list, knob{i, inLen})
			}
			if out {
				list = append(list, knob{i, outLen})
			}
		default:
			if in {
				list = append(list, knob{i, inDir}, knob{i, inLen})
			}
			if out {
				list = append(list, knob{i, outDir}, knob{i, outLen})
			}
		}
	}
	return list
}

// turn turns a knob by x: an angle, or the logarithm of a factor.
func (n nodes) turn(b knob, x float64) {
	k := &n[b.node]
	u := plane.Polar(x)
	switch b.kind {
	case both:
		// One direction for both, so that they stay aligned.
		d := plane.Unit(turned(k.Out, u))
		k.In, k.Out = r2.Scale(-r2.Norm(k.In), d), r2.Scale(r2.Norm(k.Out), d)
	case inDir:
		k.In = turned(k.In, u)
	case outDir:
		k.Out = turned(k.Out, u)
	case inLen:
		k.In = r2.Scale(math.Exp(x), k.In)
	case outLen:
		k.Out = r2.Scale(math.Exp(x), k.Out)
	}
}

// knobStep is the step of the difference quotients.
const knobStep = 1e-6

// turns are the derivatives of the jumps at the joints by the knobs.
func (n nodes) turns(at []int, knobs []knob, size float64) *mat.Dense {
	jac := mat.NewDense(len(at), len(knobs), nil)
	row := make(map[int]int, len(at))
	for k, i := range at {
		row[i] = k
	}
	for col, b := range knobs {
		was := n[b.node]
		for _, side := range [2]float64{1, -1} {
			n.turn(b, side*knobStep)
			for d := -1; d <= 1; d++ {
				if k, ok := row[n.wrap(b.node+d)]; ok && (d != 1 || len(n) > 2) {
					jac.Set(k, col, jac.At(k, col)+side*n.unfair(n.wrap(b.node+d), size)/(2*knobStep))
				}
			}
			n[b.node] = was
		}
	}
	return jac
}
