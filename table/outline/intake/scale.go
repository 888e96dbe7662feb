package intake

import (
	"math"
	"strconv"
	"strings"
)

// units are the lengths in millimetres that a drawing may state; 96 px are an
// inch (CSS).
var units = map[string]float64{
	"": mmPerInch / 96, "px": mmPerInch / 96, "mm": 1, "cm": 10, "m": 1000, "in": mmPerInch, "pt": mmPerInch / 72, "pc": mmPerInch / 6,
	"q": 0.25, "um": 1e-3, "µm": 1e-3, "μm": 1e-3, "nm": 1e-6,
}

const mmPerInch = 25.4

// length reads a length with its unit as millimetres; real tells whether the
// unit is one of the world rather than of a screen.
func length(text string) (mm float64, real, ok bool) {
	s := scanner{text: strings.TrimSpace(text)}
	x, ok := s.number()
	if !ok {
		return 0, false, false
	}
	unit := strings.ToLower(strings.TrimSpace(s.text[s.at:]))
	factor, ok := units[unit]
	return x * factor, unit != "" && unit != "px", ok
}

// userLength reads a coordinate of a shape: a number, or a length in user units
// of which 96 are an inch.
func userLength(a map[string]string, key string) (float64, error) {
	text, is := a[key]
	if !is {
		return 0, nil
	}
	if x, err := strconv.ParseFloat(strings.TrimSpace(text), 64); err == nil && !math.IsInf(x, 0) && !math.IsNaN(x) {
		return x, nil
	}
	mm, _, ok := length(text)
	if !ok {
		return 0, fault("A shape has %s = %q, which is no length that can be read; give it as a number.", key, short(text))
	}
	return mm * 96 / mmPerInch, nil
}

// root takes the size of the drawing: how many millimetres its numbers are.
func (s *sheet) root(a map[string]string) error {
	box, err := numbers(a["viewBox"])
	if err != nil || len(box) != 0 && (len(box) != 4 || !(box[2] > 0) || !(box[3] > 0)) {
		return fault("The drawing's viewBox %q is not four numbers with a width and a height above 0; save it anew.", short(a["viewBox"]))
	}
	w, realW, okW := length(a["width"])
	h, realH, okH := length(a["height"])
	okW, okH = okW && w > 0, okH && h > 0
	pixel := mmPerInch / 96
	kx, ky := pixel, pixel
	if len(box) == 4 {
		switch {
		case okW && okH:
			kx, ky = w/box[2], h/box[3]
			if a["preserveAspectRatio"] != "none" && math.Abs(kx-ky) > 1e-12*kx {
				kx = min(kx, ky)
				ky = kx
			} else if math.Abs(kx-ky) <= 1e-12*kx {
				ky = kx
			}
		case okW:
			kx, ky = w/box[2], w/box[2]
		case okH:
			kx, ky = h/box[3], h/box[3]
		}
	}
	if !(okW && realW) && !(okH && realH) {
		s.plain = kx
	}
	s.scale = affine{a: kx, d: -ky} // y up
	return nil
}

// nested is the transform of an inner drawing.
func nested(a map[string]string) (affine, error) {
	x, err := userLength(a, "x")
	if err != nil {
		return same, err
	}
	y, err := userLength(a, "y")
	if err != nil {
		return same, err
	}
	m := affine{1, 0, 0, 1, x, y}
	box, err := numbers(a["viewBox"])
	w, errW := userLength(a, "width")
	h, errH := userLength(a, "height")
	if err != nil || errW != nil || errH != nil || len(box) != 4 || !(box[2] > 0) || !(box[3] > 0) {
		return m, nil
	}
	if w == 0 || h == 0 {
		w, h = box[2], box[3]
	}
	k := min(w/box[2], h/box[3])
	return m.after(affine{k, 0, 0, k, (w-k*box[2])/2 - k*box[0], (h-k*box[3])/2 - k*box[1]}), nil
}
