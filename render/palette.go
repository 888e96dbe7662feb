package render

import "image/color"

// The colours of the three looks. The orbit colours keep the order of hues of
// Okabe and Ito (2008, "Color universal design"), with their yellow darkened
// and their black, which the sea needs, replaced by a violet. Lightness and
// chroma were searched by computer for the greatest distance in OKLab between
// any two of the eight, the accent and the ink, as seen with full colour
// vision and with each kind of dichromacy (simulated after Machado, Oliveira
// and Fernandes 2009), under three conditions that the tests hold: at least
// 3:1 on paper and floor (WCAG 2.2, 1.4.11), and neighbours in the list that
// differ in lightness, so that grey print still tells them apart.
var (
	inks = Palette{
		Paper: hex(0xFFFFFF), Floor: hex(0xF5F4F1),
		Ink: hex(0x1A1A1A), Faint: hex(0xB4B1AA), Accent: hex(0xA90069), Sea: hex(0x1A1A1A),
		Orbits: onPaper, Wheel: wheelOnPaper,
	}
	warm = Palette{
		Paper: hex(0xF6F3EC), Floor: hex(0xFEFDFA),
		Ink: hex(0x23211E), Faint: hex(0xC3BDB0), Accent: hex(0xA90069), Sea: hex(0x23211E),
		Orbits: onPaper, Wheel: wheelOnPaper,
	}
	slate = Palette{
		Paper: hex(0x1F252C), Floor: hex(0x2A323B),
		Ink: hex(0xE8E4DA), Faint: hex(0x5A646E), Accent: hex(0xF64D8C), Sea: hex(0xE8E4DA),
		Orbits: [8]color.RGBA{
			hex(0x1F7DFD), hex(0xFB900A), hex(0x4E8C64), hex(0xFFB094),
			hex(0x08ACCB), hex(0xFFBCFF), hex(0x9F8003), hex(0xC595FE),
		},
		Wheel: NewWheel(0.74, 0.125),
	}
	onPaper = [8]color.RGBA{
		hex(0x0044A0), hex(0x9C6E0E), hex(0x085127), hex(0xEB3E44),
		hex(0x006598), hex(0xCE4CC1), hex(0x645C00), hex(0x696FFE),
	}
	wheelOnPaper = NewWheel(0.70, 0.119)
)

// hex is the opaque colour 0xRRGGBB.
func hex(rgb uint32) color.RGBA {
	return color.RGBA{uint8(rgb >> 16), uint8(rgb >> 8), uint8(rgb), 255}
}
