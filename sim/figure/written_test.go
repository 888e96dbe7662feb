package figure

import (
	"math"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

func TestWritten(t *testing.T) {
	for _, c := range []struct {
		value, err float64
		want       string
	}{
		{10.283185307179586, 0, "10.28318531"},
		{0, 0, "0"},
		{42, 0, "42"},
		{-1.5, 0, "−1.5"},
		{6.02214076e23, 0, "6.02214076 × 10²³"},
		{2.18213, 0.00042, "2.18213 ± 0.00042"},
		{-0.42983, 0.0012, "−0.4298 ± 0.0012"},
		{0.5, 0.0996, "0.50 ± 0.10"},
		{3.217e-7, 4.1e-9, "(3.217 ± 0.041) × 10⁻⁷"},
		{123456.7, 1234, "123500 ± 1200"},
		{-0.0001, 0.02, "0.000 ± 0.020"},
		{1e-9, 3, "0.0 ± 3.0"},
		{math.NaN(), 1, "not known"},
		{0.5, math.NaN(), "0.500 ± not known"},
	} {
		if got := Written(Scalar{Value: c.value, StdErr: c.err}).String(); got != c.want {
			t.Errorf("%g ± %g: %q, want %q", c.value, c.err, got, c.want)
		}
	}
}

// What is written is within half a unit of its last digit of what was
// measured, and that unit is between a hundredth and a tenth of the error.
func TestWrittenIsTrueToItsDigits(t *testing.T) {
	superscripts := strings.NewReplacer("⁻", "-", "⁰", "0", "¹", "1", "²", "2", "³", "3", "⁴", "4",
		"⁵", "5", "⁶", "6", "⁷", "7", "⁸", "8", "⁹", "9", Minus, "-")
	rapid.Check(t, func(t *rapid.T) {
		err := math.Pow(10, rapid.Float64Range(-9, 5).Draw(t, "log err"))
		value := rapid.Float64Range(-1e4, 1e4).Draw(t, "times") * err
		r := Written(Scalar{Value: value, StdErr: err})
		exp, errText := 0, r.Error
		if m, e, ok := strings.Cut(r.Error, ") × 10"); ok {
			errText = m
			exp, _ = strconv.Atoi(superscripts.Replace(e))
		}
		got, fail := strconv.ParseFloat(superscripts.Replace(strings.TrimPrefix(r.Value, "(")), 64)
		if fail != nil {
			t.Fatal(fail)
		}
		gotErr, _ := strconv.ParseFloat(errText, 64)
		got, gotErr = got*math.Pow10(exp), gotErr*math.Pow10(exp)
		unit := math.Pow10(leading(err) - 1)
		if math.Abs(got-value) > 0.5001*unit || math.Abs(gotErr-err) > 0.5001*unit {
			t.Fatalf("%g ± %g was written %s", value, err, r)
		}
	})
}
