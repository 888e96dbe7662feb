package chaos

import (
	"math"
	"slices"

	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/table"
)

// Island is a connected region of regular orbits on the section.
type Island struct {
	Loop    int     // of the wall
	S, P    float64 // its middle, s in the table's unit
	Winds   bool    // it goes once around its loop, and S says nothing
	Cells   int
	Share   float64 // of the section (of ds dp)
	Err     float64 // standard error of Share, binomial
	Chain   int     // number of its chain, from 1 in the order of their size
	Members int     // islands of the chain
	Period  int     // bounces after which an orbit of the chain is back on this island; 0 where that is not told
}

// Survey is what a map of the section shows: seas and islands. The map tells
// each cell by the growth of a tangent vector over Each bounces.
type Survey struct {
	Table         *table.Table // with mirrors
	Columns, Rows int
	Each          int
	Islands       []Island // of at least LeastCells cells, the largest first
	Chains        int      // number of chains of islands
	Seas          int      // chaotic parts that no orbit was seen to join, of at least SeaShare of the section each
	Regular       float64  // share of all regular cells, islands or not
	Small         float64  // share of regular cells in regions too small to count as islands
	Blank         int      // cells whose orbits stopped
	Map           *measure.Mosaic
}

const (
	// LeastCells is the number of cells from which a region counts as an
	// island: a single orbit that sticks to one for long looks regular, too.
	LeastCells = 6
	// SeaShare is the share of the section from which a chaotic part counts as
	// a sea of its own.
	SeaShare = 0.005
	// chainBounces is the length of the orbit that joins the islands of a
	// chain, seaBounces of the one that joins parts of a sea.
	chainBounces = 512
	seaBounces   = 20_000
)

// Cell is the number of the cells of a survey along each side, at effort 1, and
// SurveyBounces the bounces from each.
const (
	SurveyCells   = 200
	SurveyBounces = 500
)

// MeasureSurvey maps the section of the table off mirrors; effort multiplies
// the number of cells.
func MeasureSurvey(tr *sim.Tracer, run measure.Runner, effort float64) (*Survey, error) {
	// An even number, so that no row lies at p = 0: orbits that run to and fro
	// between parallel walls are none of its area, and would fill it.
	n := 2 * max(int(SurveyCells/2*math.Sqrt(effort/measure.Slowness(tr.Table()))), 8)
	return NewSurvey(tr, run, n, n, SurveyBounces)
}

// NewSurvey maps the section by columns by rows cells and each bounces a cell.
func NewSurvey(tr *sim.Tracer, run measure.Runner, columns, rows, each int) (*Survey, error) {
	bare, err := Mirrored(tr)
	if err != nil {
		return nil, err
	}
	d := bare.Table().Design()
	d.Study.Display = table.Display{} // even in ds dp, whatever is shown
	plain, err := table.New(d)
	if err != nil {
		return nil, err
	}
	bare = sim.Compile(plain)
	m := measure.NewMosaic(plain, Growth{Tracer: bare, Bounces: each}, table.WholeSection(), columns, rows)
	if err := m.Fill(run); err != nil {
		return nil, err
	}
	s := &Survey{Table: plain, Columns: columns, Rows: rows, Each: each, Map: m, Blank: m.Blank()}
	regular, chaotic := kinds(m, each)
	s.findIslands(bare, regular)
	s.findSeas(bare, chaotic)
	return s, nil
}

func (s *Survey) findIslands(tr *sim.Tracer, regular []bool) {
	r := newRegions(s.Table, s.Columns, s.Rows, regular, four)
	class, period := r.classes(tr, chainBounces, LeastCells)
	all := float64(s.Columns*s.Rows - s.Blank)
	chain := map[int][]int{}
	for i, cells := range r.cells {
		share := float64(len(cells)) / all
		s.Regular += share
		if len(cells) < LeastCells {
			s.Small += share
			continue
		}
		chain[class[i]] = append(chain[class[i]], len(s.Islands))
		x, p, winds := r.middle(int32(i + 1))
		s.Islands = append(s.Islands, Island{
			Loop: s.Table.LoopAt(r.at(cells[0]).S), S: x, P: p, Winds: winds, Cells: len(cells),
			Share: share, Err: math.Sqrt(share * (1 - share) / all), Chain: class[i], Period: period[i],
		})
	}
	s.number(chain)
}

// number puts the islands in order and numbers their chains by size.
func (s *Survey) number(chain map[int][]int) {
	type size struct {
		class, cells int
	}
	var order []size
	for class, members := range chain {
		n := 0
		for _, i := range members {
			n += s.Islands[i].Cells
			s.Islands[i].Members = len(members)
		}
		order = append(order, size{class, n})
	}
	slices.SortFunc(order, func(a, b size) int {
		if a.cells != b.cells {
			return b.cells - a.cells
		}
		return a.class - b.class
	})
	at := map[int]int{}
	for i, o := range order {
		at[o.class] = i + 1
	}
	for i := range s.Islands {
		s.Islands[i].Chain = at[s.Islands[i].Chain]
	}
	s.Chains = len(order)
	slices.SortStableFunc(s.Islands, func(a, b Island) int { return b.Cells - a.Cells })
}

func (s *Survey) findSeas(tr *sim.Tracer, chaotic []bool) {
	least := max(LeastCells, int(SeaShare*float64(s.Columns*s.Rows)))
	r := newRegions(s.Table, s.Columns, s.Rows, chaotic, eight)
	class, _ := r.classes(tr, seaBounces, least)
	seas := map[int]bool{}
	for i := range r.cells {
		if len(r.cells[i]) >= least {
			seas[class[i]] = true
		}
	}
	s.Seas = len(seas)
}
