package diagram

import "math"

// A profile that is wider than its figure is folded: cut at columns into rows.
// A level at a cut stands in both rows. A stretch that runs over a cut column is
// parted there by a pass, a point of the curve without a bar or a name.

// cuts chooses the columns at which rows begin and end, first and last among
// them: as few rows as fit, few stretches cut, rows of even length.
func (l *layout) cuts() []int {
	n := l.net
	count := n.last - n.first
	l.clumps()
	l.least = l.leastStep()
	l.step, l.tight = l.least, 1
	l.rewrap()
	at := l.offsets()
	if l.p.Sides {
		return []int{n.first, n.last}
	}
	reach := make([]float64, count+1)
	for i := range reach {
		reach[i] = l.reach(n.first + i)
	}
	room := l.p.Width - margin - l.left - 12
	over := make([]int, count+1) // stretches over a column
	for _, t := range n.stretches {
		for c := t.from.column + 1; c < t.to.column; c++ {
			over[c-n.first]++
		}
	}
	fits := func(a, b int) bool {
		r, s := reach[a], reach[b]
		if a > 0 {
			r = math.Max(r, l.seamReach(n.first+a))
		}
		if b < count {
			s = math.Max(s, l.seamReach(n.first+b))
		}
		return b == a+1 || r+(at[b]-at[a])*l.least+s <= room
	}
	best, from := make([]float64, count+1), make([]int, count+1)
	for b := 1; b <= count; b++ {
		best[b] = math.Inf(1)
		for a := b - 1; a >= 0 && fits(a, b); a-- {
			share := (at[b] - at[a]) * l.least / room
			cost := best[a] + 1000 + 100*share*share
			if b < count {
				cost += 600 * float64(over[b])
			}
			if cost < best[b] {
				best[b], from[b] = cost, a
			}
		}
	}
	var cuts []int
	for b := count; b > 0; b = from[b] {
		cuts = append([]int{n.first + b}, cuts...)
	}
	return append([]int{n.first}, cuts...)
}

// fold parts a net at its cuts. tall is the height of a unit of value.
func (n *net) fold(cuts []int, tall float64) []*net {
	passes := map[*stretch]map[int]float64{}
	for _, c := range cuts[1 : len(cuts)-1] {
		n.pass(c, tall, passes)
	}
	var rows []*net
	for i := 1; i < len(cuts); i++ {
		rows = append(rows, n.row(cuts[i-1], cuts[i], passes))
	}
	return rows
}

// pass chooses the values at which stretches run over column c, clear of its
// levels and of each other.
func (n *net) pass(c int, tall float64, passes map[*stretch]map[int]float64) {
	var taken []float64
	for _, s := range n.states {
		if !s.point.Peak && s.column == c {
			taken = append(taken, s.point.Value)
		}
	}
	for _, t := range n.stretches {
		if !(t.from.column < c && c < t.to.column) {
			continue
		}
		v0, v1 := t.from.point.Value, t.to.point.Value
		if t.peak != nil {
			if float64(c) <= t.place() {
				v1 = t.peak.point.Value
			} else {
				v0 = t.peak.point.Value
			}
		}
		best, room := (v0+v1)/2, -1.0
		for _, f := range []float64{0.5, 0.4, 0.6, 0.3, 0.7, 0.2, 0.8, 0.1, 0.9} {
			v, free := v0+f*(v1-v0), 16.0 // more room than this is no better
			for _, o := range taken {
				free = math.Min(free, math.Abs(v-o)*tall)
			}
			if free > room {
				best, room = v, free
			}
		}
		if passes[t] == nil {
			passes[t] = map[int]float64{}
		}
		passes[t][c] = best
		taken = append(taken, best)
	}
}

// place of the peak of t in columns.
func (t *stretch) place() float64 {
	f, g := float64(t.from.column), float64(t.to.column)
	return f + t.peak.position()*(g-f)
}

// row is the part of a net from column a to column b.
func (n *net) row(a, b int, passes map[*stretch]map[int]float64) *net {
	r := &net{first: a, last: b, begins: a == n.first, ends: b == n.last}
	copies := map[*state]*state{}
	for _, s := range n.states {
		if s.point.Peak || s.column < a || s.column > b {
			continue
		}
		c := *s
		c.of, c.block = s, nil
		copies[s] = &c
		r.states = append(r.states, &c)
	}
	pass := func(t *stretch, c int) *state {
		s := &state{pass: true, paths: t.paths, column: c, point: ProfilePoint{Value: passes[t][c]}}
		r.states = append(r.states, s)
		return s
	}
	pieces := map[*stretch]*stretch{}
	for _, t := range n.stretches {
		f, g := t.from.column, t.to.column
		if f >= b || g <= a {
			continue
		}
		p := &stretch{from: copies[t.from], to: copies[t.to], paths: t.paths, dir: t.dir}
		if p.from == nil {
			p.from = pass(t, a)
		}
		if p.to == nil {
			p.to = pass(t, b)
		}
		if t.peak != nil {
			at, low, high := t.place(), float64(max(f, a)), float64(min(g, b))
			if at >= low && (at < high || g <= b) {
				c := *t.peak
				c.of, c.block = t.peak, nil
				c.point.Position = (at - low) / (high - low)
				p.peak = &c
				r.states = append(r.states, &c)
			}
		}
		pieces[t] = p
		r.stretches = append(r.stretches, p)
	}
	for _, route := range n.routes {
		var part []*stretch
		for _, t := range route {
			if p := pieces[t]; p != nil {
				part = append(part, p)
			}
		}
		r.routes = append(r.routes, part)
	}
	return r
}

const seam = 18.0 // how far the mark of a row that goes on stands out

// seams shows where a row goes on: dashes behind its last levels and before the
// first ones of the next row.
func (l *layout) seams() []Mark {
	var marks []Mark
	for _, end := range []struct {
		column int
		dir    float64
		whole  bool
	}{{l.net.first, -1, l.net.begins}, {l.net.last, 1, l.net.ends}} {
		for _, s := range l.net.states {
			if end.whole || s.point.Peak || s.column != end.column || !l.goesOn(s, end.dir) {
				continue
			}
			x := s.x + end.dir*s.half
			x0, x1 := x+end.dir*3, x+end.dir*(seam-4)
			line := Line{Role: "seam", X1: math.Min(x0, x1), Y1: s.y, X2: math.Max(x0, x1), Y2: s.y}
			marks = append(marks, line)
			l.board.stroke(line.Bounds())
		}
	}
	return marks
}

// goesOn reports whether a stretch of another row leaves s in a direction.
func (l *layout) goesOn(s *state, dir float64) bool {
	if s.pass {
		return true
	}
	for _, t := range l.whole.stretches {
		if dir > 0 && s.is(t.from) || dir < 0 && s.is(t.to) {
			return true
		}
	}
	return false
}

// seamReach is the room that a column at a cut needs.
func (l *layout) seamReach(column int) float64 {
	out := 0.0
	for _, s := range l.net.states {
		if !s.point.Peak && s.column == column {
			out = math.Max(out, math.Abs(l.aside(s))+l.half(s)+seam)
		}
	}
	return out
}
