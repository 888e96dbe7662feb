package leak

import (
	"cavitywright/sim"
	"cavitywright/sim/measure"
)

// cellsASide is the number of cells along s and along p of the grid in which
// the starts of lasting rays are noted.
const cellsASide = 1024

// Cells is a part of the section: a set of cells of a grid over it.
type Cells struct{ cells []int32 }

// WholeSection is all of the section, as one cell of its own.
func WholeSection() Cells { return Cells{} }

// Share is the part of ds dp that the cells cover.
func (c Cells) Share() float64 {
	if c.cells == nil {
		return 1
	}
	return float64(len(c.cells)) / (cellsASide * cellsASide)
}

// At is the place in the section, as fractions of its sides, that stands at
// the fractions u and v of the cells laid side by side: even u and v are even
// in ds dp over the cells.
func (c Cells) At(u, v float64) (float64, float64) {
	if c.cells == nil {
		return u, v
	}
	x := u * float64(len(c.cells))
	i := min(int(x), len(c.cells)-1)
	k := c.cells[i]
	return (float64(k%cellsASide) + x - float64(i)) / cellsASide, (float64(k/cellsASide) + v) / cellsASide
}

// Lasting follows rays from one lattice over the whole section, and notes the
// cells from which one lasts Each bounces.
type Lasting struct {
	Tracer *sim.Tracer
	Points measure.Fibonacci
	Shift  measure.Shift
	Each   int
}

// Orbits is the number of points of the lattice.
func (l Lasting) Orbits() int { return l.Points.Size() }

// Bounces is Each.
func (l Lasting) Bounces() int { return l.Each }

// Start is point i of the lattice.
func (l Lasting) Start(i int, _ func() float64) sim.Start {
	return sim.Start{State: l.Tracer.Uniform(l.Points.At(i, l.Shift))}
}

// Tally is a *LastingTally.
func (l Lasting) Tally() measure.Tally { return &LastingTally{of: l} }

// LastingTally is the starts of the rays that lasted.
type LastingTally struct {
	of     Lasting
	starts []int32 // their cells, in the order of the orbits
	cell   int32
}

// Open does nothing.
func (t *LastingTally) Open(int) {}

// Add takes a bounce.
func (t *LastingTally) Add(b *sim.Bounce) {
	if b.N == 0 {
		s := min(int(b.S/t.of.Tracer.Length()*cellsASide), cellsASide-1)
		p := min(int((b.P+1)/2*cellsASide), cellsASide-1)
		t.cell = int32(p*cellsASide + s)
	}
	if b.N == t.of.Each && b.Stop == sim.Going {
		t.starts = append(t.starts, t.cell)
	}
}

// Close does nothing.
func (t *LastingTally) Close() {}

// Merge appends the next starts.
func (t *LastingTally) Merge(next measure.Tally) {
	t.starts = append(t.starts, next.(*LastingTally).starts...)
}

// Cells are the cells from which a ray lasted, with all cells that touch them;
// the whole section where none did.
func (t *LastingTally) Cells() Cells {
	in := make([]bool, cellsASide*cellsASide)
	for _, k := range t.starts {
		s, p := int(k%cellsASide), int(k/cellsASide)
		for y := max(p-1, 0); y <= min(p+1, cellsASide-1); y++ {
			for x := s - 1; x <= s+1; x++ {
				in[y*cellsASide+(x+cellsASide)%cellsASide] = true
			}
		}
	}
	var c Cells
	for k, is := range in {
		if is {
			c.cells = append(c.cells, int32(k))
		}
	}
	return c
}
