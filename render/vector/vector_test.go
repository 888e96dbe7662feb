package vector

import (
	"bytes"
	"encoding/xml"
	"errors"
	"image/color"
	"io"
	"math"
	"os/exec"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"cavitywright/render"
	"cavitywright/sim/figure"
)

// portrait is a small figure with all that a page can hold.
func portrait() figure.Dots {
	f := figure.Dots{
		X:     figure.Axis{Label: "s", Unit: "mm", Lo: 0, Hi: 10, Marks: []figure.Mark{{At: 4}}},
		Y:     figure.Axis{Label: "p = sin χ", Lo: -1, Hi: 1, Marks: []figure.Mark{{At: 0.3, Kind: figure.Critical, Name: "1/n"}}},
		Strip: true, StripHi: 10, Caption: []string{"Larkmoor <& plate>, 10 mm around"},
	}
	for hue := -1; hue < 2; hue++ {
		s := figure.DotSet{Hue: hue}
		for i := range 300 {
			s.X = append(s.X, 10*math.Mod(float64(i)*0.618, 1))
			s.Y = append(s.Y, 0.9*math.Sin(float64(i)+float64(hue)))
		}
		f.Sets = append(f.Sets, s)
	}
	return f
}

func svgOf(t *testing.T) []byte {
	t.Helper()
	c := NewSVG(85, 60)
	render.Draw(c, portrait(), render.NewBox(0, 0, 85, 60), render.Paper(1))
	var b bytes.Buffer
	if err := c.Write(&b, "caption & all", ""); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

func pdfOf(t *testing.T) []byte {
	t.Helper()
	c := NewPDF(85, 60)
	render.Draw(c, portrait(), render.NewBox(0, 0, 85, 60), render.Paper(1))
	var b bytes.Buffer
	if err := c.Write(&b, "portrait", "a caption"); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

func TestSVGIsWellFormed(t *testing.T) {
	data := svgOf(t)
	d := xml.NewDecoder(bytes.NewReader(data))
	var texts []string
	depth, dotPaths := 0, 0
	for {
		token, err := d.Token()
		if errors.Is(err, io.EOF) {
			break
		}
		if err != nil {
			t.Fatal(err)
		}
		switch e := token.(type) {
		case xml.StartElement:
			if depth == 0 {
				for _, a := range e.Attr {
					want := map[string]string{"width": "85mm", "height": "60mm", "viewBox": "0 0 85 60"}[a.Name.Local]
					if want != "" && a.Value != want {
						t.Errorf("%s is %q, want %q", a.Name.Local, a.Value, want)
					}
				}
			}
			depth++
			for _, a := range e.Attr {
				if strings.Contains(a.Value, "NaN") || strings.Contains(a.Value, "Inf") {
					t.Errorf("%s = %q", a.Name.Local, a.Value)
				}
				if a.Name.Local == "d" && strings.Count(a.Value, "h0") > 0 {
					dotPaths++
				}
			}
		case xml.EndElement:
			depth--
		case xml.CharData:
			if s := strings.TrimSpace(string(e)); s != "" {
				texts = append(texts, s)
			}
		}
	}
	all := strings.Join(texts, "\n")
	for _, want := range []string{"s (mm)", "p = sin χ", "−0.5", "1/n", "Larkmoor <& plate>, 10 mm around", "caption & all"} {
		if !strings.Contains(all, want) {
			t.Errorf("%q is not in the drawing", want)
		}
	}
	if dotPaths != 3 {
		t.Errorf("3 sets became %d paths of dots", dotPaths)
	}
}

func TestSameBytesEachTime(t *testing.T) {
	if !bytes.Equal(svgOf(t), svgOf(t)) {
		t.Error("two SVG files of one figure differ")
	}
	first := pdfOf(t)
	for range 4 {
		if !bytes.Equal(first, pdfOf(t)) {
			t.Fatal("two PDF files of one figure differ")
		}
	}
}

// The page of a PDF is as large as asked, and the tail of the file points at
// its own table of objects.
func TestPDFForm(t *testing.T) {
	data := pdfOf(t)
	if !bytes.HasPrefix(data, []byte("%PDF-1.")) || !bytes.HasSuffix(bytes.TrimSpace(data), []byte("%%EOF")) {
		t.Fatalf("begins %q, ends %q", data[:8], data[len(data)-8:])
	}
	m := regexp.MustCompile(`startxref\s+(\d+)`).FindSubmatch(data)
	if m == nil {
		t.Fatal("no startxref")
	}
	if at, _ := strconv.Atoi(string(m[1])); at >= len(data) || !bytes.HasPrefix(data[at:], []byte("xref")) {
		t.Errorf("startxref points at byte %d, not at the table", at)
	}
	box := regexp.MustCompile(`/MediaBox \[0 0 ([0-9.]+) ([0-9.]+)\]`).FindSubmatch(data)
	if box == nil {
		t.Fatal("no MediaBox")
	}
	w, _ := strconv.ParseFloat(string(box[1]), 64)
	h, _ := strconv.ParseFloat(string(box[2]), 64)
	if math.Abs(w-85/25.4*72) > 0.01 || math.Abs(h-60/25.4*72) > 0.01 {
		t.Errorf("the page is %g by %g points", w, h)
	}
}

func TestPDFText(t *testing.T) {
	tool, err := exec.LookPath("pdftotext")
	if err != nil {
		t.Skip("pdftotext is not installed, so the text of the PDF cannot be read back")
	}
	cmd := exec.Command(tool, "-", "-")
	cmd.Stdin = bytes.NewReader(pdfOf(t))
	out, err := cmd.Output()
	if err != nil {
		t.Fatal(err)
	}
	for _, want := range []string{"s (mm)", "p = sin χ", "−0.5", "1/n", "10 mm around"} {
		if !strings.Contains(string(out), want) {
			t.Errorf("%q is not in the text %q", want, out)
		}
	}
}

// A coordinate that is no number breaks a path and nothing else.
func TestStepsLeaveOutNoNumbers(t *testing.T) {
	var p render.Path
	p.MoveTo(0, 0)
	p.LineTo(1, 1)
	p.LineTo(math.NaN(), 0)
	p.LineTo(2, 2)
	p.CubicTo(render.Point{X: 1}, render.Point{X: math.Inf(1)}, render.Point{X: 5, Y: 5})
	p.LineTo(6, 6)
	p.LineTo(7, 7)
	p.Close()
	p.MoveTo(8, 8)
	p.LineTo(9, 9)
	p.Close()
	if got, want := NewSVG(10, 10).steps(p), "M0 0L1 1M2 2M6 6L7 7M8 8L9 9Z"; got != want {
		t.Errorf("%s, want %s", got, want)
	}
	for _, q := range []render.Path{p, render.Segment(render.Point{X: -1e300, Y: 5}, render.Point{X: 1e300, Y: 5})} {
		s, d := NewSVG(10, 10), NewPDF(10, 10)
		for _, c := range []render.Canvas{s, d} {
			c.Stroke(q, render.Pen{Width: 1, Color: color.RGBA{0, 0, 0, 255}})
			c.Fill(q, color.RGBA{0, 0, 0, 255})
			c.Dots(render.Dots{X: []float64{math.NaN(), 1e300}, Y: []float64{1, 1}, Radius: 1})
			c.Text(render.Text{At: render.Point{X: math.NaN()}, Size: 3, String: "x"})
		}
		var b bytes.Buffer
		if err := d.Write(&b, "", ""); err != nil {
			t.Fatal(err)
		}
		if text := s.body.String(); strings.Contains(text, "NaN") || strings.Contains(text, "Inf") || len(text) > 2000 {
			t.Errorf("%s", text)
		}
	}
}

func TestNumbers(t *testing.T) {
	for v, want := range map[float64]string{0: "0", -0.0001: "0", 1.5: "1.5", -2: "-2", 0.1234567: "0.123", 1e-9: "0", 100: "100", 20.5004: "20.5"} {
		if got := string(number(nil, v)); got != want {
			t.Errorf("%g is written %q, want %q", v, got, want)
		}
	}
}
