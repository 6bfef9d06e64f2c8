package diagram

import (
	"math"
	"sort"

	"saddlebook/diagram/axis"
	"saddlebook/diagram/lettering"
)

// A row so crowded that its names find no places shows numbers instead, and the
// names with their values in a list under the row.

// numbered gives every state of the row its number in the whole profile.
func (l *layout) numbered() {
	l.numbers = map[*state]int{}
	order := append([]*state{}, l.whole.states...)
	at := map[*state]float64{}
	for _, s := range order {
		at[s] = float64(s.column)
	}
	for _, t := range l.whole.stretches {
		if t.peak != nil {
			at[t.peak] = t.place()
		}
	}
	sort.SliceStable(order, func(i, k int) bool { return at[order[i]] < at[order[k]] })
	of := map[*state]int{}
	for i, s := range order {
		of[s] = i + 1
	}
	for _, s := range l.net.states {
		w := s
		if s.of != nil {
			w = s.of
		}
		if !s.pass {
			l.numbers[s] = of[w]
		}
		s.block = nil
	}
}

// key is the list of the names behind the numbers, with its top at y.
func (l *layout) key(y float64) []Mark {
	type entry struct {
		number int
		block  block
		value  *textLine
	}
	room := l.p.Width - 2*margin
	var entries []entry
	widest := 0.0
	for _, s := range l.net.states {
		if l.numbers[s] == 0 {
			continue
		}
		var b block
		var beside *textLine // the value, on the last line of the name
		const indent = 20.0
		for _, line := range lettering.Wrap(s.point.shown(), valueSize, math.Min(room, 260)-indent) {
			b.add("name", line, valueSize)
		}
		value := lettering.Runs(s.point.Text)
		if n := len(b.lines); n > 0 && b.lines[n-1].w+7+lettering.Width(value, valueSize) < 260 {
			last := b.lines[n-1]
			beside = &textLine{"value", value, valueSize, last.w + 7, last.y}
			b.w = math.Max(b.w, last.w+7+lettering.Width(value, valueSize))
		} else {
			for _, line := range lettering.Wrap(s.point.Text, valueSize, math.Min(room, 260)-indent) {
				b.add("value", line, valueSize)
			}
		}
		b.w += indent
		entries = append(entries, entry{l.numbers[s], b, beside})
		widest = math.Max(widest, b.w)
	}
	sort.Slice(entries, func(i, k int) bool { return entries[i].number < entries[k].number })
	const gap = 18.0
	columns := max(1, int((room+gap)/(widest+gap)))
	lines := (len(entries) + columns - 1) / columns
	var marks []Mark
	for line := range lines { // down the columns
		tall := 0.0
		for c := range columns {
			if i := c*lines + line; i < len(entries) {
				e, x := entries[i], margin+float64(c)*(widest+gap)
				b := e.block
				set := []Mark{Words{Role: "value", X: x + 14, Y: y + b.lines[0].y, Size: valueSize, Anchor: End, Runs: lettering.Plain(axis.Text(float64(e.number), 0))}}
				for _, t := range b.lines {
					set = append(set, Words{Role: t.role, X: x + 20, Y: y + t.y, Size: t.size, Runs: t.runs})
				}
				if v := e.value; v != nil {
					set = append(set, Words{Role: v.role, X: x + 20 + v.w, Y: y + v.y, Size: v.size, Runs: v.runs})
				}
				marks = append(marks, Group{Role: "label", Marks: set})
				tall = math.Max(tall, b.h)
			}
		}
		y += tall + labelGap
	}
	return marks
}
