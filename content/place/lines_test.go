package place

import (
	"strings"
	"testing"
	"unicode/utf8"
)

func TestLines(t *testing.T) {
	for _, tt := range []struct {
		name, text        string
		offset, line, col int
	}{
		{"empty", "", 0, 1, 1},
		{"start", "abc\ndef", 0, 1, 1},
		{"inside", "abc\ndef", 5, 2, 2},
		{"line end belongs to its line", "abc\ndef", 3, 1, 4},
		{"end of text", "abc\ndef", 7, 2, 4},
		{"end after a line end", "abc\n", 4, 2, 1},
		{"tab is one character", "\t\tx", 2, 1, 3},
		{"characters, not bytes", "T = 25 °C x", 11, 1, 11},
		{"inside a character", "°C", 1, 1, 1},
		{"CR of CRLF", "ab\r\ncd", 2, 1, 3},
		{"LF of CRLF", "ab\r\ncd", 3, 1, 3},
		{"after CRLF", "ab\r\ncd", 4, 2, 1},
		{"CR alone is a character", "a\rb", 2, 1, 3},
		{"byte order mark", "\ufeffab\ncd", 3, 1, 1},
		{"before the byte order mark", "\ufeffab", 0, 1, 1},
		{"after a byte order mark", "\ufeffab\ncd", 4, 1, 2},
		{"second line after a byte order mark", "\ufeffab\ncd", 6, 2, 1},
		{"a later mark is a character", "a\ufeffb", 4, 1, 3},
		{"byte that is not UTF-8", "\xe9\xe9x", 2, 1, 3},
		{"before the text", "ab", -5, 1, 1},
		{"past the text", "ab\nc", 99, 2, 2},
	} {
		t.Run(tt.name, func(t *testing.T) {
			if line, col := NewLines([]byte(tt.text)).At(tt.offset); line != tt.line || col != tt.col {
				t.Errorf("At(%d) = %d, %d, want %d, %d", tt.offset, line, col, tt.line, tt.col)
			}
		})
	}
	if n := NewLines([]byte("a\r\nb\n")).Count(); n != 3 {
		t.Errorf("Count = %d, want 3", n)
	}
}

// TestLinesRoundTrip finds every character again by counting lines and runes.
func TestLinesRoundTrip(t *testing.T) {
	text := "ΔG‡ = 1\r\n\tx\n\n \xff\ufeff日本\nend"
	l := NewLines([]byte(text))
	lines := strings.Split(text, "\n")
	for offset := 0; offset < len(text); {
		_, width := utf8.DecodeRuneInString(text[offset:])
		line, col := l.At(offset)
		start := 0
		for _, s := range lines[:line-1] {
			start += len(s) + 1
		}
		if want := utf8.RuneCountInString(text[start:offset]) + 1; col != want && text[offset] != '\n' {
			t.Errorf("At(%d) = %d, %d, want column %d", offset, line, col, want)
		}
		offset += width
	}
}
