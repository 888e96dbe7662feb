package film

import (
	"errors"
	"math"
	"strings"
	"testing"

	"cavitywright/render"
	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/run/trial"
	"cavitywright/table"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
)

func limacon(t *testing.T, eps float64) *table.Table {
	t.Helper()
	f, err := shape.New("limacon", param.Values{1, eps})
	if err != nil {
		t.Fatal(err)
	}
	tab, err := table.New(table.Design{Name: "Plate F-1", Unit: table.Millimetre, Study: table.DefaultStudy(),
		Items: []table.Item{{Shape: f, Place: plane.Identity()}}})
	if err != nil {
		t.Fatal(err)
	}
	return tab
}

func runner(tr *sim.Tracer, m measure.Measurement, seed uint64) (measure.Tally, error) {
	return trial.Runner(tr, seed, 0)(m)
}

// The frames are the table with the number at the values, both ends included,
// and say so; all walls are drawn to one scale.
func TestFrames(t *testing.T) {
	base := limacon(t, 0.1)
	f, err := New(base, table.Turn{Dial: "eps", From: 0, To: 0.5, Points: 6})
	if err != nil {
		t.Fatal(err)
	}
	if f.Len() != 6 {
		t.Fatalf("%d frames, want 6", f.Len())
	}
	var room render.Extent
	for i := range f.Len() {
		want := 0.1 * float64(i)
		got := f.Table(i).Design().Items[0].Shape.(shape.Figure).Values()[1]
		if math.Abs(got-want) > 1e-12 {
			t.Errorf("frame %d has eps = %g, want %g", i, got, want)
		}
		s, err := f.Frame(i, 20, runner, "test")
		if err != nil {
			t.Fatal(err)
		}
		if !strings.HasPrefix(s.Title, "eps = ") {
			t.Errorf("frame %d says %q", i, s.Title)
		}
		b := render.Bounds(s.Rows[0].Blocks[0].Show.(figure.Paths))
		if i > 0 && b != room {
			t.Errorf("frame %d is drawn in %v, the first in %v", i, b, room)
		}
		room = b
		if dots := s.Rows[0].Blocks[1].Show.(figure.Dots); len(dots.Sets) == 0 {
			t.Errorf("frame %d has an empty portrait", i)
		}
	}
	if v := base.Design().Items[0].Shape.(shape.Figure).Values()[1]; v != 0.1 {
		t.Errorf("the film changed the table: eps = %g", v)
	}
}

// What cannot be shown is refused before the first frame, with the value.
func TestRefused(t *testing.T) {
	base := limacon(t, 0.1)
	if _, err := New(base, table.Turn{Dial: "eps", From: 0, To: 0.5, Points: 1}); err == nil {
		t.Error("a film of one frame is taken")
	}
	refusal := (*Refusal)(nil)
	if _, err := New(base, table.Turn{Dial: "eps", From: 0, To: 0.5, Points: MostFrames + 1}); !errors.As(err, &refusal) {
		t.Errorf("too many frames: %v", err)
	}
	out := (*param.RangeError)(nil)
	if _, err := New(base, table.Turn{Dial: "eps", From: 0, To: 4, Points: 5}); !errors.As(err, &out) {
		t.Errorf("eps up to 4: %v", err)
	}
	if _, err := New(base, table.Turn{Dial: "nose", From: 0, To: 1, Points: 5}); err == nil {
		t.Error("a number that is not there is turned")
	}
}

func TestNumbered(t *testing.T) {
	for _, c := range []struct {
		i, n int
		want string
	}{{0, 9, "a/film-1.png"}, {0, 10, "a/film-01.png"}, {599, 600, "a/film-600.png"}} {
		if got := Numbered("a/film.png", c.i, c.n); got != c.want {
			t.Errorf("frame %d of %d is written to %q, want %q", c.i, c.n, got, c.want)
		}
	}
}
