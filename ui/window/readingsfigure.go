package window

import (
	"bytes"
	"fmt"
	"strings"

	"cavitywright/assets"
	"cavitywright/render/export"
	"cavitywright/sim/figure"
	"cavitywright/table"
	"cavitywright/table/tablefile"
	"cavitywright/ui/pane"
	"cavitywright/ui/store"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/layout"
)

const program = assets.Program

// namedFigure is a small figure of a sheet, with its name and a button that
// writes it to a file; it is hidden while there is none.
type namedFigure struct {
	box  *fyne.Container
	pane *pane.Figure
	full *figure.Series
}

// namedFigureHeight is the height of such a figure.
const namedFigureHeight = 190

// newNamedFigure is an empty one; k is the work that its figure comes from.
func newNamedFigure(w *Window, name string, k *work) *namedFigure {
	f := &namedFigure{pane: pane.NewFigure(w.desk)}
	f.pane.Hinted = name + "; the button beside its name writes it to a file."
	file := "-" + strings.ReplaceAll(strings.ToLower(name), " ", "-") + ".png"
	write := quiet("save", "", func() {
		if f.full != nil && k.on != nil {
			w.askFigureFile("Write the figure as", file, k.on, *f.full, 85)
		}
	})
	head := container.NewHBox(title(name), layout.NewSpacer(), write)
	f.box = container.NewVBox(head, container.New(tall(namedFigureHeight), f.pane.Surface))
	f.box.Hide()
	return f
}

// set shows a figure without its caption, which the sheet says in words; nil
// shows none.
func (f *namedFigure) set(fig *figure.Series) {
	f.full = fig
	if fig == nil {
		f.pane.Set(nil)
		f.box.Hide()
		return
	}
	bare := *fig
	bare.Caption = nil
	f.pane.Set(bare)
	f.box.Show()
}

// askFigureFile asks for a file and writes a figure of a table there, in the
// format that its ending says.
func (w *Window) askFigureFile(what, ending string, t *table.Table, f figure.Figure, widthMM float64) {
	name := strings.TrimSuffix(w.fileName(), ".cavity.json") + ending
	w.askPath(question{what: what, folder: w.folder(), name: name}, func(path string) error {
		if err := writeFigure(path, t, f, widthMM); err != nil {
			return err
		}
		w.say("Written: %s.", path)
		return nil
	})
}

// writeFigure writes a figure of a table, with the table inside.
func writeFigure(path string, t *table.Table, f figure.Figure, widthMM float64) error {
	format, err := export.FormatOf(path)
	if err != nil {
		return err
	}
	var file, out bytes.Buffer
	if err := tablefile.Write(&file, t.Design()); err != nil {
		return err
	}
	head := []string{program, t.Design().Name, fmt.Sprintf("lengths in %s; seed %d", t.Design().Unit, t.Design().Study.Seed)}
	if err := export.Write(&out, format, f, export.Options{WidthMM: widthMM, DPI: 600, Table: file.Bytes(), Header: head}); err != nil {
		return err
	}
	return store.WriteFile(path, out.Bytes())
}
