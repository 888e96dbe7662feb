package main

import (
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
)

// TestOrbits wants the same orbits, in the same order, from the three forms of
// the list. The values are closed forms: the stadium's bouncing balls, its
// horizontal orbit and its triangles.
func TestOrbits(t *testing.T) {
	stadium := fine(t, "", "make", "stadium", "unit=um")
	var c census
	parsed(t, fine(t, stadium, "orbits", "-", "--up-to", "3", "--json"), &c)
	if c.Unit != "µm" || c.Method != "grids" || len(c.Periods) != 2 || c.Periods[1] != (periodCount{3, 4, 8, true}) {
		t.Errorf("unit %q, method %q, periods %+v", c.Unit, c.Method, c.Periods)
	}
	for i, want := range []orbitRow{
		{Period: 2, Set: 1, Length: 4, Trace: 2, Kind: "parabolic"},
		{Period: 2, Set: 2, Length: 8, Trace: 34, Kind: "hyperbolic"},
		{Period: 3, Set: 3, Length: 8.6019519928479649, Trace: -46.055019249287666, Kind: "inverse hyperbolic", TwoSenses: true},
		{Period: 3, Set: 3, Length: 8.6019519928479649, Trace: -46.055019249287666, Kind: "inverse hyperbolic", TwoSenses: true},
	} {
		got := c.Orbits[i]
		if got.Period != want.Period || got.Set != want.Set || math.Abs(got.Length-want.Length) > 1e-13*want.Length ||
			math.Abs(got.Trace-want.Trace) > 1e-11*math.Abs(want.Trace) || got.Kind != want.Kind || got.TwoSenses != want.TwoSenses || len(got.Bounces) != want.Period {
			t.Errorf("orbit %d is %+v, want %+v", i, got, want)
		}
		if math.Abs(got.Residue-(2-got.Trace)/4) > 1e-15*math.Abs(got.Trace) || (got.Family != nil) != (i == 0) || got.Winding == nil || *got.Winding != 1 || got.Confined != nil {
			t.Errorf("orbit %d: %+v", i, got)
		}
	}

	out := filepath.Join(t.TempDir(), "stadium.csv")
	if text := fine(t, stadium, "orbits", "-", "--up-to", "3", "-o", out); text != "" {
		t.Errorf("with a file it also writes %q", text)
	}
	data, err := os.ReadFile(out)
	if err != nil {
		t.Fatal(err)
	}
	text := string(data)
	for _, w := range []string{"# " + program, "unit of length: µm", "convention:", "seed:", "no proof"} {
		if !strings.Contains(text, w) {
			t.Errorf("the CSV does not say %q", w)
		}
	}
	r := csv.NewReader(strings.NewReader(text))
	r.Comment = '#'
	rows, err := r.ReadAll()
	if err != nil || len(rows) != 1+len(c.Orbits) {
		t.Fatalf("%d rows, %v", len(rows), err)
	}
	for i, row := range rows[1:] {
		length, err := strconv.ParseFloat(row[3], 64)
		if err != nil || length != c.Orbits[i].Length || strings.Count(row[14], ";") != c.Orbits[i].Period-1 {
			t.Errorf("row %d: %q, %v", i, row, err)
		}
	}

	told := fine(t, stadium, "orbits", "-", "--up-to", "3")
	for _, w := range []string{"length (µm)", "8.60195199285", "-46.055019", "marginal family, s from 0 to 2 µm", "2 of 2, 8 of 3", "no proof"} {
		if !strings.Contains(told, w) {
			t.Errorf("the list does not say %q:\n%s", w, told)
		}
	}
}

// TestOrbitsOfPosts wants the prime cycles of three posts, counted by the
// Moebius sum over 2^n + 2 (-1)^n (closed form).
func TestOrbitsOfPosts(t *testing.T) {
	var c census
	parsed(t, fine(t, fine(t, "", "make", "three-posts"), "orbits", "-", "--up-to", "8", "--json"), &c)
	for i, want := range []int{3, 2, 3, 6, 9, 18, 30} {
		if p := c.Periods[i]; p.Count != want || !p.Settled {
			t.Errorf("%+v, want %d", p, want)
		}
	}
	if c.Method != "words" || c.Orbits[0].Winding != nil {
		t.Errorf("method %q, winding %v", c.Method, c.Orbits[0].Winding)
	}
}

// TestOrbitsLeak wants the column of a dielectric table filled.
func TestOrbitsLeak(t *testing.T) {
	var c census
	parsed(t, fine(t, fine(t, "", "make", "limacon", "--coat", "limacon:1:0:1:dielectric:index=3.3"), "orbits", "-", "--up-to", "3", "--json"), &c)
	for _, o := range c.Orbits {
		if o.Confined == nil || *o.Confined != (o.LeastP > 1/3.3) {
			t.Errorf("least |p| %g, confined %v", o.LeastP, o.Confined)
		}
	}
}

func TestOrbitsMisused(t *testing.T) {
	disc := fine(t, "", "make", "disc")
	refused(t, 2, []string{"up-to"}, disc, "orbits", "-")
	refused(t, 2, []string{"2 or more"}, disc, "orbits", "-", "--up-to", "1")
	refused(t, 2, []string{"at most 12"}, disc, "orbits", "-", "--up-to", "13")
	refused(t, 2, []string{"many"}, disc, "orbits", "-", "--up-to", "many")
	refused(t, 2, []string{".csv", ".png"}, disc, "orbits", "-", "--up-to", "2", "-o", "orbits.json")
	refused(t, 2, []string{"radius"}, disc, "orbits", "-", "--up-to", "2", "--follow", "size=1:2")
	refused(t, 2, []string{"lower end first"}, disc, "orbits", "-", "--up-to", "2", "--follow", "radius=2:1")
	refused(t, 2, []string{"4 to"}, disc, "orbits", "-", "--up-to", "2", "--follow", "radius=1:2:1")
	refused(t, 2, []string{"range"}, disc, "orbits", "-", "--up-to", "2", "--follow", "radius")
	refused(t, 2, []string{"between"}, fine(t, "", "make", "limacon"), "orbits", "-", "--up-to", "2", "--follow", "eps=0.5:1.5:4")
	refused(t, 1, []string{"sets", "1 to 1"}, disc, "orbits", "-", "--up-to", "2", "--only", "7", "-o", filepath.Join(t.TempDir(), "a.png"))
	refused(t, 1, []string{"Standard input"}, "{", "orbits", "-", "--up-to", "2")
}

// TestOrbitFigures wants pictures on the table and on the portrait, each with
// the table inside, and the symmetric copies of the stadium's orbits in sets.
func TestOrbitFigures(t *testing.T) {
	quad := fine(t, "", "make", "quadrupole", "eps=0.1")
	for _, args := range [][]string{{".png"}, {".svg", "--on", "portrait"}, {".pdf", "--only", "2,3"}} {
		ending, args := args[0], args[1:]
		out := filepath.Join(t.TempDir(), "orbits"+ending)
		fine(t, quad, append([]string{"orbits", "-", "--up-to", "3", "-o", out}, args...)...)
		if info, err := os.Stat(out); err != nil || info.Size() < 2000 {
			t.Errorf("%v %s: %v", args, ending, err)
		}
		if ending == ".png" {
			fine(t, "", "check", out) // the table is inside
		}
	}
	var c census
	parsed(t, fine(t, fine(t, "", "make", "stadium"), "orbits", "-", "--up-to", "3", "--json"), &c)
	if c.Turns != 2 || c.Mirrors != 2 {
		t.Errorf("%d turns, %d mirrors; a stadium has 2 and 2", c.Turns, c.Mirrors)
	}
	for _, o := range c.Orbits {
		copies := 0
		for _, x := range c.Orbits {
			if x.Set == o.Set {
				copies++
			}
		}
		if copies != o.Copies || o.Symmetry == "no copies" || len(o.Word) != o.Period {
			t.Errorf("set %d has %d orbits and says %d, %q, word %q", o.Set, copies, o.Copies, o.Symmetry, o.Word)
		}
	}
}

// The bow-tie's birth at 1/9 (closed form), in all forms of what was followed.
func TestFollowed(t *testing.T) {
	quad := fine(t, "", "make", "quadrupole", "unit=um")
	args := []string{"orbits", "-", "--up-to", "4", "--follow", "eps=0.1:0.12:8"}
	var f followed
	parsed(t, fine(t, quad, append(args, "--json")...), &f)
	born := 0
	for _, c := range f.Changes {
		if math.Abs(c.At-1.0/9) < 1e-6*0.02 && strings.Contains(c.Text, "4 bounces splits off one of 2") {
			born++
		}
	}
	if born != 1 || f.Number != "1.eps" || f.Unit != "µm" {
		t.Errorf("born %d times, number %q, unit %q: %+v", born, f.Number, f.Unit, f.Changes)
	}
	for _, b := range f.Branches {
		for _, p := range b.Points {
			if p.At < f.From || p.At > f.To || math.Abs(p.Residue-(2-p.Trace)/4) > 1e-15 {
				t.Errorf("branch %d: %+v", b.Branch, p)
			}
		}
	}
	if text := fine(t, quad, args...); !strings.Contains(text, "1.eps = 0.111111111: an orbit of 4 bounces splits off one of 2.") {
		t.Errorf("the list says\n%s", text)
	}
	for _, ending := range []string{".csv", ".svg"} {
		out := filepath.Join(t.TempDir(), "f"+ending)
		fine(t, quad, append(args, "-o", out)...)
		data, err := os.ReadFile(out)
		if err != nil || !strings.Contains(string(data), "trace") {
			t.Errorf("%s: %v", ending, err)
		}
	}
}
