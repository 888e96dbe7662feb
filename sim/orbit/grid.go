package orbit

import (
	"math"
	"math/bits"

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
	// before the grid that takes its nodes beyond mostNodes a bounce: for a wall
	// of cubics without symmetry, up to 10 bounces, half a minute on two
	// processors.
	fruitless = 2
	mostNodes = 6e5
	// fewest is the least number of columns of cells on a piece of wall, where
	// the pieces are no more than a grid has columns.
	fewest = 8
)

// refine tries the words over straight pieces, and unless these are all there
// is, searches on finer and finer grids until they bring nothing new.
func (b *book) refine(list *List, ask Search) error {
	if err := b.level(list, ask); err != nil || list.Words > 0 {
		return err
	}
	side := float64(gridOf2)
	for n := Least + 2; n <= list.UpTo; n += 2 {
		side *= gridGrowth
	}
	most := mostNodes * float64(list.UpTo)
	before, still, done := make([]int, list.UpTo+1), make([]int, list.UpTo+1), 0.0
	for pass := 0; ; pass++ {
		columns := b.columns(int(side))
		nodes := side * float64(len(columns))
		if pass > fruitless && done+nodes > most {
			return nil
		}
		told := func(share float64) { ask.Told((done+share*nodes)/most, b.count()) }
		if err := b.scan(list.UpTo, int(side), columns, ask, told); err != nil {
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
		done += nodes
		side *= finer
	}
}

// count is the number of entries of the book.
func (b *book) count() (n int) {
	for _, of := range b.of {
		n += len(of)
	}
	return n
}

// column is a column of a grid: its nodes stand at s, ds wide.
type column struct{ s, ds float64 }

// columns are those of a grid of about side cells: even in s by half in length
// and by half in the turn of the wall, so that small posts get their share. Of
// columns that a symmetry of the wall maps into each other one is taken: what is
// found from it brings what would be found from the others.
func (b *book) columns(side int) (all []column) {
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
		n := max(least, int(math.Ceil(share*float64(side))))
		ds := p.Length / float64(n)
		for k := range n {
			if s := p.S0 + (float64(k)+0.5)*ds; b.first(s, p.Loop) {
				all = append(all, column{s, ds})
			}
		}
	}
	return all
}

// first reports whether no symmetry of the wall maps s to a lesser arclength.
func (b *book) first(s float64, loop int) bool {
	for i := range b.group {
		if b.group[i].at(b.mirror, s, loop) < s-symmetryTol*b.mirror.Length() {
			return false
		}
	}
	return true
}

const (
	// waves is the number of parts of a scan after each of which the book takes
	// what was found, so that the next leaves it alone; a wave is spread over
	// the wall. wavePieces is the number of pieces of work in a wave.
	waves      = 16
	wavePieces = 16
)

// scan tries the nodes of a grid of about side by side cells, even in the angle
// chi.
func (b *book) scan(upTo, side int, columns []column, ask Search, told func(float64)) error {
	side += side % 2 // chi and -chi are both nodes
	for turn := range waves {
		wave := int(bits.Reverse8(uint8(turn)) >> 4) // first those far from each other
		var mine []column
		for k := wave; k < len(columns); k += waves {
			mine = append(mine, columns[k])
		}
		pieces := make([]*grid, wavePieces)
		err := ask.Spread(wavePieces, func(i int) error {
			part := mine[i*len(mine)/wavePieces : (i+1)*len(mine)/wavePieces]
			if len(part) == 0 {
				return nil
			}
			g := newGrid(b, upTo, side)
			pieces[i] = g
			for _, c := range part {
				if err := ask.Watch(); err != nil {
					return err
				}
				g.column(c)
			}
			g.half = nil
			return nil
		})
		if err != nil {
			return err
		}
		for _, g := range pieces {
			if g == nil {
				continue
			}
			for _, c := range g.found {
				if err := ask.Watch(); err != nil {
					return err
				}
				b.add(c)
			}
		}
		told(float64(turn+1) / waves)
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

// grid is a piece of one scan: some columns of nodes. It reads the book, which
// nobody changes meanwhile, and keeps what it finds.
type grid struct {
	*prover
	book     *book
	own      *book // the isolated orbits found
	found    []*chain
	upTo     int
	half     []half // of the nodes at chi, ascending
	ds, dChi float64
	seed     []float64
	loops    []int
}

func newGrid(b *book, upTo, side int) *grid {
	p := b.another()
	return &grid{prover: p, book: b, own: newBook(p, upTo), upTo: upTo, half: make([]half, side), dChi: math.Pi / float64(side)}
}

// column runs the nodes at s, and tries each with chi > 0 for every period.
// Those with chi < 0 are the same orbits run backwards.
func (g *grid) column(c column) {
	g.ds = c.ds
	side := len(g.half)
	loop := g.mirror.LoopAt(c.s)
	for q := range side {
		g.run(&g.half[q], sim.State{S: c.s, P: math.Sin((float64(q)+0.5)*g.dChi - math.Pi/2)}, loop)
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
	g.seed, g.loops = g.seed[:0], g.loops[:0]
	for k := kb - 1; k > 0; k-- {
		st, j := behind.back(k)
		g.sow(st, j, behind.loop[k], x, y)
	}
	for k := 0; k <= ka; k++ {
		g.sow(ahead.st[k], ahead.j[k], ahead.loop[k], x, y)
	}
	g.grow()
}

func (g *grid) sow(st sim.State, j sim.Jacobian, loop int, x, y float64) {
	ds, _ := j.Apply(x, y)
	g.seed, g.loops = append(g.seed, wrap(&g.mirror.Loops()[loop], st.S+ds)), append(g.loops, loop)
}

// grow polishes the seed and keeps it if it is an orbit that the book has not.
func (g *grid) grow() {
	if g.book.known(g.seed, g.loops) || g.own.known(g.seed, g.loops) {
		return
	}
	c := seedChain(g.mirror, g.seed, g.chart)
	if !c.fill() || c.miss() > seedMiss || g.book.woven(c) || !c.polish(stride*g.mirror.Length()) {
		return
	}
	o, ok := g.prove(c)
	if !ok || g.book.holds(&o) || g.own.holds(&o) {
		return
	}
	if !g.own.marginal(c) {
		if !g.prime(&o) {
			return
		}
		g.own.enter(&o)
	}
	g.found = append(g.found, c)
}
