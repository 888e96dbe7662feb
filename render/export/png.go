package export

import (
	"bytes"
	"encoding/binary"
	"fmt"
	"hash/crc32"
	"image/png"
	"io"
	"math"

	"cavitywright/render"
	"cavitywright/render/raster"
	"cavitywright/sim/figure"
)

// tableKey is the keyword under which a PNG carries a table file.
const tableKey = "cavity.json"

// writePNG draws the figure as pixels and writes it with its resolution, its
// caption and its table in chunks of their own (PNG, third edition, 11.3).
func writePNG(w io.Writer, f figure.Figure, o Options) error {
	if pw, ph := raster.PixelSize(o.WidthMM, o.HeightMM, o.DPI); float64(pw)*float64(ph) > mostPixels {
		return &BadSize{o.WidthMM, o.HeightMM, o.DPI, fmt.Sprintf("that is more than %d million pixels", int(mostPixels/1e6))}
	}
	c := raster.New(o.WidthMM, o.HeightMM, o.DPI)
	render.Draw(c, f, o.box(), o.Look)
	var plain bytes.Buffer
	if err := png.Encode(&plain, c.Image()); err != nil {
		return fmt.Errorf("write PNG: %w", err)
	}
	var extra bytes.Buffer
	appendChunk(&extra, "pHYs", resolution(o.DPI))
	if about := caption(f); about != "" {
		appendChunk(&extra, "iTXt", international("Description", []byte(about)))
	}
	if o.Table != nil {
		appendChunk(&extra, "iTXt", international(tableKey, o.Table))
	}
	// The header chunk has a fixed size and must stay first.
	head := len(signature) + chunkFrame + headerSize
	for _, part := range [][]byte{plain.Bytes()[:head], extra.Bytes(), plain.Bytes()[head:]} {
		if _, err := w.Write(part); err != nil {
			return fmt.Errorf("write PNG: %w", err)
		}
	}
	return nil
}

const (
	signature  = "\x89PNG\r\n\x1a\n"
	chunkFrame = 12 // length, type and check sum around the data of a chunk
	headerSize = 13 // of the data of IHDR
)

// resolution is the data of pHYs: pixels per metre along x and y.
func resolution(dpi float64) []byte {
	perMetre := uint32(math.Round(dpi / mmPerInch * 1000))
	b := binary.BigEndian.AppendUint32(nil, perMetre)
	return append(binary.BigEndian.AppendUint32(b, perMetre), 1)
}

// international is the data of iTXt: text in UTF-8 under a keyword, compressed.
func international(key string, text []byte) []byte {
	var b bytes.Buffer
	b.WriteString(key)
	b.Write([]byte{0, 1, 0, 0, 0}) // compressed, by zlib; no language, no translated key
	b.Write(deflated(text))
	return b.Bytes()
}

// appendChunk adds a chunk with its length and check sum.
func appendChunk(b *bytes.Buffer, name string, data []byte) {
	var n [4]byte
	binary.BigEndian.PutUint32(n[:], uint32(len(data)))
	b.Write(n[:])
	b.WriteString(name)
	b.Write(data)
	sum := crc32.Update(crc32.ChecksumIEEE([]byte(name)), crc32.IEEETable, data)
	binary.BigEndian.PutUint32(n[:], sum)
	b.Write(n[:])
}
