package tool

import (
	"fmt"
	"math"
	"slices"

	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
)

// Group are the nodes of one free wall, or the items, that are selected
// together: those of the selection and those that were added to it. It has one
// member or none where nothing was added.
type Group struct {
	Item  int   // whose nodes they are; -1 where they are items
	Nodes []int // nodes of the item
	Items []int
}

// Size is the number of members.
func (g Group) Size() int { return len(g.Nodes) + len(g.Items) }

// Group is what is selected together.
func (e *Editor) Group() Group {
	sel := e.s.Selection
	g := Group{Item: -1}
	items := e.s.Table().Design().Items
	if sel.Item < 0 || sel.Item >= len(items) {
		return g
	}
	node := e.node(sel.Item, sel.Handle)
	if sel.Handle >= 0 && node < 0 {
		return g // a handle that is no node
	}
	if node >= 0 {
		g.Item, g.Nodes = sel.Item, []int{node}
		for _, k := range e.also {
			if n := e.node(sel.Item, k); n >= 0 && !slices.Contains(g.Nodes, n) {
				g.Nodes = append(g.Nodes, n)
			}
		}
		return g
	}
	g.Items = []int{sel.Item}
	for _, k := range e.alsoItems {
		if k < len(items) && !slices.Contains(g.Items, k) {
			g.Items = append(g.Items, k)
		}
	}
	return g
}

// node is the node of a free wall that a handle is, -1 for none.
func (e *Editor) node(item, handle int) int {
	items := e.s.Table().Design().Items
	if item < 0 || item >= len(items) || handle < 0 {
		return -1
	}
	f, ok := items[item].Shape.(shape.Freeform)
	if !ok || handle >= len(f.Nodes()) {
		return -1
	}
	return handle // nodes come first among the handles
}

// alone forgets what was added to the selection.
func (e *Editor) alone() { e.also, e.alsoItems = nil, nil }

// toggle adds what was pressed to what is selected, or takes it out.
func (e *Editor) toggle(item, handle int) {
	sel := e.s.Selection
	node := e.node(item, handle) >= 0
	goes := sel.Item >= 0 && sel.Handle < 0 && handle < 0 ||
		node && sel.Item == item && e.node(sel.Item, sel.Handle) >= 0
	list, now, was := &e.alsoItems, item, sel.Item
	if node {
		list, now, was = &e.also, handle, sel.Handle
	}
	switch {
	case !goes:
		e.alone()
		e.s.Select(item, handle)
		return
	case slices.Contains(*list, now):
		*list = slices.DeleteFunc(*list, func(k int) bool { return k == now })
		return
	case now == was && len(*list) == 0:
		return
	case now == was:
		now, *list = (*list)[0], (*list)[1:]
	default:
		*list = append(*list, was)
	}
	if node {
		e.s.Select(item, now)
	} else {
		e.s.Select(now, -1)
	}
}

// inGroup reports whether what was pressed is selected with others.
func (e *Editor) inGroup(item, handle int) bool {
	g := e.Group()
	if g.Size() < 2 {
		return false
	}
	if n := e.node(item, handle); n >= 0 {
		return g.Item == item && slices.Contains(g.Nodes, n)
	}
	return handle < 0 && slices.Contains(g.Items, item)
}

// boxed selects what lies in the box from a to b: nodes of the item that was
// selected, else whole items, else the nodes of a free wall.
func (e *Editor) boxed(a, b r2.Vec) {
	box := plane.Around(a, b)
	e.alone()
	items := e.s.Table().Design().Items
	if i := e.before.Item; i >= 0 && i < len(items) && e.boxedNodes(i, box) {
		return
	}
	var in []int
	for i := range items {
		b := itemBox(e.s.Table(), i)
		if box.Contains(b.Min) && box.Contains(b.Max) {
			in = append(in, i)
		}
	}
	if len(in) == 0 {
		for i := range items {
			if e.boxedNodes(i, box) {
				return
			}
		}
		e.s.Select(-1, -1)
		return
	}
	e.alsoItems = in[1:]
	e.s.Select(in[0], -1)
}

// boxedNodes selects the nodes of a free wall in the box; false where there are
// none.
func (e *Editor) boxedNodes(item int, box r2.Box) bool {
	it := e.s.Table().Design().Items[item]
	f, ok := it.Shape.(shape.Freeform)
	if !ok {
		return false
	}
	var in []int
	for k, n := range f.Nodes() {
		if box.Contains(it.Place.Apply(n.At)) {
			in = append(in, k)
		}
	}
	if len(in) == 0 {
		return false
	}
	e.also = in[1:]
	e.s.Select(item, in[0])
	return true
}

// itemBox is a box about the walls of an item.
func itemBox(t *table.Table, item int) r2.Box {
	box := plane.Around()
	for i := range t.Pieces() {
		if p := &t.Pieces()[i]; p.Item == item {
			box = plane.Join(box, p.Bounds())
		}
	}
	return box
}

// members are the boxes of the members of a group, in table coordinates.
func (e *Editor) members(g Group) []r2.Box {
	t := e.s.Table()
	var boxes []r2.Box
	for _, n := range g.Nodes {
		it := t.Design().Items[g.Item]
		boxes = append(boxes, plane.Around(it.Place.Apply(it.Shape.(shape.Freeform).Nodes()[n].At)))
	}
	for _, i := range g.Items {
		boxes = append(boxes, itemBox(t, i))
	}
	return boxes
}

// shifted is the command that moves each member of a group of the design by its
// vector.
func (e *Editor) shifted(d table.Design, g Group, by []r2.Vec, name string) edit.Command {
	if len(g.Nodes) > 0 {
		it := d.Items[g.Item]
		f := it.Shape.(shape.Freeform)
		to := map[int]r2.Vec{}
		for k, n := range g.Nodes {
			to[n] = it.Place.Back(r2.Add(it.Place.Apply(f.Nodes()[n].At), by[k]))
		}
		return edit.Reshape{Item: g.Item, Shape: f.MoveNodes(to), Name: name}
	}
	places := make([]plane.Similarity, len(g.Items))
	for k, i := range g.Items {
		places[k] = d.Items[i].Place
		places[k].Shift = r2.Add(places[k].Shift, by[k])
	}
	return edit.Arrange{Items: g.Items, Places: places, Name: name}
}

// Line is how Align lines up what is selected.
type Line uint8

// The lines: an edge or the middle of all, or equal distances from the first to
// the last.
const (
	LeftEdge Line = iota
	RightEdge
	TopEdge
	BottomEdge
	MiddleX // on one upright line
	MiddleY // on one level line
	SpreadX // at equal steps from left to right
	SpreadY
)

// Align lines up or spreads the nodes or items that are selected together.
func (e *Editor) Align(how Line) error {
	g := e.Group()
	least := 2
	if how == SpreadX || how == SpreadY {
		least = 3
	}
	if g.Size() < least {
		return fmt.Errorf("select %d nodes or shapes at least; click the others with Shift, or pull a box around them", least)
	}
	boxes := e.members(g)
	if err := e.s.Do(e.shifted(e.s.Table().Design(), g, aligned(boxes, how), "align")); err != nil {
		return err
	}
	return nil
}

// Mirror makes a free wall symmetric in the line through the two of its nodes
// that are selected together; the part to the left of the line from the one
// with the smaller number to the other stays.
func (e *Editor) Mirror() error {
	g := e.Group()
	if len(g.Nodes) != 2 {
		return fmt.Errorf("select the two nodes that the mirror line runs through; click the second with Shift")
	}
	f := e.s.Table().Design().Items[g.Item].Shape.(shape.Freeform)
	n := f.Nodes()
	a, b := n[min(g.Nodes[0], g.Nodes[1])].At, n[max(g.Nodes[0], g.Nodes[1])].At
	d := r2.Sub(b, a)
	s := shape.Symmetry{Mirror: true, Centre: plane.Lerp(a, b, 0.5), Axis: math.Atan2(d.Y, d.X)}
	h, err := f.WithSymmetry(s)
	if err != nil {
		return fmt.Errorf("the free wall stays as it is: %w", err)
	}
	e.alone()
	return e.s.Do(edit.Reshape{Item: g.Item, Shape: h, Name: "mirror the wall"})
}

// Split adds a node in the middle of the span that leaves the selected node.
func (e *Editor) Split() error {
	sel := e.s.Selection
	if e.node(sel.Item, sel.Handle) < 0 {
		return fmt.Errorf("select the node that the span leaves; click it first")
	}
	f := e.s.Table().Design().Items[sel.Item].Shape.(shape.Freeform)
	return e.s.Do(edit.Reshape{Item: sel.Item, Shape: f.InsertNode(sel.Handle, 0.5), Name: "split a span"})
}

// aligned are the vectors by which the boxes move.
func aligned(boxes []r2.Box, how Line) []r2.Vec {
	all := plane.Around()
	for _, b := range boxes {
		all = plane.Join(all, b)
	}
	mid := func(b r2.Box) r2.Vec { return plane.Lerp(b.Min, b.Max, 0.5) }
	by := make([]r2.Vec, len(boxes))
	if how == SpreadX || how == SpreadY {
		along := func(i int) float64 {
			if how == SpreadX {
				return mid(boxes[i]).X
			}
			return mid(boxes[i]).Y
		}
		order := make([]int, len(boxes))
		for i := range order {
			order[i] = i
		}
		slices.SortStableFunc(order, func(a, b int) int {
			return int(math.Copysign(1, along(a)-along(b)))
		})
		first, last := along(order[0]), along(order[len(order)-1])
		for k, i := range order {
			d := first + (last-first)*float64(k)/float64(len(order)-1) - along(i)
			if how == SpreadX {
				by[i].X = d
			} else {
				by[i].Y = d
			}
		}
		return by
	}
	for i, b := range boxes {
		switch how {
		case LeftEdge:
			by[i].X = all.Min.X - b.Min.X
		case RightEdge:
			by[i].X = all.Max.X - b.Max.X
		case TopEdge:
			by[i].Y = all.Max.Y - b.Max.Y
		case BottomEdge:
			by[i].Y = all.Min.Y - b.Min.Y
		case MiddleX:
			by[i].X = mid(all).X - mid(b).X
		case MiddleY:
			by[i].Y = mid(all).Y - mid(b).Y
		}
	}
	return by
}
