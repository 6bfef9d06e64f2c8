package place

import (
	"fmt"
	"slices"
	"testing"
)

// TestFaults holds the whole text of what an author is told about a text that is
// no TOML, or that has keys which cannot stand together.
func TestFaults(t *testing.T) {
	for _, tt := range []struct {
		text string
		want []string // offset: what is wrong; remedy
	}{
		{`temperature "25 °C"`, []string{`0: the key "temperature" has no = after it; write temperature = "25 °C"`}},
		{`temperature 25`, []string{`0: the key "temperature" has no = after it; write temperature = 25`}},
		{`temperature: 25 °C`, []string{`0: a colon stands after the key "temperature"; write temperature = "25 °C"`}},
		{`id:"a"`, []string{`0: a colon stands after the key "id"; write id = "a"`}},
		{`just words here`, []string{`0: "just words here" is no key with a value; write key = value, or start a comment with #`}},
		{`word`, []string{`0: "word" is no key with a value; write key = value, or start a comment with #`}},
		{`ΔG = 3`, []string{`0: the key "ΔG" has a character that needs quotes; write "ΔG" = 3`}},
		{`H* = 3 # c`, []string{`0: the key "H*" has a character that needs quotes; write "H*" = 3`}},
		{`report at = "2 h"`, []string{`0: the key "report at" has a space in it; write report-at, or "report at" if the space is meant`}},
		{`= 3`, []string{`0: no key stands before the =; write one, such as key = 3`}},
		{`.a = 1`, []string{`0: the key ".a" has an empty part; write a name on each side of a dot`}},
		{`a. = 1`, []string{`0: the key "a." has an empty part; write a name on each side of a dot`}},
		{`a..b = 1`, []string{`0: the key "a..b" has an empty part; write a name on each side of a dot`}},
		{`a b.c = 1`, []string{`0: the key "a b.c" has a character that needs quotes; write "a b.c" = 1`}},
		{`"a"b = 1`, []string{`0: the key "\"a\"b" is partly in quotes; put the whole key in one pair of quotes`}},
		{`"a b = 1`, []string{`0: the text "a b = 1" has no closing quote on its line; write " at its end`}},
		{`a =`, []string{`0: the key "a" has no value; write one after the =, such as a = "text" or a = 1.5`}},
		{`a = # none`, []string{`0: the key "a" has no value; write one after the =, such as a = "text" or a = 1.5`}},
		{"a =\nb = 1", []string{`0: the key "a" has no value; write one after the =, such as a = "text" or a = 1.5`}},
		{`title = Addition to enone # c`, []string{`8: the value "Addition to enone" stands without quotes; write title = "Addition to enone"`}},
		{`H = 9.0 kcal/mol`, []string{`4: the value "9.0 kcal/mol" stands without quotes; write H = "9.0 kcal/mol"`}},
		{`H = −3`, []string{`4: the value "−3" stands without quotes; write H = "−3"`}},
		{`H = .5`, []string{`4: the number .5 lacks a digit beside its point; write H = 0.5`}},
		{`H = 5.`, []string{`4: the number 5. lacks a digit beside its point; write H = 5.0`}},
		{`H = -.5e3`, []string{`4: the number -.5e3 lacks a digit beside its point; write H = -0.5e3`}},
		{`H = 1,5`, []string{`4: the number 1,5 has a comma; write H = 1.5, or a list H = [1, 5]`}},
		{`H = 007`, []string{`4: the number 007 starts with a zero; write H = 7, or put it in quotes if it is a name`}},
		{`H = 1e`, []string{`4: the value "1e" stands without quotes; write H = "1e"`}},
		{`f = True`, []string{`4: "True" has capital letters; write f = true`}},
		{`f = yes`, []string{`4: the value "yes" stands without quotes; write f = "yes"`}},
		{`a = 1,`, []string{`5: a comma ends the line; leave it out: a = 1`}},
		{`a = "x",`, []string{`7: a comma ends the line; leave it out`}},
		{`t = “25 °C”`, []string{`4: the value "“25 °C”" stands in typographic quotes; write t = "25 °C"`}},
		{`a = 1 b = 2`, []string{`6: "b = 2" stands after the value 1; begin a new line for each key`}},
		{`a = "x" b = 2`, []string{`8: "b = 2" stands after a value; begin a new line for each key`}},
		{`H = "9.9" ± 0.3`, []string{`10: "± 0.3" stands after a value; put the whole value in one pair of quotes, or start a comment with #`}},
		{`a = 'it's'`, []string{`8: "s'" stands after a value; put the whole value in one pair of quotes, or start a comment with #`}},
		{`a = 1]`, []string{`4: the value "1]" stands without quotes; write a = "1]"`}},
		{`d = 2031-05-27 x`, []string{`4: the value "2031-05-27 x" stands without quotes; write d = "2031-05-27 x"`}},
		{`t = "25 °C`, []string{`4: the text "25 °C" has no closing quote on its line; write " at its end`}},
		{"t = '25 °C # c\nb=1", []string{`4: the text "25 °C # c" has no closing quote on its line; write ' at its end`}},
		{"t = \"\"\"never\nclosed", []string{`4: the text that """ opens here is not closed; write """ at its end`}},
		{`t = "C:\users"`, []string{`7: \u has no meaning without 4 hexadecimal digits; write \\u for a backslash, or put the text in single quotes, where \ stands for itself`}},
		{`t = "\u12"`, []string{`5: \u has no meaning without 4 hexadecimal digits; write \\u for a backslash, or put the text in single quotes, where \ stands for itself`}},
		{`t = "\uD800"`, []string{`5: \uD800 is no character; write the character itself`}},
		{`t = "a\`, []string{`4: the text "a\\" has no closing quote on its line; write " at its end`}},
		{"t = \"\"\"a\"\"\"\"\"\"\n", []string{`8: 6 quotes stand in a row; end the text with three`}},
		{"at = [\"a\", \"b\"\nproducts = [\"A\"]", []string{`5: the list that opens here is not closed before the next line; write ] at its end, or a comma where it goes on`}},
		{`at = ["a" "b"]`, []string{`10: a comma is missing before "b"; write commas between the entries of a list or an inline table`}},
		{`at = [1 2]`, []string{`7: a comma is missing in "1 2"; write 1, 2`}},
		{`at = [1 "b"]`, []string{`7: a comma is missing after 1; write commas between the elements of a list`}},
		{`at = [a, b]`, []string{`6: the value "a" stands without quotes; write "a"`}},
		{`at = [1,,2]`, []string{`8: a comma stands before any value; leave this comma out`}},
		{`at = [,1]`, []string{`6: a comma stands before any value; leave this comma out`}},
		{`at = [1}`, []string{`7: the list is closed with }; write ]`}},
		{`at = [1, 2`, []string{`5: the list that opens here is not closed; write ] at its end`}},
		{"at = [\n  \"a\"\n  \"b\"\n]", []string{`15: a comma is missing before "b"; write commas between the entries of a list or an inline table`}},
		{"at = [\n  \"a\",\n[species]\n", []string{`15: the value "species" stands without quotes; write "species"`}},
		{`R = { H = 0 S = 0 }`, []string{`11: a comma is missing after 0; write a comma between the keys of an inline table`}},
		{`R = { H = "0" S = 0 }`, []string{`14: a comma is missing before "S"; write commas between the entries of a list or an inline table`}},
		{"R = { H = 0, S = 0\nA = 1", []string{`4: the inline table that opens here is not closed before the next line; write } at its end, or a comma where it goes on`}},
		{`R = { H = 0,, S = 0 }`, []string{`12: a comma stands before any key; leave this comma out`}},
		{`R = { H = 0 ]`, []string{`12: the inline table is closed with ]; write }`}},
		{`R = { H }`, []string{`6: "H" is no key with a value; write key = value`}},
		{`R = { H: 0 }`, []string{`6: a colon stands after the key "H"; write H = 0`}},
		{`R = { H = }`, []string{`6: the key "H" has no value; write one after the =, such as H = "text" or H = 1.5`}},
		{`R = { H = 0`, []string{`4: the inline table that opens here is not closed; write } at its end`}},
		{`R = { = 1 }`, []string{`6: no key stands before the =; write one, such as key = 1`}},
		{`R = { H = kcal, S = 1}`, []string{`10: the value "kcal" stands without quotes; write H = "kcal"`}},
		{`R = { "H" 3 }`, []string{`6: "\"H\" 3" is no key with a value; write key = value`}},
		{`[species`, []string{`0: the header [species lacks a closing bracket; write [species]`}},
		{"[species\n", []string{`0: the header [species lacks a closing bracket; write [species]`}},
		{`[[claim]`, []string{`0: the header [[claim] lacks a closing bracket; write [[claim]]`}},
		{`[[claim] ]`, []string{`0: the header [[claim] ] lacks a closing bracket; write [[claim]]`}},
		{`[]`, []string{`0: the header [] has no name; write a name between the brackets`}},
		{`[ ]`, []string{`0: the header [ ] has no name; write a name between the brackets`}},
		{`[[]]`, []string{`0: the header [[]] has no name; write a name between the brackets`}},
		{`[a..b]`, []string{`0: the header [a..b] has an empty part; write a name on each side of a dot`}},
		{`[a.]`, []string{`0: the header [a.] has an empty part; write a name on each side of a dot`}},
		{`[.a]`, []string{`0: the header [.a] has an empty part; write a name on each side of a dot`}},
		{`[a b]`, []string{`0: the header [a b] has a character that needs quotes; write ["a b"]`}},
		{`[a] b = 1`, []string{`4: "b = 1" stands after the header [a]; begin a new line for it, or start a comment with #`}},
		{`[a]]`, []string{`3: the header [a] has a bracket too many; write [a]`}},
		{`[ΔG]`, []string{`0: the header [ΔG] has a character that needs quotes; write ["ΔG"]`}},
		{`[a = 1`, []string{`0: the header [a = 1 lacks a closing bracket; write it on a line of its own, as [name] or [[name]]`}},
		{`["a]`, []string{`1: the text "a]" has no closing quote on its line; write " at its end`}},
		{`[a`, []string{`0: the header [a lacks a closing bracket; write [a]`}},
		{`[a.b"c"]`, []string{`0: the header [a.b"c"] has a character that needs quotes; write ['a.b"c"']`}},
		{"a = 1\na = 2", []string{`6: the key "a" is given twice; keep one of the two`}},
		{"[a]\nx=1\n[a]\ny=1", []string{`9: the table "a" is opened twice; write its keys under one header`}},
		{"a = {b=1}\n[a]\nc=1", []string{`11: the table "a" is closed by its braces; write its keys inside the braces`}},
		{"a = {b=1}\na.c=1", []string{`10: the table "a" is closed by its braces; write the key inside the braces`}},
		{"a = 1\n[a.b]", []string{`7: "a" is a single value and cannot hold keys; rename one of the two`}},
		{"a = [1]\na.b = 1", []string{`8: "a" is a list and cannot hold keys; rename one of the two`}},
		{"[[c]]\n[c]", []string{`7: the table "c" has single and double brackets; write double brackets at each, or single ones and one table`}},
		{"[c]\n[[c]]", []string{`6: the table "c" has single and double brackets; write double brackets at each, or single ones and one table`}},
		{"a = 1\n[[a]]", []string{`8: the key "a" is given twice; rename one of the two`}},
		{"a.b=1\n[a]", []string{`7: the table "a" is opened twice; write its keys under one header`}},
		{`a={b.c=1, b.c=2}`, []string{`12: the key "c" is given twice; keep one of the two`}},
		{`a={b.c=1, b=2}`, []string{`10: the key "b" is given twice; keep one of the two`}},
		{"a = \"\a\"", []string{`5: the control character U+0007 stands in the text; delete it`}},
		{"a = 1\rb", []string{`5: a carriage return stands without a line feed; end lines with LF or CRLF`}},
		{"a = \"\xe9\"", []string{`5: the byte 0xE9 is not UTF-8; save the file as UTF-8`}},
		{"a = 1\x00", []string{`5: the control character U+0000 stands in the text; delete it`}},
	} {
		_, faults := Scan(tt.text)
		var got []string
		for _, f := range faults {
			got = append(got, fmt.Sprintf("%d: %s; %s", f.At, f.Msg, f.Fix))
		}
		if !slices.Equal(got, tt.want) {
			t.Errorf("%q\ngot  %q\nwant %q", tt.text, got, tt.want)
		}
		checkScan(t, tt.text)
	}
}

// TestClashPlaces holds the other place and the key of a clash.
func TestClashPlaces(t *testing.T) {
	_, faults := Scan("[a]\nx = 1\n[b]\n[a]\ny = { z = 1, z = 2 }\n")
	if len(faults) != 2 {
		t.Fatalf("got %v", faults)
	}
	header, key := faults[0], faults[1]
	if !header.Clash || header.At != 15 || header.First != 1 || !slices.Equal(header.Path, []string{"a"}) {
		t.Errorf("header: %+v", header)
	}
	if !key.Clash || key.At != 31 || key.First != 24 || !slices.Equal(key.Path, []string{"a", "y", "z"}) {
		t.Errorf("key: %+v", key)
	}
}

// TestFaultPaths holds the keys of faults, elements counted from 1.
func TestFaultPaths(t *testing.T) {
	for _, tt := range []struct {
		text string
		want []string
	}{
		{"a = b", []string{"a"}},
		{"a = [1, b]", []string{"a", "2"}},
		{"a = [1, [2]\nb = 3", []string{"a"}},
		{"[[c]]\n[[c]]\nx.y = { z = [q] }", []string{"c", "2", "x", "y", "z", "1"}},
		{"[[c]]\n[[c]]\nx = 1\nx = 2", []string{"c", "2", "x"}},
		{"[c.d]\n[c.d]", []string{"c", "d"}},
		{"[c]\nd = { e = 1, f }", []string{"c", "d"}},
	} {
		if _, faults := Scan(tt.text); len(faults) != 1 || !slices.Equal(faults[0].Path, tt.want) {
			t.Errorf("%q: got %+v, want the path %q", tt.text, faults, tt.want)
		}
	}
}

// TestTooDeep holds that a hostile text is refused before the reader recurses.
func TestTooDeep(t *testing.T) {
	deep := func(open string, n int) string {
		text := ""
		for range n {
			text += open
		}
		return text
	}
	for _, text := range []string{"a = " + deep("[", 5000), "a = " + deep("{a=", 5000), deep("a.", 5000) + "a = 1", "[" + deep("a.", 5000) + "a]"} {
		if _, faults := Scan(text); len(faults) != 1 {
			t.Errorf("%.20q...: %d faults", text, len(faults))
		}
	}
	for _, text := range []string{"a = " + deep("[", MaxDepth) + deep("]", MaxDepth), deep("a.", MaxDepth-1) + "a = 1"} {
		if _, faults := Scan(text); len(faults) != 0 {
			t.Errorf("%.20q...: %v", text, faults[0].Msg)
		}
	}
}
