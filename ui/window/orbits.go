package window

import (
	"bytes"
	"cmp"
	"context"
	"errors"
	"fmt"
	"path/filepath"
	"slices"
	"strings"
	"time"

	"cavitywright/sim/orbit"
	"cavitywright/sim/run"
	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/ui/pane"
	"cavitywright/ui/store"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/widget"
)

// orbitSheet lists the periodic orbits of the wall, one row for an orbit and its
// copies by symmetry, and lays them over portrait and rays.
type orbitSheet struct {
	w       *Window
	work    *work
	over    *pane.Orbits
	list    *orbit.List // nil until it is found
	rows    []*orbit.Orbit
	chosen  int // the row, -1 for none
	columns []orbitColumn
	by, dir int    // the column and sense by which the rows are sorted
	leaks   string // empty where nothing can leave
	table   *widget.Table
	state   *caption
	marked  *caption // which orbits are marked
	words   *widget.Label
	upTo    *widget.Select
	run     *widget.Button
	stop    *widget.Button
	launch  *widget.Button
	write   *widget.Button
	follow  *orbitFollow
}

func newOrbitSheet(w *Window) *orbitSheet {
	return &orbitSheet{w: w, work: newWork(w), over: w.orbits, chosen: -1, dir: 1, columns: orbitColumns("mm"), follow: newOrbitFollow(w)}
}

// Name is "Orbits".
func (s *orbitSheet) Name() string { return "Orbits" }

// View is the list with its buttons.
func (s *orbitSheet) View() fyne.CanvasObject {
	s.state, s.words = newCaption(fyne.TextAlignLeading, 120), widget.NewLabel("")
	s.words.Wrapping = fyne.TextWrapWord
	s.marked = newCaption(fyne.TextAlignLeading, 120)
	legend := []*caption{newCaption(fyne.TextAlignLeading, 120), newCaption(fyne.TextAlignLeading, 120)}
	legend[0].set("Marks: ring elliptic, cross hyperbolic, bar marginal,")
	legend[1].set("cross in a ring inverse hyperbolic.")
	s.upTo = widget.NewSelect(nil, nil)
	for n := orbit.Least; n <= orbit.MostBounces; n++ {
		s.upTo.Options = append(s.upTo.Options, fmt.Sprintf("%d bounces", n))
	}
	s.upTo.SetSelectedIndex(firstUpTo - orbit.Least)
	s.run = quiet("run", "Search", s.search)
	s.stop = quiet("stop", "Stop", s.work.Stop)
	s.launch = quiet("", "Launch beside it", s.launchBeside)
	s.write = quiet("save", "Write", s.askWrite)
	s.stop.Hide()
	s.launch.Disable()
	s.write.Disable()
	s.makeTable()
	head := container.NewHBox(widget.NewLabel("up to"), container.NewGridWrap(fyne.NewSize(132, 34), s.upTo), s.run, s.stop, layout.NewSpacer(), s.write)
	top := container.NewVBox(head, container.New(layout.NewCustomPaddedLayout(0, 4, 10, 10), s.state))
	words := container.New(tall(wordsHeight), container.NewVScroll(s.words))
	listed := container.NewBorder(top, container.NewVBox(container.NewHBox(layout.NewSpacer(), s.launch), container.New(layout.NewCustomPaddedLayout(0, 4, 10, 10), container.NewVBox(s.marked, legend[0], legend[1])), words), nil, nil, s.table)
	followed := s.follow.view()
	followed.Hide()
	parts := newChoice(nil, []string{"Of this wall", "Followed"}, func(i int) {
		listed.Hide()
		followed.Hide()
		[]fyne.CanvasObject{listed, followed}[i].Show()
	})
	return container.NewBorder(bar("Orbits", []fyne.CanvasObject{parts.box}), nil, nil, nil, container.NewStack(listed, followed))
}

// firstUpTo is the number of bounces that a search goes up to unless another is
// chosen, and wordsHeight the room for what is said of the list and the orbit.
const (
	firstUpTo   = 6
	wordsHeight = 112
)

// makeTable makes the list: a head whose names sort, and the orbits.
func (s *orbitSheet) makeTable() {
	s.table = widget.NewTable(func() (int, int) { return len(s.rows), len(s.columns) },
		func() fyne.CanvasObject {
			l := widget.NewLabel("")
			l.Truncation = fyne.TextTruncateEllipsis
			return l
		},
		func(id widget.TableCellID, o fyne.CanvasObject) {
			if id.Row < len(s.rows) {
				o.(*widget.Label).SetText(s.columns[id.Col].text(s.rows[id.Row], s.leaks))
			}
		})
	s.table.ShowHeaderRow = true
	s.table.CreateHeader = func() fyne.CanvasObject { return quiet("", "", nil) }
	s.table.UpdateHeader = func(id widget.TableCellID, o fyne.CanvasObject) {
		b := o.(*widget.Button)
		b.Alignment = widget.ButtonAlignLeading
		name := s.columns[id.Col].name
		if s.list != nil && id.Col == s.by {
			name += map[int]string{1: " ↑", -1: " ↓"}[s.dir]
		}
		b.OnTapped = func() { s.sortBy(id.Col) }
		b.SetText(name)
	}
	s.table.OnSelected = func(id widget.TableCellID) { s.choose(id.Row) }
	for i, c := range s.columns {
		s.table.SetColumnWidth(i, c.wide)
	}
}

// Changed clears what belongs to another wall.
func (s *orbitSheet) Changed() {
	s.follow.changed()
	if s.work.Fits() {
		s.mark()
		return
	}
	s.work.Drop()
	s.forget()
	s.stop.Hide()
	s.run.Enable()
	s.state.set("Not searched yet on this wall.")
}

// Closed takes the marks away; a search goes on, and is seen when the sheet is
// opened again.
func (s *orbitSheet) Closed() { s.over.Clear() }

// forget empties the list.
func (s *orbitSheet) forget() {
	s.list, s.rows, s.chosen = nil, nil, -1
	s.over.Clear()
	s.columns = orbitColumns(s.w.session.Table().Design().Unit.String())
	s.words.SetText("")
	s.marked.set("")
	s.launch.Disable()
	s.write.Disable()
	s.table.UnselectAll()
	s.table.Refresh()
}

// tellEvery is the time from one report of a search to the next.
const tellEvery = 100 * time.Millisecond

// seldom passes reports of a search on to the window's goroutine, the first of
// each tellEvery.
func seldom(d desk, report func(share float64, found int)) func(float64, int) {
	var last time.Time
	return func(share float64, found int) {
		if time.Since(last) >= tellEvery {
			last = time.Now()
			d.show(func() { report(share, found) })
		}
	}
}

// search looks for the orbits beside the window.
func (s *orbitSheet) search() {
	most := s.upTo.SelectedIndex() + orbit.Least
	s.forget()
	s.run.Disable()
	s.stop.Show()
	s.state.set("Searching…")
	var found *orbit.List
	s.work.Start(func(d desk) (err error) {
		var last time.Time
		found, err = orbit.Find(d.tracer.Table(), orbit.Search{UpTo: most, Watch: d.ctx.Err, Spread: run.Spread(d.ctx, 0),
			Told: func(share float64, n int) {
				if time.Since(last) >= tellEvery {
					last = time.Now()
					d.show(func() {
						s.state.set(fmt.Sprintf("Searching; %d found, %.0f %% of the most that it can take.", n, 100*share))
					})
				}
			}})
		return err
	}, nil, func(err error) {
		s.stop.Hide()
		s.run.Enable()
		switch {
		case errors.Is(err, context.Canceled):
			s.state.set("Stopped; a search that is not finished shows nothing.")
		case err != nil:
			s.state.set(sentence(err.Error()))
		default:
			s.show(found)
		}
	})
}

// show lists what was found.
func (s *orbitSheet) show(found *orbit.List) {
	t := s.work.on
	s.list, s.rows, s.leaks = found, found.Firsts(), leaksText(t)
	s.columns = orbitColumns(t.Design().Unit.String())
	s.by, s.dir, s.chosen = 0, 1, -1
	s.state.set(fmt.Sprintf("%d orbits in %d rows; a click on a row shows the orbit, one on a name in the head sorts.", len(found.Orbits), len(s.rows)))
	s.words.SetText(strings.Join(found.Standing(), " "))
	if len(s.rows) > 0 {
		s.write.Enable()
	}
	s.table.ScrollToTop()
	s.table.Refresh()
	s.mark()
}

// sortBy sorts by a column; a second time the other way.
func (s *orbitSheet) sortBy(column int) {
	var chosen *orbit.Orbit
	if s.chosen >= 0 {
		chosen = s.rows[s.chosen]
	}
	if column == s.by {
		s.dir = -s.dir
	} else {
		s.by, s.dir = column, 1
	}
	sortOrbits(s.rows, s.columns[s.by], s.dir, s.leaks)
	for i, o := range s.rows {
		if o == chosen {
			s.chosen = i
		}
	}
	s.table.Refresh()
	if s.chosen >= 0 {
		s.table.Select(widget.TableCellID{Row: s.chosen})
	}
}

// choose shows one orbit.
func (s *orbitSheet) choose(row int) {
	if row < 0 || row >= len(s.rows) {
		return
	}
	s.chosen = row
	s.launch.Enable()
	o, unit := s.rows[row], s.work.on.Design().Unit.String()
	s.state.set(fmt.Sprintf("%d bounces, %s, length %.9g %s.", o.Period(), o.Sort(), o.Length, unit))
	s.words.SetText(orbitWords(o, unit))
	s.mark()
}

// mostMarked bounds the orbits that are marked: more would cover the portrait.
const mostMarked = 40

// mark lays the orbits over the panes.
func (s *orbitSheet) mark() {
	if s.list == nil {
		s.over.Clear()
		return
	}
	var all, chosen []*orbit.Orbit
	byLength := make([]*orbit.Orbit, len(s.list.Orbits))
	for i := range s.list.Orbits {
		byLength[i] = &s.list.Orbits[i]
	}
	slices.SortStableFunc(byLength, func(a, b *orbit.Orbit) int { return cmp.Compare(a.Length, b.Length) })
	for _, o := range byLength {
		switch {
		case s.chosen >= 0 && o == s.rows[s.chosen]:
			chosen = append([]*orbit.Orbit{o}, chosen...)
		case s.chosen >= 0 && o.Class == s.rows[s.chosen].Class:
			chosen = append(chosen, o)
		case len(all) < mostMarked:
			all = append(all, o)
		}
	}
	s.marked.set("")
	if n := len(byLength); n > len(all)+len(chosen) {
		text := fmt.Sprintf("The %d shortest of %d orbits are marked.", len(all), n)
		if len(chosen) > 0 {
			text = fmt.Sprintf("The chosen orbit and the %d shortest of %d others are marked.", len(all), n-len(chosen))
		}
		s.marked.set(text)
	}
	s.over.Show(s.work.on, all, chosen)
}

// launchBeside launches neighbours of the chosen orbit.
func (s *orbitSheet) launchBeside() {
	if s.chosen < 0 || !s.work.Fits() {
		return
	}
	t := s.w.session.Table()
	s.w.sayErr(s.w.session.Do(edit.Launch{New: []table.Launch{beside(t, s.rows[s.chosen])}}))
}

// askWrite asks for a file for the list or a drawing.
func (s *orbitSheet) askWrite() {
	name := strings.TrimSuffix(s.w.fileName(), ".cavity.json") + "-orbits.csv"
	s.w.askPath(question{what: "Write the list (.csv) or the drawing (.png, .svg, .pdf) as", folder: s.w.folder(), name: name}, func(path string) error {
		if err := s.writeTo(path); err != nil {
			return err
		}
		s.w.say("Written: %s.", path)
		return nil
	})
}

// writeTo writes the list as CSV, or else the chosen orbit, or the first of each
// set of copies, as a figure on the table.
func (s *orbitSheet) writeTo(path string) error {
	t, list := s.work.on, s.list
	if list == nil {
		return errors.New("the wall has changed since; search again")
	}
	if strings.EqualFold(filepath.Ext(path), ".csv") {
		var out bytes.Buffer
		_ = list.WriteCSV(&out, t, program) // a buffer takes all
		return store.WriteFile(path, out.Bytes())
	}
	shown := list.Firsts()
	if s.chosen >= 0 {
		shown = []*orbit.Orbit{s.rows[s.chosen]}
	}
	return writeFigure(path, t, orbit.Drawing(t, shown, program), 85)
}
