package measure

import (
	"math"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/table"
	"cavitywright/table/plane"
)

// FreePaths measures how long the flights between bounces are: their mean,
// their variance and their distribution. The orbits start evenly in ds dp,
// which the map preserves, so every flight has the same distribution; the
// scatter from lattice to lattice gives the errors, with no correlation along
// an orbit overlooked.
type FreePaths struct {
	Tracer *sim.Tracer
	Starts Lattices
	Each   int // flights of an orbit
}

// Orbits is the number of starts.
func (m FreePaths) Orbits() int { return m.Starts.Size() }

// Bounces is Each.
func (m FreePaths) Bounces() int { return m.Each }

// Start is a point of a lattice.
func (m FreePaths) Start(i int, _ func() float64) sim.Start {
	return sim.Start{State: m.Tracer.Uniform(m.Starts.At(i))}
}

// On is the table whose flights are measured.
func (m FreePaths) On() *sim.Tracer { return m.Tracer }

// Tally is a *FreePathsTally.
func (m FreePaths) Tally() Tally {
	return &FreePathsTally{longest: plane.Diagonal(m.Tracer.Table().Bounds()), lots: Lots[flights]{Size: m.Starts.Points.Size()}}
}

// pathBins is the number of bins of the distribution, from 0 to the table's
// diagonal, which no flight exceeds.
const pathBins = 128

// flights are sums over the flights of a lattice.
type flights struct {
	n, sum, sum2 float64
	bins         [pathBins]float64
}

func (f *flights) add(o *flights) {
	f.n, f.sum, f.sum2 = f.n+o.n, f.sum+o.sum, f.sum2+o.sum2
	for i := range f.bins {
		f.bins[i] += o.bins[i]
	}
}

// FreePathsTally is the sums of each lattice.
type FreePathsTally struct {
	Stops   Stops
	Count   int64 // flights
	longest float64
	lots    Lots[flights]
}

// Open begins orbit i.
func (t *FreePathsTally) Open(i int) { t.lots.Open(i) }

// Add takes the flight that ended in a bounce.
func (t *FreePathsTally) Add(b *sim.Bounce) {
	if b.Stop != sim.Going {
		t.Stops[b.Stop]++
	}
	if b.N == 0 || b.Piece < 0 || math.IsInf(b.Flight, 0) {
		return
	}
	t.Count++
	row := t.lots.Last()
	row.n++
	row.sum += b.Flight
	row.sum2 += b.Flight * b.Flight
	row.bins[min(int(b.Flight/t.longest*pathBins), pathBins-1)]++
}

// Close does nothing.
func (t *FreePathsTally) Close() {}

// Merge adds the next tally.
func (t *FreePathsTally) Merge(next Tally) {
	o := next.(*FreePathsTally)
	t.Count += o.Count
	t.Stops.Add(o.Stops)
	t.lots.Merge(&o.lots, (*flights).add)
}

// Mean is the mean flight with its standard error.
func (t *FreePathsTally) Mean() (mean, stderr float64) {
	return t.lots.Ratio(func(f *flights) (a, b float64) { return f.sum, f.n })
}

// Variance is the variance of the flights with its standard error. To first
// order the error of the mean does not enter it.
func (t *FreePathsTally) Variance() (variance, stderr float64) {
	m, _ := t.Mean()
	return t.lots.Ratio(func(f *flights) (a, b float64) {
		return f.sum2 - 2*m*f.sum + m*m*f.n, f.n
	})
}

// Figure is the distribution of the flights as a density, in steps, with the
// exact mean marked. program is the name and version that the caption ends
// with.
func (t *FreePathsTally) Figure(tab *table.Table, program string) figure.Series {
	unit := tab.Design().Unit.String()
	c := figure.Curve{Hue: 0}
	width := t.longest / pathBins
	last, top := 0, 0.0
	for i := range pathBins {
		d, e := t.lots.Ratio(func(f *flights) (a, b float64) { return f.bins[i], f.n * width })
		c.X = append(c.X, float64(i)*width, float64(i+1)*width)
		c.Y = append(c.Y, d, d)
		c.Err = append(c.Err, e, e)
		if d > 0 {
			last, top = i, math.Max(top, d+e)
		}
	}
	c.X, c.Y, c.Err = c.X[:2*last+2], c.Y[:2*last+2], c.Err[:2*last+2]
	m, me := t.Mean()
	v, ve := t.Variance()
	return figure.Series{
		X:       figure.Axis{Label: "flight", Unit: unit, Lo: 0, Hi: float64(last+1) * width, Marks: []figure.Mark{{At: sim.MeanChord(tab), Kind: figure.Event, Name: "πA/L"}}},
		Y:       figure.Axis{Label: "density", Unit: "1/" + unit, Lo: 0, Hi: 1.08 * top},
		Curves:  []figure.Curve{c},
		Caption: []string{pathsCaption(tab, m, me, v, ve, unit, t), Foot(tab, program)},
	}
}
