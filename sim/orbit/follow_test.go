package orbit

import (
	"context"
	"errors"
	"math"
	"reflect"
	"sync"
	"testing"

	"cavitywright/table"
)

// course0 follows the orbits of a figure whose values depend on a number.
func course0(t *testing.T, kind string, from, to float64, upTo int, v func(x float64) []float64) *Followed {
	t.Helper()
	f, err := Follow(Course{From: from, To: to, Steps: 24, Search: Search{UpTo: upTo},
		Table: func(x float64) (*table.Table, error) { return drawn(t, nil, kind, v(x)...), nil }})
	if err != nil {
		t.Fatal(err)
	}
	return f
}

// wanted is an event on a branch of orbits of so many bounces: when it passes,
// or at its start.
type wanted struct {
	period int
	v      float64
	what   What
	other  int
}

// have wants each event within tol, and no orbit lost for no reason.
func (f *Followed) have(t *testing.T, tol float64, all ...wanted) {
	t.Helper()
	for _, w := range all {
		met := 0
		for _, b := range f.Branches {
			for _, e := range append([]Event{b.Start, b.End}, b.Passed...) {
				if b.Period == w.period && e.What == w.what && e.Other == w.other && math.Abs(e.V-w.v) <= tol {
					met++
				}
			}
		}
		if met == 0 {
			t.Errorf("%d bounces: no %v with %d at %.12g within %g", w.period, w.what, w.other, w.v, tol)
		}
	}
	for _, b := range f.Branches {
		if b.Start.What == Unclear || b.End.What == Unclear {
			t.Errorf("%d bounces from %.9g to %.9g: start %v, end %v", b.Period, b.V[0], b.V[len(b.V)-1], b.Start, b.End)
		}
		for i := range b.V {
			if o := &b.Orbits[i]; o.Closure > closureTol || i > 0 && b.V[i] <= b.V[i-1] {
				t.Errorf("%d bounces at %.12g: closure %g", b.Period, b.V[i], o.Closure)
			}
		}
	}
}

// The bow-tie is born on the short diameter at eps = 1/9, where its half-trace
// is -1 (closed form: the trace touches -2 as the diameter is confocal); the
// trace -1, where orbits of six bounces split off, is at 1/17 and 3/19 (closed
// form: 4 (1 - l kappa)^2 = 1, kappa = (1 + 3 eps)/(1 - eps)^2, l = 2 (1 - eps)).
func TestFollowQuadrupole(t *testing.T) {
	f := course0(t, "quadrupole", 0.05, 0.17, 4, func(x float64) []float64 { return []float64{1, x} })
	f.have(t, 1e-7*0.12, wanted{2, 1.0 / 9, Doubling, 4}, wanted{4, 1.0 / 9, Joined, 2})
	bowTies := 0
	for _, b := range f.Branches {
		if b.Period == 4 && b.Start.What == Joined && b.Start.Other == 2 {
			bowTies++
			if math.Abs(b.Start.V-1.0/9) > 1e-8 {
				t.Errorf("a bow-tie begins at %.12g", b.Start.V)
			}
		}
	}
	if bowTies != 2 {
		t.Errorf("%d orbits of four bounces are born on the diameter, want a stable and an unstable one", bowTies)
	}
}

// TestMultiples looks at resonances only, in closed form as above.
func TestMultiples(t *testing.T) {
	f := course0(t, "quadrupole", 0.05, 0.17, 6, func(x float64) []float64 { return []float64{1, x} })
	f.have(t, 1e-10, wanted{2, 1.0 / 17, Multiple, 6}, wanted{2, 3.0 / 19, Multiple, 6}, wanted{6, 1.0 / 17, Joined, 2}, wanted{6, 3.0 / 19, Joined, 2})
}

// The limaçon's diameter on the axis is stable up to eps = sqrt 2 - 1 (closed
// form), where four bounces split off.
func TestFollowLimacon(t *testing.T) {
	f := course0(t, "limacon", 0.3, 0.48, 4, func(x float64) []float64 { return []float64{1, x} })
	f.have(t, 1e-12, wanted{2, math.Sqrt2 - 1, Doubling, 4}, wanted{4, math.Sqrt2 - 1, Joined, 2})
}

// Two orbits of five bounces are born in the limaçon: both begin at one place,
// with trace 2, one above it and one below.
func TestFold(t *testing.T) {
	f := course0(t, "limacon", 0.66, 0.72, 5, func(x float64) []float64 { return []float64{1, x} })
	var above, below []Branch
	for _, b := range f.Branches {
		if b.Period == 5 && b.Start.What == Fold {
			trace, _ := b.Series()
			if math.Abs(trace[0]-2) > 0.05 {
				t.Errorf("born with trace %g", trace[0])
			}
			if trace[5] > 2 {
				above = append(above, b)
			} else {
				below = append(below, b)
			}
		}
	}
	if len(above) != 1 || len(below) != 1 || math.Abs(above[0].Start.V-below[0].Start.V) > LocatedTo*0.06 {
		t.Errorf("%d and %d orbits are born", len(above), len(below))
	}
}

// The first cycles of three posts are cut off by a post at the separation
// 2.04821419 (K. T. Hansen, Nonlinearity 6, 753, 1993, from memory); those of up
// to twelve bounces below it.
func TestBlocked(t *testing.T) {
	f := course0(t, "three-posts", 2.01, 2.06, 12, func(x float64) []float64 { return []float64{1, x} })
	n := 0
	for _, b := range f.Branches {
		if b.End.What != AtEdge {
			t.Errorf("%d bounces end at %g: %v", b.Period, b.End.V, b.End.What)
		}
		if b.Start.What == Blocked {
			n++
			if b.Start.V > 2.04821419 {
				t.Errorf("%d bounces are cut off at %.9g", b.Period, b.Start.V)
			}
		}
	}
	if n == 0 {
		t.Error("no cycle is cut off")
	}
	last := f.Changes()
	if len(last) == 0 {
		t.Fatal("no changes")
	}
}

// The triangle of a lemon meets its corners where the separation is the golden
// section less 1, (sqrt 5 - 1)/2, and its short diameter is confocal at 1 (both
// closed forms).
func TestAtJoint(t *testing.T) {
	f := course0(t, "lemon", 0.5, 1.2, 3, func(x float64) []float64 { return []float64{1, x} })
	f.have(t, 1e-5, wanted{3, (math.Sqrt(5) - 1) / 2, AtJoint, 0})
	f.have(t, 1e-10, wanted{2, 1, Doubling, 4})
}

// TestFollowRefuses wants one clear sentence for what cannot be followed.
func TestFollowRefuses(t *testing.T) {
	disc := func(float64) (*table.Table, error) { return drawn(t, nil, "disc", 1), nil }
	stop := errors.New("stop")
	for name, c := range map[string]Course{
		"empty":   {Table: disc, From: 1, To: 1, Steps: 8, Search: Search{UpTo: 2}},
		"steps":   {Table: disc, From: 0, To: 1, Steps: 1, Search: Search{UpTo: 2}},
		"period":  {Table: disc, From: 0, To: 1, Steps: 8, Search: Search{UpTo: 99}},
		"table":   {Table: func(float64) (*table.Table, error) { return nil, stop }, From: 0, To: 1, Steps: 8, Search: Search{UpTo: 2}},
		"stopped": {Table: disc, From: 0, To: 1, Steps: 8, Search: Search{UpTo: 2, Watch: func() error { return stop }}},
	} {
		if _, err := Follow(c); err == nil || (name == "table" || name == "stopped") && !errors.Is(err, stop) {
			t.Errorf("%s: %v", name, err)
		}
	}
}

// spreadOn is a Spread on so many goroutines that takes the pieces in a jumbled
// order.
func spreadOn(workers int) func(int, func(int) error) error {
	return func(pieces int, do func(int) error) error {
		var wait sync.WaitGroup
		errs := make([]error, pieces)
		for w := range workers {
			wait.Add(1)
			go func() {
				defer wait.Done()
				for i := pieces - 1 - w; i >= 0; i -= workers {
					errs[i] = do(i)
				}
			}()
		}
		wait.Wait()
		return errors.Join(errs...)
	}
}

// TestWorkers wants equal lists, to the last bit, from one goroutine and from
// five that take the pieces in another order.
func TestWorkers(t *testing.T) {
	for _, c := range []struct {
		kind string
		v    []float64
		upTo int
	}{{"limacon", []float64{1, 0.43}, 6}, {"stadium", []float64{1, 1}, 5}, {"three-posts", []float64{1, 3}, 9}, {"ellipse", []float64{2, 1}, 4}} {
		tab := drawn(t, nil, c.kind, c.v...)
		one, many := found(t, tab, c.upTo), (*List)(nil)
		many, err := Find(tab, Search{UpTo: c.upTo, Spread: spreadOn(5), Watch: context.Background().Err})
		if err != nil || !reflect.DeepEqual(one, many) {
			t.Errorf("%s: %d orbits on one goroutine, %d on five, %v", c.kind, len(one.Orbits), len(many.Orbits), err)
		}
	}
	quad := func(workers int) *Followed {
		f, err := Follow(Course{From: 0.08, To: 0.12, Steps: 8, Search: Search{UpTo: 4, Spread: spreadOn(workers)},
			Table: func(x float64) (*table.Table, error) { return drawn(t, nil, "quadrupole", 1, x), nil }})
		if err != nil {
			t.Fatal(err)
		}
		return f
	}
	if one, many := quad(1), quad(4); !reflect.DeepEqual(one, many) {
		t.Errorf("followed on four goroutines the orbits differ: %d and %d branches", len(one.Branches), len(many.Branches))
	}
}
