package reading

import (
	"math"
	"strconv"

	"cavitywright/table"
	"cavitywright/table/wall"
)

// Speed is how fast waves or particles go outside any body, in metres a
// second; 0 for none known.
type Speed float64

// The speeds that have a name.
const (
	LightSpeed Speed = 299792458 // in vacuum, exact by the definition of the metre
	SoundSpeed Speed = 343       // in dry air at 20 °C; common practice
)

// BadSpeed says that a speed was not understood.
type BadSpeed struct{ Text string }

func (e *BadSpeed) Error() string {
	return "The speed " + strconv.Quote(e.Text) + " is not understood; write light, sound, or metres a second as a number."
}

// ParseSpeed reads light, sound, or metres a second; nothing is no speed.
func ParseSpeed(text string) (Speed, error) {
	switch text {
	case "":
		return 0, nil
	case "light":
		return LightSpeed, nil
	case "sound":
		return SoundSpeed, nil
	}
	v, err := strconv.ParseFloat(text, 64)
	if err != nil || !(v > 0) || math.IsInf(v, 0) {
		return 0, &BadSpeed{text}
	}
	return Speed(v), nil
}

// index is the refractive index of the body whose walls are dielectric, by
// which its waves are slower; 1 where none is.
func index(t *table.Table) float64 {
	n := 1.0
	look := func(l wall.Law) {
		if d, is := l.(wall.Dielectric); is {
			n = d.Index
		}
	}
	for _, s := range t.Stretches() {
		look(s.Law)
	}
	look(t.Law()) // the bare wall's counts before those of coats
	return n
}
