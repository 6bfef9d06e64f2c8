// Package place says where things stand in a source: Lines turns a byte offset
// into a line and a column, and Scan finds the place of every key of a TOML text.
//
// # Errors
//
// Nothing here fails on input. Scan returns what is wrong with a text as a list
// of Fault, each at a byte offset and with a remedy.
package place

import (
	"sort"
	"unicode/utf8"
)

const mark = "\ufeff" // the UTF-8 byte order mark

// Lines maps the byte offsets of one text to lines and columns.
type Lines struct {
	text   string
	starts []int // offset of the first character of each line
}

// NewLines reads the line ends of a text. A line ends with LF or CRLF.
func NewLines(text []byte) *Lines {
	l := &Lines{text: string(text), starts: []int{0}}
	for i := 0; i < len(l.text); i++ {
		if l.text[i] == '\n' {
			l.starts = append(l.starts, i+1)
		}
	}
	if len(l.text) >= len(mark) && l.text[:len(mark)] == mark {
		l.starts[0] = len(mark)
	}
	return l
}

// Count returns the number of lines: one more than the number of line ends.
func (l *Lines) Count() int { return len(l.starts) }

// At returns the line and the column of a byte offset, both from 1. The column
// counts characters: a tab is one, a byte that is not UTF-8 is one, a byte order
// mark at the start of the text is none, and the two bytes of a CRLF share a
// column. An offset inside a character counts as its start; one outside the text
// counts as the nearest end.
func (l *Lines) At(offset int) (line, col int) {
	offset = min(max(offset, l.starts[0]), len(l.text))
	i := sort.Search(len(l.starts), func(i int) bool { return l.starts[i] > offset }) - 1
	col = 1
	for at := l.starts[i]; at < offset; col++ {
		_, width := utf8.DecodeRuneInString(l.text[at:])
		if at+width > offset {
			break
		}
		at += width
		if at == offset && offset < len(l.text) && l.text[offset-1] == '\r' && l.text[offset] == '\n' {
			break
		}
	}
	return i + 1, col
}
