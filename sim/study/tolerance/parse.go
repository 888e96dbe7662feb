package tolerance

import (
	"math"
	"strconv"
	"strings"

	"cavitywright/table"
)

// FlawForms are the ways in which an error is written on a command line. LAW is
// normal or uniform, WIDTH the standard deviation or the half width, and MEAN, 0
// where it is left out, the middle.
const FlawForms = "size:LAW:WIDTH[:MEAN] (relative), dial:NAME:LAW:WIDTH[:MEAN], offset:LAW:WIDTH[:MEAN], tool:RADIUS[:LAW:WIDTH], roughness:RMS:LENGTH or index:LAW:WIDTH[:MEAN]"

// ParseFlaw reads an error from one of FlawForms. The error is a *Refusal.
func ParseFlaw(text string) (table.Flaw, error) {
	wrong := refuse("%q is no error of a workshop; write %s", text, FlawForms)
	f := strings.Split(text, ":")
	var numbers []float64
	var out table.Flaw
	kinds := map[string]table.FlawKind{"size": table.SizeFlaw, "dial": table.DialFlaw, "offset": table.OffsetFlaw, "tool": table.ToolFlaw, "roughness": table.RoughFlaw, "index": table.IndexFlaw}
	kind, is := kinds[f[0]]
	if !is {
		return out, wrong
	}
	out.Kind, f = kind, f[1:]
	if kind == table.DialFlaw && len(f) > 0 {
		out.Dial, f = f[0], f[1:]
	}
	for _, word := range f {
		switch x, err := strconv.ParseFloat(word, 64); {
		case word == "normal":
			out.Law = table.Normal
		case word == "uniform":
			out.Law = table.Uniform
		case err != nil || math.IsNaN(x) || math.IsInf(x, 0):
			return out, wrong
		default:
			numbers = append(numbers, x)
		}
	}
	laws := len(f) - len(numbers)
	switch {
	case kind == table.RoughFlaw && laws == 0 && len(numbers) == 2:
		out.Width, out.Length = numbers[0], numbers[1]
	case kind == table.ToolFlaw && (laws == 0 && len(numbers) == 1 || laws == 1 && len(numbers) == 2):
		out.Mean = numbers[0]
		if laws == 1 {
			out.Width = numbers[1]
		}
	case kind != table.RoughFlaw && kind != table.ToolFlaw && laws == 1 && (len(numbers) == 1 || len(numbers) == 2):
		out.Width = numbers[0]
		if len(numbers) == 2 {
			out.Mean = numbers[1]
		}
	default:
		return out, wrong
	}
	return out, nil
}
