package wish

import (
	"fmt"
	"math"
	"strings"

	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/study"
	"cavitywright/table"
	"cavitywright/table/plane"

	"github.com/go-json-experiment/json"
	"github.com/go-json-experiment/json/jsontext"
)

// Words are a term with its error and unit.
func (t Term) Words() string {
	text := fmt.Sprintf("%s %.5g", t.Name, t.Value)
	if t.StdErr > 0 {
		text += fmt.Sprintf(" ± %.1g", t.StdErr)
	}
	if t.Unit != "" {
		text += " " + t.Unit
	}
	return text
}

func (y *Try) words() string {
	var words []string
	for _, t := range y.Terms {
		words = append(words, t.Words())
	}
	return strings.Join(words, ", ")
}

// Lines say what was sought and what came of it, in sentences.
func (f *Found) Lines() []string {
	var free []string
	for k, x := range f.Plan.Free {
		free = append(free, fmt.Sprintf("%s from %.5g to %.5g%s", f.Label(k), x.Lo, x.Hi, f.unit(k)))
	}
	sought := fmt.Sprintf("Sought: %s; free are %s; %d walls tried, effort %g, seed %d.", f.Words(), strings.Join(free, ", "), len(f.Tries), f.Plan.Effort, f.Base.Design().Study.Seed)
	lines := []string{sought}
	if f.under != nil {
		what := "the mean"
		if f.Plan.Over == table.WorstOfCopies {
			what = "the worst"
		}
		lines = append(lines, fmt.Sprintf("What counts of a wall is %s over %d copies by the tolerance %q.", what, f.Plan.Copies, f.Plan.Under))
	}
	if f.Drawn != nil {
		lines = append(lines, f.drawnWords())
	}
	switch {
	case f.Best == nil:
		lines = append(lines, "No wall that was tried keeps to what is demanded; widen the ranges, or demand less.")
		if n := len(f.Tries); n > 0 {
			lines = append(lines, fmt.Sprintf("The last one: %s", capital(f.Tries[n-1].Fault)))
		}
		return lines
	case f.Fronted():
		if len(f.Front) == 1 {
			lines = append(lines, "The two wishes do not work against each other here: one wall is the best for both.")
		} else {
			lines = append(lines, fmt.Sprintf("%d walls make the front: none of them is beaten in both wishes by another.", len(f.Front)))
		}
		return append(lines, fmt.Sprintf("Nearest to the best of both: %s, at %s.", f.Best.words(), f.Place(f.Best.At)))
	}
	lines = append(lines, fmt.Sprintf("Best: %s, at %s.", f.Best.words(), f.known()))
	for k, x := range f.Plan.Free {
		d := x.Hi - x.Lo
		lo, hi := f.Best.At[k]-x.Lo < 1e-3*d, x.Hi-f.Best.At[k] < 1e-3*d
		if lo && x.Lo > f.Specs[k].Lo || hi && x.Hi < f.Specs[k].Hi { // a number may go no farther than its own range
			lines = append(lines, fmt.Sprintf("%s lies at an end of its range: a wider range may bring a better wall.", capital(f.Label(k))[:len(f.Label(k))]))
		}
	}
	return lines
}

// drawnWords say how the wall as drawn is judged; its dials are held to their
// ranges.
func (f *Found) drawnWords() string {
	if !f.Drawn.Sound() {
		return fmt.Sprintf("As drawn the wall is none that may be answered: %s", capital(f.Drawn.Fault))
	}
	return fmt.Sprintf("As drawn: %s, at %s.", f.Drawn.words(), f.Place(f.Drawn.At))
}

// known is the place of the best with how well it is known.
func (f *Found) known() string {
	var words []string
	for k, v := range f.Best.At {
		text := fmt.Sprintf("%s = %.6g", f.Label(k), v)
		if k < len(f.BestErr) && !math.IsNaN(f.BestErr[k]) {
			text += fmt.Sprintf(" ± %.2g", f.BestErr[k])
		}
		words = append(words, text+f.unit(k))
	}
	return strings.Join(words, ", ")
}

// capital makes a sentence of an error's text.
func capital(s string) string {
	if s == "" {
		return s
	}
	s = strings.ToUpper(s[:1]) + s[1:]
	if !strings.HasSuffix(s, ".") {
		s += "."
	}
	return s
}

// Wall is a wall that was found over the wall as drawn, which is dashed. program
// is the name and version that the caption ends with.
func (f *Found) Wall(y *Try, program string) figure.Paths {
	p := figure.Paths{Unit: f.Base.Design().Unit.String()}
	for _, l := range measure.Outline(y.Table, 1e-4*plane.Diagonal(y.Table.Bounds())) {
		if l.Role != figure.JointMark {
			p.Lines = append(p.Lines, l)
		}
	}
	for _, l := range measure.Outline(f.Base, 1e-4*plane.Diagonal(f.Base.Bounds())) {
		if l.Role == figure.Wall {
			l.Role, l.At = figure.Construct, nil
			p.Lines = append(p.Lines, l)
		}
	}
	p.Caption = []string{fmt.Sprintf("%sthe wall found (wall %d tried) over the wall as drawn (dashed): %s, at %s.", measure.Head(f.Base), y.N, y.words(), f.Place(y.At)), measure.Foot(y.Table, program)}
	return p
}

// Course is the best cost by the walls tried, or, of two wishes, the walls tried
// and the front between them.
func (f *Found) Course(program string) figure.Series {
	s := figure.Series{Caption: append(f.Lines(), measure.Foot(f.Base, program))}
	if f.Fronted() {
		f.drawFront(&s)
	} else {
		f.drawCourse(&s)
	}
	for _, c := range s.Curves {
		for i := range c.X {
			s.X.Lo, s.X.Hi = math.Min(s.X.Lo, c.X[i]), math.Max(s.X.Hi, c.X[i])
			s.Y.Lo, s.Y.Hi = math.Min(s.Y.Lo, c.Y[i]), math.Max(s.Y.Hi, c.Y[i])
		}
	}
	for _, a := range []*figure.Axis{&s.X, &s.Y} {
		if a.Lo > a.Hi {
			a.Lo, a.Hi = 0, 1
		}
		d := math.Max(0.05*(a.Hi-a.Lo), 1e-9)
		a.Lo, a.Hi = a.Lo-d, a.Hi+d
	}
	return s
}

// drawCourse draws the only goal itself; of a sum what it comes to.
func (f *Found) drawCourse(s *figure.Series) {
	s.X = figure.Axis{Label: "walls tried", Lo: math.Inf(1), Hi: math.Inf(-1)}
	s.Y = figure.Axis{Label: "sum that is made small", Lo: math.Inf(1), Hi: math.Inf(-1)}
	height := func(y *Try) float64 { return y.Cost }
	if len(f.goals) == 1 {
		s.Y.Label, height = f.goals[0].Reading, func(y *Try) float64 { return y.Terms[0].Value }
		if f.Drawn.Sound() {
			s.Y.Unit = f.Drawn.Terms[0].Unit
		}
	}
	tried, best := figure.Curve{Name: "tried", Form: figure.Points, Hue: 1}, figure.Curve{Name: "best so far"}
	var least *Try
	for _, y := range f.Tries {
		if !y.Sound() {
			continue
		}
		if least == nil || y.Cost < least.Cost {
			least = y
		}
		tried.X, tried.Y = append(tried.X, float64(y.N)), append(tried.Y, height(y))
		best.X, best.Y = append(best.X, float64(y.N)), append(best.Y, height(least))
	}
	s.Curves = []figure.Curve{tried, best}
}

// Heights are a wall's places on the axes of the front: the goals themselves
// where each wish has one, else what each is made small by.
func (f *Found) Heights(y *Try) (first, against float64) {
	first, against = y.Cost, y.Against
	if n := len(f.Plan.Goals); n == 1 {
		first = y.Terms[0].Value
	}
	if n := len(f.Plan.Against); n == 1 {
		against = y.Terms[len(y.Terms)-1].Value
	}
	return first, against
}

func (f *Found) drawFront(s *figure.Series) {
	label := func(goals []table.Goal) figure.Axis {
		a := figure.Axis{Label: "sum that is made small", Lo: math.Inf(1), Hi: math.Inf(-1)}
		if len(goals) == 1 {
			a.Label = goals[0].Reading
		}
		return a
	}
	s.X, s.Y = label(f.Plan.Goals), label(f.Plan.Against)
	tried, edge := figure.Curve{Name: "tried", Form: figure.Points, Hue: 1}, figure.Curve{Name: "front"}
	for _, y := range f.Tries {
		if y.Sound() {
			a, b := f.Heights(y)
			tried.X, tried.Y = append(tried.X, a), append(tried.Y, b)
		}
	}
	for _, y := range f.Front {
		a, b := f.Heights(y)
		edge.X, edge.Y = append(edge.X, a), append(edge.Y, b)
	}
	s.Curves = []figure.Curve{tried, edge}
}

// spoken is what was found in the form of its JSON.
type spoken struct {
	Name   string      `json:"name"`
	Plan   string      `json:"wish"`
	Unit   string      `json:"unit"`
	Seed   uint64      `json:"seed"`
	Effort float64     `json:"effort"`
	Dials  []string    `json:"dials"`
	Drawn  *spokenTry  `json:"drawn"`
	Best   *spokenTry  `json:"best"` // null where no wall keeps to what is demanded
	Front  []spokenTry `json:"front"`
	Tries  []spokenTry `json:"tries"`
	Lines  []string    `json:"lines"`
}

type spokenTry struct {
	N      int            `json:"wall"`
	At     []float64      `json:"at"`
	Err    []study.Number `json:"at_stderr,omitempty"`
	Fault  string         `json:"fault"`
	Values []spokenTerm   `json:"values"`
}

type spokenTerm struct {
	Name   string       `json:"name"`
	Value  study.Number `json:"value"`
	StdErr study.Number `json:"stderr"`
	Unit   string       `json:"unit"`
}

func said(y *Try) spokenTry {
	s := spokenTry{N: y.N, At: y.At, Fault: y.Fault, Values: []spokenTerm{}}
	for _, t := range y.Terms {
		s.Values = append(s.Values, spokenTerm{t.Name, study.Number(t.Value), study.Number(t.StdErr), t.Unit})
	}
	return s
}

// JSON is what was found for another program.
func (f *Found) JSON() ([]byte, error) {
	d := f.Base.Design()
	s := spoken{Name: d.Name, Plan: f.Plan.Name, Unit: d.Unit.String(), Seed: d.Study.Seed, Effort: f.Plan.Effort, Front: []spokenTry{}, Tries: []spokenTry{}, Lines: f.Lines()}
	for _, x := range f.Dials {
		s.Dials = append(s.Dials, x.String())
	}
	if f.Drawn != nil {
		s.Drawn = new(said(f.Drawn))
	}
	if f.Best != nil {
		s.Best = new(said(f.Best))
		for _, e := range f.BestErr {
			s.Best.Err = append(s.Best.Err, study.Number(e))
		}
	}
	for _, y := range f.Front {
		s.Front = append(s.Front, said(y))
	}
	for _, y := range f.Tries {
		s.Tries = append(s.Tries, said(y))
	}
	b, err := json.Marshal(s, jsontext.WithIndent("  "), json.Deterministic(true))
	return append(b, '\n'), err
}
