// Package intake reads outlines that were drawn or measured elsewhere: the
// shapes of an SVG drawing, or the points of a table of numbers. It makes them
// a design: the outermost outline the wall, those inside it obstacles, as drawn
// or with smooth walls fitted to their points.
//
// It knows streams of bytes, not files. Errors are one sentence: what, where,
// what to do.
package intake

import (
	"bufio"
	"bytes"
	"fmt"
	"io"

	"cavitywright/table"
	"cavitywright/table/outline"

	"gonum.org/v1/gonum/spatial/r2"
)

// Drawing is what was read: closed loops in Unit, y up, as they were drawn.
type Drawing struct {
	Loops []Loop
	Unit  table.Unit
	// Plain is 0 where the file states real lengths; else the length in Unit
	// that a number 1 of the file was taken for.
	Plain float64
	// Drawn tells a drawing from a table of points.
	Drawn bool
	// Notes say what was taken for granted or left out, a sentence each.
	Notes []string
}

// Loop is a closed row of edges; each begins where the one before ends.
type Loop struct {
	Name  string // as a sentence names it
	Edges []Edge
}

// Edge is a line, an elliptical arc or a cubic from A to B. The arc runs along
// Centre + U cos t + V sin t, with conjugate half axes U and V, from t = From
// over Sweep (radians).
type Edge struct {
	Kind         outline.Kind // Line, Oval or Cubic
	A, B         r2.Vec
	C            [2]r2.Vec
	Centre, U, V r2.Vec
	From, Sweep  float64
}

const (
	// MostBytes is the size of the largest file that is read, mostEdges the
	// number of its edges.
	MostBytes = 64 << 20
	mostEdges = 600_000
)

// Fault is why a file holds no outline that can be taken.
type Fault struct{ text string }

func (f *Fault) Error() string { return f.text }

func fault(format string, args ...any) error { return &Fault{fmt.Sprintf(format, args...)} }

// Read reads an SVG drawing or a table of points; the first bytes tell which.
// The error is a *Fault, or that of r.
func Read(r io.Reader) (Drawing, error) {
	limited := &io.LimitedReader{R: r, N: MostBytes + 1}
	b := bufio.NewReader(limited)
	head, _ := b.Peek(512) // what is wrong with the stream, reading it will say
	var d Drawing
	var err error
	if LooksDrawn(head) {
		d, err = readSVG(b)
	} else {
		d, err = readPoints(b)
	}
	if limited.N <= 0 {
		return Drawing{}, fault("The file is larger than 64 MiB; thin the outline out first.")
	}
	return d, err
}

// LooksDrawn reports whether the first bytes of a file are those of XML.
func LooksDrawn(head []byte) bool {
	return bytes.HasPrefix(bytes.TrimLeft(bytes.TrimPrefix(head, []byte("\ufeff")), " \t\r\n"), []byte("<"))
}

// Polygonal reports whether a loop is made of lines alone.
func (l *Loop) Polygonal() bool {
	for i := range l.Edges {
		if l.Edges[i].Kind != outline.Line {
			return false
		}
	}
	return true
}
