package main

import (
	"path/filepath"
	"strings"
	"testing"

	"github.com/go-json-experiment/json"
)

// TestTolerance: the distribution of an area, whose mean and scatter are known;
// the same on any number of workers; figures and the table of the copies.
func TestTolerance(t *testing.T) {
	file := saved(t, "plate.cavity.json", fine(t, "", "make", "rectangle", "width=3", "height=2", "name=Larkmoor trial plate"))
	args := []string{"tolerance", file, "--error", "dial:width:normal:0.03", "--error", "size:uniform:0.01", "--take", "area,perimeter", "--copies", "300", "--at-least", "area=6", "--json"}
	out := fine(t, "", append(args, "--workers", "1")...)
	if out != fine(t, "", append(args, "--workers", "3")...) {
		t.Error("the copies hang on the number of workers")
	}
	var r struct {
		Readings []struct {
			Nominal   float64 `json:"nominal"`
			Deviation float64 `json:"standard_deviation"`
			Shares    []struct {
				Error string  `json:"error"`
				Share float64 `json:"share"`
				Err   float64 `json:"share_stderr"`
			} `json:"shares"`
		} `json:"readings"`
		Yield struct {
			Share float64 `json:"share"`
			Err   float64 `json:"stderr"`
		} `json:"yield"`
		Copies []struct {
			Scale float64 `json:"scale"`
		} `json:"copies"`
	}
	if err := json.Unmarshal([]byte(out), &r); err != nil {
		t.Fatal(err)
	}
	// Relative variances of the area: (0.03/3)² and (2·0.01)²/3.
	area := r.Readings[0]
	if v := area.Deviation / 6; area.Nominal != 6 || v < 0.013 || v > 0.018 {
		t.Errorf("%+v", area)
	}
	if s := area.Shares[0]; s.Error != "width" || s.Share-3*s.Err > 0.43 || s.Share+3*s.Err < 0.43 {
		t.Errorf("%+v", area.Shares)
	}
	if r.Yield.Share < 0.4 || r.Yield.Share > 0.6 || r.Yield.Err < 0.02 || len(r.Copies) != 300 {
		t.Errorf("yield %+v of %d", r.Yield, len(r.Copies))
	}
	args = args[:len(args)-1]
	for _, name := range []string{"copies.png", "worst.svg", "copies.csv"} {
		to := filepath.Join(t.TempDir(), name)
		more := []string{"-o", to, "--copies", "9"}
		if strings.HasPrefix(name, "worst") {
			more = append(more, "--worst")
		}
		fine(t, "", append(args, more...)...)
		if b := read(t, to); len(b) < 200 || strings.HasSuffix(name, "csv") && strings.Count(b, "\n") < 12 {
			t.Errorf("%s has %d bytes", name, len(b))
		}
	}
	refused(t, exitUse, []string{"no error of a workshop"}, "", "tolerance", file, "--error", "wobble:3", "--take", "area")
	refused(t, exitUse, []string{"no tolerance in its study"}, "", "tolerance", file, "--take", "area")
	refused(t, exitUse, []string{"no number called"}, "", "tolerance", file, "--error", "dial:eps:normal:0.1", "--take", "area")
	refused(t, exitUse, []string{"no reading called"}, "", "tolerance", file, "--error", "size:normal:0.1", "--take", "beauty")
	refused(t, exitFault, []string{"There is no escape-rate here"}, "", "tolerance", file, "--error", "size:normal:0.1", "--take", "escape-rate")
}
