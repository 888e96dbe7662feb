package main

import (
	"bytes"
	"encoding/csv"
	"math"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
)

// TestChaosFigures writes each figure of chaotic motion in every format, the
// same on any number of workers, and the same again from the table inside.
func TestChaosFigures(t *testing.T) {
	folder := t.TempDir()
	table := filepath.Join(folder, "t.cavity.json")
	fine(t, "", "make", "limacon", "eps=0.35", "unit=um", "-o", table)
	for _, c := range []struct {
		name string
		args []string
	}{
		{"map", []string{"stretching", "--columns", "40", "--rows", "30", "--bounces", "60"}},
		{"digits", []string{"stretching", "--of", "averages", "--columns", "20", "--rows", "20", "--region", "0.25:0.5:-0.5:0.5"}},
		{"exponent", []string{"convergence", "--effort", "0.002"}},
		{"share", []string{"convergence", "--of", "share", "--bounces", "400", "--effort", "0.002"}},
		{"paths", []string{"paths", "--effort", "0.002"}},
		{"correlation", []string{"correlation", "--of", "flight", "--lags", "12", "--effort", "0.002"}},
	} {
		for _, ending := range []string{"png", "svg", "pdf", "csv"} {
			out := filepath.Join(folder, c.name+"."+ending)
			args := append([]string{c.args[0], table, "-o", out, "--dpi", "100"}, c.args[1:]...)
			fine(t, "", args...)
			first := content(t, out)
			if ending == "csv" || ending == "png" {
				fine(t, "", append(args, "--workers", "5")...)
				if !bytes.Equal(first, content(t, out)) {
					t.Errorf("%s: five workers write another file", out)
				}
			}
			if ending != "svg" {
				continue
			}
			again := filepath.Join(folder, "again.svg")
			fine(t, string(first), append([]string{c.args[0], "-", "-o", again, "--dpi", "100"}, c.args[1:]...)...)
			if !bytes.Equal(first, content(t, again)) {
				t.Errorf("the table in %s makes another figure", out)
			}
		}
	}
}

// rows reads a CSV below its comments, header first.
func rows(t testing.TB, path string) [][]string {
	t.Helper()
	r := csv.NewReader(bytes.NewReader(content(t, path)))
	r.Comment = '#'
	all, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	return all
}

// TestStretchingNumbers wants a map's cells where they belong, in the region
// that was asked for, and on a disc the closed form asinh(2 n cos chi/pi)/n.
func TestStretchingNumbers(t *testing.T) {
	out := filepath.Join(t.TempDir(), "m.csv")
	const n = 50
	fine(t, fine(t, "", "make", "disc", "radius=3"), "stretching", "-", "-o", out, "--columns", "4", "--rows", "6", "--bounces", strconv.Itoa(n), "--region", "0.5:1:0:0.9")
	all := rows(t, out)
	if len(all) != 25 || strings.Join(all[0], ",") != "s,p,value" {
		t.Fatalf("%d rows below %v", len(all)-1, all[0])
	}
	for _, row := range all[1:] {
		var v [3]float64
		for i := range v {
			v[i], _ = strconv.ParseFloat(row[i], 64)
		}
		if v[0] < 3*math.Pi || v[0] > 6*math.Pi || v[1] < 0 || v[1] > 0.9 {
			t.Errorf("the cell at s = %g, p = %g lies outside the region", v[0], v[1])
		}
		if want := math.Asinh(2*n/math.Pi*math.Sqrt(1-v[1]*v[1])) / n; math.Abs(v[2]-want) > 1e-9 {
			t.Errorf("at p = %g the stretching is %g, want %g", v[1], v[2], want)
		}
	}
}

// TestChaosWrongUse wants each wrong wish refused in one sentence.
func TestChaosWrongUse(t *testing.T) {
	disc, stadium := fine(t, "", "make", "disc"), fine(t, "", "make", "stadium")
	out := filepath.Join(t.TempDir(), "m.png")
	for _, c := range []struct {
		code  int
		words []string
		in    string
		args  []string
	}{
		{exitUse, []string{"0 by 400 cells"}, disc, []string{"stretching", "-", "-o", out, "--columns", "0"}},
		{exitUse, []string{"number of bounces is 1"}, disc, []string{"stretching", "-", "-o", out, "--bounces", "1"}},
		{exitUse, []string{"region", "s0:s1:p0:p1"}, disc, []string{"stretching", "-", "-o", out, "--region", "0:1"}},
		{exitUse, []string{"does not lie in the section"}, disc, []string{"stretching", "-", "-o", out, "--region", "0.5:0.2:-1:1"}},
		{exitUse, []string{"effort"}, stadium, []string{"paths", "-", "-o", out, "--effort", "0"}},
		{exitUse, []string{"lag"}, stadium, []string{"correlation", "-", "-o", out, "--lags", "0"}},
		{exitUse, []string{"speed", "light, sound"}, stadium, []string{"readings", "-", "--speed", "fast"}},
		{exitUse, []string{".csv"}, stadium, []string{"islands", "-", "-o", "x.png"}},
		{exitFault, []string{"no outer wall"}, fine(t, "", "make", "three-posts"), []string{"stretching", "-", "-o", out}},
		{exitFault, []string{"exactly 0"}, disc, []string{"convergence", "-", "-o", out}},
	} {
		refused(t, c.code, c.words, c.in, c.args...)
	}
}

// TestIslandsListed wants the verdict and the islands of a limaçon, in the
// three forms that they are written in.
func TestIslandsListed(t *testing.T) {
	table := saved(t, "l.cavity.json", fine(t, "", "make", "limacon", "eps=0.4"))
	text := fine(t, "", "islands", table, "--effort", "0.1")
	if !strings.Contains(text, "One chaotic sea covers 9") || !strings.Contains(text, "share") || !strings.Contains(text, "s/L") {
		t.Errorf("the list is %q", text)
	}
	out := filepath.Join(t.TempDir(), "i.csv")
	var chart seaChart
	parsed(t, fine(t, "", "islands", table, "--effort", "0.1", "--json", "-o", out), &chart)
	if len(chart.Islands) < 2 || chart.Seas != 1 || chart.Islands[0].Period != 2 || chart.Islands[0].Err <= 0 || chart.Islands[0].S == nil || !strings.HasPrefix(text, chart.Verdict) {
		t.Errorf("the chart is %+v", chart)
	}
	if all := rows(t, out); len(all) != len(chart.Islands)+1 {
		t.Errorf("%d rows of %d islands", len(all)-1, len(chart.Islands))
	}
	chart = seaChart{}
	parsed(t, fine(t, fine(t, "", "make", "disc"), "islands", "-", "--json"), &chart)
	if len(chart.Islands) != 0 || !strings.HasPrefix(chart.Verdict, "Integrable") {
		t.Errorf("the chart of a disc is %+v", chart)
	}
}

// TestLaunchesListed wants launched orbits told: a rotation number of arccos(p)
// by pi on a disc.
func TestLaunchesListed(t *testing.T) {
	table := strings.Replace(fine(t, "", "make", "disc"), `"seed": 1`, `"launches": [{"origin": "wall", "pattern": "single", "s": 0, "p": 0.5}], "seed": 1`, 1)
	var list launchList
	parsed(t, fine(t, table, "launches", "-", "--json"), &list)
	if len(list.Orbits) != 1 || list.Orbits[0].Rotation == nil || math.Abs(*list.Orbits[0].Rotation-1.0/3) > 1e-9 || list.Orbits[0].Character != "regular" || list.Orbits[0].Confined != nil {
		t.Errorf("the orbits are %+v", list.Orbits)
	}
	out := filepath.Join(t.TempDir(), "o.csv")
	fine(t, table, "launches", "-", "-o", out)
	if all := rows(t, out); len(all) != 2 {
		t.Errorf("the rows are %v", all)
	}
	// Where the study launches nothing, what its portrait shows is told.
	parsed(t, fine(t, fine(t, "", "make", "disc"), "launches", "-", "--bounces", "200", "--json"), &list)
	if len(list.Orbits) != 60 {
		t.Errorf("of a study without launches there are %d orbits, not the 60 of its portrait", len(list.Orbits))
	}
	if text := fine(t, table, "launches", "-"); !strings.Contains(text, "0.333333") || !strings.Contains(text, "nothing leaves") {
		t.Errorf("the list is %q", text)
	}
}

// TestReadingsWritten wants the readings in a file of any format, and one per
// second where a speed is given.
func TestReadingsWritten(t *testing.T) {
	table := saved(t, "s.cavity.json", fine(t, "", "make", "stadium"))
	folder := t.TempDir()
	for _, ending := range []string{"csv", "json", "png", "svg", "pdf"} {
		out := filepath.Join(folder, "r."+ending)
		if text := fine(t, "", "readings", table, "--only", "area,lyapunov-per-length", "--effort", "0.005", "--speed", "sound", "-o", out); text != "" {
			t.Errorf("besides the file %q is written", text)
		}
		if ending == "csv" {
			if all := rows(t, out); len(all) != 4 || all[3][0] != perSecond || all[3][3] != "1/s" {
				t.Errorf("the rows are %v", all)
			}
		}
	}
	refused(t, exitFault, []string{"needs a speed"}, "", "readings", table, "--only", perSecond)
}
