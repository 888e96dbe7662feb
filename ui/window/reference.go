package window

import (
	"cavitywright/table"
)

// toggleReference keeps the table as it stands to compare with, or drops what
// was kept. It is no part of the document.
func (w *Window) toggleReference() {
	if w.session.Reference != nil {
		w.keepReference(nil)
		w.say("The reference is gone.")
		return
	}
	t := w.session.Table()
	w.keepReference(t)
	name := t.Design().Name
	if name == "" {
		name = "the table as it is now"
	}
	w.say("Reference: %s. Its wall is dashed, its portrait faint, with the launches of the table at work.", name)
}

func (w *Window) keepReference(t *table.Table) {
	w.session.Reference = t
	w.session.Touch()
	w.win.SetMainMenu(w.menu())
}

// exchangeReference makes the reference the table at work, and keeps that as
// the reference: pressed again and again it shows the two in turn.
func (w *Window) exchangeReference() {
	to := w.session.Reference
	if to == nil {
		w.say("There is no reference yet; keep a table as one first (H).")
		return
	}
	now := w.session.Table()
	if err := w.session.Do(exchange{to}); err != nil {
		w.foot.say(sentence(err.Error()))
		return
	}
	w.keepReference(now)
}

// exchange puts another table in place of the one at work, with the launches
// and the seed of that, so that the two can be compared.
type exchange struct{ to *table.Table }

// Title names the change.
func (exchange) Title() string { return "exchange with the reference" }

// Apply puts it in place.
func (c exchange) Apply(t *table.Table) (*table.Table, error) {
	d := c.to.Design()
	d.Study = t.Design().Study
	return table.New(d)
}
