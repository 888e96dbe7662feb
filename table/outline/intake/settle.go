package intake

import (
	"fmt"
	"math"

	"cavitywright/table"
	"cavitywright/table/outline"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
)

// Options are how a drawing becomes a design. Unit is the table's unit; empty
// chooses one that suits the size. Scale (0: 1) multiplies all lengths, or
// Height (0: none, in Unit) is how high the wall is made. A Fit with a
// tolerance lays smooth walls along polygons of many points.
type Options struct {
	Unit   table.Unit
	Scale  float64
	Height float64
	Fit    outline.Fit
}

// Account says what became of a drawing.
type Account struct {
	Loops, Polygons int // of them polygons of enough points to be fitted
	Points          int // of the polygons
	Nodes           int
	// FitWithin is a tolerance that suits the scatter of the points, 0 where
	// there are none.
	FitWithin float64
	// Fitted tells whether a wall was fitted; Residual is then how it lies to
	// its points.
	Fitted   bool
	Residual outline.Residual
	// Moved is how far joints that were nearly smooth moved the wall.
	Moved float64
	Notes []string
}

const (
	// mostCorners is the number of nodes that a table file takes.
	mostCorners = 5000
	// leastFitted is the number of points from which a polygon can be fitted.
	leastFitted = 8
)

// Design is the drawing as a design with a wall and obstacles, and what was
// done for it. The error is a *Fault, an *outline.Refusal or a *table.Fault.
func (d Drawing) Design(o Options) (table.Design, Account, error) {
	a := Account{Loops: len(d.Loops), Notes: append([]string(nil), d.Notes...)}
	out := table.Design{Unit: table.Millimetre, Study: table.DefaultStudy()}
	if o.Scale < 0 || math.IsNaN(o.Scale) || math.IsInf(o.Scale, 0) || o.Height < 0 || math.IsNaN(o.Height) || math.IsInf(o.Height, 0) {
		return out, a, fault("The scale and the height of an outline must be numbers above 0; give one of them.")
	}
	loops, unit := d.sized(o, &a)
	out.Unit = unit
	order, err := sorted(loops, unit)
	if err != nil {
		return out, a, err
	}
	for i, k := range order {
		l := &loops[k]
		it, err := l.item(o.Fit, unit, &a)
		if err != nil {
			return out, a, err
		}
		if i > 0 {
			it.Role = table.Post
		}
		out.Items = append(out.Items, it)
	}
	if a.Nodes > mostCorners {
		return out, a, fault("The outline has %d corners, and a table holds %d; fit a smooth wall to it.", a.Nodes, mostCorners)
	}
	if o.Fit.Tolerance > 0 && !a.Fitted {
		a.Notes = append(a.Notes, fmt.Sprintf("Nothing was fitted: no loop is a polygon of %d points or more.", leastFitted))
	}
	if r := a.Residual; a.Fitted && r.Nodes*crowded > r.Points && r.Points >= crowdOf {
		a.Notes = append(a.Notes, fmt.Sprintf("The fitted wall has %d nodes for %d points and may follow their scatter; a tolerance of %.2g %s would suit it better.", r.Nodes, r.Points, a.FitWithin, unit))
	}
	if _, err := table.New(out); err != nil {
		return out, a, err
	}
	return out, a, nil
}

// A fitted wall with more than a node for every few (crowded) of its points, of
// which there are many (crowdOf), follows what is no wall.
const crowded, crowdOf = 5, 60

// sized is the loops in the unit and size of the table.
func (d Drawing) sized(o Options, a *Account) ([]Loop, table.Unit) {
	unit, k := o.Unit, 1.0
	box := plane.Around()
	for i := range d.Loops {
		box = plane.Join(box, plane.Around(d.Loops[i].corners()...))
	}
	switch {
	case unit == "" && d.Drawn && d.Plain == 0:
		unit = suited(plane.Diagonal(box) * d.Unit.Metres())
		k = d.Unit.Metres() / unit.Metres()
	case unit == "":
		unit = d.Unit
	case d.Plain > 0:
		k = 1 / d.Plain
	default:
		k = d.Unit.Metres() / unit.Metres()
	}
	if d.Plain > 0 && o.Height == 0 {
		switch {
		case o.Unit != "":
			a.Notes = append(a.Notes, fmt.Sprintf("The file states no unit; its numbers were taken as %s.", unit))
		case d.Drawn:
			a.Notes = append(a.Notes, "The drawing states no real size; 1 of its numbers was taken as 1/96 inch.")
		default:
			a.Notes = append(a.Notes, fmt.Sprintf("The table states no unit; %s was taken.", unit))
		}
	}
	if o.Scale > 0 {
		k *= o.Scale
	}
	if high := box.Max.Y - box.Min.Y; o.Height > 0 && high > 0 {
		k = o.Height / high
	}
	m := affine{a: k, d: k}
	loops := make([]Loop, len(d.Loops))
	for i, l := range d.Loops {
		loops[i] = Loop{Name: l.Name, Edges: make([]Edge, len(l.Edges))}
		for j, e := range l.Edges {
			loops[i].Edges[j] = m.edge(e)
		}
	}
	return loops, unit
}

// suited is the unit in which a size (metres) reads well.
func suited(size float64) table.Unit {
	switch {
	case size >= 3:
		return table.Metre
	case size >= 5e-4:
		return table.Millimetre
	case size >= 1e-7:
		return table.Micrometre
	}
	return table.Nanometre
}

// facets is the number of chords of a curved edge by which loops are compared.
const facets = 24

// corners are the ends of the edges, and places along those that are curved.
func (l *Loop) corners() []r2.Vec {
	var p []r2.Vec
	for i := range l.Edges {
		e := &l.Edges[i]
		p = append(p, e.A)
		if e.Kind != outline.Line {
			for k := 1; k < facets; k++ {
				p = append(p, e.at(float64(k)/facets))
			}
		}
	}
	return p
}

// at is the point at the fraction f of the edge's parameter.
func (e *Edge) at(f float64) r2.Vec {
	switch e.Kind {
	case outline.Oval:
		sin, cos := math.Sincos(e.From + e.Sweep*f)
		return r2.Add(e.Centre, r2.Add(r2.Scale(cos, e.U), r2.Scale(sin, e.V)))
	case outline.Cubic:
		u := 1 - f
		p := r2.Add(r2.Scale(u*u*u, e.A), r2.Scale(3*u*u*f, e.C[0]))
		return r2.Add(p, r2.Add(r2.Scale(3*u*f*f, e.C[1]), r2.Scale(f*f*f, e.B)))
	}
	return plane.Lerp(e.A, e.B, f)
}

// sorted are the indices of the loops, the outermost first. Loops that cross,
// or do not lie side by side within one, are refused.
func sorted(loops []Loop, unit table.Unit) ([]int, error) {
	polygons := make([][]r2.Vec, len(loops))
	order := make([]int, len(loops))
	largest := 0.0
	for i := range loops {
		polygons[i], order[i] = loops[i].corners(), i
		area := 0.0
		for k, p := range polygons[i] {
			q := polygons[i][(k+1)%len(polygons[i])]
			area += plane.Cross(r2.Sub(p, polygons[i][0]), r2.Sub(q, polygons[i][0]))
		}
		if area = math.Abs(area); area > largest {
			largest = area
			order[0], order[i] = i, order[0]
		}
	}
	switch at, met := outline.Crossing(polygons); met {
	case outline.Untold:
		return nil, fault("The outline has too many long lines side by side to be checked for crossings; simplify it where it was drawn.")
	case outline.Met:
		return nil, fault("The outline crosses itself at (%.6g, %.6g) %s; mend it where it was drawn.", at.X, at.Y, unit)
	}
	for n, i := range order[1:] {
		at := polygons[i][0]
		if !within(polygons[order[0]], at) {
			return nil, fault("%s, at (%.6g, %.6g) %s, lies outside the largest outline; draw one wall around all, or take it out.", loops[i].Name, at.X, at.Y, unit)
		}
		for _, j := range order[1 : n+1] {
			for _, pair := range [2][2]int{{i, j}, {j, i}} {
				if at := polygons[pair[0]][0]; within(polygons[pair[1]], at) {
					return nil, fault("%s, at (%.6g, %.6g) %s, lies within another obstacle; take one of them out of the drawing.", loops[pair[0]].Name, at.X, at.Y, unit)
				}
			}
		}
	}
	return order, nil
}

// within reports whether a polygon goes around p.
func within(polygon []r2.Vec, p r2.Vec) bool {
	in := false
	for i, a := range polygon {
		b := polygon[(i+1)%len(polygon)]
		if (a.Y > p.Y) != (b.Y > p.Y) && p.X-a.X < (b.X-a.X)*(p.Y-a.Y)/(b.Y-a.Y) {
			in = !in
		}
	}
	return in
}

// item is the loop as an item: a fitted wall, a figure, or a free wall.
func (l *Loop) item(f outline.Fit, unit table.Unit, a *Account) (table.Item, error) {
	it := table.Item{Place: plane.Identity()}
	if l.Polygonal() && len(l.Edges) >= leastFitted {
		a.Polygons++
		a.Points += len(l.Edges)
		a.FitWithin = math.Max(a.FitWithin, outline.FitWithin(l.corners()))
		if f.Tolerance > 0 {
			wall, r, err := outline.Fitted(l.corners(), f, unit)
			if err != nil {
				return it, err
			}
			it.Shape, a.Fitted, a.Residual = wall, true, a.Residual.With(r)
			a.Nodes += r.Nodes
			return it, nil
		}
	}
	if whole, ok := l.whole(); ok {
		return whole, nil
	}
	if len(l.Edges) > mostCorners { // before the work of joining them
		a.Nodes += len(l.Edges)
		return it, nil
	}
	wall, moved := l.freeform()
	it.Shape, a.Moved = wall, math.Max(a.Moved, moved)
	a.Nodes += len(wall.Nodes())
	return it, nil
}

// freeform is the loop as a free wall, and how far nearly smooth joints that
// were made smooth moved it.
func (l *Loop) freeform() (shape.Freeform, float64) {
	strict := shape.NewFreeform(l.nodes(exactly))
	if !l.nearlySmooth() || len(l.Edges) > mostJoined {
		return strict, 0
	}
	joined := shape.NewFreeform(l.nodes(nearly))
	points := l.corners()
	moved := joined.Deviation(points)
	if moved > mostMoved*plane.Diagonal(plane.Around(points...)) {
		return strict, 0
	}
	return joined, moved
}
