package study_test

import (
	"context"
	"errors"
	"math"
	"reflect"
	"strings"
	"testing"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/reading"
	"cavitywright/sim/orbit"
	"cavitywright/sim/run"
	"cavitywright/sim/study"
	"cavitywright/table"
	"cavitywright/table/dial"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/table/wall"

	"github.com/go-json-experiment/json"
)

// based is the table of one shape under a law.
func based(t testing.TB, law wall.Law, name string, values ...float64) *table.Table {
	t.Helper()
	f, err := shape.New(name, values)
	if err != nil {
		t.Fatal(err)
	}
	tab, err := table.New(table.Design{Name: "Larkmoor trial plate", Unit: table.Millimetre, Bare: law, Study: table.DefaultStudy(),
		Items: []table.Item{{Shape: f, Place: plane.Identity()}}})
	if err != nil {
		t.Fatal(err)
	}
	return tab
}

func kit(workers int) study.Kit {
	ctx := context.Background()
	return study.Kit{Spread: run.Spread(ctx, workers), Watch: ctx.Err, Run: func(tr *sim.Tracer, seed uint64) measure.Runner {
		return func(m measure.Measurement) (measure.Tally, error) {
			return run.Run(ctx, run.Job{Tracer: tr, Measure: m, Seed: seed, Workers: workers})
		}
	}}
}

// carried is a sweep that was carried out.
func carried(t testing.TB, base *table.Table, s table.DialSweep, workers int) *study.Result {
	t.Helper()
	st, err := study.New(base, s)
	if err != nil {
		t.Fatal(err)
	}
	r := study.NewResult(st)
	for i := range st.Tasks() {
		row, err := st.Take(i, kit(workers))
		if err != nil {
			t.Fatal(err)
		}
		r.Add(row)
	}
	if !r.Whole() {
		t.Fatal("the result is not whole")
	}
	return r
}

func sweep(effort float64, readings []string, turns ...table.Turn) table.DialSweep {
	return table.DialSweep{Name: "trial", Turns: turns, Readings: readings, Effort: effort}
}

// TestOrder: of a grid the last dial goes fastest, and both ends of a range are
// points.
func TestOrder(t *testing.T) {
	base := based(t, nil, "limacon", 1, 0.3)
	st, err := study.New(base, sweep(1, []string{"area"}, table.Turn{Dial: "eps", From: 0.1, To: 0.4, Points: 4}, table.Turn{Dial: "radius", Values: []float64{2, 1}}))
	if err != nil {
		t.Fatal(err)
	}
	if st.Points() != 8 || st.Tasks() != 8 {
		t.Fatalf("%d points, %d tasks", st.Points(), st.Tasks())
	}
	for i, want := range [][]float64{{0.1, 2}, {0.1, 1}, {0.2, 2}, {0.2, 1}, {0.3, 2}, {0.3, 1}, {0.4, 2}, {0.4, 1}} {
		for k, v := range st.At(i) {
			if math.Abs(v-want[k]) > 1e-15 {
				t.Errorf("point %d is %v, want %v", i, st.At(i), want)
			}
		}
	}
	if at := st.At(7); at[0] != 0.4 {
		t.Errorf("the upper end is %v", at[0])
	}
}

// TestFills: a sample lies in its box and fills it more evenly than chance does:
// over equal cells the sum of (n - mean)^2 / mean, for chance the number of cells
// less one on the average with a variance of twice that (Pearson 1900), lies two
// of its standard deviations below.
func TestFills(t *testing.T) {
	base := based(t, nil, "limacon", 1, 0.3)
	turns := []table.Turn{{Dial: "eps", From: 0.1, To: 0.5, Points: 2}, {Dial: "radius", From: 1, To: 3, Points: 2}, {Dial: "1.x", From: -1, To: 1, Points: 2}, {Dial: "1.y", From: 0, To: 1, Points: 2}}
	for _, c := range []struct{ dials, points, side int }{{1, 100, 10}, {2, 64, 4}, {2, 500, 8}, {3, 512, 4}, {4, 1000, 3}} {
		s := sweep(1, []string{"area"}, turns[:c.dials]...)
		s.Sample = c.points
		st, err := study.New(base, s)
		if err != nil {
			t.Fatal(err)
		}
		cells := map[[4]int]float64{}
		for i := range st.Points() {
			var cell [4]int
			for k, v := range st.At(i) {
				lo, hi := turns[k].Ends()
				if v < lo || v > hi {
					t.Fatalf("%v leaves the box", st.At(i))
				}
				cell[k] = min(int(float64(c.side)*(v-lo)/(hi-lo)), c.side-1)
			}
			cells[cell]++
		}
		all := math.Pow(float64(c.side), float64(c.dials))
		mean := float64(c.points) / all
		sum := (all - float64(len(cells))) * mean
		for _, n := range cells {
			sum += (n - mean) * (n - mean) / mean
		}
		if sum > all-1-2*math.Sqrt(2*(all-1)) {
			t.Errorf("%d points over %d dials: the sum is %.3g, and %.3g for chance", c.points, c.dials, sum, all-1)
		}
	}
}

// TestWorkers: rows do not depend on the number of workers, nor on the order.
func TestWorkers(t *testing.T) {
	base := based(t, nil, "quadrupole", 1, 0.1)
	s := sweep(0.01, []string{"lyapunov-per-length", "mean-chord", "escape-rate"}, table.Turn{Dial: "eps", From: 0.05, To: 0.15, Points: 3})
	s.Orbits = 2
	one, many := carried(t, base, s, 1), carried(t, base, s, 3)
	st := one.Study
	for i := st.Tasks() - 1; i >= 0; i-- {
		a, b := one.Rows[i], many.Rows[i]
		c, err := st.Take(i, kit(2))
		if err != nil {
			t.Fatal(err)
		}
		for _, r := range []study.Row{b, c} {
			if text(t, a) != text(t, r) {
				t.Errorf("task %d: %s differs from %s", i, text(t, r), text(t, a))
			}
		}
	}
	if row := one.Rows[0]; !math.IsNaN(float64(row.Taken[2].Value)) || !strings.Contains(row.Taken[2].Note, "There is no escape-rate here") {
		t.Errorf("a reading that the table lacks is %+v", row.Taken[2])
	}
}

// text is a row with all its digits, so that rows without a number compare.
func text(t testing.TB, row study.Row) string {
	t.Helper()
	b, err := json.Marshal(row)
	if err != nil {
		t.Fatal(err)
	}
	return string(b)
}

// TestFaults: a point that is no table yields its sentence, and the others their
// numbers.
func TestFaults(t *testing.T) {
	r := carried(t, based(t, nil, "limacon", 1, 0.3), sweep(1, []string{"area"}, table.Turn{Dial: "eps", Values: []float64{0.5, 1.5, 0.9}}), 2)
	if row := r.Rows[1]; row.Fault != "eps is 1.5, but must lie between 0 and 1" || len(row.Taken) > 0 {
		t.Errorf("the row is %+v", row)
	}
	// A = pi (1 + eps^2/2).
	if got := float64(r.Rows[2].Taken[0].Value); math.Abs(got-math.Pi*1.405) > 1e-12 {
		t.Errorf("the area is %v", got)
	}
	if csv := string(r.CSV("a program")); !strings.Contains(csv, "\n2,1.5,,,\"eps is 1.5, but must lie between 0 and 1\"\n") {
		t.Errorf("the file is\n%s", csv)
	}
	if all := strings.Join(r.Standing(), "\n"); !strings.Contains(all, "No table at eps = 1.5: Eps is 1.5, but must lie between 0 and 1.") {
		t.Errorf("it says %s", all)
	}
	// The wall stops being a curve in between: posts that meet.
	r = carried(t, based(t, nil, "three-posts", 1, 6), sweep(1, []string{"perimeter"}, table.Turn{Dial: "separation", Values: []float64{3, 1.9}}), 2)
	if r.Rows[0].Fault != "" || r.Rows[1].Fault == "" {
		t.Errorf("rows %+v", r.Rows)
	}
}

// TestBowTie: the sweep of the quadrupole marks the birth of the bow-tie where
// the half-trace of the short diameter is -1, at eps = 1/9 (closed form), and the
// end of convexity at 1/5 (closed form).
func TestBowTie(t *testing.T) {
	s := sweep(1, []string{"area"}, table.Turn{Dial: "eps", From: 0.06, To: 0.22, Points: 9})
	s.Orbits = 4
	r := carried(t, based(t, nil, "quadrupole", 1, 0.1), s, 2)
	born, convex := false, false
	for _, m := range r.Marks() {
		if strings.Contains(m.Text, "an orbit of 4 bounces splits off one of 2") && math.Abs(m.At-1.0/9) < 5e-4 {
			born = math.Abs(m.At-1.0/9) < 1e-6
		}
		if strings.Contains(m.Text, "ceases to be convex") {
			convex = math.Abs(m.At-0.2) < 1e-6
		}
	}
	if !born || !convex {
		t.Errorf("born %v, convex %v: %v", born, convex, r.Marks())
	}
	f := r.Figure("area", "a program").(figure.Series)
	if len(f.X.Marks) != len(r.Marks()) {
		t.Errorf("%d marks on the axis", len(f.X.Marks))
	}
}

// TestCutDisc: at distance 0 the cut disc is half a disc, whose angular momentum
// keeps its size: the sweep says that it is integrable, and has no chaos to
// measure there.
func TestCutDisc(t *testing.T) {
	r := carried(t, based(t, nil, "cut-disc", 500, 250), sweep(0.02, []string{"lyapunov-per-length"}, table.Turn{Dial: "distance", From: 0, To: 250, Points: 3}), 2)
	marks := r.Marks()
	if len(marks) != 1 || marks[0].At != 0 || marks[0].Short != "integrable" {
		t.Errorf("the marks are %+v", marks)
	}
	if at := r.Rows[0].Taken[0]; at.Value != 0 || at.StdErr != 0 || !strings.Contains(at.Note, "integrable") {
		t.Errorf("the exponent at 0 is %+v", at)
	}
	for i := 1; i <= 2; i++ {
		if at := r.Rows[i].Taken[0]; float64(at.Value) < 10*float64(at.StdErr) {
			t.Errorf("the exponent at point %d is %+v", i, at)
		}
	}
}

// TestWindowShare: the share within 30 degrees of +x of what leaves a limaçon of
// index 3.3, TM and TE (check values: independent runs of another program by
// another method, each to 0.01).
func TestWindowShare(t *testing.T) {
	base := based(t, wall.Dielectric{Index: 3.3, Outside: 1}, "limacon", 5, 0.3)
	r := carried(t, base, sweep(0.3, []string{"window-share"}, table.Turn{Dial: "eps", Values: []float64{0.40, 0.43}}, table.Turn{Dial: "bare.te", Values: []float64{0, 1}}), 0)
	for i, want := range []float64{0.50, 0.72, 0.52, 0.75} {
		got := r.Rows[i].Taken[0]
		if off := math.Abs(float64(got.Value) - want); !(off <= 0.01+2*float64(got.StdErr)) || !(got.StdErr < 0.01) {
			t.Errorf("%s: %.4f ± %.4f, want %.2f ± 0.01", r.Place(i), got.Value, got.StdErr, want)
		}
	}
	f := r.Figure("window-share", "a program").(figure.Series)
	if len(f.Curves) != 2 || f.Curves[0].Name != "TM (E out of plane)" || f.Curves[1].Name != "TE (E in plane)" || len(f.Curves[0].Err) != 2 {
		t.Errorf("the curves are %+v", f.Curves)
	}
}

// TestFigures: two dials of many values make a map, several readings a page, a
// sample a cloud of points over each dial.
func TestFigures(t *testing.T) {
	base := based(t, nil, "limacon", 1, 0.3)
	a, b := table.Turn{Dial: "eps", From: 0.1, To: 0.4, Points: 3}, table.Turn{Dial: "radius", From: 1, To: 2, Points: 8}
	r := carried(t, base, sweep(1, []string{"area", "perimeter"}, a, b), 1)
	g := r.Figure("area", "a program").(figure.Grid)
	if g.Columns != 3 || g.Rows != 8 || math.Abs(g.X.Lo-0.025) > 1e-12 {
		t.Fatalf("the map is %+v", g)
	}
	for k := range 8 {
		for i := range 3 {
			at := r.At(i*8 + k)
			if want := math.Pi * at[1] * at[1] * (1 + at[0]*at[0]/2); math.Abs(g.Values[k*3+i]-want) > 1e-9 {
				t.Errorf("cell %d, %d is %v, want %v", i, k, g.Values[k*3+i], want)
			}
		}
	}
	if p := r.Page("a program").(figure.Sheet); len(p.Rows) != 1 || len(p.Rows[0].Blocks) != 2 || !strings.Contains(strings.Join(p.Head, " "), "the same seed 1 at each") {
		t.Errorf("the page is %+v", p)
	}
	many := carried(t, base, sweep(1, []string{"area"}, a, b, table.Turn{Dial: "1.x", From: 0, To: 1, Points: 3}), 1).Figure("area", "a program").(figure.Series)
	if len(many.Curves) != 1 || many.Curves[0].Form != figure.Points || len(many.Curves[0].X) != 72 {
		t.Errorf("72 points over three dials are drawn as %d curves", len(many.Curves))
	}
	s := sweep(1, []string{"area"}, a, b)
	s.Sample = 20
	if p := carried(t, base, s, 1).Page("a program").(figure.Sheet); len(p.Rows[0].Blocks) != 2 {
		t.Errorf("the page of a sample is %+v", p)
	}
}

// TestRefused: a sweep that cannot be carried out is refused with a sentence of
// its own type.
func TestRefused(t *testing.T) {
	base := based(t, nil, "limacon", 1, 0.3)
	eps := table.Turn{Dial: "eps", From: 0, To: 1, Points: 3}
	s := func(change func(*table.DialSweep)) table.DialSweep {
		s := sweep(1, []string{"area"}, eps)
		change(&s)
		return s
	}
	for _, c := range []struct {
		says string
		is   any
		s    table.DialSweep
	}{
		{"turns nothing", new(*study.Refusal), s(func(s *table.DialSweep) { s.Turns = nil })},
		{"twice", new(*study.Refusal), s(func(s *table.DialSweep) { s.Turns = append(s.Turns, table.Turn{Dial: "1.eps", Values: []float64{1}}) })},
		{"no number called", new(*dial.Unknown), s(func(s *table.DialSweep) { s.Turns[0].Dial = "depth" })},
		{"takes no reading", new(*study.Refusal), s(func(s *table.DialSweep) { s.Readings = nil })},
		{"no reading called", new(*reading.NoReading), s(func(s *table.DialSweep) { s.Readings = []string{"weight"} })},
		{"takes area twice", new(*study.Refusal), s(func(s *table.DialSweep) { s.Readings = []string{"area", "area"} })},
		{"effort", new(*study.Refusal), s(func(s *table.DialSweep) { s.Effort = math.NaN() })},
		{"no number", new(*study.Refusal), s(func(s *table.DialSweep) { s.Turns[0].To = math.Inf(1) })},
		{"at most", new(*orbit.Limit), s(func(s *table.DialSweep) { s.Orbits = 90 })},
		{"one number only", new(*study.Refusal), s(func(s *table.DialSweep) {
			s.Orbits, s.Turns = 4, append(s.Turns, table.Turn{Dial: "radius", Values: []float64{1}})
		})},
		{"more than", new(*study.Refusal), s(func(s *table.DialSweep) {
			s.Turns[0].Points = 5000
			s.Turns = append(s.Turns, table.Turn{Dial: "radius", From: 1, To: 2, Points: 5000})
		})},
	} {
		_, err := study.New(base, c.s)
		if err == nil || !strings.Contains(err.Error(), c.says) || !errors.As(err, c.is) {
			t.Errorf("%v (%v), want a %v that says %q", err, reflect.TypeOf(err), reflect.TypeOf(c.is).Elem(), c.says)
		}
	}
}
