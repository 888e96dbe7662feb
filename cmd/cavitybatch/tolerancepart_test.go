package main

import (
	"fmt"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
	"time"
)

// copying are the words of a tolerance run of a second on a plate of Larkmoor
// Cavities (invented): 73 walls with errors of size, of a parameter, and both.
func copying(t testing.TB) []string {
	t.Helper()
	file := saved(t, "plate.cavity.json", fine(t, "", "make", "limacon", "radius=1", "eps=0.3", "name=Larkmoor trial plate"))
	return []string{"tolerance", file, "--error", "dial:eps:normal:0.02", "--error", "size:uniform:0.01", "--take", "mean-chord,area",
		"--copies", "24", "--effort", "0.01", "--at-least", "area=3.2", "--at-most", "area=3.4"}
}

// with is a command with further words.
func with(args []string, more ...string) []string { return append(args[:len(args):len(args)], more...) }

// TestToleranceParts: parts 1/1, 3 and 16, each a process of its own
// and one of them killed on the way, gather to the bytes of a single run; what is
// missing, damaged or of another run is named.
func TestToleranceParts(t *testing.T) {
	args, dir := copying(t), t.TempDir()
	at := func(name string) string { return filepath.Join(dir, name) }
	endings := []string{"csv", "json", "svg", "jsonl"}
	for _, ending := range endings {
		fine(t, "", with(args, "-o", at("single."+ending))...)
	}
	fine(t, "", with(args, "-o", at("worst.svg"), "--worst", "--show", "mean-chord")...)
	answer, told := fine(t, "", with(args, "--json")...), fine(t, "", args...)
	for _, n := range []int{1, 3, 16} {
		var parts []string
		for k := n; k >= 1; k-- {
			p := at(fmt.Sprintf("%d-%d.jsonl", k, n))
			one := with(args, "--part", fmt.Sprintf("%d/%d", k, n), "-o", p)
			if k == 2 {
				c := exec.Command(built, one...)
				if err := c.Start(); err != nil {
					t.Fatal(err)
				}
				time.Sleep(60 * time.Millisecond)
				_ = c.Process.Kill()
				_ = c.Wait() // it was killed
			}
			if r := ran(t, "", one...); r.code != 0 {
				t.Fatalf("part %d of %d: %s", k, n, r.err)
			}
			parts = append(parts, p)
		}
		for _, ending := range endings {
			fine(t, "", with(append([]string{"gather"}, parts...), "-o", at("joined."+ending))...)
			if read(t, at("joined."+ending)) != read(t, at("single."+ending)) {
				t.Errorf("%d parts gather to another %s", n, ending)
			}
		}
		if fine(t, "", append([]string{"gather", "--json"}, parts...)...) != answer || fine(t, "", append([]string{"gather"}, parts...)...) != told {
			t.Errorf("%d parts gather to another answer", n)
		}
	}
	three := func(second string) []string { return []string{"gather", at("1-3.jsonl"), second, at("3-3.jsonl")} }
	fine(t, "", with(three(at("2-3.jsonl")), "-o", at("joinedworst.svg"), "--worst", "--reading", "mean-chord")...)
	if read(t, at("joinedworst.svg")) != read(t, at("worst.svg")) {
		t.Error("the worst copies of a single run and of 3 parts differ")
	}
	whole := read(t, at("2-3.jsonl"))
	bad := saved(t, "bad.jsonl", strings.Replace(whole, `"scale":1`, `"scale":2`, 1))
	short := saved(t, "short.jsonl", whole[:strings.LastIndex(strings.TrimSuffix(whole, "\n"), "\n")+1])
	fine(t, "", with(args, "--seed", "2", "--part", "2/3", "-o", at("other.jsonl"))...)
	refused(t, exitFault, []string{"3 parts 2 is missing"}, "", "gather", at("1-3.jsonl"), at("3-3.jsonl"))
	refused(t, exitFault, []string{"art 2 of 3 is damaged", "bad.jsonl", "checksum"}, "", three(bad)...)
	refused(t, exitFault, []string{"art 2 of 3 is not finished", "short.jsonl", "lacks 1 of 24 rows"}, "", three(short)...)
	refused(t, exitFault, []string{"of another study", "the tolerance in it"}, "", three(at("other.jsonl"))...)
	refused(t, exitFault, []string{"not gone on with", "part 2, not 1"}, "", with(args, "--part", "1/3", "-o", at("2-3.jsonl"))...)
	refused(t, exitUse, []string{"takes no reading called"}, "", with(three(at("2-3.jsonl")), "--reading", "weight")...)
	refused(t, exitUse, []string{".jsonl"}, "", with(args, "--part", "1/3", "-o", "x.csv")...)
	refused(t, exitUse, []string{"K/N"}, "", with(args, "--part", "4/3", "-o", "x.jsonl")...)
}

// TestToleranceGoesOn: a part that broke off at any line, or within one, is gone
// on with to the byte, and what stands whole is not done again.
func TestToleranceGoesOn(t *testing.T) {
	args := copying(t)
	file := filepath.Join(t.TempDir(), "part.jsonl")
	one := with(args, "--part", "1/2", "-o", file, "--json")
	fine(t, "", one...)
	whole := read(t, file)
	lines := strings.SplitAfter(whole, "\n")
	for _, c := range []struct {
		stands  string
		resumed int
	}{
		{"", 0},
		{lines[0][:len(lines[0])/2], 0},
		{lines[0], 0},
		{strings.Join(lines[:2], ""), 1},
		{strings.Join(lines[:20], "") + lines[20][:9], 19},
		{whole, 37},
	} {
		file := saved(t, "part.jsonl", c.stands)
		var left struct {
			File      string `json:"file"`
			Tolerance string `json:"tolerance"`
			Part      int    `json:"part"`
			Of        int    `json:"of"`
			Rows      int    `json:"rows"`
			Resumed   int    `json:"resumed"`
			Tasks     int    `json:"tasks"`
		}
		r := ran(t, "", with(args, "--part", "1/2", "-o", file, "--json")...)
		if r.code != 0 {
			t.Fatal(r.err)
		}
		parsed(t, r.out, &left)
		if left.Rows != 37 || left.Tasks != 73 || left.Resumed != c.resumed || left.Tolerance != "command line" {
			t.Errorf("%+v, want %d resumed", left, c.resumed)
		}
		if read(t, file) != whole {
			t.Errorf("with %d rows standing it comes to another file", c.resumed)
		}
	}
}
