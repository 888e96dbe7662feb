package intake

import (
	"math"

	"gonum.org/v1/gonum/spatial/r2"
)

// shape draws an element; known is false for one that draws nothing itself.
func (p *pen) shape(kind string, a map[string]string) (known bool, err error) {
	var v [6]float64
	get := func(keys ...string) bool {
		for i, k := range keys {
			if v[i], err = userLength(a, k); err != nil {
				return false
			}
		}
		return true
	}
	switch kind {
	case "path":
		return true, p.draw(a["d"])
	case "line":
		if get("x1", "y1", "x2", "y2") {
			p.move(r2.Vec{X: v[0], Y: v[1]})
			p.line(r2.Vec{X: v[2], Y: v[3]})
			p.end(false)
		}
		return true, err
	case "polyline", "polygon":
		return true, p.points(a["points"], kind == "polygon")
	case "circle":
		if get("cx", "cy", "r") {
			p.oval(r2.Vec{X: v[0], Y: v[1]}, v[2], v[2])
		}
		return true, err
	case "ellipse":
		if get("cx", "cy", "rx", "ry") {
			p.oval(r2.Vec{X: v[0], Y: v[1]}, v[2], v[3])
		}
		return true, err
	case "rect":
		if get("x", "y", "width", "height", "rx", "ry") {
			_, hasX := a["rx"]
			_, hasY := a["ry"]
			switch {
			case hasX && !hasY:
				v[5] = v[4]
			case hasY && !hasX:
				v[4] = v[5]
			}
			p.rect(v)
		}
		return true, err
	}
	return false, nil
}

func (p *pen) points(text string, closed bool) error {
	list, err := numbers(text)
	if err != nil || len(list)%2 == 1 {
		return fault("%s cannot be read: its points are no pairs of numbers, at %q; save the drawing anew.", p.name, short(text))
	}
	for i := 0; i < len(list); i += 2 {
		at := r2.Vec{X: list[i], Y: list[i+1]}
		if i == 0 {
			p.move(at)
		} else {
			p.line(at)
		}
		if *p.limit < 0 {
			return tooMany()
		}
	}
	if closed && len(list) > 0 {
		p.close()
	}
	p.end(false)
	return nil
}

// oval draws an ellipse in four quarters.
func (p *pen) oval(c r2.Vec, rx, ry float64) {
	rx, ry = math.Abs(rx), math.Abs(ry)
	if rx == 0 || ry == 0 {
		return
	}
	p.move(r2.Vec{X: c.X + rx, Y: c.Y})
	for _, to := range []r2.Vec{{X: c.X, Y: c.Y + ry}, {X: c.X - rx, Y: c.Y}, {X: c.X, Y: c.Y - ry}, {X: c.X + rx, Y: c.Y}} {
		p.arc(rx, ry, 0, false, true, to)
	}
	p.close()
}

// rect draws a rectangle x, y, width, height with corners rounded by rx, ry,
// which are at most half of its sides.
func (p *pen) rect(v [6]float64) {
	x, y, w, h := v[0], v[1], v[2], v[3]
	if !(w > 0) || !(h > 0) {
		return
	}
	rx, ry := math.Min(math.Abs(v[4]), w/2), math.Min(math.Abs(v[5]), h/2)
	if rx == 0 || ry == 0 {
		rx, ry = 0, 0
	}
	at := func(x, y float64) r2.Vec { return r2.Vec{X: x, Y: y} }
	p.move(at(x+rx, y))
	p.line(at(x+w-rx, y))
	p.arc(rx, ry, 0, false, true, at(x+w, y+ry))
	p.line(at(x+w, y+h-ry))
	p.arc(rx, ry, 0, false, true, at(x+w-rx, y+h))
	p.line(at(x+rx, y+h))
	p.arc(rx, ry, 0, false, true, at(x, y+h-ry))
	p.line(at(x, y+ry))
	p.arc(rx, ry, 0, false, true, at(x+rx, y))
	p.close()
}
