package store

import (
	"bufio"
	"bytes"
	"io"

	"cavitywright/render/export"
	"cavitywright/table"
	"cavitywright/table/tablefile"
)

// Decode reads the design in a stream: a table file, or a PNG or SVG figure
// that carries one. Its first bytes tell which, not a name. It is what Load is
// given wherever a person names a file.
func Decode(r io.Reader) (table.Design, error) {
	b := bufio.NewReader(r)
	head, _ := b.Peek(512) // what is wrong with the stream, reading it will say
	var inside []byte
	var err error
	switch {
	case bytes.HasPrefix(head, []byte("\x89PNG")):
		inside, err = export.TableInPNG(b)
	case bytes.HasPrefix(bytes.TrimLeft(bytes.TrimPrefix(head, []byte("\ufeff")), " \t\r\n"), []byte("<")):
		inside, err = export.TableInSVG(b)
	default:
		return tablefile.Read(b)
	}
	if err != nil {
		return table.Design{}, err
	}
	return tablefile.Read(bytes.NewReader(inside))
}
