package main

import (
	"fmt"
	"io"
	"math"
	"text/tabwriter"

	"cavitywright/table"
	"cavitywright/table/survey"

	"gonum.org/v1/gonum/spatial/r2"
)

// wallReport is what check says of a wall beyond its pieces, in the form of its
// JSON. Lengths are in the table's unit, curvatures per that unit.
type wallReport struct {
	MeanChord  *float64        `json:"mean_chord"`                 // null without an outer wall
	Focusing   *bendReport     `json:"smallest_focusing_radius"`   // null where no wall focuses
	Dispersing *bendReport     `json:"smallest_dispersing_radius"` // null where no wall disperses
	Tool       *toolReport     `json:"tool"`                       // null where none is stated
	Jumps      []jumpReport    `json:"curvature_jumps"`
	Smoothness string          `json:"smoothness"` // C0, C1, C2 or analytic
	Convexity  convexityReport `json:"convexity"`
	Flatness   flatnessReport  `json:"flatness"`
	Symmetry   symmetryReport  `json:"symmetry"`
	Curvature  []curvatureRun  `json:"curvature"`
	Trust      []string        `json:"trust"` // what to rely on, in sentences
}

type placeReport struct {
	S float64 `json:"s"`
	X float64 `json:"x"`
	Y float64 `json:"y"`
}

type stretchReport struct {
	From float64 `json:"from"` // s; greater than To where it runs over the start of its loop
	To   float64 `json:"to"`
}

type bendReport struct {
	Radius float64 `json:"radius"` // 0 at a cusp
	placeReport
}

type jumpReport struct {
	placeReport
	Before float64 `json:"before"`
	After  float64 `json:"after"`
}

type toolReport struct {
	Radius    float64        `json:"radius"`
	Untouched float64        `json:"untouched_length"`
	Places    []beyondReport `json:"places"`
}

type beyondReport struct {
	stretchReport
	X    float64  `json:"x"`
	Y    float64  `json:"y"`
	Why  string   `json:"why"`  // corner, tight bend or narrow place
	Left *float64 `json:"left"` // distance kept from a corner of straight sides, else null
}

type convexityReport struct {
	Convex    bool            `json:"convex"` // of the outer wall
	Strictly  bool            `json:"strictly"`
	Dents     []stretchReport `json:"dents"`
	Obstacles int             `json:"obstacles"`
}

type flatnessReport struct {
	Length    float64         `json:"straight_length"`
	Straight  []stretchReport `json:"straight"`
	Zeros     []placeReport   `json:"curvature_zeros"`
	Strips    []stripReport   `json:"parallel_strips"`
	Diameters []arcReport     `json:"arcs_with_diameters"`
}

type stripReport struct {
	A      stretchReport `json:"a"`
	B      stretchReport `json:"b"`
	Across float64       `json:"across"`
	Along  float64       `json:"free_width"`
}

type arcReport struct {
	stretchReport
	Radius   float64 `json:"radius"`
	SweepDeg float64 `json:"sweep_deg"`
}

type symmetryReport struct {
	Group      string    `json:"group"`
	Rotations  int       `json:"rotations"`   // 0: all
	MirrorsDeg []float64 `json:"mirrors_deg"` // from x; empty for O(2), where every line is one
	X          float64   `json:"x"`           // the centre
	Y          float64   `json:"y"`
	Within     float64   `json:"within"` // the tolerance
}

type curvatureRun struct {
	Loop  int       `json:"loop"` // from 1
	S     []float64 `json:"s"`
	Kappa []float64 `json:"curvature"`
}

func reportOn(t *table.Table, tool float64) wallReport {
	r := survey.Of(t, tool)
	w := wallReport{
		MeanChord: finite(r.MeanChord), Focusing: bend(r.Bend.Focusing), Dispersing: bend(r.Bend.Dispersing),
		Jumps: []jumpReport{}, Smoothness: r.Class.String(), Flatness: flatness(r.Flatness), Trust: r.Sentences(),
		Convexity: convexityReport{r.Convexity.Convex, r.Convexity.Strict, stretches(r.Convexity.Dents), r.Convexity.Posts},
		Symmetry: symmetryReport{Group: r.Symmetry.Name(), Rotations: r.Symmetry.Order, MirrorsDeg: []float64{},
			X: r.Symmetry.Centre.X, Y: r.Symmetry.Centre.Y, Within: r.Symmetry.Within},
	}
	for _, m := range r.Symmetry.Mirrors {
		w.Symmetry.MirrorsDeg = append(w.Symmetry.MirrorsDeg, m*180/math.Pi)
	}
	for _, j := range r.Jumps {
		w.Jumps = append(w.Jumps, jumpReport{point(j.S, j.At), j.Before, j.After})
	}
	for _, run := range r.Bend.Runs {
		w.Curvature = append(w.Curvature, curvatureRun{run.Loop + 1, run.S, run.Kappa})
	}
	if r.Tool.Checked {
		w.Tool = &toolReport{r.Tool.Radius, r.Tool.Length, []beyondReport{}}
		for _, b := range r.Tool.Beyond {
			w.Tool.Places = append(w.Tool.Places, beyondReport{span(b.Stretch), b.At.X, b.At.Y, b.Why.String(), finite(b.Left)})
		}
	}
	return w
}

func point(s float64, at r2.Vec) placeReport { return placeReport{s, at.X, at.Y} }

func bend(e survey.Extreme) *bendReport {
	if !e.Known() {
		return nil
	}
	return &bendReport{e.Radius, point(e.Place.S, e.Place.At)}
}

func span(s survey.Stretch) stretchReport { return stretchReport{s.S0, s.S1} }

func stretches(list []survey.Stretch) []stretchReport {
	out := []stretchReport{}
	for _, s := range list {
		out = append(out, span(s))
	}
	return out
}

func flatness(f survey.Flatness) flatnessReport {
	out := flatnessReport{f.Length, stretches(f.Flats), []placeReport{}, []stripReport{}, []arcReport{}}
	for _, z := range f.Zeros {
		out.Zeros = append(out.Zeros, point(z.S, z.At))
	}
	for _, s := range f.Strips {
		out.Strips = append(out.Strips, stripReport{span(s.A), span(s.B), s.Across, s.Along})
	}
	for _, a := range f.Diameters {
		out.Diameters = append(out.Diameters, arcReport{span(a.Stretch), a.Radius, a.Sweep * 180 / math.Pi})
	}
	return out
}

// head writes the numbers of the report for a person.
func (w wallReport) head(out *tabwriter.Writer, unit string) {
	if w.MeanChord != nil {
		fmt.Fprintf(out, "mean chord\t%.12g %s\n", *w.MeanChord, unit)
	}
	for _, b := range []struct {
		name string
		at   *bendReport
	}{{"smallest focusing radius", w.Focusing}, {"smallest dispersing radius", w.Dispersing}} {
		if b.at != nil {
			fmt.Fprintf(out, "%s\t%.6g %s at s = %.6g %s\n", b.name, b.at.Radius, unit, b.at.S, unit)
		}
	}
	fmt.Fprintf(out, "smoothness\t%s\nsymmetry\t%s\n", w.Smoothness, w.Symmetry.Group)
}

// trust writes the sentences for a person.
func (w wallReport) trust(out io.Writer) error {
	if _, err := fmt.Fprintf(out, "\nWhat to trust\n"); err != nil {
		return err
	}
	for _, s := range w.Trust {
		if _, err := fmt.Fprintf(out, "  %s\n", s); err != nil {
			return err
		}
	}
	return nil
}
