package window

import (
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"cavitywright/sim/figure"
	"cavitywright/sim/measure/leak"
	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/table/wall"

	"fyne.io/fyne/v2"
)

// leaking is a window on a table of one shape with a sheet open, and a wait for
// something on it.
func leaking(t testing.TB, sheet, name string, values []float64, coats ...table.Coat) (*Window, func(what string, ready func() bool)) {
	t.Helper()
	w, pump := opened(t, 0, fyne.NewSize(1280, 800))
	f, err := shape.New(name, values)
	if err != nil {
		t.Fatal(err)
	}
	tab, err := table.New(table.Design{Name: "Larkmoor plate", Unit: table.Millimetre, Coats: coats, Items: []table.Item{{Shape: f, Place: plane.Identity()}}})
	if err != nil {
		t.Fatal(err)
	}
	w.session.Open(tab, "")
	w.drawer.named(sheet)
	w.win.Canvas().Capture()
	return w, func(what string, ready func() bool) {
		t.Helper()
		for end := time.Now().Add(60 * time.Second); time.Now().Before(end); {
			if ready() {
				return
			}
			pump()
		}
		t.Fatalf("%s: waited in vain", what)
	}
}

// TestFarFieldSheet is the first scenario in the window: a limaçon, n = 3.3; the
// far field comes at once and is refined; it goes at once when the wall
// changes, and the radius changes none of it; both polarisations are shown
// together and written to a file.
func TestFarFieldSheet(t *testing.T) {
	glass := table.Coat{Side: table.AllSides, To: 1, Law: wall.Dielectric{Index: 3.3, Outside: 1}}
	w, wait := leaking(t, "Far field", "limacon", []float64{5, 0.40}, glass)
	s := w.drawer.sheets[w.drawer.open].(*farFieldSheet)
	wait("a first far field", func() bool { return len(s.shown) == 1 })
	wait("20,000 rays", func() bool { return len(s.shown) == 1 && s.shown[0].far.Rays > 19000 })
	share := func() (float64, float64) { return s.shown[0].far.Share(0, math.Pi/6) }
	if v, err := share(); math.Abs(v-0.50) > 0.01+3*err { // an independent run
		t.Errorf("the window share is %g ± %g, want 0.50", v, err)
	}
	if _, is := s.plate.full.(figure.Polar); !is || len(s.list.rows) < 6 || !strings.Contains(s.lines.Text, "still inside") {
		t.Errorf("the sheet shows a %T, %d rows and %q", s.plate.full, len(s.list.rows), s.lines.Text)
	}
	if err := w.session.Do(edit.SetValue{Item: 0, Param: 0, Value: 6}); err != nil {
		t.Fatal(err)
	}
	if len(s.shown) != 0 || s.plate.full != nil || len(s.list.rows) != 0 {
		t.Error("a far field stands beside another wall")
	}
	wait("the far field of a larger disc", func() bool { return len(s.shown) == 1 && s.shown[0].far.Rays > 19000 })
	if v, err := share(); math.Abs(v-0.50) > 0.01+3*err {
		t.Errorf("with another radius the window share is %g ± %g, want 0.50", v, err)
	}
	s.which.buttons[3].OnTapped()
	wait("both polarisations", func() bool { return len(s.shown) == 2 })
	if name := s.list.rows[0].Name; name != "window share, TM" {
		t.Errorf("a row is called %q", name)
	}
	wait("refining", func() bool { return s.rounds.stop.Visible() && strings.HasPrefix(s.rounds.state.full, "Refining") })
	s.rounds.stop.OnTapped()
	wait("its end", func() bool { return !s.rounds.Busy() })
	if s.rounds.stop.Visible() || !strings.HasPrefix(s.rounds.state.full, "Stopped") || len(s.shown) != 2 {
		t.Errorf("after a stop the sheet says %q and shows %d far fields", s.rounds.state.full, len(s.shown))
	}
	path := filepath.Join(t.TempDir(), "far.csv")
	if err := writeFigure(path, s.rounds.work.on, s.plate.full, 85); err != nil {
		t.Fatal(err)
	}
	if text, err := os.ReadFile(path); err != nil || !strings.Contains(string(text), leak.Words(wall.TE)) {
		t.Errorf("the file holds %q (%v)", text[:min(len(text), 200)], err)
	}
	s.kind.buttons[byWall].OnTapped()
	if _, is := s.plate.full.(figure.Series); !is {
		t.Errorf("what leaves along the wall is a %T", s.plate.full)
	}
}

// BenchmarkFirstFarField is the time from an edit to its first far field; 0.3 s
// are wanted.
func BenchmarkFirstFarField(b *testing.B) {
	glass := table.Coat{Side: table.AllSides, To: 1, Law: wall.Dielectric{Index: 3.3, Outside: 1}}
	w, wait := leaking(b, "Far field", "limacon", []float64{5, 0.40}, glass)
	s := w.drawer.sheets[w.drawer.open].(*farFieldSheet)
	wait("a first far field", func() bool { return len(s.shown) == 1 })
	var took time.Duration
	for i := range b.N {
		var shown time.Time
		s.rounds.seen = func() {
			if shown.IsZero() {
				shown = time.Now()
			}
		}
		at := time.Now()
		if err := w.session.Do(edit.SetValue{Item: 0, Param: 1, Value: 0.40 + 0.002*float64(1+i%40)}); err != nil {
			b.Fatal(err)
		}
		wait("a far field", func() bool { return !shown.IsZero() })
		took += shown.Sub(at)
	}
	b.ReportMetric(took.Seconds()*1e3/float64(b.N), "ms/edit") // the waiting in steps left out
}

// TestOpeningsSheet is the fourth scenario in the window: the rate against the
// place of a hole 0.3 wide; a press on the curve puts it there in one step.
func TestOpeningsSheet(t *testing.T) {
	flat := math.Sqrt(3)
	hole := table.Coat{Side: 0, From: 0.5 - 0.15/flat, To: 0.5 + 0.15/flat, Law: wall.Opening{}}
	w, wait := leaking(t, "Openings", "cut-disc", []float64{1, 0.5}, hole)
	s := w.drawer.sheets[w.drawer.open].(*openingsSheet)
	wait("the refined rates", func() bool { return s.rates != nil && s.rates.Rays > 8000 })
	i := int(flat / 2 / s.w.session.Table().Length() * placesShown)
	if got, err := s.rates.Rates[i], s.rates.Errs[i]; math.Abs(got-0.0302) > 0.0015+3*err { // an independent run, on a path alike
		t.Errorf("at the flat's centre the rate is %g ± %g, want 0.0302", got, err)
	}
	if s.passed == nil || len(s.matrix.rows) == 0 || len(s.best.rows) != 3 {
		t.Errorf("%d rows of the matrix, %d of the rates", len(s.matrix.rows), len(s.best.rows))
	}
	s.put(flat, 0) // across the corner
	ports := leak.PortsOf(w.session.Table())
	if len(ports) != 1 || math.Abs(ports[0].Width-0.3) > 1e-9 || math.Abs(ports[0].S0()-(flat-0.15)) > 1e-9 || len(w.session.Table().Design().Coats) != 2 {
		t.Errorf("the wall has the openings %v", ports)
	}
	if s.rates != nil || s.places.full != nil {
		t.Error("rates stand beside another wall")
	}
	w.session.Undo()
	if c := w.session.Table().Design().Coats; len(c) != 1 || c[0] != hole {
		t.Errorf("after one undo the coats are %v", c)
	}
	wait("the rates once more", func() bool { return s.rates != nil })
	s.kind.buttons[1].OnTapped()
	wait("a map", func() bool { _, is := s.places.full.(figure.Grid); return is })
}

// TestSurvivalSheet is the sixth scenario in the window: three posts, whose
// survival falls exponentially at 0.41033840776934649 per length (Gaspard and
// Rice, J. Chem. Phys. 90, 2225 (1989)); and a closed table, which has none.
func TestSurvivalSheet(t *testing.T) {
	w, wait := leaking(t, "Survival", "three-posts", []float64{1, 6})
	s := w.drawer.sheets[w.drawer.open].(*survivalSheet)
	wait("the refined curve", func() bool { return s.fall != nil && s.fall.Rays > 400_000 })
	if f := s.fall; !f.HasWindow || math.Abs(f.Window.Rate-0.41033840776934649) > 3*f.Window.Err || !strings.Contains(s.verdict.Text, "falls") {
		t.Errorf("the window is %+v, the verdict %q", s.fall.Window, s.verdict.Text)
	}
	s.scale.buttons[1].OnTapped()
	if c, is := s.plate.full.(figure.Series); !is || c.X.Scale != figure.Log {
		t.Error("the axis is not logarithmic")
	}
	f, err := shape.New("disc", []float64{1})
	if err != nil {
		t.Fatal(err)
	}
	closed, err := table.New(table.Design{Unit: table.Millimetre, Items: []table.Item{{Shape: f, Place: plane.Identity()}}})
	if err != nil {
		t.Fatal(err)
	}
	w.session.Open(closed, "")
	if s.fall != nil || s.plate.full != nil {
		t.Error("a curve stands beside another wall")
	}
	wait("a refusal", func() bool { return strings.Contains(s.rounds.state.full, "nothing leaves this table") })
	s.starts.kind.SetSelected("from a point")
	s.starts.places.SetText("nowhere")
	s.begin()
	if !strings.Contains(s.rounds.state.full, "not understood") {
		t.Errorf("a place that is none is answered with %q", s.rounds.state.full)
	}
}

// TestLeakSheetsDragged: a wall that is dragged without a stop leaves no work
// behind, and nothing of an earlier wall.
func TestLeakSheetsDragged(t *testing.T) {
	hole := table.Coat{Side: 0, From: 0.4, To: 0.6, Law: wall.Opening{}}
	for _, name := range []string{"Survival", "Far field", "Openings"} {
		w, wait := leaking(t, name, "cut-disc", []float64{1, 0.5}, hole)
		w.session.Begin()
		for i := range 40 {
			if err := w.session.Amend(edit.SetValue{Item: 0, Param: 1, Value: 0.5 - 0.005*float64(i)}); err != nil {
				t.Fatal(err)
			}
		}
		w.session.End()
		switch s := w.drawer.sheets[w.drawer.open].(type) {
		case *survivalSheet:
			wait("a curve", func() bool { return s.fall != nil })
			if s.fall.Starts.Table() != w.session.Table() {
				t.Error("the curve belongs to another wall")
			}
		case *farFieldSheet:
			wait("a far field", func() bool { return len(s.shown) > 0 })
			if s.shown[0].far.Starts.Table() != w.session.Table() {
				t.Error("the far field belongs to another wall")
			}
		case *openingsSheet:
			wait("rates", func() bool { return s.rates != nil })
			if !s.rounds.Fits() {
				t.Error("the rates belong to another wall")
			}
		}
		w.drawer.show(-1)
	}
}
