package vector

import (
	"bytes"
	"encoding/xml"
	"fmt"
	"image/color"
	"io"

	"cavitywright/render"
	"cavitywright/render/letter"
)

// SVG is a render.Canvas that writes SVG 1.1 with its size in millimetres and
// a viewBox in the same unit. Text stays text, in the typeface where the
// viewer has it and in a plain sans-serif elsewhere.
type SVG struct {
	page render.Box
	body bytes.Buffer
	line []byte
}

// NewSVG is an empty page of a size in millimetres.
func NewSVG(widthMM, heightMM float64) *SVG {
	return &SVG{page: render.NewBox(0, 0, widthMM, heightMM)}
}

// Write writes the whole document. about is the text of its description;
// metadata is XML that goes into its metadata element, both left out when
// empty.
func (s *SVG) Write(w io.Writer, about, metadata string) error {
	var head bytes.Buffer
	width, height := string(number(nil, s.page.W())), string(number(nil, s.page.H()))
	fmt.Fprintf(&head, "<svg xmlns=\"http://www.w3.org/2000/svg\" width=\"%smm\" height=\"%smm\" viewBox=\"0 0 %s %s\">\n",
		width, height, width, height)
	if about != "" {
		fmt.Fprintf(&head, "<desc>%s</desc>\n", escaped(about))
	}
	if metadata != "" {
		fmt.Fprintf(&head, "<metadata>%s</metadata>\n", metadata)
	}
	for _, part := range [][]byte{[]byte(xml.Header), head.Bytes(), s.body.Bytes(), []byte("</svg>\n")} {
		if _, err := w.Write(part); err != nil {
			return fmt.Errorf("write SVG: %w", err)
		}
	}
	return nil
}

// escaped is text as XML has it.
func escaped(text string) string {
	var b bytes.Buffer
	_ = xml.EscapeText(&b, []byte(text)) // a bytes.Buffer does not fail
	return b.String()
}

// Fill paints the inside of a path, even-odd. That nothing is stroked is said,
// though it is the rule, for viewers that carry strokes over.
func (s *SVG) Fill(p render.Path, c color.RGBA) {
	d := s.steps(within(p, s.page, render.ClipFill))
	if d == "" {
		return
	}
	fmt.Fprintf(&s.body, "<path d=\"%s\" %s fill-rule=\"evenodd\" stroke=\"none\"/>\n", d, paint("fill", c))
}

// Stroke draws along a path.
func (s *SVG) Stroke(p render.Path, pen render.Pen) {
	d := s.steps(within(p, s.page, render.ClipStroke))
	if d == "" || !(pen.Width > 0) {
		return
	}
	caps := "round"
	if pen.Cap == render.Butt {
		caps = "butt"
	}
	fmt.Fprintf(&s.body, "<path d=\"%s\" fill=\"none\" %s stroke-width=\"%s\" stroke-linecap=\"%s\" stroke-linejoin=\"round\"%s/>\n",
		d, paint("stroke", pen.Color), number(nil, pen.Width), caps, dashes(pen.Dash))
}

func dashes(pattern []float64) string {
	if len(pattern) == 0 {
		return ""
	}
	b := []byte(" stroke-dasharray=\"")
	for i, d := range pattern {
		if i > 0 {
			b = append(b, ' ')
		}
		b = number(b, d)
	}
	return string(append(b, '"'))
}

// paint is the attributes of a colour.
func paint(attribute string, c color.RGBA) string {
	n, alpha := opacity(c)
	text := fmt.Sprintf("%s=\"#%02x%02x%02x\"", attribute, n.R, n.G, n.B)
	if alpha < 1 {
		text += fmt.Sprintf(" %s-opacity=\"%s\"", attribute, number(nil, alpha))
	}
	return text
}

// letters are the commands of path data for each step.
var letters = [...]byte{render.Move: 'M', render.Line: 'L', render.Cubic: 'C', render.Close: 'Z'}

// steps is the path data of a path.
func (s *SVG) steps(p render.Path) string {
	b := s.line[:0]
	steps(p, func(op render.Op, points []render.Point) {
		b = append(b, letters[op])
		for i, q := range points {
			if i > 0 {
				b = append(b, ' ')
			}
			b = number(append(number(b, q.X), ' '), q.Y)
		}
	})
	s.line = b
	return string(b)
}

// Text sets a line of text, aligned by the viewer about its anchor.
func (s *SVG) Text(t render.Text) {
	at := t.Foot()
	if !s.page.Inset(-t.Size).Contains(at) || t.String == "" {
		return
	}
	b := append([]byte("<text "), place(at, t.Turn)...)
	b = append(b, fmt.Sprintf(" font-family=\"%s, %s, Helvetica, Arial, sans-serif\" font-size=\"%s\" %s stroke=\"none\"",
		quoted(letter.Text), letter.Signs.Family(), number(nil, t.Size), paint("fill", t.Color))...)
	if t.Weight == letter.Bold {
		b = append(b, " font-weight=\"bold\""...)
	}
	switch t.H {
	case render.Center:
		b = append(b, " text-anchor=\"middle\""...)
	case render.Right:
		b = append(b, " text-anchor=\"end\""...)
	}
	fmt.Fprintf(&s.body, "%s>%s</text>\n", b, escaped(t.String))
}

func quoted(f letter.Font) string { return "'" + f.Family() + "'" }

// place is where a text stands and how it is turned.
func place(at render.Point, turn render.Turn) string {
	x, y := number(nil, at.X), number(nil, at.Y)
	if turn == render.Upward {
		return fmt.Sprintf("transform=\"translate(%s %s) rotate(-90)\"", x, y)
	}
	return fmt.Sprintf("x=\"%s\" y=\"%s\"", x, y)
}

// Dots paints discs: one path of strokes without length, whose round ends are
// the discs.
func (s *SVG) Dots(d render.Dots) {
	b := s.line[:0]
	around := s.page.Inset(-d.Radius)
	for i := range min(len(d.X), len(d.Y)) {
		if around.Contains(render.Point{X: d.X[i], Y: d.Y[i]}) {
			b = number(append(b, 'M'), d.X[i])
			b = number(append(b, ' '), d.Y[i])
			b = append(b, "h0"...)
		}
	}
	s.line = b
	if len(b) == 0 || !(d.Radius > 0) {
		return
	}
	fmt.Fprintf(&s.body, "<path d=\"%s\" fill=\"none\" %s stroke-width=\"%s\" stroke-linecap=\"round\"/>\n",
		b, paint("stroke", d.Color), number(nil, 2*d.Radius))
}
