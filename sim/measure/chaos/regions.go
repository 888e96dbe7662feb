package chaos

import (
	"math"

	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/table"
)

// regions are the connected parts of one kind of a map of the section: the
// cells of regular orbits, or those of chaotic ones. The section is a strip for
// each loop of the wall, closed upon itself along s.
type regions struct {
	columns, rows int
	length        float64
	first, last   []int   // columns of the loop that a column belongs to
	label         []int32 // of each cell: the region, from 1; 0 for none
	cells         [][]int32
	depth         []int32 // of each cell: steps to the nearest cell of another region
}

// newRegions finds the parts of the cells that are in. steps are the neighbours
// of a cell: four, or eight. Regular and chaotic parts are found with one of
// either, or both could cross each other at a corner.
func newRegions(t *table.Table, columns, rows int, in []bool, steps [][2]int) *regions {
	r := &regions{columns: columns, rows: rows, length: t.Length(), label: make([]int32, len(in))}
	r.first, r.last = make([]int, columns), make([]int, columns)
	for c := range columns {
		if c > 0 && r.loop(t, c) == r.loop(t, c-1) {
			r.first[c] = r.first[c-1]
		} else {
			r.first[c] = c
		}
	}
	for c := columns - 1; c >= 0; c-- {
		if r.last[c] = c; c+1 < columns && r.first[c+1] == r.first[c] {
			r.last[c] = r.last[c+1]
		}
	}
	for k := range in {
		if in[k] && r.label[k] == 0 {
			r.flood(int32(k), in, steps)
		}
	}
	r.deepen()
	return r
}

var (
	four  = [][2]int{{1, 0}, {-1, 0}, {0, 1}, {0, -1}}
	eight = append(four[:4:4], [][2]int{{1, 1}, {1, -1}, {-1, 1}, {-1, -1}}...)
)

// loop is the loop of the wall that the middle of a column lies on.
func (r *regions) loop(t *table.Table, column int) int {
	return t.LoopAt((float64(column) + 0.5) / float64(r.columns) * r.length)
}

// flood labels the part that a cell belongs to.
func (r *regions) flood(from int32, in []bool, steps [][2]int) {
	id := int32(len(r.cells) + 1)
	part := []int32{from}
	r.label[from] = id
	for i := 0; i < len(part); i++ {
		for _, d := range steps {
			if k, ok := r.beside(part[i], d); ok && in[k] && r.label[k] == 0 {
				r.label[k] = id
				part = append(part, k)
			}
		}
	}
	r.cells = append(r.cells, part)
}

// beside is the cell one step away: around the loop along s; none beyond p = 1.
func (r *regions) beside(k int32, step [2]int) (int32, bool) {
	c, row := int(k)%r.columns, int(k)/r.columns+step[1]
	if row < 0 || row >= r.rows {
		return 0, false
	}
	lo, hi := r.first[c], r.last[c]
	if c += step[0]; c < lo {
		c = hi
	} else if c > hi {
		c = lo
	}
	return int32(row*r.columns + c), true
}

// deepen finds how deep each cell lies within its region.
func (r *regions) deepen() {
	r.depth = make([]int32, len(r.label))
	var shore []int32
	for k := range r.label {
		for _, d := range four {
			if n, ok := r.beside(int32(k), d); ok && r.label[n] != r.label[k] {
				r.depth[k] = 1
				shore = append(shore, int32(k))
				break
			}
		}
	}
	for i := 0; i < len(shore); i++ {
		for _, d := range four {
			if n, ok := r.beside(shore[i], d); ok && r.label[n] == r.label[shore[i]] && r.depth[n] == 0 {
				r.depth[n] = r.depth[shore[i]] + 1
				shore = append(shore, n)
			}
		}
	}
}

// deepest is the cell of a region that lies deepest in it: the middle one of
// those that do.
func (r *regions) deepest(id int32) int32 {
	var best []int32
	for _, k := range r.cells[id-1] {
		switch {
		case len(best) == 0 || r.depth[k] > r.depth[best[0]]:
			best = append(best[:0], k)
		case r.depth[k] == r.depth[best[0]]:
			best = append(best, k)
		}
	}
	return best[len(best)/2]
}

// at is the state at the middle of a cell.
func (r *regions) at(k int32) sim.State {
	return sim.State{
		S: (float64(int(k)%r.columns) + 0.5) / float64(r.columns) * r.length,
		P: 2*(float64(int(k)/r.columns)+0.5)/float64(r.rows) - 1,
	}
}

// of is the region of a state.
func (r *regions) of(st sim.State) int32 {
	c := min(int(st.S/r.length*float64(r.columns)), r.columns-1)
	row := min(max(int((st.P+1)/2*float64(r.rows)), 0), r.rows-1)
	return r.label[row*r.columns+c]
}

// middle is the mean place of a region's cells, along s around its loop, and
// whether the region winds around the whole loop, where it has no middle in s.
func (r *regions) middle(id int32) (s, p float64, winds bool) {
	cells := r.cells[id-1]
	c0 := int(cells[0]) % r.columns
	lo, n := r.first[c0], r.last[c0]-r.first[c0]+1
	seen := make([]bool, n)
	var x, y float64
	covered := 0
	for _, k := range cells {
		c := int(k)%r.columns - lo
		if !seen[c] {
			seen[c] = true
			covered++
		}
		sin, cos := math.Sincos(2 * math.Pi * (float64(c) + 0.5) / float64(n))
		x, y = x+cos, y+sin
		p += r.at(k).P / float64(len(cells))
	}
	if math.Abs(p) < 1e-12 { // the rounding of a sum of cells on both sides of 0
		p = 0
	}
	turn := math.Atan2(y, x) / (2 * math.Pi)
	if turn -= math.Floor(turn); turn > 1-1e-9 {
		turn = 0
	}
	return (float64(lo) + turn*float64(n)) / float64(r.columns) * r.length, p, covered == n
}

// visits follows an orbit off mirrors and counts its bounces in each region;
// period is the least number of bounces after which it is always back in the
// region where it began, 0 where there is none up to a quarter of n.
func (r *regions) visits(w *sim.Walker, from sim.State, n int) (count map[int32]int, period int) {
	count = map[int32]int{}
	path := make([]int32, 0, n+1)
	for b := w.Start(from); ; b = w.Next(0) {
		if b.Stop != sim.Going {
			break
		}
		id := r.of(b.State)
		path = append(path, id)
		if id != 0 {
			count[id]++
		}
		if b.N >= n {
			break
		}
	}
	for q := 1; q <= len(path)/4; q++ {
		back := true
		for i := 0; i < len(path) && back; i += q {
			back = path[i] == path[0] || path[i] == 0
		}
		if back {
			return count, q
		}
	}
	return count, 0
}

// classes joins the regions that one orbit visits: class of each region, from
// the deepest cell of each, followed for n bounces; period as in visits.
func (r *regions) classes(tr *sim.Tracer, n, leastCells int) (class []int, period []int) {
	class, period = make([]int, len(r.cells)), make([]int, len(r.cells))
	for i := range class {
		class[i] = i
	}
	root := func(i int) int {
		for class[i] != i {
			i = class[i]
		}
		return i
	}
	w := tr.Walker()
	for i := range r.cells {
		if len(r.cells[i]) < leastCells {
			continue
		}
		count, q := r.visits(w, r.at(r.deepest(int32(i+1))), n)
		period[i] = q
		for id, times := range count {
			// Once or twice is a cell at the edge, which is of both kinds.
			if times >= 3 && len(r.cells[id-1]) >= leastCells {
				a, b := root(i), root(int(id)-1)
				class[max(a, b)] = min(a, b)
			}
		}
	}
	for i := range class {
		class[i] = root(i)
	}
	return class, period
}

// kinds tells the cells of a map of growth apart: regular ones and chaotic
// ones; a blank one is neither.
func kinds(m *measure.Mosaic, bounces int) (regular, chaotic []bool) {
	for row := range m.Rows {
		for c := range m.Columns {
			v := m.Value(c, row)
			is := exponential(v*float64(bounces), bounces)
			regular, chaotic = append(regular, !is && !math.IsNaN(v)), append(chaotic, is && !math.IsNaN(v))
		}
	}
	return regular, chaotic
}
