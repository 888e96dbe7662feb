package reading

import (
	"fmt"
	"math"
	"strings"

	"cavitywright/sim/figure"
	"cavitywright/sim/measure/leak"
)

const (
	// farRays is the number of rays of the far field at effort 1.
	farRays = 60000
	// windowHalf is the half width of the window about +x (radians).
	windowHalf = 30 * math.Pi / 180
)

// farField is what leaves, by the start measure that suits the table.
func (b bench) farField() (*leak.FarField, error) {
	return once(&b.kept.farField, func() (*leak.FarField, error) {
		t := b.tracer.Table()
		return leak.MeasureEmission(b.tracer, b.run, leak.NaturalSeeding(t), leak.EmissionPlan{Rays: int(farRays * b.effort)})
	})
}

// far is a number of the far field.
func (b bench) far(unit, about string, read func(*leak.FarField) (float64, float64)) (figure.Scalar, error) {
	f, err := b.farField()
	if err != nil {
		return figure.Scalar{}, err
	}
	s := figure.Scalar{Unit: unit, Bounces: f.Flights}
	s.Value, s.StdErr = read(f)
	s.Note = about + "; " + strings.TrimSuffix(strings.Join(f.Lines(), " "), ".")
	return s, nil
}

func windowShare(b bench) (figure.Scalar, error) {
	return b.far("1", fmt.Sprintf("within ±%.4g° of +x", windowHalf*180/math.Pi), func(f *leak.FarField) (float64, float64) { return f.Share(0, windowHalf) })
}

func backShare(b bench) (figure.Scalar, error) {
	return b.far("1", fmt.Sprintf("within ±%.4g° of −x", windowHalf*180/math.Pi), func(f *leak.FarField) (float64, float64) { return f.Share(math.Pi, windowHalf) })
}

func lobeWidth(b bench) (figure.Scalar, error) {
	return b.far("°", "full width at half of the height of the greatest lobe, under a running mean of 4.5°", func(f *leak.FarField) (float64, float64) {
		l := f.Lobe()
		return l.Width * 180 / math.Pi, l.WidthErr * 180 / math.Pi
	})
}

func meanCosine(b bench) (figure.Scalar, error) {
	return b.far("1", "of the direction from +x", (*leak.FarField).MeanCosine)
}

func farEntropy(b bench) (figure.Scalar, error) {
	return b.far("1", "in bins of 4.5°, relative to an even far field", (*leak.FarField).Entropy)
}
