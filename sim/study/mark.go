package study

import (
	"cmp"
	"errors"
	"fmt"
	"math"
	"slices"

	"cavitywright/sim/orbit"
	"cavitywright/table"
	"cavitywright/table/survey"
)

// Mark is a place on the axis of a single dial where the table changes its
// nature.
type Mark struct {
	At     float64 `json:"at"`
	Within float64 `json:"within"` // how well it is located
	Short  string  `json:"short"`  // a word for the axis
	Text   string  `json:"text"`   // a sentence without its end
}

const (
	// convexTo is how well the limit of convexity is located, relative to the
	// range: bisection to far below what is drawn or built.
	convexTo = 1e-9
	// leastSteps and mostSteps are those in which orbits are followed: as many
	// as the points, within what finds the events and stays within seconds.
	leastSteps = 20
	mostSteps  = 120
)

// marks finds what is marked: the limit of convexity, and births of orbits.
func (st *Study) marks(task int, kit Kit) (Row, error) {
	row := Row{Task: task}
	for _, run := range st.runs() {
		limits, err := st.convexity(run, kit)
		if err != nil {
			return Row{}, err
		}
		row.Marks = append(row.Marks, limits...)
		if st.Sweep.Orbits == 0 || len(run) < 2 {
			continue
		}
		births, err := st.births(run[0], run[len(run)-1], len(run), kit)
		if left := (*Refusal)(nil); errors.As(err, &left) {
			row.Remark = left.Text
			continue
		}
		if err != nil {
			return Row{}, err
		}
		row.Marks = append(row.Marks, births...)
	}
	slices.SortStableFunc(row.Marks, func(a, b Mark) int { return cmp.Compare(a.At, b.At) })
	return row, nil
}

// runs are the values of the dial in ascending order, each stretch of them
// between which every one is a table.
func (st *Study) runs() (all [][]float64) {
	values := slices.Clone(st.values[0])
	slices.Sort(values)
	values = slices.Compact(values)
	var run []float64
	for _, v := range values {
		if _, err := st.Table([]float64{v}); err == nil {
			run = append(run, v)
			continue
		}
		if run != nil {
			all = append(all, run)
		}
		run = nil
	}
	if run != nil {
		all = append(all, run)
	}
	return all
}

// convexity finds where the outer wall ceases to be convex.
func (st *Study) convexity(run []float64, kit Kit) (all []Mark, err error) {
	convex := func(v float64) (bool, error) {
		if kit.Watch != nil {
			if err := kit.Watch(); err != nil {
				return false, err
			}
		}
		t, err := st.Table([]float64{v})
		return err == nil && survey.ConvexityOf(t).Convex, nil
	}
	within := convexTo * (run[len(run)-1] - run[0])
	last, err := convex(run[0])
	if err != nil {
		return nil, err
	}
	for i := 1; i < len(run); i++ {
		lo, hi, first := run[i-1], run[i], last
		if last, err = convex(hi); err != nil {
			return nil, err
		}
		if first == last {
			continue
		}
		for hi-lo > within {
			mid := lo + 0.5*(hi-lo)
			if mid <= lo || mid >= hi {
				break
			}
			now, err := convex(mid)
			if err != nil {
				return nil, err
			}
			if now == first {
				lo = mid
			} else {
				hi = mid
			}
		}
		text := "the outer wall ceases to be convex"
		if last {
			text = "the outer wall becomes convex"
		}
		all = append(all, Mark{At: 0.5 * (lo + hi), Within: within, Short: "convex", Text: text})
	}
	return all, nil
}

// births are the changes of the periodic orbits between two values. The error
// is a *Refusal where they cannot be followed there.
func (st *Study) births(from, to float64, points int, kit Kit) (all []Mark, err error) {
	f, err := orbit.Follow(orbit.Course{
		From: from, To: to, Steps: min(max(4*points, leastSteps), mostSteps),
		Table:  func(v float64) (*table.Table, error) { return st.Table([]float64{v}) },
		Search: orbit.Search{UpTo: st.Sweep.Orbits, Spread: kit.Spread, Watch: kit.Watch},
	})
	if err != nil {
		if kit.Watch != nil && kit.Watch() != nil {
			return nil, kit.Watch()
		}
		return nil, refuse("orbits are not followed from %g to %g: %v", from, to, err)
	}
	within := orbit.LocatedTo * (to - from)
	for _, c := range f.Changes() {
		if n := len(all); n > 0 && math.Abs(all[n-1].At-c.V) <= within {
			all[n-1].Text += "; " + c.Text
			continue
		}
		all = append(all, Mark{c.V, within, c.Short, c.Text})
	}
	return all, nil
}

// MarkText is a mark in a sentence.
func (st *Study) MarkText(m Mark) string {
	return fmt.Sprintf("%s = %.9g%s: %s.", st.Label(0), m.At, spaced(st.Unit(0)), m.Text)
}

// spaced is a unit behind its number.
func spaced(unit string) string {
	if unit == "" {
		return ""
	}
	return " " + unit
}
