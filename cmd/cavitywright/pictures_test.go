package main

import (
	"os"
	"os/exec"
	"path/filepath"
	"testing"

	"cavitywright/ui/window"
)

// TestPictures makes the pictures of the README from the program as it stands,
// into the folder that CAVITYWRIGHT_PICTURES names:
//
//	CAVITYWRIGHT_WINDOW=1 CAVITYWRIGHT_PICTURES=../../assets/pictures go test -tags gles,no_emoji -run Pictures ./cmd/cavitywright
func TestPictures(t *testing.T) {
	folder := os.Getenv("CAVITYWRIGHT_PICTURES")
	if folder == "" {
		t.Skip("set CAVITYWRIGHT_PICTURES to a folder to make the README's pictures")
	}
	needDisplay(t)
	shot := func(name string) {
		path := filepath.Join(folder, name+".png")
		out, err := exec.Command("import", "-window", "root", "-crop", "1280x800+0+0", "+repage", path).CombinedOutput()
		if err != nil {
			t.Fatalf("%v: %s", err, out)
		}
	}
	for _, p := range []struct {
		name, table string
		drag        int // how far the last handle is dragged, in pixels
		dark        bool
	}{
		{"first", "01-dented-microdisc", 0, false},
		{"dragged", "01-dented-microdisc", 44, false},
		{"mushroom", "05-mushroom", 0, false},
		{"free-wall", "11-pebble", 0, false},
		{"dark", "10-quadrupole-laser", 0, true},
	} {
		d := start(t, t.TempDir(), filepath.Join("../../assets/gallery", p.table+".cavity.json"))
		if p.dark {
			d.do("key", "l")
		}
		s := d.until("handles", func(s window.State) bool { return len(s.Handles) > 0 })
		if p.drag != 0 {
			h := s.Handles[len(s.Handles)-1]
			d.drag(int(h[0]), int(h[1]), int(h[0])+p.drag, int(h[1]))
			d.until("the portrait", func(s window.State) bool { return s.Unsaved && s.Status.Done >= 1 })
		}
		d.do("mousemove", "640", "795")
		d.do("mousemove", "642", "796")
		d.until("the portrait", func(s window.State) bool { return s.Status.Done >= 1 })
		shot(p.name)
		_ = d.cmd.Process.Kill()
		_ = d.cmd.Wait()
	}
}
