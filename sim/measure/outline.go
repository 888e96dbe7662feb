package measure

import (
	"math"

	"cavitywright/sim/figure"
	"cavitywright/table"
	"cavitywright/table/curve"

	"gonum.org/v1/gonum/spatial/r2"
)

// Outline is the wall of a table as lines of a drawing: the floor, the wall
// with the fraction s/L at each point, and the joints. Curves become chords
// that stay within chordError (in the table's unit) of them; only the drawing
// is made of chords, rays never run on them.
func Outline(t *table.Table, chordError float64) []figure.Line {
	var floor, walls, joints []figure.Line
	for _, l := range t.Loops() {
		w := figure.Line{Role: figure.Wall, Closed: true}
		for i := l.First; i < l.Last; i++ {
			p := &t.Pieces()[i]
			n := chords(&p.Span, chordError)
			for k := range n {
				x := p.T0 + (p.T1-p.T0)*float64(k)/float64(n)
				at := p.FrameAt(x).Point
				w.X, w.Y = append(w.X, at.X), append(w.Y, at.Y)
				w.At = append(w.At, (p.S0+p.S(x))/t.Length())
			}
		}
		w.X, w.Y = append(w.X, w.X[0]), append(w.Y, w.Y[0])
		w.At = append(w.At, l.S1/t.Length())
		walls = append(walls, w)
		floor = append(floor, figure.Line{Role: figure.Floor, Closed: true, X: w.X, Y: w.Y})
	}
	if t.Open() {
		floor = nil
	}
	for _, j := range t.Joints() {
		p := &t.Pieces()[j.Piece]
		n := r2.Scale(jointMark*chordError, p.FrameAt(p.T0).Normal())
		joints = append(joints, figure.Line{
			Role: figure.JointMark,
			X:    []float64{j.At.X - n.X, j.At.X + n.X}, Y: []float64{j.At.Y - n.Y, j.At.Y + n.Y},
		})
	}
	return append(append(floor, walls...), joints...)
}

// jointMark is half the length of a joint's mark in chord errors: with a chord
// error of a fifth of a pixel, eight pixels.
const jointMark = 40

// mostChords bounds the chords of one span, for a drawing at absurd zoom.
const mostChords = 400

// chords is the number of equal steps of the parameter in which the span's
// chords stay within e of it: the sagitta of a turn a over a length l is
// l a / 8.
func chords(s *curve.Span, e float64) int {
	if s.Kind == curve.Segment {
		return 1
	}
	n := math.Ceil(math.Sqrt(math.Abs(s.Turn) * s.Length / (8 * e)))
	return int(math.Min(math.Max(n, math.Ceil(math.Abs(s.Turn)/0.15)), mostChords))
}
