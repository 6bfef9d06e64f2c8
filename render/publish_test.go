package render

import (
	"context"
	"io/fs"
	"os"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"testing"

	"saddlebook/content"
)

// lab is a notebook of four notes: two mechanisms, a note that reads the first
// one from outside, and one that depends on nothing.
var lab = map[string]string{
	"saddlebook.toml": "title = \"Lab\"\n",
	"first.md": "# First\n\n```toml mechanism\nid = \"one\"\ntemperature = \"25 °C\"\n[species]\nR = { G = 0 }\nA = { G = -3 }\nB = { G = -5 }\n[step]\n" +
		"TSa = { reaction = \"R <=> A\", G = \"20.0 ± 0.3\" }\nTSb = { reaction = \"R <=> B\", G = \"21.0 ± 0.3\" }\n```\n\n{= one/barrier/TSa }\n",
	"second.md": "# Second\n\n```toml mechanism\nid = \"two\"\ntemperature = \"25 °C\"\ntable = { file = \"e.csv\", sum = [\"E\"] }\n```\n\n{= two/barrier/TS }\n",
	"e.csv":     "name,reaction,E\nP,,0\nQ,,-2\nTS,P <=> Q,18\n",
	"reads.md": "# Reads\n\nSee [the first](first.md): {= first#one/barrier/TSa }.\n\n```toml selectivity\nid = \"limits\"\nmechanism = \"first#one\"\nfrom = \"R\"\n" +
		"products = [\"A\", \"B\"]\n```\n",
	"apart.md": "# Apart\n\nNothing computed.\n",
}

func write(t *testing.T, dir string, files map[string]string) {
	t.Helper()
	for name, text := range files {
		file := filepath.Join(dir, filepath.FromSlash(name))
		if err := os.MkdirAll(filepath.Dir(file), 0o777); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(file, []byte(text), 0o666); err != nil {
			t.Fatal(err)
		}
	}
}

// publish publishes a folder and returns the bytes of every file of its site.
func publish(t *testing.T, dir, to string, o Options) map[string]string {
	t.Helper()
	src, err := Locate(dir)
	if err != nil {
		t.Fatal(err)
	}
	out, err := Publish(context.Background(), src, to, o)
	if err != nil {
		t.Fatal(err)
	}
	if out.Broken {
		t.Fatalf("faults: %v", out.Faults)
	}
	return readAll(t, to)
}

func readAll(t *testing.T, dir string) map[string]string {
	t.Helper()
	all := map[string]string{}
	err := filepath.WalkDir(dir, func(p string, d fs.DirEntry, err error) error {
		if err != nil || d.IsDir() {
			return err
		}
		data, err := os.ReadFile(p)
		rel, _ := filepath.Rel(dir, p)
		all[filepath.ToSlash(rel)] = string(data)
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	return all
}

// changed names the pages that differ between two sites, without the list of
// files and the colophon, which name the hash of every page.
func changed(a, b map[string]string) []string {
	var out []string
	for name := range a {
		if a[name] != b[name] && strings.HasSuffix(name, ".html") && name != "colophon.html" {
			out = append(out, name)
		}
	}
	slices.Sort(out)
	return out
}

func TestSameInputSameBytes(t *testing.T) {
	var first map[string]string
	for i, o := range []Options{{Jobs: 3, Fresh: true}, {Jobs: 1}, {Jobs: 7}, {}} {
		dir := filepath.Join(t.TempDir(), strings.Repeat("deep/", i), "book")
		if err := os.CopyFS(dir, content.Demo()); err != nil {
			t.Fatal(err)
		}
		got := publish(t, dir, filepath.Join(t.TempDir(), "out"), o)
		if first == nil {
			first = got
			continue
		}
		if len(got) != len(first) {
			t.Errorf("%+v: %d files, before %d", o, len(got), len(first))
		}
		for name, data := range first {
			if got[name] != data {
				t.Errorf("%+v: %s differs", o, name)
			}
		}
	}
}

func TestAnEditChangesWhatDependsOnIt(t *testing.T) {
	for _, fresh := range []bool{false, true} {
		t.Run(map[bool]string{false: "cached", true: "fresh"}[fresh], func(t *testing.T) {
			t.Setenv("SADDLEBOOK_CACHE", t.TempDir())
			dir, to := t.TempDir(), filepath.Join(t.TempDir(), "out")
			write(t, dir, lab)
			o := Options{Fresh: fresh}
			before := publish(t, dir, to, o)
			for _, edit := range []struct {
				file, from, to string
				want           []string
			}{
				{"first.md", "20.0", "20.1", []string{"first.html", "reads.html"}},
				{"e.csv", "18", "18.1", []string{"second.html"}},
				{"apart.md", "Nothing", "Still nothing", []string{"apart.html"}},
				{"first.md", "G = -5", "G = -5.5", []string{"first.html", "reads.html"}},
			} {
				write(t, dir, map[string]string{edit.file: strings.Replace(lab[edit.file], edit.from, edit.to, 1)})
				after := publish(t, dir, to, o)
				if got := changed(before, after); !slices.Equal(got, edit.want) {
					t.Errorf("%s, %s to %s: changed %v, want %v", edit.file, edit.from, edit.to, got, edit.want)
				}
				write(t, dir, map[string]string{edit.file: lab[edit.file]})
				again := publish(t, dir, to, o)
				for name, data := range before {
					if again[name] != data {
						t.Errorf("%s: %s is not what it was", edit.file, name)
					}
				}
			}
		})
	}
}

// Moving a block down its note recomputes nothing: the cache key knows no places.
func TestMovingALineKeepsTheCache(t *testing.T) {
	cache := t.TempDir()
	t.Setenv("SADDLEBOOK_CACHE", cache)
	dir, to := t.TempDir(), filepath.Join(t.TempDir(), "out")
	write(t, dir, lab)
	publish(t, dir, to, Options{})
	before := len(readAll(t, cache))
	write(t, dir, map[string]string{"first.md": strings.Replace(lab["first.md"], "# First\n", "# First\n\nA new line.\n", 1)})
	publish(t, dir, to, Options{})
	if after := len(readAll(t, cache)); after != before {
		t.Errorf("%d values kept after the move, %d before", after, before)
	}
}

// A damaged cache costs time and no result.
func TestDamagedCache(t *testing.T) {
	cache := t.TempDir()
	t.Setenv("SADDLEBOOK_CACHE", cache)
	dir, to := t.TempDir(), filepath.Join(t.TempDir(), "out")
	write(t, dir, lab)
	before := publish(t, dir, to, Options{})
	for name := range readAll(t, cache) {
		if err := os.WriteFile(filepath.Join(cache, name), []byte("nonsense, and longer than a checksum is"), 0o666); err != nil {
			t.Fatal(err)
		}
	}
	after := publish(t, dir, to, Options{})
	if got := changed(before, after); len(got) > 0 {
		t.Errorf("changed %v", got)
	}
}

// No number that the demo notebook shows stands in the program: it is
// computed. Numbers of fewer than four digits stand everywhere, so the search
// is for the six digits that results prints.
func TestNoResultStandsInTheSource(t *testing.T) {
	lines, faults, err := Results(context.Background(), Source{FS: content.Demo(), Embedded: true}, Options{})
	if err != nil || faults.Failed() {
		t.Fatal(err, faults)
	}
	source := goSource(t, "..")
	digits := regexp.MustCompile(`[0-9]`)
	looked := 0
	for _, l := range lines {
		v := strings.TrimPrefix(l.value(), "-")
		mantissa, _, _ := strings.Cut(v, "e")
		if len(digits.FindAllString(strings.Trim(mantissa, "0."), -1)) < 5 || strings.Trim(mantissa, "0.9") == "" {
			continue // too few digits, or nines on the way to 1, which stand anywhere
		}
		looked++
		if i := strings.Index(source, mantissa); i >= 0 {
			t.Errorf("%s = %s stands in the source: ...%s...", l.Result.Key, v, source[max(0, i-40):min(len(source), i+40)])
		}
	}
	if looked < 100 {
		t.Errorf("only %d results were looked for", looked)
	}
}

func goSource(t *testing.T, root string) string {
	t.Helper()
	var all strings.Builder
	err := filepath.WalkDir(root, func(p string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		if d.IsDir() && strings.HasPrefix(d.Name(), ".") && p != root {
			return fs.SkipDir
		}
		if d.IsDir() || !strings.HasSuffix(p, ".go") || strings.HasSuffix(p, "_test.go") {
			return nil
		}
		data, err := os.ReadFile(p)
		all.Write(data)
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	return all.String()
}

// A source that is wrong leaves the site that stands alone.
func TestABrokenSourceWritesNothing(t *testing.T) {
	dir, to := t.TempDir(), filepath.Join(t.TempDir(), "out")
	write(t, dir, lab)
	before := publish(t, dir, to, Options{})
	write(t, dir, map[string]string{"first.md": strings.Replace(lab["first.md"], "R <=> A", "R <=> Z", 1)})
	src, err := Locate(dir)
	if err != nil {
		t.Fatal(err)
	}
	out, err := Publish(context.Background(), src, to, Options{})
	if err != nil || !out.Broken {
		t.Fatalf("broken %v, error %v", out.Broken, err)
	}
	if got := changed(before, readAll(t, to)); len(got) > 0 {
		t.Errorf("changed %v", got)
	}
}

func TestRelative(t *testing.T) {
	for _, tt := range []struct{ from, to, want string }{
		{"a.html", "b.html", "b.html"},
		{"a.html", "x/b.html", "x/b.html"},
		{"x/a.html", "b.html", "../b.html"},
		{"x/a.html", "x/b.html", "b.html"},
		{"x/y/a.html", "x/z/b.html", "../z/b.html"},
		{"x/a.html", "x/a/results.csv", "a/results.csv"},
		{"a.html", "50 % done?.html", "50%20%25%20done%3F.html"},
		{"a.html", "a:b.html", "./a:b.html"},
	} {
		if got := relative(tt.from, tt.to); got != tt.want {
			t.Errorf("from %s to %s: %s, want %s", tt.from, tt.to, got, tt.want)
		}
	}
}

// What a note says of itself stands on its page, and in the list of notes.
func TestWhatANoteSaysOfItself(t *testing.T) {
	dir, to := t.TempDir(), filepath.Join(t.TempDir(), "out")
	write(t, dir, lab)
	write(t, dir, map[string]string{"apart.md": lab["apart.md"] + "\n```toml note\ndate = \"2033-04-05\"\nauthors = [\"bench nine\"]\ntags = [\"odd tag\"]\nstatus = \"superseded\"\nsummary = \"All of it in brief.\"\n```\n"})
	site := publish(t, dir, to, Options{})
	for _, page := range []string{"apart.html", "index.html"} {
		for _, want := range []string{"2033-04-05", "odd tag", "superseded", "All of it in brief."} {
			if !strings.Contains(site[page], want) {
				t.Errorf("%s does not say %q", page, want)
			}
		}
	}
	if !strings.Contains(site["apart.html"], "bench nine") {
		t.Error("the page does not name its authors")
	}
}

// What a page shows of a block behind another may change without a change of
// its numbers: the unit it is printed in, or which energies have an error. The
// cache must not hide that.
func TestCachedIsFresh(t *testing.T) {
	note := "# N\n\n```toml mechanism\nid = \"m\"\ntemperature = \"25 °C\"\nenergies = \"kcal/mol\"\n[species]\nR = { G = 0 }\nA = { G = \"-3 kcal/mol\" }\n[step]\nTS = { reaction = \"R <=> A\", G = \"20 kcal/mol\" }\n" +
		"TT = { reaction = \"R <=> A\", G = \"25 kcal/mol\" }\n```\n\n```toml claims\n[[claim]]\nsays = \"Low enough.\"\nreading = \"m/barrier/TS\"\nat-most = \"100 kJ/mol\"\n```\n"
	for _, edit := range [][2]string{{`energies = "kcal/mol"`, `energies = "kJ/mol"`}, {`G = "25 kcal/mol"`, `G = "25 ± 1 kcal/mol"`}} {
		t.Setenv("SADDLEBOOK_CACHE", t.TempDir())
		dir, to := t.TempDir(), filepath.Join(t.TempDir(), "out")
		write(t, dir, map[string]string{"saddlebook.toml": "title = \"T\"\n", "n.md": note})
		publish(t, dir, to, Options{})
		write(t, dir, map[string]string{"n.md": strings.Replace(note, edit[0], edit[1], 1)})
		cached := publish(t, dir, to, Options{})
		fresh := publish(t, dir, to, Options{Fresh: true})
		if got := changed(cached, fresh); len(got) > 0 {
			t.Errorf("%s: %v differ between the cache and a fresh publish", edit[1], got)
		}
	}
}

// Audit finds what publish would trip over.
func TestAuditFindsWhatPublishWould(t *testing.T) {
	for _, tt := range []struct {
		name string
		with map[string]string
		want string
	}{
		{"a note in the place of a page", map[string]string{"claims.md": "# Claims\n"}, `the note would be published as "claims.html", which is the page of all claims`},
		{"a file in the place of results", map[string]string{"apart.md": "# Apart\n\n[r](first/results.csv)\n", "first/results.csv": "x\n"}, `"first/results.csv", which is a file of note first.md`},
		{"a template that asks for too much", map[string]string{"saddlebook.toml": "title = \"T\"\n[theme]\nreplace = { \"claims.html.tmpl\" = \"c.tmpl\" }\n", "c.tmpl": `{{define "title"}}{{end}}{{define "main"}}{{.Nothing}}{{end}}`}, "the theme cannot be used"},
		{"a second note block", map[string]string{"apart.md": "# Apart\n\n```toml note\nstatus = \"draft\"\n```\n\n```toml note\nstatus = \"in use\"\n```\n"}, "a note has one note block, and the first stands in line 3"},
		{"a temperature twice", map[string]string{"first.md": strings.Replace(lab["first.md"], "[species]", "at = [\"25 °C\", \"298.15 K\"]\n[species]", 1)}, "is the same temperature as"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			dir := t.TempDir()
			write(t, dir, lab)
			write(t, dir, tt.with)
			src, err := Locate(dir)
			if err != nil {
				t.Fatal(err)
			}
			a, err := Audit(context.Background(), src, Options{})
			if err != nil || !a.Broken {
				t.Fatalf("broken %v, error %v", a.Broken, err)
			}
			var b strings.Builder
			a.Faults.Write(&b)
			if !strings.Contains(b.String(), tt.want) {
				t.Errorf("got\n%swant %q", b.String(), tt.want)
			}
		})
	}
}
