package measure

import (
	"cmp"
	"math"
	"slices"

	"cavitywright/sim/figure"
	"cavitywright/table"
	"cavitywright/table/curve"
	"cavitywright/table/wall"

	"gonum.org/v1/gonum/spatial/r2"
)

// Outline is the wall of a table as lines of a drawing: the floor, the wall
// with the fraction s/L at each point and gaps at its openings, and marks at
// the joints and at the ends of openings. Curves become chords that stay within
// chordError (in the table's unit) of them; only the drawing is made of chords,
// rays never run on them.
func Outline(t *table.Table, chordError float64) []figure.Line {
	var floor, walls, joints []figure.Line
	gaps := openings(t)
	for _, l := range t.Loops() {
		f := figure.Line{Role: figure.Floor, Closed: true}
		w := figure.Line{Role: figure.Wall}
		loop := len(walls)
		for i := l.First; i < l.Last; i++ {
			p := &t.Pieces()[i]
			along(t, &f, p, 0, p.Length, chordError)
			at := 0.0
			for _, o := range gaps[i] {
				along(t, &w, p, at, o.S0-p.S0, chordError)
				walls = appendWall(walls, w)
				w, at = figure.Line{Role: figure.Wall}, o.S1-p.S0
				joints = append(joints, across(p, o.S0-p.S0, chordError), across(p, at, chordError))
			}
			along(t, &w, p, at, p.Length, chordError)
		}
		f.At = nil
		floor = append(floor, f)
		w.Closed = len(walls) == loop
		walls = appendWall(walls, w)
	}
	if t.Open() {
		floor = nil
	}
	for _, j := range t.Joints() {
		joints = append(joints, across(&t.Pieces()[j.Piece], 0, chordError))
	}
	return append(append(floor, walls...), joints...)
}

// openings are, by piece, the stretches that let everything out, in order; the
// wall is drawn with gaps there.
func openings(t *table.Table) map[int][]table.Stretch {
	all := map[int][]table.Stretch{}
	for _, o := range t.Stretches() {
		if _, open := o.Law.(wall.Opening); open {
			all[o.Piece] = append(all[o.Piece], o)
		}
	}
	for _, o := range all {
		slices.SortFunc(o, func(a, b table.Stretch) int { return cmp.Compare(a.S0, b.S0) })
	}
	return all
}

// appendWall adds a stretch of wall unless it is empty.
func appendWall(walls []figure.Line, w figure.Line) []figure.Line {
	if len(w.X) < 2 || w.At[0] == w.At[len(w.At)-1] {
		return walls
	}
	return append(walls, w)
}

// along appends the wall of a piece between two lengths from its start.
func along(t *table.Table, w *figure.Line, p *table.Piece, from, to, chordError float64) {
	if from >= to {
		return
	}
	n := chords(&p.Span, chordError)
	t0, t1 := p.T(from), p.T(to)
	for k := range n + 1 {
		if k == 0 && len(w.X) > 0 {
			continue // the end of the piece before
		}
		x := t0 + (t1-t0)*float64(k)/float64(n)
		at := p.FrameAt(x).Point
		w.X, w.Y = append(w.X, at.X), append(w.Y, at.Y)
		w.At = append(w.At, (p.S0+p.S(x))/t.Length())
	}
}

// across is the mark of a place on the wall: a short stroke across it.
func across(p *table.Piece, local, chordError float64) figure.Line {
	f := p.FrameAt(p.T(local))
	n := r2.Scale(jointMark*chordError, f.Normal())
	return figure.Line{
		Role: figure.JointMark,
		X:    []float64{f.Point.X - n.X, f.Point.X + n.X}, Y: []float64{f.Point.Y - n.Y, f.Point.Y + n.Y},
	}
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
