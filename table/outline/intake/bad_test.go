package intake

import (
	"math"
	"strings"
	"testing"

	"cavitywright/table"
)

// bad are files that hold no outline, with what is said of each.
var bad = []struct{ file, says string }{
	{``, "The file holds no point; choose an SVG drawing, or a table with x and y in each line."},
	{`<svg`, "The drawing breaks off in line 1; copy or save it again."},
	{"<svg>\n<g>\n", "The drawing breaks off in line 3; copy or save it again."},
	{"<svg>\n<g></h></svg>", "The drawing is damaged in line 2 (element <g> closed by </h>); save it anew."},
	{`<html></html>`, "The file begins with <html> and is no SVG drawing; choose an SVG drawing or a table of points."},
	{`<?xml version="1.0"?>`, "The file holds no drawing; choose an SVG drawing or a table of points."},
	{plain(``), "The drawing holds no line; draw the wall as a closed path."},
	{plain(`<text>wall</text>`), "The drawing holds no line; draw the wall as a closed path."},
	{plain(`<path d="M0 0 L"/>`), `The path that is shape 1 of the drawing cannot be read: a number of the command "L" is missing or wrong, at its end (character 7); save the drawing anew.`},
	{plain(`<path id="rim" d="M0 0 L5 5x"/>`), `The path "rim" cannot be read: the command "x" is none that SVG knows, at "x" (character 10); save the drawing anew.`},
	{plain(`<path d="L5 5"/>`), `The path that is shape 1 of the drawing cannot be read: it does not begin with M, at "L5 5" (character 1); save the drawing anew.`},
	{plain(`<path d="M0 0 A5 5 0 2 0 5 5"/>`), `The path that is shape 1 of the drawing cannot be read: a number of the command "A" is missing or wrong, at "2 0 5 5" (character 13); save the drawing anew.`},
	{plain(`<path d="M0 0L5 0L5 5z 3 4"/>`), `The path that is shape 1 of the drawing cannot be read: a command is missing, at "3 4" (character 15); save the drawing anew.`},
	{plain(`<path d="M0 0L1e999 0"/>`), `The path that is shape 1 of the drawing cannot be read: a number of the command "L" is missing or wrong, at "1e999 0" (character 6); save the drawing anew.`},
	{plain(`<polygon points="1 2 3"/>`), `The polygon that is shape 1 of the drawing cannot be read: its points are no pairs of numbers, at "1 2 3"; save the drawing anew.`},
	{plain(`<circle r="50%"/>`), `A shape has r = "50%", which is no length that can be read; give it as a number.`},
	{plain(`<g transform="turn(3)"><rect width="1" height="1"/></g>`), `The transform "turn(3)" is none that SVG knows; draw the shape anew or take the transform off.`},
	{plain(`<g transform="scale(3"><rect width="1" height="1"/></g>`), `The transform "scale(3" is incomplete; draw the shape anew or take the transform off.`},
	{`<svg viewBox="0 0 0 10"/>`, `The drawing's viewBox "0 0 0 10" is not four numbers with a width and a height above 0; save it anew.`},
	{plain(`<path d="M0 0L10 0L10 10"/>`), "The path that is shape 1 of the drawing is open: it begins at (0, 0) mm and ends at (10, -10) mm, 14.1 mm away; close it where it was drawn."},
	{plain(`<path id="gap" d="M0 0L10 0L10 10L0 10L0 0.5"/>`), `The path "gap" is open: it begins at (0, 0) mm and ends at (0, -0.5) mm, 0.5 mm away; close it where it was drawn.`},
	{plain(`<path d="M0 0L10 10L10 0L0 10Z"/>`), "The outline crosses itself at (5, -5) mm; mend it where it was drawn."},
	{plain(`<rect width="9" height="9"/><circle id="post" cx="9.5" cy="5" r="2"/>`), "The outline crosses itself at (9, -"},
	{plain(`<rect width="9" height="9"/><circle id="post" cx="30" cy="5" r="2"/>`), `The circle "post", at (32, -5) mm, lies outside the largest outline; draw one wall around all, or take it out.`},
	{plain(`<rect width="9" height="9"/><circle cx="5" cy="5" r="2"/><circle id="inner" cx="5" cy="5" r="1"/>`), `The circle "inner", at (6, -5) mm, lies within another obstacle; take one of them out of the drawing.`},
	{plain(`<path d="M0 0L0 0Z"/>`), "The drawing holds no line; draw the wall as a closed path."},
	{plain(`<rect width="5" height="0"/>`), "The drawing holds no line; draw the wall as a closed path."},
	{plain(`<path d="M0 0L5 0Z"/>`), "The free wall cannot be built: its two straight sides lie on each other; add a node, or bow one side."},
	{"1,2\n", "Loop 1 has 1 different points; an outline needs three at least."},
	{"x,y\n1,2\n3,four\n5,6\n", `Line 3 holds "four" where a coordinate should stand; write a number there, or take the line out.`},
	{"x;y\n1;2\n3\n", `Line 3 holds "3", which is no pair of coordinates; write x and y in each line.`},
	{"a,b,c\n1,2,3\n", `Line 1 is the header "a b c", without columns x and y; name them so.`},
	{"0 0\n1 0\nNaN 1\n", `Line 3 holds "NaN" where a coordinate should stand; write a number there, or take the line out.`},
	{"0 0\n10 10\n10 0\n0 10\n", "The outline crosses itself at (5, 5) mm; mend it where it was drawn."},
	{"just some words\nand more of them\n", `Line 1 is the header "just some words", without columns x and y; name them so.`},
	{halfCircleOfPoints(), "Loop 1 is open: it begins at (10, 0) mm and ends at (-10, 1.22"},
}

// halfCircleOfPoints is an edge that was not measured all the way round.
func halfCircleOfPoints() string {
	var b strings.Builder
	for i := range 51 {
		phi := math.Pi * float64(i) / 50
		b.WriteString(number(10*math.Cos(phi)) + " " + number(10*math.Sin(phi)) + "\n")
	}
	return b.String()
}

// TestBadFiles: every file that holds no outline is answered with one sentence
// that says where.
func TestBadFiles(t *testing.T) {
	for _, c := range bad {
		d, err := Read(strings.NewReader(c.file))
		if err == nil {
			_, _, err = d.Design(Options{})
		}
		switch {
		case err == nil:
			t.Errorf("%q was taken", c.file)
		case !strings.HasPrefix(err.Error(), c.says):
			t.Errorf("%q: %v\nwant %s", short(c.file), err, c.says)
		case !strings.HasSuffix(err.Error(), "."):
			t.Errorf("%v is no sentence", err)
		}
	}
}

// FuzzRead: whatever is read is refused with a sentence or makes a table.
func FuzzRead(f *testing.F) {
	for _, c := range bad {
		f.Add(c.file)
	}
	for _, body := range []string{
		`<rect x="1" y="1" width="30" height="20" rx="5" transform="rotate(30) skewX(10)"/>`,
		`<path d="M0 0c1 2 3 4 5 6s3-4 5 1q1 2 3-4t3 3a5 3 20 1 0-9-9z"/><circle cx="3" cy="3" r="1"/>`,
		`<path d="M0,0a10 10 0 0020,0z"/>`,
	} {
		f.Add(plain(body))
	}
	f.Add("x [mm];y [mm]\n0;0\n1,5;0\n1;1\n\n0,3;0,2\n0,4;0,2\n0,4;0,3\n")
	f.Fuzz(func(t *testing.T, file string) {
		d, err := Read(strings.NewReader(file))
		if err == nil {
			var design table.Design
			if design, _, err = d.Design(Options{}); err == nil {
				if _, err := table.New(design); err != nil {
					t.Fatalf("%q: a design that is no table: %v", file, err)
				}
				return
			}
		}
		if !strings.HasSuffix(err.Error(), ".") || strings.Contains(err.Error(), "\n") || len(err.Error()) > 600 {
			t.Fatalf("%q: said %q", file, err)
		}
	})
}
