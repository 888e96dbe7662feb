package window

import (
	"fmt"
	"strings"

	"cavitywright/table"
	"cavitywright/table/outline"
	"cavitywright/table/outline/intake"
	"cavitywright/ui/pane"
)

// take keeps a drawing to be laid anew.
func (s *outlineSheet) take(d *intake.Drawing, a intake.Account, name string) {
	s.drawing, s.account, s.named, s.document = d, a, name, s.w.session.Document()
	if s.told != nil {
		s.showDrawing()
	}
}

// shown opens the sheet where a drawing can be fitted.
func (s *outlineSheet) shown() {
	for i, o := range s.w.drawer.sheets {
		if o == sheet(s) && s.account.Polygons > 0 && s.w.drawer.open != i {
			s.w.drawer.show(i)
		}
	}
}

// showDrawing writes what is known of the drawing.
func (s *outlineSheet) showDrawing() {
	s.tolerance.SetPlaceHolder("")
	if s.drawing == nil {
		s.found.Set(nil)
		s.told.SetText("An SVG drawing becomes a wall with obstacles, its lines, arcs and curves kept. A table of points becomes a polygon, along which a smooth wall can be fitted. Either can be dropped on the window.")
		s.fit.Disable()
		s.plain.Disable()
		return
	}
	s.plain.Enable()
	t := s.w.session.Table()
	if s.account.FitWithin > 0 {
		s.tolerance.SetPlaceHolder(fmt.Sprintf("%.2g %s", s.account.FitWithin, t.Design().Unit))
	}
	if s.account.Polygons > 0 {
		s.fit.Enable()
	} else {
		s.fit.Disable()
	}
	a, u := s.account, t.Design().Unit.String()
	var rows []readoutRow
	if a.Points > 0 {
		rows = append(rows, readoutRow{"Points", fmt.Sprint(a.Points), "The number of points of the outline's polygons, of which each was measured or drawn."})
	}
	rows = append(rows, readoutRow{"Nodes", fmt.Sprint(a.Nodes), "The number of nodes of the free walls that were laid."})
	if a.Fitted {
		r := a.Residual
		rows = append(rows,
			readoutRow{"Residual, rms", fmt.Sprintf("%.3g %s", r.RMS, u), "Root of the mean square distance of the points from the fitted wall."},
			readoutRow{"Residual, greatest", fmt.Sprintf("%.3g %s", r.Greatest, u), fmt.Sprintf("At (%.6g, %.6g) %s.", r.At.X, r.At.Y, u)})
	}
	s.found.Set(rows)
	s.told.SetText(strings.Join(a.Notes, "\n"))
}

// options are what the fields ask of a drawing.
func (s *outlineSheet) options() (intake.Options, error) {
	var o intake.Options
	if s.unit.SelectedIndex() > 0 {
		u, err := table.ParseUnit(s.unit.Selected)
		if err != nil {
			return o, err
		}
		o.Unit = u
	}
	if strings.TrimSpace(s.height.Text) == "" {
		return o, nil
	}
	unit := o.Unit
	if unit == "" {
		unit = s.w.session.Table().Design().Unit
		o.Unit = unit
	}
	h, err := pane.Evaluate(s.height.Text, unit)
	if err != nil || !(h > 0) {
		return o, fmt.Errorf("the height %q is no length above 0; try 30 mm", s.height.Text)
	}
	o.Height = h
	return o, nil
}

// layAsAsked lays the drawing as it was laid last, in another size.
func (s *outlineSheet) layAsAsked() {
	if s.account.Fitted {
		s.layFitted()
	} else {
		s.layPlain()
	}
}

// layPlain lays the drawing as it was drawn.
func (s *outlineSheet) layPlain() {
	o, err := s.options()
	if err != nil {
		s.w.foot.say(err.Error())
		return
	}
	s.lay(o)
}

// layFitted lays smooth walls along the polygons of the drawing.
func (s *outlineSheet) layFitted() {
	o, err := s.options()
	if err != nil {
		s.w.foot.say(err.Error())
		return
	}
	unit := o.Unit
	if unit == "" {
		unit = s.w.session.Table().Design().Unit
	}
	text := s.tolerance.Text
	if strings.TrimSpace(text) == "" {
		text = s.tolerance.PlaceHolder
	}
	tol, err := pane.Evaluate(text, unit)
	if err != nil || !(tol > 0) {
		s.w.say("The tolerance %q is no length above 0; try 0.01 mm.", text)
		return
	}
	o.Fit = outline.Fit{Tolerance: tol}
	s.lay(o)
}

// lay lays the drawing anew in place of what is drawn; it can be undone.
func (s *outlineSheet) lay(o intake.Options) {
	if s.drawing == nil {
		s.w.say("There is no outline yet; import one.")
		return
	}
	var l laid
	d, name, seeds := *s.drawing, s.named, s.w.session.Settings.SeedAll
	s.w.outlineWork("Laying the wall", func() error {
		var err error
		l, err = lay(d, o, name, seeds)
		return err
	}, func(err error) {
		if err == nil {
			err = s.w.session.Do(replaced{l.table})
		}
		if err != nil {
			s.w.foot.say(err.Error())
			return
		}
		s.account = l.account
		s.showDrawing()
		s.w.say("%s", strings.Join(intake.Lines(l.account, l.table.Design().Unit), " "))
	})
}

// replaced puts a table in place of the one at work.
type replaced struct{ by *table.Table }

// Title names the change.
func (replaced) Title() string { return "lay the outline anew" }

// Apply is the other table.
func (c replaced) Apply(*table.Table) (*table.Table, error) { return c.by, nil }
