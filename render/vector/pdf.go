package vector

import (
	"bytes"
	"fmt"
	"image/color"
	"io"
	"time"

	"cavitywright/render"
	"cavitywright/render/letter"

	"codeberg.org/go-pdf/fpdf"
)

// PDF is a render.Canvas that makes a document of one page, with the
// parts of its fonts that it uses embedded.
type PDF struct {
	doc   *fpdf.Fpdf
	page  render.Box
	alpha float64
	tiles int                  // pictures in the document
	fonts map[letter.Font]bool // that are in the document
}

// pointsPerMM is how many of PDF's units, points, there are to a millimetre.
const pointsPerMM = 72 / 25.4

// fontName is how a document calls a font file.
func fontName(f letter.Font) (family, style string) {
	family = [...]string{"text", "text", "signs", "signs"}[f]
	if f.Weight() == letter.Bold {
		style = "B"
	}
	return family, style
}

// NewPDF is an empty page of a size in millimetres.
func NewPDF(widthMM, heightMM float64) *PDF {
	doc := fpdf.NewCustom(&fpdf.InitType{UnitStr: "mm", Size: fpdf.SizeType{Wd: widthMM, Ht: heightMM}})
	// A document that tells its hour is another one each time.
	fixed := time.Date(2000, 1, 1, 0, 0, 0, 0, time.UTC)
	doc.SetCreationDate(fixed)
	doc.SetModificationDate(fixed)
	doc.SetCatalogSort(true)
	doc.SetMargins(0, 0, 0)
	doc.SetAutoPageBreak(false, 0)
	doc.AddPage()
	doc.SetLineJoinStyle("round")
	return &PDF{doc: doc, page: render.NewBox(0, 0, widthMM, heightMM), alpha: 1, fonts: map[letter.Font]bool{}}
}

// Write writes the whole document; the canvas cannot be used afterwards. title
// is the name of the document, about the subject.
func (p *PDF) Write(w io.Writer, title, about string) error {
	p.doc.SetTitle(title, true)
	p.doc.SetSubject(about, true)
	if err := p.doc.Output(w); err != nil {
		return fmt.Errorf("write PDF: %w", err)
	}
	return nil
}

// Fill paints the inside of a path, even-odd.
func (p *PDF) Fill(path render.Path, c color.RGBA) {
	n := p.fade(c)
	p.doc.SetFillColor(int(n.R), int(n.G), int(n.B))
	if p.trace(within(path, p.page, render.ClipFill)) {
		p.doc.DrawPath("f*")
	}
}

// Stroke draws along a path.
func (p *PDF) Stroke(path render.Path, pen render.Pen) {
	if !(pen.Width > 0) {
		return
	}
	p.pen(pen)
	if p.trace(within(path, p.page, render.ClipStroke)) {
		p.doc.DrawPath("D")
	}
}

// pen readies the document for strokes.
func (p *PDF) pen(pen render.Pen) {
	n := p.fade(pen.Color)
	p.doc.SetDrawColor(int(n.R), int(n.G), int(n.B))
	p.doc.SetLineWidth(pen.Width)
	p.doc.SetDashPattern(pen.Dash, 0)
	if pen.Cap == render.Butt {
		p.doc.SetLineCapStyle("butt")
	} else {
		p.doc.SetLineCapStyle("round")
	}
}

// fade sets the opacity of what follows, where it changes.
func (p *PDF) fade(c color.RGBA) color.NRGBA {
	n, alpha := opacity(c)
	if alpha != p.alpha {
		p.doc.SetAlpha(alpha, "Normal")
		p.alpha = alpha
	}
	return n
}

// trace puts a path into the document and says whether there is any.
func (p *PDF) trace(path render.Path) bool {
	any := false
	steps(path, func(op render.Op, q []render.Point) {
		any = true
		switch op {
		case render.Move:
			p.doc.MoveTo(q[0].X, q[0].Y)
		case render.Line:
			p.doc.LineTo(q[0].X, q[0].Y)
		case render.Cubic:
			p.doc.CurveBezierCubicTo(q[0].X, q[0].Y, q[1].X, q[1].Y, q[2].X, q[2].Y)
		case render.Close:
			p.doc.ClosePath()
		}
	})
	return any
}

// Text sets a line of text.
func (p *PDF) Text(t render.Text) {
	at := t.Start()
	if !p.page.Inset(-t.Size - t.Width()).Contains(at) {
		return
	}
	n := p.fade(t.Color)
	p.doc.SetTextColor(int(n.R), int(n.G), int(n.B))
	if t.Turn == render.Upward {
		p.doc.TransformBegin()
		p.doc.TransformRotate(90, at.X, at.Y)
		defer p.doc.TransformEnd()
	}
	for _, run := range letter.Runs(t.String, t.Weight) {
		family, style := fontName(run.Font)
		// On first use: fonts that nothing is set in stay out of the document.
		if !p.fonts[run.Font] {
			p.doc.AddUTF8FontFromBytes(family, style, bytes.Clone(run.Font.File()))
			p.fonts[run.Font] = true
		}
		p.doc.SetFont(family, style, t.Size*pointsPerMM)
		p.doc.Text(at.X+run.X*t.Size, at.Y, run.String)
	}
}

// together is how many discs are painted by one operator: viewers slow down
// at paths of very many pieces.
const together = 2000

// Dots paints discs: strokes without length, whose round ends are the discs
// (PDF 32000-1:2008, 8.5.3.2).
func (p *PDF) Dots(d render.Dots) {
	if !(d.Radius > 0) {
		return
	}
	p.pen(render.Pen{Width: 2 * d.Radius, Color: d.Color})
	around := p.page.Inset(-d.Radius)
	var b []byte
	made := 0
	for i := range min(len(d.X), len(d.Y)) {
		if !around.Contains(render.Point{X: d.X[i], Y: d.Y[i]}) {
			continue
		}
		from := len(b)
		b = append(places(b, d.X[i]*pointsPerMM, 2), ' ')
		b = append(places(b, (p.page.H()-d.Y[i])*pointsPerMM, 2), ' ')
		at := string(b[from:])
		b = append(b, "m "...)
		b = append(b, at...)
		b = append(b, "l\n"...)
		if made++; made%together == 0 {
			b = append(b, "S\n"...)
		}
	}
	if made%together != 0 {
		b = append(b, 'S')
	}
	if len(b) > 0 {
		p.doc.RawWriteStr(string(b))
	}
}
