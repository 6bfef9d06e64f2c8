package schema

import (
	"strings"
	"testing"

	"saddlebook/kinetics/unit"
)

func TestCheckSample(t *testing.T) {
	if err := Check(sampleFields(), &sample{}); err != nil {
		t.Error(err)
	}
}

func TestCheck(t *testing.T) {
	energy := []unit.Dim{unit.MolarEnergy}
	text := func(change func(*Field)) []Field {
		f := Field{Key: "a", Doc: "d", Type: Text}
		change(&f)
		return []Field{f}
	}
	amount := func(change func(*Field)) []Field {
		f := Field{Key: "a", Doc: "d", Type: Amount, Dims: energy}
		change(&f)
		return append([]Field{f}, Field{Key: "energies", Doc: "d", Type: Text, Default: "kJ/mol"})
	}
	type one struct {
		A string `key:"a"`
	}
	type amounts struct {
		A        unit.Quantity `key:"a"`
		Energies string        `key:"energies"`
	}
	type inner struct {
		B int `key:"b"`
	}
	type named struct {
		Name string `key:"*"`
		B    int    `key:"b"`
	}
	type hidden struct {
		a string `key:"a"`
	}
	_ = hidden{}.a
	keep := func(*Field) {}
	b := []Field{{Key: "b", Doc: "d", Type: Whole}}
	for _, tt := range []struct {
		name   string
		fields []Field
		into   any
		want   string // in the error; "" for none
	}{
		{"good", text(keep), &one{}, ""},
		{"no pointer", text(keep), one{}, "no pointer to a struct"},
		{"nil", text(keep), nil, "no pointer to a struct"},
		{"listed, not in the struct", append(text(keep), Field{Key: "z", Doc: "d"}), &one{}, "z has no field tagged"},
		{"in the struct, not listed", nil, &one{}, "a is tagged in"},
		{"listed twice", append(text(keep), text(keep)...), &one{}, "a is listed twice"},
		{"tagged twice", text(keep), &struct {
			A string `key:"a"`
			B string `key:"a"`
		}{}, "two fields tagged"},
		{"unexported", text(keep), &hidden{}, "unexported"},
		{"no doc", text(func(f *Field) { f.Doc = " " }), &one{}, "no Doc"},
		{"no key", []Field{{Doc: "d"}}, &struct{}{}, "has no field"},
		{"required without example", text(func(f *Field) { f.Required = true }), &one{}, "no Example"},
		{"required with default", text(func(f *Field) { f.Required, f.Example, f.Default = true, "x", "y" }), &one{}, "has a Default"},
		{"wrong Go type", text(keep), &struct {
			A int `key:"a"`
		}{}, "int does not fit a text"},
		{"example of the wrong kind", text(func(f *Field) { f.OneOf, f.Example = []string{"x"}, "y" }), &one{}, "the example"},
		{"example that is no name", text(func(f *Field) { f.Name, f.Example = true, "a/b" }), &one{}, "the example"},
		{"dims on a text", text(func(f *Field) { f.Dims = energy }), &one{}, "Dims belong"},
		{"bare on a text", text(func(f *Field) { f.Bare = "K" }), &one{}, "Bare belongs"},
		{"fields on a text", text(func(f *Field) { f.Fields = b }), &one{}, "Fields belong"},
		{"words on a flag", []Field{{Key: "a", Doc: "d", Type: Flag, OneOf: []string{"x"}}}, &one{}, "OneOf and Name"},

		{"amount", amount(keep), &amounts{}, ""},
		{"amount without dims", amount(func(f *Field) { f.Dims = nil }), &amounts{}, "Dims belong"},
		{"amount, bare", amount(func(f *Field) { f.Bare = "kJ/mol" }), &amounts{}, ""},
		{"amount, bare of another kind", amount(func(f *Field) { f.Bare = "K" }), &amounts{}, "the unit of bare numbers"},
		{"amount, bare by key", amount(func(f *Field) { f.Bare, f.Example = "@energies", "3" }), &amounts{}, ""},
		{"amount, bare by a key that is not there", amount(func(f *Field) { f.Bare = "@energy" }), &amounts{}, `names "energy"`},
		{"amount, example without its unit", amount(func(f *Field) { f.Example = "3" }), &amounts{}, "the example"},
		{"amount, example of another kind", amount(func(f *Field) { f.Example = "3 K" }), &amounts{}, "the example"},

		{"table", []Field{{Key: "a", Doc: "d", Type: Table, Fields: b}}, &struct {
			A inner `key:"a"`
		}{}, ""},
		{"table by pointer", []Field{{Key: "a", Doc: "d", Type: Table, Fields: b, Example: "{ b = 1 }"}}, &struct {
			A *inner `key:"a"`
		}{}, ""},
		{"table with a bad example", []Field{{Key: "a", Doc: "d", Type: Table, Fields: b, Example: "{ c = 1 }"}}, &struct {
			A *inner `key:"a"`
		}{}, "the example"},
		{"table with a field that is not in the struct", []Field{{Key: "a", Doc: "d", Type: Table, Fields: []Field{{Key: "c", Doc: "d"}}}}, &struct {
			A inner `key:"a"`
		}{}, "a.c has no field"},
		{"table without fields", []Field{{Key: "a", Doc: "d", Type: Table}}, &struct {
			A inner `key:"a"`
		}{}, "Fields belong"},
		{"named", []Field{{Key: "a", Doc: "d", Type: Named, Fields: b, Example: "{ X = { b = 1 } }"}}, &struct {
			A []named `key:"a"`
		}{}, ""},
		{"named without a name", []Field{{Key: "a", Doc: "d", Type: Named, Fields: b}}, &struct {
			A []inner `key:"a"`
		}{}, "tagged `key:\"*\"`"},
		{"a name where there is none", []Field{{Key: "a", Doc: "d", Type: Tables, Fields: b}}, &struct {
			A []named `key:"a"`
		}{}, "tagged `key:\"*\"`"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			err := Check(tt.fields, tt.into)
			switch {
			case tt.want == "" && err != nil:
				t.Error(err)
			case tt.want != "" && (err == nil || !strings.Contains(err.Error(), tt.want)):
				t.Errorf("got %v, want %q", err, tt.want)
			}
		})
	}
}
