package wall

import "math"

// Polarisation names the two cases of Fresnel's formulas for a flat cavity.
type Polarisation uint8

// The polarisations. TM has the electric field out of the plane, TE in it;
// some communities swap the names, so that forms say which field is meant.
const (
	TM Polarisation = iota
	TE
)

// String is "TM (E out of plane)" or "TE (E in plane)".
func (p Polarisation) String() string {
	if p == TE {
		return "TE (E in plane)"
	}
	return "TM (E out of plane)"
}

// Dielectric is the wall of a transparent body: Fresnel's power coefficients
// (Born and Wolf, Principles of Optics, 1.5), total reflection beyond the
// critical angle. Index is the refractive index inside the table, where the
// rays run, Outside the one behind the wall; both sides of an obstacle are told
// by the same rule. Curvature and wavelength do not enter.
type Dielectric struct {
	Index, Outside float64
	Polarisation   Polarisation
}

// Scatter splits the weight by Fresnel's formulas and refracts by Snell's law.
func (d Dielectric) Scatter(in Incidence, _ float64) Outcome {
	out := d.Index / d.Outside * in.P
	if math.Abs(out) >= 1 {
		return Outcome{Back: Lobe{in.P, 1}}
	}
	ci, ct := math.Sqrt(1-in.P*in.P), math.Sqrt(1-out*out)
	a, b := d.Index, d.Outside
	if d.Polarisation == TE {
		a, b = b, a
	}
	r := (a*ci - b*ct) / (a*ci + b*ct)
	back := r * r
	return Outcome{Back: Lobe{in.P, back}, Through: Lobe{out, 1 - back}}
}

// Critical is the sine of the critical angle from inside, 1 where there is
// none.
func (d Dielectric) Critical() float64 { return math.Min(1, d.Outside/d.Index) }

// Brewster is the sine of Brewster's angle from inside, whose tangent is
// Outside/Index: there TE returns nothing, whichever index is the greater
// (Born and Wolf, 1.5.3).
func (d Dielectric) Brewster() float64 { return d.Outside / math.Hypot(d.Index, d.Outside) }
