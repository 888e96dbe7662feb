package main

import (
	"bytes"
	"image/gif"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// TestFilm writes a film as GIF and as pictures of which each is a table, the
// same on any number of workers, and refuses what is none.
func TestFilm(t *testing.T) {
	folder := t.TempDir()
	table := filepath.Join(folder, "t.cavity.json")
	fine(t, "", "make", "limacon", "radius=5", "eps=0.2", "unit=um", "-o", table)
	out := filepath.Join(folder, "f.gif")
	args := []string{"film", table, "--turn", "eps=0.1:0.3:4", "-o", out, "--bounces", "40", "--dpi", "60"}
	fine(t, "", args...)
	first := content(t, out)
	fine(t, "", append(args, "--workers", "5")...)
	if !bytes.Equal(first, content(t, out)) {
		t.Error("five workers write another film")
	}
	g, err := gif.DecodeAll(bytes.NewReader(first))
	if err != nil || len(g.Image) != 4 {
		t.Fatalf("the film has not 4 frames: %v", err)
	}
	fine(t, "", "film", table, "--turn", "eps=0.1:0.3:3", "-o", filepath.Join(folder, "p.png"), "--bounces", "40", "--dpi", "60")
	want := map[string]string{"p-1.png": "0.1", "p-2.png": "0.2", "p-3.png": "0.3"}
	for name, eps := range want {
		if text := fine(t, "", "check", filepath.Join(folder, name)); text == "" {
			t.Errorf("%s with eps = %s carries no table", name, eps)
		}
	}
	for _, bad := range [][]string{
		{"--turn", "eps=0.1:0.3:3", "-o", filepath.Join(folder, "f.svg")},
		{"--turn", "eps=0.1:9:3", "-o", out},
		{"--turn", "nose=0.1:0.3:3", "-o", out},
		{"--turn", "eps=0.1:0.3:9999", "-o", out},
		{"--turn", "eps", "-o", out},
		{"--turn", "eps=0.1:0.3:3", "-o", out, "--rate", "0"},
		{"--turn", "eps=0.1:0.3:3"},
	} {
		var said bytes.Buffer
		if code := obey(t.Context(), append([]string{"film", table}, bad...), streams{strings.NewReader(""), os.Stdout, &said}); code != exitUse {
			t.Errorf("%v ends with %d, not with wrong use: %s", bad, code, said.String())
		}
	}
	if !bytes.Equal(first, content(t, out)) {
		t.Error("what was refused has changed the file")
	}
}
