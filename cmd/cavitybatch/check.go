package main

import (
	"errors"
	"fmt"
	"io"
	"math"
	"text/tabwriter"

	"cavitywright/table"
	"cavitywright/table/curve"

	"github.com/go-json-experiment/json"
	"github.com/go-json-experiment/json/jsontext"
)

// check says what a wall is.
type check struct {
	File string  `arg:"" placeholder:"FILE" help:"The table, or - for standard input."`
	Tool float64 `placeholder:"R" help:"Radius of a round tool, in the table's unit: say where it does not reach the wall."`
	JSON bool    `help:"Write JSON."`
}

// account is what check finds, in the form of its JSON. Lengths are in Unit.
type account struct {
	Name           string         `json:"name"`
	Unit           string         `json:"unit"`
	Perimeter      float64        `json:"perimeter"`
	Area           *float64       `json:"area"`            // null without an outer wall
	Open           bool           `json:"open"`            // there is no outer wall
	SmallestRadius *float64       `json:"smallest_radius"` // null where all is straight
	Loops          []loopAccount  `json:"loops"`
	Pieces         []pieceAccount `json:"pieces"`
	Joints         []jointAccount `json:"joints"`
	Coats          []coatAccount  `json:"coats"`
	wallReport     `json:",inline"`
	Problems       []problem `json:"problems"`
}

type loopAccount struct {
	Shape string  `json:"shape"`
	Role  string  `json:"role"` // wall or obstacle
	From  float64 `json:"from"` // s
	To    float64 `json:"to"`
}

type pieceAccount struct {
	Kind   string  `json:"kind"`
	Shape  string  `json:"shape"`
	Side   int     `json:"side"` // from 1
	From   float64 `json:"from"` // s
	Length float64 `json:"length"`
}

type jointAccount struct {
	S          float64  `json:"s"`
	X          float64  `json:"x"`
	Y          float64  `json:"y"`
	Continuity string   `json:"continuity"`
	AngleDeg   float64  `json:"interior_angle_deg"`
	Jump       *float64 `json:"curvature_jump"` // 1/unit; null at a cusp
}

type coatAccount struct {
	Law  string  `json:"law"`
	From float64 `json:"from"` // s
	To   float64 `json:"to"`
}

// problem is what is wrong, with its place where it has one.
type problem struct {
	Text string   `json:"text"`
	X    *float64 `json:"x"`
	Y    *float64 `json:"y"`
}

var kindNames = map[curve.Kind]string{
	curve.Segment: "line", curve.Circle: "arc", curve.Oval: "ellipse arc",
	curve.Bezier: "cubic", curve.Harmonic: "harmonic",
}

// Run checks the table.
func (c *check) Run(std streams) error {
	if !(c.Tool >= 0) || math.IsInf(c.Tool, 0) {
		return misuse("the tool's radius is %g, but must be a length of 0 or more", c.Tool)
	}
	t, err := readTable(c.File, std)
	if err != nil {
		if c.JSON {
			if e := writeJSON(std.out, struct {
				Problems []problem `json:"problems"`
			}{[]problem{found(err)}}); e != nil {
				return e
			}
		}
		return err
	}
	a := describe(t)
	a.wallReport = reportOn(t, c.Tool)
	if c.JSON {
		return writeJSON(std.out, a)
	}
	return a.tell(std.out)
}

func writeJSON(w io.Writer, v any) error {
	if err := json.MarshalWrite(w, v, jsontext.WithIndent("  ")); err != nil {
		return err
	}
	_, err := io.WriteString(w, "\n")
	return err
}

// found is an error as a problem.
func found(err error) problem {
	p := problem{Text: err.Error()}
	if f := (*table.Fault)(nil); errors.As(err, &f) && f.Known == table.Somewhere {
		p.X, p.Y = &f.At.X, &f.At.Y
	}
	return p
}

func describe(t *table.Table) account {
	d := t.Design()
	a := account{
		Name: d.Name, Unit: d.Unit.String(), Perimeter: t.Length(), Open: t.Open(),
		SmallestRadius: finite(t.SmallestRadius()),
		Loops:          []loopAccount{}, Pieces: []pieceAccount{}, Joints: []jointAccount{}, Coats: []coatAccount{},
		Problems: []problem{},
	}
	if !t.Open() {
		area := t.Area()
		a.Area = &area
	}
	for i, l := range t.Loops() {
		role := "obstacle"
		if i == 0 && !t.Open() {
			role = "wall"
		}
		a.Loops = append(a.Loops, loopAccount{d.Items[l.Item].Shape.Kind(), role, l.S0, l.S1})
	}
	pieces := t.Pieces()
	for i := range pieces {
		p := &pieces[i]
		a.Pieces = append(a.Pieces, pieceAccount{kindNames[p.Kind], d.Items[p.Item].Shape.Kind(), p.Side + 1, p.S0, p.Length})
	}
	for _, j := range t.Joints() {
		a.Joints = append(a.Joints, jointAccount{j.S, j.At.X, j.At.Y, j.Continuity.String(), j.InteriorAngle() * 180 / math.Pi, finite(j.Jump)})
	}
	for _, s := range t.Stretches() {
		a.Coats = append(a.Coats, coatAccount{s.Law.Name(), s.S0, s.S1})
	}
	return a
}

// finite is the number, or nil where it is none.
func finite(x float64) *float64 {
	if math.IsNaN(x) || math.IsInf(x, 0) {
		return nil
	}
	return &x
}

// most is the number of rows of a list that a person is shown.
const most = 24

// tell writes the account for a person.
func (a account) tell(out io.Writer) error {
	w := tabwriter.NewWriter(out, 0, 0, 2, ' ', 0)
	if a.Name != "" {
		fmt.Fprintf(w, "name\t%s\n", a.Name)
	}
	fmt.Fprintf(w, "perimeter\t%.12g %s\n", a.Perimeter, a.Unit)
	if a.Area == nil {
		fmt.Fprintf(w, "area\tnone: there is no outer wall\n")
	} else {
		fmt.Fprintf(w, "area\t%.12g %s²\n", *a.Area, a.Unit)
	}
	if a.SmallestRadius == nil {
		fmt.Fprintf(w, "smallest radius\tnone: every side is straight\n")
	} else {
		fmt.Fprintf(w, "smallest radius\t%.6g %s\n", *a.SmallestRadius, a.Unit)
	}
	a.head(w, a.Unit)
	fmt.Fprintf(w, "loops\t%d\n", len(a.Loops))
	fmt.Fprintf(w, "pieces\t%d\n", len(a.Pieces))
	for i, p := range a.Pieces {
		if i == most {
			fmt.Fprintf(w, "\t%d more\n", len(a.Pieces)-most)
			break
		}
		fmt.Fprintf(w, "\t%s, side %d of the %s, from s = %.6g %s, length %.6g %s\n", p.Kind, p.Side, p.Shape, p.From, a.Unit, p.Length, a.Unit)
	}
	fmt.Fprintf(w, "joints\t%d\n", len(a.Joints))
	for i, j := range a.Joints {
		if i == most {
			fmt.Fprintf(w, "\t%d more\n", len(a.Joints)-most)
			break
		}
		fmt.Fprintf(w, "\t%s\n", j.text(a.Unit))
	}
	for _, c := range a.Coats {
		fmt.Fprintf(w, "coat\t%s from s = %.6g to %.6g %s\n", c.Law, c.From, c.To, a.Unit)
	}
	fmt.Fprintf(w, "problems\tnone\n")
	if err := w.Flush(); err != nil {
		return err
	}
	return a.trust(out)
}

func (j jointAccount) text(unit string) string {
	text := fmt.Sprintf("%s at s = %.6g %s, (%.6g, %.6g) %s", j.Continuity, j.S, unit, j.X, j.Y, unit)
	switch {
	case j.Continuity == table.Corner.String():
		return text + fmt.Sprintf(", interior angle %.6g deg", j.AngleDeg)
	case j.Continuity == table.Tangent.String() && j.Jump != nil:
		return text + fmt.Sprintf(", curvature jumps by %.6g per %s", *j.Jump, unit)
	}
	return text
}
