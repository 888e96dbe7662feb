package figure

// Texture is how a stretch of wall with a law of its own is drawn, on the wall
// and on an axis of arclength alike: told apart in grey print too.
type Texture uint8

// The textures of a wall.
const (
	Plain  Texture = iota // a mirror: the wall's line alone
	Gap                   // an opening: nothing between two posts
	Dotted                // a lossy mirror: dots along the inside
	Double                // a dielectric: a second line along the inside
	Saw                   // a rough wall: teeth along the inside
)

// Coated is a stretch of an axis of arclength, Lo < Hi in its unit, on which
// the wall has a texture.
type Coated struct {
	Lo, Hi  float64
	Texture Texture
}

// Key is a line of a legend: what a texture means here.
type Key struct {
	Texture Texture
	Text    string
}
