package render

// ClipStroke is the part of a path that lies in a box, for stroking: a curve
// that leaves it and comes back becomes two. Curves come back as chords within
// tol of them.
func ClipStroke(p Path, box Box, tol float64) Path {
	var out Path
	p.Contours(tol, func(points []Point, closed bool) {
		if inside(points, box) {
			out.polyline(points, closed)
			return
		}
		if closed {
			points = append(points, points[0])
		}
		clipLine(&out, points, box)
	})
	return out
}

// clipLine adds the stretches of an open polyline that lie in the box.
func clipLine(out *Path, points []Point, box Box) {
	var last Point
	drawing := false
	for i := 1; i < len(points); i++ {
		a, b, ok := box.Clip(points[i-1], points[i])
		if !ok {
			drawing = false
			continue
		}
		if !drawing || a != last {
			out.MoveTo(a.X, a.Y)
		}
		out.LineTo(b.X, b.Y)
		last, drawing = b, true
	}
}

// ClipFill is the part of a filled path that lies in a box: each contour is
// cut at each side of the box in turn (Sutherland and Hodgman 1974), which may
// leave edges of no area along it.
func ClipFill(p Path, box Box, tol float64) Path {
	var out Path
	var poly, next []Point
	p.Contours(tol, func(points []Point, _ bool) {
		if inside(points, box) {
			out.polyline(points, true)
			return
		}
		poly = append(poly[:0], points...)
		for side := range sides {
			next = cutSide(next[:0], poly, box, side)
			poly, next = next, poly
		}
		if len(poly) > 2 {
			out.polyline(poly, true)
		}
	})
	return out
}

// cutSide appends to out the part of the polygon on the inner side of one side
// of the box.
func cutSide(out, poly []Point, box Box, side int) []Point {
	for i, b := range poly {
		a := poly[(i+len(poly)-1)%len(poly)]
		da, db := box.depth(side, a), box.depth(side, b)
		if (da < 0) != (db < 0) {
			out = append(out, box.crossing(side, a, b))
		}
		if db >= 0 {
			out = append(out, b)
		}
	}
	return out
}

// inside says whether all points lie in the box.
func inside(points []Point, box Box) bool {
	for _, p := range points {
		if !box.Contains(p) {
			return false
		}
	}
	return true
}

// polyline adds a contour.
func (p *Path) polyline(points []Point, closed bool) {
	for i, q := range points {
		if i == 0 {
			p.MoveTo(q.X, q.Y)
		} else {
			p.LineTo(q.X, q.Y)
		}
	}
	if closed {
		p.Close()
	}
}
