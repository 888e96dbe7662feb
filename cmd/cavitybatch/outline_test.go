package main

import (
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/go-json-experiment/json"
)

const outlines = "../../testdata/outlines/"

// areaOf is the area and the perimeter that check reports.
func areaOf(t *testing.T, tableFile string) (area, perimeter float64) {
	t.Helper()
	var a struct {
		Area      float64 `json:"area"`
		Perimeter float64 `json:"perimeter"`
	}
	if err := json.Unmarshal([]byte(fine(t, tableFile, "check", "-", "--json")), &a); err != nil {
		t.Fatal(err)
	}
	return a.Area, a.Perimeter
}

// TestImportMeasuredDisc: 160 points of a limaçon, fitted, have its area within
// 1e-4 and a stated residual; as drawn, the area of the polygon.
func TestImportMeasuredDisc(t *testing.T) {
	table := filepath.Join(t.TempDir(), "disc.cavity.json")
	out := fine(t, "", "import", outlines+"disc.csv", "--fit", "0.001", "--json", "-o", table)
	var a intakeAccount
	if err := json.Unmarshal([]byte(out), &a); err != nil {
		t.Fatal(err)
	}
	if a.Residual == nil || a.Residual.Greatest > 0.001 || a.Residual.RMS <= 0 || a.Points != 160 || a.Unit != "µm" || a.Nodes > 40 {
		t.Errorf("%s", out)
	}
	file, err := os.ReadFile(table)
	if err != nil {
		t.Fatal(err)
	}
	want := 25 * math.Pi * (1 + 0.43*0.43/2) // pi R² (1 + eps²/2)
	if area, _ := areaOf(t, string(file)); math.Abs(area/want-1) > 1e-4 {
		t.Errorf("area %g, want %g", area, want)
	}
	r := ran(t, "", "import", outlines+"disc.csv")
	if r.code != 0 || !strings.Contains(r.err, "1 loop, 160 nodes, as drawn.") || !strings.Contains(r.err, "A smooth wall within 0.00") {
		t.Errorf("exit %d, said %q", r.code, r.err)
	}
}

// TestOutlineRoundTrips: a plate with obstacles goes out in every format; what
// comes back by its lines has the area and the perimeter.
func TestOutlineRoundTrips(t *testing.T) {
	dir := t.TempDir()
	r := ran(t, "", "import", outlines+"plate.svg")
	if r.code != 0 || !strings.Contains(r.err, "3 loops, the largest the wall, 13 nodes, as drawn.") || !strings.Contains(r.err, "1 text was left out") {
		t.Fatalf("exit %d, said %q", r.code, r.err)
	}
	plate := r.out
	area, perimeter := areaOf(t, plate)
	// Half a disc of radius 30, a rectangle 50 by 60 without a corner that a
	// cubic rounds (0.2146 of 400, to 2e-4), a disc and a window with corners.
	want := 450*math.Pi + 3000 - 400*(1-math.Pi/4) - 36*math.Pi - (140 - 9*(4-math.Pi))
	if math.Abs(area/want-1) > 1e-4 {
		t.Errorf("area %g, want %g", area, want)
	}
	for _, name := range []string{"wall.svg", "wall.dxf", "wall.gds", "wall.csv"} {
		file := filepath.Join(dir, name)
		var a outlineAccount
		if err := json.Unmarshal([]byte(fine(t, plate, "outline", "-", "-o", file, "--chord-error", "0.001", "--json")), &a); err != nil {
			t.Fatal(err)
		}
		if a.Achieved > 0.001+2e-6 || math.Abs(a.Area-area) > 1e-9*area || math.Abs(a.AreaOff) > perimeter*a.Achieved+1e-9*area {
			t.Errorf("%s: %+v", name, a)
		}
		if name != "wall.svg" && name != "wall.csv" {
			continue
		}
		back := ran(t, "", "import", "--drawn", "--unit", "mm", file)
		if back.code != 0 {
			t.Fatalf("%s came back as %q", name, back.err)
		}
		area2, perimeter2 := areaOf(t, back.out)
		slip := a.Achieved + 1e-8
		if math.Abs(area2-area) > perimeter*slip || math.Abs(perimeter2-perimeter) > 60*slip {
			t.Errorf("%s: area %g and perimeter %g came back as %g and %g", name, area, perimeter, area2, perimeter2)
		}
	}
	carried := ran(t, "", "import", filepath.Join(dir, "wall.svg"))
	if carried.code != 0 || carried.out != plate || !strings.Contains(carried.err, "carries its table") {
		t.Errorf("the table inside came back with exit %d, %q", carried.code, carried.err)
	}
	// With a bias the drawing is of another wall and carries no table.
	said := fine(t, plate, "outline", "-", "-o", filepath.Join(dir, "etched.svg"), "--bias", "0.5", "--chord-error", "0.0001")
	if !strings.Contains(said, "moved by +0.5 mm") {
		t.Errorf("said %q", said)
	}
	etched := ran(t, "", "import", filepath.Join(dir, "etched.svg"), "--unit", "mm")
	if grown, _ := areaOf(t, etched.out); math.Abs(grown-(area+perimeter*0.5)) > 2 || grown <= area {
		t.Errorf("after a bias of 0.5 mm the area is %g, before it was %g", grown, area)
	}
}

// TestOutlineRefused: wrong use and bad files are one sentence each.
func TestOutlineRefused(t *testing.T) {
	dir := t.TempDir()
	disc := fine(t, "", "make", "disc")
	refused(t, exitUse, []string{"does not end in a known format; use .svg, .dxf, .gds, .csv"}, disc, "outline", "-", "-o", filepath.Join(dir, "wall.txt"))
	refused(t, exitUse, []string{"chord error", "above 0"}, disc, "outline", "-", "-o", filepath.Join(dir, "wall.svg"), "--chord-error=-1")
	refused(t, exitFault, []string{"has a radius of 1 mm at (1, 0) mm, which a bias of -1.5 mm would use up"}, disc, "outline", "-", "-o", filepath.Join(dir, "wall.svg"), "--bias=-1.5")
	refused(t, exitUse, []string{"With --json the table needs a file"}, "", "import", outlines+"disc.csv", "--json")
	refused(t, exitUse, []string{"no unit of length"}, "", "import", outlines+"disc.csv", "--unit", "ell")
	refused(t, exitFault, []string{"no such file"}, "", "import", filepath.Join(dir, "none.svg"))
	refused(t, exitFault, []string{"Standard input", "crosses itself at (5, 5) mm"}, "0 0\n10 10\n10 0\n0 10\n", "import", "-")
	refused(t, exitFault, []string{"No smooth wall of up to", "within 1e-09"}, jagged(), "import", "-", "--fit", "1e-9", "--corner-deg", "175")
}

// jagged is a table of points that no smooth wall follows.
func jagged() string {
	var b strings.Builder
	for i := range 900 {
		r := 10 + float64(i*7919%13)/100
		b.WriteString(strings.Join([]string{numberText(r * math.Cos(2*math.Pi*float64(i)/900)), numberText(r * math.Sin(2*math.Pi*float64(i)/900))}, ",") + "\n")
	}
	return b.String()
}

func numberText(v float64) string {
	b, _ := json.Marshal(v)
	return string(b)
}
