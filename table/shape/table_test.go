package shape_test

import (
	"testing"

	"cavitywright/table"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"pgregory.net/rapid"
)

// TestFamiliesMakeTables: what a family builds is a table, nowhere crossing,
// obstacles inside.
func TestFamiliesMakeTables(t *testing.T) {
	for _, k := range shape.Catalogue() {
		t.Run(k.Name, rapid.MakeCheck(func(t *rapid.T) {
			v := param.Defaults(k.Specs)
			for i, s := range k.Specs {
				v[i] = s.Clamp(v[i] * rapid.Float64Range(0.5, 1.5).Draw(t, s.Name))
			}
			if k.Fits != nil && k.Fits(v) != nil {
				t.Skip("does not fit")
			}
			f, err := shape.New(k.Name, v)
			if err != nil {
				t.Fatal(err)
			}
			d := table.Design{Unit: table.Millimetre, Items: []table.Item{{Shape: f, Place: plane.Identity()}}}
			if _, err := table.New(d); err != nil {
				t.Fatalf("%v: %v", v, err)
			}
		}))
	}
}
