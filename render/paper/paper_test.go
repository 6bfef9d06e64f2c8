package paper

import (
	"encoding/xml"
	"flag"
	"fmt"
	"io"
	"os"
	"regexp"
	"slices"
	"strings"
	"testing"

	"saddlebook/diagram"
	"saddlebook/diagram/ink"
	"saddlebook/diagram/lettering"
)

var update = flag.Bool("update", false, "rewrite the golden file; read the change before it is kept")

// full is a sheet with every part, whose every text is say("...").
func full(say func(string) string) *Sheet {
	value := Value{Text: say("18.1 kcal/mol"), Bare: say("18.1"), Widest: say("17.0 to 19.2"),
		Intervals: []Interval{{say("as stated"), say("17.0 to 19.2")}, {say("strongly shared"), say("17.5 to 18.7")}}}
	key := say("barrier/TS16@-20 °C")
	name := lettering.Runs(say("TS16"))
	s := New(Block{ID: say("thiol"), Kind: say("mechanism"), Nth: 1, Text: say("id = \"thiol\"\n[species]\n"), File: say("addition.md"), Line: 15},
		func(k string) (Value, bool) { return value, k == key })
	s.Words(say("What the steps of H2O do."))
	s.Table(Table{
		Caption: say("Steps at 25 °C"),
		Columns: []Column{{Head: say("Step")}, {Head: say("ΔG‡"), Unit: say("kcal/mol"), Number: true}, {Head: say("kinetic"), Number: true},
			{Head: say("at rest"), Number: true}, {Head: say("χ"), Number: true}, {Head: say("Remark")}},
		Rows:  [][]Cell{{Text(say("TS16")), s.Bare(key), {Text: say("94 %"), Strong: true}, Text(say("–")), {Text: say("0.45"), Beside: say("central")}, {Text: say("R + T"), Flags: []string{say("raised")}, Strong: true}}},
		Notes: []string{say("Energies at 1 M.")},
	})
	s.Figure(Figure{
		Scene: diagram.Scene{ID: say("two-ends"), Width: 10 + lettering.Width(name, 12), Height: 40, Title: say("Two ends"), Desc: say("One path."),
			Marks: []diagram.Mark{diagram.Words{Role: "label", X: 5, Y: 20, Size: 12, Runs: name}}},
		Caption: say("One dienone, two ends"),
		Numbers: Table{Caption: say("Levels"), Columns: []Column{{Head: say("State")}, {Head: say("ΔG"), Number: true}}, Rows: [][]Cell{{Text(say("TS16")), s.Value(key)}}},
	})
	s.Claims([]ClaimRow{
		{Says: say("Cold keeps A."), Reading: key, Value: say("94:6"), Bound: say("at least 85:15"), Margin: say("factor 3.0"), Probability: say("90 %"), Asked: say("80 %"), Standing: "holds", Why: say("errors as stated"), Anchor: say("claim-1")},
		{Says: say("It holds for all we know."), Reading: key, Value: say("94:6"), Bound: say("at least 85:15"), Standing: "holds", Anchor: say("claim-2")},
		{Says: say("It stays put."), Reading: key, Value: say("29 d"), Bound: say("at least 90 d"), Standing: "fails", Anchor: say("claim-3")},
		{Says: say("It may turn."), Reading: key, Value: say("24 s"), Bound: say("at most 1 h"), Standing: "undecided", Anchor: say("claim-4")},
	})
	s.Caution(say("The mixture warms."))
	s.Method(say("Eyring equation."))
	s.Assumption(say("Transmission coefficients are 1."))
	s.Intervals(key)
	return s
}

func plain(s string) string { return s }

func TestGolden(t *testing.T) {
	const file = "testdata/sheet.html.golden"
	got, err := full(plain).HTML()
	if err != nil {
		t.Fatal(err)
	}
	if *update {
		if err := os.WriteFile(file, []byte(got), 0o666); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	if got != string(want) {
		t.Errorf("the sheet differs from %s; rewrite it with -update and read the change\n%s", file, got)
	}
}

// tag is one start tag with its attributes.
type tag struct {
	name  string
	attrs []xml.Attr
}

// parse reads HTML of ours as strictly as XML.
func parse(text string) (tags []tag, words string, err error) {
	d := xml.NewDecoder(strings.NewReader(text))
	var b strings.Builder
	for {
		token, err := d.Token()
		if err == io.EOF {
			return tags, b.String(), nil
		}
		if err != nil {
			return tags, b.String(), err
		}
		switch token := token.(type) {
		case xml.StartElement:
			tags = append(tags, tag{token.Name.Local, token.Attr})
		case xml.CharData:
			b.Write(token)
		case xml.Comment, xml.ProcInst, xml.Directive:
			return tags, b.String(), fmt.Errorf("holds %T", token)
		}
	}
}

// shape is the tags of a text without those that lettering may set.
func shape(tags []tag) string {
	var names []string
	for _, t := range tags {
		if !slices.Contains([]string{"sub", "sup", "i", "text", "tspan"}, t.name) {
			names = append(names, t.name)
		}
	}
	return strings.Join(names, " ")
}

var allowedAttrs = strings.Fields("class id href scope colspan rowspan data-key role tabindex aria-label aria-labelledby aria-hidden " +
	"viewBox xmlns space width height x y dy d cx cy r font-size textLength lengthAdjust text-anchor")

// Whatever a text holds, it stays a text: the same tags stand around it, and no
// attribute is added.
func FuzzAnyText(f *testing.F) {
	for _, s := range []string{"", "H2O", `</section><script>alert(1)</script>`, `" onload="x`, "' x='", "&amp;&#60;b&#62;", "]]>", "<!-- ", "a\x00b\x1b\ufffe", "\xff\xfe",
		"\u202eright to left", "CO2^2-", "a\r\nb\rc", "javascript:alert(1)", "k_obs‡", strings.Repeat("Al2(SO4)3·", 40)} {
		f.Add(s)
	}
	with := func(s string) (string, error) {
		n := 0
		return full(func(string) string { n++; return fmt.Sprintf("a%d %s z", n, s) }).HTML()
	}
	base, err := with("")
	if err != nil {
		f.Fatal(err)
	}
	tags, _, err := parse(base)
	if err != nil {
		f.Fatal(err)
	}
	want := shape(tags)
	f.Fuzz(func(t *testing.T, s string) {
		got, err := with(s)
		if err != nil {
			t.Fatal(err)
		}
		tags, words, err := parse(got)
		if err != nil {
			t.Fatalf("not well formed: %v\n%s", err, got)
		}
		if g := shape(tags); g != want {
			t.Errorf("the text changed the tags\ngot  %s\nwant %s", g, want)
		}
		for _, tag := range tags {
			for _, a := range tag.attrs {
				if !slices.Contains(allowedAttrs, a.Name.Local) {
					t.Errorf("<%s> has the attribute %q", tag.name, a.Name.Local)
				}
				if a.Name.Local == "href" && !strings.HasPrefix(a.Value, "#") {
					t.Errorf("a link leads to %q", a.Value)
				}
				if a.Name.Local == "id" && strings.ContainsAny(a.Value, " \t\n") {
					t.Errorf("the id %q holds a space", a.Value)
				}
			}
		}
		if source := strings.ReplaceAll(legible(s), "\r", "\n"); !strings.Contains(words, source) {
			t.Errorf("the source of the block is not on the page: %q", source)
		}
	})
}

func TestWhatCannotBeMade(t *testing.T) {
	cell := func(n int) []Cell { return make([]Cell, n) }
	for _, tt := range []struct {
		name string
		fill func(*Sheet)
		want string
	}{
		{"a result that is not there", func(s *Sheet) { s.Table(Table{Columns: make([]Column, 1), Rows: [][]Cell{{s.Value("barrier/X")}}}) }, `block "thiol" shows "barrier/X", which it does not compute`},
		{"an interval that is not there", func(s *Sheet) { s.Words("Words."); s.Intervals("rate/X") }, `block "thiol" shows "rate/X", which it does not compute`},
		{"a short row", func(s *Sheet) {
			s.Table(Table{Caption: "Steps", Columns: make([]Column, 3), Rows: [][]Cell{cell(3), cell(2)}})
		}, `table "Steps": row 2 has 2 cells for 3 columns`},
		{"a long row", func(s *Sheet) {
			s.Table(Table{Caption: "Steps", Columns: make([]Column, 1), Rows: [][]Cell{cell(2)}})
		}, `table "Steps": row 1 has 2 cells for 1 columns`},
		{"no standing", func(s *Sheet) { s.Claims([]ClaimRow{{Says: "Yes.", Standing: "perhaps"}}) }, `claim "Yes." has the standing "perhaps"; it is holds, fails or undecided`},
		{"a scene outside its frame", func(s *Sheet) { s.Figure(Figure{Caption: "Fig", Scene: diagram.Scene{ID: "x"}}) }, `figure "Fig": `},
	} {
		t.Run(tt.name, func(t *testing.T) {
			s := New(Block{ID: "thiol", Kind: "mechanism"}, func(string) (Value, bool) { return Value{}, false })
			tt.fill(s)
			_, err := s.HTML()
			if err == nil || !strings.Contains(err.Error(), tt.want) {
				t.Errorf("error %v, want %q", err, tt.want)
			}
		})
	}
}

// A claim that holds takes its colour from the class odds: never without its
// probability.
func TestHoldsIsPlainWithoutProbability(t *testing.T) {
	html, err := full(plain).HTML()
	if err != nil {
		t.Fatal(err)
	}
	for id, want := range map[string]string{"mechanism.1.claim-1": "claim holds odds", "mechanism.1.claim-2": "claim holds", "mechanism.1.claim-3": "claim fails"} {
		if !strings.Contains(html, fmt.Sprintf("<li class=%q id=%q>", want, id)) {
			t.Errorf("%s is not of class %q", id, want)
		}
	}
	if n := strings.Count(html, "probability not known"); n != 3 {
		t.Errorf("%d claims say that their probability is not known, want 3", n)
	}
}

func TestNothingToShow(t *testing.T) {
	s := New(Block{Kind: "note", Text: "date = 2031"}, nil)
	s.Method("unread")
	if html, err := s.HTML(); html != "" || err != nil {
		t.Errorf("got %q, %v", html, err)
	}
}

func TestAnchor(t *testing.T) {
	for _, tt := range []struct {
		b    Block
		want string
	}{
		{Block{ID: "thiol", Kind: "mechanism"}, "thiol"},
		{Block{ID: " two  words ", Kind: "mechanism"}, "two-words"},
		{Block{Kind: "claims"}, "claims"},
	} {
		if got := tt.b.Anchor(); got != tt.want {
			t.Errorf("%+v: %q, want %q", tt.b, got, tt.want)
		}
	}
}

// The style of the figures is for the classes of marks: no class of a page part
// may bear the name of one, nor may the style of the theme reach into figures.
func TestClassesAreNotThoseOfFigures(t *testing.T) {
	roles := map[string]bool{"label": true, "name": true} // drawn without a rule of their own
	for _, m := range regexp.MustCompile(`\.([a-z][a-z0-9-]*)`).FindAllStringSubmatch(ink.Style(), -1) {
		roles[m[1]] = m[1] != "figure"
	}
	html, err := full(plain).HTML()
	if err != nil {
		t.Fatal(err)
	}
	tags, _, err := parse(regexp.MustCompile(`(?s)<svg class="figure".*?</svg>`).ReplaceAllString(html, ""))
	if err != nil {
		t.Fatal(err)
	}
	for _, tag := range tags {
		for _, a := range tag.attrs {
			for _, c := range strings.Fields(a.Value) {
				if a.Name.Local == "class" && roles[c] {
					t.Errorf("<%s> has the class %q of a mark", tag.name, c)
				}
			}
		}
	}
	style, err := os.ReadFile("../../themes/fieldbook/style.css")
	if err != nil {
		t.Fatal(err)
	}
	bare := regexp.MustCompile(`(?s)/\*.*?\*/`).ReplaceAllString(string(style), "")
	for _, m := range regexp.MustCompile(`\.([a-z][a-z0-9-]*)[^{}]*\{`).FindAllStringSubmatch(bare, -1) {
		if roles[m[1]] {
			t.Errorf("the theme has a rule for .%s, a mark of figures", m[1])
		}
	}
}

// The parts keep their order, and what was said once is not said again.
func TestOrderAndOnce(t *testing.T) {
	s := New(Block{Kind: "claims"}, nil)
	s.Words("first part")
	s.Table(Table{Caption: "second part", Columns: []Column{{Head: "A"}}})
	s.Words("third part")
	s.Method("said once")
	s.Method("said once")
	html, err := s.HTML()
	if err != nil {
		t.Fatal(err)
	}
	last := -1
	for _, part := range []string{"<p>first part", "<caption>second part", "<p>third part", "said once"} {
		i := strings.Index(html, part)
		if i <= last {
			t.Errorf("%q stands at %d, what comes before it at %d", part, i, last)
		}
		last = i
	}
	if strings.Count(html, "said once") != 1 {
		t.Error("a method is listed twice")
	}
	if strings.Contains(html, " id=") {
		t.Errorf("a block without an id has an id on the page: %s", html)
	}
}
