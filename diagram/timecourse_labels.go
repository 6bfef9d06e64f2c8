package diagram

import (
	"math"
	"sort"

	"saddlebook/diagram/lettering"
)

// endLabel names a line at its end.
type endLabel struct {
	line  int
	last  int // index of its last value
	block block
	first float64 // middle of its first line below its top
	key   bool    // a marker stands before it
	end   spot    // of the line
	top   float64
}

const endGap = 4.0 // least distance between two labels, one above the other

// makeEnds sets the labels and gives the room they need, markers included.
func (l *courseLayout) makeEnds() float64 {
	widest := math.Min(190, math.Max(76, 0.26*l.c.Width))
	room := 0.0
	for i, line := range l.c.Lines {
		last := line.lastValue()
		if line.T[last] < l.from {
			continue // nothing of it is shown
		}
		e := &endLabel{line: i, last: last, key: len(l.c.Lines) > 1}
		name, value := line.shown(), line.Text
		n, v := lettering.Runs(name), lettering.Runs(value)
		const gap = 7
		switch w := lettering.Width(n, nameSize); {
		case name == "" && value == "":
			continue
		case name != "" && value != "" && w+gap+lettering.Width(v, valueSize) <= widest:
			e.block.add("name", n, nameSize)
			e.block.lines = append(e.block.lines, textLine{"value", v, valueSize, lettering.Width(v, valueSize), e.block.lines[0].y})
			e.block.w += gap + lettering.Width(v, valueSize)
		default:
			for _, t := range lettering.Wrap(name, nameSize, widest) {
				e.block.add("name", t, nameSize)
			}
			for _, t := range lettering.Wrap(value, valueSize, widest) {
				e.block.add("value", t, valueSize)
			}
		}
		if len(e.block.lines) == 0 {
			continue // of spaces
		}
		e.first = e.block.lines[0].y - 0.35*e.block.lines[0].size
		w := e.block.w
		if e.key {
			w += keyRoom
		}
		room = math.Max(room, w)
		l.ends = append(l.ends, e)
	}
	return room
}

// spreadEnds finds a place for each label: as near to the end of its line as the
// others allow. Where there are too many for the plot, the plot grows.
func (l *courseLayout) spreadEnds() {
	const over, under = 8.0, 5.0 // how far labels may stand out beyond the plot
	total := 0.0
	for _, e := range l.ends {
		total += e.block.h + endGap
	}
	if need := total - endGap - over - under; need > l.height {
		l.height = math.Ceil(need)
		l.bottom = l.top + l.height
	}
	for _, e := range l.ends {
		line := l.c.Lines[e.line]
		y, _ := l.y(line.Y[e.last])
		e.end = spot{l.x(line.T[e.last]), y}
	}
	// Lines that end in one place stand in the order in which they came there.
	sort.SliceStable(l.ends, func(i, k int) bool {
		a, b := l.ends[i], l.ends[k]
		if math.Abs(a.end.y-b.end.y) > 0.01 {
			return a.end.y < b.end.y
		}
		return l.mean(a.line) > l.mean(b.line)
	})
	wish, size := make([]float64, len(l.ends)), make([]float64, len(l.ends))
	for i, e := range l.ends {
		wish[i], size[i] = e.end.y-e.first, e.block.h
	}
	for i, y := range spreadOut(wish, size, endGap, l.top-over, l.bottom+under) {
		l.ends[i].top = y
	}
}

// lastValue is the index of the last value of a line; every line has one.
func (l TimeLine) lastValue() int {
	k := len(l.Y) - 1
	for k > 0 && math.IsNaN(l.Y[k]) {
		k--
	}
	return k
}

func (l *courseLayout) mean(i int) float64 {
	sum, n := 0.0, 0.0
	for _, y := range l.c.Lines[i].Y {
		if !math.IsNaN(y) {
			sum, n = sum+y, n+1
		}
	}
	return sum / n
}

// spreadOut moves things of the given sizes, in order, from where they would like
// to begin to where they keep a gap and lie between low and high, by the least sum
// of squares: isotonic regression by pooling neighbours (Ayer and others, Ann.
// Math. Stat. 26, 641, 1955). They must fit.
func spreadOut(wish, size []float64, gap, low, high float64) []float64 {
	type pool struct {
		mean float64
		n    int
	}
	var pools []pool
	before := 0.0 // what stands before a thing if all are pushed together
	for i, w := range wish {
		p := pool{w - before, 1}
		before += size[i] + gap
		for len(pools) > 0 && pools[len(pools)-1].mean >= p.mean {
			q := pools[len(pools)-1]
			pools = pools[:len(pools)-1]
			p = pool{(q.mean*float64(q.n) + p.mean*float64(p.n)) / float64(q.n+p.n), q.n + p.n}
		}
		pools = append(pools, p)
	}
	last := high - (before - gap)
	out := make([]float64, 0, len(wish))
	before = 0
	for _, p := range pools {
		for range p.n {
			out = append(out, math.Max(low, math.Min(last, p.mean))+before)
			before += size[len(out)-1] + gap
		}
	}
	return out
}

// endMarks draws the labels, and a leader where one stands off the end of its line.
func (l *courseLayout) endMarks() []Mark {
	var leaders, labels []Mark
	at := l.right + l.leaderRoom
	for _, e := range l.ends {
		y := e.top + e.first
		early := e.end.x < l.right-1
		if early {
			leaders = append(leaders, Line{Role: "leader", X1: e.end.x + 5, Y1: e.end.y, X2: l.right + 2, Y2: e.end.y})
		}
		if early || math.Abs(y-e.end.y) > 2 {
			leaders = append(leaders, Line{Role: "leader", X1: l.right + 2, Y1: e.end.y, X2: at - 3, Y2: y})
		}
		x := at
		var marks []Mark
		if e.key {
			marks = append(marks, marker(e.line, spot{x + markerSize + 0.6, y}, markerSize))
			x += keyRoom
		}
		text := e.block.at(x, e.top, Start)
		// A value on the line of the name stands at its end.
		if n := len(e.block.lines); n == 2 && e.block.lines[0].y == e.block.lines[1].y {
			w := text[1].(Words)
			w.X = x + e.block.w - e.block.lines[1].w
			text[1] = w
		}
		labels = append(labels, Group{Role: "label", Marks: append(marks, text...)})
	}
	return append(leaders, labels...)
}
