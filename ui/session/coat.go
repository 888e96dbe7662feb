package session

import (
	"cavitywright/table/param"
	"cavitywright/table/wall"
)

// NoCoat is the selected coat where none is.
const NoCoat = -1

// SelectCoat selects a coat by its place in the design's list, or NoCoat.
func (s *Session) SelectCoat(i int) {
	if s.Coat != i {
		s.Coat = i
		s.Touch()
	}
}

// Laid is the law that a pull of the coat tool lays: an opening, until another
// is chosen.
func (s Settings) Laid() wall.Law {
	if s.Law == nil {
		return wall.Opening{}
	}
	return s.Law
}

// Brush is the law of the kind called name that a form or command begins with:
// now where it is of that kind, else the kind's defaults.
func Brush(name string, now wall.Law) (wall.Law, error) {
	if now != nil && now.Name() == name {
		return now, nil
	}
	for _, k := range wall.Kinds() {
		if k.Name == name {
			return wall.Make(name, param.Defaults(k.Specs))
		}
	}
	return wall.Make(name, nil)
}
