package sim_test

import (
	"fmt"
	"math"
	"testing"

	"cavitywright/sim"
	"cavitywright/table"
	"cavitywright/table/curve"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
	"gonum.org/v1/gonum/stat/distuv"
)

// thorough is n, or with -short a twentieth of it, at least least.
func thorough(n, least int) int {
	if testing.Short() {
		return max(n/20, least)
	}
	return n
}

func (r *drawing) state(tab *table.Table) sim.State {
	for {
		if p := r.between(-1, 1); math.Abs(p) < 1 {
			return sim.State{S: r.Float64() * tab.Length(), P: p}
		}
	}
}

// termsOf is the size of the terms of which a Jacobian's determinant is the sum,
// from the formula in its documentation.
func termsOf(tab *table.Table, a, b sim.Bounce) float64 {
	c0, c1 := math.Sqrt((1-a.P)*(1+a.P)), math.Sqrt((1-b.P)*(1+b.P))
	k0, k1, l := math.Abs(tab.At(a.S).Curvature), math.Abs(tab.At(b.S).Curvature), b.Flight
	return ((l*k0+c0)*(l*k1+c1) + l*(c1*k0+c0*k1+l*k0*k1)) / (c0 * c1)
}

// TestDeterminant: every step off mirrors keeps ds dp (Birkhoff 1927), so the
// determinant of its Jacobian is 1 to the rounding of the terms.
func TestDeterminant(t *testing.T) {
	seed := seedOf(t)
	steps := 0
	for number := range uint64(thorough(300, 30)) {
		r := draw(seed, number)
		tab := r.table()
		w := sim.Compile(tab).Walker()
		for range 40 {
			a := w.Start(r.state(tab))
			for a.N < 5 && a.Stop == sim.Going {
				b := w.Next(0)
				if b.Stop != sim.Going {
					break
				}
				steps++
				terms := termsOf(tab, a, b)
				if off := math.Abs(w.Jacobian().Det() - 1); !(off <= 1e-14*(1+terms)) {
					t.Fatalf("seed %d table %d: from %+v to %+v the determinant is 1 %+g, terms %g%s", seed, number, a.State, b.State, off, terms, dump(tab.Design()))
				}
				a = b
			}
		}
	}
	t.Logf("%d steps", steps)
}

// TestJacobianIsTheDerivative compares the Jacobian with central differences,
// extrapolated from two widths; where the map is not smooth enough for them to
// agree, the step is counted, not compared.
func TestJacobianIsTheDerivative(t *testing.T) {
	seed := seedOf(t)
	compared, rough, worst := 0, 0, 0.0
	for number := range uint64(thorough(400, 40)) {
		r := draw(seed, number)
		tab := r.table()
		w := sim.Compile(tab).Walker()
		at := newPlace(tab)
		for range 25 {
			st := r.state(tab)
			// Rounding of coordinates over the width of a difference.
			noise := 16 * at.rounding / (at.size * width(st))
			w.Start(st)
			if b := w.Next(0); b.Stop != sim.Going {
				continue
			}
			j := w.Jacobian()
			got := [4]float64{j.SS, j.PS, j.SP, j.PP}
			want, spread, ok := differences(tab, w, st)
			if !ok {
				rough++
				continue
			}
			l := tab.Length()
			unit := [4]float64{1, l, 1 / l, 1} // what makes an entry a pure number
			scale := 0.0
			for i, g := range got {
				scale = math.Max(scale, math.Abs(g)*unit[i])
			}
			sharp := true
			for i := range got {
				sharp = sharp && spread[i]*unit[i] < 1e-7*(1+scale)
			}
			if !sharp {
				rough++
				continue
			}
			compared++
			for i := range got {
				off := math.Abs(got[i]-want[i]) * unit[i] / (1 + scale)
				worst = math.Max(worst, off)
				if off > 4*spread[i]*unit[i]/(1+scale)+1e-8+noise {
					t.Fatalf("seed %d table %d: from %+v entry %d is %v, differences give %v ± %v%s", seed, number, st, i, got[i], want[i], spread[i], dump(tab.Design()))
				}
			}
		}
	}
	t.Logf("%d steps compared, worst %.2g; %d too rough for differences", compared, worst, rough)
	if compared < rough {
		t.Error("too few steps are smooth enough to be compared")
	}
}

// width is the half width of a difference: of P, and of S/L.
func width(st sim.State) float64 { return 1e-5 * math.Min(1, 1-math.Abs(st.P)) }

// differences are (ds'/ds, dp'/ds, ds'/dp, dp'/dp) by Richardson's rule from
// central differences of two widths, with the change that it made. ok is false
// where the four orbits meet different pieces of wall.
func differences(tab *table.Table, w *sim.Walker, st sim.State) (want, spread [4]float64, ok bool) {
	l := tab.Length()
	from, _ := tab.Locate(st.S)
	h := width(st)
	piece := -1
	var rows [2][4]float64
	for k, step := range []float64{h, h / 2} {
		for e, d := range []sim.State{{S: step * l}, {P: step}} {
			var ends [2]sim.State
			for i, sign := range []float64{1, -1} {
				start := sim.State{S: st.S + sign*d.S, P: st.P + sign*d.P}
				if start.S < 0 || start.S >= l {
					return want, spread, false
				}
				at, _ := tab.Locate(start.S)
				w.Start(start)
				b := w.Next(0)
				if piece < 0 {
					piece = b.Piece
				}
				if at != from || b.Stop != sim.Going || b.Piece != piece {
					return want, spread, false
				}
				ends[i] = b.State
			}
			lp := tab.Loops()[tab.Pieces()[piece].Loop]
			ds := math.Remainder(ends[0].S-ends[1].S, lp.S1-lp.S0)
			rows[k][2*e] = ds / (2 * (d.S + d.P))
			rows[k][2*e+1] = (ends[0].P - ends[1].P) / (2 * (d.S + d.P))
		}
	}
	for i := range want {
		want[i] = rows[1][i] + (rows[1][i]-rows[0][i])/3
		spread[i] = math.Abs(rows[1][i]-rows[0][i]) / 3
	}
	return want, spread, true
}

// norm is the Frobenius norm of a Jacobian with lengths in units of l.
func norm(j sim.Jacobian, l float64) float64 {
	return math.Sqrt(j.SS*j.SS + j.SP*j.SP/(l*l) + j.PS*j.PS*l*l + j.PP*j.PP)
}

// TestReversal: ten bounces forward, turned round, and ten back lead to the
// start. The rounding of each step there (1e-15 of the length, more where the
// table is small and far from the origin) is carried back
// to the start by the inverse of the steps before it; that stretches as much as
// they do, their determinant being 1.
func TestReversal(t *testing.T) {
	seed := seedOf(t)
	const there = 10
	compared, wild, worst := 0, 0, 0.0
	for number := range uint64(thorough(300, 30)) {
		r := draw(seed, number)
		tab := r.table()
		l := tab.Length()
		rounding := math.Max(1e-15, newPlace(tab).rounding/l)
		w := sim.Compile(tab).Walker()
	orbits:
		for range 40 {
			st := r.state(tab)
			b := w.Start(st)
			stretch := 1.0
			for b.N < there {
				if b = w.Next(0); b.Stop != sim.Going {
					continue orbits
				}
				stretch *= norm(w.Jacobian(), l)
			}
			expected := rounding * stretch
			if expected > 1e-5 {
				wild++ // the derivative says nothing of deviations as large as that
				continue
			}
			back := w.Start(b.State.Reversed())
			for back.N < there && back.Stop == sim.Going {
				back = w.Next(0)
			}
			if back.Stop != sim.Going {
				t.Errorf("seed %d table %d: from %+v, the way back ended: %v%s", seed, number, st, back.Stop, dump(tab.Design()))
				continue
			}
			compared++
			end := back.State.Reversed()
			lp := tab.Loops()[tab.LoopAt(st.S)]
			off := math.Max(math.Abs(math.Remainder(end.S-st.S, lp.S1-lp.S0))/l, math.Abs(end.P-st.P))
			worst = math.Max(worst, off/expected)
			if off > 10*expected {
				t.Errorf("seed %d table %d: from %+v there and back misses by %g, stretching %g%s", seed, number, st, off, stretch, dump(tab.Design()))
			}
		}
	}
	t.Logf("%d orbits compared, worst %.3g of what was expected; %d wild", compared, worst, wild)
	if compared < 1000 && !testing.Short() {
		t.Error("too few orbits are tame enough to be compared")
	}
}

// TestMeanChord: single flights even in ds dp have the mean pi A / L, with L
// the length of all loops (Santaló, Integral Geometry and Geometric
// Probability, 1976, ch. 3; with obstacles Chernov, J. Stat. Phys. 88, 1, 1997).
func TestMeanChord(t *testing.T) {
	seed := seedOf(t)
	flights := thorough(200_000, 10_000)
	for number := range uint64(thorough(36, 6)) {
		r := draw(seed, number)
		tab := r.closed()
		tr := sim.Compile(tab)
		w := tr.Walker()
		sum, squares := 0.0, 0.0
		for range flights {
			w.Start(r.state(tab))
			b := w.Next(0)
			if b.Stop == sim.Lost || b.Stop == sim.Escaped {
				t.Fatalf("seed %d table %d: %v", seed, number, b.Stop)
			}
			sum += b.Flight
			squares += b.Flight * b.Flight
		}
		n := float64(flights)
		mean := sum / n
		stderr := math.Sqrt((squares/n - mean*mean) / n)
		if off := mean - sim.MeanChord(tab); !(math.Abs(off) < 4*stderr) {
			t.Errorf("seed %d table %d: mean flight %v ± %v, pi A / L = %v, %.1f standard errors off%s",
				seed, number, mean, stderr, sim.MeanChord(tab), off/stderr, dump(tab.Design()))
		}
	}
}

// TestUniformStaysUniform: what is even in ds dp stays so under the map, by
// chi-square on 8 x 8 cells after one and after five bounces (Pearson 1900).
func TestUniformStaysUniform(t *testing.T) {
	seed := seedOf(t)
	const side, unlikely = 8, 1e-6
	orbits := thorough(40_000, 6_400)
	for number := range uint64(thorough(24, 4)) {
		r := draw(seed, number)
		tab := r.closed()
		w := sim.Compile(tab).Walker()
		var cells [6][side * side]int
		counted := [6]int{}
		for range orbits {
			b := w.Start(r.state(tab))
			for b.N < 5 {
				if b = w.Next(0); b.Stop != sim.Going {
					break // a corner or a tangency, of measure zero
				}
				s, p := int(side*b.S/tab.Length()), int(side*(b.P+1)/2)
				cells[b.N][min(s, side-1)*side+min(p, side-1)]++
				counted[b.N]++
			}
		}
		for _, n := range []int{1, 5} {
			expected := float64(counted[n]) / (side * side)
			chi2 := 0.0
			for _, k := range cells[n] {
				d := float64(k) - expected
				chi2 += d * d / expected
			}
			if counted[n] < orbits-orbits/1000 {
				t.Errorf("seed %d table %d: only %d of %d orbits reach bounce %d", seed, number, counted[n], orbits, n)
			}
			if p := (distuv.ChiSquared{K: side*side - 1}).Survival(chi2); p < unlikely {
				t.Errorf("seed %d table %d: after %d bounces chi-square is %.1f on %d cells, odds %.1g%s", seed, number, n, chi2, side*side, p, dump(tab.Design()))
			}
		}
	}
}

// TestOrbitsStayInside: no ray is lost, every bounce lies on the wall and obeys
// the law of reflection, and every flight runs inside the table.
func TestOrbitsStayInside(t *testing.T) {
	seed := seedOf(t)
	var stops [sim.Stops]int
	bounces, failures := 0, 0
	for number := range uint64(thorough(500, 50)) {
		r := draw(seed, number)
		tab := r.table()
		w := sim.Compile(tab).Walker()
		place := newPlace(tab)
		for range 30 {
			before := r.aim(tab).open(w)
			for before.N < 40 && before.Stop == sim.Going {
				b := w.Next(0)
				stops[b.Stop]++
				bounces++
				if wrong := place.check(before, b); wrong != "" {
					t.Errorf("seed %d table %d: %s; before %+v, now %+v%s", seed, number, wrong, before, b, dump(tab.Design()))
					if failures++; failures > 5 {
						return
					}
					break
				}
				before = b
			}
		}
	}
	t.Logf("%d bounces, stops %v", bounces, stops)
}

// place holds bounces to a table.
type place struct {
	tab          *table.Table
	size, length float64
	rounding     float64 // of a coordinate
}

func newPlace(tab *table.Table) place {
	c := newScan(tab)
	return place{tab, c.size, tab.Length(), c.eps}
}

func (k place) check(before, b sim.Bounce) string {
	if b.Stop == sim.Lost {
		return "a ray is lost"
	}
	if b.Stop == sim.Escaped {
		if k.tab.Open() {
			return ""
		}
		return "a ray left a closed table"
	}
	if b.Stop != sim.Going && b.Piece < 0 {
		return "" // undecided at no piece: it has no place on the wall
	}
	if !(b.S >= 0 && b.S < k.length) || !(math.Abs(b.P) <= 1) {
		return "no state of the section"
	}
	f := k.tab.At(b.S)
	along := r2.Scale(b.Flight, before.Dir)
	switch off := 1e-11*k.size + 4*k.rounding; {
	case r2.Norm(r2.Sub(f.Point, b.Point)) > off:
		return fmt.Sprintf("S and Point are %g apart", r2.Norm(r2.Sub(f.Point, b.Point)))
	case r2.Norm(r2.Sub(r2.Add(before.Point, along), b.Point)) > off:
		return fmt.Sprintf("the flight leads to a place %g from Point", r2.Norm(r2.Sub(r2.Add(before.Point, along), b.Point)))
	}
	if mid := r2.Add(before.Point, r2.Scale(0.5, along)); !k.tab.Contains(mid) && k.fromWall(mid) > 1e-11*k.size+16*k.rounding {
		return "the flight runs outside the table"
	}
	if b.Stop != sim.Going {
		return ""
	}
	if off := math.Abs(r2.Norm(b.Dir) - 1); off > 1e-14 {
		return fmt.Sprintf("Dir is no unit vector, by %g", off)
	}
	// Directions are known to the rounding of S, over which the wall turns,
	// and to that of coordinates along the piece, and across it where it is
	// part of a thin ellipse.
	p := &k.tab.Pieces()[b.Piece]
	turn := 1e-13 + math.Abs(f.Curvature)*(1e-15*k.length+4*k.rounding) + 8*k.rounding/p.Length
	if p.Kind == curve.Oval {
		turn += 4 * k.rounding / math.Min(p.Radius, p.Minor)
	}
	in := plane.Dot(before.Dir, f.Tangent)
	cos := math.Sqrt((1 - b.P) * (1 + b.P))
	out := r2.Add(r2.Scale(b.P, f.Tangent), r2.Scale(cos, f.Normal()))
	switch {
	case math.Abs(in-b.P) > turn:
		return fmt.Sprintf("P is %v, a mirror makes %v, off by %g where S is known to %g rad", b.P, in, math.Abs(in-b.P), turn)
	case r2.Norm(r2.Sub(out, b.Dir)) > turn/math.Max(cos, 1e-8):
		return fmt.Sprintf("Dir is %v, P makes %v", b.Dir, out)
	case plane.Dot(before.Dir, f.Normal()) > turn:
		return "the wall is met from outside"
	}
	return ""
}

// fromWall is the distance of x from the wall, by samples and golden section.
func (k place) fromWall(x r2.Vec) float64 {
	away := func(s float64) float64 { return r2.Norm(r2.Sub(k.tab.At(k.tab.Wrap(s)).Point, x)) }
	const n = 20_000
	best, at := math.Inf(1), 0.0
	for i := range n {
		if d := away(k.length * float64(i) / n); d < best {
			best, at = d, k.length*float64(i)/n
		}
	}
	lo, hi := at-k.length/n, at+k.length/n
	for hi-lo > 1e-15*k.length {
		third := (hi - lo) / 3
		if away(lo+third) < away(hi-third) {
			hi -= third
		} else {
			lo += third
		}
	}
	return away(0.5 * (lo + hi))
}

// TestNothingAllocated: a bounce allocates nothing.
func TestNothingAllocated(t *testing.T) {
	seed := seedOf(t)
	for number := range uint64(40) {
		r := draw(seed, number)
		tab := r.table()
		w := sim.Compile(tab).Walker()
		states := make([]sim.State, 64)
		for i := range states {
			states[i] = r.state(tab)
		}
		i := 0
		got := testing.AllocsPerRun(500, func() {
			if b := w.Last(); b.N == 0 || b.Stop != sim.Going || b.N > 20 {
				i++
				w.Start(states[i%len(states)])
			}
			w.Next(0)
			w.Jacobian()
		})
		if got != 0 {
			t.Errorf("seed %d table %d: %v allocations a bounce%s", seed, number, got, dump(tab.Design()))
		}
	}
}
