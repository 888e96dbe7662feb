package window

import (
	"cavitywright/ui/pane"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/widget"
)

// readout is a list of numbers: the name, the value with its error and unit,
// and one click away what it is and on what it was measured.
type readout struct {
	box    *fyne.Container
	rows   []readoutRow
	values []*widget.Label
	abouts []*widget.Label
	open   map[string]pane.Visibility // the rows whose definition is shown
}

// readoutRow is one number. Value carries its unit and error; About is its
// definition and what has to be said of it, in sentences.
type readoutRow struct{ Name, Value, About string }

func newReadout() *readout {
	r := &readout{box: container.NewVBox(), open: map[string]pane.Visibility{}}
	r.box.Layout = layout.NewCustomPaddedVBoxLayout(0)
	return r
}

// nameWidth is the width of the column of names.
const nameWidth = 190

// Set shows other rows; the definitions that were open stay so.
func (r *readout) Set(rows []readoutRow) {
	if r.alike(rows) {
		r.rows = rows
		for i, row := range rows {
			r.values[i].SetText(row.Value)
			r.abouts[i].SetText(row.About)
		}
		return
	}
	r.rows, r.values, r.abouts = rows, nil, nil
	r.box.RemoveAll()
	for _, row := range rows {
		r.add(row)
	}
	r.box.Refresh()
}

// alike reports whether the rows have the names of those that stand.
func (r *readout) alike(rows []readoutRow) bool {
	if len(rows) != len(r.rows) {
		return false
	}
	for i, row := range rows {
		if row.Name != r.rows[i].Name {
			return false
		}
	}
	return true
}

// add puts a row at the end.
func (r *readout) add(row readoutRow) {
	about := widget.NewLabel(row.About)
	about.Wrapping = fyne.TextWrapWord
	show := func() {
		if r.open[row.Name] == pane.Visible {
			about.Show()
		} else {
			about.Hide()
		}
	}
	show()
	name := quiet("", row.Name, func() {
		r.open[row.Name] = pane.Visible - r.open[row.Name]
		show()
		r.box.Refresh()
	})
	name.Alignment = widget.ButtonAlignLeading
	value := widget.NewLabel(row.Value)
	value.TextStyle.Bold = true
	value.Truncation = fyne.TextTruncateEllipsis
	r.box.Add(container.NewBorder(nil, nil, container.NewGridWrap(fyne.NewSize(nameWidth, 30), name), nil, value))
	r.box.Add(about)
	r.values, r.abouts = append(r.values, value), append(r.abouts, about)
}
