package export

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"errors"
	"image/png"
	"math"
	"math/rand/v2"
	"strconv"
	"strings"
	"testing"

	"cavitywright/render"
	"cavitywright/sim/figure"
)

func dots() figure.Dots {
	return figure.Dots{
		X: figure.Axis{Label: "s", Unit: "mm", Lo: 0, Hi: 3}, Y: figure.Axis{Label: "p = sin χ", Lo: -1, Hi: 1},
		Strip: true, StripHi: 3, Caption: []string{"Two orbits, s in mm."},
		Sets: []figure.DotSet{{Hue: -1, X: []float64{0.1, 1.0 / 3}, Y: []float64{0.5, -0.25}}, {Hue: 0, X: []float64{2}, Y: []float64{math.NaN()}}},
	}
}

func series() figure.Series {
	return figure.Series{X: figure.Axis{Label: "t", Unit: "mm", Hi: 2}, Y: figure.Axis{Label: "P", Hi: 1},
		Curves: []figure.Curve{{Name: "one, two", X: []float64{0, 1, 2}, Y: []float64{1, 0.5, 0.25}, Err: []float64{0.1, 0.1}}}}
}

func paths() figure.Paths {
	return figure.Paths{Unit: "um", Lines: []figure.Line{
		{Role: figure.Wall, Closed: true, X: []float64{0, 1, 0}, Y: []float64{0, 0, 1}, At: []float64{0, 0.3, 0.7}},
		{Role: figure.Ray, X: []float64{0.1, 0.5}, Y: []float64{0.1, 0.5}}}}
}

func scalars() figure.Scalars {
	return figure.Scalars{Rows: []figure.Scalar{
		{Name: "area", Value: 1.0 / 3, Unit: "mm2"},
		{Name: "escape-rate", Value: 3e-7, StdErr: 1e-9, Unit: "1/mm", Bounces: 1 << 40, Seed: math.MaxUint64, Note: "a \"note\", with commas"}}}
}

func written(t *testing.T, format Format, f figure.Figure, o Options) []byte {
	t.Helper()
	var b bytes.Buffer
	if err := Write(&b, format, f, o); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

func TestFormatOf(t *testing.T) {
	for name, want := range map[string]Format{"a.png": PNG, "b.c.SVG": SVG, "/x/y.pdf": PDF, "d.csv": CSV, "e.Json": JSON} {
		if got, err := FormatOf(name); err != nil || got != want {
			t.Errorf("%s: %v, %v", name, got, err)
		}
	}
	for _, name := range []string{"a", "a.", "a.jpeg", "png", ""} {
		var unknown *UnknownEnding
		if _, err := FormatOf(name); !errors.As(err, &unknown) || unknown.Name != name {
			t.Errorf("%q: %v", name, err)
		}
	}
}

// tables are table files from nothing to what nobody has.
func tables() map[string][]byte {
	big := make([]byte, 5<<20)
	r := rand.New(rand.NewPCG(5, 5))
	for i := range big {
		big[i] = byte(r.Uint32())
	}
	return map[string][]byte{"empty": {}, "small": []byte(`{"name": "Larkmoor ≤ 7", "unit": "mm"}` + "\r\n"), "5 MB": big}
}

func TestPNGCarriesTheTable(t *testing.T) {
	for name, table := range tables() {
		data := written(t, PNG, dots(), Options{WidthMM: 30, HeightMM: 20, DPI: 100, Table: table})
		got, err := TableInPNG(bytes.NewReader(data))
		if err != nil || !bytes.Equal(got, table) {
			t.Errorf("%s: %d bytes came back of %d, %v", name, len(got), len(table), err)
		}
		img, err := png.Decode(bytes.NewReader(data))
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		if s := img.Bounds().Size(); s.X != 118 || s.Y != 79 {
			t.Errorf("30 mm by 20 mm at 100 dpi is %v", s)
		}
	}
}

func TestPNGTellsItsResolution(t *testing.T) {
	data := written(t, PNG, dots(), Options{WidthMM: 30, HeightMM: 20, DPI: 300})
	at := bytes.Index(data, []byte("pHYs"))
	// 300 dpi is 11811 pixels to the metre (300 / 0.0254).
	want := []byte{0, 0, 0x2e, 0x23, 0, 0, 0x2e, 0x23, 1}
	if at < 0 || !bytes.Equal(data[at+4:at+13], want) {
		t.Errorf("pHYs is %v", data[at+4:at+13])
	}
	if !bytes.Contains(data, []byte("iTXtDescription\x00")) {
		t.Error("the caption is not inside")
	}
}

func TestNoTableInPNG(t *testing.T) {
	bare := written(t, PNG, dots(), Options{WidthMM: 30, HeightMM: 20, DPI: 100})
	full := written(t, PNG, dots(), Options{WidthMM: 30, HeightMM: 20, DPI: 100, Table: []byte(`{"a": 1}`)})
	at := bytes.Index(full, []byte("cavity.json")) // in the data of its chunk
	wrong := bytes.Clone(full)
	wrong[at+20] ^= 1
	huge := append([]byte(nil), full[:33]...)
	huge = append(huge, 0xff, 0xff, 0xff, 0xff, 'i', 'T', 'X', 't')
	for _, c := range []struct {
		name string
		data []byte
		want error
	}{
		{"nothing", nil, ErrNotPNG},
		{"text", []byte("%PDF-1.3 and so on and on"), ErrNotPNG},
		{"no table", bare, ErrNoTable},
		{"one bit wrong", wrong, ErrDamaged},
		{"a chunk without end", huge, ErrTooLarge},
	} {
		if table, err := TableInPNG(bytes.NewReader(c.data)); !errors.Is(err, c.want) || table != nil {
			t.Errorf("%s: %v, want %v", c.name, err, c.want)
		}
	}
	// Broken off anywhere: never a table that is not whole, never a panic.
	for n := range len(full) {
		table, err := TableInPNG(bytes.NewReader(full[:n]))
		end := at + 4 - 8 // of what comes before the table's chunk
		switch {
		case n < 8 && !errors.Is(err, ErrNotPNG), n >= 8 && n < end && !errors.Is(err, ErrTruncated):
			t.Fatalf("broken off at %d: %v", n, err)
		case err == nil && string(table) != `{"a": 1}`:
			t.Fatalf("broken off at %d: table %q", n, table)
		}
	}
	for n := range len(bare) - 12 {
		if _, err := TableInPNG(bytes.NewReader(bare[:n])); err == nil || n >= 8 && !errors.Is(err, ErrTruncated) {
			t.Fatalf("without a table, broken off at %d: %v", n, err)
		}
	}
}

// A small file that would unpack to more than the bound is refused.
func TestBombIsRefused(t *testing.T) {
	var b bytes.Buffer
	b.WriteString(signature)
	appendChunk(&b, "iTXt", international(tableKey, make([]byte, MostCarried+1)))
	if b.Len() > 1<<20 {
		t.Fatalf("the packed zeros take %d bytes", b.Len())
	}
	if _, err := TableInPNG(&b); !errors.Is(err, ErrTooLarge) {
		t.Errorf("%v", err)
	}
}

// Plain text under the keyword, as other programs may rewrite it, is read too.
func TestPlainTextChunk(t *testing.T) {
	var b bytes.Buffer
	b.WriteString(signature)
	appendChunk(&b, "iTXt", []byte("Comment\x00\x00\x00\x00\x00hello"))
	appendChunk(&b, "iTXt", []byte(tableKey+"\x00\x00\x00en\x00key\x00{}"))
	if table, err := TableInPNG(&b); err != nil || string(table) != "{}" {
		t.Errorf("%q, %v", table, err)
	}
}

func FuzzTableInPNG(f *testing.F) {
	var b bytes.Buffer
	if err := Write(&b, PNG, dots(), Options{WidthMM: 10, HeightMM: 10, DPI: 20, Table: []byte("{}")}); err != nil {
		f.Fatal(err)
	}
	f.Add(b.Bytes())
	f.Add([]byte(signature + "\x00\x00\x00\x02iTXtxx"))
	f.Fuzz(func(t *testing.T, data []byte) {
		table, err := TableInPNG(bytes.NewReader(data))
		if (err == nil) == (table == nil) && err != nil {
			t.Fatal("both a table and an error")
		}
	})
}

func TestSVGCarriesTheTable(t *testing.T) {
	for name, table := range tables() {
		data := written(t, SVG, dots(), Options{Table: table})
		got, err := TableInSVG(bytes.NewReader(data))
		if err != nil || !bytes.Equal(got, table) {
			t.Errorf("%s: %d bytes came back of %d, %v", name, len(got), len(table), err)
		}
	}
	full := written(t, SVG, dots(), Options{Table: []byte(`{"a": 1}`)})
	cut := bytes.Index(full, []byte("</t:table>"))
	for _, c := range []struct {
		name string
		data []byte
		want error
	}{
		{"nothing", nil, ErrNotSVG},
		{"text", []byte("hello"), ErrNotSVG},
		{"a web page", []byte("<html><svg/></html>"), ErrNotSVG},
		{"no table", written(t, SVG, dots(), Options{}), ErrNoTable},
		{"broken off", full[:cut-3], ErrTruncated},
		{"no base 64", bytes.Replace(full, []byte("</t:table>"), []byte("!</t:table>"), 1), ErrDamaged},
		{"an element inside", bytes.Replace(full, []byte("</t:table>"), []byte("<b/></t:table>"), 1), ErrDamaged},
	} {
		if table, err := TableInSVG(bytes.NewReader(c.data)); !errors.Is(err, c.want) || table != nil {
			t.Errorf("%s: %v, want %v", c.name, err, c.want)
		}
	}
}

func TestPagesOfEveryFigure(t *testing.T) {
	for _, f := range []figure.Figure{dots(), series(), paths(), scalars(), figure.Dots{}, figure.Paths{}, figure.Scalars{}} {
		for _, format := range []Format{PNG, SVG, PDF} {
			o := Options{WidthMM: 85, DPI: 50}
			a, b := written(t, format, f, o), written(t, format, f, o)
			if len(a) < 100 || !bytes.Equal(a, b) {
				t.Errorf("%v of %T: %d bytes, the same again: %v", format, f, len(a), bytes.Equal(a, b))
			}
		}
	}
}

func TestBadSizes(t *testing.T) {
	for _, o := range []Options{{WidthMM: 1}, {WidthMM: math.NaN()}, {HeightMM: 1e9}, {DPI: 1e6}, {WidthMM: 1900, HeightMM: 1900, DPI: 2400}, {WidthMM: -3}} {
		var bad *BadSize
		if err := Write(new(bytes.Buffer), PNG, dots(), o); !errors.As(err, &bad) {
			t.Errorf("%+v: %v", o, err)
		}
	}
}

// records reads a CSV as other programs do: comments apart.
func records(t *testing.T, data []byte) (comments []string, rows [][]string) {
	t.Helper()
	for line := range strings.Lines(string(data)) {
		if strings.HasPrefix(line, "#") {
			comments = append(comments, strings.TrimSpace(line[1:]))
		}
	}
	r := csv.NewReader(bytes.NewReader(data))
	r.Comment = '#'
	rows, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	return comments, rows
}

func TestCSVOfDots(t *testing.T) {
	f := dots()
	comments, rows := records(t, written(t, CSV, f, Options{Header: []string{"counter-clockwise, p = sin chi", "seed 42", "a line\nbreak"}}))
	for _, want := range []string{"seed 42", "a line break", "s: s, mm", "p: p = sin χ, pure number", "Two orbits, s in mm."} {
		if !strings.Contains(strings.Join(comments, "\n"), want) {
			t.Errorf("%q is not among the comments %q", want, comments)
		}
	}
	if got := strings.Join(rows[0], ","); got != "orbit,s,p" {
		t.Errorf("columns %s", got)
	}
	k := 1
	for n, set := range f.Sets {
		for i := range set.X {
			x, _ := strconv.ParseFloat(rows[k][1], 64)
			if rows[k][0] != strconv.Itoa(n+1) || x != set.X[i] {
				t.Errorf("row %v, want orbit %d, s = %g to the last digit", rows[k], n+1, set.X[i])
			}
			k++
		}
	}
	if rows[3][2] != "" {
		t.Errorf("a value that is no number is written %q", rows[3][2])
	}
}

func TestCSVOfTheRest(t *testing.T) {
	_, rows := records(t, written(t, CSV, series(), Options{}))
	if len(rows) != 4 || rows[1][0] != "one, two" || rows[2][3] != "0.1" || rows[3][3] != "" {
		t.Errorf("series %v", rows)
	}
	_, rows = records(t, written(t, CSV, paths(), Options{}))
	if len(rows) != 1+4+2 || strings.Join(rows[4], " ") != "1 wall 0 0" || strings.Join(rows[6], " ") != "2 ray 0.5 0.5" {
		t.Errorf("paths %v", rows)
	}
	_, rows = records(t, written(t, CSV, scalars(), Options{}))
	if len(rows) != 3 || rows[2][5] != "18446744073709551615" || rows[2][6] != `a "note", with commas` {
		t.Errorf("scalars %v", rows)
	}
}

func TestJSONKeepsEveryDigit(t *testing.T) {
	var back struct{ Readings []figure.Scalar }
	data := written(t, JSON, scalars(), Options{})
	if err := json.Unmarshal(data, &back); err != nil {
		t.Fatal(err)
	}
	for i, want := range scalars().Rows {
		if back.Readings[i] != want {
			t.Errorf("%+v came back as %+v", want, back.Readings[i])
		}
	}
	for _, key := range []string{`"name"`, `"value"`, `"stderr"`, `"unit"`, `"bounces"`, `"seed"`, `"note"`} {
		if !bytes.Contains(data, []byte(key)) {
			t.Errorf("no key %s", key)
		}
	}
	var unfit *Unfit
	if err := Write(new(bytes.Buffer), JSON, dots(), Options{}); !errors.As(err, &unfit) {
		t.Errorf("JSON of dots: %v", err)
	}
	bad := figure.Scalars{Rows: []figure.Scalar{{Name: "area", Value: math.NaN()}}}
	if err := Write(new(bytes.Buffer), JSON, bad, Options{}); !errors.Is(err, ErrNoValue) || !strings.Contains(err.Error(), "area") {
		t.Errorf("JSON of no number: %v", err)
	}
	if got := string(written(t, JSON, figure.Scalars{}, Options{})); !strings.Contains(got, `"readings": []`) {
		t.Errorf("no readings are written %s", got)
	}
}

// failing is a writer whose device is full after some bytes.
type failing struct{ left int }

var errFull = errors.New("no space")

func (f *failing) Write(p []byte) (int, error) {
	if len(p) > f.left {
		return f.left, errFull
	}
	f.left -= len(p)
	return len(p), nil
}

func TestWriteErrorsComeThrough(t *testing.T) {
	for _, format := range []Format{PNG, SVG, PDF, CSV, JSON} {
		for _, room := range []int{0, 40} {
			if err := Write(&failing{room}, format, scalars(), Options{DPI: 50, Look: render.Paper(1)}); !errors.Is(err, errFull) {
				t.Errorf("%v, room for %d bytes: %v", format, room, err)
			}
		}
	}
}

// A map is the same cell for cell in every picture: its corner cells and the
// blank one stand where they belong, and the numbers are in the CSV.
func TestMap(t *testing.T) {
	f := figure.Grid{
		X: figure.Axis{Label: "s", Unit: "mm", Hi: 3}, Y: figure.Axis{Label: "p = sin χ", Lo: -1, Hi: 1},
		Value: figure.Axis{Label: "stretching", Unit: "1/bounce", Hi: 1}, Columns: 3, Rows: 2,
		Strip: true, StripHi: 3, Values: []float64{0, 0.5, 1, math.NaN(), 0.25, 0.75}, Caption: []string{"A map."},
	}
	o := Options{WidthMM: 85, HeightMM: 70, DPI: 200, Look: render.Paper(1)}
	img, err := png.Decode(bytes.NewReader(written(t, PNG, f, o)))
	if err != nil {
		t.Fatal(err)
	}
	plot, _ := render.PlotOf(f, render.NewBox(0, 0, 85, 70), o.Look)
	ramp := render.NewRamp(o.Look)
	for k, v := range f.Values {
		x := plot.ToX((float64(k%3) + 0.5))
		y := plot.ToY(float64(k/3) - 0.5)
		r, g, b, _ := img.At(int(x/25.4*200), int(y/25.4*200)).RGBA()
		want := o.Look.Paper
		if !math.IsNaN(v) {
			want = ramp.At(v)
		}
		if uint8(r>>8) != want.R || uint8(g>>8) != want.G || uint8(b>>8) != want.B {
			t.Errorf("cell %d is %x %x %x, want %v", k, r>>8, g>>8, b>>8, want)
		}
	}
	if svg := string(written(t, SVG, f, o)); !strings.Contains(svg, "data:image/png;base64,") || !strings.Contains(svg, "stretching (1/bounce)") {
		t.Error("the drawing lacks its map or the name of its scale")
	}
	if a, b := written(t, PDF, f, o), written(t, PDF, f, o); !bytes.Equal(a, b) || !bytes.Contains(a, []byte("/Subtype /Image")) {
		t.Error("the document lacks its map, or is another one each time")
	}
	text := string(written(t, CSV, f, o))
	if !strings.Contains(text, "s,p,value\n0.5,-0.5,0\n1.5,-0.5,0.5\n") || !strings.Contains(text, "\n0.5,0.5,\n") {
		t.Errorf("the numbers are %q", text)
	}
}
