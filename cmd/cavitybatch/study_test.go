package main

import (
	"bytes"
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"github.com/go-json-experiment/json"
)

// read is the content of a file.
func read(t testing.TB, path string) string {
	t.Helper()
	b, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	return string(b)
}

// sweeping is a table whose sweep of 24 points takes a second.
func sweeping(t testing.TB) string {
	t.Helper()
	file := filepath.Join(t.TempDir(), "plate.cavity.json")
	disc := saved(t, "disc.cavity.json", fine(t, "", "make", "limacon", "radius=1", "eps=0.3", "name=Larkmoor trial plate"))
	fine(t, "", "study", disc, "--vary", "eps=0.05:1.15:24", "--readings", "mean-chord", "--effort", "0.01", "--keep", file, "-o", filepath.Join(t.TempDir(), "x.csv"))
	return file
}

// TestStudyKilled kills a run ten times without warning, at moments drawn by
// chance, and goes on with it: the file is to the byte that of a run that was let
// end, so no row stands twice.
func TestStudyKilled(t *testing.T) {
	file, dir := sweeping(t), t.TempDir()
	whole, part := filepath.Join(dir, "whole.jsonl"), filepath.Join(dir, "part.jsonl")
	start := time.Now()
	fine(t, "", "study", file, "-o", whole)
	took := time.Since(start)
	seed := uint64(start.UnixNano())
	t.Logf("a whole run takes %v; seed %d", took, seed)
	chance := rand.New(rand.NewPCG(seed, 0))
	killed := 0
	for range 10 {
		c := exec.Command(built, "study", file, "-o", part)
		if err := c.Start(); err != nil {
			t.Fatal(err)
		}
		time.Sleep(time.Duration(float64(took) * 0.13 * chance.Float64()))
		if err := c.Process.Kill(); err == nil {
			killed++
		}
		_ = c.Wait() // it was killed
	}
	before := 0
	if b, err := os.ReadFile(part); err == nil {
		before = bytes.Count(b, []byte("\n"))
	}
	t.Logf("after %d kills the file has %d lines of %d", killed, before, strings.Count(read(t, whole), "\n"))
	if r := ran(t, "", "study", file, "-o", part); r.code != 0 {
		t.Fatalf("the last run: exit %d, %s", r.code, r.err)
	}
	if read(t, part) != read(t, whole) {
		t.Error("the file that was gone on with is another one")
	}
	// Killed within a line, which is the moment that chance hardly meets.
	half := read(t, whole)
	half = half[:len(half)*2/3]
	if err := os.WriteFile(part, []byte(half), 0o644); err != nil {
		t.Fatal(err)
	}
	if r := ran(t, "", "study", file, "-o", part); r.code != 0 || !strings.Contains(r.err, "is damaged (it breaks off); it is done again") {
		t.Errorf("exit %d, %s", r.code, r.err)
	}
	if read(t, part) != read(t, whole) {
		t.Error("the file that was cut is another one")
	}
	// A run of what is whole does nothing.
	var left struct {
		File    string `json:"file"`
		Sweep   string `json:"sweep"`
		Part    int    `json:"part"`
		Of      int    `json:"of"`
		Rows    int    `json:"rows"`
		Resumed int    `json:"resumed"`
		Tasks   int    `json:"tasks"`
	}
	parsed(t, fine(t, "", "study", file, "-o", part, "--json"), &left)
	if left.Rows != 25 || left.Resumed != 25 {
		t.Errorf("%+v", left)
	}
	refused(t, exitFault, []string{"another run", "its table"}, "", "study", file, "-o", part, "--seed", "2")
	refused(t, exitFault, []string{"not gone on with", "no part"}, "", "study", file, "-o", saved(t, "notes.jsonl", "{}\n"))
}

// TestGather: parts 1/1, 3 and 16, each a process of its own and one of them
// killed on the way, gather to the bytes of a single run; what is missing or
// damaged is named.
func TestGather(t *testing.T) {
	file, dir := sweeping(t), t.TempDir()
	at := func(name string) string { return filepath.Join(dir, name) }
	fine(t, "", "study", file, "-o", at("single.csv"))
	fine(t, "", "study", file, "-o", at("single.jsonl"))
	answer := fine(t, "", "study", file, "--json")
	for _, n := range []int{1, 3, 16} {
		var parts []string
		for k := n; k >= 1; k-- {
			p := at(fmt.Sprintf("%d-%d.jsonl", k, n))
			args := []string{"study", file, "--part", fmt.Sprintf("%d/%d", k, n), "-o", p}
			if k == 2 {
				c := exec.Command(built, args...)
				if err := c.Start(); err != nil {
					t.Fatal(err)
				}
				time.Sleep(30 * time.Millisecond)
				_ = c.Process.Kill()
				_ = c.Wait() // it was killed
			}
			if r := ran(t, "", args...); r.code != 0 {
				t.Fatalf("part %d of %d: %s", k, n, r.err)
			}
			parts = append(parts, p)
		}
		fine(t, "", append([]string{"gather", "-o", at("joined.csv")}, parts...)...)
		fine(t, "", append([]string{"gather", "-o", at("joined.jsonl")}, parts...)...)
		if read(t, at("joined.csv")) != read(t, at("single.csv")) || read(t, at("joined.jsonl")) != read(t, at("single.jsonl")) {
			t.Errorf("%d parts gather to another result", n)
		}
		if got := fine(t, "", append([]string{"gather", "--json"}, parts...)...); got != answer {
			t.Errorf("%d parts gather to another JSON", n)
		}
	}
	fine(t, "", "study", file, "-o", at("single.svg"))
	for _, ending := range []string{"svg", "png", "pdf"} {
		if ending != "svg" {
			fine(t, "", "gather", at("1-1.jsonl"), "-o", at("single."+ending), "--dpi", "60")
		}
		fine(t, "", "gather", at("1-3.jsonl"), at("3-3.jsonl"), at("2-3.jsonl"), "-o", at("joined."+ending), "--dpi", "60")
		if read(t, at("joined."+ending)) != read(t, at("single."+ending)) {
			t.Errorf("the figures of a single run and of 3 parts differ as %s", ending)
		}
	}
	bad := read(t, at("2-3.jsonl"))
	damaged := saved(t, "bad.jsonl", strings.Replace(bad, "mean-chord\",\"value\":1", "mean-chord\",\"value\":2", 1))
	short := saved(t, "short.jsonl", bad[:strings.LastIndex(strings.TrimSuffix(bad, "\n"), "\n")+1])
	refused(t, exitFault, []string{"3 parts 2 is missing"}, "", "gather", at("1-3.jsonl"), at("3-3.jsonl"))
	refused(t, exitFault, []string{"art 2 of 3 is damaged", "bad.jsonl", "checksum"}, "", "gather", at("1-3.jsonl"), damaged, at("3-3.jsonl"))
	refused(t, exitFault, []string{"art 2 of 3 is not finished", "short.jsonl", "lacks 1 of 8 rows"}, "", "gather", at("1-3.jsonl"), short, at("3-3.jsonl"))
	refused(t, exitFault, []string{"no part of a study"}, "", "gather", file)
	refused(t, exitFault, []string{"no such file"}, "", "gather", at("none.jsonl"))
}

// TestStudyNumbers: a sweep given on the command line reads what readings reads
// at the same table, marks the end of convexity at 1/2 (closed form), and says at
// which points there is no table.
func TestStudyNumbers(t *testing.T) {
	file := saved(t, "l.cavity.json", fine(t, "", "make", "limacon", "eps=0.3"))
	var got struct {
		Name, Sweep, Unit string
		Seed              uint64
		Effort            float64
		Dials             []struct{ Dial, Label, Unit string }
		Readings          []string
		Points            []struct {
			Point             int
			Values            []float64
			Fault, Integrable string
			Readings          []struct {
				Name          string
				Value, StdErr *float64
				Unit, Note    string
				Bounces       int64
			}
		}
		Marks []struct {
			At, Within  float64
			Short, Text string
		}
		Standing []string
	}
	answer := fine(t, "", "study", file, "--vary", "eps=0.3,0.7,1.2", "--readings", "mean-chord", "--effort", "0.01", "--json")
	if err := json.Unmarshal([]byte(answer), &got, json.MatchCaseInsensitiveNames(true), json.RejectUnknownMembers(true)); err != nil {
		t.Fatal(err)
	}
	one := scalars(t, fine(t, "", "readings", file, "--only", "mean-chord", "--effort", "0.01", "--json"))["mean-chord"].Value
	if v := got.Points[0].Readings[0]; *v.Value != one {
		t.Errorf("the sweep reads %v, readings %v", *v.Value, one)
	}
	if len(got.Points) != 3 || got.Points[2].Fault == "" || len(got.Marks) != 1 || math.Abs(got.Marks[0].At-0.5) > 1e-6 || got.Seed != 1 {
		t.Errorf("%+v", got)
	}
	text := fine(t, "", "study", file, "--vary", "eps=0.3,1.2", "--readings", "area")
	for _, want := range []string{"area\n0.3", "3.28", "must lie between 0 and 1"} {
		if !strings.Contains(text, want) {
			t.Errorf("%q is not in %s", want, text)
		}
	}
	if list := fine(t, "", "study", file, "--list"); !strings.Contains(list, "1.eps") || !strings.Contains(list, "sweeps  0") {
		t.Errorf("the list is %s", list)
	}
}

// TestStudyRefusals wants exit 2 and a sentence for wrong uses.
func TestStudyRefusals(t *testing.T) {
	file := saved(t, "l.cavity.json", fine(t, "", "make", "limacon"))
	vary := func(v string, more ...string) []string {
		return append([]string{"study", file, "--vary", v, "--readings", "area"}, more...)
	}
	for _, c := range []struct {
		words string
		args  []string
	}{
		{"has no sweep", []string{"study", file}},
		{"not understood", vary("eps")},
		{"not understood", vary("eps=0:1")},
		{"not understood", vary("eps=a,b")},
		{"no number called", vary("depth=0,1")},
		{"--readings", []string{"study", file, "--vary", "eps=0,1"}},
		{"no reading called", []string{"study", file, "--vary", "eps=0,1", "--readings", "weight"}},
		{"belong to a sweep", []string{"study", file, "--readings", "area"}},
		{"two ways", vary("eps=0,1", "--sweep", "x")},
		{"K/N", vary("eps=0,1", "--part", "3/2", "-o", "x.jsonl")},
		{"K/N", vary("eps=0,1", "--part", "one", "-o", "x.jsonl")},
		{".jsonl", vary("eps=0,1", "--part", "1/2", "-o", "x.csv")},
		{"x.bmp", vary("eps=0,1", "-o", "x.bmp")},
		{"effort", vary("eps=0,1", "--effort=-1")},
		{"twice", append(vary("eps=0,1"), "--vary", "1.eps=0,1")},
		{"takes no reading called", vary("eps=0,1", "--reading", "weight", "-o", file+".png")},
	} {
		refused(t, exitUse, []string{c.words}, "", c.args...)
	}
	kept := filepath.Join(t.TempDir(), "kept.cavity.json")
	fine(t, "", vary("eps=0,1", "--keep", kept, "-o", kept+".csv")...)
	refused(t, exitUse, []string{"no sweep called", `"eps"`}, "", "study", kept, "--sweep", "x")
}
