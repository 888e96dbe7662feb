package tolerance

import (
	"math"
	"math/rand/v2"

	"cavitywright/table"
)

// Copy is a wall as it was made: Table at the drawn size, which Scale enlarges.
type Copy struct {
	Table *table.Table
	Scale float64
	// Draws are what was drawn for each error; of roughness the rms of the
	// heights of this copy, and of an error that was left out 0.
	Draws []float64
	// Misfit bounds how far the wall lies from the heights that were drawn, in
	// the design's unit; 0 where no wall was fitted.
	Misfit float64
}

// All errors at once.
const All = -1

// Copy makes copy i with all errors, or with one of them alone. What is drawn
// for an error does not depend on the others. The error is a sentence that says
// why there is no such wall.
func (t *Tolerance) Copy(i, alone int, kit Kit) (Copy, error) {
	return t.CopyOf(t.Base, i, alone, kit)
}

// CopyOf is that copy of another table than the one drawn, whose dials are the
// same: a wall that is being sought.
func (t *Tolerance) CopyOf(base *table.Table, i, alone int, kit Kit) (Copy, error) {
	c := Copy{Table: base, Scale: 1, Draws: make([]float64, len(t.flaws))}
	d, turned := base.Design(), false
	for k, f := range t.flaws {
		if alone != All && alone != k || f.Kind == table.RoughFlaw {
			continue
		}
		x := f.drawn(rand.New(kit.Chance(stream(i, k))))
		c.Draws[k] = x
		switch f.Kind {
		case table.SizeFlaw:
			c.Scale = 1 + x
		case table.DialFlaw, table.IndexFlaw:
			for _, dial := range f.dials {
				v, err := dial.Value(d)
				if err != nil {
					return c, err
				}
				if d, err = dial.Turned(d, v+x); err != nil {
					return c, err
				}
			}
			turned = true
		}
	}
	var err error
	if turned {
		if c.Table, err = table.New(d); err != nil {
			return c, err
		}
	}
	return c, t.worked(&c, i, alone, kit)
}

// worked lets the tool and the etch at the wall of a copy.
func (t *Tolerance) worked(c *Copy, i, alone int, kit Kit) (err error) {
	var heights *rough
	offset, at := 0.0, 0
	for k, f := range t.flaws {
		if alone != All && alone != k {
			continue
		}
		switch f.Kind {
		case table.ToolFlaw:
			if c.Table, err = tooled(c.Table, c.Draws[k]/c.Scale); err != nil {
				return err
			}
		case table.OffsetFlaw:
			offset = c.Draws[k] / c.Scale
		case table.RoughFlaw:
			if f.Width > 0 {
				heights, at = &rough{rms: f.Width / c.Scale, length: f.Length / c.Scale, r: rand.New(kit.Chance(stream(i, k)))}, k
			}
		}
	}
	if offset == 0 && heights == nil {
		return nil
	}
	if err := c.shift(offset, heights); err != nil {
		return err
	}
	if heights != nil {
		c.Draws[at] = heights.found() * c.Scale
	}
	c.Misfit *= c.Scale
	return nil
}

// stream is that of error k of copy i.
func stream(i, k int) uint64 { return uint64(i)<<8 | uint64(k) }

// drawn is a number of the flaw's distribution.
func (f flaw) drawn(r *rand.Rand) float64 {
	if f.Law == table.Uniform {
		return f.Mean + f.Width*(2*r.Float64()-1)
	}
	x := r.NormFloat64()
	if f.Kind == table.SizeFlaw { // not turned inside out, whatever is drawn
		x = math.Max(-4, math.Min(4, x))
	}
	return f.Mean + f.Width*x
}
