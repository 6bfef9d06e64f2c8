package kind_test

import (
	"context"
	"math"
	"strings"
	"testing"
	"testing/fstest"

	"saddlebook/content"
	"saddlebook/content/fault"
	"saddlebook/render/kind"
	"saddlebook/render/study"
)

// evaluate runs a notebook of one note, with files beside it.
func evaluate(t *testing.T, note string, files map[string]string) (*study.Study, fault.List) {
	t.Helper()
	fsys := fstest.MapFS{"saddlebook.toml": {Data: []byte("title = \"Test\"\n")}, "note.md": {Data: []byte(note)}}
	for name, text := range files {
		fsys[name] = &fstest.MapFile{Data: []byte(text)}
	}
	book, faults := content.Open(fsys, "")
	s, more, err := study.Run(context.Background(), book, study.Options{Jobs: 1})
	if err != nil {
		t.Fatal(err)
	}
	faults = append(faults, more...)
	faults.Sort()
	return s, faults
}

// good evaluates a note that must have no error.
func good(t *testing.T, note string, files map[string]string) *study.Study {
	t.Helper()
	s, faults := evaluate(t, note, files)
	if faults.Failed() {
		var b strings.Builder
		faults.Write(&b)
		t.Fatalf("faults:\n%s", b.String())
	}
	return s
}

// value reads one real result, in base quantities.
func value(t *testing.T, s *study.Study, key string) float64 {
	t.Helper()
	r := result(t, s, key)
	if r.Value.Kind != kind.Real {
		t.Fatalf("%s is not a number: %q", key, r.Value.Text)
	}
	return r.Value.Value
}

func result(t *testing.T, s *study.Study, key string) kind.Result {
	t.Helper()
	k, err := kind.ParseKey(key)
	if err != nil {
		t.Fatal(err)
	}
	b := s.Find("note", k.ID)
	if b == nil {
		t.Fatalf("no block %q", k.ID)
	}
	r, err := b.Result(k)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// near checks a value to a relative tolerance.
func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if e := math.Abs(got-want) / math.Max(math.Abs(want), 1e-300); !(e <= tol) {
		t.Errorf("%s = %.12g, want %.12g (relative error %.1e, allowed %.0e)", what, got, want, e, tol)
	}
}

// The mechanism of section 4 of the design, without its errors.
const addition = "# Test\n\n```toml mechanism\n" + `id          = "addition"
energies    = "kcal/mol"
temperature = "-78 °C"

[species]
R = { H = 0, S = 0 }
X = { H = 0, S = 0 }
A = { H = -11.5, S = "-33 cal/mol/K" }
B = { H = -17.0, S = "-34 cal/mol/K" }

[step]
TSa = { reaction = "R + X <=> A", H = 9.0, S = "-24.6 cal/mol/K" }
TSb = { reaction = "R + X <=> B", H = 9.9, S = "-26.1 cal/mol/K" }
` + "```\n"

const (
	gasConstant = 8.31446261815324 // J/mol/K, exact (SI 2019)
	boltzmann   = 1.380649e-23     // J/K, exact
	planck      = 6.62607015e-34   // J s, exact
	calorie     = 4.184            // J, thermochemical
	cold        = 195.15           // K
)
