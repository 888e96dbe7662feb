package chaos

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"cavitywright/table"
)

// Verdict says in plain sentences what a table does: how much of the section
// is chaotic, which islands remain, and how far that can be trusted. survey may
// be nil, and then islands are not spoken of.
func Verdict(t *table.Table, s *SharingTally, survey *Survey) string {
	if why := Integrable(t); why != "" {
		return "Integrable: " + strings.TrimPrefix(why, "exactly 0: ") + "." + asMirrors(t)
	}
	share, err := s.Section(ByGrowth)
	if math.IsNaN(share) {
		return "Nothing can be said: every orbit met a corner or touched the wall along its tangent."
	}
	orbits := s.Orbits()
	used := fmt.Sprintf(" %s bounces, %d orbits of %d.", grouped(s.Walked), orbits, s.of.Each)
	text := ""
	switch all, none := share+2*err >= 1, share-2*err <= 0; {
	case none:
		text = fmt.Sprintf("No chaos was found: all but at most %s %% of the section is regular as far as these orbits show", percent(share+2*err, err))
	case all && (survey == nil || len(survey.Islands) == 0):
		text = fmt.Sprintf("%s the whole section, at least %s %% of it as far as these orbits show", seas(survey), percent(share-2*err, err))
	default:
		text = fmt.Sprintf("%s %s ± %s %% of the section", seas(survey), percent(share, err), percent(err, err))
	}
	if share-2*err > 0 {
		text += islands(survey)
	}
	text += "." + used
	return text + hedges(s, survey) + asMirrors(t)
}

// seas are the subject and verb of a verdict.
func seas(survey *Survey) string {
	switch {
	case survey == nil || survey.Seas == 0:
		return "Chaotic orbits cover"
	case survey.Seas == 1:
		return "One chaotic sea covers"
	}
	return fmt.Sprintf("%d chaotic seas that no orbit was seen to join cover", survey.Seas)
}

// islands says which islands remain.
func islands(survey *Survey) string {
	if survey == nil {
		return ""
	}
	where := func(i *Island) string {
		if i.Winds {
			return fmt.Sprintf("a band around the wall at p = %s", signed(i.P))
		}
		return fmt.Sprintf("at s/L = %.3f, p = %s", i.S/survey.Table.Length(), signed(i.P))
	}
	cell := 100 / float64(survey.Columns*survey.Rows)
	switch n := len(survey.Islands); {
	case n == 0:
		return fmt.Sprintf("; no island of more than %.2g %% of it was found", cell*LeastCells)
	case n == 1:
		i := &survey.Islands[0]
		return fmt.Sprintf("; 1 island remains, %s (%s ± %s %%)", where(i), percent(i.Share, i.Err), percent(i.Err, i.Err))
	case survey.Chains == n:
		i := &survey.Islands[0]
		return fmt.Sprintf("; %d islands remain, the largest %s (%s ± %s %%)", n, where(i), percent(i.Share, i.Err), percent(i.Err, i.Err))
	default:
		i := &survey.Islands[0]
		chains := fmt.Sprintf("in %d chains", survey.Chains)
		if survey.Chains == 1 {
			chains = "in one chain"
		}
		return fmt.Sprintf("; %d islands remain %s, the largest %s (%s ± %s %%)", n, chains, where(i), percent(i.Share, i.Err), percent(i.Err, i.Err))
	}
}

// hedges says what makes a verdict uncertain.
func hedges(s *SharingTally, survey *Survey) string {
	text := ""
	if s.Drifts(ByGrowth) {
		now, _ := s.SectionAt(ByGrowth, 0)
		before, _ := s.SectionAt(ByGrowth, 1)
		text += fmt.Sprintf(" The share still drifts with the bounces used, from %.2f %% with half of them to %.2f %%: with more it will be another.", 100*before, 100*now)
	}
	a, ea := s.Section(ByGrowth)
	b, eb := s.Section(ByAverages)
	if math.Abs(a-b) > 3*math.Hypot(ea, eb)+averagesMiss {
		text += fmt.Sprintf(" Weighted Birkhoff averages give %.2f %% instead: orbits that stick to islands are told apart only by more bounces.", 100*b)
	}
	if survey != nil && survey.Small > survey.Regular/4 && survey.Small > 0.002 {
		text += fmt.Sprintf(" Of the regular cells of the map %.2g %% lie in specks too small to count as islands, or are chaotic orbits that stick.", 100*survey.Small)
	}
	return text
}

// averagesMiss is the share by which the averages may differ from the growth
// for reasons of their own, near separatrices and kinks.
const averagesMiss = 0.02

// Orbits is the number of orbits that were told.
func (t *SharingTally) Orbits() int {
	n := 0.0
	for i := range t.lots.Rows {
		n += t.lots.Rows[i].orbits
	}
	return int(n)
}

// percent writes a share in percent, as far as its error has digits.
func percent(share, err float64) string {
	digits := 1
	if err > 0 {
		digits = int(math.Min(math.Max(-math.Floor(math.Log10(100*err)), 0), 4))
	}
	return strconv.FormatFloat(100*math.Min(math.Max(share, 0), 1), 'f', digits, 64)
}

// signed writes p with the sign of typography.
func signed(p float64) string {
	if math.Abs(p) < 0.0005 {
		return "0"
	}
	return strings.Replace(strconv.FormatFloat(p, 'f', 3, 64), "-", "−", 1)
}

// grouped writes a count with a narrow space every three digits.
func grouped(n int64) string {
	s := strconv.FormatInt(n, 10)
	for i := len(s) - 3; i > 0; i -= 3 {
		s = s[:i] + "\u00a0" + s[i:]
	}
	return s
}

func asMirrors(t *table.Table) string {
	if BareMirrors(t) {
		return ""
	}
	return " All walls were taken as mirrors."
}
