// Package shape holds the figures a person draws: each is a value that yields
// the curves of one or more closed loops, in coordinates of its own, and can be
// changed by its handles or its parameters. A shape does not know where it
// stands in a table, which unit its lengths are in, or what its wall does.
package shape

import (
	"fmt"

	"cavitywright/table/curve"
	"cavitywright/table/param"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// Shape is a figure with handles. It is a value: no method changes it.
type Shape interface {
	// Kind is the shape's name in files and on the command line.
	Kind() string
	// Loops are the closed loops of the shape, each with the inside of the
	// table on its left. The error says in one sentence what cannot be built.
	Loops() ([]Loop, error)
	// Handles are what a person can take hold of, in the shape's coordinates.
	Handles() []Handle
	// Moved is the shape after handle i was dragged to a place; the nearest
	// shape that is allowed where that place is not.
	Moved(i int, to r2.Vec) Shape
}

// Loop is a closed chain of curves, each starting where the one before ends.
type Loop struct {
	Side   Side
	Curves []curve.Curve
}

// Side says on which side of a loop the table lies.
type Side uint8

// The sides. The curves of an Outer loop run counter-clockwise, those of an
// Obstacle clockwise.
const (
	Outer Side = iota
	Obstacle
)

// Handle is a point a person can drag.
type Handle struct {
	At   r2.Vec
	Role HandleRole
	// Name is the parameter it changes, or "node 3", "handle 3 out", "bow 3".
	Name string
	// Of is, for a handle that belongs to a node or span of a free wall, that
	// node's or span's index, else -1.
	Of int
}

// HandleRole says what a handle is, so that it can be drawn and grouped.
type HandleRole uint8

// The roles of a handle.
const (
	Grip    HandleRole = iota // changes a parameter
	Anchor                    // a node of a free wall
	Tangent                   // the end of a node's tangent handle
	Bow                       // the middle of an arc span
)

// Figure is a shape given by parameters alone.
type Figure struct {
	kind   *Kind
	values param.Values
}

// Kind is a family of figures. A new one is a file in this package and a line
// in catalogue.go.
type Kind struct {
	// Name is the name in files and on the command line, Title the one a
	// person reads; About is one line: what it is and what is known of it;
	// Formula says how its wall is given.
	Name, Title, About, Formula string
	Specs                       []param.Spec
	// Fits returns a *Fault for values that are each within the range of their
	// Spec but do not go together; nil where the ranges say all.
	Fits func(v param.Values) error
	// Loops builds the loops for values within the ranges that Fits accepts.
	Loops func(v param.Values) []Loop
	// Grips are the handles, at most one a parameter.
	Grips func(v param.Values) []Handle
	// Pull is the values after grip i was dragged to a place; it may write to
	// v. They are held to their ranges, and to what Fits accepts, afterwards.
	Pull func(v param.Values, i int, to r2.Vec) param.Values
}

// New is the figure of the kind called name; values follow the kind's Specs.
func New(name string, v param.Values) (Figure, error) {
	k := Find(name)
	if k == nil {
		return Figure{}, fmt.Errorf("there is no shape %q", name)
	}
	if err := v.Check(k.Specs); err != nil {
		return Figure{}, fmt.Errorf("%s: %w", name, err)
	}
	return Figure{kind: k, values: v}, nil
}

// Find is the kind called name, or nil.
func Find(name string) *Kind {
	for _, k := range Catalogue() {
		if k.Name == name {
			return k
		}
	}
	return nil
}

// Kind is the name of the figure's family.
func (f Figure) Kind() string { return f.kind.Name }

// Family is the figure's family.
func (f Figure) Family() *Kind { return f.kind }

// Values are the figure's parameters, in the order of its family's Specs; they
// must not be changed.
func (f Figure) Values() param.Values { return f.values }

// With is the figure with parameter i set to x, or a *param.RangeError.
func (f Figure) With(i int, x float64) (Figure, error) {
	if err := f.kind.Specs[i].Check(x); err != nil {
		return f, fmt.Errorf("%s: %w", f.kind.Name, err)
	}
	f.values = f.values.With(i, x)
	return f, nil
}

// Loops are the figure's loops. The error is a *Fault.
func (f Figure) Loops() ([]Loop, error) {
	if f.kind.Fits != nil {
		if err := f.kind.Fits(f.values); err != nil {
			return nil, err
		}
	}
	return f.kind.Loops(f.values), nil
}

// Handles are the figure's grips.
func (f Figure) Handles() []Handle { return f.kind.Grips(f.values) }

// Moved pulls grip i. A place that is no number changes nothing.
func (f Figure) Moved(i int, to r2.Vec) Shape {
	if !plane.Finite(to) || to == f.kind.Grips(f.values)[i].At {
		return f
	}
	v := f.kind.Pull(append(param.Values(nil), f.values...), i, to)
	f.values = f.kind.nearest(f.values, f.kind.clamp(v))
	return f
}

func (k *Kind) clamp(v param.Values) param.Values {
	for i, s := range k.Specs {
		v[i] = s.Clamp(v[i])
	}
	return v
}

// nearest is the last of the values on the way from one set that fits to
// another that does, or the other where neither does.
func (k *Kind) nearest(from, to param.Values) param.Values {
	if k.Fits == nil || k.Fits(to) == nil || k.Fits(from) != nil {
		return to
	}
	last, lo, hi := from, 0.0, 1.0
	for range 53 { // the bits of the way
		mid := 0.5 * (lo + hi)
		v := make(param.Values, len(from))
		for i := range v {
			v[i] = from[i]*(1-mid) + to[i]*mid
		}
		if k.clamp(v); k.Fits(v) == nil {
			last, lo = v, mid
		} else {
			hi = mid
		}
	}
	return last
}
