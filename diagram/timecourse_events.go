package diagram

import (
	"fmt"
	"sort"
	"strings"

	"saddlebook/diagram/lettering"
)

// eventMarks is what stands for the events above the plot, and the words below the
// figure where they are numbered.
type eventMarks struct {
	marks []Mark
	key   [][]lettering.Run
}

// flag is the text of an event beside its line.
type flag struct {
	x, w  float64
	text  string
	right bool // of its line
	row   int  // from the bottom, 0
}

const (
	flagGap   = 4.0 // between a text and a line
	mostRows  = 4
	mostLines = 8 // more lines of events would hide the plot: ticks stand for them
)

func (f flag) box() (from, to float64) {
	if f.right {
		return f.x + flagGap, f.x + flagGap + f.w
	}
	return f.x - flagGap - f.w, f.x - flagGap
}

// events writes the events from y down and gives where they end.
func (l *courseLayout) events(y float64) (eventMarks, float64) {
	var shown []TimeMark
	for _, e := range l.c.Events {
		if e.T >= l.from || l.c.Log && l.c.From == 0 {
			shown = append(shown, e)
		}
	}
	if len(shown) == 0 {
		return eventMarks{}, y
	}
	sort.SliceStable(shown, func(i, k int) bool { return shown[i].T < shown[k].T })
	flags := l.joined(shown)
	var out eventMarks
	if !l.stack(flags) {
		flags, out.key = l.numbered(shown)
	}
	rows := 0
	for _, f := range flags {
		rows = max(rows, f.row+1)
	}
	bottom := y + float64(rows)*rowHeight
	for _, f := range flags {
		top := bottom - float64(f.row+1)*rowHeight
		from, _ := f.box()
		out.marks = append(out.marks,
			Line{Role: "event", X1: f.x, Y1: top + 1.5, X2: f.x, Y2: bottom},
			Words{Role: "aside", X: from, Y: top + 0.92*tickSize, Size: tickSize, Runs: lettering.Runs(f.text)})
	}
	for _, e := range shown {
		if x := l.x(e.T); len(l.guides) == 0 || l.guides[len(l.guides)-1] < x-0.5 {
			l.guides = append(l.guides, x)
		}
	}
	l.eventFoot = bottom + 1.5
	return out, bottom + 4
}

// joined makes one flag of events in one place.
func (l *courseLayout) joined(events []TimeMark) []flag {
	var out []flag
	for _, e := range events {
		x := l.x(e.T)
		if n := len(out); n > 0 && x-out[n-1].x < 1 {
			if !strings.Contains(out[n-1].text+";", e.Text+";") {
				out[n-1].text += "; " + e.Text
			}
			continue
		}
		out = append(out, flag{x: x, text: e.Text})
	}
	for i := range out {
		out[i].w = lettering.Width(lettering.Runs(out[i].text), tickSize)
	}
	return out
}

// stack finds a side and a row for each flag, so that no text covers another or
// the line of another; false if that needs too many rows.
//
// Texts stand to the right of their lines as far as the frame allows. From the
// right to the left each such text goes above all that begin under it; from the
// left to the right each of the others goes above all that end under it.
func (l *courseLayout) stack(flags []flag) bool {
	end := l.c.Width - margin
	for i := range flags {
		f := &flags[i]
		f.right = true
		if _, to := f.box(); to <= end {
			continue
		}
		f.right = false
		if from, _ := f.box(); from < margin {
			return false
		}
	}
	over := func(f, g flag) bool { // the line of g, or a text beside it, under the text of f
		from, to := f.box()
		return g.x > from-flagGap && g.x < to+flagGap
	}
	for i := range flags {
		if f := &flags[i]; !f.right {
			for _, g := range flags[:i] {
				if !g.right && over(*f, g) {
					f.row = max(f.row, g.row+1)
				}
			}
		}
	}
	for i := len(flags) - 1; i >= 0; i-- {
		if f := &flags[i]; f.right {
			for _, g := range flags[i+1:] {
				if over(*f, g) {
					f.row = max(f.row, g.row+1)
				}
			}
		}
	}
	for i, f := range flags {
		if f.row >= mostRows {
			return false
		}
		for _, g := range flags[:i] { // g.x < f.x
			ffrom, fto := f.box()
			gfrom, gto := g.box()
			apart := ffrom >= gto+flagGap || gfrom >= fto+flagGap
			switch {
			case f.row == g.row && !apart,
				over(f, g) && g.row >= f.row,
				over(g, f) && f.row >= g.row:
				return false
			}
		}
	}
	return true
}

// numbered gives a row of numbers, joined where they would touch, and their words.
func (l *courseLayout) numbered(events []TimeMark) ([]flag, [][]lettering.Run) {
	span := func(from, to int) string {
		if from == to {
			return fmt.Sprint(from)
		}
		return fmt.Sprintf("%d–%d", from, to)
	}
	width := func(text string) float64 { return lettering.Width(lettering.Runs(text), tickSize) }
	var flags []flag
	first := 1
	for i, e := range events {
		x := l.x(e.T)
		if n := len(flags); n > 0 {
			if f := &flags[n-1]; x < f.x+f.w+3*flagGap {
				f.text = span(first, i+1)
				f.w = width(f.text)
				continue
			}
		}
		first = i + 1
		flags = append(flags, flag{x: x, w: width(fmt.Sprint(first)), text: fmt.Sprint(first), right: true})
	}
	var words []string
	for i := 0; i < len(events); {
		k := i
		for k+1 < len(events) && events[k+1].Text == events[i].Text {
			k++
		}
		words = append(words, span(i+1, k+1)+": "+events[i].Text)
		i = k + 1
	}
	return flags, lettering.Wrap(strings.Join(words, "; "), tickSize, l.c.Width-2*margin)
}

// guide draws the lines of events through the programme and the plot, with gaps
// for titles; only short ones where there are many.
func (l *courseLayout) guide() []Mark {
	var marks []Mark
	for _, x := range l.guides {
		if len(l.c.Events) > mostLines {
			marks = append(marks, Line{Role: "event", X1: x, Y1: l.top, X2: x, Y2: l.top + 8})
			continue
		}
		if l.strips.Y1 > 0 {
			marks = append(marks, Line{Role: "event", X1: x, Y1: l.strips.Y0, X2: x, Y2: l.strips.Y1})
		}
		y := l.eventFoot
		for _, t := range l.titles {
			if t.Y1 > y && t.X0-3 < x && x < t.X1+3 {
				y = t.Y1 + 2.5
			}
		}
		marks = append(marks, Line{Role: "event", X1: x, Y1: y, X2: x, Y2: l.bottom})
	}
	return marks
}
