package shape

import "math"

const fullTurn = 2 * math.Pi

// Catalogue lists the families of figures in the order in which a gallery
// shows them.
func Catalogue() []*Kind {
	return catalogue
}

var catalogue = []*Kind{
	&disc,
}
