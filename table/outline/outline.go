// Package outline takes a wall out of a table and brings one in: the wall as
// lines, arcs and cubics, as chords within a stated error, or moved by a
// uniform bias; and a smooth wall fitted to measured points. What it yields
// says how far it is from the wall, measured on it, not how far was asked for.
//
// Lengths are in the table's unit, y up, the inside of the table on the left.
// A bias moves the wall into the material where it is positive: the table
// becomes larger, obstacles smaller, as by etching or a cutter of that excess.
//
// The package knows no files; package intake below it reads them.
package outline

import (
	"fmt"
	"math"

	"cavitywright/table"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
)

// Kind says what a step of an outline is.
type Kind uint8

// The kinds of step: a line, a circular arc, an arc of an ellipse, a cubic.
const (
	Line Kind = iota
	Arc
	Oval
	Cubic
)

// Step is one step of an outline, from where the one before ended.
type Step struct {
	Kind Kind
	To   r2.Vec
	// Bulge of an Arc is the tangent of a quarter of its sweep, positive to
	// the left. An Arc has its Radius, an Oval both semi-axes, the first at
	// the angle Tilt (radians) from +x, and Sweep of its eccentric angle from
	// From.
	Bulge             float64
	Radius, Minor     float64
	Tilt, From, Sweep float64
	C                 [2]r2.Vec // the inner control points of a Cubic
}

// Path is a loop of an outline, or a stretch of one: the steps of a closed one
// lead back to its start.
type Path struct {
	Side  shape.Side
	Start r2.Vec
	Steps []Step
}

// Form says which steps an outline may have.
type Form uint8

// The forms: all kinds of step; lines and circular arcs; lines alone.
const (
	Curves Form = iota
	Arcs
	Chords
)

// Options are how a wall is taken out. ChordError (> 0) bounds the distance of
// the outline from the wall, up to Grid; Bias moves the wall; a Grid other than
// 0 puts every corner of Chords on its multiples.
type Options struct {
	Form       Form
	ChordError float64
	Bias       float64
	Grid       float64
}

// Outline is a wall taken out of a table.
type Outline struct {
	Paths []Path
	Account
}

// Account says how an outline differs from the wall, after the bias.
type Account struct {
	Achieved        float64 // the greatest distance of the outline from the wall
	Steps           int
	Area, Perimeter float64 // of the wall after the bias; the area of an open table is 0
	AreaOff, Longer float64 // what the outline has more of each
}

// Refusal is why a wall cannot be taken out or brought in: what, where, and
// what to do. Placed tells whether At is a place.
type Refusal struct {
	Text   string
	At     r2.Vec
	Placed bool
}

func (r *Refusal) Error() string { return r.Text }

func refuse(format string, args ...any) *Refusal { return &Refusal{Text: fmt.Sprintf(format, args...)} }

func refuseAt(at r2.Vec, format string, args ...any) *Refusal {
	return &Refusal{Text: fmt.Sprintf(format, args...), At: at, Placed: true}
}

// mostSteps bounds an outline: beyond it the chord error was meant otherwise.
const mostSteps = 2_000_000

// Trace is the wall of a table as an outline. The error is a *Refusal.
func Trace(t *table.Table, o Options) (*Outline, error) {
	size := plane.Diagonal(t.Bounds())
	unit := t.Design().Unit
	switch {
	case !(o.ChordError > 0) || o.ChordError > size:
		return nil, refuse("The chord error is %v %s; it must be above 0 and below the size of the table, %.3g %s.", o.ChordError, unit, size, unit)
	case o.ChordError < leastError*size:
		return nil, refuse("The chord error is %v %s, but of a table of %.3g %s no less than %.2g %s can be held; ask for more.", o.ChordError, unit, size, unit, leastError*size, unit)
	case math.IsNaN(o.Bias) || math.Abs(o.Bias) > size:
		return nil, refuse("The bias is %v %s; it must be less than the size of the table, %.3g %s.", o.Bias, unit, size, unit)
	case !(o.Grid >= 0) || o.Grid > size:
		return nil, refuse("The grid is %v %s; it must be above 0 and below the size of the table, %.3g %s.", o.Grid, unit, size, unit)
	}
	chains := make([]chain, len(t.Loops()))
	for i, l := range t.Loops() {
		c, err := moved(t, l, o.Bias)
		if err != nil {
			return nil, err
		}
		chains[i] = c
	}
	if o.Bias != 0 {
		if err := stillApart(t, chains, o.Bias); err != nil {
			return nil, err
		}
	}
	out := &Outline{}
	for _, c := range chains {
		area, length := c.measured()
		out.Perimeter += length
		out.Area += area
	}
	if t.Open() {
		out.Area = 0
	}
	for _, c := range chains {
		p, miss, err := c.written(o, unit)
		if err != nil {
			return nil, err
		}
		out.Paths = append(out.Paths, p)
		out.Achieved = math.Max(out.Achieved, miss)
		out.Steps += len(p.Steps)
	}
	area, length := 0.0, 0.0
	for _, p := range out.Paths {
		area += p.Area()
		length += p.Length()
	}
	if t.Open() {
		area = 0
	}
	out.AreaOff, out.Longer = area-out.Area, length-out.Perimeter
	return out, nil
}

// leastError is the least chord error that can be held, in sizes of the table:
// a thousand times the rounding of a coordinate.
const leastError = 1e-12

// Stretch is the wall of a table from the arclength s0 over length as an open
// outline of lines and arcs, moved by the bias of o: an opening, for example.
func Stretch(t *table.Table, s0, length float64, o Options) (Path, error) {
	c, err := between(t, s0, length, o.Bias)
	if err != nil {
		return Path{}, err
	}
	p, _, err := c.written(o, t.Design().Unit)
	return p, err
}
