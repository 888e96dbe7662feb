package tablefile

import (
	"math"
	"strconv"
	"strings"
	"testing"

	"cavitywright/table"

	"pgregory.net/rapid"
)

// drawTolerances sets just what matters to each error, as a file does.
func drawTolerances(t *rapid.T) (all []table.Tolerance) {
	for i := range rapid.IntRange(0, 2).Draw(t, "tolerances") {
		p := table.Tolerance{Name: "etch " + strconv.Itoa(i), Copies: rapid.IntRange(1, mostCopies).Draw(t, "copies"), Effort: real(t, leastEffort, mostEffort, "effort"), Readings: []string{"area", "window-share"}}
		for range rapid.IntRange(1, 4).Draw(t, "errors") {
			f := table.Flaw{Kind: pick(t, "kind", table.SizeFlaw, table.DialFlaw, table.OffsetFlaw, table.ToolFlaw, table.RoughFlaw, table.IndexFlaw), Width: real(t, 0, 10, "width")}
			if f.Kind == table.RoughFlaw {
				f.Length = real(t, 1e-6, 10, "length")
			} else {
				f.Law, f.Mean = pick(t, "law", table.Normal, table.Uniform), real(t, -10, 10, "mean")
			}
			if f.Mean == 0 {
				f.Mean = 0 // minus zero is left out as zero is
			}
			if f.Kind == table.DialFlaw {
				f.Dial = pick(t, "dial", "eps", "1.radius", "coat2.from")
			}
			p.Flaws = append(p.Flaws, f)
		}
		if rapid.Bool().Draw(t, "limits") {
			l := table.Limit{Reading: "area", Lo: real(t, -9, 0, "lo"), Hi: real(t, 0, 9, "hi")}
			switch pick(t, "ends", 0, 1, 2) {
			case 0:
				l.Lo = math.Inf(-1)
			case 1:
				l.Hi = math.Inf(1)
			}
			p.Limits = append(p.Limits, l)
			p.Wavelength = real(t, 0.1, 2, "wavelength")
		}
		all = append(all, p)
	}
	return all
}

func drawWishes(t *rapid.T) (all []table.Wish) {
	goals := func() (all []table.Goal) {
		for range rapid.IntRange(1, 2).Draw(t, "goals") {
			g := table.Goal{Reading: "lobe-width", Aim: pick(t, "aim", table.Maximise, table.Minimise, table.Hold), Weight: real(t, 0.1, 3, "weight")}
			if g.Aim == table.Hold {
				g.Value = real(t, -5, 5, "value")
			}
			all = append(all, g)
		}
		return all
	}
	for i := range rapid.IntRange(0, 2).Draw(t, "wishes") {
		w := table.Wish{Name: "wish " + strconv.Itoa(i), Goals: goals(), Effort: real(t, leastEffort, mostEffort, "effort"), Tries: rapid.IntRange(1, mostTries).Draw(t, "tries"),
			Method: pick(t, "method", table.Simplex, table.Evolution), Free: []table.Freedom{{Dial: "eps", Lo: real(t, -2, -1, "from"), Hi: real(t, 1, 2, "to")}}}
		if rapid.Bool().Draw(t, "front") {
			w.Against = goals()
		}
		if rapid.Bool().Draw(t, "demand") {
			w.Demand = table.Demand{Bend: pick(t, "bend", table.AnyBend, table.Convex, table.StrictlyConvex), LeastRadius: real(t, 0.1, 1, "radius"), AreaLo: real(t, 1, 2, "area"), AreaHi: real(t, 2, 3, "to"),
				BoxX: real(t, 1, 2, "x"), BoxY: real(t, 1, 2, "y"), Symmetry: "D1", Scaled: pick(t, "same", table.Unscaled, table.SamePerimeter, table.SameArea)}
		}
		if rapid.Bool().Draw(t, "robust") {
			w.Under, w.Over, w.Copies = "etch 0", pick(t, "over", table.MeanOfCopies, table.WorstOfCopies), rapid.IntRange(1, 100).Draw(t, "of")
		}
		all = append(all, w)
	}
	return all
}

// TestBadPlans: what no tolerance and no wish can be is refused, with the place.
func TestBadPlans(t *testing.T) {
	const tolerance = `"tolerances": [{"name": "a", "errors": [{"kind": "size", "law": "normal", "width": 0.1}], "copies": 9, "readings": ["area"]}]`
	const wish = `"wishes": [{"name": "a", "goals": [{"reading": "area", "aim": "maximise"}], "free": [{"dial": "radius", "from": 1, "to": 2}], "tries": 9}]`
	read := func(study string) error {
		_, err := Read(strings.NewReader(`{"format": "cavity", "version": 1, "unit": "mm", "items": [{"role": "wall", "shape": "disc", "at": [0, 0], "parameters": {"radius": 1}}],
"study": {` + study + `}}`))
		return err
	}
	for _, good := range []string{tolerance, wish} {
		if err := read(good); err != nil {
			t.Fatal(err)
		}
	}
	for _, x := range []struct{ of, old, new, says string }{
		{tolerance, `"kind": "size", `, ``, `lacks`},
		{tolerance, `"width": 0.1`, `"width": -0.1`, `errors[0].width is -0.1`},
		{tolerance, `"width": 0.1`, `"width": 0.1, "correlation": 2`, `does not matter to an error of this kind`},
		{tolerance, `"size"`, `"roughness"`, `lacks`},
		{tolerance, `"size"`, `"dial"`, `lacks "dial"`},
		{tolerance, `[{"kind": "size", "law": "normal", "width": 0.1}]`, `[]`, `has no errors`},
		{tolerance, `["area"]`, `["area"], "limits": [{"reading": "area"}]`, `has no end`},
		{tolerance, `["area"]`, `["area"], "limits": [{"reading": "area", "at-least": 2, "at-most": 1}]`, `wrong way round`},
		{wish, `"maximise"`, `"hold"`, `do not go together`},
		{wish, `"from": 1`, `"from": 3`, `is free over no range`},
		{wish, `"tries": 9`, `"tries": 9, "under": "x"`, `says only half`},
		{wish, `"tries": 9`, `"tries": 9, "demand": {"box": [1, 0]}`, `is no box`},
		{wish, `[{"reading": "area", "aim": "maximise"}]`, `[]`, `has no goals`},
	} {
		changed := strings.Replace(x.of, x.old, x.new, 1)
		if changed == x.of {
			t.Fatalf("%q changes nothing", x.old)
		}
		if err := read(changed); err == nil || !strings.Contains(err.Error(), x.says) {
			t.Errorf("%s in place of %s: %v, not %q", x.new, x.old, err, x.says)
		}
	}
}
