package tablefile

import (
	"math"
	"strconv"
	"strings"

	"github.com/go-json-experiment/json/jsontext"
)

// What a file is laid out of, beside text, float64, int and uint64.
type (
	field struct {
		key   string
		value any
	}
	block   []field   // a record of one field a line
	line    []field   // a record on one line
	list    []any     // one entry a line
	numbers []float64 // on one line
	texts   []string  // on one line
)

// layout appends the value to b; the lines after its first are indented by
// depth steps.
func layout(b []byte, v any, depth int) []byte {
	switch v := v.(type) {
	case block:
		b = append(b, '{')
		for i, f := range v {
			b = fresh(b, i, depth+1)
			b = layout(appendKey(b, f.key), f.value, depth+1)
		}
		return append(indented(b, depth), '}')
	case list:
		b = append(b, '[')
		for i, x := range v {
			b = layout(fresh(b, i, depth+1), x, depth+1)
		}
		return append(indented(b, depth), ']')
	case line:
		b = append(b, '{')
		for i, f := range v {
			b = layout(appendKey(spaced(b, i), f.key), f.value, depth)
		}
		return append(b, '}')
	case numbers:
		b = append(b, '[')
		for i, x := range v {
			b = appendNumber(spaced(b, i), x)
		}
		return append(b, ']')
	case texts:
		b = append(b, '[')
		for i, x := range v {
			b = appendText(spaced(b, i), x)
		}
		return append(b, ']')
	case string:
		return appendText(b, v)
	case float64:
		return appendNumber(b, v)
	case int:
		return strconv.AppendInt(b, int64(v), 10)
	case uint64:
		return strconv.AppendUint(b, v, 10)
	}
	panic("tablefile: a value that no file has")
}

func indented(b []byte, depth int) []byte {
	return append(append(b, '\n'), strings.Repeat("  ", depth)...)
}

// fresh begins the line of entry i.
func fresh(b []byte, i, depth int) []byte {
	if i > 0 {
		b = append(b, ',')
	}
	return indented(b, depth)
}

// spaced begins entry i on the same line.
func spaced(b []byte, i int) []byte {
	if i > 0 {
		b = append(b, ", "...)
	}
	return b
}

func appendKey(b []byte, key string) []byte { return append(appendText(b, key), ": "...) }

func appendText(b []byte, s string) []byte {
	b, _ = jsontext.AppendQuote(b, strings.ToValidUTF8(s, "\ufffd")) // valid text does not fail
	return b
}

// appendNumber writes the shortest decimal that reads back to the same bits.
// What is no number is written as such, for the check that follows to refuse.
func appendNumber(b []byte, v float64) []byte {
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return strconv.AppendFloat(b, v, 'f', -1, 64)
	}
	// Minus zero keeps its sign: an angle may hang on it.
	return append(b, jsontext.Float(v).String()...)
}

// zero reports whether v is zero and not minus zero.
func zero(v float64) bool { return math.Float64bits(v) == 0 }
