package intake

import (
	"math"

	"cavitywright/table"

	"gonum.org/v1/gonum/spatial/r2"
)

const (
	// meeting is the distance, in sizes of the drawing, within which ends
	// count as one: what six written digits leave open.
	meeting = 2e-6
	// nothing is the length, in sizes of the drawing, of an edge that is
	// dropped: a table takes no side shorter than 1e-7 of its size.
	nothing = 2e-7
	// mostOpen is the number of open rows that are tried against each other.
	mostOpen = 5000
)

// closed are the rows as loops: those that are closed, those whose ends meet,
// and open ones joined end to end. What stays open is refused.
func closed(rows []row, unit table.Unit) ([]Loop, error) {
	lo, hi := box(rows)
	size := math.Hypot(hi.X-lo.X, hi.Y-lo.Y)
	if !(size > 0) || math.IsInf(size, 0) {
		return nil, fault("The drawing has no size, or one beyond all numbers; draw the wall as a closed path.")
	}
	var loops []Loop
	var open []row
	for _, r := range rows {
		a, b := r.edges[0].A, r.edges[len(r.edges)-1].B
		if r.closed || near(a, b, meeting*size) {
			if l := looped(r, size); len(l.Edges) > 0 {
				loops = append(loops, l)
			}
			continue
		}
		open = append(open, r)
	}
	joined, err := joinedUp(open, size, unit)
	if err != nil {
		return nil, err
	}
	if loops = append(loops, joined...); len(loops) == 0 {
		return nil, fault("The drawing encloses nothing; draw the wall as a closed path.")
	}
	return loops, nil
}

func near(a, b r2.Vec, d float64) bool { return r2.Norm(r2.Sub(a, b)) <= d }

// joinedUp joins open rows whose ends meet into loops.
func joinedUp(open []row, size float64, unit table.Unit) ([]Loop, error) {
	if len(open) > mostOpen {
		return nil, fault("The drawing has %d open lines; join them into closed paths first.", len(open))
	}
	var loops []Loop
	for len(open) > 0 {
		r := open[0]
		open = open[1:]
		for found := true; found; {
			end := r.edges[len(r.edges)-1].B
			if near(r.edges[0].A, end, meeting*size) {
				break
			}
			found = false
			for i, o := range open {
				if near(o.edges[len(o.edges)-1].B, end, meeting*size) && !near(o.edges[0].A, end, meeting*size) {
					o = backwards(o)
				}
				if near(o.edges[0].A, end, meeting*size) {
					r.edges = append(append([]Edge(nil), r.edges...), o.edges...)
					open = append(append([]row(nil), open[:i]...), open[i+1:]...)
					found = true
					break
				}
			}
		}
		a, b := r.edges[0].A, r.edges[len(r.edges)-1].B
		if !near(a, b, meeting*size) {
			return nil, fault("%s is open: it begins at (%.6g, %.6g) %s and ends at (%.6g, %.6g) %s, %.3g %s away; close it where it was drawn.",
				r.name, a.X, a.Y, unit, b.X, b.Y, unit, r2.Norm(r2.Sub(a, b)), unit)
		}
		if l := looped(r, size); len(l.Edges) > 0 {
			loops = append(loops, l)
		}
	}
	return loops, nil
}

// backwards is the row run the other way.
func backwards(r row) row {
	edges := make([]Edge, len(r.edges))
	for i := range edges {
		edges[i] = r.edges[len(edges)-1-i].reversed()
	}
	r.edges = edges
	return r
}

func (e Edge) reversed() Edge {
	e.A, e.B = e.B, e.A
	e.C[0], e.C[1] = e.C[1], e.C[0]
	e.From, e.Sweep = e.From+e.Sweep, -e.Sweep
	return e
}

// looped is the row as a loop: edges that are nothing are dropped, and each
// begins where the one before ends.
func looped(r row, size float64) Loop {
	l := Loop{Name: r.name}
	for _, e := range r.edges {
		if near(e.A, e.B, nothing*size) && !e.long(nothing*size) {
			continue
		}
		l.Edges = append(l.Edges, e)
	}
	n := len(l.Edges)
	if n == 0 || n == 1 && !l.Edges[0].long(nothing*size) {
		return Loop{}
	}
	for i := range l.Edges {
		next := &l.Edges[(i+1)%n]
		if i+1 < n {
			next.A = l.Edges[i].B
		} else {
			l.Edges[i].B = next.A
		}
	}
	return l
}

// long reports whether an edge whose ends meet goes somewhere all the same.
func (e *Edge) long(d float64) bool {
	return !near(e.C[0], e.A, d) && e.C[0] != (r2.Vec{}) || !near(e.C[1], e.A, d) && e.C[1] != (r2.Vec{}) || math.Abs(e.Sweep) > 1 && !near(e.U, r2.Vec{}, d)
}
