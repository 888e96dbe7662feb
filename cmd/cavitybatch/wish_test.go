package main

import (
	"path/filepath"
	"strings"
	"testing"

	"github.com/go-json-experiment/json"
)

// TestWish: of all rectangles of a perimeter the square is the largest; the wall
// that is found is a table; the same on any number of workers.
func TestWish(t *testing.T) {
	file := saved(t, "plate.cavity.json", fine(t, "", "make", "rectangle", "width=3", "height=1", "name=Larkmoor trial plate"))
	args := []string{"wish", file, "--maximise", "area", "--free", "height=0.5:4", "--same", "perimeter", "--tries", "80"}
	out := fine(t, "", append(args, "--json", "--workers", "1")...)
	if out != fine(t, "", append(args, "--json", "--workers", "3")...) {
		t.Error("the search hangs on the number of workers")
	}
	var r struct {
		Best struct {
			At     []float64 `json:"at"`
			Values []struct {
				Value float64 `json:"value"`
			} `json:"values"`
		} `json:"best"`
	}
	if err := json.Unmarshal([]byte(out), &r); err != nil {
		t.Fatal(err)
	}
	if a := r.Best.Values[0].Value; a < 3.9999 || a > 4.0000001 {
		t.Errorf("the largest rectangle of perimeter 8 has the area %g at %v", a, r.Best.At)
	}
	best := filepath.Join(t.TempDir(), "best.cavity.json")
	if text := fine(t, "", append(args, "-o", best)...); !strings.Contains(text, "Best: area 4 mm²") {
		t.Error(text)
	}
	if text := fine(t, "", "check", best); !strings.Contains(text, "perimeter        8 mm") || !strings.Contains(text, "area             4 mm²") {
		t.Errorf("it is not the square of side 2: %s", text)
	}
	for _, name := range []string{"wall.png", "course.svg"} {
		to := filepath.Join(t.TempDir(), name)
		more := []string{"-o", to}
		if name == "course.svg" {
			more = append(more, "--course")
		}
		fine(t, "", append(args, more...)...)
		if len(read(t, to)) < 1000 {
			t.Errorf("%s is empty", name)
		}
	}
	refused(t, exitUse, []string{"no wish in its study"}, "", "wish", file)
	refused(t, exitUse, []string{"DIAL=LO:HI"}, "", "wish", file, "--maximise", "area", "--free", "height")
	refused(t, exitUse, []string{"no number of an orbit"}, "", "wish", file, "--hold", "orbit-charm:2:1=3", "--free", "height=1:2")
	if r := ran(t, "", "wish", file, "--maximise", "area", "--free", "height=1:2", "--area", "50:60", "--tries", "9"); r.code != exitFault || !strings.Contains(r.out, "demand less") {
		t.Errorf("exit %d: %s", r.code, r.out)
	}
}

// TestPlansOfTheStudy: a tolerance and a wish that the file holds are carried out
// without flags, the wish under the tolerance.
func TestPlansOfTheStudy(t *testing.T) {
	made := fine(t, "", "make", "ellipse", "a=2", "b=1", "name=Larkmoor trial plate")
	file := saved(t, "plate.cavity.json", strings.Replace(made, `"study": {`, `"study": {
    "tolerances": [{"name": "cutter", "errors": [{"kind": "dial", "dial": "a", "law": "uniform", "width": 0.1}], "copies": 20, "readings": ["area"]}],
    "wishes": [{"name": "ten", "goals": [{"reading": "area", "aim": "hold", "value": 10}], "free": [{"dial": "a", "from": 1, "to": 5}], "tries": 60, "under": "cutter", "over": "worst", "copies": 6}],`, 1))
	if text := fine(t, "", "tolerance", file); !strings.Contains(text, "a with the half width, evenly, 0.1 mm; 20 copies") && !strings.Contains(text, "A with the half width") {
		t.Error(text)
	}
	if text := fine(t, "", "wish", file); !strings.Contains(text, `the worst over 6 copies by the tolerance "cutter"`) {
		t.Error(text)
	}
	refused(t, exitUse, []string{"no wish called"}, "", "wish", file, "--name", "eleven")
}
