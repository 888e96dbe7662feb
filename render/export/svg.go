package export

import (
	"encoding/base64"
	"encoding/xml"
	"errors"
	"io"
	"strings"

	"cavitywright/render"
	"cavitywright/render/vector"
	"cavitywright/sim/figure"
)

// The element in which an SVG carries a table file: in a name space of its own,
// its text the file in base 64, which no editor reformats.
const (
	tableSpace   = "urn:cavitywright:table"
	tableElement = "table"
)

// writeSVG draws the figure as SVG with its table in the metadata.
func writeSVG(w io.Writer, f figure.Figure, o Options) error {
	c := vector.NewSVG(o.WidthMM, o.HeightMM)
	render.Draw(c, f, o.box(), o.Look)
	return c.Write(w, caption(f), carried(o.Table))
}

// carried is the metadata element's content for a table file.
func carried(table []byte) string {
	if table == nil {
		return ""
	}
	var b strings.Builder
	b.WriteString("<t:" + tableElement + " xmlns:t=\"" + tableSpace + "\" name=\"" + tableKey + "\">\n")
	text := base64.StdEncoding.EncodeToString(table)
	for len(text) > 0 {
		n := min(len(text), 76)
		b.WriteString(text[:n] + "\n")
		text = text[n:]
	}
	b.WriteString("</t:" + tableElement + ">")
	return b.String()
}

// TableInSVG gives the table file that an SVG carries. It reads at most four
// times MostCarried bytes.
func TableInSVG(r io.Reader) ([]byte, error) {
	limited := &io.LimitedReader{R: r, N: 4 * MostCarried}
	d := xml.NewDecoder(limited)
	root := false
	for {
		token, err := d.Token()
		if err != nil {
			return nil, svgError(err, root, limited.N <= 0)
		}
		start, ok := token.(xml.StartElement)
		if !ok {
			continue
		}
		if !root && start.Name.Local != "svg" {
			return nil, ErrNotSVG
		}
		root = true
		if start.Name.Space == tableSpace && start.Name.Local == tableElement {
			return tableText(d, limited)
		}
	}
}

// tableText reads the text of the table's element.
func tableText(d *xml.Decoder, limited *io.LimitedReader) ([]byte, error) {
	var text strings.Builder
	for {
		token, err := d.Token()
		if err != nil {
			return nil, svgError(err, true, limited.N <= 0)
		}
		switch t := token.(type) {
		case xml.CharData:
			text.Write(t)
		case xml.StartElement:
			return nil, ErrDamaged
		case xml.EndElement:
			packed := strings.Join(strings.Fields(text.String()), "")
			if base64.StdEncoding.DecodedLen(len(packed)) > MostCarried+2 {
				return nil, ErrTooLarge
			}
			table, err := base64.StdEncoding.DecodeString(packed)
			if err != nil {
				return nil, ErrDamaged
			}
			return table, nil
		}
	}
}

// svgError says why reading an SVG ended: at its regular end without a table,
// or before it.
func svgError(err error, root, full bool) error {
	var syntax *xml.SyntaxError
	switch {
	case full:
		return ErrTooLarge
	case !root && (errors.Is(err, io.EOF) || errors.As(err, &syntax)):
		return ErrNotSVG
	case errors.Is(err, io.EOF):
		return ErrNoTable
	case errors.As(err, &syntax) && strings.Contains(syntax.Msg, "unexpected EOF"):
		return ErrTruncated
	case errors.As(err, &syntax):
		return ErrDamaged
	}
	return err
}
