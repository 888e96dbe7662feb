package table

import (
	"fmt"
	"strings"
)

// Unit is the unit of all lengths of a design, as it is written.
type Unit string

// The units of length.
const (
	Metre      Unit = "m"
	Centimetre Unit = "cm"
	Millimetre Unit = "mm"
	Micrometre Unit = "um"
	Nanometre  Unit = "nm"
)

var metres = []struct {
	unit Unit
	m    float64
}{{Metre, 1}, {Centimetre, 1e-2}, {Millimetre, 1e-3}, {Micrometre, 1e-6}, {Nanometre, 1e-9}}

// Units lists the units of length, longest first.
func Units() []Unit {
	var all []Unit
	for _, u := range metres {
		all = append(all, u.unit)
	}
	return all
}

// Metres is the unit's length in metres; 0 for an unknown unit.
func (u Unit) Metres() float64 {
	for _, k := range metres {
		if k.unit == u {
			return k.m
		}
	}
	return 0
}

// String is the unit as it is printed: um reads µm.
func (u Unit) String() string { return strings.Replace(string(u), "um", "µm", 1) }

// ParseUnit reads a unit as files and command lines write it.
func ParseUnit(s string) (Unit, error) {
	u := Unit(strings.Replace(s, "µm", "um", 1))
	if u.Metres() == 0 {
		return "", fmt.Errorf("there is no unit of length %q; use m, cm, mm, um or nm", s)
	}
	return u, nil
}
