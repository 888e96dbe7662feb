package window

import (
	"bytes"
	"fmt"
	"image/color"

	"cavitywright/assets"
	"cavitywright/render"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/theme"
)

// dress is the toolkit's theme in the colours of the panes. The accent is kept
// for what can be dragged; chosen controls are ink on paper. Whether it is
// light or dark is the person's choice, not the desktop's: a figure looks the
// same at home and at work.
type dress struct{ variant fyne.ThemeVariant }

var (
	regular = fyne.NewStaticResource("NotoSans-Regular.ttf", assets.Regular)
	bold    = fyne.NewStaticResource("NotoSans-Bold.ttf", assets.Bold)
)

// look is the look of the panes for a theme variant, at a scale in pixels to a
// unit of the window.
func look(v fyne.ThemeVariant, scale float64) render.Look {
	if v == theme.VariantDark {
		return render.Dark(scale)
	}
	return render.Light(scale)
}

func mix(a, b color.RGBA, f float64) color.RGBA {
	m := func(x, y uint8) uint8 { return uint8(float64(x)*(1-f) + float64(y)*f + 0.5) }
	return color.RGBA{m(a.R, b.R), m(a.G, b.G), m(a.B, b.B), 255}
}

func (d dress) Color(n fyne.ThemeColorName, _ fyne.ThemeVariant) color.Color {
	l := look(d.variant, 1)
	switch n {
	case theme.ColorNameBackground, theme.ColorNameOverlayBackground, theme.ColorNameMenuBackground, theme.ColorNameHeaderBackground:
		return l.Paper
	case theme.ColorNameForeground:
		return l.Ink
	case theme.ColorNameInputBackground:
		return l.Floor
	case theme.ColorNameInputBorder, theme.ColorNameSeparator:
		return mix(l.Paper, l.Faint, 0.75)
	case theme.ColorNameButton:
		return mix(l.Paper, l.Ink, 0.13)
	case theme.ColorNameDisabledButton:
		return mix(l.Paper, l.Ink, 0.03)
	case theme.ColorNameHover:
		return render.Fade(l.Ink, 0.08)
	case theme.ColorNamePressed, theme.ColorNameSelection, theme.ColorNameFocus:
		return render.Fade(l.Ink, 0.16)
	case theme.ColorNamePrimary, theme.ColorNameHyperlink:
		return mix(l.Ink, l.Paper, 0.18)
	case theme.ColorNameForegroundOnPrimary:
		return l.Paper
	case theme.ColorNamePlaceHolder:
		return mix(l.Ink, l.Paper, 0.45)
	case theme.ColorNameDisabled:
		return mix(l.Ink, l.Paper, 0.55)
	case theme.ColorNameShadow:
		return render.Fade(l.Ink, 0.1)
	case theme.ColorNameScrollBar:
		return render.Fade(l.Ink, 0.3)
	}
	return theme.DefaultTheme().Color(n, d.variant)
}

func (dress) Font(s fyne.TextStyle) fyne.Resource {
	switch {
	case s.Monospace || s.Symbol:
		return theme.DefaultTheme().Font(s)
	case s.Bold:
		return bold
	}
	return regular
}

func (dress) Icon(n fyne.ThemeIconName) fyne.Resource { return theme.DefaultTheme().Icon(n) }

func (dress) Size(n fyne.ThemeSizeName) float32 {
	switch n {
	case theme.SizeNameText:
		return 13
	case theme.SizeNameCaptionText:
		return 11.5
	case theme.SizeNameHeadingText:
		return 18
	case theme.SizeNameSubHeadingText:
		return 15
	case theme.SizeNamePadding:
		return 4
	case theme.SizeNameInnerPadding:
		return 6
	case theme.SizeNameInlineIcon:
		return 17
	case theme.SizeNameInputRadius, theme.SizeNameSelectionRadius:
		return 4
	}
	return theme.DefaultTheme().Size(n)
}

// glyph is one of our own icons in the ink of the theme that stands. The ink is
// part of its name, since the toolkit keeps drawn icons by name.
type glyph string

func (g glyph) ink() string {
	r, gr, b, _ := theme.Color(theme.ColorNameForeground).RGBA()
	return fmt.Sprintf("#%02x%02x%02x", r>>8, gr>>8, b>>8)
}

// Name is the icon's name with the ink.
func (g glyph) Name() string { return string(g) + g.ink() + ".svg" }

// Content is the drawing in that ink.
func (g glyph) Content() []byte {
	return bytes.ReplaceAll(assets.Stroke(string(g)), []byte("#000000"), []byte(g.ink()))
}

// icon is the icon called name.
func icon(name string) fyne.Resource { return glyph(name) }
