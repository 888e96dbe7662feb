package main

import (
	"debug/buildinfo"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
	"time"

	"cavitywright/sim/figure"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
)

// contract are the shapes that scripts rely on, with a set of parameters, and
// the perimeter and area in closed form (common practice); area 0 where there
// is no outer wall.
var contract = []struct {
	args            string
	perimeter, area float64
}{
	{"disc radius=2", 4 * math.Pi, 4 * math.Pi},
	{"ellipse a=2 b=1", 9.6884482205476762, 2 * math.Pi}, // 4 a E(sqrt 3 / 2)
	{"rectangle width=3 height=2", 10, 6},
	{"stadium half-length=1 radius=1", 10.283185307179586, 7.1415926535897932},
	{"limacon radius=1 eps=0.43", 6.5771494381548584, 3.4320328944141696},
	{"quadrupole radius=1 eps=0.1", 6.3457068653416691, 3.1573006168577422},
	// Half disc of radius 1 with a stem 1 wide and 1 long.
	{"mushroom radius=1 stem-half-width=0.5 stem-length=1", math.Pi + 1 + 2 + 1, math.Pi/2 + 1},
	{"cut-disc radius=1 distance=0.5", math.Sqrt(3) + 4*math.Pi/3, 2*math.Pi/3 + math.Sqrt(3)/4},
	// Two circles of radius 1 at distance 1: arcs of a third each.
	{"lemon radius=1 separation=1", 4 * math.Pi / 3, 2*math.Pi/3 - math.Sqrt(3)/2},
	{"three-posts radius=1 separation=6", 6 * math.Pi, 0},
	{"square-with-disc side=2 radius=0.5", 8 + math.Pi, 4 - math.Pi/4},
	{"box-of-posts side=10 count=7 radius=0.5", 40 + 7*math.Pi, 100 - 7*math.Pi/4},
}

// TestMakeCheck sends each contract shape from make to check.
func TestMakeCheck(t *testing.T) {
	for _, c := range contract {
		words := strings.Fields(c.args)
		file := fine(t, "", append(append([]string{"make"}, words...), "unit=um", "seed=9")...)
		var a account
		parsed(t, fine(t, file, "check", "-", "--json"), &a)
		if math.Abs(a.Perimeter-c.perimeter) > 1e-11*c.perimeter {
			t.Errorf("%s: the perimeter is %.16g, want %.16g", c.args, a.Perimeter, c.perimeter)
		}
		switch {
		case c.area == 0:
			if a.Area != nil || !a.Open {
				t.Errorf("%s: it has an area or an outer wall", c.args)
			}
		case a.Area == nil || math.Abs(*a.Area-c.area) > 1e-11*c.area:
			t.Errorf("%s: the area is %v, want %.16g", c.args, a.Area, c.area)
		}
		if a.Unit != "µm" || len(a.Problems) != 0 || len(a.Pieces) == 0 || len(a.Loops) == 0 {
			t.Errorf("%s: %+v", c.args, a)
		}
		if text := fine(t, file, "check", "-"); !strings.Contains(text, "perimeter") || !strings.Contains(text, "µm") {
			t.Errorf("%s: check says %q", c.args, text)
		}
	}
}

// TestList wants every shape of the contract with its parameters, units and
// ranges, and the laws.
func TestList(t *testing.T) {
	text := fine(t, "", "make", "--list")
	for _, c := range contract {
		words := strings.Fields(c.args)
		_, entry, ok := strings.Cut(text, "\n"+words[0]+"\n")
		if !ok {
			t.Errorf("the list lacks %s", words[0])
			continue
		}
		entry, _, _ = strings.Cut(entry, "\n\n")
		for _, w := range words[1:] {
			name, _, _ := strings.Cut(w, "=")
			if !strings.Contains(entry, "    "+name+" ") || !strings.Contains(entry, " to ") {
				t.Errorf("the entry of %s lacks %s: %s", words[0], name, entry)
			}
		}
	}
	for _, law := range []string{"opening", "lossy", "dielectric", "rough"} {
		if !strings.Contains(text, "\n"+law+"\n") {
			t.Errorf("the list lacks the law %s", law)
		}
	}
}

// TestJoints wants the joints of a mushroom: six corners, two of them reflex.
func TestJoints(t *testing.T) {
	var a account
	parsed(t, fine(t, fine(t, "", "make", "mushroom", "radius=1", "stem-half-width=0.5", "stem-length=1"), "check", "-", "--json"), &a)
	reflex := 0
	for _, j := range a.Joints {
		if j.Continuity != "corner" {
			t.Errorf("the joint at s = %g is %s, want a corner", j.S, j.Continuity)
		}
		if math.Abs(j.AngleDeg-270) < 1e-9 {
			reflex++
		} else if math.Abs(j.AngleDeg-90) > 1e-9 {
			t.Errorf("the corner at s = %g has %g deg", j.S, j.AngleDeg)
		}
	}
	if len(a.Joints) != 6 || reflex != 2 {
		t.Errorf("%d joints, %d of them reflex; want 6 and 2", len(a.Joints), reflex)
	}
	parsed(t, fine(t, fine(t, "", "make", "stadium"), "check", "-", "--json"), &a)
	if len(a.Joints) != 4 || a.Joints[0].Continuity != "tangent" || math.Abs(math.Abs(*a.Joints[0].Jump)-1) > 1e-12 {
		t.Errorf("the joints of a stadium are %+v", a.Joints)
	}
	if *a.SmallestRadius != 1 {
		t.Errorf("the smallest radius of a stadium is %g, want 1", *a.SmallestRadius)
	}
}

// TestCoat lays coats by name and number, on one side and on all.
func TestCoat(t *testing.T) {
	file := fine(t, "", "make", "stadium", "--coat", "stadium:1:0.25:0.75:opening", "--coat", "1:all:0:1:dielectric:index=1.5:te=1", "--coat=stadium:2:0:0.5:lossy")
	var a account
	parsed(t, fine(t, file, "check", "-", "--json"), &a)
	laws := map[string]int{}
	for _, c := range a.Coats {
		laws[c.Law]++
		if c.Law == "opening" && (math.Abs(c.From-0.5) > 1e-12 || math.Abs(c.To-1.5) > 1e-12) {
			t.Errorf("the opening runs from %g to %g, want 0.5 to 1.5", c.From, c.To)
		}
	}
	if laws["opening"] != 1 || laws["dielectric"] != 4 || laws["lossy"] != 1 {
		t.Errorf("the coats are %v", a.Coats)
	}
}

// scalars are the readings of a JSON answer by name.
func scalars(t testing.TB, text string) map[string]figure.Scalar {
	t.Helper()
	var r struct {
		Readings []figure.Scalar `json:"readings"`
	}
	parsed(t, text, &r)
	all := map[string]figure.Scalar{}
	for _, s := range r.Readings {
		all[s.Name] = s
	}
	return all
}

// TestReadings takes the readings of a stadium and of three posts through the
// program.
func TestReadings(t *testing.T) {
	stadium := fine(t, "", "make", "stadium", "half-length=1", "radius=1", "unit=cm", "seed=3")
	got := scalars(t, fine(t, stadium, "readings", "-", "--json", "--effort", "0.05"))
	for name, want := range map[string]float64{"perimeter": 10.283185307179586, "area": 7.1415926535897932, "mean-chord-exact": 2.1818117971465539} {
		if s := got[name]; math.Abs(s.Value-want) > 1e-12*want || s.StdErr != 0 || s.Seed != 3 {
			t.Errorf("%s is %+v, want %.16g", name, s, want)
		}
	}
	if s := got["mean-chord"]; math.Abs(s.Value-2.1818117971465539) > 3*s.StdErr || s.Unit != "cm" || s.Bounces < 100000 {
		t.Errorf("mean-chord is %+v", s)
	}
	if got["area"].Unit != "cm²" {
		t.Errorf("the area is in %q", got["area"].Unit)
	}
	posts := fine(t, "", "make", "three-posts", "radius=1", "separation=6")
	one := fine(t, posts, "readings", "-", "--json", "--effort", "0.05", "--only", "escape-rate", "--workers", "1")
	// Gaspard and Rice, J. Chem. Phys. 90, 2225 (1989).
	if s := scalars(t, one)["escape-rate"]; math.Abs(s.Value-0.4103384077693464893) > 3*s.StdErr || s.StdErr > 0.02*s.Value || s.Unit != "1/mm" {
		t.Errorf("escape-rate is %+v", s)
	}
	for _, n := range []string{"2", "7"} {
		if many := fine(t, posts, "readings", "-", "--json", "--effort", "0.05", "--only", "escape-rate", "--workers", n); many != one {
			t.Errorf("%s workers write %s, one writes %s", n, many, one)
		}
	}
	if other := fine(t, posts, "readings", "-", "--json", "--effort", "0.05", "--only", "escape-rate", "--seed", "8"); other == one || scalars(t, other)["escape-rate"].Seed != 8 {
		t.Errorf("another seed writes %s", other)
	}
	if text := fine(t, stadium, "readings", "-", "--only", "perimeter,area"); !strings.Contains(text, "10.28318531 cm") || strings.Count(text, "\n") != 2 {
		t.Errorf("for a person it writes %q", text)
	}
}

// TestPace wants real speeds, for about as long as was asked.
func TestPace(t *testing.T) {
	start := time.Now()
	var s speeds
	parsed(t, fine(t, fine(t, "", "make", "stadium"), "pace", "-", "--seconds", "0.3", "--json"), &s)
	if s.One < 1e4 || s.All < 1e4 || s.Workers < 1 || s.Seconds != 0.3 {
		t.Errorf("the speeds are %+v", s)
	}
	if d := time.Since(start).Seconds(); d < 0.36 || d > 20 {
		t.Errorf("it took %.1f s", d)
	}
}

// TestInterrupt stops a long run, and wants the older figure untouched and
// nothing left beside it.
func TestInterrupt(t *testing.T) {
	folder := t.TempDir()
	table, out := filepath.Join(folder, "t.cavity.json"), filepath.Join(folder, "p.png")
	fine(t, "", "make", "stadium", "-o", table)
	if err := os.WriteFile(out, []byte("older"), 0o644); err != nil {
		t.Fatal(err)
	}
	for _, args := range [][]string{
		{"portrait", table, "-o", out, "--orbits", "2", "--bounces", "9000000"},
		{"readings", table, "--effort", "1000"},
	} {
		c := exec.Command(built, args...)
		var said strings.Builder
		c.Stderr = &said
		if err := c.Start(); err != nil {
			t.Fatal(err)
		}
		time.Sleep(300 * time.Millisecond)
		if err := c.Process.Signal(syscall.SIGINT); err != nil {
			t.Fatal(err)
		}
		stopped := time.Now()
		_ = c.Wait() // the exit code is what counts
		if d := time.Since(stopped); d > 10*time.Second {
			t.Errorf("%v: it took %v to stop", args, d)
		}
		if c.ProcessState.ExitCode() != 1 || !strings.HasPrefix(said.String(), "Stopped") {
			t.Errorf("%v: exit %d, said %q", args, c.ProcessState.ExitCode(), said.String())
		}
	}
	if text, err := os.ReadFile(out); err != nil || string(text) != "older" {
		t.Errorf("the older figure reads %q (%v)", text, err)
	}
	if left, _ := os.ReadDir(folder); len(left) != 2 {
		t.Errorf("the folder holds %v", left)
	}
}

// TestPlate holds the answer about a table file to a stored one, up to
// rounding: its keys are what scripts read.
func TestPlate(t *testing.T) {
	folder := filepath.Join("..", "..", "testdata", "batch")
	stored, err := os.ReadFile(filepath.Join(folder, "plate.check.json"))
	if err != nil {
		t.Fatal(err)
	}
	var want, got any
	parsed(t, string(stored), &want)
	parsed(t, fine(t, "", "check", "--json", filepath.Join(folder, "plate.cavity.json")), &got)
	if d := cmp.Diff(want, got, cmpopts.EquateApprox(1e-12, 0)); d != "" {
		t.Errorf("the answer differs (- stored, + now):\n%s", d)
	}
	// The same command line makes the same file again.
	made := fine(t, "", "make", "mushroom", "radius=12.5", "stem-half-width=4", "stem-length=10", "name=Larkmoor plate 7 (invented)", "seed=7",
		"--coat", "mushroom:1:0.25:0.75:opening", "--coat", "mushroom:4:0:1:lossy:reflectivity=0.98")
	file, err := os.ReadFile(filepath.Join(folder, "plate.cavity.json"))
	if err != nil {
		t.Fatal(err)
	}
	if made != string(file) {
		t.Errorf("the file is made as %s, and stored as %s", made, file)
	}
}

// TestPure wants the program free of the window toolkit and of C.
func TestPure(t *testing.T) {
	b, err := buildinfo.ReadFile(built)
	if err != nil {
		t.Fatal(err)
	}
	for _, d := range b.Deps {
		if strings.Contains(d.Path, "fyne") || strings.Contains(d.Path, "go-gl") {
			t.Errorf("the program is built with %s", d.Path)
		}
	}
	for _, s := range b.Settings {
		if s.Key == "CGO_ENABLED" && s.Value != "0" {
			t.Error("the program is built with C")
		}
	}
}
