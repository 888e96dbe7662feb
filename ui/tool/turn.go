package tool

import (
	"cavitywright/table"
	"cavitywright/table/dial"
)

// Turn is the command that sets one number of the design, whichever it is.
type Turn struct {
	Dial  dial.Dial
	Value float64
}

// Title names the change.
func (c Turn) Title() string { return "turn a number" }

// Apply sets the number.
func (c Turn) Apply(t *table.Table) (*table.Table, error) {
	d, err := c.Dial.Turned(t.Design(), c.Value)
	if err != nil {
		return nil, err
	}
	return table.New(d)
}
