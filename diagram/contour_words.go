package diagram

import (
	"fmt"
	"math"
	"strings"

	"saddlebook/diagram/lettering"
	"saddlebook/kinetics/unit"
)

// heading is the default title.
func (l *mapLayout) heading() string {
	m := &l.m
	low, high := l.extremes()
	value := m.printed(m.Values[high.i][high.k])
	if least := m.printed(m.Values[low.i][low.k]); least != value {
		value = least + " to " + value
	}
	return fmt.Sprintf("%s, %s, over %s to %s %s and %s to %s", sentence(m.Axis), value,
		plainNumber(m.Temps[0]), plainNumber(m.Temps[len(m.Temps)-1]), m.TempUnit,
		unit.Span(m.Times[0]), unit.Span(m.Times[len(m.Times)-1]))
}

// plainNumber prints a temperature.
func plainNumber(v float64) string { return TimeNode{Value: v}.plain() }

type gridPlace struct{ i, k int }

// extremes are the places of the first lowest and the first highest value.
func (l *mapLayout) extremes() (low, high gridPlace) {
	least, most := math.Inf(1), math.Inf(-1)
	for i, row := range l.m.Values {
		for k, v := range row {
			if v < least || v == least && math.IsInf(least, 1) {
				least, low = v, gridPlace{i, k}
			}
			if v > most {
				most, high = v, gridPlace{i, k}
			}
		}
	}
	return low, high
}

// pointWords is a point in running text.
func (l *mapLayout) pointWords(p MapPoint) string {
	at := plainNumber(p.Temp) + " " + l.m.TempUnit + " and " + unit.Span(p.T)
	if p.Name == "" {
		return at
	}
	return p.Name + " at " + at
}

// words tells the figure to those who do not see it.
func (l *mapLayout) words() string {
	m := &l.m
	place := func(p gridPlace) string {
		return m.printed(m.Values[p.i][p.k]) + " at " + l.pointWords(MapPoint{T: m.Times[p.k], Temp: m.Temps[p.i]})
	}
	low, high := l.extremes()
	parts := []string{"Highest " + place(high) + ", lowest " + place(low) + "."}
	share := func(holds func(i, k int) bool) string {
		n, of := 0, 0
		for i, row := range m.Values {
			for k := range row {
				if of++; holds(i, k) {
					n++
				}
			}
		}
		return unit.Percent(float64(n) / float64(of))
	}
	if len(m.Levels) > 0 {
		var levels []string
		for _, v := range m.Levels {
			levels = append(levels, m.levelPlain(v)+" or more at "+share(func(i, k int) bool { return m.Values[i][k] >= v.Value }))
		}
		parts = append(parts, "Of the points computed: "+strings.Join(levels, ", ")+".")
	}
	for _, r := range m.Regions {
		parts = append(parts, sentence(r.Name)+": "+share(func(i, k int) bool { return r.Measure[i][k] > 0 })+" of the points.")
	}
	if f := m.Feasible; f != nil {
		name := f.Name
		if name == "" {
			name = "hatched"
		}
		parts = append(parts, sentence(name)+": "+share(func(i, k int) bool { return f.Measure[i][k] > 0 })+" of the points.")
	}
	if m.Best != nil {
		parts = append(parts, "Star: "+l.valued(*m.Best)+".")
	}
	if len(m.Runs) > 0 {
		var runs []string
		for _, r := range m.Runs {
			runs = append(runs, l.valued(r))
		}
		parts = append(parts, "Runs: "+strings.Join(runs, "; ")+".")
	}
	if len(l.blanks) > 0 {
		parts = append(parts, sentence(m.Nothing)+": "+share(func(i, k int) bool { return math.IsNaN(m.Values[i][k]) })+" of the points.")
	}
	return strings.Join(parts, " ")
}

// levelPlain is a level in running text.
func (m *ContourMap) levelPlain(v MapLevel) string {
	if v.Text != "" {
		return v.Text
	}
	return m.printed(v.Value)
}

// valued is a point with the value that the map shows there.
func (l *mapLayout) valued(p MapPoint) string {
	m := &l.m
	n, nk := len(m.Temps), len(m.Times)
	text := l.pointWords(p)
	if p.T < m.Times[0] || p.T > m.Times[nk-1] || p.Temp < m.Temps[0] || p.Temp > m.Temps[n-1] {
		return text + " (outside the map)"
	}
	f, x, y := l.grid, l.x(p.T), l.y(p.Temp)
	i, k := 0, 0
	for i+2 < n && f.ys[i+1] >= y {
		i++
	}
	for k+2 < nk && f.xs[k+1] <= x {
		k++
	}
	t, s := (y-f.ys[i])/(f.ys[i+1]-f.ys[i]), (x-f.xs[k])/(f.xs[k+1]-f.xs[k])
	v := (1-t)*((1-s)*f.at[i][k]+s*f.at[i][k+1]) + t*((1-s)*f.at[i+1][k]+s*f.at[i+1][k+1])
	if !(v > l.values.floor && v < l.values.roof) {
		return text
	}
	v = l.values.low + v*(l.values.high-l.values.low)
	if l.values.log {
		v = math.Pow(10, v)
	}
	return text + ", " + m.printed(v)
}

// below writes the notes under the figure from y down and moves y below them.
func (l *mapLayout) below(y *float64) []Mark {
	var marks []Mark
	write := func(text string, indent float64) {
		for _, line := range lettering.Wrap(text, tickSize, l.m.Width-2*margin-indent) {
			marks = append(marks, Words{Role: "aside", X: margin + indent, Y: *y + lettering.Ascent*tickSize, Size: tickSize, Runs: line})
			*y += rowHeight
		}
	}
	*y += 3
	if len(l.blanks) > 0 {
		box := Rect{margin, *y + 2, margin + 20, *y + 13}
		around := []spot{{box.X0, box.Y0}, {box.X1, box.Y0}, {box.X1, box.Y1}, {box.X0, box.Y1}, {box.X0, box.Y0}}
		marks = append(marks, Curve{"blank", filledPath([][]spot{around})})
		var path []Command
		for _, s := range hatch([][]spot{around}, 7, true) {
			path = append(path, strokes(s)...)
		}
		marks = append(marks, Curve{"hatch-blank", path}, Curve{"axis", strokes(around)})
		write(l.m.Nothing, 27)
	}
	if f := l.m.Feasible; f != nil && f.Name == "" {
		l.notes = append(l.notes, note{"hatched", "meets the stated wishes"})
	}
	for _, text := range l.room.below() {
		write(text, 0)
	}
	if l.values.cut {
		write("values beyond the bar have the colour of its end", 0)
	}
	return marks
}
