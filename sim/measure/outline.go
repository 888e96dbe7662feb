package measure

import (
	"math"
	"slices"

	"cavitywright/sim/figure"
	"cavitywright/table"
	"cavitywright/table/curve"

	"gonum.org/v1/gonum/spatial/r2"
)

// Outline is the wall of a table as lines of a drawing: the floor, the wall
// with the fraction s/L at each point and gaps at its openings, the textures of
// its coats along the inside, and marks at the joints and at the ends of
// openings. Curves become chords that stay within chordError (in the table's
// unit) of them; only the drawing is made of chords, rays never run on them.
func Outline(t *table.Table, chordError float64) []figure.Line {
	var floor, walls, coats, marks []figure.Line
	runs := Coats(t)
	for li := range t.Loops() {
		l := &t.Loops()[li]
		floor = append(floor, figure.Line{Role: figure.Floor, Closed: true})
		walk(t, &floor[li], l.S0, l.S1, chordError)
		floor[li].At = nil
		var gaps []Coated
		for _, r := range runs {
			switch {
			case r.Loop != li:
			case TextureOf(r.Law) == figure.Gap:
				gaps = append(gaps, r)
				marks = append(marks, ends(t, l, r, chordError)...)
			default:
				coats = append(coats, coatLine(t, r, chordError))
			}
		}
		walls = append(walls, between(t, l, gaps, chordError)...)
	}
	if t.Open() {
		floor = nil
	}
	for _, j := range t.Joints() {
		marks = append(marks, across(&t.Pieces()[j.Piece], 0, chordError))
	}
	return slices.Concat(floor, walls, coats, marks)
}

// between is what gaps in the order of s leave of the wall of a loop: one closed
// line where there are none, else the stretches between them, parted at the
// loop's start too.
func between(t *table.Table, l *table.Loop, gaps []Coated, chordError float64) []figure.Line {
	if len(gaps) == 0 {
		w := figure.Line{Role: figure.Wall, Closed: true}
		walk(t, &w, l.S0, l.S1, chordError)
		return []figure.Line{w}
	}
	var walls []figure.Line
	put := func(from, to float64) {
		if from < to {
			w := figure.Line{Role: figure.Wall}
			walk(t, &w, from, to, chordError)
			walls = append(walls, w)
		}
	}
	at := max(l.S0, gaps[len(gaps)-1].S1-(l.S1-l.S0)) // the last may run over the start
	for _, g := range gaps {
		put(at, g.S0)
		at = g.S1
	}
	put(at, l.S1)
	return walls
}

// ends are the posts of an opening; of one in the whole of a loop nothing is
// left but a faint line where it would be.
func ends(t *table.Table, l *table.Loop, r Coated, chordError float64) []figure.Line {
	if r.Whole {
		return []figure.Line{coatLine(t, r, chordError)}
	}
	end := r.S1
	if end >= l.S1 {
		end -= l.S1 - l.S0
	}
	return []figure.Line{post(t, r.S0, chordError), post(t, end, chordError)}
}

// coatLine is the line of a stretch with a texture.
func coatLine(t *table.Table, r Coated, chordError float64) figure.Line {
	c := figure.Line{Role: figure.Coat, Texture: TextureOf(r.Law), Closed: r.Whole}
	l := t.Loops()[r.Loop]
	walk(t, &c, r.S0, min(r.S1, l.S1), chordError)
	if r.S1 > l.S1 {
		walk(t, &c, l.S0, l.S0+r.S1-l.S1, chordError)
	}
	return c
}

// post is the mark of the end of an opening.
func post(t *table.Table, s, chordError float64) figure.Line {
	i, x := t.Locate(s)
	m := across(&t.Pieces()[i], x, chordError)
	m.Texture = figure.Gap
	return m
}

// walk appends the wall between two places of one loop, from <= to, to w.
func walk(t *table.Table, w *figure.Line, from, to, chordError float64) {
	i, _ := t.Locate(from)
	for ; i < len(t.Pieces()) && t.Pieces()[i].S0 < to; i++ {
		p := &t.Pieces()[i]
		along(t, w, p, max(0, from-p.S0), min(to-p.S0, p.Length), chordError)
	}
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
		local := min(max(p.S(x), from), to) // not below 0 by rounding, which would be no place
		w.At = append(w.At, (p.S0+local)/t.Length())
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
