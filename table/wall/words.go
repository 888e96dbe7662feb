package wall

import "fmt"

// Title is a law as a sentence names it.
func Title(l Law) string {
	switch l.(type) {
	case nil, Mirror:
		return "mirror"
	case Lossy:
		return "lossy mirror"
	case Rough:
		return "rough stretch"
	}
	return l.Name()
}

// Short says in a few words what a law is, with its numbers: for legends and
// notes.
func Short(l Law) string {
	switch l := l.(type) {
	case nil, Mirror:
		return "mirror"
	case Lossy:
		return fmt.Sprintf("lossy mirror, R = %.4g", l.Reflectivity)
	case Dielectric:
		name := "TM"
		if l.Polarisation == TE {
			name = "TE"
		}
		return fmt.Sprintf("dielectric, n = %.4g to %.4g, %s", l.Index, l.Outside, name)
	case Rough:
		return fmt.Sprintf("rough, %.4g %% scattered", 100*l.Share)
	}
	return l.Name()
}
