package wish

import (
	"errors"
	"math"

	"cavitywright/sim/study/tolerance"
	"cavitywright/table"

	"gonum.org/v1/gonum/optimize"
)

// Found is what a search has brought so far.
type Found struct {
	*Wish
	Drawn *Try   // the wall as drawn, as it is judged
	Tries []*Try // in order
	// Best is the best sound wall, nil where there is none. At the end of a
	// search for one wish it was measured anew with settledEffort times the
	// bounces, and BestErr is how well each dial is known from the tries about
	// it, not a number where that cannot be said.
	Best    *Try
	BestErr []float64
	// Front are the sound walls of two wishes that no other beats in both, by
	// the first wish.
	Front []*Try
}

const (
	// simplexes are the sizes of the simplex, over the range of each dial, with
	// which the search is begun anew where it ends.
	firstSimplex = 0.2
	lastSimplex  = 1e-5
	shrink       = 0.25
	// stale is the number of iterations a dial without progress that ends a
	// simplex, beside staleMore.
	stale, staleMore = 4, 10
	// firstPart is the part of the tries that evolution has before the simplex.
	firstPart = 0.6
	// settledEffort multiplies the bounces with which the best are measured
	// anew: the best of many noisy values is better than it is.
	settledEffort = 4
	// refused is the cost of a wall that misses nothing much; it grows with
	// what is missed, so that the search finds its way back.
	refused = 1e12
)

// errSpent says that all tries are used up.
var errSpent = errors.New("all tries are used up")

// search is a search at work.
type search struct {
	*Found
	kit    tolerance.Kit
	told   func(*Found, *Try)
	cost   func(*Try) (cost, err float64)
	most   int // tries at the end of this part
	seen   map[string]*Try
	failed error
}

// Search seeks the wall. told, which may be nil, is called after each try. Where
// the kit's error ends the search, Found is what there was by then, with the
// error.
func (w *Wish) Search(kit tolerance.Kit, told func(f *Found, last *Try)) (*Found, error) {
	s := &search{Found: &Found{Wish: w}, kit: kit, told: told, seen: map[string]*Try{}}
	start := w.start()
	drawn, err := w.try(start, w.Plan.Effort, kit)
	if err != nil {
		return s.Found, err
	}
	s.Drawn = drawn
	s.take(start, drawn)
	if w.Fronted() {
		s.front()
	} else {
		s.cost, s.most = first, w.Plan.Tries
		s.descend(w.Plan.Tries, firstSimplex)
		s.settle()
	}
	return s.Found, s.failed
}

func first(y *Try) (float64, float64)  { return y.Cost, y.CostErr }
func second(y *Try) (float64, float64) { return y.Against, y.AgainstErr }

// start are the dials as drawn, held to their ranges.
func (w *Wish) start() []float64 {
	at := make([]float64, len(w.Dials))
	for k, x := range w.Dials {
		v, _ := x.Value(w.Base.Design()) // New has found it
		at[k] = math.Min(math.Max(v, w.Plan.Free[k].Lo), w.Plan.Free[k].Hi)
	}
	return at
}

// unfolded are the dials at a point of the unit box, into which points outside
// are folded back as by mirrors.
func (w *Wish) unfolded(x []float64) []float64 {
	at := make([]float64, len(x))
	for k, f := range w.Plan.Free {
		u := math.Mod(math.Abs(x[k]), 2)
		if u > 1 {
			u = 2 - u
		}
		at[k] = float64(f.Lo*(1-u)) + float64(f.Hi*u)
	}
	return at
}

// folded is the point of the unit box of values of the dials.
func (w *Wish) folded(at []float64) []float64 {
	x := make([]float64, len(at))
	for k, f := range w.Plan.Free {
		x[k] = (at[k] - f.Lo) / (f.Hi - f.Lo)
	}
	return x
}

// take notes a try, and whether it is the best.
func (s *search) take(at []float64, y *Try) {
	y.N = len(s.Tries) + 1
	s.Tries = append(s.Tries, y)
	s.seen[key(s.folded(at))] = y
	if s.Fronted() {
		s.Front = front(s.Tries)
		s.Best = middle(s.Front)
	} else if y.Sound() && (s.Best == nil || y.Cost < s.Best.Cost) {
		s.Best = y
	}
	if s.told != nil {
		s.told(s.Found, y)
	}
}

// best is the best sound try for the cost at hand, nil for none.
func (s *search) best() (best *Try) {
	least := math.Inf(1)
	for _, y := range s.Tries {
		if !y.Sound() {
			continue
		}
		if c, _ := s.cost(y); c < least {
			best, least = y, c
		}
	}
	return best
}

// at is the cost at a point of the unit box.
func (s *search) at(x []float64) float64 {
	at := s.unfolded(x)
	y := s.seen[key(s.folded(at))]
	if y == nil {
		switch {
		case s.failed != nil, len(s.Tries) >= s.most:
			return math.Inf(1)
		}
		var err error
		if y, err = s.try(at, s.Plan.Effort, s.kit); err != nil {
			s.failed = err
			return math.Inf(1)
		}
		s.take(at, y)
	}
	if !y.Sound() {
		away := 0.0
		for k, v := range s.folded(s.Tries[0].At) {
			away += (x[k] - v) * (x[k] - v)
		}
		return refused * (1 + y.Short + math.Sqrt(away))
	}
	c, _ := s.cost(y)
	return c
}

// state ends gonum's search when the tries are used up or the kit has failed.
func (s *search) state() (optimize.Status, error) {
	if s.failed != nil {
		return optimize.Failure, s.failed
	}
	if len(s.Tries) >= s.most {
		return optimize.Failure, errSpent
	}
	return optimize.NotTerminated, nil
}

// descend seeks the least cost with so many tries, from a simplex of a size on.
func (s *search) descend(tries int, size float64) {
	end := min(s.Plan.Tries, len(s.Tries)+tries)
	problem := optimize.Problem{Func: s.at, Status: s.state}
	if s.Plan.Method == table.Evolution && size == firstSimplex {
		s.most = min(end, len(s.Tries)+int(math.Ceil(firstPart*float64(tries))))
		_, _ = optimize.Minimize(problem, s.from(), &optimize.Settings{Converger: s.converger()},
			&optimize.CmaEsChol{InitStepSize: firstSimplex, Src: s.kit.Chance(searchStream)})
	}
	s.most = end
	for ; size >= lastSimplex && s.failed == nil && len(s.Tries) < s.most; size *= shrink {
		// What ends a simplex is known from the tries; its own answer is not
		// needed.
		_, _ = optimize.Minimize(problem, s.from(), &optimize.Settings{Converger: s.converger()}, &optimize.NelderMead{SimplexSize: size})
		if s.noisy(size) {
			break
		}
	}
}

// searchStream is the stream of chance of a search, above those of copies.
const searchStream = 1 << 40

// from is where a search begins: at the best so far.
func (s *search) from() []float64 {
	if best := s.best(); best != nil {
		return s.folded(best.At)
	}
	return s.folded(s.Tries[0].At)
}

// converger ends a search that makes no progress: none beyond a part of the
// error of the cost.
func (s *search) converger() optimize.Converger {
	c := &optimize.FunctionConverge{Relative: 1e-11, Absolute: 1e-14, Iterations: stale*len(s.Dials) + staleMore}
	if best := s.best(); best != nil {
		if _, e := s.cost(best); e > 0 {
			c.Absolute = 0.25 * e
		}
	}
	return c
}

// noisy reports whether a smaller simplex about the best would see noise alone:
// the tries within the size differ by no more than a few errors.
func (s *search) noisy(size float64) bool {
	best := s.best()
	if best == nil {
		return false
	}
	c0, e := s.cost(best)
	if e == 0 {
		return false
	}
	x0 := s.folded(best.At)
	for _, y := range s.Tries {
		if !y.Sound() {
			continue
		}
		far := 0.0
		for k, v := range s.folded(y.At) {
			far = math.Max(far, math.Abs(v-x0[k]))
		}
		if c, _ := s.cost(y); far <= 0.5*size && c-c0 > 3*e {
			return false
		}
	}
	return true
}
