package main

import (
	"math"
	"strings"
	"testing"
)

// TestWallReport: what check says of a quarter stadium 560 × 200 mm that is
// milled with a 3 mm cutter, by elementary geometry.
func TestWallReport(t *testing.T) {
	file := fine(t, "", "make", "quarter-stadium", "straight=360", "radius=200")
	var a account
	parsed(t, fine(t, file, "check", "-", "--tool", "3", "--json"), &a)
	// π A/L (Santaló, Integral Geometry and Geometric Probability, 1976, ch. 3).
	if want := math.Pi * (360*200 + math.Pi*1e4) / (720 + 400 + math.Pi*100); a.MeanChord == nil || math.Abs(*a.MeanChord-want) > 1e-9 {
		t.Errorf("the mean chord is %v, want %g mm", a.MeanChord, want)
	}
	if a.Focusing == nil || a.Focusing.Radius != 200 || a.Dispersing != nil || a.Smoothness != "C0" {
		t.Errorf("focusing %v, dispersing %v, %s", a.Focusing, a.Dispersing, a.Smoothness)
	}
	if len(a.Jumps) != 1 || math.Abs(a.Jumps[0].Before-1.0/200) > 1e-15 || a.Jumps[0].After != 0 {
		t.Errorf("the jumps are %+v", a.Jumps)
	}
	if len(a.Flatness.Strips) != 1 || math.Abs(a.Flatness.Strips[0].Across-200) > 1e-9 || math.Abs(a.Flatness.Strips[0].Along-360) > 1e-9 {
		t.Errorf("the strips are %+v", a.Flatness.Strips)
	}
	if a.Tool == nil || len(a.Tool.Places) != 3 || math.Abs(*a.Tool.Places[0].Left-3*(math.Sqrt2-1)) > 1e-12 {
		t.Errorf("the tool is said to miss %+v", a.Tool)
	}
	if a.Symmetry.Group != "C1" || !a.Convexity.Convex || a.Convexity.Strictly || len(a.Curvature) != 4 || len(a.Trust) < 5 {
		t.Errorf("symmetry %+v, convexity %+v, %d runs of curvature, %d sentences", a.Symmetry, a.Convexity, len(a.Curvature), len(a.Trust))
	}
	text := fine(t, file, "check", "-", "--tool", "3")
	for _, says := range []string{"mean chord", "What to trust", "face each other in parallel, 200 mm apart", "tool of radius 3 mm does not touch"} {
		if !strings.Contains(text, says) {
			t.Errorf("check does not say %q:\n%s", says, text)
		}
	}
	if text := fine(t, file, "check", "-"); strings.Contains(text, "tool") {
		t.Errorf("without a tool check speaks of one:\n%s", text)
	}
	refused(t, 2, []string{"radius", "0 or more"}, file, "check", "-", "--tool=-1")
}
