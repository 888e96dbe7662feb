package window

import (
	"bytes"
	"math"
	"slices"

	"cavitywright/sim/figure"
	"cavitywright/table"
	"cavitywright/table/tablefile"
)

// belongs reports whether the wall on the table is one of the sweep's.
func (s *studiesSheet) belongs() bool {
	if s.result == nil {
		return false
	}
	now := s.w.session.Table()
	if now.SameWall(s.result.Base) || s.put != nil && now.SameWall(s.put) {
		return true
	}
	base := s.result.Base.Design()
	d := now.Design()
	for _, x := range s.result.Dials {
		v, err := x.Value(base)
		if err != nil {
			return false
		}
		if d, err = x.Turned(d, v); err != nil {
			return false
		}
	}
	a, b := wallText(d), wallText(base)
	return a != nil && bytes.Equal(a, b)
}

// wallText is the wall of a design alone, as a file has it; nil for none.
func wallText(d table.Design) []byte {
	d.Name, d.Notes, d.Study = "", "", table.DefaultStudy()
	var b bytes.Buffer
	if tablefile.Write(&b, d) != nil {
		return nil
	}
	return b.Bytes()
}

// marked is the figure of a reading with the point that is on the table.
func (s *studiesSheet) marked(f figure.Figure, name string) figure.Figure {
	series, is := f.(figure.Series)
	if !is || s.picked < 0 {
		return f
	}
	row, _ := s.result.Point(s.picked)
	for _, t := range row.Taken {
		if t.Name == name {
			series.Curves = append(series.Curves, figure.Curve{Name: "on the table", Hue: pickedHue, Form: figure.Points, X: row.Values[:1], Y: []float64{float64(t.Value)}})
		}
	}
	return series
}

// pickedHue is the colour of the point that is on the table.
const pickedHue = 3

// pick puts the wall of the point that was pressed on the table.
func (s *studiesSheet) pick(name string, x, y float64) {
	i, ok := s.nearest(name, x, y)
	if !ok || !s.belongs() {
		return
	}
	r := s.result
	if row, _ := r.Point(i); row.Fault != "" {
		s.fault, s.put = i, s.w.session.Table()
		s.w.say("No table at %s: %s", r.Place(i), sentence(row.Fault))
		s.show()
		return
	}
	d, err := r.Design(r.At(i))
	if err != nil {
		s.w.foot.say(err.Error())
		return
	}
	now := s.w.session.Table().Design()
	d.Name, d.Notes, d.Study = now.Name, now.Notes, now.Study
	before := s.put
	// The wall is known for one of the sweep's before the others are told of it.
	c := &putWall{Design: d, Name: "wall at " + r.Place(i), made: func(t *table.Table) { s.put, s.fault = t, -1 }}
	if err := s.w.session.Do(c); err != nil {
		s.put = before
		s.w.foot.say(err.Error())
		return
	}
	s.w.say("On the table: %s.", r.Place(i))
}

// here is the point whose wall is on the table, or the one without a table that
// was pressed since; -1 for none.
func (s *studiesSheet) here() int {
	if s.result == nil {
		return -1
	}
	now := s.w.session.Table()
	if s.fault >= 0 && s.put != nil && now.SameWall(s.put) {
		return s.fault
	}
	d := now.Design()
	at := make([]float64, len(s.result.Dials))
	for k, x := range s.result.Dials {
		v, err := x.Value(d)
		if err != nil {
			return -1
		}
		at[k] = v
	}
	for i := range s.result.Points() {
		if row, done := s.result.Point(i); done && slices.Equal(row.Values, at) {
			return i
		}
	}
	return -1
}

// putWall puts another design on the table as one step.
type putWall struct {
	Design table.Design
	Name   string
	made   func(*table.Table)
}

// Title names the change.
func (c *putWall) Title() string { return c.Name }

// Apply compiles the design.
func (c *putWall) Apply(*table.Table) (*table.Table, error) {
	t, err := table.New(c.Design)
	if err == nil && c.made != nil {
		c.made(t)
	}
	return t, err
}

// nearest is the point whose mark in a reading's figure lies nearest to a place
// of the figure, each axis taken relative to its range.
func (s *studiesSheet) nearest(name string, x, y float64) (point int, ok bool) {
	r := s.result
	lo, hi := r.Sweep.Turns[0].Ends()
	if lo == hi {
		hi = lo + 1
	}
	low, high := lo, hi
	_, isGrid := r.Figure(name, program).(figure.Grid)
	if isGrid {
		low, high = r.Sweep.Turns[1].Ends()
	} else if f, is := r.Figure(name, program).(figure.Series); is {
		low, high = f.Y.Lo, f.Y.Hi
	}
	best := math.Inf(1)
	for i := range r.Points() {
		row, done := r.Point(i)
		if !done {
			continue
		}
		v := math.NaN()
		if isGrid {
			v = row.Values[1]
		} else {
			for _, t := range row.Taken {
				if t.Name == name {
					v = float64(t.Value)
				}
			}
		}
		// Across the curves it counts less: a press under a curve means it too.
		const across = 0.3
		far := (row.Values[0] - x) / (hi - lo)
		if up := (v - y) / (high - low); !math.IsNaN(up) {
			if isGrid {
				far = math.Hypot(far, up)
			} else {
				far = math.Hypot(far, across*up)
			}
		} else {
			far = math.Abs(far) + across
		}
		if far < best {
			best, point, ok = far, i, true
		}
	}
	return point, ok
}
