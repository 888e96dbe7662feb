package pane

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"

	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/table/param"

	"fyne.io/fyne/v2/widget"
)

// row is one number.
type row struct {
	spec   param.Spec
	entry  *number
	slider *widget.Slider
	value  float64
	unit   table.Unit // that the text is in
	set    func(float64) edit.Command
	quiet  bool // the slider is being set by the program
}

// bring shows the value x. The slider's range follows the value, but never
// under the hand.
func (r *row) bring(x float64, unit table.Unit, size float64, busy bool) {
	if x == r.value && unit == r.unit {
		return
	}
	first := math.IsNaN(r.value)
	r.value, r.unit = x, unit
	r.quiet = true
	if !busy || first {
		r.slider.Min, r.slider.Max = r.around(x, size)
	}
	r.slider.Value = math.Min(math.Max(x, r.slider.Min), r.slider.Max)
	r.slider.Refresh()
	r.quiet = false
	if !r.entry.focused {
		r.entry.SetText(r.text(x, unit))
	}
}

// around is the range of the slider about a value: the parameter's own where
// that is short, else some times the value's size.
func (r *row) around(x, size float64) (lo, hi float64) {
	if r.spec.Hi-r.spec.Lo <= 64 {
		return r.spec.Lo, r.spec.Hi
	}
	if r.spec.Lo < 0 {
		return x - size, x + size
	}
	if r.spec.Lo == 0 && x == 0 {
		return 0, math.Min(r.spec.Hi, size/8) // a fillet that is not there yet
	}
	if r.spec.Unit == param.Count {
		return r.spec.Lo, math.Min(r.spec.Hi, math.Max(12, 4*x))
	}
	return math.Max(r.spec.Lo, 0.02*x), math.Min(r.spec.Hi, 2.5*x)
}

// text is the value with its unit.
func (r *row) text(x float64, unit table.Unit) string {
	switch r.spec.Unit {
	case param.Length:
		return short(x) + " " + unit.String()
	case param.Angle:
		return short(x*180/math.Pi) + "°"
	}
	return short(x)
}

// short writes a number with at most six digits.
func short(x float64) string {
	if math.Abs(x) < 1e-12 {
		x = 0
	}
	return strings.Replace(strconv.FormatFloat(x, 'g', 6, 64), "-", "−", 1)
}

// nudged is the value moved by k notches of a hundredth of the slider.
func (r *row) nudged(k float64) float64 {
	step := (r.slider.Max - r.slider.Min) / 200
	if r.spec.Unit == param.Count {
		step = 1
	}
	return r.value + k*step
}

// parse reads a typed value; the unit may stand behind it.
func (r *row) parse(text string, unit table.Unit) (float64, error) {
	x, err := Evaluate(text, unit)
	if err != nil {
		return 0, fmt.Errorf("%s: %w", r.spec.Name, err)
	}
	if r.spec.Unit == param.Angle {
		x *= math.Pi / 180
	}
	if err := r.spec.Check(x); err != nil {
		var re *param.RangeError
		if errors.As(err, &re) && r.spec.Unit == param.Angle {
			return 0, fmt.Errorf("%s must lie between %.4g° and %.4g°", r.spec.Name, r.spec.Lo*180/math.Pi, r.spec.Hi*180/math.Pi)
		}
		return 0, err
	}
	return x, nil
}
