package render

import (
	"math"

	"cavitywright/sim/figure"
)

// Ladder is the ticks of an axis, in ascending order. Labels are to be read
// times 10^Exp, which belongs to the axis label.
type Ladder struct {
	Major []Tick
	Minor []float64
	Exp   int
}

// Tick is a place on an axis and its number.
type Tick struct {
	At    float64
	Label string
}

// slack is the part of a tick step by which a tick may seem to lie outside the
// axis and still belong to it: enough for the rounding of the ends.
const slack = 1e-9

// maxTickIndex is the largest number of steps from zero at which neighbouring
// ticks are still safely different floats.
const maxTickIndex = 1 << 50

// Ticks chooses ticks between lo and hi, in either order: on a linear axis at
// multiples of 1, 2 or 5 times a power of ten, at most most+1 of them; on a
// logarithmic one at the decades, or at 1, 2 and 5 where few decades are shown.
// An axis whose ends do not differ, or are not finite, has none.
func Ticks(lo, hi float64, scale figure.Scale, most int) Ladder {
	lo, hi = min(lo, hi), max(lo, hi)
	if !finite(lo) || !finite(hi) || !finite(hi-lo) || !(lo < hi) || most < 1 {
		return Ladder{}
	}
	if scale == figure.Log && lo > 0 {
		return logTicks(lo, hi, most)
	}
	return linearTicks(lo, hi, most)
}

// step is mant * 10^exp, mant one of 1, 2, 5.
type step struct {
	mant int64
	exp  int
}

// times is k steps, rounded once.
func (s step) times(k int64) float64 { return scaled(k*s.mant, s.exp) }

// scaled is n * 10^exp, rounded once as long as 10^|exp| is exact.
func scaled(n int64, exp int) float64 {
	if exp < 0 {
		return float64(n) / math.Pow10(-exp)
	}
	return float64(n) * math.Pow10(exp)
}

// stepAtLeast is the smallest step that is not below raw.
func stepAtLeast(raw float64) step {
	exp := int(math.Floor(math.Log10(raw)))
	for _, mant := range [...]int64{1, 2, 5} {
		if s := (step{mant, exp}); s.times(1) >= raw*(1-slack) {
			return s
		}
	}
	return step{1, exp + 1}
}

// stepAtMost is the largest step that is not above raw.
func stepAtMost(raw float64) step {
	exp := int(math.Floor(math.Log10(raw)))
	for _, mant := range [...]int64{5, 2, 1} {
		if s := (step{mant, exp}); s.times(1) <= raw*(1+slack) {
			return s
		}
	}
	return step{5, exp - 1}
}

func linearTicks(lo, hi float64, most int) Ladder {
	s := stepAtLeast((hi - lo) / float64(most))
	size := s.times(1)
	first, last := math.Ceil(lo/size-slack), math.Floor(hi/size+slack)
	farthest := max(math.Abs(first), math.Abs(last), 1)
	if size == 0 || !(farthest < maxTickIndex) || !finite(farthest*size) {
		return Ladder{}
	}
	l := Ladder{Exp: sharedExp(farthest * size)}
	for k := int64(first); k <= int64(last); k++ {
		l.Major = append(l.Major, Tick{s.times(k), decimal(k*s.mant, s.exp-l.Exp)})
	}
	parts := int64(5)
	if s.mant == 2 {
		parts = 4
	}
	for k := (int64(first) - 1) * parts; k <= (int64(last)+1)*parts; k++ {
		if v := float64(k) * size / float64(parts); k%parts != 0 && v >= lo && v <= hi {
			l.Minor = append(l.Minor, v)
		}
	}
	return l
}

// sharedExp is the power of ten, a multiple of three, that is taken out of
// labels that would else be longer than a person reads at a glance.
func sharedExp(largest float64) int {
	if largest == 0 || largest >= 1e-3 && largest < 1e5 {
		return 0
	}
	return 3 * int(math.Floor(math.Log10(largest)/3+slack))
}

func logTicks(lo, hi float64, most int) Ladder {
	first, last := int(math.Ceil(math.Log10(lo)-slack)), int(math.Floor(math.Log10(hi)+slack))
	if last-first < 2 {
		return shortLogTicks(lo, hi, first-1, last, most)
	}
	stride := (last-first)/most + 1
	plain := first >= -2 && last <= 3
	var l Ladder
	for d := first; d <= last; d++ {
		if mod(d, stride) != 0 {
			continue
		}
		label := "10" + superscript(d)
		if plain {
			label = decimal(1, d)
		}
		l.Major = append(l.Major, Tick{scaled(1, d), label})
	}
	if stride > 1 {
		for d := first; d <= last; d++ {
			if mod(d, stride) != 0 {
				l.Minor = append(l.Minor, scaled(1, d))
			}
		}
		return l
	}
	l.Minor = ninths(lo, hi, first-1, last)
	return l
}

// shortLogTicks serves less than three decades: 1, 2 and 5 in each, or linear
// ticks where even those would be fewer than three.
func shortLogTicks(lo, hi float64, first, last, most int) Ladder {
	var l Ladder
	for d := first; d <= last; d++ {
		for _, m := range [...]int64{1, 2, 5} {
			v := scaled(m, d)
			if v < lo*(1-slack) || v > hi*(1+slack) {
				continue
			}
			label := decimal(m, d)
			if d < -3 || d > 4 {
				label = decimal(m, 0) + " × 10" + superscript(d)
			}
			l.Major = append(l.Major, Tick{v, label})
		}
	}
	if len(l.Major) < 3 || len(l.Major) > most+1 {
		if len(l.Major) > most+1 && last-first > 1 {
			return decadesOnly(l, lo, hi, first, last)
		}
		return linearTicks(lo, hi, most)
	}
	return l
}

// decadesOnly keeps the powers of ten of a ladder.
func decadesOnly(l Ladder, lo, hi float64, first, last int) Ladder {
	var kept []Tick
	for _, t := range l.Major {
		if e := math.Log10(t.At); math.Abs(e-math.Round(e)) < slack {
			kept = append(kept, t)
		}
	}
	return Ladder{Major: kept, Minor: ninths(lo, hi, first, last)}
}

// ninths is the multiples 2 to 9 of the decades first to last that lie between
// lo and hi.
func ninths(lo, hi float64, first, last int) []float64 {
	var all []float64
	for d := first; d <= last; d++ {
		for m := int64(2); m <= 9; m++ {
			if v := scaled(m, d); v >= lo && v <= hi {
				all = append(all, v)
			}
		}
	}
	return all
}

// mod is the remainder of d by n, never negative.
func mod(d, n int) int { return ((d % n) + n) % n }
