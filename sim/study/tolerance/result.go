package tolerance

import (
	"math"
	"slices"

	"cavitywright/table"

	"gonum.org/v1/gonum/stat"
)

// Result is what was measured: of the wall as drawn, of the copies with all
// errors, and of those with each error alone, by the error.
type Result struct {
	*Tolerance
	Nominal Row
	Rows    []Row
	Alone   [][]Row
}

// Distribution is how a reading lies over the copies.
type Distribution struct {
	Nominal, NominalErr float64
	Values              []float64 // ascending
	None                int       // copies that are no wall, or have no such reading
	Mean, MeanErr       float64
	Deviation           float64 // standard deviation of the copies
	// Noise is the root of the mean square of the readings' own errors: the
	// part of Deviation that is not the wall's.
	Noise float64
}

// OfReading is the distribution of reading k of the plan.
func (r *Result) OfReading(k int) Distribution { return r.distribution(r.Rows, k) }

func (r *Result) distribution(rows []Row, k int) Distribution {
	var d Distribution
	d.Nominal, d.NominalErr = r.Nominal.value(k)
	square := 0.0
	for i := range rows {
		v, e := rows[i].value(k)
		if math.IsNaN(v) {
			d.None++
			continue
		}
		d.Values = append(d.Values, v)
		square += e * e
	}
	slices.Sort(d.Values)
	n := float64(len(d.Values))
	if n == 0 {
		d.Mean, d.MeanErr, d.Deviation = math.NaN(), math.NaN(), math.NaN()
		return d
	}
	d.Mean = stat.Mean(d.Values, nil)
	if n > 1 {
		d.Deviation = stat.StdDev(d.Values, nil)
	}
	d.MeanErr = d.Deviation / math.Sqrt(n)
	d.Noise = math.Sqrt(square / n)
	return d
}

// Quantile is the value below which the share p of the copies lies, interpolated
// between the two nearest.
func (d Distribution) Quantile(p float64) float64 {
	if len(d.Values) == 0 {
		return math.NaN()
	}
	x := p * float64(len(d.Values)-1)
	i := min(int(x), len(d.Values)-1)
	j := min(i+1, len(d.Values)-1)
	return d.Values[i] + (x-float64(i))*(d.Values[j]-d.Values[i])
}

// Wall is the standard deviation that is the wall's: what is left of Deviation
// without Noise, 0 where that is all of it.
func (d Distribution) Wall() float64 {
	return math.Sqrt(math.Max(0, d.Deviation*d.Deviation-d.Noise*d.Noise))
}

// Yield is how many copies keep to limits. Err is the binomial standard error;
// Lo and Hi hold the true share with a confidence of 95 % (E. B. Wilson, J. Am.
// Stat. Assoc. 22, 209, 1927).
type Yield struct {
	Good, Of           int
	Share, Err, Lo, Hi float64
	// Near is the number of copies that lie within two of their own errors of
	// the limit.
	Near int
}

// Yield of all limits together, or of one of them; All for all. A copy that is
// no wall, or has no such reading, does not keep to it.
func (r *Result) Yield(limit int) Yield {
	y := Yield{Of: len(r.Rows)}
	for i := range r.Rows {
		good, near := true, false
		for k, l := range r.Plan.Limits {
			if limit != All && limit != k {
				continue
			}
			v, e := r.Rows[i].value(r.index(l.Reading))
			good = good && v >= l.Lo && v <= l.Hi
			near = near || math.Abs(v-l.Lo) < 2*e || math.Abs(v-l.Hi) < 2*e
		}
		if good {
			y.Good++
		}
		if near {
			y.Near++
		}
	}
	return y.filled()
}

func (y Yield) filled() Yield {
	const z = 1.959963984540054 // of the normal distribution, 95 %
	n := float64(y.Of)
	if y.Of == 0 {
		y.Share, y.Err, y.Lo, y.Hi = math.NaN(), math.NaN(), 0, 1
		return y
	}
	p := float64(y.Good) / n
	y.Share, y.Err = p, math.Sqrt(p*(1-p)/n)
	middle, half := (p+z*z/(2*n))/(1+z*z/n), z*math.Sqrt(p*(1-p)/n+z*z/(4*n*n))/(1+z*z/n)
	y.Lo, y.Hi = math.Max(0, middle-half), math.Min(1, middle+half)
	return y
}

// index is the place of a reading in the plan.
func (t *Tolerance) index(name string) int { return slices.Index(t.Plan.Readings, name) }

// Part is what one error does to a reading by itself.
type Part struct {
	Deviation float64 // standard deviation of the copies with this error alone, without noise
	// Share is its square over that of the copies with all errors: to first
	// order in the errors the shares add up to 1. Err is its standard error.
	Share, Err float64
	Exact      Exactness
}

// Exactness says whether a share was measured.
type Exactness uint8

// A share that is Known follows without measuring: that of size in a reading
// without a dimension is 0, that of the only error 1.
const (
	Estimated Exactness = iota
	Known
)

// Parts are those of every error in reading k.
func (r *Result) Parts(k int) []Part {
	all := make([]Part, len(r.flaws))
	whole := r.OfReading(k)
	for i, f := range r.flaws {
		p := &all[i]
		rows := r.Rows
		if len(r.flaws) > 1 {
			rows = r.Alone[i]
		}
		d := r.distribution(rows, k)
		p.Deviation = d.Wall()
		switch {
		case f.Kind == table.SizeFlaw && k < len(r.Nominal.Taken) && Dimension(r.Nominal.Taken[k].Unit, r.Base.Design().Unit) == 0:
			*p = Part{Exact: Known}
		case len(r.flaws) == 1:
			p.Share, p.Exact = 1, Known
		case f.Kind == table.SizeFlaw:
			// Every copy has the same error of its reading, scaled along.
			p.Deviation = d.Deviation
			p.Share, p.Err = ratio(d.Deviation*d.Deviation, 0, len(d.Values), whole)
		default:
			p.Share, p.Err = ratio(d.Deviation*d.Deviation, d.Noise*d.Noise, len(d.Values), whole)
		}
	}
	return all
}

// ratio is the share of a variance with its error: the variance of a sample of n
// has the relative error sqrt(2/(n-1)) where the values are about normal.
func ratio(v, noise float64, n int, whole Distribution) (share, err float64) {
	all := whole.Wall()
	if all == 0 || n < 2 {
		return math.NaN(), math.NaN()
	}
	all *= all
	rel := math.Sqrt(2 / float64(n-1))
	share = math.Max(0, v-noise) / all
	return share, math.Hypot(rel*v, rel*share*whole.Deviation*whole.Deviation) / all
}

// Worst are the numbers of the n copies that are farthest beyond the limits of a
// reading, or, where it has none, farthest from the median; walls that could be
// made come first.
func (r *Result) Worst(k, n int) []int {
	var at []int
	far := map[int]float64{}
	d := r.OfReading(k)
	middle := d.Quantile(0.5)
	for i := range r.Rows {
		v, _ := r.Rows[i].value(k)
		if math.IsNaN(v) {
			continue
		}
		far[i] = math.Abs(v - middle)
		for _, l := range r.Plan.Limits {
			if l.Reading == r.Plan.Readings[k] {
				far[i] = math.Max(l.Lo-v, v-l.Hi)
			}
		}
		at = append(at, i)
	}
	slices.SortStableFunc(at, func(a, b int) int {
		switch {
		case far[a] > far[b]:
			return -1
		case far[a] < far[b]:
			return 1
		}
		return 0
	})
	return at[:min(n, len(at))]
}
