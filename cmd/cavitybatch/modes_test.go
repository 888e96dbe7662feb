package main

import (
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// TestModes: a published superconducting plate, quarter stadium of 0.36 and
// 0.2 m, 8 mm high: 1065 levels below 17.5 GHz by Weyl's law, two-dimensional
// below c/2h = 18.7 GHz (closed forms).
func TestModes(t *testing.T) {
	file := fine(t, "", "make", "quarter-stadium", "straight=360", "radius=200")
	var a modeAccount
	parsed(t, fine(t, file, "modes", "-", "--height", "8", "--frequency", "17.5e9", "--count", "1065", "--json"), &a)
	if len(a.Modes) != 2 || a.Plate == nil {
		t.Fatalf("%+v", a)
	}
	if a.Speed != 299792458 || math.Abs(a.Plate.Limit-299792458/0.016) > 1 {
		t.Errorf("at %g m/s the plate is two-dimensional below %g Hz", a.Speed, a.Plate.Limit)
	}
	below, reach := a.Modes[0], a.Modes[1]
	if math.Abs(below.Count-1065) > 0.5 || *below.PlateCount != below.Count {
		t.Errorf("%g modes, %g in the plate", below.Count, *below.PlateCount)
	}
	// Half a mode is half a mean spacing.
	if d := math.Abs(*reach.Frequency - 17.5e9); d > 0.5**reach.Spacing {
		t.Errorf("1065 modes are said to lie below %g Hz", *reach.Frequency)
	}
	text := fine(t, file, "modes", "-", "--wall", "neumann", "--height", "8")
	for _, says := range []string{"343.2 m/s", "1 mode below", "1000 modes below", "rigid walls", "two-dimensional below 21.45 kHz", "4V/S"} {
		if !strings.Contains(text, says) {
			t.Errorf("modes does not say %q:\n%s", says, text)
		}
	}
	out := filepath.Join(t.TempDir(), "modes.csv")
	if text := fine(t, file, "modes", "-", "--height", "8", "--frequency", "25e9", "-o", out); text != "" {
		t.Errorf("with a figure modes says %q", text)
	}
	if csv, err := os.ReadFile(out); err != nil || !strings.Contains(string(csv), "# x: f, GHz") || !strings.Contains(string(csv), "\ncavity,25,") {
		t.Errorf("the figure reads %.300s (%v)", csv, err)
	}
	if text := fine(t, file, "modes", "-"); strings.Contains(text, "cavity") || strings.Contains(text, "height") {
		t.Errorf("without a height modes speaks of one:\n%s", text)
	}
}

func TestModesRefuses(t *testing.T) {
	file := fine(t, "", "make", "disc")
	refused(t, 1, []string{"Standard input", "no outer wall"}, fine(t, "", "make", "three-posts"), "modes", "-")
	refused(t, 2, []string{"modes --help"}, "", "modes", "--height=1")
	for _, c := range []struct {
		says string
		args []string
	}{
		{"height", []string{"--height=-1"}},
		{"frequency", []string{"--frequency=0"}},
		{"count", []string{"--count=-3"}},
		{"speed", []string{"--speed=NaN"}},
		{"wall", []string{"--wall=soft"}},
	} {
		refused(t, 2, []string{c.says}, file, append([]string{"modes", "-"}, c.args...)...)
	}
}
