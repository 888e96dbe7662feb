package orbit

import (
	"math"

	"cavitywright/sim"
)

const (
	// gridOf2 is the number of cells a side of the first grid of a search for
	// two bounces; it grows by gridGrowth for each two more, as the half maps
	// stretch.
	gridOf2    = 84
	gridGrowth = 1.35
	// finer is the ratio of one grid's cells to the next's, no simple fraction,
	// so that the nodes of the grids do not fall together.
	finer = 1.31
	// The search ends after fruitless grids in turn brought nothing new, or
	// after mostGrids.
	fruitless = 2
	mostGrids = 7
	// fewest is the least number of columns of cells on a piece of wall, where
	// the pieces are no more than a grid has columns.
	fewest = 8
)

// refine tries the words over straight pieces, and unless these are all there
// is, searches on finer and finer grids until they bring nothing new.
func (b *book) refine(list *List, watch func() error) error {
	if err := b.level(list, watch); err != nil || list.Words > 0 {
		return err
	}
	side := float64(gridOf2)
	for n := Least + 2; n <= list.UpTo; n += 2 {
		side *= gridGrowth
	}
	before, still := make([]int, list.UpTo+1), make([]int, list.UpTo+1)
	for pass := range mostGrids {
		if err := b.scan(list.UpTo, int(side), watch); err != nil {
			return err
		}
		least := fruitless
		for n, of := range b.of {
			if still[n]++; len(of) > before[n] || pass == 0 {
				still[n] = 0
			}
			before[n] = len(of)
			list.Settled[n] = still[n] >= fruitless
			least = min(least, still[n])
		}
		if least >= fruitless {
			return nil
		}
		side *= finer
	}
	return nil
}

// scan tries the nodes of a grid of about side by side cells: even in the angle
// chi, and in s even by half in length and by half in the turn of the wall, so
// that small posts get their share.
func (b *book) scan(upTo, side int, watch func() error) error {
	side += side % 2 // chi and -chi are both nodes
	g := grid{book: b, upTo: upTo, half: make([]half, side), dChi: math.Pi / float64(side)}
	turns := 0.0
	pieces := b.mirror.Pieces()
	least := min(fewest, 1+fewest*side/len(pieces))
	for i := range pieces {
		turns += math.Abs(pieces[i].Turn)
	}
	for i := range pieces {
		p := &pieces[i]
		share := p.Length / b.mirror.Length()
		if turns > 0 {
			share = 0.5 * (share + math.Abs(p.Turn)/turns)
		}
		columns := max(least, int(math.Ceil(share*float64(side))))
		g.ds = p.Length / float64(columns)
		for k := range columns {
			if err := watch(); err != nil {
				return err
			}
			g.column(p.S0 + (float64(k)+0.5)*g.ds)
		}
	}
	return nil
}

// deepest is the length of the longest half orbit.
const deepest = (MostBounces + 1) / 2

// half is a run of n bounces from a node, with the derivatives by its state.
type half struct {
	n    int
	st   [deepest + 1]sim.State
	loop [deepest + 1]int
	j    [deepest + 1]sim.Jacobian
}

// back is the state k bounces before a node, with its derivative, of the run
// from the node with p turned about.
func (h *half) back(k int) (sim.State, sim.Jacobian) {
	j := h.j[k]
	return h.st[k].Reversed(), sim.Jacobian{SS: j.SS, SP: -j.SP, PS: -j.PS, PP: j.PP}
}

// grid is one scan: a column of nodes at a time.
type grid struct {
	*book
	upTo     int
	half     []half // of the nodes at chi, ascending
	ds, dChi float64
	seed     []float64
}

// column runs the nodes at s, and tries each with chi > 0 for every period.
// Those with chi < 0 are the same orbits run backwards.
func (g *grid) column(s float64) {
	side := len(g.half)
	loop := g.mirror.LoopAt(s)
	for q := range side {
		g.run(&g.half[q], sim.State{S: s, P: math.Sin((float64(q)+0.5)*g.dChi - math.Pi/2)}, loop)
	}
	for q := side / 2; q < side; q++ {
		for n := Least; n <= g.upTo; n++ {
			g.try(&g.half[q], &g.half[side-1-q], n)
		}
	}
}

func (g *grid) run(h *half, st sim.State, loop int) {
	h.n, h.st[0], h.loop[0], h.j[0] = 0, st, loop, sim.Identity()
	if g.w.Start(st).Stop != sim.Going {
		return
	}
	pieces := g.mirror.Pieces()
	for h.n < (g.upTo+1)/2 {
		b := g.w.Next(0)
		if b.Stop != sim.Going {
			return
		}
		j := g.w.Jacobian().Times(h.j[h.n])
		h.n++
		h.st[h.n], h.loop[h.n], h.j[h.n] = b.State, pieces[b.Piece].Loop, j
	}
}

// try looks for an orbit of n bounces near a node: the state at which its ends
// forwards and backwards meet, to first order.
func (g *grid) try(ahead, behind *half, n int) {
	ka, kb := (n+1)/2, n/2
	if ahead.n < ka || behind.n < kb || ahead.loop[ka] != behind.loop[kb] {
		return
	}
	loop := &g.mirror.Loops()[ahead.loop[ka]]
	a, ja := ahead.st[ka], ahead.j[ka]
	b, jb := behind.back(kb)
	cell := g.dChi * math.Sqrt((1-ahead.st[0].P)*(1+ahead.st[0].P))
	m := meeting{
		a11: (ja.SS - jb.SS) * g.ds / g.mirror.Length(), a12: (ja.SP - jb.SP) * cell / g.mirror.Length(),
		a21: (ja.PS - jb.PS) * g.ds, a22: (ja.PP - jb.PP) * cell,
		b1: apart(loop, a.S, b.S) / g.mirror.Length(), b2: b.P - a.P,
	}
	x, y, ok := m.solve()
	if !ok {
		return
	}
	x, y = x*g.ds, y*cell
	g.seed = g.seed[:0]
	for k := kb - 1; k > 0; k-- {
		st, j := behind.back(k)
		g.sow(st, j, behind.loop[k], x, y)
	}
	for k := 0; k <= ka; k++ {
		g.sow(ahead.st[k], ahead.j[k], ahead.loop[k], x, y)
	}
	g.grow(newChain(g.mirror, g.seed))
}

func (g *grid) sow(st sim.State, j sim.Jacobian, loop int, x, y float64) {
	ds, _ := j.Apply(x, y)
	g.seed = append(g.seed, wrap(&g.mirror.Loops()[loop], st.S+ds))
}
