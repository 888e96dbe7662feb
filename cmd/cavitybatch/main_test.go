package main

import (
	"bytes"
	"errors"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"

	"cavitywright/sim/figure"

	"github.com/go-json-experiment/json"
)

// built is the program, built without a C compiler as users may build it.
var built string

func TestMain(m *testing.M) { os.Exit(tested(m)) }

func tested(m *testing.M) int {
	folder, err := os.MkdirTemp("", "cavitybatch")
	if err != nil {
		fmt.Fprintln(os.Stderr, err)
		return 1
	}
	defer os.RemoveAll(folder)
	built = filepath.Join(folder, "cavitybatch")
	c := exec.Command("go", "build", "-o", built, ".")
	c.Env = append(os.Environ(), "CGO_ENABLED=0")
	if out, err := c.CombinedOutput(); err != nil {
		fmt.Fprintf(os.Stderr, "%v\n%s", err, out)
		return 1
	}
	return m.Run()
}

// result is what a run of the program left.
type result struct {
	code     int
	out, err string
}

// ran runs the program with standard input in.
func ran(t testing.TB, in string, args ...string) result {
	t.Helper()
	c := exec.Command(built, args...)
	c.Stdin = strings.NewReader(in)
	var out, complaint bytes.Buffer
	c.Stdout, c.Stderr = &out, &complaint
	err := c.Run()
	if exit := (*exec.ExitError)(nil); err != nil && !errors.As(err, &exit) {
		t.Fatal(err)
	}
	return result{c.ProcessState.ExitCode(), out.String(), complaint.String()}
}

// fine runs the program and wants it to succeed in silence.
func fine(t testing.TB, in string, args ...string) string {
	t.Helper()
	r := ran(t, in, args...)
	if r.code != 0 || r.err != "" {
		t.Fatalf("%v: exit %d, said %q", args, r.code, r.err)
	}
	return r.out
}

// refused runs the program and wants a code, one sentence that holds the
// words, and no output.
func refused(t testing.TB, code int, words []string, in string, args ...string) {
	t.Helper()
	r := ran(t, in, args...)
	if r.code != code {
		t.Errorf("%v: exit %d, want %d (%s)", args, r.code, code, r.err)
	}
	if r.out != "" {
		t.Errorf("%v: wrote %q", args, r.out)
	}
	lines := strings.Split(strings.TrimSuffix(r.err, "\n"), "\n")
	if len(lines) != 1 || !strings.HasSuffix(lines[0], ".") || strings.HasSuffix(lines[0], "..") || len(lines[0]) < 20 || strings.Contains(r.err, "!") {
		t.Errorf("%v: said %q, want one sentence", args, r.err)
	}
	if !strings.HasPrefix(lines[0], strings.ToUpper(lines[0][:min(1, len(lines[0]))])) {
		t.Errorf("%v: said %q, want a capital", args, r.err)
	}
	for _, w := range words {
		if !strings.Contains(r.err, w) {
			t.Errorf("%v: said %q, without %q", args, r.err, w)
		}
	}
}

// parsed reads JSON into a value, strictly.
func parsed(t testing.TB, text string, v any) {
	t.Helper()
	if err := json.Unmarshal([]byte(text), v, json.RejectUnknownMembers(true)); err != nil {
		t.Fatalf("%v in %s", err, text)
	}
}

// saved is a file with the text, in a folder of the test's own.
func saved(t testing.TB, name, text string) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), name)
	if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
	return path
}

// TestWrongUse wants exit 2 and a sentence for wrong uses of the command line.
func TestWrongUse(t *testing.T) {
	file := saved(t, "disc.cavity.json", fine(t, "", "make", "disc"))
	for _, c := range []struct {
		words string
		args  []string
	}{
		{"one of", nil},
		{"paint", []string{"paint", file}},
		{"--colour", []string{"check", file, "--colour"}},
		{"file", []string{"check"}},
		{"--out", []string{"portrait", file}},
		{"many", []string{"readings", file, "--workers", "many"}},
		{"-1", []string{"readings", file, "--workers=-1"}},
		{"effort", []string{"readings", file, "--effort", "0"}},
		{"effort", []string{"readings", file, "--effort", "NaN"}},
		{"weight", []string{"readings", file, "--only", "perimeter,weight"}},
		{"picture.bmp", []string{"portrait", file, "-o", "picture.bmp"}},
		{".json", []string{"portrait", file, "-o", "picture.json"}},
		{"dpi", []string{"portrait", file, "-o", "p.png", "--bounces", "9", "--dpi", "1e9"}},
		{"mm", []string{"rays", file, "-o", "p.png", "--width-mm=-3"}},
		{"points", []string{"portrait", file, "-o", "p.png", "--orbits", "1000000", "--bounces", "1000000"}},
		{"negative", []string{"portrait", file, "-o", "p.png", "--orbits=-1"}},
		{"at least 1", []string{"rays", file, "-o", "p.png", "--bounces", "0"}},
		{"time", []string{"pace", file, "--seconds", "0"}},
		{"name a shape", []string{"make"}},
		{"pyramid", []string{"make", "pyramid"}},
		{"depth", []string{"make", "disc", "depth=3"}},
		{"wide", []string{"make", "disc", "radius=wide"}},
		{"radius", []string{"make", "disc", "radius"}},
		{"twice", []string{"make", "disc", "radius=1", "radius=2"}},
		{"furlong", []string{"make", "disc", "unit=furlong"}},
		{"seed", []string{"make", "disc", "seed=-1"}},
		{"incomplete", []string{"make", "disc", "--coat", "disc:1:0:1"}},
		{"ellipse", []string{"make", "disc", "--coat", "ellipse:1:0:1:opening"}},
		{"side", []string{"make", "disc", "--coat", "disc:0:0:1:opening"}},
		{"begins", []string{"make", "disc", "--coat", "disc:1:x:1:opening"}},
		{"velvet", []string{"make", "disc", "--coat", "disc:1:0:1:velvet"}},
		{"gloss", []string{"make", "disc", "--coat", "disc:1:0:1:lossy:gloss=1"}},
		{"has no parameters", []string{"make", "disc", "--coat", "disc:1:0:1:opening:width=1"}},
		{"must be a number", []string{"make", "disc", "--coat", "disc:1:0:1:lossy:reflectivity=high"}},
	} {
		// Without its first letter, which may be a capital in the sentence.
		refused(t, 2, []string{c.words[1:]}, "", c.args...)
	}
}

// TestBadTable wants exit 1 and a sentence that names the file and the place.
func TestBadTable(t *testing.T) {
	good := fine(t, "", "make", "stadium")
	folder := t.TempDir()
	file := func(name, text string) string {
		path := filepath.Join(folder, name)
		if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
		return path
	}
	png := filepath.Join(folder, "stadium.png")
	fine(t, good, "rays", "-", "-o", png, "--dpi", "60")
	picture, err := os.ReadFile(png)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		path  string
		words []string
	}{
		{filepath.Join(folder, "missing.cavity.json"), []string{"missing.cavity.json", "no such file"}},
		{folder, []string{"folder"}},
		{file("empty.json", ""), []string{"empty.json", "empty"}},
		{file("cut.json", good[:len(good)/2]), []string{"cut.json", "line"}},
		{file("key.json", strings.Replace(good, `"radius"`, `"radios"`, 1)), []string{"key.json", "radios", "line"}},
		{file("range.json", strings.Replace(good, `"radius": 1`, `"radius": -1`, 1)), []string{"range.json", "radius", "-1"}},
		{file("later.json", strings.Replace(good, `"version": 1`, `"version": 99`, 1)), []string{"later.json", "99"}},
		{file("notes.txt", "a note"), []string{"notes.txt"}},
		{file("cut.png", string(picture[:300])), []string{"cut.png", "breaks off"}},
		{file("plain.svg", `<svg xmlns="http://www.w3.org/2000/svg"></svg>`), []string{"plain.svg", "no table"}},
	} {
		for _, args := range [][]string{{"check", c.path}, {"readings", c.path, "--json"}, {"portrait", c.path, "-o", filepath.Join(folder, "never.png")}, {"pace", c.path}} {
			refused(t, 1, c.words, "", args...)
		}
	}
	if _, err := os.Stat(filepath.Join(folder, "never.png")); err == nil {
		t.Error("a figure was written of a table that is none")
	}
	refused(t, 1, []string{"Standard input"}, "{", "check", "-")
	r := ran(t, "", "check", "--json", filepath.Join(folder, "range.json"))
	var c struct {
		Problems []problem `json:"problems"`
	}
	parsed(t, r.out, &c)
	if r.code != 1 || len(c.Problems) != 1 || !strings.Contains(c.Problems[0].Text, "radius") {
		t.Errorf("check --json of a bad table: exit %d, %s", r.code, r.out)
	}
	// Out of range on the command line, and numbers that do not go together.
	refused(t, 1, []string{"radius"}, "", "make", "disc", "radius=0")
	refused(t, 1, []string{"eps"}, "", "make", "limacon", "eps=7")
	refused(t, 1, []string{"separation"}, "", "make", "three-posts", "separation=1")
	refused(t, 1, []string{"reflectivity"}, "", "make", "disc", "--coat", "disc:1:0:1:lossy:reflectivity=3")
	refused(t, 1, []string{"side 2"}, "", "make", "disc", "--coat", "disc:2:0:1:opening")
	refused(t, 1, []string{"reflectivity", "bare wall"}, "", "make", "disc", "--bare", "lossy:reflectivity=3")
	refused(t, 2, []string{"bare wall", "velvet"}, "", "make", "disc", "--bare", "velvet")
	if text := fine(t, "", "make", "disc", "--bare", "dielectric:index=1.5"); !strings.Contains(text, `"law": "dielectric"`) || !strings.Contains(text, `"index": 1.5`) {
		t.Errorf("the table of a bare wall of index 1.5 is %s", text)
	}
	refused(t, 1, []string{"Coat 1"}, "", "make", "disc", "--coat", "disc:1:0.5:0.5:opening")
}

// TestNone wants a plain sentence for what a table does not have.
func TestNone(t *testing.T) {
	disc := fine(t, "", "make", "disc")
	for _, c := range [][]string{{"survival", "-"}, {"emission", "-"}, {"lifetime", "-", "-o", "m.png"}} {
		refused(t, 1, []string{"opening", "lay"}, disc, c...)
	}
	refused(t, 1, []string{"opening"}, disc, "transmission", "-", "--json")
	for _, name := range []string{"window-share", "lobe-width", "escape-rate"} {
		refused(t, 1, []string{name, "nothing leaves"}, disc, "readings", "-", "--only", name, "--json")
	}
	refused(t, 1, []string{"mean-dwell", "opening"}, disc, "readings", "-", "--only", "mean-dwell")
	// One that is not there withholds no other.
	r := ran(t, disc, "readings", "-", "--only", "mean-dwell,perimeter,escape-rate", "--json")
	var some struct {
		Readings []figure.Scalar  `json:"readings"`
		None     []figure.Missing `json:"none"`
	}
	parsed(t, r.out, &some)
	if r.code != 0 || len(some.Readings) != 1 || some.Readings[0].Name != "perimeter" || strings.Count(r.err, "\n") != 2 {
		t.Errorf("with two readings that are not there: exit %d, said %q, wrote %s", r.code, r.err, r.out)
	}
	if len(some.None) != 2 || some.None[0].Name != "mean-dwell" || !strings.Contains(some.None[0].Why, "opening") || some.None[1].Name != "escape-rate" {
		t.Errorf("those that are not there are %+v", some.None)
	}
	refused(t, 2, []string{"not inside"}, fine(t, "", "make", "disc", "--coat", "disc:1:0:0.1:opening"), "survival", "-", "--from", "point:3,0")
	refused(t, 2, []string{"no way to start"}, disc, "emission", "-", "--from", "light")
	refused(t, 2, []string{"width"}, disc, "placement", "-", "--width", "wide")
}
