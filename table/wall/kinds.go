package wall

import (
	"fmt"

	"cavitywright/table/param"
)

// Kind is a law as forms, files and command lines know it.
type Kind struct {
	Name  string
	About string
	Specs []param.Spec
	make  func(v param.Values) Law
}

// kinds is the list of laws; a new one is a type in this package and a line here.
var kinds = []Kind{
	{"mirror", "returns everything at the angle it came", nil,
		func(param.Values) Law { return Mirror{} }},
	{"lossy", "a mirror that absorbs a share of each ray", []param.Spec{
		{Name: "reflectivity", Lo: 0, Hi: 1, Default: 0.9, Description: "share of the power that returns"}},
		func(v param.Values) Law { return Lossy{v[0]} }},
	{"opening", "lets everything out", nil,
		func(param.Values) Law { return Opening{} }},
	{"dielectric", "splits each ray by Fresnel's formulas", []param.Spec{
		{Name: "index", Lo: 1, Hi: 10, Default: 3.3, Description: "refractive index inside, where the rays run"},
		{Name: "outside", Lo: 1, Hi: 10, Default: 1, Description: "refractive index outside, behind the wall"},
		{Name: "te", Unit: param.Count, Lo: 0, Hi: 1, Default: 0, Description: "0 = TM (E out of plane), 1 = TE (E in plane)"}},
		func(v param.Values) Law { return Dielectric{v[0], v[1], Polarisation(v[2])} }},
	{"rough", "scatters a share of all rays by the cosine law", []param.Spec{
		{Name: "share", Lo: 0, Hi: 1, Default: 0.5, Description: "share scattered"}},
		func(v param.Values) Law { return Rough{v[0]} }},
}

// Kinds lists the laws.
func Kinds() []Kind { return kinds }

// Make is the law called name with the given values; a *param.RangeError where
// one is out of range.
func Make(name string, v param.Values) (Law, error) {
	for _, k := range kinds {
		if k.Name == name {
			if err := v.Check(k.Specs); err != nil {
				return nil, err
			}
			return k.make(v), nil
		}
	}
	return nil, fmt.Errorf("there is no wall law %q", name)
}

// Name and Values of each law, as files write them.

// Name is "mirror".
func (Mirror) Name() string { return "mirror" }

// Values is empty.
func (Mirror) Values() []float64 { return nil }

// Name is "lossy".
func (Lossy) Name() string { return "lossy" }

// Values are reflectivity.
func (l Lossy) Values() []float64 { return []float64{l.Reflectivity} }

// Name is "opening".
func (Opening) Name() string { return "opening" }

// Values is empty.
func (Opening) Values() []float64 { return nil }

// Name is "dielectric".
func (Dielectric) Name() string { return "dielectric" }

// Values are index, outside, te.
func (d Dielectric) Values() []float64 {
	return []float64{d.Index, d.Outside, float64(d.Polarisation)}
}

// Name is "rough".
func (Rough) Name() string { return "rough" }

// Values are share.
func (r Rough) Values() []float64 { return []float64{r.Share} }
