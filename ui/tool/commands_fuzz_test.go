package tool

import (
	"go/ast"
	"go/parser"
	"go/token"
	"io/fs"
	"math"
	"path/filepath"
	"reflect"
	"slices"
	"strings"
	"testing"

	"cavitywright/table"
	"cavitywright/table/dial"
	"cavitywright/table/edit"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/table/wall"

	"gonum.org/v1/gonum/spatial/r2"
)

// commandDeeds are the commands, those of package edit as a form or a menu
// would issue them, with sensible and with senseless values.
var commandDeeds = []deed{
	command("place", 5, func(p *person) edit.Command { return edit.Place{Item: p.item()} }),
	command("remove", 3, func(p *person) edit.Command { return edit.Remove{Item: p.anItem()} }),
	command("shift", 4, func(p *person) edit.Command { return edit.Shift{Item: p.anItem(), Place: p.place()} }),
	command("drag a handle", 4, func(p *person) edit.Command {
		i := p.oneItem()
		return edit.Drag{Item: i, Handle: p.rng.IntN(len(p.s.Table().Design().Items[i].Shape.Handles())), To: p.somewhere()}
	}),
	command("set a value", 10, func(p *person) edit.Command {
		i := p.oneItem()
		k := 0
		if f, ok := p.s.Table().Design().Items[i].Shape.(shape.Figure); ok {
			k = p.rng.IntN(len(f.Values()))
		}
		return edit.SetValue{Item: i, Param: k, Value: p.number()}
	}),
	command("reshape", 12, (*person).reshape),
	command("set the role", 3, func(p *person) edit.Command {
		return edit.SetRole{Item: p.anItem(), Role: table.Role(p.rng.IntN(2))}
	}),
	command("set the head", 2, func(p *person) edit.Command {
		u := table.Units()
		return edit.SetHead{Name: p.words(), Notes: p.words(), Unit: u[p.rng.IntN(len(u))]}
	}),
	command("launch", 3, func(p *person) edit.Command { return edit.Launch{New: []table.Launch{p.launch()}} }),
	command("set the study", 4, (*person).study),
	command("set the coats", 4, func(p *person) edit.Command { return edit.SetCoats{Coats: p.coats()} }),
	command("coat and bare wall", 4, func(p *person) edit.Command {
		return edit.Coating{Bare: p.law(), Coats: p.coats(), Name: "coat"}
	}),
	command("turn into a free wall", 4, func(p *person) edit.Command {
		return edit.Convert{Item: p.anItem(), Within: p.size * math.Exp(-2-10*p.rng.Float64())}
	}),
	command("become the wall", 1, func(p *person) edit.Command { return edit.BecomeWall{Item: p.anItem()} }),
	command("arrange", 2, func(p *person) edit.Command {
		return edit.Arrange{Items: []int{p.anItem(), p.anItem()}, Places: []plane.Similarity{p.place(), p.place()}, Name: "arrange"}
	}),
	command("add", 2, func(p *person) edit.Command {
		it := p.item()
		it.Role = table.Post
		return edit.Add{Items: []table.Item{it}}
	}),
	command("refused command", 1, func(p *person) edit.Command { return Refused(fs.ErrInvalid) }),
	command("turn a dial", 6, (*person).turn),
	command("slide a coat by numbers", 5, (*person).coatByNumbers),
	command("fill with a medium", 1, func(p *person) edit.Command { return Filled(p.s.Table(), 1+3*p.rng.Float64()) }),
	command("bare wall", 2, func(p *person) edit.Command { return Barer(p.s.Table(), p.law()) }),
	asked("delete", 4, func(p *person) error { return p.e.Delete() }),
	asked("copy", 2, func(p *person) error { return p.e.Copy() }),
	asked("paste", 2, func(p *person) error { return p.e.Paste() }),
	asked("duplicate", 2, func(p *person) error { return p.e.Duplicate() }),
	asked("align", 3, func(p *person) error { return p.e.Align(Line(p.rng.IntN(8))) }),
	asked("mirror", 2, func(p *person) error { return p.e.Mirror() }),
	asked("split a span", 3, func(p *person) error { return p.e.Split() }),
	asked("close the chain", 2, func(p *person) error { return p.e.CloseChain() }),
	asked("set a radius", 2, func(p *person) error { return p.e.SetRadius(p.number()) }),
	asked("delete a coat", 2, func(p *person) error { return p.e.Coats().Delete() }),
	asked("duplicate a coat", 2, func(p *person) error { return p.e.Coats().Duplicate() }),
	asked("coat by a double click", 2, func(p *person) error { return p.e.Coats().Double(p.somewhere(), p.reach) }),
	asked("seed evenly", 2, func(p *person) error { return SeedEvenly(p.s) }),
	asked("clear the launches", 4, func(p *person) error { return ClearLaunches(p.s) }),
	{name: "another law to lay", often: 2, do: func(p *person) { p.s.Settings.Law = p.law() }},
}

// command is the deed of a command of the session.
func command(name string, often int, make func(*person) edit.Command) deed {
	d := asked(name, often, func(p *person) error { return p.s.Do(make(p)) })
	d.make = make
	return d
}

// asked is the deed of something that may be refused.
func asked(name string, often int, f func(*person) error) deed {
	return deed{name: name, often: often, do: func(p *person) { p.mayRefuse(func() error { return f(p) }) }}
}

// anItem is mostly one that is there.
func (p *person) anItem() int {
	n := len(p.s.Table().Design().Items)
	if p.rng.IntN(30) == 0 {
		return n - p.rng.IntN(2)*(n+1)
	}
	return p.rng.IntN(n)
}

// oneItem is one that is there.
func (p *person) oneItem() int { return p.rng.IntN(len(p.s.Table().Design().Items)) }

// number is a length, a share, or something that no form should take.
func (p *person) number() float64 {
	switch p.rng.IntN(12) {
	case 0:
		return []float64{0, -1, math.NaN(), math.Inf(1), 1e308, 1e-308, 1}[p.rng.IntN(7)]
	case 1, 2, 3:
		return p.rng.Float64()
	}
	return p.size * math.Exp(-5*p.rng.Float64())
}

func (p *person) place() plane.Similarity {
	s := plane.Identity()
	s.Shift = p.somewhere()
	if p.rng.IntN(2) == 0 {
		s.Angle = 2 * math.Pi * (p.rng.Float64() - 0.5)
		s.Scale = math.Exp(p.rng.NormFloat64())
	}
	if p.rng.IntN(40) == 0 {
		s.Scale = p.number()
	}
	return s
}

// item is a figure of the catalogue, mostly small and an obstacle.
func (p *person) item() table.Item {
	all := shape.Catalogue()
	k := all[p.rng.IntN(len(all))]
	v := param.Defaults(k.Specs)
	for i, s := range k.Specs {
		if p.rng.IntN(4) == 0 {
			v[i] = s.Clamp(v[i] * math.Exp(0.5*p.rng.NormFloat64()))
		}
	}
	f, err := shape.New(k.Name, v)
	if err != nil {
		f, _ = shape.New(k.Name, param.Defaults(k.Specs))
	}
	it := table.Item{Shape: f, Place: p.place(), Role: table.Post}
	it.Place.Scale = p.size * math.Exp(-2-2*p.rng.Float64()) / 20
	if p.rng.IntN(6) == 0 {
		it.Place, it.Role = plane.Identity(), table.Wall
	}
	return it
}

func (p *person) law() wall.Law {
	all := wall.Kinds()
	k := all[p.rng.IntN(len(all))]
	v := param.Defaults(k.Specs)
	for i, s := range k.Specs {
		if p.rng.IntN(2) == 0 {
			v[i] = s.Clamp(s.Lo + p.rng.Float64()*(s.Hi-s.Lo))
			if s.Unit == param.Count {
				v[i] = math.Round(v[i])
			}
		}
	}
	l, err := wall.Make(k.Name, v)
	if err != nil {
		p.fail("a law within its ranges is refused: %v", err)
	}
	return l
}

// coats are those that are there, with one more, one changed or one gone.
func (p *person) coats() []table.Coat {
	c := slices.Clone(p.s.Table().Design().Coats)
	if n := len(c); n > 0 && p.rng.IntN(3) == 0 {
		return slices.Delete(c, n-1, n)
	}
	a, b := p.rng.Float64(), p.rng.Float64()
	if p.rng.IntN(12) != 0 {
		a, b = min(a, b), max(a, b)
	}
	return append(c, table.Coat{Item: p.anItem(), Side: p.rng.IntN(7) - 1, From: a, To: b, Law: p.law()})
}

func (p *person) rngPattern() table.Pattern { return table.Pattern(p.rng.IntN(3)) }

func (p *person) launch() table.Launch {
	l := table.Launch{S: p.rng.Float64(), P: 2*p.rng.Float64() - 1, Pattern: table.Pattern(p.rng.IntN(5)), Count: 1 + p.rng.IntN(20),
		Spread: p.rng.Float64(), Region: table.Region{S0: 0, S1: p.rng.Float64(), P0: -p.rng.Float64(), P1: p.rng.Float64()}}
	if p.rng.IntN(2) == 0 {
		l.From, l.Point, l.Angle = table.Inside, p.somewhere(), p.rng.Float64()*6
	}
	return l
}

func (p *person) study() edit.Command {
	s := p.s.Table().Design().Study
	switch p.rng.IntN(4) {
	case 0:
		s.Seed = p.rng.Uint64() >> p.rng.IntN(60)
	case 1:
		s.Bounces = p.rng.IntN(200_000) - 10
	case 2:
		s.Display = table.Display{Sense: table.Sense(p.rng.IntN(2)), Position: table.Position(p.rng.IntN(2)), Momentum: table.Momentum(p.rng.IntN(2))}
	default:
		s.Launches = append(slices.Clone(s.Launches), p.launch())
		s.Launches = s.Launches[max(0, len(s.Launches)-3):]
	}
	return edit.SetStudy{Study: s, Name: "the study"}
}

func (p *person) words() string {
	return []string{"", "Plate 7", "Scheibe für den Laser, 3 µm", "a \"quoted\" name \\ with\nlines", strings.Repeat("long ", 40)}[p.rng.IntN(5)]
}

// turn turns any number of the design, as a slider would.
func (p *person) turn() edit.Command {
	d := p.s.Table().Design()
	all := dial.All(d)
	one := all[p.rng.IntN(len(all))]
	v, err := one.Value(d)
	if err != nil {
		p.fail("the number %s has no value: %v", one, err)
	}
	return Turn{one, v*(1+0.1*p.rng.NormFloat64()) + 0.01*p.rng.NormFloat64()}
}

// coatByNumbers is what the values of the selected coat do.
func (p *person) coatByNumbers() edit.Command {
	r, ok := SelectedCoat(p.s)
	if !ok || r.Loop < 0 {
		return Refused(fs.ErrNotExist)
	}
	t := p.s.Table()
	switch p.rng.IntN(5) {
	case 0:
		return r.WithStart(t, p.number())
	case 1:
		return r.WithEnd(t, p.number())
	case 2:
		return r.WithWidth(t, p.number())
	case 3:
		return r.WithFractions(t, p.rng.Float64()*1.2-0.1, p.rng.Float64()*1.2-0.1)
	}
	return r.Relaid(t, p.law())
}

// reshape is what the form of a free wall does with a node or span of it.
func (p *person) reshape() edit.Command {
	i := p.anItem()
	items := p.s.Table().Design().Items
	if i < 0 || i >= len(items) {
		return edit.Reshape{Item: i, Shape: items[0].Shape, Name: "reshape"}
	}
	f, ok := items[i].Shape.(shape.Freeform)
	if !ok {
		return Refused(fs.ErrNotExist)
	}
	return edit.Reshape{Item: i, Shape: p.reshaped(f), Name: "reshape"}
}

func (p *person) reshaped(f shape.Freeform) shape.Freeform {
	n := p.rng.IntN(len(f.Nodes()))
	turn := 2 * math.Pi * p.rng.Float64()
	switch p.rng.IntN(14) {
	case 0:
		return f.InsertNode(n, p.rng.Float64())
	case 1:
		return f.DeleteNode(n)
	case 2:
		return f.SetSpan(n, shape.SpanKind(p.rng.IntN(4)))
	case 3:
		return f.SetJoint(n, shape.Joint(p.rng.IntN(3)))
	case 4:
		return f.MoveNodes(map[int]r2.Vec{n: p.somewhere(), p.rng.IntN(len(f.Nodes())): p.somewhere()})
	case 5:
		return f.SetBulge(n, p.rng.NormFloat64())
	case 6:
		return f.WithLength(n, p.number())
	case 7:
		return f.WithDirection(n, turn)
	case 8:
		return f.WithInteriorAngle(n, turn)
	case 9:
		return f.WithRadius(n, p.number())
	case 10:
		return f.WithSagitta(n, p.number())
	case 11:
		return f.WithAxes(n, p.number(), p.number(), turn)
	case 12:
		return f.SetFillet(n, p.number())
	}
	s := shape.Symmetry{Fold: p.rng.IntN(5), Mirror: p.rng.IntN(2) == 0, Centre: p.somewhere(), Axis: turn}
	g, err := f.WithSymmetry(s)
	if err != nil {
		return f.Forward()
	}
	return g
}

// TestDeedsHaveEveryCommand holds the list to package edit: a command that is
// added there has to be tried here.
func TestDeedsHaveEveryCommand(t *testing.T) {
	files, err := filepath.Glob("../../table/edit/*.go")
	if err != nil {
		t.Fatal(err)
	}
	var want []string
	for _, path := range files {
		f, err := parser.ParseFile(token.NewFileSet(), path, nil, parser.SkipObjectResolution)
		if err != nil {
			t.Fatal(err)
		}
		for _, d := range f.Decls {
			fn, ok := d.(*ast.FuncDecl)
			if ok && fn.Name.Name == "Apply" && fn.Recv != nil && !strings.HasSuffix(path, "_test.go") {
				want = append(want, fn.Recv.List[0].Type.(*ast.Ident).Name)
			}
		}
	}
	if len(want) < 10 {
		t.Fatalf("only %d commands found in package edit", len(want))
	}
	tried := map[string]bool{}
	p := newPerson(t, 11) // the pebble's seed: a free wall, for Reshape
	for _, d := range commandDeeds {
		for range 20 {
			if d.make != nil {
				tried[reflect.TypeOf(d.make(p)).Name()] = true
			}
		}
	}
	for _, w := range want {
		if !tried[w] {
			t.Errorf("the command edit.%s is never tried", w)
		}
	}
}
