package diagram

import (
	"math"
	"sort"

	"saddlebook/diagram/lettering"
)

func widestTick(text []string) float64 {
	w := 0.0
	for _, t := range text {
		w = math.Max(w, lettering.Width(lettering.Plain(t), tickSize))
	}
	return w
}

// leastStep is the least distance of two columns: by the width of the figure, by
// the levels that stand side by side, and by pictures.
func (l *layout) leastStep() float64 {
	least := leastStep * math.Min(1, math.Max(0.75, l.p.Width/720))
	if l.p.Sides {
		least *= 0.8
	}
	for _, s := range l.net.states {
		if s.clump > 1 {
			least = math.Max(least, 12*s.clump+36)
		}
		if p := s.point.Picture; p != nil && s.twin == nil {
			least = math.Max(least, p.Width+14)
		}
	}
	return least * l.ease
}

// measureStep finds the largest distance of columns with which the row fits. The
// outer columns keep room for the names of paths and of states while there is
// enough; else these find their place elsewhere.
func (l *layout) measureStep() float64 {
	at := l.offsets()
	total := at[len(at)-1]
	l.clumps()
	l.least = l.leastStep()
	for l.tight = 0; ; l.tight++ {
		l.step = math.Max(l.least, (l.p.Width-l.left-140)/total)
		l.rewrap()
		for range 4 { // bars, and so the room they need, depend on the step
			l.start, l.after = l.left+12+l.outer(l.net.first), l.outer(l.net.last)
			l.step = (l.p.Width - margin - l.after - l.start) / total
			if l.step < l.least && l.tight < 2 {
				break
			}
		}
		if l.step >= l.least || l.tight == 2 {
			return l.step
		}
	}
}

// fits reports whether a profile that is not folded has room.
func (l *layout) fits() bool { return l.measureStep() >= l.least }

// rewrap sets the width of names by the step.
func (l *layout) rewrap() {
	l.wrap = math.Min(150, math.Max(74, l.step*0.86))
	for _, s := range l.net.states {
		s.block = nil
	}
}

// stand puts the levels at their places with a given step.
func (l *layout) stand(step float64) {
	// Without room for one gap the figure becomes wider.
	l.step = math.Max(step, 40)
	at := l.offsets()
	l.right = l.start + at[len(at)-1]*l.step + l.after
	for _, s := range l.net.states {
		if s.point.Peak {
			continue // they follow from their levels
		}
		s.half = l.half(s)
		s.x = l.start + at[s.column-l.net.first]*l.step + l.aside(s)
	}
	l.board.left, l.board.right = l.left+6, math.Max(l.right, l.p.Width-margin)
}

// outer is the room that an outer column keeps.
func (l *layout) outer(column int) float64 {
	r := l.reach(column)
	if column == l.net.first && !l.net.begins || column == l.net.last && !l.net.ends {
		r = math.Max(r, l.seamReach(column))
	}
	return r
}

// offsets gives the place of each column in steps from the first.
func (l *layout) offsets() []float64 {
	peaks := make([]float64, l.net.last-l.net.first+1) // over the gap before each column
	for _, t := range l.net.stretches {
		from, to := min(t.from.column, t.to.column), max(t.from.column, t.to.column)
		for c := from + 1; c <= to && t.peak != nil; c++ {
			peaks[c-l.net.first]++
		}
	}
	at := make([]float64, len(peaks))
	for i := 1; i < len(at); i++ {
		at[i] = at[i-1] + 1 + 0.3*math.Min(4, math.Max(0, peaks[i]-1))
	}
	for _, m := range l.measures { // arrows need room under their peaks
		if m.kind != barrier && m.kind != barrierBack {
			continue
		}
		for _, t := range l.net.stretches {
			if t.peak == nil || !t.peak.is(m.to) {
				continue
			}
			for c := max(t.from.column, t.to.column); c-l.net.first < len(at); c++ {
				at[c-l.net.first] += 0.3
			}
		}
	}
	return at
}

// reach is how far the levels of an outer column, their names and the names of
// the paths that end there stand out from the middle of the column.
func (l *layout) reach(column int) float64 {
	out := 0.0
	for _, s := range l.net.states {
		if s.point.Peak || s.column != column {
			continue
		}
		r := l.half(s) + 4
		if l.tight < 2 {
			r = math.Max(r, l.block(s).w/2+4)
		}
		for i, route := range l.net.routes {
			if len(route) > 0 && route[len(route)-1].to == s && len(s.paths) == 1 && l.named(i) && l.tight == 0 {
				r = math.Max(r, math.Max(l.half(s), l.block(s).w/2)+l.pathName(i).w+13)
			}
		}
		out = math.Max(out, math.Abs(l.aside(s))+r)
	}
	return out
}

// clumps finds the levels of one column that would cover each other: they stand
// side by side.
func (l *layout) clumps() {
	columns := map[int][]*state{}
	for _, s := range l.net.states {
		if !s.point.Peak && !s.pass {
			columns[s.column] = append(columns[s.column], s)
		}
	}
	for _, group := range columns {
		sort.SliceStable(group, func(i, k int) bool { return group[i].y < group[k].y })
		for i := 0; i < len(group); {
			k := i + 1
			for k < len(group) && group[k].y-group[k-1].y < 8 {
				k++
			}
			clump := append([]*state{}, group[i:k]...)
			sort.SliceStable(clump, func(a, b int) bool { return clump[a].paths[0] < clump[b].paths[0] })
			for m, s := range clump {
				s.clump, s.slot = float64(k-i), float64(m)-float64(k-i-1)/2
			}
			i = k
		}
	}
}

// half is half the width of a level.
func (l *layout) half(s *state) float64 {
	h := math.Min(27, math.Max(13, 0.17*l.step))
	if s.clump > 1 {
		h = math.Min(h, math.Max(4, (0.6*l.step/s.clump-6)/2))
	}
	if s.pass {
		return 0
	}
	return h
}

// aside is how far a level of a clump stands from the middle of its column.
func (l *layout) aside(s *state) float64 {
	h := l.half(s)
	return s.slot * (2*h + math.Min(6, h))
}
