package tool

import (
	"math"
	"strings"
	"testing"

	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/table/wall"
	"cavitywright/ui/session"

	"gonum.org/v1/gonum/spatial/r2"
	"pgregory.net/rapid"
)

// coated is a session on one shape, with the coat tool in hand.
func coated(t interface{ Fatal(...any) }, kind string, values ...float64) (*session.Session, *Editor) {
	f, err := shape.New(kind, param.Values(values))
	if err != nil {
		t.Fatal(err)
	}
	tab, err := table.New(table.Design{Unit: table.Millimetre, Study: table.DefaultStudy(),
		Items: []table.Item{{Shape: f, Place: plane.Identity()}}})
	if err != nil {
		t.Fatal(err)
	}
	s := session.New(tab, "")
	s.Settings.Tool = session.Coats
	return s, NewEditor(s)
}

// stroked presses at the place s0 of the wall, follows the wall to s1 and lets
// go.
func stroked(s *session.Session, e *Editor, s0, s1, step float64, k Keys) {
	on := func(s1 float64) r2.Vec { return s.Table().At(s.Table().Wrap(s1)).Point }
	e.Press(on(s0), reachOnTest, k)
	for i := 1; i <= 20; i++ {
		e.Drag(on(s0+(s1-s0)*float64(i)/20), step, k)
	}
	_ = e.Release()
}

// reachOnTest is how far the pointer reaches in these tests, in units.
const reachOnTest = 0.02

func coatsOf(s *session.Session) []table.Coat { return s.Table().Design().Coats }

// sideWith is the side of the wall that has a length.
func sideWith(t *testing.T, s *session.Session, length float64) sideOf {
	t.Helper()
	for _, x := range sidesOf(s.Table(), 0) {
		if math.Abs(x.s1-x.s0-length) < 1e-9 {
			return x
		}
	}
	t.Fatalf("there is no side %g long", length)
	return sideOf{}
}

// A session: put a 0.3-wide opening on a cut disc and slide it along the wall,
// from the flat over the corner onto the arc and back; every pull is one step.
func TestOpeningOnCutDisc(t *testing.T) {
	s, e := coated(t, "cut-disc", 1, 0.5)
	empty := file(t, s)
	flat := sideWith(t, s, math.Sqrt(3))
	stroked(s, e, flat.s0+0.51, flat.s0+0.79, 0.1, 0) // on the grid of a tenth
	r, ok := SelectedCoat(s)
	if !ok || math.Abs(r.Width-0.3) > 1e-12 || math.Abs(r.From-flat.s0-0.5) > 1e-12 {
		t.Fatalf("laid %+v", r)
	}
	if c := coatsOf(s); len(c) != 1 || c[0].Law != (wall.Opening{}) || c[0].Side != flat.side {
		t.Fatalf("the coats are %+v", c)
	}
	one := file(t, s)
	// Across the corner: a coat on each side of it, together as wide as before.
	stroked(s, e, flat.s0+0.65, flat.s1+0.05, 0, Free)
	if c := coatsOf(s); len(c) != 3 {
		t.Fatalf("Ctrl and pull on a coat lays a new one on top, and one each side; the coats are %+v", c)
	}
	s.Undo()
	stroked(s, e, flat.s0+0.65, flat.s1+0.05, 0, 0)
	if c := coatsOf(s); len(c) != 2 || c[0].To != 1 || c[1].From != 0 || c[0].Side == c[1].Side {
		t.Fatalf("over the corner the coats are %+v", c)
	}
	if r, _ := SelectedCoat(s); math.Abs(r.Width-0.3) > 1e-12 || math.Abs(r.From-(flat.s1-0.1)) > 1e-9 || r.Last != r.First+1 {
		t.Errorf("over the corner the coat is %+v", r)
	}
	// On, wholly onto the arc, by the handle outside the wall.
	h := e.Coats().Handles(reachOnTest)[0].At
	e.Press(h, reachOnTest, 0)
	e.Drag(s.Table().At(s.Table().Wrap(flat.s1+1)).Point, 0, 0)
	_ = e.Release()
	if r, _ := SelectedCoat(s); len(coatsOf(s)) != 1 || math.Abs(r.Width-0.3) > 1e-12 {
		t.Errorf("on the arc the coat is %+v", r)
	}
	// The arc grows; the opening keeps its place on it.
	was := coatsOf(s)[0]
	if err := s.Do(edit.SetValue{Item: 0, Param: 1, Value: 0.7}); err != nil || coatsOf(s)[0] != was {
		t.Errorf("after a drag of the shape the coat is %+v, was %+v (%v)", coatsOf(s), was, err)
	}
	for range 3 {
		s.Undo()
	}
	if file(t, s) != one {
		t.Error("three steps taken back do not give the opening as it was laid")
	}
	s.SelectCoat(0)
	if err := e.Delete(); err != nil || file(t, s) != empty {
		t.Errorf("the coat cannot be taken off: %v", err)
	}
	if err := e.Delete(); err == nil {
		t.Error("nothing is selected, and Delete took it off")
	}
}

// A session: a limaçon of n = 3.3 all around, laid by a double click, changed to
// TE, with an opening on top; each is one step.
func TestDielectricLimacon(t *testing.T) {
	s, e := coated(t, "limacon", 1, 0.43)
	start := file(t, s)
	law, err := session.Brush("dielectric", nil)
	if err != nil || law != (wall.Dielectric{Index: 3.3, Outside: 1}) {
		t.Fatalf("the tool begins with %v (%v)", law, err)
	}
	s.Settings.Law = law
	e.Double(s.Table().At(2).Point, reachOnTest)
	r, ok := SelectedCoat(s)
	if !ok || r.Law != law || math.Abs(r.Width-s.Table().Length()) > 1e-9 {
		t.Fatalf("laid %+v", r)
	}
	te := wall.Dielectric{Index: 3.3, Outside: 1, Polarisation: wall.TE}
	if err := s.Do(r.Relaid(s.Table(), te)); err != nil || coatsOf(s)[0].Law != te {
		t.Fatalf("relaid as %+v (%v)", coatsOf(s), err)
	}
	// A press on a coat that goes all around has nowhere to slide: it lays.
	s.Settings.Law = wall.Opening{}
	stroked(s, e, -0.2, 0.3, 0, Constrain)
	s.Undo()
	stroked(s, e, -0.2, 0.3, 0, 0)
	r, _ = SelectedCoat(s)
	if len(coatsOf(s)) != 3 || math.Abs(r.Width-0.5) > 1e-6 || r.Law != (wall.Opening{}) {
		t.Fatalf("over the start of the wall the opening is %+v of %+v", r, coatsOf(s))
	}
	if i := CoatAt(s.Table(), 0.1); coatsOf(s)[i].Law != (wall.Opening{}) {
		t.Error("the later coat does not lie on top")
	}
	for range 3 {
		s.Undo()
	}
	if file(t, s) != start {
		t.Error("three steps taken back do not give the bare wall")
	}
	// The same as the law of the bare wall, which is no coat.
	if err := s.Do(Barer(s.Table(), te)); err != nil || s.Table().Law() != te || len(coatsOf(s)) != 0 {
		t.Errorf("the bare wall is %v (%v)", s.Table().Law(), err)
	}
	if err := s.Do(Barer(s.Table(), wall.Mirror{})); err != nil || file(t, s) != start {
		t.Errorf("a mirror again is not the table as it was: %v", err)
	}
}

// The ends slide over joints and back; Shift takes whole sides; joints catch.
func TestEndsOverJoints(t *testing.T) {
	s, e := coated(t, "rectangle", 2, 1)
	s.Settings.Law = wall.Lossy{Reflectivity: 0.5}
	sides := sidesOf(s.Table(), 0)
	stroked(s, e, sides[0].s0+0.5, sides[0].s0+1.2, 0, 0)
	one := file(t, s)
	end := sides[0].s0 + 1.2
	stroked(s, e, end, end+1.3, 0, 0) // around the corner
	if c := coatsOf(s); len(c) != 2 || c[1].Side != sides[1].side || math.Abs(c[1].To-0.5) > 1e-9 {
		t.Fatalf("the end went to %+v", c)
	}
	stroked(s, e, end+1.3, end, 0, 0)
	if r, _ := SelectedCoat(s); len(coatsOf(s)) != 1 || math.Abs(r.Width-0.7) > 1e-9 {
		t.Errorf("back again it is %+v, %s", r, one)
	}
	stroked(s, e, end, sides[0].s1-0.01, 0, 0)
	if c := coatsOf(s); len(c) != 1 || c[0].To != 1 {
		t.Errorf("the joint did not catch the end: %+v", c)
	}
	stroked(s, e, sides[2].s0+0.7, sides[3].s0+0.2, 0, Constrain)
	if c := coatsOf(s); len(c) != 3 || c[1].From != 0 || c[2].To != 1 {
		t.Errorf("with Shift the sides are not whole: %+v", c)
	}
	if err := e.Coats().Duplicate(); err != nil || len(coatsOf(s)) < 5 {
		t.Errorf("a duplicate is not laid: %+v (%v)", coatsOf(s), err)
	}
	r, _ := SelectedCoat(s)
	was := s.Table()
	for _, c := range []edit.Command{
		r.Placed(was, 0, 99), r.WithWidth(was, 0), r.WithWidth(was, -1), r.WithFractions(was, 1, 0.5),
	} {
		if err := s.Do(c); err == nil || len(err.Error()) < 20 || strings.Contains(err.Error(), "\n") || s.Table() != was {
			t.Errorf("a coat out of range is answered with %v", err)
		}
	}
}

// Typed numbers: width about the middle, ends apart, fractions, the medium.
func TestTypedCoat(t *testing.T) {
	s, e := coated(t, "rectangle", 2, 1)
	s.Settings.Law = wall.Dielectric{Index: 1.5, Outside: 1}
	stroked(s, e, 0.5, 1, 0, 0)
	run := func() CoatRun { r, _ := SelectedCoat(s); return r }
	do := func(c edit.Command, from, width float64) {
		t.Helper()
		if err := s.Do(c); err != nil || math.Abs(run().From-from) > 1e-9 || math.Abs(run().Width-width) > 1e-9 {
			t.Errorf("typed: from %g, %g wide, want %g, %g (%v)", run().From, run().Width, from, width, err)
		}
	}
	do(run().WithWidth(s.Table(), 0.3), 0.6, 0.3)
	do(run().WithEnd(s.Table(), 2.5), 0.6, 1.9)
	if a, b := run().Sides(s.Table()); a != 0 || b != 1 {
		t.Errorf("the coat lies on the sides %d to %d", a, b)
	}
	do(run().WithFractions(s.Table(), 0.25, 0.75), 0.5, 2.25)
	do(run().WithStart(s.Table(), 1.9), 1.9, 0.85)
	if err := s.Do(Filled(s.Table(), 3.3)); err != nil {
		t.Fatal(err)
	}
	if n, ok := Medium(s.Table()); !ok || n != 3.3 || run().Law != (wall.Dielectric{Index: 3.3, Outside: 1}) {
		t.Errorf("filled with %g, %v: %+v", n, ok, run())
	}
}

// TestLaidIsRead: whatever stretch is laid on whatever wall, what is read back
// is that stretch, one coat a side.
func TestLaidIsRead(t *testing.T) {
	kinds := [][]any{{"cut-disc", 1.0, 0.5}, {"disc", 1.0}, {"rectangle", 2.0, 1.0}, {"mushroom", 1.0, 0.4, 0.8}, {"box-of-posts", 4.0, 2.0, 0.3}}
	rapid.Check(t, func(t *rapid.T) {
		k := rapid.SampledFrom(kinds).Draw(t, "wall")
		var v []float64
		for _, x := range k[1:] {
			v = append(v, x.(float64))
		}
		s, _ := coated(t, k[0].(string), v...)
		loop := rapid.IntRange(0, len(s.Table().Loops())-1).Draw(t, "loop")
		l := s.Table().Loops()[loop]
		round := l.S1 - l.S0
		from := l.S0 + round*rapid.Float64Range(0, 0.999).Draw(t, "from")
		width := round * rapid.Float64Range(1e-3, 1.1).Draw(t, "width")
		coats := lay(s.Table(), loop, from, width, wall.Opening{})
		if err := s.Do(coating(s.Table(), coats, "lay")); err != nil {
			t.Fatal(err)
		}
		r := RunOf(s.Table(), rapid.IntRange(0, len(coats)-1).Draw(t, "coat"))
		sum := 0.0
		for _, x := range s.Table().Stretches() {
			sum += x.S1 - x.S0
		}
		want := math.Min(width, round)
		if math.Abs(sum-want) > 4e-6*round || math.Abs(r.Width-want) > 4e-6*round || r.First != 0 || r.Last != len(coats)-1 || r.Loop != loop {
			t.Fatalf("laid %g wide from %g of %g on loop %d: %+v, read %+v", width, from, round, loop, coats, r)
		}
		if d := math.Abs(r.From - from); width < 0.99*round && math.Min(d, round-d) > 4e-6*round {
			t.Fatalf("laid from %g, read %+v", from, r)
		}
	})
}

// TestRandomCoats: whatever the coat tool's pointer does, undo to the beginning
// brings back the first file byte for byte.
func TestRandomCoats(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s, e := coated(t, "mushroom", 1, 0.4, 0.8)
		first := file(t, s)
		length := s.Table().Length()
		for range rapid.IntRange(1, 10).Draw(t, "gestures") {
			a, b := rapid.Float64Range(0, length).Draw(t, "a"), rapid.Float64Range(0, 2*length).Draw(t, "b")
			switch rapid.IntRange(0, 6).Draw(t, "gesture") {
			case 0, 1, 2:
				stroked(s, e, math.Mod(a, length), b, rapid.SampledFrom([]float64{0, 0.1}).Draw(t, "step"), Keys(rapid.IntRange(0, 3).Draw(t, "keys")))
			case 3:
				k := rapid.SampledFrom(wall.Kinds()).Draw(t, "law")
				s.Settings.Law, _ = wall.Make(k.Name, param.Defaults(k.Specs))
			case 4:
				_ = e.Delete()
			case 5:
				_ = e.Coats().Duplicate()
			case 6:
				e.Press(s.Table().At(math.Mod(a, length)).Point, reachOnTest, 0)
				e.Drag(r2.Vec{X: b, Y: a}, 0, 0)
				e.Cancel()
			}
			_ = e.Hint(s.Table().At(math.Mod(a, length)).Point, reachOnTest)
		}
		for undo, _ := s.Steps(); undo != ""; undo, _ = s.Steps() {
			s.Undo()
		}
		if file(t, s) != first {
			t.Fatal("undo to the beginning does not bring back the first file")
		}
	})
}
