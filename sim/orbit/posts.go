package orbit

import (
	"math"
	"slices"

	"cavitywright/table"
	"cavitywright/table/curve"

	"gonum.org/v1/gonum/spatial/r2"
)

// Posts reports whether the table is of the first kind of the package's
// comment: posts in the open plane, each strictly convex and without corners.
func Posts(t *table.Table) bool {
	if !t.Open() || len(t.Loops()) < 2 {
		return false
	}
	for i := range t.Pieces() {
		p := &t.Pieces()[i]
		if p.Corner || p.Kind == curve.Segment || !(p.Turn < 0) {
			return false
		}
	}
	return true
}

// mostLetters is the greatest length of words over so many posts, up to which
// there are no more than MostWords.
func mostLetters(posts int) int {
	n, sum := 1, 0.0
	for sum <= MostWords && n < 64 {
		n++
		sum += words(posts, n)
	}
	return n - 1
}

// words is about the number of cyclic words of n letters, no letter repeated,
// each in both senses.
func words(posts, n int) float64 {
	if posts < 2 {
		return 0
	}
	return (math.Pow(float64(posts-1), float64(n)) + float64(posts-1)) / float64(n)
}

// cyclicWords calls yield with each prime cyclic word of n letters below k in
// which no letter follows itself, one of each pair that are each other's
// reverse; it stops at an error.
func cyclicWords(k, n int, yield func([]int) error) error {
	w := make([]int, n)
	var grow func(at int) error
	grow = func(at int) error {
		if at == n {
			if w[0] != w[n-1] && leads(w) {
				return yield(w)
			}
			return nil
		}
		for x := w[0]; x < k; x++ { // no letter below the first: another turn leads
			if x != w[at-1] {
				w[at] = x
				if err := grow(at + 1); err != nil {
					return err
				}
			}
		}
		return nil
	}
	for w[0] = 0; w[0] < k; w[0]++ {
		if err := grow(1); err != nil {
			return err
		}
	}
	return nil
}

// leads reports whether the word is the first, in the order of a dictionary, of
// its turns and their reverses, and is no repetition.
func leads(w []int) bool {
	n := len(w)
	for d := range n {
		for _, sense := range []int{1, -1} {
			order := 0
			for i := 0; i < n && order == 0; i++ {
				order = w[((d+sense*i)%n+n)%n] - w[i]
			}
			if order < 0 || order == 0 && sense == 1 && d > 0 {
				return false
			}
		}
	}
	return true
}

// wordsAtOnce is the number of words that are tried between two merges, and
// wordPieces the number of pieces of work that they make.
const (
	wordsAtOnce = 4096
	wordPieces  = 16
)

// spell tries every word.
func (b *book) spell(list *List, ask Search) error {
	places := placesOf(b.mirror)
	list.Settled[0], list.Settled[1] = true, true
	ahead := 0.0
	for n := Least; n <= list.UpTo; n++ {
		ahead += words(len(b.mirror.Loops()), n)
	}
	for n := Least; n <= list.UpTo; n++ {
		list.Settled[n] = true
		var batch [][]int
		flush := func() error {
			pieces := make([]speller, wordPieces)
			err := ask.Spread(wordPieces, func(i int) error {
				s := &pieces[i]
				*s = speller{p: b.another(), places: places}
				for k := i * len(batch) / wordPieces; k < (i+1)*len(batch)/wordPieces; k++ {
					if err := ask.Watch(); err != nil {
						return err
					}
					if !s.try(batch[k]) {
						s.open++
					}
				}
				return nil
			})
			if err != nil {
				return err
			}
			for i := range pieces {
				for k := range pieces[i].found {
					b.enter(&pieces[i].found[k])
				}
				list.Settled[n] = list.Settled[n] && pieces[i].open == 0
			}
			list.Words += len(batch)
			batch = batch[:0]
			ask.Told(math.Min(float64(list.Words)*2/ahead, 1), b.count())
			return nil
		}
		err := cyclicWords(len(b.mirror.Loops()), n, func(w []int) error {
			if batch = append(batch, slices.Clone(w)); len(batch) < wordsAtOnce {
				return nil
			}
			return flush()
		})
		if err == nil {
			err = flush()
		}
		if err != nil {
			return err
		}
	}
	return nil
}

// speller tries words over the posts.
type speller struct {
	p      *prover
	places [][]place // of each post
	found  []Orbit
	open   int // words that could not be decided
}

// place is a point of a post to start from.
type place struct {
	s  float64
	at r2.Vec
}

// placesOfAPost is the number of points of a post among which a start is
// chosen: a start within 6 degrees.
const placesOfAPost = 64

func placesOf(t *table.Table) [][]place {
	all := make([][]place, len(t.Loops()))
	for k, l := range t.Loops() {
		for i := range placesOfAPost {
			s := l.S0 + (l.S1-l.S0)*float64(i)/placesOfAPost
			all[k] = append(all[k], place{s, t.At(s).Point})
		}
	}
	return all
}

// try looks for the orbit of the word. It answers whether the word is decided:
// the orbit was found, or the shortest string is known and is no orbit because
// it runs through a post.
func (s *speller) try(w []int) bool {
	c := newChain(s.p.mirror, s.start(w))
	if !s.shorten(c) {
		return false
	}
	for i := range w {
		if in, out := c.cosines(i); in+out <= 0 {
			return true // the string pulls this post's corner inwards: it is shorter through the post
		}
	}
	o, ok := s.p.prove(c)
	if ok {
		s.found = append(s.found, o)
	}
	return ok || o.Closure == blocked
}

// start chooses, post by post and three times round, the place that makes the
// string shortest.
func (s *speller) start(w []int) []float64 {
	n := len(w)
	at := make([]place, n)
	for i, k := range w {
		at[i] = s.places[k][0]
	}
	for range 3 {
		for i, k := range w {
			a, b := at[(i+n-1)%n].at, at[(i+1)%n].at
			best := math.Inf(1)
			for _, x := range s.places[k] {
				if d := r2.Norm(r2.Sub(x.at, a)) + r2.Norm(r2.Sub(x.at, b)); d < best {
					best, at[i] = d, x
				}
			}
		}
	}
	all := make([]float64, n)
	for i := range at {
		all[i] = at[i].s
	}
	return all
}

// shorten moves the chain to its least length: Newton's steps with the
// directions in which the length is not convex turned about, halved until they
// shorten; then polished.
func (s *speller) shorten(c *chain) bool {
	const steps, halvings = 60, 40
	if !c.fill() {
		return false
	}
	stride := math.Inf(1) // a twelfth of a turn of the smallest post
	for _, k := range c.loop {
		l := &c.t.Loops()[k]
		stride = math.Min(stride, (l.S1-l.S0)/12)
	}
	from := make([]corner, len(c.at))
	for range steps {
		e, ok := c.eigen()
		if !ok {
			return false
		}
		convex := true
		for k, v := range e.values {
			convex = convex && v > 0
			e.values[k] = math.Abs(v)
		}
		if convex && c.miss() < 1e-3 {
			return c.polish(stride)
		}
		copy(from, c.at)
		c.along(&e)
		length, share := c.length, 1.0
		for range halvings {
			copy(c.at, from)
			if c.step(stride, share) && c.fill() && c.length < length {
				break
			}
			share *= 0.5
		}
	}
	return false
}
