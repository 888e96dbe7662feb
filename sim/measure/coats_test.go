package measure_test

import (
	"math"
	"slices"
	"testing"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/table"
	"cavitywright/table/wall"

	"pgregory.net/rapid"
)

// TestCoatsAct draws coats over each other on the sides of a rectangle and on a
// bare wall with a law, and holds the stretches to the topmost coat at each
// place: apart, in order, joined where they are one, over the start of the wall
// too.
func TestCoatsAct(t *testing.T) {
	laws := []wall.Law{wall.Mirror{}, wall.Opening{}, wall.Lossy{Reflectivity: 0.5}, wall.Dielectric{Index: 3.3, Outside: 1}, wall.Rough{Share: 1}}
	rapid.Check(t, func(rt *rapid.T) {
		law := rapid.SampledFrom(laws)
		var coats []table.Coat
		for range rapid.IntRange(0, 6).Draw(rt, "coats") {
			a := rapid.Float64Range(0, 0.9).Draw(rt, "from")
			if rapid.Bool().Draw(rt, "whole") {
				a = 0
			}
			b := math.Min(1, a+rapid.SampledFrom([]float64{0.1, 0.4, 1}).Draw(rt, "width"))
			coats = append(coats, table.Coat{Side: rapid.IntRange(-1, 3).Draw(rt, "side"), From: a, To: b, Law: law.Draw(rt, "law")})
		}
		d := studied(t, "rectangle", []float64{2, 1}, table.Study{}, coats...).Table().Design()
		d.Bare = law.Draw(rt, "bare")
		tab, err := table.New(d)
		if err != nil {
			rt.Fatal(err)
		}
		acts := func(s float64) wall.Law {
			top := tab.Law()
			for _, x := range tab.Stretches() {
				if x.S0 < s && s < x.S1 {
					top = x.Law
				}
			}
			return top
		}
		all := measure.Coats(tab)
		for k := range 997 {
			s := tab.Length() * (float64(k) + 0.3217) / 997
			i := slices.IndexFunc(all, func(c measure.Coated) bool {
				return c.S0 < s && s < c.S1 || c.S0 < s+tab.Length() && s+tab.Length() < c.S1
			})
			want := acts(s)
			switch {
			case i < 0 && want != wall.Law(wall.Mirror{}):
				rt.Fatalf("at s = %g acts %v, but no stretch is there: %+v", s, want, all)
			case i >= 0 && all[i].Law != want:
				rt.Fatalf("at s = %g acts %v, but there lies %+v", s, want, all[i])
			}
		}
		for i := 1; i < len(all); i++ {
			if all[i].S0 < all[i-1].S1 || all[i].S0 == all[i-1].S1 && all[i].Law == all[i-1].Law {
				rt.Fatalf("the stretches %+v overlap, or are one", all)
			}
		}
	})
}

// TestGapsAreDrawn: on walls of several loops, with openings anywhere, the wall
// that is drawn and the openings make up the whole, each post stands at the end
// of an opening, and no wall is drawn within one.
func TestGapsAreDrawn(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		var coats []table.Coat
		for range rapid.IntRange(1, 5).Draw(rt, "coats") {
			a := rapid.SampledFrom([]float64{0, 0.2, 0.5, 0.85}).Draw(rt, "from")
			coats = append(coats, table.Coat{Side: rapid.IntRange(0, 4).Draw(rt, "side"), From: a, To: a + 0.15, Law: wall.Opening{}})
		}
		tab := studied(t, "square-with-disc", []float64{2, 0.5}, table.Study{}, coats...).Table()
		all := measure.Coats(tab)
		round := func(c measure.Coated) (length, start float64) {
			l := tab.Loops()[c.Loop]
			return l.S1 - l.S0, l.S0
		}
		sum, posts := 0.0, 0
		for _, c := range all {
			sum += c.S1 - c.S0
		}
		for _, l := range measure.Outline(tab, 1e-4) {
			switch {
			case l.Role == figure.JointMark && l.Texture == figure.Gap:
				posts++
				x, y := (l.X[0]+l.X[1])/2, (l.Y[0]+l.Y[1])/2
				if !slices.ContainsFunc(all, func(c measure.Coated) bool {
					length, start := round(c)
					for _, s := range []float64{c.S0, c.S1} {
						if s >= start+length {
							s -= length
						}
						if p := tab.At(s).Point; math.Hypot(p.X-x, p.Y-y) < 1e-9 {
							return true
						}
					}
					return false
				}) {
					rt.Fatalf("a post stands at (%g, %g), where no opening ends: %+v", x, y, all)
				}
			case l.Role == figure.Wall && l.Closed:
				// Loop 0 is the square, loop 1 the disc: the one without a gap.
				length := tab.Loops()[0].S1
				if l.At[0] > 0 {
					length = tab.Length() - length
				}
				sum += length
			case l.Role == figure.Wall:
				from, to := l.At[0]*tab.Length(), l.At[len(l.At)-1]*tab.Length()
				sum += to - from
				for _, c := range all {
					length, start := round(c)
					if from < start-1e-9 || to > start+length+1e-9 {
						continue // the wall of another loop
					}
					for _, turn := range []float64{0, length} {
						if (turn == 0 || c.S1 > start+length) && from < c.S1-turn-1e-9 && to > c.S0-turn+1e-9 {
							rt.Fatalf("wall is drawn from %g to %g, over the opening %+v", from, to, c)
						}
					}
				}
			}
		}
		if math.Abs(sum-tab.Length()) > 1e-9 || posts != 2*len(all) {
			rt.Fatalf("wall and openings make up %g of %g, with %d posts: %+v", sum, tab.Length(), posts, all)
		}
	})
}

// TestCoatsOnAxis: the coats stand on the s axis where they lie on the wall, in
// either sense; the critical lines of each dielectric stretch (p = outer over
// inner index, Snell) cross that stretch alone, as p and as chi in degrees.
func TestCoatsOnAxis(t *testing.T) {
	coats := []table.Coat{
		{Side: 0, From: 0.25, To: 0.5, Law: wall.Dielectric{Index: 2, Outside: 1}},
		{Side: 3, From: 0.5, To: 1, Law: wall.Opening{}},
		{Side: 0, From: 0, To: 0.1, Law: wall.Opening{}}, // goes on over the start
	}
	for _, sense := range []table.Sense{table.CounterClockwise, table.Clockwise} {
		tr := studied(t, "rectangle", []float64{2, 1}, table.Study{Display: table.Display{Sense: sense, Momentum: table.Angle}}, coats...)
		f := measure.NewSection(tr.Table()).Axes(tr.Table(), table.WholeSection())
		if n := len(measure.Coats(tr.Table())); n != 2 || len(f.X.Coats) != 3 {
			t.Fatalf("%d stretches and %d on the axis, want 2 and 3", n, len(f.X.Coats))
		}
		lo, hi := 0.5, 1.0
		if sense == table.Clockwise {
			lo, hi = 5, 5.5
		}
		c := f.X.Coats[0]
		if c.Texture != figure.Double || math.Abs(c.Lo-lo) > 1e-12 || math.Abs(c.Hi-hi) > 1e-12 {
			t.Errorf("the dielectric stands at %+v, want %g to %g", c, lo, hi)
		}
		var at []float64
		for _, m := range f.Y.Marks {
			if m.Kind == figure.Critical && math.Abs(m.From-lo) < 1e-12 && math.Abs(m.To-hi) < 1e-12 {
				at = append(at, m.At)
			}
		}
		slices.Sort(at)
		if len(at) != 2 || math.Abs(at[0]+30) > 1e-9 || math.Abs(at[1]-30) > 1e-9 {
			t.Errorf("the critical lines stand at %v degrees, want ±30", at)
		}
		width := 0.0
		for _, c := range f.X.Coats[1:] {
			width += c.Hi - c.Lo
		}
		if math.Abs(width-0.7) > 1e-12 {
			t.Errorf("the opening is %g wide on the axis, want 0.7", width)
		}
	}
}

// TestCoatsDrawn: each stretch is one line with its texture beside an unbroken
// wall, an opening a gap with two posts even where it runs over the start of the
// wall, and the legend has only what occurs.
func TestCoatsDrawn(t *testing.T) {
	tr := studied(t, "limacon", []float64{1, 0.43}, table.Study{Launches: []table.Launch{{S: 0.4, P: 0.2}}, Bounces: 3},
		table.Coat{From: 0.2, To: 0.4, Law: wall.Rough{Share: 0.3}},
		table.Coat{From: 0.9, To: 1, Law: wall.Opening{}}, table.Coat{From: 0, To: 0.1, Law: wall.Opening{}},
		table.Coat{From: 0.3, To: 0.5, Law: wall.Dielectric{Index: 3.3, Outside: 1, Polarisation: wall.TE}})
	length := tr.Table().Length()
	f := raysOf(t, tr, 3)
	posts, walls := 0, 0
	textures := map[figure.Texture]float64{}
	for _, l := range f.Lines {
		switch l.Role {
		case figure.Wall:
			walls++
			for _, at := range l.At {
				if at < 0 || at > 1 {
					t.Errorf("the wall has a place %g, which is none", at)
				}
			}
		case figure.JointMark:
			if l.Texture == figure.Gap {
				posts++
			}
		case figure.Coat:
			for i := 1; i < len(l.X); i++ {
				textures[l.Texture] += math.Hypot(l.X[i]-l.X[i-1], l.Y[i]-l.Y[i-1])
			}
		}
	}
	// An opening that leaves the start of the wall alone: the wall begins at 0
	// and ends at 1, so that its colours meet there.
	away := studied(t, "limacon", []float64{1, 0.43}, table.Study{}, table.Coat{From: 0.2, To: 0.3, Law: wall.Opening{}})
	var ends []float64
	for _, l := range measure.Outline(away.Table(), 1e-4) {
		if l.Role == figure.Wall {
			ends = append(ends, l.At[0], l.At[len(l.At)-1])
		}
	}
	if len(ends) != 4 || ends[0] != 0 || math.Abs(ends[1]-0.2) > 1e-9 || math.Abs(ends[2]-0.3) > 1e-9 || math.Abs(ends[3]-1) > 1e-15 || ends[3] > 1 {
		t.Errorf("the wall around an opening runs over %v", ends)
	}
	open := studied(t, "disc", []float64{1}, table.Study{}, table.Coat{From: 0, To: 1, Law: wall.Opening{}})
	roles := map[figure.Role]int{}
	for _, l := range measure.Outline(open.Table(), 1e-4) {
		roles[l.Role]++
	}
	if roles[figure.Wall] != 0 || roles[figure.JointMark] != 0 || roles[figure.Coat] != 1 {
		t.Errorf("a wall that is open all around is drawn as %v, want one faint line", roles)
	}
	if posts != 2 || walls != 1 {
		t.Errorf("%d posts and %d pieces of wall are drawn, want 2 and 1", posts, walls)
	}
	for x, want := range map[figure.Texture]float64{figure.Saw: 0.1 * length, figure.Double: 0.2 * length, figure.Dotted: 0} {
		if math.Abs(textures[x]-want) > 1e-3*length {
			t.Errorf("texture %d is %g long, want %g", x, textures[x], want)
		}
	}
	var keys []string
	for _, k := range f.Keys {
		keys = append(keys, k.Text)
	}
	want := []string{"opening, width 1.315 µm", "dielectric, n = 3.3 to 1, TE", "rough, 30 % scattered"}
	if !slices.Equal(keys, want) {
		t.Errorf("the legend reads %q, want %q", keys, want)
	}
	if k := portraitOf(t, tr).X.Keys; len(k) != 3 || k[1].Text != want[1]+", dashed at the critical p = ±0.303" {
		t.Errorf("the portrait's legend reads %+v", k)
	}
	if bare := studied(t, "disc", []float64{1}, table.Study{}); len(measure.Keys(bare.Table())) != 0 || len(measure.Coats(sim.Compile(bare.Table()).Table())) != 0 {
		t.Error("a bare mirror has a legend")
	}
}
