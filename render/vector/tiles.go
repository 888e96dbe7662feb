package vector

import (
	"bytes"
	"encoding/base64"
	"fmt"
	"image"
	"image/color"
	"image/png"

	"cavitywright/render"

	"codeberg.org/go-pdf/fpdf"
)

// Tiles shows a picture over a box, each of its pixels a plain rectangle as far
// as the viewer heeds that.
func (s *SVG) Tiles(img *image.RGBA, box render.Box) {
	fmt.Fprintf(&s.body, "<image xmlns:xlink=\"http://www.w3.org/1999/xlink\" x=\"%s\" y=\"%s\" width=\"%s\" height=\"%s\" preserveAspectRatio=\"none\" style=\"image-rendering:optimizeSpeed;image-rendering:pixelated\" xlink:href=\"data:image/png;base64,%s\"/>\n",
		number(nil, box.Min.X), number(nil, box.Min.Y), number(nil, box.W()), number(nil, box.H()), base64.StdEncoding.EncodeToString(packed(img)))
}

// Tiles shows a picture over a box, each of its pixels a plain rectangle.
func (p *PDF) Tiles(img *image.RGBA, box render.Box) {
	p.fade(color.RGBA{A: 255})
	p.tiles++
	name, kind := fmt.Sprintf("tiles %d", p.tiles), fpdf.ImageOptions{ImageType: "PNG"}
	p.doc.RegisterImageOptionsReader(name, kind, bytes.NewReader(packed(img)))
	p.doc.ImageOptions(name, box.Min.X, box.Min.Y, box.W(), box.H(), false, kind, 0, "")
}

// packed is the picture as PNG.
func packed(img *image.RGBA) []byte {
	var b bytes.Buffer
	_ = png.Encode(&b, img) // a bytes.Buffer does not fail, and the picture is not empty
	return b.Bytes()
}
