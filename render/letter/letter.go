// Package letter knows the typeface: how wide a string is, and which font file
// has which of its signs. All sizes are in em, the size of the type, so that
// every canvas lays text out alike.
//
// The typeface is Noto Sans (assets). It lacks a few signs that figures need,
// the minus among them; those are taken from the Go fonts of golang.org/x/image.
package letter

import (
	"fmt"
	"sync"

	"cavitywright/assets"

	"golang.org/x/image/font"
	"golang.org/x/image/font/gofont/gobold"
	"golang.org/x/image/font/gofont/goregular"
	"golang.org/x/image/font/opentype"
	"golang.org/x/image/font/sfnt"
	"golang.org/x/image/math/fixed"
)

// Weight is the weight of a text.
type Weight uint8

// The weights there are.
const (
	Regular Weight = iota
	Bold
)

// Heights of the typeface in em, from its own tables (Noto Sans, 1000 units an
// em): of a capital letter above the baseline, of the small letter x, and the
// reach of all letters above and below the baseline.
const (
	CapHeight = 0.714
	XHeight   = 0.536
	Ascent    = 1.069
	Descent   = 0.293
)

// Font is one font file.
type Font uint8

// The font files: the typeface, and the signs that it lacks.
const (
	Text Font = iota
	TextBold
	Signs
	SignsBold
	fonts
)

var families = [fonts]string{"Noto Sans", "Noto Sans", "Go", "Go"}

// Family is the name by which a viewer may know the font.
func (f Font) Family() string { return families[f] }

// Weight is the weight of the font.
func (f Font) Weight() Weight { return Weight(f % 2) }

// File is the font file in TrueType form; it must not be changed.
func (f Font) File() []byte {
	return [fonts][]byte{assets.Regular, assets.Bold, goregular.TTF, gobold.TTF}[f]
}

// parsed holds the fonts read once; a sfnt.Font may be shared freely.
var parsed = sync.OnceValue(func() [fonts]*sfnt.Font {
	var all [fonts]*sfnt.Font
	for f := range fonts {
		p, err := sfnt.Parse(f.File())
		if err != nil {
			panic(fmt.Sprintf("letter: the embedded font %s cannot be read: %v", f.Family(), err))
		}
		all[f] = p
	}
	return all
})

// Face is the font at a size in pixels per em, for canvases that draw glyphs
// as bitmaps. It is for one goroutine; size must be positive.
func (f Font) Face(size float64) font.Face {
	face, err := opentype.NewFace(parsed()[f], &opentype.FaceOptions{Size: size, DPI: 72, Hinting: font.HintingNone})
	if err != nil {
		panic(fmt.Sprintf("letter: no face of size %g: %v", size, err))
	}
	return face
}

// Run is a stretch of a string set in one font. X is where it starts and W how
// wide it is, in em from the start of the string.
type Run struct {
	String string
	Font   Font
	X, W   float64
}

// Runs splits a string into stretches of one font each. A sign that no font
// has stays in the typeface and shows as its blank box.
func Runs(s string, w Weight) []Run {
	var runs []Run
	var buf sfnt.Buffer
	start, x := 0, 0.0
	for i, r := range s {
		f, adv := find(&buf, r, w)
		if n := len(runs); n == 0 || runs[n-1].Font != f {
			if n > 0 {
				runs[n-1].String = s[start:i]
			}
			start = i
			runs = append(runs, Run{Font: f, X: x})
		}
		runs[len(runs)-1].W += adv
		x += adv
	}
	if n := len(runs); n > 0 {
		runs[n-1].String = s[start:]
	}
	return runs
}

// Width is the width of the string in em.
func Width(s string, w Weight) float64 {
	var buf sfnt.Buffer
	x := 0.0
	for _, r := range s {
		_, adv := find(&buf, r, w)
		x += adv
	}
	return x
}

// find gives the font that has the rune, and its advance in em.
func find(buf *sfnt.Buffer, r rune, w Weight) (Font, float64) {
	for _, f := range [2]Font{Text, Signs} {
		f += Font(w)
		p := parsed()[f]
		g, err := p.GlyphIndex(buf, r)
		if err != nil || g == 0 {
			continue
		}
		return f, advance(buf, p, g)
	}
	return Text + Font(w), advance(buf, parsed()[Text+Font(w)], 0)
}

// advance is a glyph's advance in em, exact: it is asked for at the size at
// which one font unit is one pixel.
func advance(buf *sfnt.Buffer, p *sfnt.Font, g sfnt.GlyphIndex) float64 {
	unit := int(p.UnitsPerEm())
	adv, err := p.GlyphAdvance(buf, g, fixed.I(unit), font.HintingNone)
	if err != nil {
		return 0
	}
	return float64(adv) / 64 / float64(unit)
}
