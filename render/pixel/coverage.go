package pixel

import (
	"image"
	"math"

	"cavitywright/render"
)

// rule says what is inside where contours overlap.
type rule uint8

const (
	evenOdd rule = iota // what an odd number of edges parts from the outside
	around              // what any contour winds around
)

// coverage works out how much of each pixel lies inside a set of contours.
//
// Each edge adds, to the pixels it passes, the signed area to its right; the
// sum along a row is then the winding number averaged over the pixel (the
// method of Levien's font-rs, 2016). Sums are floats: the fixed-point numbers
// of golang.org/x/image/vector let an edge stray by a pixel in 512 rows, which
// shows where a wall and a ray should meet.
type coverage struct {
	area   image.Rectangle
	stride int
	sum    []float32
	reach  []span // of each row, where its sum is not zero
}

type span struct{ from, to int }

// begin readies the sums for an area of the picture.
func (v *coverage) begin(area image.Rectangle) {
	v.area, v.stride = area, area.Dx()+2
	n := v.stride * area.Dy()
	if cap(v.sum) < n {
		v.sum = make([]float32, n)
	}
	v.sum = v.sum[:n] // all zero: finish leaves it so
	v.reach = v.reach[:0]
	for range area.Dy() {
		v.reach = append(v.reach, span{v.stride, -1})
	}
}

// add adds a closed polygon, which must lie within the area.
func (v *coverage) add(points []render.Point) {
	x, y := float64(v.area.Min.X), float64(v.area.Min.Y)
	for i, q := range points {
		p := points[(i+len(points)-1)%len(points)]
		if p.Y < q.Y {
			v.edge(p.X-x, p.Y-y, q.X-x, q.Y-y, 1)
		} else if q.Y < p.Y {
			v.edge(q.X-x, q.Y-y, p.X-x, p.Y-y, -1)
		}
	}
}

// level is the height, in pixels, of an edge that adds too little to be seen
// even a million times, and whose slope might be no number.
const level = 1e-9

// edge adds one edge from (x0, y0) down to (x1, y1), with the sign of its
// direction.
func (v *coverage) edge(x0, y0, x1, y1, sign float64) {
	if y1-y0 < level {
		return
	}
	slope := (x1 - x0) / (y1 - y0)
	w := float64(v.area.Dx())
	first, last := max(int(y0), 0), min(int(math.Ceil(y1)), v.area.Dy())
	for row := first; row < last; row++ {
		top, bottom := max(y0, float64(row)), min(y1, float64(row+1))
		a, b := x0+(top-y0)*slope, x0+(bottom-y0)*slope
		a, b = min(max(a, 0), w), min(max(b, 0), w)
		v.strip(row, min(a, b), max(a, b), (bottom-top)*sign)
	}
}

// strip adds the piece of an edge within one row, d high with its sign, that
// lies between x = a and x = b.
func (v *coverage) strip(row int, a, b, d float64) {
	i, j := int(a), int(math.Ceil(b))
	r := &v.reach[row]
	r.from, r.to = min(r.from, i), max(r.to, max(j, i+1))
	sum := v.sum[row*v.stride:][:v.stride]
	if j <= i+1 {
		share := (a+b)/2 - float64(i)
		sum[i] += float32(d - d*share)
		sum[i+1] += float32(d * share)
		return
	}
	// The area to the right of the edge, pixel by pixel: a triangle, then
	// trapezia, then all but a triangle. Sums hold its differences.
	per := d / (b - a)
	before := 0.0
	for k := i; k < j; k++ {
		end := min(float64(k+1), b)
		crossed := end - a                 // of the edge's width, by the end of this pixel
		start := max(float64(k), a) - a    // and by its start
		mean := (start + crossed) / 2      // while within it
		within := end - max(float64(k), a) // width of the part within this pixel
		area := per * (mean*within + crossed*(float64(k+1)-end))
		sum[k] += float32(area - before)
		before = area
	}
	sum[j] += float32(d - before)
}

// finish calls paint for each pixel that is covered, row by row, with its
// coverage up to 256, and clears the sums.
func (v *coverage) finish(r rule, paint func(y, x int, cover []uint16)) {
	var line [256]uint16
	for row, reach := range v.reach {
		if reach.to < 0 {
			continue
		}
		to := min(reach.to+1, v.stride)
		sum := v.sum[row*v.stride:][:v.stride]
		total := float32(0)
		for from := reach.from; from < to; from += len(line) {
			part := sum[from:min(from+len(line), to)]
			for i, s := range part {
				total += s
				line[i] = cover(total, r)
			}
			clear(part)
			paint(v.area.Min.Y+row, v.area.Min.X+from, line[:len(part)])
		}
	}
}

// cover is the coverage, of 256, of a pixel with an average winding number.
func cover(winding float32, r rule) uint16 {
	if winding < 0 {
		winding = -winding
	}
	if r == evenOdd && winding > 1 {
		winding -= 2 * float32(int(winding/2))
		if winding > 1 {
			winding = 2 - winding
		}
	}
	return uint16(min(winding, 1)*256 + 0.5)
}
