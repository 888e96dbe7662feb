package window

import (
	"fmt"

	"cavitywright/render"
	"cavitywright/sim/measure/chaos"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
)

// islandList is the largest islands of the section; hidden where there is none.
type islandList struct {
	box  *fyne.Container
	list *readout
}

// mostIslands is how many are listed.
const mostIslands = 12

func newIslandList() *islandList {
	l := &islandList{list: newReadout()}
	l.box = container.NewVBox(title("Islands"), l.list.box)
	l.box.Hide()
	return l
}

// show lists the islands of a survey; nil lists none.
func (l *islandList) show(s *chaos.Survey) {
	if s == nil || len(s.Islands) == 0 {
		l.list.Set(nil)
		l.box.Hide()
		return
	}
	var rows []readoutRow
	for i, is := range s.Islands[:min(len(s.Islands), mostIslands)] {
		place := render.Proper(fmt.Sprintf("s/L = %.3f, p = %.3f", is.S/s.Table.Length(), is.P))
		if is.Winds {
			place = render.Proper(fmt.Sprintf("a band around, p = %.3f", is.P))
		}
		about := fmt.Sprintf("A connected region of regular orbits, its middle at %s: %.3f ± %.3f %% of ds dp, on a map of %d × %d cells with %d bounces from each. It belongs to chain %d, of %d islands.",
			place, 100*is.Share, 100*is.Err, s.Columns, s.Rows, s.Each, is.Chain, is.Members)
		if is.Period > 0 {
			about += fmt.Sprintf(" An orbit is back on it after %d bounces.", is.Period)
		}
		rows = append(rows, readoutRow{fmt.Sprintf("%d. %.2f ± %.2f %%", i+1, 100*is.Share, 100*is.Err), place, about})
	}
	l.list.Set(rows)
	l.box.Show()
}
