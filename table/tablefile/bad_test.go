package tablefile

import (
	"bytes"
	"errors"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"testing/iotest"
	"time"

	"cavitywright/table"
	"cavitywright/table/curve"
	"cavitywright/table/shape"
	"cavitywright/table/wall"

	"gonum.org/v1/gonum/spatial/r2"
)

// is reports whether err is of the type T, for the tables below.
func is[T error](err error) bool {
	var e T
	return errors.As(err, &e)
}

// refusals are the files in testdata/tablefile/bad with the sentence that each
// is refused with.
var refusals = []struct {
	file string
	typ  func(error) bool
	says string
}{
	{"empty", is[*NotTable], `The file is empty; copy it here again, or open another.`},
	{"picture", is[*NotTable], `This is no table file: it begins with "�" at line 1, column 1, where a { belongs; open a file that ends in .cavity.json.`},
	{"list", is[*NotTable], `This is no table file: it begins with "[" at line 2, column 3, where a { belongs; open a file that ends in .cavity.json.`},
	{"other-json", is[*NotTable], `The file is JSON, but no table file: it lacks "format": "cavity"; open a file that ends in .cavity.json.`},
	{"truncated", is[*NotTable], `The file breaks off in items[0].parameters.radius, at line 11, column 18; copy it here again, or save the table anew.`},
	{"comma", is[*NotTable], `Line 5, column 37, in items[0], is not valid JSON: invalid character ',' at start of value; mend it there, or save the table anew.`},
	{"two-tables", is[*NotTable], `The file goes on after its last }, at line 4, column 2; take out what follows.`},
	{"later", is[*LaterVersion], `The file is of version 2, but this program reads versions up to 1; open it with a newer one, or ask for the table in version 1.`},
	{"version-none", is[*BadValue], `the file lacks "version" (line 1, column 1); write it in.`},
	{"version-half", is[*BadValue], `version is 1.5 (line 2, column 34); write 1.`},
	{"unknown-key", is[*UnknownKey], `There is no key "colour" in items[0] (line 7, column 7); take it out, or use role, shape, at, angle, scale, parameters, nodes or symmetry.`},
	{"key-case", is[*UnknownKey], `There is no key "Name" in the file (line 4, column 3); take it out, or use format, version, name, notes, unit, bare, items, coats or study.`},
	{"duplicate", is[*BadValue], `items[0].parameters.radius stands twice (line 8, column 35); take one of the two out.`},
	{"duplicate-version", is[*BadValue], `version stands twice (line 4, column 3); take one of the two out.`},
	{"nan", is[*BadValue], `items[0].parameters.radius is NaN (line 7, column 32); give a number.`},
	{"infinity", is[*BadValue], `items[0].at[1] is -Infinity (line 7, column 17); give a number.`},
	{"nan-text", is[*BadValue], `items[0].parameters.radius is "NaN" (line 7, column 32); give a number.`},
	{"too-great", is[*BadValue], `items[0].angle is 1e999 (line 7, column 16); give a number.`},
	{"negative-radius", is[*BadValue], `items[0].parameters.radius is -2 (line 7, column 32); give a number from 0.000001 to 1000000 mm.`},
	{"scale-zero", is[*BadValue], `items[0].scale is 0 (line 7, column 16); give a number above 0.`},
	{"half-post", is[*BadValue], `items[0].parameters.count is 2.5 (line 6, column 112); give a whole number from 1 to 20000.`},
	{"wrong-type", is[*BadValue], `items is a record in { } (line 5, column 12); write the items in [ ].`},
	{"null-name", is[*BadValue], `name is null (line 4, column 11); write it in quotation marks.`},
	{"point-of-three", is[*BadValue], `items[0].at[2] is one too many, as there may be 2 numbers (line 7, column 20); leave some out.`},
	{"point-of-one", is[*BadValue], `items[0].at has 1 of 2 numbers (line 7, column 13); give 2 in [ ].`},
	{"unknown-unit", is[*BadValue], `unit is "inch" (line 4, column 11); write "m", "cm", "mm", "um" or "nm".`},
	{"unknown-role", is[*BadValue], `items[0].role is "post" (line 6, column 15); write "wall" or "obstacle".`},
	{"unknown-shape", is[*BadValue], `items[0].shape is "banana" (line 5, column 31); write ` + either(quotedAll(shapeWords())) + `.`},
	{"unknown-law", is[*BadValue], `coats[0].law is "hole" (line 8, column 60); write "mirror", "lossy", "opening", "dielectric" or "rough".`},
	{"unknown-parameter", is[*BadValue], `items[0].parameters.length is no parameter of the stadium (line 6, column 81); take it out, or use half-length or radius.`},
	{"missing-parameter", is[*BadValue], `items[0].parameters lacks the parameter "half-length" of the stadium (line 6, column 70); give a number from 0.000001 to 1000000 mm.`},
	{"law-parameter", is[*BadValue], `coats[0].index is no parameter of the opening law (line 8, column 80); take it out.`},
	{"no-shape", is[*BadValue], `items[1] lacks "shape" (line 7, column 5); write it in.`},
	{"idle-bulge", is[*BadValue], `items[0].nodes[1].bulge is not used, as the span from here is not bowed (line 8, column 7); take it out, or change the span.`},
	{"idle-fillet", is[*BadValue], `items[0].nodes[1].fillet is not used, as the joint is no corner (line 8, column 7); take it out, or change the span.`},
	{"idle-ratio", is[*BadValue], `items[0].nodes[1].ratio is not used, as the span from here is not elliptic (line 8, column 7); take it out, or change the span.`},
	{"fillet-of-nothing", is[*BadValue], `items[0].nodes[1].fillet is -1 (line 8, column 39); give a number from 0 to 1000000000.`},
	{"fillet-too-large", is[*table.Fault], `The free wall cannot be built: the fillet at node 2 does not fit between its neighbours; give it a smaller radius.`},
	{"ratio-of-a-spike", is[*BadValue], `items[0].nodes[1].ratio is 1e-3 (line 8, column 65); give a number from 0.01 to 100.`},
	{"symmetry-of-disc", is[*BadValue], `items[0].symmetry does not belong here, as only a freeform keeps one (line 6, column 5); take it out.`},
	{"symmetry-of-nothing", is[*BadValue], `items[0].symmetry asks for nothing (line 11, column 18); write in "fold", "mirror" or both.`},
	{"symmetry-not-kept", is[*BadValue], `items[0].symmetry is not that of the nodes (line 11, column 18); take it out, or set the nodes right.`},
	{"nodes-of-disc", is[*BadValue], `items[0].nodes does not belong here, as only a freeform has nodes (line 6, column 5); take it out.`},
	{"launch-without", is[*BadValue], `study.launches[0] lacks "spread" (line 8, column 5); write it in.`},
	{"launch-surplus", is[*BadValue], `study.launches[0].region does not matter to a launch of this pattern and origin (line 8, column 71); take it out.`},
	{"region", is[*BadValue], `study.launches[0].region has the number 1.5 (line 8, column 47); give [s0, s1, p0, p1] with s from 0 to 1 and p from -1 to 1.`},
	{"no-items", is[*table.Fault], `Nothing is drawn yet; place a shape or draw a wall.`},
	{"self-crossing", is[*table.Fault], `The free wall crosses itself at (0.2, 0.2) mm; drag the nodes there apart, or undo.`},
	{"obstacle-through-wall", is[*table.Fault], `The disc (item 1) and the disc (item 2) meet at (0.970833, 0.239755) mm; move one of them away.`},
	{"coat-nowhere", is[*table.Fault], `Coat 1 lies on side 5 of the disc, which has no such side.`},
	{"launch-off-wall", is[*table.Fault], `Launch 1 starts at s/L = 1, p = 0; s/L must lie in [0, 1) and p between -1 and 1.`},
}

func TestRefusals(t *testing.T) {
	for _, c := range refusals {
		t.Run(c.file, func(t *testing.T) {
			b, err := os.ReadFile(filepath.Join(samples, "bad", c.file+".json"))
			if err != nil {
				t.Fatal(err)
			}
			d, err := Read(bytes.NewReader(b))
			if err == nil {
				t.Fatal("it is read")
			}
			if err.Error() != c.says || !c.typ(err) {
				t.Errorf("%T says\n  %s\nnot\n  %s", err, err, c.says)
			}
			if d.Items != nil || d.Name != "" {
				t.Error("a part of the table is handed out")
			}
		})
	}
	files, _ := filepath.Glob(filepath.Join(samples, "bad", "*.json"))
	if len(files) != len(refusals) {
		t.Errorf("%d bad files for %d refusals", len(files), len(refusals))
	}
}

// spool is a reader of head, then filler as often as it takes, then tail, of
// size bytes or a little more in all.
func spool(head, filler, tail string, size int) []byte {
	return []byte(head + strings.Repeat(filler, (size-len(head)-len(tail))/len(filler)+1) + tail)
}

// mostWait is the time within which any file is read or refused. It is far
// above what it takes (under a second), as the machine may be busy.
const mostWait = 15 * time.Second

func TestLargeFiles(t *testing.T) {
	if raced {
		t.Skip("times are not those of the program")
	}
	const fifty = 50 << 20
	const head = `{"format":"cavity","version":1,"unit":"mm",`
	const disc = `{"role":"obstacle","shape":"disc","at":[0,0],"parameters":{"radius":1}},`
	keys := []byte("{")
	for i := 0; len(keys) < fifty; i++ {
		keys = fmt.Appendf(keys, `"key%d":%d,`, i, i)
	}
	keys = append(keys, head[1:]+`"items":[]}`...)
	for _, c := range []struct {
		name string
		src  []byte
		says string
	}{
		{"spaces", spool("", " ", "", fifty), `The file is empty; copy it here again, or open another.`},
		{"brackets", spool("", "[", "", fifty), `This is no table file: it begins with "["`},
		{"nested", spool(`{"a":`, "[", "", fifty), `is not valid JSON: exceeded max depth`},
		{"JSON", spool(`{"rows":[`, `{"a":1,"b":[true,null,"x"]},`, "0]}", fifty), `The file is JSON, but no table file`},
		{"keys", keys, `There is no key "key0" in the file (line 1, column 2)`},
		{"notes", spool(head+`"notes":"`, "long ", `"}`, fifty), `notes is 524`},
		{"items", spool(head+`"items":[`, disc, disc[:len(disc)-1]+"]}", fifty), `items[5000] is one too many, as there may be 5000 items (line 1, column `},
		{"wrong place", spool(head+`"name":[`, `{"a":1},`, `0]}`, fifty), `name is a list in [ ] (line 1, column `},
		{"larger", spool("{", " ", "}", mostBytes+1), `The file is larger than 64 MiB, and no table file is; open another.`},
	} {
		start := time.Now()
		_, err := Read(bytes.NewReader(c.src))
		took := time.Since(start)
		if err == nil || !strings.Contains(err.Error(), c.says) {
			t.Errorf("%s: %v", c.name, err)
		}
		if took > mostWait {
			t.Errorf("%s: took %v", c.name, took)
		}
		t.Logf("%s: %v", c.name, took.Round(time.Millisecond))
	}
}

// Handles of no length, and nearly none, are answered as soon as others: at
// these the wall all but stops, and its length is hard to measure.
func TestShortHandles(t *testing.T) {
	for _, out := range []string{``, `"out": [1e-9, 2e-9], `, `"out": [1e-4, 0], `, `"out": [1e-30, 0], `} {
		src := `{"format": "cavity", "version": 1, "unit": "mm", "items": [{"role": "wall", "shape": "freeform", "nodes": [
			{"at": [-25, 0.75], ` + out + `"span": "curved"},
			{"at": [0, 1.5], "joint": "smooth", "in": [0.5, 0], "out": [-0.7, 0], "span": "curved"},
			{"at": [-2, 1], "in": [0.25, 0.5]}]}]}`
		start := time.Now()
		_, err := Read(strings.NewReader(src))
		if took := time.Since(start); took > mostWait {
			t.Errorf("with %q it took %v", out, took)
		}
		if err != nil && !is[*table.Fault](err) {
			t.Errorf("%q: %v", out, err)
		}
		t.Logf("%q: %v, %v", out, err, time.Since(start))
	}
}

// A reader that never ends is not read to its end.
func TestEndless(t *testing.T) {
	_, err := Read(endless{})
	if !is[*NotTable](err) {
		t.Error(err)
	}
}

type endless struct{}

func (endless) Read(p []byte) (int, error) {
	for i := range p {
		p[i] = ' '
	}
	return len(p), nil
}

func TestReaderFails(t *testing.T) {
	gone := errors.New("the disk was taken out")
	_, err := Read(iotest.ErrReader(gone))
	if !errors.Is(err, gone) {
		t.Error(err)
	}
}

// Of any file that breaks off anywhere, nothing is read.
func TestTruncatedAnywhere(t *testing.T) {
	for name, d := range features(t) {
		b := written(t, d)
		for n := range len(b) - 2 { // up to the last brace
			if _, err := Read(bytes.NewReader(b[:n])); !is[*NotTable](err) {
				t.Fatalf("%s, %d of %d bytes: %v", name, n, len(b), err)
			}
		}
	}
}

type alien struct{}

func (alien) Kind() string                                     { return "alien" }
func (alien) Loops() ([]shape.Loop, error)                     { return []shape.Loop{{Curves: []curve.Curve{}}}, nil }
func (alien) Handles() []shape.Handle                          { return nil }
func (a alien) Moved(int, r2.Vec) shape.Shape                  { return a }
func (alien) Scatter(wall.Incidence, float64) (o wall.Outcome) { return o }
func (alien) Name() string                                     { return "alien" }
func (alien) Values() []float64                                { return []float64{1} }

// What Read would refuse is not written, and the sentence names no line.
func TestWriteRefuses(t *testing.T) {
	disc := figure(t, "disc", nil)
	for _, c := range []struct {
		says string
		mar  func(d *table.Design)
	}{
		{`items[0].at[0] is NaN; give a number.`, func(d *table.Design) { d.Items[0].Place.Shift.X = math.NaN() }},
		{`items[0].at[1] is -Inf; give a number.`, func(d *table.Design) { d.Items[0].Place.Shift.Y = math.Inf(-1) }},
		{`items[0].scale is -1; give a number above 0.`, func(d *table.Design) { d.Items[0].Place.Scale = -1 }},
		{`unit is ""; write "m", "cm", "mm", "um" or "nm".`, func(d *table.Design) { d.Unit = "" }},
		{`items holds an item without a shape; take it out.`, func(d *table.Design) { d.Items[0].Shape = nil }},
		{`items holds the shape "alien", which no file can hold; take it out.`, func(d *table.Design) { d.Items[0].Shape = alien{} }},
		{`bare.law is "alien"; write "mirror", "lossy", "opening", "dielectric" or "rough".`, func(d *table.Design) { d.Bare = alien{} }},
		{`bare.reflectivity is 2; give a number from 0 to 1.`, func(d *table.Design) { d.Bare = wall.Lossy{Reflectivity: 2} }},
		{`coats[0] lacks "law"; write it in.`, func(d *table.Design) { d.Coats = []table.Coat{{To: 1}} }},
		{`study.bounces is -1; give a whole number from 0 to 1000000000.`, func(d *table.Design) { d.Study.Bounces = -1 }},
		{`study.display.sense is "unknown"; write "counter-clockwise" or "clockwise".`, func(d *table.Design) { d.Study.Display.Sense = 9 }},
	} {
		d := onlyWall(disc)
		c.mar(&d)
		var b bytes.Buffer
		err := Write(&b, d)
		if err == nil || err.Error() != c.says {
			t.Errorf("got  %v\nwant %s", err, c.says)
		}
		if b.Len() > 0 {
			t.Errorf("%s: %d bytes were written", c.says, b.Len())
		}
	}
}

// The greatest bulge of the format is that of the shape.
func TestMostBulge(t *testing.T) {
	for _, b := range []float64{mostBulge, 2 * mostBulge} {
		f := shape.NewFreeform([]shape.Node{{Span: shape.Bowed, Bulge: b}, {At: r2.Vec{X: 1}}})
		if got := f.Nodes()[0].Bulge; got != mostBulge {
			t.Errorf("a bulge of %v is held to %v", b, got)
		}
	}
}

// A law's parameters stand beside the keys of a coat, so they share no name.
func TestLawParametersApart(t *testing.T) {
	for _, name := range lawParameters() {
		for _, key := range []string{"item", "side", "from", "to", "law"} {
			if name == key {
				t.Errorf("a law has a parameter %q", name)
			}
		}
	}
}
