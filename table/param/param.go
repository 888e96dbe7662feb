// Package param describes a number that a person may set: one description for
// the form, the file and the command line. It knows nothing of what the number
// does.
package param

import (
	"fmt"
	"math"
	"strings"
)

// Unit is what a parameter is measured in.
type Unit uint8

// The units of a parameter. A Length is in the table's own unit, an Angle in
// radians (forms show degrees), a Count is a whole number.
const (
	Pure Unit = iota
	Length
	Angle
	Count
)

// Spec is one parameter: its name as files and command lines write it, its
// unit, the closed range [Lo, Hi], the default and one line of help.
type Spec struct {
	Name        string
	Unit        Unit
	Lo, Hi      float64
	Default     float64
	Description string
}

// Check returns a *RangeError unless v is a number within the range, and whole
// where the parameter is a count.
func (s Spec) Check(v float64) error {
	if math.IsNaN(v) || v < s.Lo || v > s.Hi || s.Unit == Count && v != math.Trunc(v) {
		return &RangeError{Spec: s, Value: v}
	}
	return nil
}

// Clamp is the value nearest to v that Check accepts. v must be a number.
func (s Spec) Clamp(v float64) float64 {
	if s.Unit == Count {
		v = math.Round(v)
	}
	return math.Min(math.Max(v, s.Lo), s.Hi)
}

// RangeError is a parameter out of its range.
type RangeError struct {
	Spec  Spec
	Value float64
}

func (e *RangeError) Error() string {
	if e.Spec.Unit == Count {
		return fmt.Sprintf("%s is %v, but must be a whole number from %v to %v", e.Spec.Name, e.Value, e.Spec.Lo, e.Spec.Hi)
	}
	return fmt.Sprintf("%s is %v, but must lie between %v and %v", e.Spec.Name, e.Value, e.Spec.Lo, e.Spec.Hi)
}

// Values are the values of a list of Specs, in their order.
type Values []float64

// Defaults are the default values of the specs.
func Defaults(specs []Spec) Values {
	v := make(Values, len(specs))
	for i, s := range specs {
		v[i] = s.Default
	}
	return v
}

// Check returns the first *RangeError, or an error if the number of values is
// not that of the specs.
func (v Values) Check(specs []Spec) error {
	if len(v) != len(specs) {
		return fmt.Errorf("%d values for %d parameters", len(v), len(specs))
	}
	for i, s := range specs {
		if err := s.Check(v[i]); err != nil {
			return err
		}
	}
	return nil
}

// With is a copy in which value i is x.
func (v Values) With(i int, x float64) Values {
	w := append(Values(nil), v...)
	w[i] = x
	return w
}

// Index is the place of the parameter called name, or -1.
func Index(specs []Spec, name string) int {
	for i, s := range specs {
		if s.Name == name {
			return i
		}
	}
	return -1
}

// Names lists the parameters' names, for a sentence.
func Names(specs []Spec) string {
	names := make([]string, len(specs))
	for i, s := range specs {
		names[i] = s.Name
	}
	return strings.Join(names, ", ")
}
