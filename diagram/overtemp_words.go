package diagram

import (
	"math"
	"strings"

	"saddlebook/kinetics/unit"
)

func (l *overLayout) degrees(t float64) string { return plainNumber(t) + " " + l.o.TempUnit }

// printed is a value in running text.
func (l *overLayout) printed(v float64) string {
	if l.o.Share {
		return unit.Percent(v)
	}
	text := unit.Digits(v, 3)
	if l.o.Unit != "" {
		text += " " + l.o.Unit
	}
	return text
}

// ends gives the places of the first and the last value of a line; it has both.
func (l TempLine) ends() (first, last int) {
	for first < len(l.Y)-1 && math.IsNaN(l.Y[first]) {
		first++
	}
	return first, l.course().lastValue()
}

// heading is the default title: where the first two lines cross, or else what the
// first does.
func (l *overLayout) heading() string {
	name := l.o.Lines[0].course().shown()
	text := sentence(l.o.Axis)
	if name != "" {
		text += " of " + name
	}
	first, last := l.o.Lines[0].ends()
	line := l.o.Lines[0]
	text += ": " + l.printed(line.Y[first]) + " at " + l.degrees(line.Temps[first])
	if last > first {
		text += ", " + l.printed(line.Y[last]) + " at " + l.degrees(line.Temps[last])
	}
	return text
}

// words tells the figure to those who do not see it.
func (l *overLayout) words() string {
	var parts []string
	for _, line := range l.o.Lines {
		name := line.course().shown()
		if name == "" {
			name = sentence(l.o.Axis)
		}
		first, last := line.ends()
		high := first
		for i, y := range line.Y {
			if y > line.Y[high] {
				high = i
			}
		}
		text := name + ": " + l.printed(line.Y[first]) + " at " + l.degrees(line.Temps[first])
		if last > first {
			text += ", " + l.printed(line.Y[last]) + " at " + l.degrees(line.Temps[last])
		}
		if top := l.printed(line.Y[high]); high > first && high < last && top != l.printed(line.Y[first]) && top != l.printed(line.Y[last]) {
			text += ", highest " + top + " at " + l.degrees(line.Temps[high])
		}
		parts = append(parts, text+".")
	}
	if n := len(l.o.Points); n > 0 {
		parts = append(parts, "Measured points: "+unit.Fixed(float64(n), 0)+".")
	}
	for _, x := range l.crossings {
		parts = append(parts, "Crossing: "+x.text+", "+l.printed(x.y)+".")
	}
	if l.hidden {
		parts = append(parts, "Values below "+l.printed(l.floor)+" are not shown.")
	}
	if len(l.o.Marks) > 0 {
		var marks []string
		for _, m := range l.o.Marks {
			marks = append(marks, m.Text+" at "+l.degrees(m.Temp))
		}
		parts = append(parts, "Marks: "+strings.Join(marks, "; ")+".")
	}
	return strings.Join(parts, " ")
}
