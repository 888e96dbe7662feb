package intake

import (
	"math"
	"strings"

	"cavitywright/table/outline"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// row is a subpath: edges in a row, closed by a closing command or not.
type row struct {
	name   string
	edges  []Edge
	closed bool
}

// pen draws the rows of a path in its own coordinates.
type pen struct {
	rows        []row
	name        string
	start, at   r2.Vec
	control     r2.Vec // the last control point, for smooth commands
	controlKind byte   // 'C' or 'Q' where it is one
	edges       []Edge
	limit       *int // edges that may still be drawn
}

func (p *pen) put(e Edge) {
	e.A = p.at
	if e.Kind != outline.Line || e.A != e.B {
		p.edges = append(p.edges, e)
		*p.limit--
	}
	p.at = e.B
}

// end puts the row down.
func (p *pen) end(closed bool) {
	if len(p.edges) > 0 {
		p.rows = append(p.rows, row{p.name, p.edges, closed})
	}
	p.edges = nil
}

func (p *pen) move(to r2.Vec) {
	p.end(false)
	p.start, p.at = to, to
}

func (p *pen) line(to r2.Vec) { p.put(Edge{Kind: outline.Line, B: to}) }

func (p *pen) close() {
	p.line(p.start)
	p.end(true)
}

func (p *pen) cubic(c0, c1, to r2.Vec) {
	p.put(Edge{Kind: outline.Cubic, C: [2]r2.Vec{c0, c1}, B: to})
}

func (p *pen) quadratic(c, to r2.Vec) {
	a := p.at
	p.cubic(plane.Lerp(a, c, 2.0/3), plane.Lerp(to, c, 2.0/3), to)
}

// arc is SVG's elliptical arc by its ends: centre and angles follow from the
// radii, which grow where they are too small to reach (SVG 1.1, F.6.5, F.6.6).
func (p *pen) arc(rx, ry, tiltDeg float64, large, sweep bool, to r2.Vec) {
	if p.at == to {
		return
	}
	rx, ry = math.Abs(rx), math.Abs(ry)
	if rx == 0 || ry == 0 {
		p.line(to)
		return
	}
	sin, cos := sincosDeg(tiltDeg)
	into := func(v r2.Vec) r2.Vec { return r2.Vec{X: (cos*v.X + sin*v.Y) / rx, Y: (cos*v.Y - sin*v.X) / ry} }
	half := into(r2.Scale(0.5, r2.Sub(p.at, to))) // on the unit circle, about the middle
	d2 := plane.Dot(half, half)
	height := 0.0
	if d := math.Sqrt(d2); d >= 1-halfCircle {
		rx, ry = rx*d, ry*d
		half = r2.Scale(1/d, half)
	} else {
		height = math.Sqrt((1 - d) * (1 + d) / d2)
	}
	if large == sweep {
		height = -height
	}
	centre := r2.Vec{X: height * half.Y, Y: -height * half.X}
	from := r2.Sub(half, centre)
	end := r2.Sub(r2.Scale(-1, half), centre)
	turn := plane.Angle(from, end)
	if sweep && turn < 0 {
		turn += 2 * math.Pi
	} else if !sweep && turn > 0 {
		turn -= 2 * math.Pi
	}
	u, v := r2.Vec{X: rx * cos, Y: rx * sin}, r2.Vec{X: -ry * sin, Y: ry * cos}
	mid := plane.Lerp(p.at, to, 0.5)
	p.put(Edge{
		Kind: outline.Oval, B: to, U: u, V: v, Sweep: turn, From: math.Atan2(from.Y, from.X),
		Centre: r2.Add(mid, r2.Add(r2.Scale(centre.X, u), r2.Scale(centre.Y, v))),
	})
}

// halfCircle is the part of an arc's size within which its ends count as
// opposite: the place of the centre is else the rounding of the file.
const halfCircle = 1e-9

// arguments is the number of numbers that each command takes.
var arguments = map[byte]int{'M': 2, 'L': 2, 'H': 1, 'V': 1, 'C': 6, 'S': 4, 'Q': 4, 'T': 2, 'A': 7, 'Z': 0}

// draw reads the data of a path (SVG 1.1, 8.3). An error stops at the command
// and place at fault.
func (p *pen) draw(data string) error {
	s := scanner{text: data}
	var command byte
	for first := true; !s.done(); first = false {
		began := s.at
		if c := s.text[s.at]; c|0x20 >= 'a' && c|0x20 <= 'z' {
			if _, known := arguments[c&^0x20]; !known {
				return p.wrong(data, s.at, "the command %q is none that SVG knows", string(c))
			}
			command = c
			s.at++
		} else if command|0x20 == 'z' || command == 0 {
			return p.wrong(data, s.at, "a command is missing")
		}
		if first && command|0x20 != 'm' {
			return p.wrong(data, began, "it does not begin with M")
		}
		v, ok := s.takes(command &^ 0x20)
		if !ok {
			return p.wrong(data, s.at, "a number of the command %q is missing or wrong", string(command))
		}
		p.obey(command, v)
		switch command { // numbers that follow a move are lines
		case 'M':
			command = 'L'
		case 'm':
			command = 'l'
		}
		if *p.limit < 0 {
			return tooMany()
		}
	}
	p.end(false)
	return nil
}

func tooMany() error {
	return fault("The drawing has more than %d lines and curves; thin it out first.", mostEdges)
}

func (p *pen) wrong(data string, at int, format string, args ...any) error {
	text := short(data[at:min(len(data), at+24)])
	if strings.TrimSpace(text) == "" {
		text = "its end"
	} else {
		text = `"` + text + `"`
	}
	return fault("%s cannot be read: "+format+", at %s (character %d); save the drawing anew.",
		append(append([]any{p.name}, args...), text, at+1)...)
}

// takes reads the numbers of a command.
func (s *scanner) takes(command byte) (v [7]float64, ok bool) {
	for i := range arguments[command] {
		if command == 'A' && (i == 3 || i == 4) {
			f, is := s.flag()
			if !is {
				return v, false
			}
			if f {
				v[i] = 1
			}
			continue
		}
		if v[i], ok = s.number(); !ok {
			return v, false
		}
	}
	return v, true
}

// obey carries out one command.
func (p *pen) obey(command byte, v [7]float64) {
	big := command &^ 0x20
	origin := r2.Vec{}
	if command != big {
		origin = p.at
	}
	to := func(i int) r2.Vec { return r2.Vec{X: origin.X + v[i], Y: origin.Y + v[i+1]} }
	// The control point that a smooth command mirrors.
	mirrored := func(kind byte) r2.Vec {
		if p.controlKind == kind {
			return r2.Sub(r2.Scale(2, p.at), p.control)
		}
		return p.at
	}
	kind := byte(0)
	switch big {
	case 'M':
		p.move(to(0))
	case 'Z':
		p.close()
	case 'L':
		p.line(to(0))
	case 'H':
		p.line(r2.Vec{X: origin.X + v[0], Y: p.at.Y})
	case 'V':
		p.line(r2.Vec{X: p.at.X, Y: origin.Y + v[0]})
	case 'C':
		c := to(2)
		p.cubic(to(0), c, to(4))
		p.control, kind = c, 'C'
	case 'S':
		c := to(0)
		p.cubic(mirrored('C'), c, to(2))
		p.control, kind = c, 'C'
	case 'Q':
		c := to(0)
		p.quadratic(c, to(2))
		p.control, kind = c, 'Q'
	case 'T':
		c := mirrored('Q')
		p.quadratic(c, to(0))
		p.control, kind = c, 'Q'
	case 'A':
		p.arc(v[0], v[1], v[2], v[3] == 1, v[4] == 1, to(5))
	}
	p.controlKind = kind
}
