package table

import (
	"math"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// Joint is where two sides meet (or a loop closes): at S, with the angle Turn
// (radians, positive left) by which the tangent jumps and the jump of the
// curvature. The interior angle is pi - Turn.
type Joint struct {
	S          float64
	At         r2.Vec
	Piece      int // the piece that begins here
	Continuity Continuity
	Turn       float64
	Jump       float64 // curvature after minus before, 1/length
}

// Continuity says what is continuous at a joint.
type Continuity uint8

// The kinds of joint.
const (
	Corner    Continuity = iota // the tangent jumps
	Tangent                     // the tangent is continuous, the curvature jumps
	Curvature                   // the curvature is continuous too
)

func (c Continuity) String() string {
	return [...]string{"corner", "tangent", "curvature-continuous"}[c]
}

const (
	// smoothTurn is the turn (radians) up to which a joint counts as smooth:
	// what is left of a tangent computed twice, with a wide margin, and far
	// below the least angle to a wall that the tracer follows (1e-7).
	smoothTurn = 1e-9
	// sameCurvature is the jump of curvature, relative to the curvatures and
	// to the size of the table, that counts as none.
	sameCurvature = 1e-8
)

// findJoints fills the corners of the pieces and the list of joints.
func (t *Table) findJoints() {
	size := plane.Diagonal(t.box)
	for li := range t.loops {
		l := &t.loops[li]
		for i := l.First; i < l.Last; i++ {
			p := &t.pieces[i]
			q := &t.pieces[p.Prev]
			if p.Whole() {
				continue
			}
			_, in := q.Ends()
			out, _ := p.Ends()
			turn := plane.Angle(in, out)
			if math.Abs(turn) > math.Pi-smoothTurn {
				turn = t.cuspTurn(l, i)
			}
			p.Corner = math.Abs(turn) > smoothTurn
			if p.Side == q.Side && i != l.First && !p.Corner {
				continue
			}
			before, after := q.FrameAt(q.T1).Curvature, p.FrameAt(p.T0).Curvature
			j := Joint{S: p.S0, At: p.A, Piece: i, Turn: turn, Jump: after - before, Continuity: Tangent}
			switch {
			case p.Corner:
				j.Continuity = Corner
			case math.Abs(j.Jump) <= sameCurvature*(math.Abs(after)+math.Abs(before)+1/size):
				j.Continuity = Curvature
			}
			if p.Side == q.Side && j.Continuity == Curvature {
				continue // where a closed curve begins, nothing happens
			}
			t.joints = append(t.joints, j)
		}
	}
}

// cuspTurn is +pi or -pi, where the tangent turns right about: all turns of a
// loop add up to a full turn, positive for an outer loop, negative for an
// obstacle.
func (t *Table) cuspTurn(l *Loop, at int) float64 {
	sum := 0.0
	for i := l.First; i < l.Last; i++ {
		p := &t.pieces[i]
		sum += p.Turn
		if i != at {
			_, in := t.pieces[p.Prev].Ends()
			out, _ := p.Ends()
			sum += plane.Angle(in, out)
		}
	}
	want := 2 * math.Pi
	if l.Side != 0 {
		want = -want
	}
	return math.Copysign(math.Pi, want-sum)
}

// InteriorAngle is the angle of the table at the joint, in (0, 2 pi].
func (j Joint) InteriorAngle() float64 { return math.Pi - j.Turn }
