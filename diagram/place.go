package diagram

import (
	"math"
	"sort"
)

// Labels are placed by choice: each has a list of places it could take, with a
// price, those that would cover a curve or a level are struck out, and the
// cheapest set without overlap is sought label by label. A label that finds no
// place near its level stands above or below everything, with a leader line.

const (
	labelGap  = 4.0 // least distance between two labels, one above the other
	wordGap   = 9.0 // and side by side
	strokeGap = 3.5 // least distance between a label and a curve or level

	leaderPrice = 14.0 // what any place with a leader costs at least
)

// label is text and what it belongs to.
type label struct {
	forms    []form
	bar      Rect // what it names
	prefer   []side
	name     bool    // of a path: gives way to states
	overhang float64 // how far the text of its level stands out beyond it
	spots    []Rect  // other things that it names, near which it needs no leader

	choices []choice
	far     bool // the far ones are among them
	at      int  // index into choices; -1: none yet
}

// form is one way to set a label.
type form struct {
	w, h float64
	make func(x, y float64, align Anchor) []Mark // with its top left corner at x, y
}

type side int8

const (
	above side = iota
	below
	right
	left
)

// choice is a place a label could take.
type choice struct {
	box    Rect
	reach  Rect // around the box and its leader
	price  float64
	align  Anchor
	leader *Line
	form   int
}

// board holds what labels must keep clear of.
type board struct {
	strokes     Rect           // around all strokes
	bars        []Rect         // the levels among them
	columns     map[int][]Rect // small boxes along curves and levels, by their place along x
	solid       []Rect         // other text
	soft        []Rect         // better kept clear of
	heading     []Rect         // even better, though it can give way
	left, right float64
	labels      []*label
}

const columnWidth = 24

// stroke adds a box that no label may touch.
func (b *board) stroke(r Rect) {
	if b.columns == nil {
		b.columns, b.strokes = map[int][]Rect{}, nothing()
	}
	b.strokes = b.strokes.join(r)
	for c := int(math.Floor(r.X0 / columnWidth)); c <= int(math.Floor(r.X1/columnWidth)); c++ {
		b.columns[c] = append(b.columns[c], r)
	}
}

// strikes counts the strokes that r meets, up to most.
func (b *board) strikes(r Rect, most int) int {
	n := 0
	for c := int(math.Floor(r.X0 / columnWidth)); c <= int(math.Floor(r.X1/columnWidth)); c++ {
		for _, s := range b.columns[c] {
			if r.meets(s) {
				if n++; n >= most {
					return n
				}
			}
		}
	}
	return n
}

// free reports whether a label may stand at r, other labels left out.
func (b *board) free(r Rect) bool {
	if r.X0 < b.left || r.X1 > b.right || b.strikes(r.grown(strokeGap), 1) > 0 {
		return false
	}
	for _, s := range b.solid {
		if spaced(r).grown(12).meets(s) {
			return false
		}
	}
	return true
}

// spaced is r with the room that a label keeps around it.
func spaced(r Rect) Rect {
	return Rect{r.X0 - wordGap, r.Y0 - labelGap, r.X1 + wordGap, r.Y1 + labelGap}
}

// place chooses a place for every label.
func (b *board) place() {
	for _, l := range b.labels {
		l.choices, l.at = b.choicesOf(l), -1
	}
	order := append([]*label{}, b.labels...)
	sort.SliceStable(order, func(i, k int) bool {
		if order[i].name != order[k].name {
			return order[k].name
		}
		return len(order[i].choices) < len(order[k].choices)
	})
	for _, l := range order {
		b.settle(l)
	}
	for range 8 {
		moved := false
		for _, l := range order {
			moved = b.settle(l) || moved
		}
		for _, l := range order {
			moved = b.push(l) || moved
		}
		if !moved {
			break
		}
	}
	for range 4 {
		done := true
		for _, l := range order {
			if l.at < 0 || clashes(l, &l.choices[l.at], b.labels, 1) > 0 {
				b.shelve(l)
				done = false
			}
		}
		if done {
			break
		}
	}
}

// push tries cheaper places for l that are taken, with the labels that stand
// there moved elsewhere, and keeps the first that makes the whole cheaper.
func (b *board) push(l *label) bool {
	if l.at < 0 {
		return false
	}
	was := l.at
	before := b.cost(l)
	for i, tried := 0, 0; i < len(l.choices) && tried < 60; i++ {
		c := &l.choices[i]
		if c.price >= before-1e-9 {
			continue
		}
		tried++
		var taken []*label
		for _, o := range b.labels {
			if o != l && o.at >= 0 && clash(c, &o.choices[o.at]) > 0 {
				taken = append(taken, o)
			}
		}
		if len(taken) == 0 || len(taken) > 3 {
			continue
		}
		old, sum := make([]int, len(taken)), before
		for k, o := range taken {
			old[k] = o.at
			sum += b.cost(o)
		}
		l.at = i
		for _, o := range taken {
			o.at = -1
		}
		now := 0.0
		for _, o := range taken {
			b.settle(o)
		}
		for _, o := range append(taken, l) {
			now += b.cost(o)
		}
		if now < sum-1e-6 {
			return true
		}
		l.at = was
		for k, o := range taken {
			o.at = old[k]
		}
	}
	return false
}

// cost is the price of where l stands, with what it overlaps.
func (b *board) cost(l *label) float64 {
	if l.at < 0 {
		return 1e6
	}
	c := &l.choices[l.at]
	return c.price + 1000*float64(clashes(l, c, b.labels, 1000))
}

// settle moves l to its cheapest choice among others and reports a change.
func (b *board) settle(l *label) bool {
	best, at := b.cheapest(l, 1e9, 0)
	if best > leaderPrice && !l.far {
		// Only now is it worth while to look farther off.
		l.far = true
		near := len(l.choices)
		l.choices = append(l.choices, b.choicesOf(l)...)
		if _, i := b.cheapest(l, best, near); i >= 0 {
			at = i
		}
	}
	moved := at != l.at
	l.at = at
	return moved
}

// cheapest finds the choice of l, from one index on, that costs least and less
// than best; -1 if there is none.
func (b *board) cheapest(l *label, best float64, from int) (float64, int) {
	at := -1
	for i := from; i < len(l.choices); i++ {
		c := &l.choices[i]
		if c.price >= best {
			continue
		}
		most := int((best-c.price)/1000) + 1 // more clashes than this cannot win
		if p := c.price + 1000*float64(clashes(l, c, b.labels, most)); p < best-1e-9 {
			best, at = p, i
		}
	}
	return best, at
}

// clashes counts the overlaps that choice c of l would make with others, and
// stops at most.
func clashes(l *label, c *choice, others []*label, most int) int {
	n := 0
	for _, o := range others {
		if o != l && o.at >= 0 {
			if n += clash(c, &o.choices[o.at]); n >= most {
				break
			}
		}
	}
	return n
}

// clash counts the overlaps of two choices and their leaders.
func clash(c, o *choice) int {
	if !spaced(c.reach).meets(o.reach) {
		return 0
	}
	n := 0
	if spaced(c.box).meets(o.box) {
		n++
	}
	if c.leader != nil && crosses(*c.leader, o.box.grown(3)) {
		n++
	}
	if o.leader != nil && crosses(*o.leader, c.box.grown(3)) {
		n++
	}
	if c.leader != nil && o.leader != nil && cross(*c.leader, *o.leader) {
		n++
	}
	return n
}

// shelve puts l above or below everything: in the nearest row where it overlaps
// nothing, leaders included, or where it overlaps least if there is none near.
func (b *board) shelve(l *label) {
	all := b.strokes
	for _, s := range b.solid {
		all = all.join(s)
	}
	middle := (l.bar.X0 + l.bar.X1) / 2
	w, h := l.forms[0].w, l.forms[0].h
	best := choice{price: math.Inf(1)}
	for row := 0; row < 10 || math.IsInf(best.price, 1); row++ {
		for _, top := range []bool{true, false} {
			y := all.Y1 + 14 + float64(row)*20
			if top {
				y = all.Y0 - 14 - float64(row)*20 - h
			}
			for k := -16; k <= 16; k++ {
				x := middle - w/2 + float64(k)*w/4
				x = math.Max(b.left, math.Min(b.right-w, x))
				box := Rect{x, y, x + w, y + h}
				c := choice{box: box, align: Middle, leader: b.leader(l, box)}
				c.reach = box.join(c.leader.Bounds())
				c.price = math.Abs(c.leader.Y2-c.leader.Y1)/10 + math.Abs(float64(k))
				if c.price >= best.price || b.covered(l, box) {
					continue
				}
				c.price += 1000*float64(clashes(l, &c, b.labels, 50)) + 4*float64(b.struck(*c.leader))
				if b.barred(*c.leader, l.bar) {
					c.price += 300
				}
				if c.price < best.price {
					best = c
				}
			}
		}
	}
	l.choices = append(l.choices, best)
	l.at = len(l.choices) - 1
}

// covered reports whether another label stands at box.
func (b *board) covered(l *label, box Rect) bool {
	for _, o := range b.labels {
		if o != l && o.at >= 0 && spaced(box).meets(o.choices[o.at].box) {
			return true
		}
	}
	return false
}

// overlaps counts the labels that stand at a place with an overlap.
func (b *board) overlaps() int {
	n := 0
	for _, l := range b.labels {
		if l.at < 0 || clashes(l, &l.choices[l.at], b.labels, 1) > 0 {
			n++
		}
	}
	return n
}
