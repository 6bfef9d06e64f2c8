package lettering

import (
	"strings"
	"unicode"
)

// Wrap sets text as Runs does and breaks it into lines no wider than max, at
// spaces, and inside words behind hyphens (not those of a locant, as in
// 1,2-adduct), slashes, commas and plus signs; only where that does not do, in the
// middle of a word. The lines are made as even as the least number of lines
// allows. Every line holds at least one letter, so a max below the width
// of a letter gives lines that are wider than it. Empty text gives no lines.
func Wrap(text string, size, max float64) [][]Run {
	return WrapRuns(Runs(text), size, max)
}

// WrapRuns is Wrap for text already set.
func WrapRuns(runs []Run, size, max float64) [][]Run {
	cells := spread(runs, size)
	if len(cells) == 0 {
		return nil
	}
	breaks := lines(cells, max)
	// Narrow the measure while the number of lines stays, so that no line is
	// left with one short word.
	low, high := min(max, widestPart(cells)), max
	for range 12 {
		mid := (low + high) / 2
		if b := lines(cells, mid); len(b) <= len(breaks) && widest(cells, b) <= mid {
			breaks, high = b, mid
		} else {
			low = mid
		}
	}
	var out [][]Run
	from := 0
	for _, to := range breaks {
		if line := gather(cells[from:to]); len(line) > 0 {
			out = append(out, line)
		}
		from = to
	}
	return out
}

// Widest gives the width of the widest part of text that Wrap keeps whole.
func Widest(text string, size float64) float64 {
	return widestPart(spread(Runs(text), size))
}

func widestPart(cells []cell) float64 {
	w, from := 0.0, 0
	for i := range cells {
		if breakAfter(cells, i) || i+1 == len(cells) {
			w = max(w, length(cells[from:i+1]))
			from = i + 1
		}
	}
	return w
}

// cell is one letter with its width.
type cell struct {
	r      rune
	shift  Shift
	italic bool
	w      float64
}

func spread(runs []Run, size float64) []cell {
	var cells []cell
	for _, run := range runs {
		s := size
		if run.Shift != Base {
			s *= Small
		}
		for _, r := range run.Text {
			cells = append(cells, cell{r, run.Shift, run.Italic, advance(r) * s})
		}
	}
	return cells
}

// lines gives the ends of lines no wider than max, filled from the front.
func lines(cells []cell, max float64) []int {
	var ends []int
	from := 0
	for from < len(cells) {
		w, good, i := 0.0, 0, from
		for ; i < len(cells); i++ {
			c := cells[i]
			if c.r != ' ' && w+c.w > max+1e-9 && i > from {
				break
			}
			w += c.w
			if breakAfter(cells, i) {
				good = i + 1
			}
		}
		switch {
		case i == len(cells):
			good = i
		case good <= from:
			good = whole(cells, from, i)
		}
		ends = append(ends, good)
		from = good
	}
	return ends
}

// whole moves a break inside a word so that no mark, prime or shifted letter is
// cut off from the letter that it belongs to.
func whole(cells []cell, from, i int) int {
	for k := i; k > from+3; k-- { // rather behind a hyphen or at a bracket
		if r := cells[k].r; (cells[k-1].r == '-' || r == '(' || r == '[') && cells[k].shift == Base {
			return k
		}
	}
	for k := i; k > from+1; k-- {
		c := cells[k]
		if c.w > 0 && c.shift == Base && c.r != '′' {
			return k
		}
	}
	return i
}

// breakAfter reports whether a line may end behind cell i.
func breakAfter(cells []cell, i int) bool {
	c := cells[i]
	if c.r == ' ' {
		return true
	}
	if c.shift != Base || i == 0 || i+1 >= len(cells) || cells[i-1].r == ' ' {
		return false
	}
	next := cells[i+1].r
	switch c.r {
	case '-':
		// A locant stays with what it places: 1,2-adduct.
		return !unicode.IsDigit(cells[i-1].r) && (unicode.IsLetter(next) || unicode.IsDigit(next) || next == '(' || next == '[')
	case '–', '/', '+', '·', '→':
		return unicode.IsLetter(next) || unicode.IsDigit(next) || next == '(' || next == '['
	case ',':
		return unicode.IsLetter(next)
	}
	return false
}

func widest(cells []cell, ends []int) float64 {
	w, from := 0.0, 0
	for _, to := range ends {
		w = max(w, length(cells[from:to]))
		from = to
	}
	return w
}

// length is the width of a line without the space at its end.
func length(cells []cell) float64 {
	for len(cells) > 0 && cells[len(cells)-1].r == ' ' {
		cells = cells[:len(cells)-1]
	}
	w := 0.0
	for _, c := range cells {
		w += c.w
	}
	return w
}

// gather joins cells to runs, without the spaces at either end.
func gather(cells []cell) []Run {
	for len(cells) > 0 && cells[len(cells)-1].r == ' ' {
		cells = cells[:len(cells)-1]
	}
	for len(cells) > 0 && cells[0].r == ' ' {
		cells = cells[1:]
	}
	var runs []Run
	var b strings.Builder
	for i, c := range cells {
		b.WriteRune(c.r)
		if i+1 == len(cells) || cells[i+1].shift != c.shift || cells[i+1].italic != c.italic {
			runs = append(runs, Run{b.String(), c.shift, c.italic})
			b.Reset()
		}
	}
	return runs
}
