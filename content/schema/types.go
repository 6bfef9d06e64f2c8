package schema

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"saddlebook/content/place"
	"saddlebook/kinetics/unit"
)

// Type is what a field holds, and the Go type it fills. Besides those below there
// are Text (string), Whole (int, *int), Real (float64, *float64), Flag (bool,
// *bool) and Table (struct, *struct).
type Type int

const (
	Words         Type = Table + 1 + iota // a list of texts, or one: []string
	Amount                                // a quantity: unit.Quantity, *unit.Quantity
	Amounts                               // a list of quantities, or one: []unit.Quantity
	Tables                                // an array of tables: []struct
	Named                                 // a table of tables by name: []struct in source order, with a string `key:"*"` for the name
	AmountsByName                         // a table of quantities by name: []NamedAmount in source order
	TextsByName                           // a table of texts by name: []NamedText in source order
	Groups                                // a list of names, or a table of names or lists by name: []Group
	Bounds                                // a number, percentage, ratio or quantity to compare with: *Bound
)

// A Field is one key that a block or a table takes.
type Field struct {
	Key, Doc string
	Type     Type
	Dims     []unit.Dim // Amount, Amounts, AmountsByName: the kinds of quantity allowed
	Bare     string     // the unit of a bare number: a symbol, "@key" (the text of that top-level key), "" (a unit is required unless the value is 0)
	Required bool
	Default  string   // in words, for the reference
	OneOf    []string // Text, Words: the texts allowed
	Name     bool     // Text, Words: a name, which keeps to the rules for names
	Fields   []Field  // Table, Tables, Named
	Wants    string   // what the text refers to: "mechanism", "species", "step", "result"
	Example  string   // a value; texts may stand without their quotes
}

// A Group is some species counted together: a list ["A", "B"] gives a group of
// one for each name, a table { syn = ["S1", "S2"], anti = "T" } groups by name.
type Group struct {
	Name    string
	Members []string
	Paths   [][]string // of the members, below the key of the field: {"2"} in a list, {"syn", "1"} in a table
}

// A NamedAmount is one entry of a table of quantities: { R = "0.20 M" }.
type NamedAmount struct {
	Name     string
	Quantity unit.Quantity
}

// A NamedText is one entry of a table of texts.
type NamedText struct{ Name, Text string }

// A Bound is a value to compare a result with: 0.9, "90 %", "15:1",
// "18 kcal/mol". Value is in base quantities, a percentage as a fraction.
type Bound struct {
	Value    float64
	Text     string         // as written
	Quantity *unit.Quantity // set if a unit is written (a percentage too)
	Ratio    bool           // written as a:b; Value is a/b
}

// Hundred tells whether a ratio is written in parts of a hundred, as 94:6.
func (b Bound) Hundred() bool {
	first, second, found := strings.Cut(b.Text, ":")
	x, errX := strconv.ParseFloat(strings.TrimSpace(first), 64)
	y, errY := strconv.ParseFloat(strings.TrimSpace(second), 64)
	return b.Ratio && found && errX == nil && errY == nil && math.Abs(x+y-100) < 1e-9
}

// longestName is how many characters a name may have: it becomes a file name.
const longestName = 100

// forbiddenInNames are the characters that result keys and reactions are made of.
const forbiddenInNames = "/@:{}|+#"

// NameFault says what is wrong with a name that becomes part of result keys, and
// the remedy; msg is "" if nothing is.
func NameFault(name string) (msg, fix string) {
	switch {
	case strings.TrimSpace(name) == "":
		return "the name " + quote(name) + " is empty", "write a name"
	case strings.TrimSpace(name) != name:
		return "the name " + quote(name) + " starts or ends with a space", "write " + quote(strings.TrimSpace(name))
	case strings.ContainsAny(name, "\r\n\t"):
		return "the name " + quote(name) + " has a tab or a line end in it", "write it on one line"
	}
	if n := len([]rune(name)); n > longestName {
		return fmt.Sprintf("the name %s has %d characters", quote(name), n), fmt.Sprintf("shorten it to %d or fewer, and put the rest into a label or title", longestName)
	}
	if i := strings.IndexAny(name, forbiddenInNames); i >= 0 {
		return fmt.Sprintf("the name %s holds the character %q", quote(name), name[i]),
			"leave it out: / @ : { } | + # have a meaning of their own in result keys and reactions"
	}
	return "", ""
}

// wanted says in words what a field holds: "a text", "a temperature".
func (f Field) wanted() string {
	switch f.Type {
	case Text:
		if f.Name {
			return "a name"
		}
		return "a text"
	case Words:
		if f.Name {
			return "a name or a list of names"
		}
		return "a text or a list of texts"
	case Flag:
		return "true or false"
	case Whole:
		return "a whole number"
	case Real:
		return "a number"
	case Amount:
		return dims(f.Dims)
	case Amounts:
		return dims(f.Dims) + ", or a list of such"
	case Table:
		return "a table"
	case Tables:
		return "a list of tables"
	case Named:
		return "a table of tables by name"
	case AmountsByName:
		return "a table by name, each " + dims(f.Dims)
	case TextsByName:
		return "a table of texts by name"
	case Groups:
		return "a list of names, or a table of such lists by name"
	case Bounds:
		return "a number, a percentage, a ratio or a quantity"
	}
	return fmt.Sprintf("type %d", f.Type)
}

func dims(list []unit.Dim) string {
	var names []string
	for _, d := range list {
		names = append(names, d.String())
	}
	return strings.Join(names, " or ")
}

// sample is a value of the field as TOML: its example, or one made up from its type.
func (f Field) sample() string {
	if f.Example != "" {
		return f.written(f.Example)
	}
	switch f.Type {
	case Flag:
		return "true"
	case Whole:
		return "2"
	case Real:
		return "0.5"
	case Amount, Amounts:
		return quote(f.Dims[0].Example())
	case Table:
		return "{ " + inner(f.Fields) + " }"
	case Tables:
		return "[{ " + inner(f.Fields) + " }]"
	case Named:
		return "{ name = { " + inner(f.Fields) + " } }"
	case AmountsByName:
		return "{ name = " + quote(f.Dims[0].Example()) + " }"
	case TextsByName:
		return `{ name = "text" }`
	case Words:
		return "[" + f.sampleText() + "]"
	case Groups:
		return `["A", "B"]`
	case Bounds:
		return `"90 %"`
	}
	return f.sampleText()
}

func (f Field) sampleText() string {
	if len(f.OneOf) > 0 {
		return quote(f.OneOf[0])
	}
	return `"text"`
}

// inner shows the keys that a table needs, or else its first.
func inner(fields []Field) string {
	var pairs []string
	for _, f := range fields {
		if f.Required {
			pairs = append(pairs, f.Key+" = "+f.sample())
		}
	}
	if len(pairs) == 0 && len(fields) > 0 {
		pairs = []string{fields[0].Key + " = " + fields[0].sample()}
	}
	return strings.Join(pairs, ", ")
}

// written puts an example in quotes if its type wants a text and it has none.
func (f Field) written(example string) string {
	switch f.Type {
	case Flag, Whole, Real, Table, Tables, Named, AmountsByName, TextsByName:
		return example
	case Text:
		if isQuoted(example) {
			return example
		}
		return place.Literal(example)
	}
	if isQuoted(example) || strings.HasPrefix(example, "[") || strings.HasPrefix(example, "{") || isNumber(example) {
		return example
	}
	return place.Literal(example)
}
