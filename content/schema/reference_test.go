package schema

import (
	"bytes"
	"encoding/json"
	"errors"
	"flag"
	"os"
	"strings"
	"testing"
	"unicode/utf8"

	"github.com/BurntSushi/toml"
	"github.com/santhosh-tekuri/jsonschema/v6"
)

var update = flag.Bool("update", false, "rewrite the golden files")

func golden(t *testing.T, name string, got []byte) {
	t.Helper()
	file := "testdata/" + name
	if *update {
		if err := os.WriteFile(file, got, 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(got, want) {
		t.Errorf("%s differs; got\n%s", file, got)
	}
}

const sampleDoc = "A block of an invented kind that has a field of every type, to show how each is described."

func TestReference(t *testing.T) {
	var b bytes.Buffer
	if err := Reference(&b, "sample", sampleDoc, sampleFields()); err != nil {
		t.Fatal(err)
	}
	golden(t, "reference.txt", b.Bytes())
	for _, line := range strings.Split(b.String(), "\n") {
		if utf8.RuneCountInString(line) > pageWidth || strings.TrimRight(line, " ") != line {
			t.Errorf("%d columns: %q", utf8.RuneCountInString(line), line)
		}
	}
	if err := Reference(full{}, "sample", sampleDoc, sampleFields()); !errors.Is(err, errFull) {
		t.Errorf("a full disk gives %v", err)
	}
}

var errFull = errors.New("no room")

type full struct{}

func (full) Write([]byte) (int, error) { return 0, errFull }

func compiled(t *testing.T) *jsonschema.Schema {
	t.Helper()
	text, err := json.MarshalIndent(JSONSchema("sample", sampleDoc, sampleFields()), "", "  ")
	if err != nil {
		t.Fatal(err)
	}
	golden(t, "schema.json", append(text, '\n'))
	doc, err := jsonschema.UnmarshalJSON(bytes.NewReader(text))
	if err != nil {
		t.Fatal(err)
	}
	c := jsonschema.NewCompiler()
	if err := c.AddResource("sample.json", doc); err != nil {
		t.Fatal(err)
	}
	s, err := c.Compile("sample.json")
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// TestJSONSchema holds that the schema and Decode take and refuse the same texts.
func TestJSONSchema(t *testing.T) {
	s := compiled(t)
	for _, tt := range []struct {
		name, text string
		good       bool
	}{
		{"every field", good, true},
		{"the least", ok, true},
		{"nothing", "", false},
		{"unknown key", ok + "b = 1", false},
		{"wrong type", ok + "scale = \"x\"", false},
		{"word not allowed", ok + "energies = \"kcal\"", false},
		{"id with a slash", "id = \"a/b\"\ntemperature = \"1 K\"", false},
		{"padded id", "id = \" a\"\ntemperature = \"1 K\"", false},
		{"id of one letter", "id = \"a\"\ntemperature = \"1 K\"", true},
		{"number without the unit it needs", "id = \"a\"\ntemperature = 25", false},
		{"zero without a unit", ok + "species = { R = { S = 0 } }", true},
		{"number in the block's unit", ok + "species = { R = { H = 3.5 } }", true},
		{"name with a plus", ok + "species = { \"R+\" = { H = 3.5 } }", false},
		{"file names are no names", ok + "replace = { \"a/b.css\" = \"c\" }", true},
		{"empty text", ok + "authors = \"\"", false},
		{"empty list", ok + "at = []", false},
		{"name twice", ok + "products = [\"A\", \"A\"]", false},
		{"missing key inside", ok + "step = { TS = {} }", false},
		{"a whole number", ok + "species = { R = { forms = 2 } }", true},
		{"no whole number", ok + "species = { R = { forms = 2.5 } }", false},
		{"a bound", ok + "claim = [{ says = \"x\", at-least = 3 }]", true},
		{"no bound", ok + "claim = [{ says = \"x\", at-least = true }]", false},
	} {
		t.Run(tt.name, func(t *testing.T) {
			var doc map[string]any
			if _, err := toml.Decode(tt.text, &doc); err != nil {
				t.Fatal(err)
			}
			text, err := json.Marshal(doc)
			if err != nil {
				t.Fatal(err)
			}
			value, err := jsonschema.UnmarshalJSON(bytes.NewReader(text))
			if err != nil {
				t.Fatal(err)
			}
			if err := s.Validate(value); (err == nil) != tt.good {
				t.Errorf("the schema gives %v", err)
			}
			if _, faults := read(tt.text, &sample{}); (len(faults) == 0) != tt.good {
				t.Errorf("Decode gives %v", faults)
			}
		})
	}
}
