package figure

import (
	"math"
	"strconv"
	"strings"
)

// Minus is the minus sign of typography (U+2212), as wide as a figure; the
// hyphen of the keyboard is neither.
const Minus = "−"

// Superscript writes an integer as an exponent.
func Superscript(n int) string {
	return strings.NewReplacer("-", "⁻", "0", "⁰", "1", "¹", "2", "²", "3", "³", "4", "⁴",
		"5", "⁵", "6", "⁶", "7", "⁷", "8", "⁸", "9", "⁹").Replace(strconv.Itoa(n))
}

// Proper replaces the hyphens of a formatted number, of its exponent too, by
// minus signs.
func Proper(s string) string { return strings.ReplaceAll(s, "-", Minus) }

// Reading is a scalar as it is written: the digits of Value go as far as those
// of Error, which has two. Error is empty where the value is exact.
type Reading struct{ Value, Error string }

// String joins value and error with the sign between them.
func (r Reading) String() string {
	if r.Error == "" {
		return r.Value
	}
	return r.Value + " ± " + r.Error
}

// exactDigits is how many digits of an exact value are written: as many as a
// drawing or a letter can use; the JSON export has them all.
const exactDigits = 10

// Sentence is a value with its error as a sentence has it: the same digits as in
// the lists.
func Sentence(value, stderr float64) string {
	return Written(Scalar{Value: value, StdErr: stderr}).String()
}

// Written gives the reading of a scalar without its unit. Values beyond a
// million or below a thousandth are written with a power of ten, the error
// within the same bracket.
func Written(s Scalar) Reading {
	switch {
	case !finite(s.Value):
		return Reading{Value: "not known"}
	case s.StdErr == 0:
		return Reading{Value: exact(s.Value)}
	case !finite(s.StdErr) || s.StdErr < 0:
		return Reading{mantissa(s.Value, 0, 3), "not known"}
	}
	larger := max(math.Abs(s.Value), s.StdErr)
	exp := 0
	if larger >= 1e6 || larger < 1e-3 {
		exp = int(math.Floor(math.Log10(larger)))
	}
	last := leading(s.StdErr) - 1 // power of ten of the second digit of the error
	if last > 0 && exp == 0 {
		unit := math.Pow10(last)
		s.Value, s.StdErr = math.Round(s.Value/unit)*unit, math.Round(s.StdErr/unit)*unit
	}
	places := max(exp-last, 0)
	value, err := mantissa(s.Value, exp, places), mantissa(s.StdErr, exp, places)
	if exp == 0 {
		return Reading{value, err}
	}
	return Reading{"(" + value, err + ") × 10" + Superscript(exp)}
}

// leading is the power of ten of the first digit of v > 0, once v is rounded
// to two digits.
func leading(v float64) int {
	text := strconv.FormatFloat(v, 'e', 1, 64)
	exp, _ := strconv.Atoi(text[strings.IndexByte(text, 'e')+1:])
	return exp
}

// mantissa writes v / 10^exp to so many decimal places.
func mantissa(v float64, exp, places int) string {
	if exp != 0 {
		// Through the decimal text, which rounds once; a division by a
		// power of ten that is no float would round twice.
		text := strconv.FormatFloat(v, 'e', 17, 64)
		at := strings.IndexByte(text, 'e')
		e, _ := strconv.Atoi(text[at+1:])
		v, _ = strconv.ParseFloat(text[:at]+"e"+strconv.Itoa(e-exp), 64)
	}
	text := strconv.FormatFloat(v, 'f', places, 64)
	if strings.Trim(text, "-0.") == "" {
		text = strings.TrimPrefix(text, "-")
	}
	return Proper(text)
}

// exact writes a value that has no error.
func exact(v float64) string {
	if v == 0 {
		return "0"
	}
	if a := math.Abs(v); a >= 1e6 && a != math.Trunc(a) || a >= 1e10 || a < 1e-3 {
		exp := int(math.Floor(math.Log10(a)))
		return trimmed(mantissa(v, exp, exactDigits-1)) + " × 10" + Superscript(exp)
	}
	return trimmed(Proper(strconv.FormatFloat(v, 'f', max(exactDigits-1-leading(math.Abs(v)), 0), 64)))
}

// trimmed leaves out the zeros at the end of a fraction.
func trimmed(s string) string {
	if !strings.Contains(s, ".") {
		return s
	}
	return strings.TrimRight(strings.TrimRight(s, "0"), ".")
}

func finite(v float64) bool { return !math.IsNaN(v) && !math.IsInf(v, 0) }
