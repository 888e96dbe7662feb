package tolerance

import (
	"fmt"
	"math"
	"strings"

	"cavitywright/table"
	"cavitywright/table/dial"
	"cavitywright/table/survey"
)

// Cautions say what of the plan cannot matter, and where rays stop being the
// right model for waves, the most consequential first.
func (t *Tolerance) Cautions() []string {
	var all []string
	var dimensionless, scaled []string
	for _, f := range t.flaws {
		if f.Kind != table.SizeFlaw {
			continue
		}
		for _, name := range t.Plan.Readings {
			if lengthless(name) {
				dimensionless = append(dimensionless, name)
			} else {
				scaled = append(scaled, name)
			}
		}
		if len(dimensionless) > 0 {
			all = append(all, fmt.Sprintf("Size cannot matter to %s: rays know no length, so a wall that is larger all over has exactly the same value.", listed(dimensionless)))
		}
		if len(scaled) > 0 {
			all = append(all, fmt.Sprintf("Size only scales %s, by the power of length in the unit; no ray is traced for it.", listed(scaled)))
		}
	}
	for k, f := range t.flaws {
		switch {
		case f.Kind == table.ToolFlaw:
			all = append(all, t.toolCaution(f)...)
		case f.Kind != table.RoughFlaw && f.Kind != table.ToolFlaw && f.Width == 0:
			all = append(all, fmt.Sprintf("%s has no width: it is the same in every copy.", sentence(t.Name(k))))
		}
	}
	return append(all, t.waveCautions()...)
}

// lengthless reports whether a reading of the list is a pure number or an angle.
func lengthless(name string) bool {
	switch name {
	case "perimeter", "area", "mean-chord", "mean-chord-exact", "escape-rate", "mean-dwell", "lyapunov-per-length", "lyapunov-per-second", "free-path-variance":
		return false
	}
	return true
}

func (t *Tolerance) toolCaution(f flaw) (all []string) {
	u := t.Base.Design().Unit
	inner := false
	for i := range t.Base.Design().Items {
		inner = inner || inward(t.Base, i)
	}
	if !inner {
		all = append(all, "The radius of the tool cannot matter: the wall has no corner that a tool does not reach into.")
	}
	for _, b := range survey.Of(t.Base, f.Mean).Tool.Beyond {
		if b.Why != survey.AtCorner {
			all = append(all, fmt.Sprintf("A tool of radius %.4g %s does not reach the wall at (%.4g, %.4g) %s either, a %s; the copies keep that as drawn.", f.Mean, u, b.At.X, b.At.Y, u, b.Why))
			break
		}
	}
	return all
}

const (
	// rayleigh is the part of the wavelength below which the rms of heights is
	// small to a wave: lambda/8 at right angles (Lord Rayleigh; P. Beckmann and
	// A. Spizzichino, The Scattering of Electromagnetic Waves from Rough
	// Surfaces, 1963, ch. 2, from memory).
	rayleigh = 1.0 / 8
	// rayBend is the number of wavelengths in a radius of curvature below which
	// rays bend otherwise than waves: common practice.
	rayBend = 3
)

// waveCautions hold the wall and its roughness to the wavelength inside.
func (t *Tolerance) waveCautions() (all []string) {
	u := t.Base.Design().Unit
	inside := t.Plan.Wavelength / t.greatestIndex()
	length := func(x float64) string { return fmt.Sprintf("%.3g %s", x, u) }
	for _, f := range t.flaws {
		if f.Kind != table.RoughFlaw {
			continue
		}
		g := rough{rms: f.Width, length: f.Length}
		if inside == 0 {
			all = append(all, "Without a wavelength nothing can be said about whether waves follow the roughness as rays do; give it.")
			continue
		}
		if f.Width < rayleigh*inside {
			all = append(all, fmt.Sprintf("The rms of the roughness, %s, is below an eighth of the wavelength inside, %s: waves pass over most of it (Rayleigh's criterion), and rays overstate what it does.", length(f.Width), length(inside)))
		}
		if f.Length < inside {
			all = append(all, fmt.Sprintf("The correlation length, %s, is below the wavelength inside, %s: waves scatter from it as from a grating, and rays are the wrong model.", length(f.Length), length(inside)))
		}
		if bend := g.bend(); bend > 0 && 1/bend < rayBend*inside {
			all = append(all, fmt.Sprintf("The bends of the roughness have a typical radius of %s, below %d wavelengths inside, %s each: rays follow them, waves do not.", length(1/bend), rayBend, length(inside)))
		}
	}
	if b := survey.Of(t.Base, 0).Bend; inside > 0 {
		for _, e := range []survey.Extreme{b.Focusing, b.Dispersing} {
			if e.Known() && e.Radius < rayBend*inside {
				all = append(all, fmt.Sprintf("The wall as drawn has a radius of %s at (%.4g, %.4g) %s, below %d wavelengths inside, %s each: rays are not the right model there.", length(e.Radius), e.Place.At.X, e.Place.At.Y, u, rayBend, length(inside)))
			}
		}
	}
	return all
}

// greatestIndex is the greatest refractive index of the walls, 1 where none has
// one.
func (t *Tolerance) greatestIndex() float64 {
	n := 1.0
	for _, x := range indices(t.Base.Design()) {
		if v, err := dial.Dial.Value(x, t.Base.Design()); err == nil {
			n = math.Max(n, v)
		}
	}
	return n
}

// Verdict says for reading k how it is distributed, what keeps to its limits and
// which error its scatter comes from.
func (r *Result) Verdict(k int) []string {
	d, name := r.OfReading(k), r.Plan.Readings[k]
	u := spaced(r.unitOf(k))
	if len(d.Values) == 0 {
		return []string{fmt.Sprintf("No copy has a %s.", name)}
	}
	lines := []string{fmt.Sprintf("%s over %d copies: mean %.5g ± %.2g%s, 5 %% of them below %.5g, half below %.5g, 95 %% below %.5g; as drawn %.5g ± %.2g.",
		name, len(d.Values), d.Mean, d.MeanErr, u, d.Quantile(0.05), d.Quantile(0.5), d.Quantile(0.95), d.Nominal, d.NominalErr)}
	switch {
	case d.Deviation == 0:
		lines = append(lines, "All copies have the same value, to the last digit.")
	case d.Wall() < 0.5*d.Noise:
		lines = append(lines, fmt.Sprintf("The copies scatter by %.2g%s, hardly more than the error of each reading, %.2g: what the walls do is hidden; raise the effort.", d.Deviation, u, d.Noise))
	default:
		lines = append(lines, fmt.Sprintf("The copies scatter by %.2g%s, of which %.2g is the walls' and %.2g the error of each reading.", d.Deviation, u, d.Wall(), d.Noise))
	}
	if d.None > 0 {
		lines = append(lines, fmt.Sprintf("%d copies have no value: %s", d.None, r.firstFault(k)))
	}
	for i, l := range r.Plan.Limits {
		if l.Reading == name {
			lines = append(lines, fmt.Sprintf("%s: %s.", sentence(limitWords(l, u)), r.Yield(i).words()))
		}
	}
	return append(lines, r.blame(k)...)
}

// blame says which error the scatter comes from.
func (r *Result) blame(k int) (lines []string) {
	parts := r.Parts(k)
	if len(r.flaws) < 2 || len(r.Alone[len(r.flaws)-1]) == 0 {
		return nil
	}
	best, sum, square := -1, 0.0, 0.0
	for i, p := range parts {
		if math.IsNaN(p.Share) {
			return []string{"Which error the scatter comes from cannot be told from it."}
		}
		sum, square = sum+p.Share, square+p.Err*p.Err
		if best < 0 || p.Share > parts[best].Share {
			best = i
		}
	}
	name := r.Name(best)
	if r.flaws[best].Kind != table.DialFlaw {
		name = "the " + name
	}
	switch share := 100 * parts[best].Share; {
	case share > 100*(1+parts[best].Err):
		lines = append(lines, fmt.Sprintf("%s alone scatters the copies more than all errors together: %.0f ± %.0f %% of their variance.", sentence(name), share, 100*parts[best].Err))
	case share > 0:
		lines = append(lines, fmt.Sprintf("Most of it comes from %s: %.0f ± %.0f %% of the variance by itself.", name, share, 100*parts[best].Err))
	}
	switch err := math.Sqrt(square); {
	case err > 0.3:
		lines = append(lines, fmt.Sprintf("The shares add up to %.0f ± %.0f %%: more copies tell them apart better.", 100*sum, 100*err))
	case math.Abs(sum-1) > math.Max(0.2, 2*err):
		lines = append(lines, fmt.Sprintf("The shares add up to %.0f ± %.0f %%, not 100 %%: the errors are too large for a first order to say all.", 100*sum, 100*err))
	}
	return lines
}

func (r *Result) firstFault(k int) string {
	for i := range r.Rows {
		if r.Rows[i].Fault != "" {
			return sentence(r.Rows[i].Fault)
		}
		if v, _ := r.Rows[i].value(k); math.IsNaN(v) {
			return sentence(r.Rows[i].Taken[k].Note)
		}
	}
	return ""
}

func (y Yield) words() string {
	text := fmt.Sprintf("%d of %d copies, %.1f ± %.1f %% (between %.1f and %.1f %% with a confidence of 95 %%)", y.Good, y.Of, 100*y.Share, 100*y.Err, 100*y.Lo, 100*y.Hi)
	if y.Near > 0 {
		text += fmt.Sprintf("; %d of them lie within two errors of the limit", y.Near)
	}
	return text
}

func limitWords(l table.Limit, unit string) string {
	switch {
	case math.IsInf(l.Hi, 1):
		return fmt.Sprintf("%s at least %.5g%s", l.Reading, l.Lo, unit)
	case math.IsInf(l.Lo, -1):
		return fmt.Sprintf("%s at most %.5g%s", l.Reading, l.Hi, unit)
	}
	return fmt.Sprintf("%s from %.5g to %.5g%s", l.Reading, l.Lo, l.Hi, unit)
}

// Lines are all that has to be said: the errors, the verdicts, the yield of all
// limits together, the cautions.
func (r *Result) Lines() []string {
	var errors []string
	for k := range r.flaws {
		errors = append(errors, r.Words(k))
	}
	lines := []string{fmt.Sprintf("%s; %d copies, effort %g, seed %d.", sentence(strings.Join(errors, "; ")), len(r.Rows), r.Plan.Effort, r.Base.Design().Study.Seed)}
	for k := range r.Plan.Readings {
		lines = append(lines, r.Verdict(k)...)
	}
	if len(r.Plan.Limits) > 1 {
		lines = append(lines, fmt.Sprintf("All limits together: %s.", r.Yield(All).words()))
	}
	if m := r.misfit(); m > 0 {
		lines = append(lines, fmt.Sprintf("The walls lie within %.2g %s of the heights that were drawn.", m, r.Base.Design().Unit))
	}
	return append(lines, r.Cautions()...)
}

func (r *Result) misfit() float64 {
	m := 0.0
	for i := range r.Rows {
		m = math.Max(m, r.Rows[i].Misfit)
	}
	return m
}

func listed(names []string) string {
	if n := len(names) - 1; n > 0 {
		return strings.Join(names[:n], ", ") + " and " + names[n]
	}
	return names[0]
}

func sentence(s string) string {
	if s == "" {
		return s
	}
	return strings.ToUpper(s[:1]) + s[1:]
}

// spaced is a unit behind its number.
func spaced(unit string) string {
	if unit == "" {
		return ""
	}
	return " " + unit
}
