package modes

import (
	"math"

	"cavitywright/table"
)

// Field is what fills a cavity of constant height with flat ends, and what its
// walls and ends do to it.
type Field uint8

const (
	// Metal is the electromagnetic field between perfect conductors. TM modes,
	// the electric field along the axis of the plane's Dirichlet modes, have
	// q = 0, 1, 2 ... half waves over the height; TE modes, the magnetic field
	// of the plane's Neumann modes but for the constant one, have q = 1, 2, ...
	Metal Field = iota
	// Sound is the pressure between rigid walls and ends: the plane's Neumann
	// modes, each with q = 0, 1, 2 ... half waves; the constant one is counted.
	Sound
)

func (f Field) String() string { return [...]string{"electromagnetic", "sound"}[f] }

// Convention says which modes are counted.
func (f Field) Convention() string {
	return [...]string{
		"perfectly conducting walls and ends: TM modes (E along the height, Dirichlet in the plane) with 0, 1, 2 or more half waves over the height, TE modes (H along the height, Neumann in the plane) with 1, 2 or more",
		"rigid walls and ends: pressure modes (Neumann in the plane) with 0, 1, 2, ... half waves over the height, the constant one counted",
	}[f]
}

// Plate is a cavity over a table, of constant height in the table's unit.
type Plate struct {
	Field              Field
	Height             float64
	electric, magnetic Weyl
}

// PlateOf is the cavity over the table; height > 0. The error is ErrOpen.
func PlateOf(t *table.Table, f Field, height float64) (Plate, error) {
	d, err := Of(t, Dirichlet)
	if err != nil {
		return Plate{}, err
	}
	n, err := Of(t, Neumann)
	return Plate{Field: f, Height: height, electric: d, magnetic: n}, err
}

// Cutoff is the wave number below which the cavity is two-dimensional, π over
// the height: at the frequency c/2h half a wave fits over it.
func (p Plate) Cutoff() float64 { return math.Pi / p.Height }

// Orders is the number of half waves over the height that fit below k.
func (p Plate) Orders(k float64) int { return int(k / p.Cutoff()) }

// Count is the number of modes below the wave number k >= 0: the plane's law at
// √(k² - (qπ/h)²), summed over the orders q. An order that has only just come up
// counts as none where the law, which is for many modes, says fewer.
func (p Plate) Count(k float64) float64 {
	sum := 0.0
	for q := 0; float64(q)*p.Cutoff() <= k; q++ {
		up := float64(q) * p.Cutoff()
		sum += p.order(q, math.Sqrt((k-up)*(k+up)))
	}
	return sum
}

// order is the count of the modes with q half waves over the height whose wave
// number in the plane is below k.
func (p Plate) order(q int, k float64) float64 {
	n := math.Max(0, p.magnetic.Count(k))
	if p.Field == Sound {
		return n
	}
	d := math.Max(0, p.electric.Count(k))
	if q == 0 {
		return d
	}
	return d + math.Max(0, n-1)
}

// At is the wave number below which there are count modes, by halving; NaN for
// less than none.
func (p Plate) At(count float64) float64 {
	if count < p.Count(0) {
		return math.NaN()
	}
	lo, hi := 0.0, p.Cutoff()
	for p.Count(hi) < count {
		lo, hi = hi, 2*hi
	}
	for range 60 {
		if mid := 0.5 * (lo + hi); p.Count(mid) < count {
			lo = mid
		} else {
			hi = mid
		}
	}
	return hi
}

// Volume is the cavity's, in the table's unit cubed.
func (p Plate) Volume() float64 { return p.electric.Area * p.Height }

// Surface is the area of walls and ends, in the table's unit squared.
func (p Plate) Surface() float64 { return 2*p.electric.Area + p.electric.Perimeter*p.Height }

// FreePath is the mean free path of rays in the cavity, 4 V / S (Kosten,
// Acustica 10, 245 (1960)).
func (p Plate) FreePath() float64 { return 4 * p.Volume() / p.Surface() }
