package export

import (
	"fmt"
	"io"
	"math"

	"cavitywright/sim/figure"

	"github.com/go-json-experiment/json"
	"github.com/go-json-experiment/json/jsontext"
)

// readings is the form of a JSON file of readings.
type readings struct {
	Readings []figure.Scalar  `json:"readings"`
	None     []figure.Missing `json:"none,omitempty"`
}

// writeJSON writes readings with all their digits, and one line break at the
// end. JSON has no way to write a value that is not finite.
func writeJSON(w io.Writer, f figure.Figure) error {
	scalars, ok := f.(figure.Scalars)
	if !ok {
		return &Unfit{JSON, kind(f)}
	}
	for _, s := range scalars.Rows {
		if !finite(s.Value) || !finite(s.StdErr) {
			return fmt.Errorf("%w: %s", ErrNoValue, s.Name)
		}
	}
	rows := scalars.Rows
	if rows == nil {
		rows = []figure.Scalar{}
	}
	if err := json.MarshalWrite(w, readings{rows, scalars.None}, jsontext.WithIndent("  ")); err != nil {
		return fmt.Errorf("write JSON: %w", err)
	}
	_, err := io.WriteString(w, "\n")
	return err
}

func finite(v float64) bool { return !math.IsNaN(v) && !math.IsInf(v, 0) }
