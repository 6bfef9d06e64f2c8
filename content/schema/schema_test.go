package schema

import (
	"fmt"
	"slices"
	"strings"
	"testing"

	"saddlebook/content/fault"
	"saddlebook/content/place"
	"saddlebook/kinetics/unit"
)

// sample is a block of an invented kind that has a field of every type.
type sample struct {
	ID          string          `key:"id"`
	Energies    string          `key:"energies"`
	Temperature unit.Quantity   `key:"temperature"`
	At          []unit.Quantity `key:"at"`
	Authors     []string        `key:"authors"`
	Fast        *bool           `key:"fast"`
	Scale       float64         `key:"scale"`
	Error       *errorSample    `key:"error"`
	Charge      []NamedAmount   `key:"charge"`
	Replace     []NamedText     `key:"replace"`
	Products    []Group         `key:"products"`
	Species     []stateSample   `key:"species"`
	Step        []stepSample    `key:"step"`
	Claim       []claimSample   `key:"claim"`
}

type energySample struct {
	G *unit.Quantity `key:"G"`
	H unit.Quantity  `key:"H"`
	S unit.Quantity  `key:"S"`
}

type stateSample struct {
	Name string `key:"*"`
	energySample
	Label string `key:"label"`
	Forms int    `key:"forms"`
}

type stepSample struct {
	Name     string `key:"*"`
	Reaction string `key:"reaction"`
}

type claimSample struct {
	Says        string   `key:"says"`
	AtLeast     *Bound   `key:"at-least"`
	Probability *float64 `key:"probability"`
}

type errorSample struct {
	Step *unit.Quantity `key:"step"`
}

func sampleFields() []Field {
	energy := []unit.Dim{unit.MolarEnergy}
	return []Field{
		{Key: "id", Doc: "the name of the block", Type: Text, Name: true, Required: true, Example: "addition"},
		{Key: "energies", Doc: "the unit of bare energies", Type: Text, OneOf: []string{"kcal/mol", "kJ/mol"}, Default: "kcal/mol"},
		{Key: "temperature", Doc: "where G holds", Type: Amount, Dims: []unit.Dim{unit.Temperature}, Required: true, Example: "25 °C"},
		{Key: "at", Doc: "the temperatures of the table, which may be many, so that this line is longer than the page is wide", Type: Amounts, Dims: []unit.Dim{unit.Temperature}, Bare: "K", Default: "temperature"},
		{Key: "authors", Doc: "who wrote it", Type: Words},
		{Key: "fast", Doc: "kept at equilibrium", Type: Flag},
		{Key: "scale", Doc: "scale factor", Type: Real, Default: "1", Example: "0.98"},
		{Key: "error", Doc: "standard deviations", Type: Table, Fields: []Field{
			{Key: "step", Doc: "of each step", Type: Amount, Dims: energy, Bare: "@energies", Example: "0.8"},
		}},
		{Key: "charge", Doc: "what is charged", Type: AmountsByName, Dims: []unit.Dim{unit.Concentration, unit.Equivalent}, Wants: "species"},
		{Key: "replace", Doc: "files in place of others", Type: TextsByName},
		{Key: "products", Doc: "what to compare", Type: Groups, Wants: "species", Example: `{ syn = ["S1", "S2"], anti = "T" }`},
		{Key: "species", Doc: "the minima", Type: Named, Fields: []Field{
			{Key: "G", Doc: "free energy", Type: Amount, Dims: energy, Bare: "@energies", Example: "12.4 ± 0.5"},
			{Key: "H", Doc: "enthalpy", Type: Amount, Dims: energy, Bare: "@energies", Example: "9.0"},
			{Key: "S", Doc: "entropy", Type: Amount, Dims: []unit.Dim{unit.MolarEntropy}, Example: "-33 cal/mol/K"},
			{Key: "label", Doc: "the name on figures", Type: Text, Default: "its key"},
			{Key: "forms", Doc: "how many indistinct forms it stands for", Type: Whole, Default: "1"},
		}},
		{Key: "step", Doc: "the elementary steps", Type: Named, Fields: []Field{
			{Key: "reaction", Doc: "what goes to what", Type: Text, Required: true, Example: "R + X <=> A"},
		}},
		{Key: "claim", Doc: "what must hold", Type: Tables, Fields: []Field{
			{Key: "says", Doc: "the conclusion in words", Type: Text, Required: true, Example: "A wins."},
			{Key: "at-least", Doc: "lower bound", Type: Bounds, Example: "15:1"},
			{Key: "probability", Doc: "how likely it must be", Type: Real, Example: "0.9"},
		}},
	}
}

// good is a sample without faults that uses every field.
const good = `id = "addition"
energies = "kJ/mol"
temperature = "-78 °C"
at = [200, "25 °C"]
authors = "Process chemistry"
fast = true
scale = 1
error = { step = "0.8 kcal/mol" }
charge = { R = "0.20 M", X = "1.1 equiv" }
products = { syn = ["S1", "S2"], anti = "T" }

[replace]
"page/style.css" = "our.css"

[species]
R = { H = 0, S = 0 }
A.H = -11.5
A.S = "-33 cal/mol/K"
A.label = "1,2-adduct"

[species.B]
G = "9.9 ± 0.3"
forms = 2

[step]
TSa = { reaction = "R + X <=> A" }

[[claim]]
says = "A wins."
at-least = "15:1"
probability = 0.9

[[claim]]
says = "It is warm."
at-least = "90 %"
`

func read(text string, into *sample) (*Node, fault.List) {
	lines := place.NewLines([]byte(text))
	n, faults := Parse(text, func(offset int) fault.Place {
		line, col := lines.At(offset)
		return fault.Place{File: "n.md", Line: line, Col: col}
	})
	n.Label = `mechanism "addition"`
	return n, append(faults, Decode(n, sampleFields(), into)...)
}

func TestDecode(t *testing.T) {
	var s sample
	n, faults := read(good, &s)
	if len(faults) > 0 {
		t.Fatal(faults)
	}
	near := func(name string, got, want float64) {
		if d := got - want; !(d < 1e-9 && d > -1e-9) {
			t.Errorf("%s = %v, want %v", name, got, want)
		}
	}
	equal := func(name string, got, want any) {
		if got != want {
			t.Errorf("%s = %v, want %v", name, got, want)
		}
	}
	equal("id", s.ID, "addition")
	near("temperature", s.Temperature.SI, 195.15)
	near("at.1, bare in K", s.At[0].SI, 200)
	near("at.2", s.At[1].SI, 298.15)
	equal("authors", strings.Join(s.Authors, "|"), "Process chemistry")
	equal("fast", *s.Fast, true)
	near("scale, a whole number", s.Scale, 1)
	near("error.step", s.Error.Step.SI, 0.8*4184)
	equal("charge", s.Charge[0].Name+s.Charge[1].Name, "RX")
	near("charge.R", s.Charge[0].Quantity.SI, 0.2)
	near("charge.X", s.Charge[1].Quantity.SI, 1.1)
	equal("replace", s.Replace[0], NamedText{"page/style.css", "our.css"})
	equal("products", s.Products[0].Name+" "+strings.Join(s.Products[0].Members, "+")+" "+s.Products[1].Name+" "+s.Products[1].Members[0], "syn S1+S2 anti T")
	equal("species in source order", s.Species[0].Name+s.Species[1].Name+s.Species[2].Name, "RAB")
	near("species.A.H, bare in kJ/mol", s.Species[1].H.SI, -11500)
	near("species.A.S", s.Species[1].S.SI, -33*4.184)
	if s.Species[1].G != nil {
		t.Error("species.A.G is set without being given")
	}
	near("species.B.G", s.Species[2].G.SI, 9900)
	near("species.B.G ±", s.Species[2].G.SD, 300)
	equal("species.B.forms", s.Species[2].Forms, 2)
	equal("step.TSa.reaction", s.Step[0].Reaction, "R + X <=> A")
	first, second := s.Claim[0].AtLeast, s.Claim[1].AtLeast
	if !first.Ratio || first.Value != 15 || first.Text != "15:1" || first.Quantity != nil || first.Hundred() {
		t.Errorf("claim.1.at-least = %+v", first)
	}
	near("claim.2.at-least", second.Value, 0.9)
	near("claim.2.at-least, in its unit", second.Quantity.Unit.Of(second.Quantity.SI), 90)
	near("claim.1.probability", *s.Claim[0].Probability, 0.9)

	equal("the place of a key", n.Place("species", "A", "S").String(), "n.md:18:3")
	equal("the deepest place there is", n.Place("claim", "2", "at-most").String(), "n.md:33:3")
	equal("the place of a value", n.Get("species", "R", "H").At.String(), "n.md:16:11")
	equal("an element", n.Get("at", "2").Text, "25 °C")
	if n.Get("at", "3") != nil || n.Get("at", "0") != nil || n.Get("at", "x") != nil || n.Get("a", "b") != nil {
		t.Error("Get finds what is not there")
	}
}

func TestBounds(t *testing.T) {
	for _, tt := range []struct {
		source  string
		value   float64
		ratio   bool
		hundred bool
		unit    string
	}{
		{"0.9", 0.9, false, false, ""},
		{"3", 3, false, false, ""},
		{`"0.9"`, 0.9, false, false, ""},
		{`"−2.5"`, -2.5, false, false, ""},
		{`"90 %"`, 0.9, false, false, "%"},
		{`"15:1"`, 15, true, false, ""},
		{`"96:4"`, 24, true, true, ""},
		{`"2 kJ/mol"`, 2000, false, false, "kJ/mol"},
	} {
		var s sample
		_, faults := read("id = \"a\"\ntemperature = \"1 K\"\n[[claim]]\nsays = \"x\"\nat-least = "+tt.source, &s)
		if len(faults) > 0 {
			t.Errorf("%s: %v", tt.source, faults)
			continue
		}
		b := s.Claim[0].AtLeast
		symbol := ""
		if b.Quantity != nil {
			symbol = b.Quantity.Unit.Symbol
		}
		if b.Value != tt.value || b.Ratio != tt.ratio || b.Hundred() != tt.hundred || symbol != tt.unit || b.Text != strings.Trim(tt.source, `"`) {
			t.Errorf("%s: %+v", tt.source, b)
		}
	}
}

func TestGroupsList(t *testing.T) {
	for source, want := range map[string]string{
		`["A", "B"]`:                    "A=A[1] B=B[2]",
		`"A"`:                           "A=A[]",
		`{ all = ["A", "B"], c = "C" }`: "all=A+B[all.1 all.2] c=C[c]",
	} {
		var s sample
		_, faults := read("id = \"a\"\ntemperature = \"1 K\"\nproducts = "+source, &s)
		var got []string
		for _, g := range s.Products {
			var paths []string
			for _, p := range g.Paths {
				paths = append(paths, strings.Join(p, "."))
			}
			got = append(got, fmt.Sprintf("%s=%s%v", g.Name, strings.Join(g.Members, "+"), paths))
		}
		if strings.Join(got, " ") != want || len(faults) > 0 {
			t.Errorf("%s: %q, want %q; %v", source, got, want, faults)
		}
	}
}

// TestMeant holds that a required key which is there under a wrong name or in a
// wrong table is not missing too, and that what Parse refused is known.
func TestMeant(t *testing.T) {
	for source, want := range map[string]string{
		"id = \"a\"\ntemprature = \"1 K\"\n":                        "temprature",
		"id = \"a\"\n[species]\ntemperature = \"1 K\"\n":            "species.temperature",
		"id = \"a\"\ntemprature = \"1 K\"\ntemperature = \"1 K\"\n": "temprature",
	} {
		var s sample
		if _, faults := read(source, &s); len(faults) != 1 || faults[0].Key != want {
			t.Errorf("%q: %v, want one fault, of %s", source, faults, want)
		}
	}
	for source, want := range map[string]bool{"id = \"a\"\ntemperature = 1": false, "id = \"a\"\n[species]\nR = { H = nan }": true} {
		var s sample
		if n, _ := read(source, &s); n.Refused() != want {
			t.Errorf("%q: refused %v", source, n.Refused())
		}
	}
}

// TestDecodeGoesOn holds that what is right is decoded beside what is wrong.
func TestDecodeGoesOn(t *testing.T) {
	var s sample
	_, faults := read("id = 3\nscale = 0.5\nat = [1, \"2 h\", 3]\ntemperature = nan\n[species]\nR = { H = \"x\", forms = 2 }\n[[claim]]\nsays = 1\n[[claim]]\nsays = \"b\"\n", &s)
	if s.Scale != 0.5 || len(s.At) != 2 || s.At[1].SI != 3 || s.Species[0].Forms != 2 || len(s.Claim) != 2 || s.Claim[1].Says != "b" {
		t.Errorf("got %+v", s)
	}
	if len(faults) != 5 {
		t.Errorf("got %v", faults)
	}
}

// TestBroken holds that a source which is not well formed still tells its id and
// gives no second faults.
func TestBroken(t *testing.T) {
	var s sample
	n, faults := read("id = \"a\"\ntemperature = 25 K\nunknown = 3\n", &s)
	if !n.Broken || len(faults) != 1 || n.Get("id").Text != "a" || s.ID != "" {
		t.Errorf("broken %v, %v", n.Broken, faults)
	}
}

func TestNameFault(t *testing.T) {
	for _, name := range []string{"A", "TS 2", "1,2-adduct", "A‡", "ключ", "a.b", "[Rh]", "A'", "A*"} {
		if msg, _ := NameFault(name); msg != "" {
			t.Errorf("%q: %s", name, msg)
		}
	}
	for _, name := range []string{"", " ", " A", "A ", "a\tb", "a\nb", "a/b", "a@b", "a:b", "a{b", "a}b", "a|b", "a+b"} {
		if msg, fix := NameFault(name); msg == "" || fix == "" {
			t.Errorf("%q passes", name)
		}
	}
}

// FuzzDecode holds that no text makes the reader panic, and that every diagnostic
// can be printed, has a place and a remedy, and that a broken source has one.
func FuzzDecode(f *testing.F) {
	f.Add(good)
	for _, tt := range messages {
		f.Add(tt.source)
	}
	for _, field := range sampleFields() {
		for _, value := range []string{"1", "0.5", "true", `"x"`, `'''x'''`, "[]", "{}", "[[1]]", "[{}]", "{a={}}", "{\"\"=1}", "2031-05-27", "nan", `"\u0007"`, `""`} {
			f.Add(field.Key + " = " + value)
		}
	}
	f.Fuzz(func(t *testing.T, text string) {
		if len(text) > 4096 {
			return
		}
		var s sample
		n, faults := read(text, &s)
		if n.Broken && len(faults) == 0 {
			t.Error("broken without a diagnostic")
		}
		for _, d := range faults {
			if d.At.Line < 1 || d.At.Col < 1 || d.Msg == "" || d.Fix == "" || d.Error() == "" || strings.ContainsAny(d.Error(), "\n\r") {
				t.Errorf("diagnostic %+v", d)
			}
		}
		again := slices.Clone(faults)
		again.Sort()
		if !n.Broken && len(again) != len(faults) {
			t.Errorf("a fault is told twice: %v", faults)
		}
	})
}
