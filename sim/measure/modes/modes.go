// Package modes counts the modes of a cavity from its wall alone, by Weyl's law
// with its corrections: how many there are below a wave number, at which wave
// number there are so many, and how many a plate or a room of constant height
// has. It solves no wave equation: the counts are those of the smooth law,
// about which the exact number fluctuates.
//
// Lengths are in the table's unit and wave numbers per that unit, but where a
// name or a comment says metres. The packages of rays are not used.
package modes

import (
	"errors"
	"math"

	"cavitywright/table"
	"cavitywright/table/curve"
)

// Wall is what a wave does at the wall.
type Wall uint8

// The walls: the field vanishes (a membrane, the electric field along the axis
// of a metal cavity), or its normal derivative does (sound at a rigid wall, the
// magnetic field along the axis).
const (
	Dirichlet Wall = iota
	Neumann
)

func (w Wall) String() string { return [...]string{"Dirichlet", "Neumann"}[w] }

// Weyl is the smooth count of modes of a plane table,
//
//	N(k) = Area k²/4π ∓ Perimeter k/4π + Bend + Corners,
//
// minus for Dirichlet and plus for Neumann, with Bend = (1/12π) ∮ κ ds over the
// curved wall and Corners = Σ (π² - α²)/(24πα) over the corners of inner angle
// α (Baltes and Hilf, Spectra of Finite Systems, 1976).
type Weyl struct {
	Wall            Wall
	Area, Perimeter float64
	Bend, Corners   float64
}

// ErrOpen is the error for a table without an outer wall.
var ErrOpen = errors.New("the table has no outer wall, so it has no modes to count; put a wall around it")

// Of is the law for the table, or ErrOpen.
func Of(t *table.Table, w Wall) (Weyl, error) {
	if t.Open() {
		return Weyl{}, ErrOpen
	}
	n := Weyl{Wall: w, Area: t.Area(), Perimeter: t.Length()}
	for i := range t.Pieces() {
		if p := &t.Pieces()[i]; p.Kind != curve.Segment {
			n.Bend += p.Turn / (12 * math.Pi)
		}
	}
	for _, j := range t.Joints() {
		if j.Continuity == table.Corner {
			a := j.InteriorAngle()
			n.Corners += (math.Pi - a) * (math.Pi + a) / (24 * math.Pi * a)
		}
	}
	return n, nil
}

// Edge is the length in the perimeter's term: the perimeter, negative for Dirichlet.
func (n Weyl) Edge() float64 {
	if n.Wall == Dirichlet {
		return -n.Perimeter
	}
	return n.Perimeter
}

// Count is the number of modes below the wave number k >= 0. The law is for
// many modes: below the first it may be negative.
func (n Weyl) Count(k float64) float64 {
	return (n.Area*k+n.Edge())*k/(4*math.Pi) + n.Bend + n.Corners
}

// Density is the number of modes per unit of wave number at k, the derivative
// of Count.
func (n Weyl) Density(k float64) float64 {
	return (2*n.Area*k + n.Edge()) / (4 * math.Pi)
}

// At is the wave number with count modes below it: the inverse of Count, NaN
// for a count below all that the law gives.
func (n Weyl) At(count float64) float64 {
	e := n.Edge()
	rest := 4 * math.Pi * (count - n.Bend - n.Corners)
	root := math.Sqrt(e*e + 4*n.Area*rest)
	// Without the difference of two nearly equal numbers.
	k := (root - e) / (2 * n.Area)
	if e > 0 {
		k = 2 * rest / (root + e)
	}
	if k < 0 {
		return math.NaN()
	}
	return k
}

// Medium turns wave numbers of a table into frequencies.
type Medium struct {
	Speed float64    // of the waves in the medium, m/s
	Unit  table.Unit // of the table
}

const (
	// LightSpeed is the speed of light in vacuum, m/s (exact, SI).
	LightSpeed = 299792458
	// SoundSpeed is the speed of sound in dry air at 20 °C, m/s (ISO 9613-1
	// gives 343.2; common practice).
	SoundSpeed = 343.2
)

// K is the wave number, per unit of the table, at the frequency in hertz.
func (m Medium) K(hertz float64) float64 {
	return 2 * math.Pi * hertz / m.Speed * m.Unit.Metres()
}

// Hertz is the frequency of the wave number k, per unit of the table.
func (m Medium) Hertz(k float64) float64 {
	return k / m.Unit.Metres() * m.Speed / (2 * math.Pi)
}
