package place

import (
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"github.com/BurntSushi/toml"
)

// corpus is the seed of the fuzz tests: every way of writing keys and values.
var corpus = []string{
	"",
	"# only a comment",
	"a = 1",
	"a = 1\r\nb = \"two\" # three\r\n\r\n[c]\r\nd = [\r\n  1,\r\n]\r\n",
	"[species]\nR = { H = 0, S = 0, label = \"enone 3\" }\nA = { H = -11.5, S = \"-33 cal/mol/K\" }\n[step]\nTSa = { reaction = \"R + X <=> A\", H = \"9.9 ± 0.3\" }\n",
	"[[claim]]\nsays = 'a'\n[[claim]]\nsays = 'b'\n[claim.more]\nx = 1\n[[claim.deep]]\ny = 2\n[[claim.deep]]\ny = 3\n",
	"1.2 = 3\n1.\"2\".4.5 = 6\n", "1.2.3 = 3\n1.2.4 = 4\n",
	"\"\" = 1", "[\"\"]\n'' = 1", "a.\"\" = 1", "[a.\"\".b]\nc=1",
	"\"ΔG‡\" = 1\n'ключ' = 2\n\"\\u0394\\x41\\e\\t\\\"\\\\\" = 3\n",
	"a.b.c = 1\na.b.d = 2\na.e = 3\n", "a . b\t.\t c = 1\n[ x . y ]\nz=1\n[[ q . \"r s\" ]]\n",
	"[a.b.c]\nd=1\n[a]\ne=2\n[a.b]\nf=3\n", "[a]\nb.c=1\n[a.d]\ne=2\n",
	"s = \"\"\"\nline \"one\" and \"\"two\"\"\n[not.a.header]\nx = 1 # no comment\\\n   joined \\\" \\\"\"\" \"\"\"\n",
	"s = \"\"\"a\"\"\"\"\"\nt = '''b'''''\nu = \"\"\"\"\"\"\nv = ''''''\nw = '''it's ''so'' [x] = {'''\n",
	"s = \"\"\"\\\\\"\"\"\"\"\"\nx=1", "s = \"\"\"\\\"\"\"\"\"\"\nx=1",
	"s = \"a # b [c] = {d}\" # e [f] = {g}\nt = '\\' # '\n",
	"d = 2031-05-27\nt = 07:32:00.5\nu = 2031-05-27 07:32:00 # c\nv = 2031-05-27T07:32:00Z\nw = [2031-05-27 07:32, 07:32]\nx = 2031-05-27t07:32:00+01:00\n",
	"n = [+1, -2, 0x1F, 0o17, 0b11, 1_000, 1e5, -1.5E+3, 1e-06, +0.0, inf, -inf, nan, +nan, true, false]\n",
	"a = [[1, 2], [[3]], [], [\"x\", 'y'], {b = [{c = 1}, {d = {}}]}]\n",
	"a = [ # c ]\n 1 # ,\n , # ]\n 2,\n # end\n]\n", "a = { b = 1, c = 2, }\nd = {\n e = 1, # }\n f = 2\n}\n",
	"a = {b.c = 1, b.d = 2, \"e f\".g = {h.i = 3}}\n", "x = [{a.b = 1}, {a.b = 2}]\n",
	"[[a.b]]\nx=1\n[a]\nb.c=2\n", "[[a]]\n[[a.b]]\n[[a.b]]\n[[a]]\n[[a.b]]\n[a.b.c]\nd=1\n",
	"a=[1]\na.b=2\n", "a.x=1\na=[2]\n", "[[a]]\nx.y=1\n[[a]]\nx=2\nx=3\n", "[[x]]\n[x.a.b]\n[[x]]\n[x.a]\n[x.a]\n",
	"a.\"\"=[1]\na.b=2\n", "a={b=1}\n[a.c]\nd=1\n", "a={b=1}\na.c=1\n", "x = {a={b=1}, a.c=2}\n",
	"\ufeffa = 1\n", "a = \"\t\"\n\tb\t=\t1\t\n", "true = true\ninf = inf\n2031-05-27 = 1\n-_- = 1\n",
	"[a]\n[a.b]\n[c]\n[[c.d]]\n", "title = \"x\" \t# y", "[a] # b\n[[c]] # d\n",
}

// tomls adds the pages of any folder of TOML samples to the corpus.
func tomls(t testing.TB) []string {
	names, err := filepath.Glob(filepath.Join("testdata", "*.toml"))
	if err != nil {
		t.Fatal(err)
	}
	all := slices.Clone(corpus)
	for _, name := range names {
		text, err := os.ReadFile(name)
		if err != nil {
			t.Fatal(err)
		}
		all = append(all, string(text))
	}
	return all
}

// tree lists the paths of a decoded tree; elements are marked, so that they
// differ from keys that are numbers.
func tree(v any, path string, list *[]string) {
	switch v := v.(type) {
	case map[string]any:
		for k, kid := range v {
			p := path + "." + fmt.Sprintf("%q", k)
			*list = append(*list, p)
			tree(kid, p, list)
		}
	case []map[string]any:
		for i, kid := range v {
			p := fmt.Sprintf("%s[%d]", path, i+1)
			*list = append(*list, p)
			tree(kid, p, list)
		}
	case []any:
		for i, kid := range v {
			p := fmt.Sprintf("%s[%d]", path, i+1)
			*list = append(*list, p)
			tree(kid, p, list)
		}
	}
}

func scanned(e *Entry, path string, list *[]string) {
	for _, k := range e.Kids {
		p := path + "." + fmt.Sprintf("%q", k.Key)
		if e.Form == List || e.Form == Tables {
			p = path + "[" + k.Key + "]"
		}
		*list = append(*list, p)
		scanned(k, p, list)
	}
}

// checkScan holds what is promised for any text.
func checkScan(t *testing.T, text string) {
	root, faults := Scan(text)
	root.Walk(func(path []string, e *Entry) {
		if e.KeyAt < 0 || e.At < 0 || e.End < e.At || e.End > len(text) || e.KeyAt > len(text) {
			t.Errorf("%q has places %d, %d, %d in %d bytes", path, e.KeyAt, e.At, e.End, len(text))
		}
	})
	for _, f := range faults {
		if f.Msg == "" || f.Fix == "" || f.At < 0 || f.At > len(text) || strings.Contains(f.Msg+f.Fix, "\n") && !f.Clash {
			t.Errorf("fault %+v", f)
		}
	}
	var doc map[string]any
	if _, err := toml.Decode(text, &doc); err != nil {
		return
	}
	for _, f := range faults {
		if !f.Clash && !strings.Contains(f.Msg, "too") {
			t.Errorf("accepted text has the fault %q at %d", f.Msg, f.At)
		}
	}
	if len(faults) > 0 {
		return
	}
	var got, want []string
	scanned(root, "", &got)
	tree(doc, "", &want)
	slices.Sort(got)
	slices.Sort(want)
	if !slices.Equal(got, want) {
		if emptyKey(root) {
			return // the reader may drop keys beside an empty one
		}
		t.Errorf("paths differ\ntext %q\ngot  %q\nwant %q", text, got, want)
	}
}

func emptyKey(root *Entry) (found bool) {
	root.Walk(func(_ []string, e *Entry) { found = found || e.Key == "" })
	return found
}

func TestScanAgreesWithReader(t *testing.T) {
	for _, text := range tomls(t) {
		checkScan(t, text)
	}
}

// TestScanPlaces holds the source that stands at each place: the key, and the value.
func TestScanPlaces(t *testing.T) {
	text := "id = \"a\" # c\n" +
		"at = [1, \"2 °C\", [3]]\n" +
		"x.\"y z\".w = { H = 0, u.v = 'q' }\n" +
		"[species]\nR = { H = -1.5 }\n" +
		"[step.TS1.more]\nk = 2031-05-27 07:32:00 # d\n" +
		"[[claim]]\nsays = \"\"\"a\nb\"\"\"\n" +
		"[[claim]]\nok = true\n"
	want := []string{ // path, source at the key, source of the value
		`id | id | "a"`,
		`at | at | [1, "2 °C", [3]]`, `at.1 | 1 | 1`, `at.2 | " | "2 °C"`, `at.3 | [ | [3]`, `at.3.1 | 3 | 3`,
		`x | x | `, `x.y z | "y  | `, `x.y z.w | w | { H = 0, u.v = 'q' }`, `x.y z.w.H | H | 0`,
		`x.y z.w.u | u | `, `x.y z.w.u.v | v | 'q'`,
		`species | species | `, `species.R | R | { H = -1.5 }`, `species.R.H | H | -1.5`,
		`step | step | `, `step.TS1 | TS1 | `, `step.TS1.more | more | `, `step.TS1.more.k | k | 2031-05-27 07:32:00`,
		`claim | claim | `, `claim.1 | c | `, "claim.1.says | says | \"\"\"a\nb\"\"\"", `claim.2 | c | `, `claim.2.ok | ok | true`,
	}
	root, faults := Scan(text)
	if len(faults) > 0 {
		t.Fatal(faults)
	}
	var got []string
	root.Walk(func(path []string, e *Entry) {
		got = append(got, strings.Join(path, ".")+" | "+text[e.KeyAt:e.KeyAt+len(e.Key)]+" | "+text[e.At:e.End])
	})
	if !slices.Equal(got, want) {
		t.Errorf("got\n%s\nwant\n%s", strings.Join(got, "\n"), strings.Join(want, "\n"))
	}
}

func FuzzScan(f *testing.F) {
	for _, text := range tomls(f) {
		f.Add(text)
	}
	f.Fuzz(func(t *testing.T, text string) {
		if len(text) < 4096 {
			checkScan(t, text)
		}
	})
}
