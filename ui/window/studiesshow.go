package window

import (
	"errors"
	"fmt"
	"math"
	"path/filepath"
	"strings"

	"cavitywright/render"
	"cavitywright/sim/figure"
	"cavitywright/sim/study/part"
	"cavitywright/table"
	"cavitywright/ui/store"

	"fyne.io/fyne/v2"
)

// studyFigureHeight is the height of the figure of one reading.
const studyFigureHeight = 230

// lay makes a figure for each reading.
func (s *studiesSheet) lay() {
	s.plates = nil
	s.body.RemoveAll()
	for _, name := range s.result.Sweep.Readings {
		p := newPlate(s.w, name, studyFigureHeight, func() *table.Table {
			if s.result == nil {
				return nil
			}
			return s.result.Base
		})
		p.pane.Hinted = name + ": press a point, and its wall is on the table."
		p.pane.Picked = func(x, y float64) { s.pick(name, x, y) }
		if s.scroll != nil {
			p.pane.Scrolls(s.scroll)
		}
		s.plates = append(s.plates, p)
		s.body.Add(p.box)
	}
}

// show brings the sheet in step with the work and with the wall.
func (s *studiesSheet) show() {
	if s.state == nil {
		return
	}
	busy, there := s.work.Busy(), s.belongs()
	s.picked = s.here()
	visible(s.run, !busy)
	visible(s.stop, busy)
	visible(s.goOn, !busy && s.result != nil && !s.result.Whole() && there)
	if s.result != nil && len(s.result.Rows) > 0 {
		s.write.Enable()
	} else {
		s.write.Disable()
	}
	s.tell()
	visible(s.body, there)
	visible(s.point, there && s.picked >= 0)
	visible(s.list.box, there && s.picked >= 0)
	visible(s.words, there)
	if !there {
		return
	}
	for i, name := range s.result.Sweep.Readings {
		s.plates[i].set(s.marked(s.result.Figure(name, program), name))
	}
	s.words.SetText(strings.Join(s.result.Standing(), "\n"))
	s.tellPoint()
}

func visible(o fyne.CanvasObject, yes bool) {
	if yes == o.Visible() {
		return
	}
	if yes {
		o.Show()
	} else {
		o.Hide()
	}
}

// pointRows are the numbers of the picked point.
func (s *studiesSheet) pointRows() (rows []readoutRow) {
	row, _ := s.result.Point(s.picked)
	if row.Fault != "" {
		rows = append(rows, readoutRow{"no table", "", sentence(row.Fault)})
	}
	for _, t := range row.Taken {
		unit := t.Unit
		if unit == "1" {
			unit = ""
		}
		value := "none"
		if !math.IsNaN(float64(t.Value)) {
			value = strings.TrimSpace(fmt.Sprint(render.Written(figure.Scalar{Value: float64(t.Value), StdErr: float64(t.StdErr)}), " ", unit))
		}
		rows = append(rows, readoutRow{t.Name, value, sentence(t.Note)})
	}
	return rows
}

// tellPoint writes the numbers of the picked point.
func (s *studiesSheet) tellPoint() {
	if s.picked < 0 {
		return
	}
	rows := s.pointRows()
	s.point.SetText("At " + s.result.Place(s.picked) + ":")
	s.list.Set(rows)
	if s.work.Busy() || len(rows) == 0 || !s.result.Whole() {
		return // how far it is matters more
	}
	text := s.result.Place(s.picked) + ": "
	for i, r := range rows {
		if i > 0 {
			text += "; "
		}
		text += r.Name + " " + r.Value
	}
	s.state.set(text)
}

// askWrite asks for a file for the result.
func (s *studiesSheet) askWrite() {
	name := strings.TrimSuffix(s.w.fileName(), ".cavity.json") + "-study.csv"
	s.w.askPath(question{what: "Write the table (.csv, .json), the figures (.png, .svg, .pdf), or a part to go on with (.jsonl) as", folder: s.w.folder(), name: name}, func(path string) error {
		if err := s.writeTo(path); err != nil {
			return err
		}
		s.w.say("Written: %s.", path)
		return nil
	})
}

// writeTo writes what was found so far in the form that the ending says.
func (s *studiesSheet) writeTo(path string) error {
	r := s.result
	if r == nil {
		return errors.New("nothing was run yet; run a study first")
	}
	switch strings.ToLower(filepath.Ext(path)) {
	case ".csv":
		return store.WriteFile(path, r.CSV(program))
	case ".json":
		b, err := r.JSON()
		if err != nil {
			return err
		}
		return store.WriteFile(path, b)
	case ".jsonl":
		b, err := part.Written(r, program)
		if err != nil {
			return err
		}
		return store.WriteFile(path, b)
	}
	width := 85.0
	page := r.Page(program)
	if _, several := page.(figure.Sheet); several {
		width = 175
	}
	return writeFigure(path, r.Base, page, width)
}
