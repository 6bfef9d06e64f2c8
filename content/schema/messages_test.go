package schema

import (
	"slices"
	"testing"
)

// ok is what a sample needs at least.
const ok = "id = \"a\"\ntemperature = \"25 K\"\n"

// messages holds the whole text of what an author is told.
var messages = []struct {
	source string
	want   []string
}{
	{``, []string{
		`n.md:1:1: error: mechanism "addition", id: the key "id" is missing; write id = "addition"`,
		`n.md:1:1: error: mechanism "addition", temperature: the key "temperature" is missing; write temperature = "25 °C"`,
	}},
	{`Temperature = 3
`, []string{
		`n.md:1:1: error: mechanism "addition", Temperature: the key "Temperature" is not known here; write temperature`,
		`n.md:1:1: error: mechanism "addition", id: the key "id" is missing; write id = "addition"`,
	}},
	{`id = "a/b"
temperature = 25
`, []string{
		`n.md:1:6: error: mechanism "addition", id: the name "a/b" holds the character '/'; leave it out: / @ : { } | + # have a meaning of their own in result keys and reactions`,
		`n.md:2:15: error: mechanism "addition", temperature: "25" has no unit where a temperature is wanted; write "25 °C" or "25 K"`,
	}},
	{`id = ''
temperature = "25"
`, []string{
		`n.md:1:6: error: mechanism "addition", id: the text is empty; write id = "addition"`,
		`n.md:2:18: error: mechanism "addition", temperature: "25" has no unit where a temperature is wanted; write "25 °C" or "25 K"`,
	}},
	{`id = " a"
temperature = "25 °F"
`, []string{
		`n.md:1:6: error: mechanism "addition", id: the name " a" starts or ends with a space; write "a"`,
		`n.md:2:19: error: mechanism "addition", temperature: unit "°F" is not known; write "°C" or "K"`,
	}},
	{`id = 3
temperature = "°C 25"
`, []string{
		`n.md:1:6: error: mechanism "addition", id: the number 3 stands where a name is wanted; write id = "3"`,
		`n.md:2:15: error: mechanism "addition", temperature: "°C 25" has no number where one is due; write it as in "-78 °C"`,
	}},
	{ok + `energies = "kcal"
`, []string{
		`n.md:3:12: error: mechanism "addition", energies: the word "kcal" is not one of those allowed; write "kcal/mol"`,
	}},
	{ok + `energies = "J/mol"
`, []string{
		`n.md:3:12: error: mechanism "addition", energies: the word "J/mol" is not one of those allowed; write "kJ/mol"`,
	}},
	{ok + `energies = 3
`, []string{
		`n.md:3:12: error: mechanism "addition", energies: the number 3 stands where a text is wanted; write energies = "kcal/mol"`,
	}},
	{ok + `at = []
authors = [1, "", "a"]
fast = "True"
scale = "0.9"
`, []string{
		`n.md:3:6: error: mechanism "addition", at: the list is empty; write at = "-78 °C", or leave the key out`,
		`n.md:4:12: error: mechanism "addition", authors.1: the number 1 stands where a text is wanted; write "1"`,
		`n.md:4:15: error: mechanism "addition", authors.2: the text is empty; write authors = ["text"], or leave the key out`,
		`n.md:5:8: error: mechanism "addition", fast: the text "True" stands where true or false is wanted; write fast = true`,
		`n.md:6:9: error: mechanism "addition", scale: the text "0.9" stands where a number is wanted; write scale = 0.9`,
	}},
	{ok + `at = [1, "2 h", [3], true]
authors = 4
error = 3
fast = 1
scale = [1]
`, []string{
		`n.md:3:13: error: mechanism "addition", at.2: unit "h" measures a time where a temperature is wanted; write it as in "-78 °C"`,
		`n.md:3:17: error: mechanism "addition", at.3: a list stands where a temperature is wanted; write it as in "-78 °C"`,
		`n.md:3:22: error: mechanism "addition", at.4: the truth value true stands where a temperature is wanted; write it as in "-78 °C"`,
		`n.md:4:11: error: mechanism "addition", authors: the number 4 stands where a text or a list of texts is wanted; write authors = "4"`,
		`n.md:5:9: error: mechanism "addition", error: the number 3 stands where a table is wanted; write error = { step = 0.8 }`,
		`n.md:6:8: error: mechanism "addition", fast: the number 1 stands where true or false is wanted; write fast = true`,
		`n.md:7:9: error: mechanism "addition", scale: a list stands where a number is wanted; write scale = 0.98`,
	}},
	{ok + `charge = 3
replace = "a"
products = 3
species = 3
step = []
claim = 1
`, []string{
		`n.md:3:10: error: mechanism "addition", charge: the number 3 stands where a table by name, each a concentration or an amount in equivalents is wanted; write charge = { name = "0.20 M" }`,
		`n.md:4:11: error: mechanism "addition", replace: the text "a" stands where a table of texts by name is wanted; write replace = { name = "text" }`,
		`n.md:5:12: error: mechanism "addition", products: the number 3 stands where a list of names, or a table of such lists by name is wanted; write products = { syn = ["S1", "S2"], anti = "T" }`,
		`n.md:6:11: error: mechanism "addition", species: the number 3 stands where a table of tables by name is wanted; write species = { name = { G = "12.4 ± 0.5" } }`,
		`n.md:7:8: error: mechanism "addition", step: a list stands where a table of tables by name is wanted; write step = { name = { reaction = "R + X <=> A" } }`,
		`n.md:8:9: error: mechanism "addition", claim: the number 1 stands where a list of tables is wanted; write claim = [{ says = "A wins." }]`,
	}},
	{ok + `scale = nan
at = [inf, 1]
authors = ["\u0007"]
fast = -inf
`, []string{
		`n.md:3:9: error: scale: nan is no finite number; write a number, or leave the key out`,
		`n.md:4:7: error: at.1: inf is no finite number; write a number, or leave the key out`,
		`n.md:5:12: error: authors.1: the text holds the control character U+0007; leave it out`,
		`n.md:6:8: error: fast: -inf is no finite number; write a number, or leave the key out`,
	}},
	{ok + `products = ["A", "A/B", 3, "A"]
claim = { says = 'x' }
`, []string{
		`n.md:3:18: error: mechanism "addition", products.2: the name "A/B" holds the character '/'; leave it out: / @ : { } | + # have a meaning of their own in result keys and reactions`,
		`n.md:3:25: error: mechanism "addition", products.3: the number 3 stands where a name is wanted; write "A"`,
		`n.md:3:28: error: mechanism "addition", products.4: the name "A" is listed twice; leave one out`,
		`n.md:4:9: error: mechanism "addition", claim: a single table stands where a list of tables is wanted; put it in brackets: claim = [{ ... }]`,
	}},
	{ok + `[charge]
R = "0.2 M"
X = "3 h"
Y = 0.1
Z = 0
[replace]
x = 3
[products]
a = []
b = ["A", "A", "B|"]
[claim]
says = "x"
`, []string{
		`n.md:5:8: error: mechanism "addition", charge.X: unit "h" measures a time where a concentration or an amount in equivalents is wanted; write it as in "0.20 M" or "1.1 equiv"`,
		`n.md:6:5: error: mechanism "addition", charge.Y: "0.1" has no unit where a concentration or an amount in equivalents is wanted; write "0.1 M" or "0.1 mM"`,
		`n.md:9:5: error: mechanism "addition", replace.x: the number 3 stands where a text is wanted; write "3"`,
		`n.md:11:5: error: mechanism "addition", products.a: the list is empty; write the names that "a" stands for`,
		`n.md:12:11: error: mechanism "addition", products.b.2: the name "A" is listed twice; leave one out`,
		`n.md:12:16: error: mechanism "addition", products.b.3: the name "B|" holds the character '|'; leave it out: / @ : { } | + # have a meaning of their own in result keys and reactions`,
		`n.md:13:1: error: mechanism "addition", claim: a single table stands where a list of tables is wanted; write its header as [[claim]]`,
	}},
	{ok + `[species]
R = 1
"A/B" = { H = "9.9 ± 0.3 kJ", S = -33, forms = 2.0 }
" B" = { lable = "x", h = 3, forms = "2" }
C = { H = '9.9 +- x', label = true }
energies = "kJ/mol"
"" = {}
`, []string{
		`n.md:4:5: error: mechanism "addition", species.R: the number 1 stands where a table is wanted; write R = { G = "12.4 ± 0.5" }`,
		`n.md:5:1: error: mechanism "addition", species.A/B: the name "A/B" holds the character '/'; leave it out: / @ : { } | + # have a meaning of their own in result keys and reactions`,
		`n.md:5:26: error: mechanism "addition", species.A/B.H: unit "kJ" is not known; write "kJ/mol" or "kcal/mol"`,
		`n.md:5:35: error: mechanism "addition", species.A/B.S: "-33" has no unit where an entropy or heat capacity per mole is wanted; write "-33 cal/mol/K" or "-33 J/mol/K"`,
		`n.md:5:48: error: mechanism "addition", species.A/B.forms: the number 2.0 stands where a whole number is wanted; write forms = 2`,
		`n.md:6:1: error: mechanism "addition", species." B": the name " B" starts or ends with a space; write "B"`,
		`n.md:6:10: error: mechanism "addition", species." B".lable: the key "lable" is not known here; write label`,
		`n.md:6:23: error: mechanism "addition", species." B".h: the key "h" is not known here; write H`,
		`n.md:6:38: error: mechanism "addition", species." B".forms: the text "2" stands where a whole number is wanted; write forms = 2`,
		`n.md:7:19: error: mechanism "addition", species.C.H: "9.9 +- x" has no number where one is due; write it as in "18.4 kcal/mol"`,
		`n.md:7:31: error: mechanism "addition", species.C.label: the truth value true stands where a text is wanted; write label = "true"`,
		`n.md:8:12: error: mechanism "addition", species.energies: the text "kJ/mol" stands where a table is wanted; move it above the first [species] header, for it belongs to no table`,
		`n.md:9:1: error: mechanism "addition", species."": the name "" is empty; write a name`,
	}},
	{ok + `[step.TS1]
scale = 3
[step.TS2]
reaction = ["A -> B"]
`, []string{
		`n.md:3:7: error: mechanism "addition", step.TS1.reaction: the key "reaction" is missing; write reaction = "R + X <=> A"`,
		`n.md:4:1: error: mechanism "addition", step.TS1.scale: the key "scale" is not known here; move it above the first [step] header, for it belongs to no table`,
		`n.md:6:12: error: mechanism "addition", step.TS2.reaction: a list stands where a text is wanted; write reaction = "R + X <=> A"`,
	}},
	{ok + `[[claim]]
says = 'a'
at-least = 'x:y'
[[claim]]
at-least = '15 ± 2 %'
probability = '0.9'
at_most = 3
[[claim]]
says = 2031-05-27
at-least = 'late'
`, []string{
		`n.md:5:12: error: mechanism "addition", claim.1.at-least: "x:y" has no number where one is due; write it as in "15:1"`,
		`n.md:6:3: error: mechanism "addition", claim.2.says: the key "says" is missing; write says = "A wins."`,
		`n.md:7:12: error: mechanism "addition", claim.2.at-least: the bound "15 ± 2 %" has a ±; write the value alone`,
		`n.md:8:15: error: mechanism "addition", claim.2.probability: the text "0.9" stands where a number is wanted; write probability = 0.9`,
		`n.md:9:1: error: mechanism "addition", claim.2.at_most: the key "at_most" is not known here; write one of says, at-least, probability`,
		`n.md:11:8: error: mechanism "addition", claim.3.says: the date 2031-05-27 stands where a text is wanted; write says = "2031-05-27"`,
		`n.md:12:12: error: mechanism "addition", claim.3.at-least: "late" has no number where one is due; write it as in "18.4 kcal/mol" or "2 h"`,
	}},
	{ok + `claim = [1, {}]
`, []string{
		`n.md:3:10: error: mechanism "addition", claim.1: the number 1 stands where a table is wanted; write { says = "A wins." }`,
		`n.md:3:13: error: mechanism "addition", claim.2.says: the key "says" is missing; write says = "A wins."`,
	}},
	{`id = 2031-05-27
temperature = 2031-13-27
`, []string{
		`n.md:2:15: error: temperature: 2031-13-27 is neither a number nor a date; put it in quotes if it is a text, or write a date as 2031-05-27`,
	}},
	{`id = 99999999999999999999
`, []string{
		`n.md:1:6: error: id: the number 99999999999999999999 is out of range; write it with an exponent, as 1.5e20`,
	}},
	{`scale = 1e999
`, []string{
		`n.md:1:9: error: scale: the number 1e999 is out of range; write a number between -1e308 and 1e308`,
	}},
	{"\ufeffid = 3\n", []string{
		`n.md:1:1: error: a byte order mark stands before the text; save the file as UTF-8 without a byte order mark`,
	}},
	{"id = \"a\"\r\nid = \"b\"\r\n", []string{
		`n.md:2:1: error: id: the key "id" is given twice; keep one of the two (the first stands in line 1)`,
	}},
	{`a."" = [1]
a.b = 2
`, []string{
		`n.md:1:1: error: a: the source gives 2 entries here and the TOML reader holds 1; write each table once, without empty keys`,
	}},
	{ok + `species = { R = { forms = 99999999999999999, S = "-33 cal/mol K" } }
temprature = 3
whatever = 3
`, []string{
		`n.md:3:27: error: mechanism "addition", species.R.forms: the number 99999999999999999 is out of range; write a smaller one`,
		`n.md:3:55: error: mechanism "addition", species.R.S: unit "cal/mol K" does not say what stands below the line; put it in brackets, as in "J/(mol K)", or divide again, as in "J/mol/K"`,
		`n.md:4:1: error: mechanism "addition", temprature: the key "temprature" is not known here; write temperature`,
		`n.md:5:1: error: mechanism "addition", whatever: the key "whatever" is not known here; take one from the list of keys: saddlebook reference mechanism`,
	}},
	{ok + `"a\u0007b" = 1
`, []string{
		`n.md:3:1: error: "a\ab": the key holds a control character; leave it out`,
	}},
	{`id = "a"
temperature = "25\u0020x"
`, []string{
		`n.md:2:15: error: mechanism "addition", temperature: unit "x" is not known; write "°C" or "K"`,
	}},
	{`id = "a"
temperature = """25 x"""
`, []string{
		`n.md:2:15: error: mechanism "addition", temperature: unit "x" is not known; write "°C" or "K"`,
	}},
	{`id = "a
`, []string{
		`n.md:1:6: error: id: the text "a" has no closing quote on its line; write " at its end`,
	}},
	{`id = addition
`, []string{
		`n.md:1:6: error: id: the value "addition" stands without quotes; write id = "addition"`,
	}},
	{`[species
`, []string{
		`n.md:1:1: error: the header [species lacks a closing bracket; write [species]`,
	}},
	{`[species]
R = { H = 0
A = 1
`, []string{
		`n.md:2:5: error: species.R: the inline table that opens here is not closed before the next line; write } at its end, or a comma where it goes on`,
	}},
}

func TestMessages(t *testing.T) {
	for _, tt := range messages {
		_, faults := read(tt.source, &sample{})
		var got []string
		for _, d := range faults {
			got = append(got, d.Error())
		}
		if !slices.Equal(got, tt.want) {
			t.Errorf("source\n%s", tt.source)
			for i := range max(len(got), len(tt.want)) {
				if i < len(got) {
					t.Errorf("got  %s", got[i])
				}
				if i < len(tt.want) {
					t.Errorf("want %s", tt.want[i])
				}
			}
		}
	}
}
