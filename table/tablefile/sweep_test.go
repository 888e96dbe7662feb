package tablefile

import (
	"strings"
	"testing"

	"cavitywright/table"

	"pgregory.net/rapid"
)

// swept has a sweep of each kind: a range with orbits, a grid with a list, a
// sample.
func swept(t testing.TB) table.Design {
	d := onlyWall(figure(t, "limacon", nil))
	d.Name = "Larkmoor microdisc 5"
	d.Study.Sweeps = []table.DialSweep{
		{Name: "deformation", Turns: []table.Turn{{Dial: "1.eps", From: 0.1, To: 0.45, Points: 15}}, Readings: []string{"lyapunov-per-length", "chaotic-share-section"}, Effort: 0.5, Orbits: 4},
		{Name: "both", Turns: []table.Turn{{Dial: "1.eps", From: 0.3, To: 0.46, Points: 9}, {Dial: "coat1.te", Values: []float64{0, 1}}}, Readings: []string{"window-share"}, Effort: 1},
		{Name: "box", Turns: []table.Turn{{Dial: "1.eps", From: 0, To: 0.5, Points: 2}, {Dial: "1.radius", From: 1, To: 1.0 / 3, Points: 2}}, Sample: 64, Readings: []string{"area"}, Effort: 4},
	}
	return d
}

func drawSweeps(t *rapid.T) (all []table.DialSweep) {
	for i := range rapid.IntRange(0, 2).Draw(t, "sweeps") {
		s := table.DialSweep{Name: rapid.StringN(1, 9, -1).Draw(t, "name") + strings.Repeat("'", i), Effort: real(t, leastEffort, mostEffort, "effort"),
			Sample: rapid.IntRange(0, mostSample).Draw(t, "sample"), Readings: []string{"area", "perimeter"}}
		for range rapid.IntRange(1, 3).Draw(t, "dials") {
			turn := table.Turn{Dial: "1.x", From: real(t, -9, 9, "from"), To: real(t, -9, 9, "to"), Points: rapid.IntRange(2, mostValues).Draw(t, "points")}
			if rapid.Bool().Draw(t, "listed") {
				turn = table.Turn{Dial: "1.y", Values: []float64{real(t, -9, 9, "first"), real(t, -9, 9, "second")}}
			}
			s.Turns = append(s.Turns, turn)
		}
		if len(s.Turns) == 1 {
			s.Orbits = rapid.IntRange(0, mostPeriod).Draw(t, "orbits")
		}
		if i > 0 && s.Name == all[0].Name {
			continue
		}
		all = append(all, s)
	}
	return all
}

// TestBadSweeps: what no sweep can be is refused, with the place.
func TestBadSweeps(t *testing.T) {
	const good = `{"name": "a", "dials": [{"dial": "eps", "from": 0, "to": 1, "points": 3}], "readings": ["area"]}`
	read := func(sweeps string) error {
		_, err := Read(strings.NewReader(`{"format": "cavity", "version": 1, "unit": "mm", "items": [{"role": "wall", "shape": "disc", "at": [0, 0], "parameters": {"radius": 1}}],
"study": {"sweeps": [` + sweeps + `]}}`))
		return err
	}
	if err := read(good); err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct{ old, new, says string }{
		{`"a"`, `""`, `study.sweeps[0].name is empty (line 2, column 31); give it a name.`},
		{`"from": 0, `, ``, `study.sweeps[0].dials[0] lacks "from" (line 2, column 46); write it in.`},
		{`"points": 3`, `"points": 1`, `study.sweeps[0].dials[0].points is 1 (line 2, column 92); give a whole number from 2 to 5000.`},
		{`"points": 3`, `"points": 3, "values": [1]`, `study.sweeps[0].dials[0] has both a range and values (line 2, column 46); keep one of the two.`},
		{`"from": 0, "to": 1, "points": 3`, `"values": []`, `study.sweeps[0].dials[0] has no values (line 2, column 46); give one at least.`},
		{`"readings"`, `"orbits": 4, "sample": 2, "readings"`, ``},
		{`}], `, `}, {"dial": "x", "values": [1]}], "orbits": 4, `, `study.sweeps[0] follows orbits along 2 dials (line 2, column 22); take "orbits" out, or all dials but one.`},
		{`["area"]`, `"area"`, `study.sweeps[0].readings is "area" (line 2, column 109); write the readings in [ ].`},
		{`["area"]`, `["area"], "effort": 0`, `study.sweeps[0].effort is 0 (line 2, column 129); give a number from 0.001 to 10000.`},
		{`["area"]}`, `["area"]}, ` + good, `study.sweeps[1] has the name "a", which stands already (line 2, column 120); give each a name of its own.`},
		{`"dials": [{"dial": "eps", "from": 0, "to": 1, "points": 3}]`, `"dials": []`, `study.sweeps[0] has no dials (line 2, column 22); give one at least.`},
	} {
		err := read(strings.Replace(good, c.old, c.new, 1))
		if said := ""; err != nil {
			if said = err.Error(); said != c.says {
				t.Errorf("says %s\nnot  %s", said, c.says)
			}
		} else if c.says != "" {
			t.Errorf("%s is read", c.new)
		}
	}
}

// TestTurn: the values of a range hit both ends to the bit, and round decimals are
// those that a person types.
func TestTurn(t *testing.T) {
	for i, want := range []float64{0.2, 0.3, 0.4, 0.5, 0.6} {
		if got := (table.Turn{From: 0.2, To: 0.6, Points: 5}).All()[i]; got != want {
			t.Errorf("value %d is %v, want %v", i, got, want)
		}
	}
	rapid.Check(t, func(t *rapid.T) {
		turn := table.Turn{From: rapid.Float64Range(-1e9, 1e9).Draw(t, "from"), To: rapid.Float64Range(-1e9, 1e9).Draw(t, "to"), Points: rapid.IntRange(2, 100).Draw(t, "points")}
		all := turn.All()
		if all[0] != turn.From || all[len(all)-1] != turn.To || len(all) != turn.Points {
			t.Fatalf("%v has the values %v", turn, all)
		}
		lo, hi := turn.Ends()
		for _, v := range all {
			if v < lo || v > hi || v < min(turn.From, turn.To) || v > max(turn.From, turn.To) {
				t.Fatalf("%v leaves the range", v)
			}
		}
	})
}
