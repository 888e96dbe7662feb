package tablefile

import (
	"bytes"
	"os"
	"path/filepath"
	"testing"

	"cavitywright/table"
)

// FuzzRead holds for any bytes: no panic, and what is accepted compiles, is
// written, and is then written the same.
func FuzzRead(f *testing.F) {
	for _, pattern := range []string{"*.json", "bad/*.json"} {
		files, err := filepath.Glob(filepath.Join(samples, pattern))
		if err != nil || len(files) == 0 {
			f.Fatal("no samples", err)
		}
		for _, file := range files {
			b, err := os.ReadFile(file)
			if err != nil {
				f.Fatal(err)
			}
			f.Add(b)
		}
	}
	f.Fuzz(func(t *testing.T, src []byte) {
		d, err := Read(bytes.NewReader(src))
		if err != nil {
			if err.Error() == "" {
				t.Error("a refusal without a word")
			}
			return
		}
		if _, err := table.New(d); err != nil {
			t.Fatalf("accepted, but no table: %v", err)
		}
		first := written(t, d)
		back, err := Read(bytes.NewReader(first))
		if err != nil {
			t.Fatalf("%v in\n%s", err, first)
		}
		if second := written(t, back); !bytes.Equal(first, second) {
			t.Fatalf("written\n%s\nand then\n%s", first, second)
		}
	})
}
