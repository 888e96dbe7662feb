package intake

import (
	"encoding/xml"
	"errors"
	"fmt"
	"io"
	"math"
	"regexp"
	"slices"
	"strings"

	"cavitywright/table"

	"gonum.org/v1/gonum/spatial/r2"
)

// hidden are the elements whose content is not drawn where it stands.
var hidden = []string{"defs", "symbol", "clipPath", "mask", "pattern", "marker", "style", "metadata", "title", "desc", "script", "filter", "linearGradient", "radialGradient", "font", "foreignObject"}

// apart is the id of a group that holds lines that are no wall, as exports of
// walls have them for openings.
const apart = "openings"

// leftOut are elements that show something that is not taken, by their word.
var leftOut = map[string]string{"use": "clone", "text": "text", "image": "image"}

const mostDepth = 500

// sheet is a drawing as it is read.
type sheet struct {
	rows    []row
	left    map[string]int
	shapes  int // counted for names
	limit   int
	scale   affine // to millimetres
	notes   []string
	curious bool // a root was seen
	plain   float64
}

// readSVG reads a drawing.
func readSVG(r io.Reader) (Drawing, error) {
	s := sheet{left: map[string]int{}, limit: mostEdges, scale: same}
	d := xml.NewDecoder(r)
	d.CharsetReader = readLatin
	d.Entity = map[string]string{}
	stack := []affine{same}
	for {
		token, err := d.Token()
		if errors.Is(err, io.EOF) {
			break
		}
		if err != nil {
			return Drawing{}, notXML(err)
		}
		switch t := token.(type) {
		case xml.Directive:
			entities(d.Entity, string(t))
		case xml.EndElement:
			stack = stack[:len(stack)-1]
		case xml.StartElement:
			if !s.curious {
				if t.Name.Local != "svg" {
					return Drawing{}, fault("The file begins with <%s> and is no SVG drawing; choose an SVG drawing or a table of points.", short(t.Name.Local))
				}
				s.curious = true
				if err := s.root(attributes(t)); err != nil {
					return Drawing{}, err
				}
				stack = append(stack, s.scale)
				continue
			}
			skip, m, err := s.element(t, stack[len(stack)-1])
			if err != nil {
				return Drawing{}, err
			}
			if skip {
				if err := d.Skip(); err != nil {
					return Drawing{}, notXML(err)
				}
				continue
			}
			if stack = append(stack, m); len(stack) > mostDepth {
				return Drawing{}, fault("The drawing has groups within groups %d deep; ungroup it.", mostDepth)
			}
		}
	}
	if !s.curious {
		return Drawing{}, fault("The file holds no drawing; choose an SVG drawing or a table of points.")
	}
	return s.drawing()
}

func notXML(err error) error {
	var syntax *xml.SyntaxError
	if errors.As(err, &syntax) {
		if strings.Contains(syntax.Msg, "unexpected EOF") {
			return fault("The drawing breaks off in line %d; copy or save it again.", syntax.Line)
		}
		return fault("The drawing is damaged in line %d (%s); save it anew.", syntax.Line, short(syntax.Msg))
	}
	return err
}

// entityForm is the declaration of an entity, which some programs abbreviate
// their name spaces by.
var entityForm = regexp.MustCompile(`<!ENTITY\s+([A-Za-z_][\w.-]*)\s+(?:"([^"]*)"|'([^']*)')`)

func entities(to map[string]string, directive string) {
	for _, m := range entityForm.FindAllStringSubmatch(directive, 100) {
		to[m[1]] = m[2] + m[3]
	}
}

// readLatin reads the one-byte encodings whose ASCII half is that of UTF-8;
// what is drawn needs no more.
func readLatin(_ string, r io.Reader) (io.Reader, error) {
	b, err := io.ReadAll(r)
	if err != nil {
		return nil, err
	}
	return strings.NewReader(strings.Map(func(c rune) rune { return c }, string(runesOf(b)))), nil
}

func runesOf(b []byte) []rune {
	out := make([]rune, len(b))
	for i, c := range b {
		out[i] = rune(c)
	}
	return out
}

func attributes(t xml.StartElement) map[string]string {
	a := map[string]string{}
	for _, x := range t.Attr {
		if x.Name.Space == "" {
			a[x.Name.Local] = x.Value
		}
	}
	return a
}

// element takes one element under the transform m; skip tells to pass over
// what is inside.
func (s *sheet) element(t xml.StartElement, m affine) (skip bool, inner affine, err error) {
	a := attributes(t)
	name := t.Name.Local
	if slices.Contains(hidden, name) || name == "g" && a["id"] == apart || t.Name.Space != "" && !strings.HasSuffix(t.Name.Space, "/svg") || unseen(a) {
		return true, m, nil
	}
	if word, is := leftOut[name]; is {
		s.left[word]++
		return true, m, nil
	}
	if text := a["transform"]; text != "" {
		own, err := parseTransform(text)
		if err != nil {
			return false, m, err
		}
		m = m.after(own)
	}
	if name == "svg" {
		own, err := nested(a)
		return false, m.after(own), err
	}
	s.shapes++
	p := pen{name: called(name, a["id"], s.shapes), limit: &s.limit}
	known, err := p.shape(name, a)
	if err != nil {
		return false, m, err
	}
	if !known {
		s.shapes--
		return false, m, nil
	}
	if s.limit < 0 {
		return false, m, tooMany()
	}
	for _, r := range p.rows {
		for i := range r.edges {
			r.edges[i] = m.edge(r.edges[i])
		}
		s.rows = append(s.rows, r)
	}
	return false, m, nil
}

func unseen(a map[string]string) bool {
	style := strings.Join(strings.Fields(a["style"]), "")
	return a["display"] == "none" || a["visibility"] == "hidden" || strings.Contains(style, "display:none") || strings.Contains(style, "visibility:hidden")
}

func called(kind, id string, n int) string {
	if id != "" {
		return fmt.Sprintf("The %s %q", kind, short(id))
	}
	return fmt.Sprintf("The %s that is shape %d of the drawing", kind, n)
}

// drawing is what was drawn as closed loops in a fitting unit.
func (s *sheet) drawing() (Drawing, error) {
	d := Drawing{Notes: s.notes, Plain: s.plain, Drawn: true}
	for _, word := range []string{"clone", "image", "text"} {
		if n := s.left[word]; n > 0 {
			d.Notes = append(d.Notes, fmt.Sprintf("%s left out; only shapes and paths are read.", counted(n, word)))
		}
	}
	if len(s.rows) == 0 {
		return d, fault("The drawing holds no line; draw the wall as a closed path.")
	}
	loops, err := closed(s.rows, table.Millimetre)
	if err != nil {
		return d, err
	}
	d.Loops, d.Unit = loops, table.Millimetre
	return d, nil
}

func counted(n int, word string) string {
	if n == 1 {
		return "1 " + word + " was"
	}
	return fmt.Sprintf("%d %ss were", n, word)
}

// box is a box that holds the ends of the rows.
func box(rows []row) (lo, hi r2.Vec) {
	lo, hi = rows[0].edges[0].A, rows[0].edges[0].A
	for _, r := range rows {
		for i := range r.edges {
			for _, p := range [2]r2.Vec{r.edges[i].A, r.edges[i].B} {
				lo = r2.Vec{X: math.Min(lo.X, p.X), Y: math.Min(lo.Y, p.Y)}
				hi = r2.Vec{X: math.Max(hi.X, p.X), Y: math.Max(hi.Y, p.Y)}
			}
		}
	}
	return lo, hi
}
