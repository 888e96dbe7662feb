package wish

import (
	"math"

	"cavitywright/sim/study"
	"cavitywright/sim/study/tolerance"
	"cavitywright/table"
	"cavitywright/table/param"
	"cavitywright/table/plane"
)

// Try is a wall that was tried.
type Try struct {
	N  int       // from 1, in the order of the search
	At []float64 // the dials
	// Table is the wall; nil where there is none or it was refused, and then
	// Fault says why and Short by how much it missed.
	Table *table.Table
	Fault string
	Short float64
	// Terms are the goals of the wish, then those against it.
	Terms []Term
	// Cost is what the search makes small, with the standard error that the
	// readings give it; Against the same of the second wish.
	Cost, CostErr       float64
	Against, AgainstErr float64
}

// Term is a goal on a wall: of copies their mean or the worst.
type Term struct {
	Name          string
	Value, StdErr float64
	Unit          string
}

// Sound reports whether the wall is one, keeps to what is demanded, and has what
// is wished for.
func (t *Try) Sound() bool { return t != nil && t.Fault == "" }

// Table is the wall at values of the dials, scaled as the plan asks. The error
// is a sentence.
func (w *Wish) Table(at []float64) (*table.Table, error) {
	d := w.Base.Design()
	for k, x := range w.Dials {
		v := at[k]
		if w.Specs[k].Unit == param.Count {
			v = math.Round(v)
		}
		var err error
		if d, err = x.Turned(d, v); err != nil {
			return nil, err
		}
	}
	t, err := table.New(d)
	if err != nil || w.Plan.Demand.Scaled == table.Unscaled {
		return t, err
	}
	by := w.Base.Length() / t.Length()
	if w.Plan.Demand.Scaled == table.SameArea {
		by = math.Sqrt(w.Base.Area() / t.Area())
	}
	items := append([]table.Item(nil), d.Items...)
	for i := range items {
		p := items[i].Place
		items[i].Place = plane.Similarity{Shift: p.Shift, Angle: p.Angle, Scale: p.Scale * by}
		items[i].Place.Shift.X *= by
		items[i].Place.Shift.Y *= by
	}
	d.Items = items
	return table.New(d)
}

// farOff is what a wall that is none at all misses by.
const farOff = 10

// try makes a wall and measures it. The error is the kit's.
func (w *Wish) try(at []float64, effort float64, kit tolerance.Kit) (*Try, error) {
	y := &Try{At: append([]float64(nil), at...)}
	t, err := w.Table(at)
	if err != nil {
		y.Fault, y.Short = err.Error(), farOff
		return y, nil
	}
	if y.Short, y.Fault = w.shortfall(t); y.Fault != "" {
		return y, nil
	}
	y.Table = t
	walls, err := w.copies(y, kit)
	if err != nil || y.Fault != "" {
		return y, err
	}
	return y, w.measure(y, walls, effort, kit)
}

// copies are the walls that count: the one tried, or the copies of it.
func (w *Wish) copies(y *Try, kit tolerance.Kit) ([]tolerance.Copy, error) {
	if w.under == nil {
		return []tolerance.Copy{{Table: y.Table, Scale: 1}}, nil
	}
	var all []tolerance.Copy
	for i := range w.Plan.Copies {
		if kit.Watch != nil {
			if err := kit.Watch(); err != nil {
				return nil, err
			}
		}
		c, err := w.under.CopyOf(y.Table, i, tolerance.All, kit)
		if err != nil {
			y.Table, y.Fault, y.Short = nil, err.Error(), 1
			return nil, nil
		}
		all = append(all, c)
	}
	return all, nil
}

// measure fills the terms and costs of a try.
func (w *Wish) measure(y *Try, walls []tolerance.Copy, effort float64, kit tolerance.Kit) error {
	rows := make([][]Term, len(walls))
	for i, c := range walls {
		row, why, err := w.terms(c, effort, kit.Kit)
		if err != nil {
			return err
		}
		if why != "" {
			y.Table, y.Fault, y.Short = nil, why, 1
			return nil
		}
		rows[i] = row
	}
	var square [2]float64
	for k, g := range w.goals {
		term := w.over(k, rows)
		y.Terms = append(y.Terms, term)
		e := g.Weight * term.StdErr
		if k < len(w.Plan.Goals) {
			y.Cost += g.cost(term.Value)
			square[0] += e * e
		} else {
			y.Against += g.cost(term.Value)
			square[1] += e * e
		}
	}
	y.CostErr, y.AgainstErr = math.Sqrt(square[0]), math.Sqrt(square[1])
	return nil
}

// terms are the goals on one wall; why is set where it does not have one.
func (w *Wish) terms(c tolerance.Copy, effort float64, kit study.Kit) (row []Term, why string, err error) {
	var names []string
	for _, g := range w.goals {
		if g.orbit.period == 0 {
			names = append(names, g.Reading)
		}
	}
	taken, err := tolerance.Take(c.Table, names, effort, kit)
	if err != nil {
		return nil, "", err
	}
	unit := c.Table.Design().Unit
	for _, g := range w.goals {
		var term Term
		if g.orbit.period == 0 {
			x := taken[0]
			taken = taken[1:]
			if why = x.Note; !math.IsNaN(float64(x.Value)) {
				why = ""
			}
			term = Term{x.Name, float64(x.Value), float64(x.StdErr), x.Unit}
		} else {
			term = Term{Name: g.Reading}
			if g.orbit.what == "orbit-length" {
				term.Unit = unit.String()
			}
			if term.Value, why, err = g.orbit.of(c.Table, kit); err != nil {
				return nil, "", err
			}
		}
		if why != "" {
			return nil, why, nil
		}
		by := math.Pow(c.Scale, float64(tolerance.Dimension(term.Unit, unit)))
		term.Value, term.StdErr = term.Value*by, term.StdErr*by
		if term.Unit == "1" {
			term.Unit = ""
		}
		row = append(row, term)
	}
	return row, "", nil
}

// over is goal k over the copies: their mean, or the worst of them for it.
func (w *Wish) over(k int, rows [][]Term) Term {
	g, out := w.goals[k], rows[0][k]
	if w.Plan.Over == table.WorstOfCopies {
		for _, row := range rows[1:] {
			if g.cost(row[k].Value) > g.cost(out.Value) {
				out = row[k]
			}
		}
		return out
	}
	sum, square := 0.0, 0.0
	for _, row := range rows {
		sum += row[k].Value
		square += row[k].StdErr * row[k].StdErr
	}
	n := float64(len(rows))
	out.Value, out.StdErr = sum/n, math.Sqrt(square)/n
	return out
}
