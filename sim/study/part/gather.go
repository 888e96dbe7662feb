package part

import (
	"errors"
	"fmt"

	"cavitywright/sim/study"
)

// Named is a part with the name that sentences give it.
type Named struct {
	Name string
	File *File
}

// Gather joins the parts of one sweep. The error is a sentence that names parts
// that are missing, damaged, not finished, or of another study.
func Gather(parts []Named) (*study.Result, error) {
	if err := whole(parts); err != nil {
		return nil, err
	}
	first := parts[0].File.Head
	st, err := first.Study()
	if err != nil {
		return nil, fmt.Errorf("%s holds no study: %w", parts[0].Name, err)
	}
	if err := counted(parts[0].Name, first, st.Tasks()); err != nil {
		return nil, err
	}
	r := study.NewResult(st)
	for _, p := range parts {
		for _, row := range p.File.Rows {
			r.Add(row)
		}
	}
	return r, nil
}

// whole reports in a sentence what of the parts of one study is not there.
func whole(parts []Named) error {
	if len(parts) == 0 {
		return errors.New("there is nothing to gather; name the parts")
	}
	first := parts[0].File.Head
	have := map[int]string{}
	for _, p := range parts {
		h := p.File.Head
		if !h.same(first) {
			return fmt.Errorf("%s is of another study than %s: %s; gather parts of one study only", p.Name, parts[0].Name, difference(h, first))
		}
		if other, twice := have[h.Part]; twice {
			return fmt.Errorf("part %d of %d stands twice, in %s and %s; leave one out", h.Part, h.Of, other, p.Name)
		}
		have[h.Part] = p.Name
		if p.File.Damage != nil {
			return fmt.Errorf("part %d of %d is damaged: in %s, line %d, %v; run that part again, and it goes on from there", h.Part, h.Of, p.Name, p.File.Line, p.File.Damage)
		}
		if n := len(p.File.Missing()); n > 0 {
			return fmt.Errorf("part %d of %d is not finished: %s lacks %d of %d rows; run it again, and it goes on from there", h.Part, h.Of, p.Name, n, len(h.Due()))
		}
	}
	if len(have) < first.Of {
		return fmt.Errorf("of %d parts %s missing; run %s, or name the files", first.Of, missing(have, first.Of), them(first.Of-len(have)))
	}
	return nil
}

// counted holds the tasks that a head names to those of what it carries.
func counted(name string, h Head, tasks int) error {
	if tasks != h.Tasks {
		return fmt.Errorf("%s holds a study of %d tasks, but says %d; run it again with this program", name, tasks, h.Tasks)
	}
	return nil
}

// mostNamed bounds the numbers in a sentence.
const mostNamed = 20

// missing names the parts that are not there.
func missing(have map[int]string, of int) string {
	text, n := "", 0
	for k := 1; k <= of; k++ {
		if _, ok := have[k]; ok {
			continue
		}
		if n++; n <= mostNamed {
			text += fmt.Sprintf(", %d", k)
		}
	}
	if n > mostNamed {
		text += fmt.Sprintf(" and %d more", n-mostNamed)
	}
	if n == 1 {
		return text[2:] + " is"
	}
	return text[2:] + " are"
}

func them(n int) string {
	if n == 1 {
		return "it"
	}
	return "them"
}
