package table

import "strconv"

// DialSweep is a plan: some numbers of the design, its dials, take values, and
// readings are taken at each point. package dial says how a dial is written.
// Whether the design has such dials, and whether there are such readings, is
// asked when the sweep is run: a plan outlives a change of the wall.
type DialSweep struct {
	Name  string
	Turns []Turn // at least one
	// Sample is the number of points that fill the box of all Turns evenly; 0
	// where the points are all combinations of their values.
	Sample   int
	Readings []string
	Effort   float64 // multiplies the bounces of each reading, above 0
	// Orbits is the period up to which periodic orbits are followed along the
	// only dial of the sweep, so that their births can be marked; 0 for none.
	Orbits int
}

// Turn is a dial with its values: Points of them evenly from From to To, or
// those listed where there are any.
type Turn struct {
	Dial     string
	From, To float64
	Points   int
	Values   []float64
}

// All are the values in their order. Both ends of a range belong to it.
func (t Turn) All() []float64 {
	if len(t.Values) > 0 {
		return t.Values
	}
	all := make([]float64, t.Points)
	lo, hi := min(t.From, t.To), max(t.From, t.To)
	for i := range all {
		x := float64(i) / float64(max(t.Points-1, 1))
		all[i] = min(max(rounded(float64(t.From*(1-x))+float64(t.To*x)), lo), hi)
	}
	all[0] = t.From
	if t.Points > 1 {
		all[t.Points-1] = t.To
	}
	return all
}

// decimals is the number of significant digits to which the values of a range
// are rounded: so many every decimal of a double keeps, and 0.3 is then the 0.3
// that a person types, not its neighbour.
const decimals = 15

func rounded(v float64) float64 {
	r, err := strconv.ParseFloat(strconv.FormatFloat(v, 'g', decimals, 64), 64)
	if err != nil {
		return v // not finite
	}
	return r
}

// Ends are the least and the greatest value.
func (t Turn) Ends() (lo, hi float64) {
	all := t.All()
	lo, hi = all[0], all[0]
	for _, v := range all {
		lo, hi = min(lo, v), max(hi, v)
	}
	return lo, hi
}
