package main

import (
	"bytes"
	"encoding/csv"
	"image/png"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
)

// TestFigures writes every kind of figure in every format, takes the table out
// of those that carry it, and wants the same figure again from it.
func TestFigures(t *testing.T) {
	folder := t.TempDir()
	table := filepath.Join(folder, "t.cavity.json")
	fine(t, "", "make", "mushroom", "bounces=50", "unit=um", "-o", table)
	for _, kind := range []string{"portrait", "rays"} {
		for _, ending := range []string{"png", "svg", "pdf", "csv"} {
			out := filepath.Join(folder, kind+"."+ending)
			args := []string{kind, table, "-o", out, "--dpi", "120"}
			fine(t, "", args...)
			first := content(t, out)
			fine(t, "", append(args, "--workers", "7")...)
			if !bytes.Equal(first, content(t, out)) {
				t.Errorf("%s: seven workers write another file", out)
			}
			mark := map[string]string{"png": "\x89PNG", "svg": "<", "pdf": "%PDF", "csv": "# Cavitywright"}[ending]
			if !bytes.HasPrefix(first, []byte(mark)) {
				t.Errorf("%s begins with %q", out, first[:20])
			}
			if ending != "png" && ending != "svg" {
				continue
			}
			if text := fine(t, "", "check", out); !strings.Contains(text, "Mushroom") {
				t.Errorf("%s carries %q", out, text)
			}
			again := filepath.Join(folder, "again."+ending)
			fine(t, string(first), kind, "-", "-o", again, "--dpi", "120")
			if !bytes.Equal(first, content(t, again)) {
				t.Errorf("the table in %s makes another figure", out)
			}
		}
	}
}

func content(t testing.TB, path string) []byte {
	t.Helper()
	b, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	return b
}

// TestPictureSize wants the width in pixels that millimetres and dots per inch
// make, and a picture that is not empty.
func TestPictureSize(t *testing.T) {
	out := filepath.Join(t.TempDir(), "p.png")
	fine(t, fine(t, "", "make", "disc"), "portrait", "-", "-o", out, "--width-mm", "127", "--dpi", "100", "--orbits", "30", "--bounces", "100")
	img, err := png.Decode(bytes.NewReader(content(t, out)))
	if err != nil {
		t.Fatal(err)
	}
	if w := img.Bounds().Dx(); w != 500 {
		t.Errorf("127 mm at 100 dpi are %d pixels, want 500", w)
	}
	dark := 0
	for y := img.Bounds().Min.Y; y < img.Bounds().Max.Y; y++ {
		for x := img.Bounds().Min.X; x < img.Bounds().Max.X; x++ {
			if r, _, _, _ := img.At(x, y).RGBA(); r < 0x8000 {
				dark++
			}
		}
	}
	if dark < 1000 {
		t.Errorf("%d pixels are dark", dark)
	}
}

// TestPortraitNumbers wants a disc's orbits to keep p, in as many rows as
// orbits and bounces make.
func TestPortraitNumbers(t *testing.T) {
	out := filepath.Join(t.TempDir(), "p.csv")
	fine(t, fine(t, "", "make", "disc", "radius=2"), "portrait", "-", "-o", out, "--orbits", "7", "--bounces", "20")
	r := csv.NewReader(bytes.NewReader(content(t, out)))
	r.Comment = '#'
	rows, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	if len(rows) != 1+7*21 || strings.Join(rows[0], ",") != "orbit,s,p" {
		t.Fatalf("there are %d rows under %v", len(rows), rows[0])
	}
	first := map[string]float64{}
	for _, row := range rows[1:] {
		s, err1 := strconv.ParseFloat(row[1], 64)
		p, err2 := strconv.ParseFloat(row[2], 64)
		if err1 != nil || err2 != nil || s < 0 || s >= 4*math.Pi {
			t.Fatalf("the row %v", row)
		}
		if p0, seen := first[row[0]]; seen && p != p0 {
			t.Errorf("orbit %s goes from p = %g to %g", row[0], p0, p)
		}
		first[row[0]] = p
	}
	if len(first) != 7 {
		t.Errorf("there are %d orbits, want 7", len(first))
	}
}

// TestUnwritable wants a sentence where a figure cannot be written, and an
// older one left as it was.
func TestUnwritable(t *testing.T) {
	folder := t.TempDir()
	disc := fine(t, "", "make", "disc")
	plain := filepath.Join(folder, "plain")
	if err := os.WriteFile(plain, []byte("x"), 0o644); err != nil {
		t.Fatal(err)
	}
	inside := filepath.Join(folder, "inside.png")
	if err := os.Mkdir(inside, 0o755); err != nil {
		t.Fatal(err)
	}
	few := []string{"--bounces", "3", "--dpi", "50"}
	for path, word := range map[string]string{
		filepath.Join(folder, "no", "such", "p.png"): "no folder",
		filepath.Join(plain, "p.png"):                "cannot be written",
		inside:                                       "folder",
	} {
		refused(t, 1, []string{path, word}, disc, append([]string{"portrait", "-", "-o", path}, few...)...)
	}
	refused(t, 1, []string{"cannot be written"}, "", "make", "disc", "-o", filepath.Join(folder, "no", "t.json"))
	if os.Getuid() != 0 { // the superuser writes anywhere
		locked := filepath.Join(folder, "locked")
		if err := os.Mkdir(locked, 0o555); err != nil {
			t.Fatal(err)
		}
		refused(t, 1, []string{"locked", "may not"}, disc, append([]string{"rays", "-", "-o", filepath.Join(locked, "p.svg")}, few...)...)
	}
	// A file that stands keeps its permissions, and a failed export leaves it.
	out := filepath.Join(folder, "p.svg")
	if err := os.WriteFile(out, []byte("older"), 0o600); err != nil {
		t.Fatal(err)
	}
	refused(t, 2, nil, disc, "rays", "-", "-o", out, "--width-mm", "99999")
	if string(content(t, out)) != "older" {
		t.Error("a failed export touched the older figure")
	}
	fine(t, disc, "rays", "-", "-o", out, "--bounces", "3")
	info, err := os.Stat(out)
	if err != nil {
		t.Fatal(err)
	}
	if info.Mode().Perm() != 0o600 || string(content(t, out)) == "older" {
		t.Errorf("the figure has the mode %v", info.Mode())
	}
	if left, _ := filepath.Glob(filepath.Join(folder, ".*")); len(left) != 0 {
		t.Errorf("left behind: %v", left)
	}
}
