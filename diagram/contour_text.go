package diagram

import (
	"fmt"
	"math"
	"strings"

	"saddlebook/diagram/lettering"
)

const (
	dotSize    = 4.2 // of a run
	plateGap   = 2.5 // between a text and the edge of its plate
	inFrame    = 3.0 // between a plate and the frame
	solidGap   = 3.5 // between plates
	numberCost = 55.0
	farCost    = 14.0 // of a leader
)

// room is a plot and what stands in it: texts find their place among lines, which
// they may cover at a price, and what is solid, which they may not.
type room struct {
	lines  *raster
	solid  *raster  // texts, markers and leaders
	boxes  []Rect   // of all texts
	over   []Mark   // markers, leaders and texts
	backed bool     // texts have a ground of their own
	key    []string // names that stand below the figure, numbered from 1
	notes  []note   // what else stands there
}

// note is something said below the figure; those of one kind stand together.
type note struct{ kind, what string }

func newRoom(frame Rect, backed bool) room {
	return room{lines: newRaster(frame), solid: newRaster(frame), backed: backed}
}

// plate is text on a ground of its own, to be put with its middle anywhere.
type plate struct {
	text  block
	w, h  float64
	align Anchor
}

func newPlate(role Role, text string, wide float64) plate {
	p := plate{align: Middle}
	for _, line := range lettering.Wrap(text, tickSize, wide) {
		p.text.add(role, line, tickSize)
	}
	p.w, p.h = p.text.w+2*plateGap, p.text.h+1
	return p
}

func (p plate) at(x, y float64) Rect { return Rect{x - p.w/2, y - p.h/2, x + p.w/2, y + p.h/2} }

// put sets a plate, which from now on takes its place.
func (r *room) put(p plate, box Rect) {
	r.solid.box(box)
	r.boxes = append(r.boxes, box)
	var marks []Mark
	if r.backed {
		marks = append(marks, Box{Role: "backing", X: box.X0, Y: box.Y0, W: box.X1 - box.X0, H: box.Y1 - box.Y0, Round: 2.5})
	}
	r.over = append(r.over, Group{Role: "label", Marks: append(marks, p.text.at((box.X0+box.X1)/2-p.text.w/2, box.Y0+0.5, p.align)...)})
}

// clear reports whether a plate may stand at box.
func (r *room) clear(box Rect) bool {
	return r.solid.holds(box.grown(inFrame)) && r.solid.count(box.grown(solidGap)) == 0
}

// place is a box that was found for a plate, with its leader.
type place struct {
	plate  plate
	box    Rect
	leader *Line
	cost   float64
}

// near finds the best place for a plate that names the place at: beside it, or
// farther off with a leader.
func (r *room) near(p plate, at spot, marked bool, best place) place {
	for _, d := range []float64{8, 11, 18, 28, 40, 56, 76, 100, 130, 170, 220, 280} {
		if d > best.cost {
			break
		}
		for k := range 16 {
			a := math.Pi / 8 * float64(k)
			// The nearest point of the box stands at distance d.
			dx, dy := math.Cos(a), math.Sin(a)
			foot := (dotSize + 1.8) / math.Max(math.Abs(dx), math.Abs(dy)) // of a leader
			if !marked {
				foot = 0
			}
			x, y := at.x+d*dx+p.w/2*sign(dx), at.y+d*dy+p.h/2*sign(dy)
			box := p.at(x, y)
			cost := d + 1.6*float64(r.lines.count(box.grown(textGap))) + 3*math.Abs(dy)
			if dx < -0.01 {
				cost += 1.5
			}
			if cost >= best.cost || !r.clear(box) {
				continue
			}
			var leader *Line
			if d > 13 || !marked {
				leader = &Line{Role: "map-leader", X1: at.x + foot*dx, Y1: at.y + foot*dy,
					X2: math.Max(box.X0, math.Min(box.X1, at.x)), Y2: math.Max(box.Y0, math.Min(box.Y1, at.y))}
				from, to := spot{leader.X1, leader.Y1}, spot{leader.X2, leader.Y2}
				if r.solid.along(from, to) > 0 {
					continue
				}
				cost += farCost + float64(r.lines.along(from, to))
			}
			if cost < best.cost {
				best = place{p, box, leader, cost}
			}
		}
	}
	return best
}

func sign(x float64) float64 {
	switch {
	case x > 0.01:
		return 1
	case x < -0.01:
		return -1
	}
	return 0
}

// name names a place: beside it, or by a number that is explained below. Where no
// marker shows the place, a leader does.
func (r *room) name(text string, at spot, marked bool) {
	best := place{cost: math.Inf(1)}
	for i, wide := range []float64{150, 96} {
		p := newPlate("name", text, wide)
		if len(p.text.lines) == 0 {
			return
		}
		q := r.near(p, at, marked, best)
		if i > 0 && q.cost+4 >= best.cost {
			continue
		}
		best = q
	}
	number := newPlate("name", fmt.Sprint(len(r.key)+1), 100)
	if best.cost > numberCost {
		if q := r.near(number, at, marked, place{cost: best.cost - numberCost}); q.leader != nil || q.box != (Rect{}) {
			best = q
			r.key = append(r.key, text)
		}
	}
	if math.IsInf(best.cost, 1) {
		r.notes = append(r.notes, note{"without room for a name", text})
		return
	}
	r.settle(best)
}

func (r *room) settle(p place) {
	if p.leader != nil {
		r.over = append(r.over, *p.leader)
		r.solid.line([]spot{{p.leader.X1, p.leader.Y1}, {p.leader.X2, p.leader.Y2}})
	}
	r.put(p.plate, p.box)
}

// inside finds a place for a plate in a region, with room around it to grow, and
// clear of lines unless they may be covered, then of as many as can be. Among
// equals it is the one nearest to the middle of all.
func (r *room) inside(p plate, grow float64, out *raster, cover bool) (Rect, bool) {
	const step = 4
	plot := r.solid.frame
	var boxes []Rect
	sum, least := spot{}, math.MaxInt
	w, h := p.w*grow/2, p.h*grow/2
	for y := plot.Y0 + h; y <= plot.Y1-h; y += step {
		for x := plot.X0 + w; x <= plot.X1-w; x += step {
			around := Rect{x - w, y - h, x + w, y + h}
			if out.count(around) > 0 || r.solid.count(around.grown(solidGap)) > 0 || !r.clear(p.at(x, y)) {
				continue
			}
			lines := r.lines.count(around.grown(textGap))
			if lines > least || lines > 0 && !cover {
				continue
			}
			if lines < least {
				boxes, sum, least = nil, spot{}, lines
			}
			boxes = append(boxes, p.at(x, y))
			sum.x, sum.y = sum.x+x, sum.y+y
		}
	}
	n := float64(len(boxes))
	best, at := math.Inf(1), Rect{}
	for _, b := range boxes {
		if d := math.Hypot((b.X0+b.X1)/2-sum.x/n, (b.Y0+b.Y1)/2-sum.y/n); d < best-1e-9 {
			best, at = d, b
		}
	}
	return at, n > 0
}

// below gives the lines that stand under the figure: names behind numbers, notes.
func (r *room) below() []string {
	var out []string
	if len(r.key) > 0 {
		var key []string
		for i, name := range r.key {
			key = append(key, fmt.Sprintf("%d:\u00a0%s", i+1, name))
		}
		out = append(out, strings.Join(key, "; "))
	}
	for i, n := range r.notes {
		first := true
		for _, o := range r.notes[:i] {
			first = first && o.kind != n.kind
		}
		if !first {
			continue
		}
		var all []string
		for _, o := range r.notes[i:] {
			if o.kind == n.kind && o.what != "" {
				all = append(all, o.what)
			}
		}
		if text := n.kind; len(all) > 0 {
			out = append(out, text+": "+strings.Join(all, ", "))
		} else {
			out = append(out, text)
		}
	}
	return out
}
