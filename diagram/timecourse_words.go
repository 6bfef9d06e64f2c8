package diagram

import (
	"math"
	"strings"
	"unicode"
	"unicode/utf8"

	"saddlebook/kinetics/unit"
)

// heading is the default title.
func (c TimeCourse) heading(from, to float64) string {
	if c.From > 0 {
		return sentence(c.Axis) + " from " + unit.Span(from) + " to " + unit.Span(to)
	}
	return sentence(c.Axis) + " over " + unit.Span(to)
}

func sentence(text string) string {
	r, n := utf8.DecodeRuneInString(text)
	if len(text) > n {
		if second, _ := utf8.DecodeRuneInString(text[n:]); !unicode.IsLower(second) {
			return text // a symbol, such as ee or c/c0
		}
	}
	return string(unicode.ToUpper(r)) + text[n:]
}

// value prints a value with its unit.
func (c TimeCourse) value(v float64) string {
	if c.Share {
		return unit.Percent(v)
	}
	text := unit.Digits(v, 3)
	if c.Unit != "" {
		text += " " + c.Unit
	}
	return text
}

// words tells the figure to those who do not see it.
func (c TimeCourse) words(from, floor float64) string {
	var parts []string
	for _, line := range c.Lines {
		parts = append(parts, c.lineWords(line, from))
	}
	if n := len(c.Points); n > 0 {
		parts = append(parts, "Measured points: "+unit.Fixed(float64(n), 0)+".")
	}
	if floor > 0 {
		parts = append(parts, "Values below "+c.value(floor)+" are not shown.")
	}
	if len(c.Programme) > 0 {
		var nodes []string
		for i, n := range c.Programme {
			if i > 0 && i < len(c.Programme)-1 && c.Programme[i-1].Value == n.Value && c.Programme[i+1].Value == n.Value {
				continue
			}
			nodes = append(nodes, n.printed()+" "+c.ProgrammeUnit+" at "+unit.Span(n.T))
		}
		parts = append(parts, "Temperature: "+strings.Join(nodes, ", ")+".")
	}
	if len(c.Events) > 0 {
		var events []string
		for _, e := range c.Events {
			events = append(events, e.Text+" at "+unit.Span(e.T))
		}
		parts = append(parts, "Events: "+strings.Join(events, "; ")+".")
	}
	return strings.Join(parts, " ")
}

// lineWords gives the ends of a line and its highest value, if that is neither.
func (c TimeCourse) lineWords(line TimeLine, from float64) string {
	first, last, high := -1, -1, -1
	for i, y := range line.Y {
		if line.T[i] < from || math.IsNaN(y) {
			continue
		}
		if first < 0 {
			first, high = i, i
		}
		last = i
		if y > line.Y[high] {
			high = i
		}
	}
	name := line.shown()
	if name == "" {
		name = sentence(c.Axis)
	}
	if first < 0 {
		return name + ": no value in the time shown."
	}
	text := name + ": " + c.value(line.Y[first]) + " at " + unit.Span(line.T[first])
	if last > first {
		text += ", " + c.value(line.Y[last]) + " at " + unit.Span(line.T[last])
	}
	if top := line.Y[high]; top > line.Y[first] && top > line.Y[last] && c.value(top) != c.value(line.Y[first]) && c.value(top) != c.value(line.Y[last]) {
		text += ", highest " + c.value(top) + " at " + unit.Span(line.T[high])
	}
	return text + "."
}
