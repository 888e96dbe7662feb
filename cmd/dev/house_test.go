package main

import (
	"go/ast"
	"go/parser"
	"go/token"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"
)

// floors is the order of the packages: each may import those above it in the
// list and those in its own line, no others of this module.
var floors = [][]string{
	{"table/plane"},
	{"table/param"},
	{"table/curve"},
	{"table/wall"},
	{"table/shape"},
	{"table"},
	{"table/edit", "table/tablefile", "table/dial", "table/survey", "table/outline"},
	{"table/outline/intake"},
	{"sim"},
	{"sim/figure"},
	{"sim/measure"},
	{"sim/measure/chaos", "sim/measure/leak", "sim/measure/modes"},
	{"sim/measure/reading"},
	{"sim/measure/sheet"},
	{"sim/orbit"},
	{"sim/study"},
	{"sim/study/tolerance", "sim/study/film"},
	{"sim/study/part", "sim/study/wish"},
	{"sim/run"},
	{"sim/run/trial"},
	{"assets"},
	{"render/letter"},
	{"render"},
	{"render/pixel"},
	{"render/raster", "render/vector"},
	{"render/export"},
	{"ui/store"},
	{"ui/session"},
	{"ui/tool"},
	{"ui/live"},
	{"ui/pane"},
	{"ui/window"},
	{"cmd/cavitywright", "cmd/cavitybatch", "cmd/dev"},
}

// apart are imports that only the named packages may have.
var apart = map[string][]string{
	"github.com/fogleman/gg":       {"render/raster"},
	"fyne.io/fyne/v2/app":          {"cmd/cavitywright"},
	"golang.org/x/sync/errgroup":   {"sim/run"},
	"codeberg.org/go-pdf/fpdf":     {"render/vector"},
	"github.com/alecthomas/kong":   {"cmd/cavitybatch"},
	"github.com/vbauerster/mpb/v8": {"cmd/cavitybatch"},
}

// mayRun are the packages that may start goroutines.
var mayRun = []string{"sim/run", "ui/live"}

const houseName = "cavitywright"

func floorOf(pkg string) int {
	return slices.IndexFunc(floors, func(f []string) bool { return slices.Contains(f, pkg) })
}

// TestHouse walks every Go file of the module that is not a test and holds it
// to the order of the packages, to the imports that have one place, and to the
// places where goroutines may start.
func TestHouse(t *testing.T) {
	root, err := filepath.Abs("../..")
	if err != nil {
		t.Fatal(err)
	}
	files := 0
	err = filepath.WalkDir(root, func(path string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		if d.IsDir() && strings.HasPrefix(d.Name(), ".") && path != root {
			return filepath.SkipDir
		}
		if d.IsDir() || !strings.HasSuffix(path, ".go") || strings.HasSuffix(path, "_test.go") {
			return nil
		}
		files++
		rel, err := filepath.Rel(root, path)
		if err != nil {
			return err
		}
		holdFile(t, filepath.ToSlash(rel), path)
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	if files < 50 {
		t.Fatalf("only %d files found: the walk does not reach the module", files)
	}
}

func holdFile(t *testing.T, rel, path string) {
	pkg := filepath.ToSlash(filepath.Dir(rel))
	floor := floorOf(pkg)
	if floor < 0 {
		t.Errorf("%s: package %s has no place in the list", rel, pkg)
		return
	}
	f, err := parser.ParseFile(token.NewFileSet(), path, nil, parser.SkipObjectResolution)
	if err != nil {
		t.Error(err)
		return
	}
	for _, imp := range f.Imports {
		name, err := strconv.Unquote(imp.Path.Value)
		if err != nil {
			t.Error(err)
			continue
		}
		if only, ok := apart[name]; ok && !slices.Contains(only, pkg) {
			t.Errorf("%s imports %s, which only %v may", rel, name, only)
		}
		if strings.HasPrefix(name, "fyne.io/") && !strings.HasPrefix(pkg, "ui/pane") && !strings.HasPrefix(pkg, "ui/window") && pkg != "cmd/cavitywright" {
			t.Errorf("%s imports the window toolkit", rel)
		}
		own, ok := strings.CutPrefix(name, houseName+"/")
		if !ok {
			continue
		}
		if at := floorOf(own); at < 0 || at >= floor {
			t.Errorf("%s imports %s, which does not stand above it", rel, own)
		}
		if strings.HasPrefix(pkg, "render") && !strings.HasPrefix(own, "render") && own != "sim/figure" && own != "assets" {
			t.Errorf("%s: drawing knows figures only, not %s", rel, own)
		}
	}
	ast.Inspect(f, func(n ast.Node) bool {
		if _, ok := n.(*ast.GoStmt); ok && !slices.Contains(mayRun, pkg) {
			t.Errorf("%s starts a goroutine", rel)
		}
		return true
	})
}

// TestTopLevel holds the folder of the module to the agreed names.
func TestTopLevel(t *testing.T) {
	agreed := []string{"cmd", "ui", "table", "sim", "render", "assets", "testdata", "go.mod", "go.sum", "README.md", "DEVELOPERS.md", "FyneApp.toml"}
	entries, err := os.ReadDir("../..")
	if err != nil {
		t.Fatal(err)
	}
	for _, e := range entries {
		if !strings.HasPrefix(e.Name(), ".") && !slices.Contains(agreed, e.Name()) {
			t.Errorf("%s stands at the top level", e.Name())
		}
	}
}
