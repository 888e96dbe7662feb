package render

import (
	"regexp"
	"strconv"
	"strings"

	"cavitywright/sim/figure"
)

// minus is the minus sign of typography.
const minus = figure.Minus

// decimal writes n * 10^exp with all its digits and no others. It works on
// integers throughout, so no noise of binary fractions can appear.
func decimal(n int64, exp int) string {
	sign := ""
	if n < 0 {
		sign, n = minus, -n
	}
	digits := strconv.FormatInt(n, 10)
	switch {
	case n == 0 && exp >= 0:
		return "0"
	case exp >= 0:
		return sign + digits + strings.Repeat("0", exp)
	}
	if pad := -exp + 1 - len(digits); pad > 0 {
		digits = strings.Repeat("0", pad) + digits
	}
	cut := len(digits) + exp
	if n == 0 {
		sign = ""
	}
	return sign + digits[:cut] + "." + digits[cut:]
}

// plainUnit finds the spellings of units that files use in plain letters.
var plainUnit = regexp.MustCompile(`\b(u?)(m|cm|mm|nm)([23]?)\b`)

// unitText is a unit as it is printed: um as µm, mm2 as mm².
func unitText(unit string) string {
	return plainUnit.ReplaceAllStringFunc(unit, func(u string) string {
		return strings.NewReplacer("u", "µ", "2", "²", "3", "³").Replace(u)
	})
}

// Proper replaces the hyphens of a formatted number by minus signs.
func Proper(s string) string { return figure.Proper(s) }

// Written gives the reading of a scalar without its unit.
func Written(s figure.Scalar) figure.Reading { return figure.Written(s) }

func superscript(n int) string { return figure.Superscript(n) }
