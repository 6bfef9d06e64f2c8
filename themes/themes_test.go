package themes

import (
	"bytes"
	"encoding/xml"
	"errors"
	"flag"
	"fmt"
	"io"
	"math"
	"os"
	"regexp"
	"slices"
	"strings"
	"testing"
)

var update = flag.Bool("update", false, "rewrite the golden files; read the change before it is kept")

// sample is one page of each kind, whose every text is say("...").
type sample struct {
	page     Page
	contents Contents
	claims   Claims
	colophon Colophon
}

func newSample(say func(string) string) sample {
	site := Site{Title: say("Bench notebook"), Summary: say("Invented notes."), Authors: []string{say("bench 3")}, Language: "en", Root: "../", Program: say("Saddlebook, development version")}
	top := site
	top.Root = ""
	findings := []Finding{
		{Says: say("Cold keeps A."), Standing: "holds", Value: say("94:6"), Bound: say("at least 85:15"), Probability: say("90 %"), Asked: say("80 %"), Href: "#claim-1"},
		{Says: say("It holds for all we know."), Standing: "holds", Value: say("94:6"), Bound: say("at least 85:15"), Href: "#claim-2"},
		{Says: say("It stays put."), Standing: "fails", Value: say("29 d"), Bound: say("at least 90 d"), Probability: say("23 %"), Href: "#claim-3"},
		{Says: say("It may turn."), Standing: "undecided", Value: say("24 s"), Bound: say("at most 1 h"), Href: "#claim-4"},
	}
	return sample{
		page: Page{Site: site, Title: say("Which adduct?"), Status: say("draft"), Date: say("2031-04-02"), Summary: say("Cold, the one; warm, the other."),
			Authors: []string{say("bench 3"), say("analytics")}, Tags: []string{say("addition"), say("control")}, Findings: findings,
			Contents: []Heading{{2, "fast-one", say("Fast one")}, {3, "stable-one", say("Stable one")}},
			Heading:  `<h1 id="which-adduct">Which adduct?</h1>`, Body: `<p>Thiol 7 adds at either end.</p>`,
			Downloads: []Link{{"addition/results.csv", say("results.csv")}}, MentionedIn: []Link{{"../other.html", say("Other")}}, InputHash: say("81d40c84262f1d5e")},
		contents: Contents{Site: top, Claims: Tally{2, 1, 1}, Folders: []Folder{
			{"", []Entry{{Href: "a.html", Title: say("A"), Summary: say("First."), Status: say("in use"), Date: say("2031-04-02"), Tags: []string{say("addition")}, Claims: Tally{2, 0, 1}}}},
			{say("shelf"), []Entry{{Href: "shelf/b.html", Title: say("B"), Claims: Tally{0, 1, 0}}, {Href: "shelf/c.html", Title: say("C")}}}}},
		claims:   Claims{Site: top, Tally: Tally{2, 1, 1}, Notes: []NoteClaims{{"a.html", say("A"), findings}}},
		colophon: Colophon{Site: top, Revision: say("4f2c1d"), Methods: []string{say("Eyring equation.")}, Inputs: []Input{{say("a.md"), say("81d40c84262f1d5e")}}},
	}
}

func plain(s string) string { return s }

// write writes the pages of a sample by name.
func (s sample) write(t *Theme) (map[string]string, error) {
	out := map[string]string{}
	var errs []error
	for name, write := range map[string]func(io.Writer) error{
		"page":     func(w io.Writer) error { return t.Page(w, s.page) },
		"contents": func(w io.Writer) error { return t.Contents(w, s.contents) },
		"claims":   func(w io.Writer) error { return t.Claims(w, s.claims) },
		"colophon": func(w io.Writer) error { return t.Colophon(w, s.colophon) },
	} {
		var b bytes.Buffer
		errs = append(errs, write(&b))
		out[name] = b.String()
	}
	return out, errors.Join(errs...)
}

func open(t *testing.T, replace map[string]string) *Theme {
	t.Helper()
	theme, err := Open(Default, replace)
	if err != nil {
		t.Fatal(err)
	}
	return theme
}

func TestGolden(t *testing.T) {
	pages, err := newSample(plain).write(open(t, nil))
	if err != nil {
		t.Fatal(err)
	}
	for name, got := range pages {
		file := "testdata/" + name + ".html.golden"
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
			t.Errorf("%s differs from %s; rewrite it with -update and read the change\n%s", name, file, got)
		}
	}
}

// sound reads a page as strictly as XML and holds it to the rules of all pages:
// no script, no style inside, no address outside, one heading of level 1, levels
// in order, unique ids, and an element behind each link within the page.
func sound(t *testing.T, page string) {
	t.Helper()
	d := xml.NewDecoder(strings.NewReader(page))
	d.Entity = xml.HTMLEntity
	level, ids, within := 0, map[string]bool{}, []string(nil)
	tags := map[string]int{}
	for {
		token, err := d.Token()
		if err == io.EOF {
			break
		}
		if err != nil {
			t.Errorf("not well formed: %v", err)
			return
		}
		e, ok := token.(xml.StartElement)
		if !ok {
			continue
		}
		name := e.Name.Local
		tags[name]++
		if slices.Contains([]string{"script", "style", "base", "iframe", "object", "embed", "form"}, name) {
			t.Errorf("holds <%s>", name)
		}
		if len(name) == 2 && name[0] == 'h' && name[1] >= '1' && name[1] <= '6' {
			next := int(name[1] - '0')
			if next > level+1 {
				t.Errorf("a heading of level %d follows one of level %d", next, level)
			}
			level = next
		}
		for _, a := range e.Attr {
			switch {
			case a.Name.Local == "id" && ids[a.Value]:
				t.Errorf("the id %q is there twice", a.Value)
			case a.Name.Local == "id":
				ids[a.Value] = true
			case a.Name.Local == "style", strings.HasPrefix(a.Name.Local, "on"):
				t.Errorf("<%s> has %s=%q", name, a.Name.Local, a.Value)
			case a.Name.Local == "href" && strings.HasPrefix(a.Value, "#"):
				within = append(within, a.Value[1:])
			case a.Name.Local == "href" || a.Name.Local == "src":
				if regexp.MustCompile(`^([a-zA-Z][a-zA-Z0-9+.-]*:|/)`).MatchString(a.Value) {
					t.Errorf("<%s> leads to %q", name, a.Value)
				}
			}
		}
	}
	for _, one := range []string{"h1", "main", "title", "footer"} {
		if tags[one] != 1 {
			t.Errorf("%d of <%s>, want 1", tags[one], one)
		}
	}
	for _, id := range within {
		if !ids[id] && !strings.HasPrefix(id, "claim-") && !strings.HasSuffix(id, "-one") { // these stand in the body of a real page
			t.Errorf("nothing on the page has the id %q", id)
		}
	}
	const policy = `content="default-src &#39;none&#39;; style-src &#39;self&#39;;`
	if !strings.Contains(page, policy) && !strings.Contains(page, strings.ReplaceAll(policy, "&#39;", "'")) {
		t.Error("the page has no content security policy")
	}
}

func TestPagesAreSound(t *testing.T) {
	site := Site{Title: "T", Language: "de"}
	bare := sample{page: Page{Site: site, Title: "T"}, contents: Contents{Site: site}, claims: Claims{Site: site}, colophon: Colophon{Site: site}}
	untitled := newSample(plain)
	untitled.page.Heading, untitled.page.Body = "", "<p>No heading.</p>"
	late := newSample(plain)
	late.page.Findings = nil // their heading would stand before the author's
	late.page.Heading, late.page.Body = "", `<p>First a word.</p><h1 id="x">Then the heading</h1>`
	front := newSample(plain)
	front.contents.Front = `<h1 id="front">Front</h1><p>Words.</p><h2 id="page-main">Main</h2>`
	for name, s := range map[string]sample{"full": newSample(plain), "bare": bare, "untitled": untitled, "late heading": late, "front": front} {
		pages, err := s.write(open(t, nil))
		if err != nil {
			t.Fatal(err)
		}
		for page, text := range pages {
			t.Run(name+"/"+page, func(t *testing.T) { sound(t, text) })
		}
	}
}

// A text stays a text, whatever it holds.
func FuzzText(f *testing.F) {
	for _, s := range []string{"", `</p><script>alert(1)</script>`, `" onclick="x`, "' x='", "&amp;", "<!--", "]]>", "{{.Site}}", "javascript:x"} {
		f.Add(s)
	}
	theme, err := Open(Default, nil)
	if err != nil {
		f.Fatal(err)
	}
	count := func(page string) int { return strings.Count(page, "<") }
	base, err := newSample(func(string) string { return "a  z" }).write(theme)
	if err != nil {
		f.Fatal(err)
	}
	f.Fuzz(func(t *testing.T, s string) {
		s = strings.Map(func(r rune) rune { // what content refuses to read
			if r < ' ' || r == 0xFFFE || r == 0xFFFF || r == 0xFFFD {
				return -1
			}
			return r
		}, strings.ToValidUTF8(s, ""))
		pages, err := newSample(func(string) string { return "a " + s + " z" }).write(theme)
		if err != nil {
			t.Fatal(err)
		}
		for name, page := range pages {
			sound(t, page)
			if got, want := count(page), count(base[name]); got != want {
				t.Errorf("%s: %d tags, want %d", name, got, want)
			}
		}
	})
}

func TestStanding(t *testing.T) {
	pages, err := newSample(plain).write(open(t, nil))
	if err != nil {
		t.Fatal(err)
	}
	for _, want := range []string{
		`<li class="claim holds odds">`, // only this one may be green
		`<li class="claim holds">`,
		`<li class="claim fails odds">`,
		`94:6, wanted at least 85:15; probability 90 %, asked 80 %`,
		`94:6, wanted at least 85:15; probability not known`,
		`</svg> undecided</p>`,
	} {
		for _, name := range []string{"page", "claims"} {
			if !strings.Contains(pages[name], want) {
				t.Errorf("%s lacks %q", name, want)
			}
		}
	}
	for _, want := range []string{"</svg> 2 hold</span>", "</svg> 1 fails</span>", "</svg> 1 undecided</span>", "no claims"} {
		if !strings.Contains(pages["contents"], want) {
			t.Errorf("contents lacks %q", want)
		}
	}
}

func TestReplace(t *testing.T) {
	theme := open(t, map[string]string{
		"claims.html.tmpl": `{{define "title"}}Mine{{end}}{{define "main"}}<h1>Mine: {{.Tally.Holds}}</h1>{{end}}`,
		"style.css":        "body { color: black; }",
	})
	pages, err := newSample(plain).write(theme)
	if err != nil {
		t.Fatal(err)
	}
	if !strings.Contains(pages["claims"], "<h1>Mine: 2</h1>") || !strings.Contains(pages["claims"], "<title>Mine</title>") {
		t.Errorf("the template was not replaced:\n%s", pages["claims"])
	}
	if !strings.Contains(pages["page"], "What it concludes") {
		t.Error("the page of a note changed too")
	}
	if got := theme.Stylesheet(".figure { fill: none; }"); got != "body { color: black; }\n.figure { fill: none; }" {
		t.Errorf("style %q", got)
	}
}

func TestOpenRefuses(t *testing.T) {
	for _, tt := range []struct {
		name, theme string
		replace     map[string]string
		unknown     bool
		want        string
	}{
		{"theme", "vellum", nil, true, `theme "vellum" is not known; write one of fieldbook`},
		{"file", Default, map[string]string{"z.css": "", "page.html": ""}, true, `a file "page.html" of the theme is not known; replace one of frame.html.tmpl, page.html.tmpl,`},
		{"syntax", Default, map[string]string{"page.html.tmpl": "{{define \"main\"}}\n{{if}}{{end}}"}, false, "page.html.tmpl:2: missing value for if"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			_, err := Open(tt.theme, tt.replace)
			if err == nil || !strings.Contains(err.Error(), tt.want) {
				t.Fatalf("error %v, want %q", err, tt.want)
			}
			if errors.Is(err, ErrUnknown) != tt.unknown {
				t.Errorf("ErrUnknown %v, want %v", !tt.unknown, tt.unknown)
			}
		})
	}
}

// A template that asks for what the contract does not hold fails, and says where.
func TestMissingFieldFails(t *testing.T) {
	for _, page := range pages {
		t.Run(page, func(t *testing.T) {
			_, err := newSample(plain).write(open(t, map[string]string{page: "{{define \"title\"}}{{end}}{{define \"main\"}}\n{{.Weather}}{{end}}"}))
			if err == nil || !strings.Contains(err.Error(), page+":2:") || !strings.Contains(err.Error(), "Weather") {
				t.Errorf("error %v, want one that names %s:2 and Weather", err, page)
			}
		})
	}
	t.Run("no main", func(t *testing.T) {
		_, err := newSample(plain).write(open(t, map[string]string{"page.html.tmpl": `{{define "title"}}T{{end}}`}))
		if err == nil || !strings.Contains(err.Error(), "main") {
			t.Errorf("error %v, want one that names main", err)
		}
	})
}

func TestNotebookLanguage(t *testing.T) {
	for language, want := range map[string]int{"en": 1, "en-GB": 1, "de": 4, "enm": 4} {
		s := newSample(plain)
		s.page.Site.Language = language
		var b bytes.Buffer
		if err := open(t, nil).Page(&b, s.page); err != nil {
			t.Fatal(err)
		}
		if !strings.Contains(b.String(), fmt.Sprintf("<html lang=%q>", language)) {
			t.Errorf("%s is not the language of the page", language)
		}
		if got := strings.Count(b.String(), " lang=\""); got != want {
			t.Errorf("%s: %d elements name their language, want %d", language, got, want)
		}
	}
}

var property = regexp.MustCompile(`--([a-z-]+): (#[0-9a-f]{3,6});`)

// palettes are the colours for light, dark and print, by name.
func palettes(t *testing.T, css string) map[string]map[string]string {
	t.Helper()
	dark := strings.Index(css, "@media screen and (prefers-color-scheme: dark)")
	end := dark + strings.Index(css[dark:], "*, ::before")
	print := strings.Index(css, "@media print")
	if dark < 0 || end < dark || print < end {
		t.Fatal("the style has lost its order: light, dark, rules, print")
	}
	out := map[string]map[string]string{}
	for name, part := range map[string]string{"light": css[:dark], "dark": css[dark:end], "print": css[print:]} {
		out[name] = map[string]string{}
		for _, m := range property.FindAllStringSubmatch(part, -1) {
			out[name][m[1]] = m[2]
		}
	}
	return out
}

// WCAG 2.2, 1.4.3: text against its ground has a contrast of 4.5:1 or more.
func TestContrast(t *testing.T) {
	for name, colours := range palettes(t, open(t, nil).Stylesheet("")) {
		for _, ground := range []string{"paper", "wash"} {
			for _, text := range []string{"ink", "soft", "link", "good", "bad", "open"} {
				got := contrast(t, colours[text], colours[ground])
				if !(got >= 4.5) {
					t.Errorf("%s: --%s on --%s has a contrast of %.2f", name, text, ground, got)
				}
			}
		}
	}
	// the formula, against the two ends that WCAG states
	if got := contrast(t, "#000", "#ffffff"); math.Abs(got-21) > 1e-9 {
		t.Errorf("black on white: %v, want 21", got)
	}
}

// contrast is that of WCAG 2.2, from the relative luminance of sRGB colours.
func contrast(t *testing.T, a, b string) float64 {
	light := func(c string) float64 {
		if len(c) == 4 {
			c = "#" + strings.Repeat(c[1:2], 2) + strings.Repeat(c[2:3], 2) + strings.Repeat(c[3:4], 2)
		}
		var v [3]int
		if _, err := fmt.Sscanf(c, "#%02x%02x%02x", &v[0], &v[1], &v[2]); err != nil {
			t.Fatalf("colour %q: %v", c, err)
		}
		sum := 0.0
		for i, weight := range []float64{0.2126, 0.7152, 0.0722} {
			x := float64(v[i]) / 255
			if x <= 0.04045 {
				x /= 12.92
			} else {
				x = math.Pow((x+0.055)/1.055, 2.4)
			}
			sum += weight * x
		}
		return sum
	}
	x, y := light(a), light(b)
	return (math.Max(x, y) + 0.05) / (math.Min(x, y) + 0.05)
}

// The style loads nothing and knows the classes that the pages use.
func TestStyle(t *testing.T) {
	css := open(t, nil).Stylesheet("")
	bare := regexp.MustCompile(`(?s)/\*.*?\*/`).ReplaceAllString(css, "")
	if strings.Contains(bare, "url(") || strings.Contains(bare, "@import") || strings.Contains(bare, "@font-face") {
		t.Error("the style loads something")
	}
	if a, b := strings.Count(bare, "{"), strings.Count(bare, "}"); a != b {
		t.Errorf("%d braces open, %d close", a, b)
	}
	if got := regexp.MustCompile(`@media \(prefers-color-scheme: dark\)`).FindString(bare); got != "" {
		t.Error("dark is not for screens alone: it would print")
	}
	used := map[string]bool{}
	for _, m := range regexp.MustCompile(`var\((--[a-z-]+)\)`).FindAllStringSubmatch(bare, -1) {
		used[m[1]] = true
	}
	for name := range used {
		if !strings.Contains(bare, name+": ") {
			t.Errorf("%s is used and never set", name)
		}
	}
	pages, err := newSample(plain).write(open(t, nil))
	if err != nil {
		t.Fatal(err)
	}
	unstyled := []string{"holds", "note", "notebook", "list", "downloads", "all", "methods", "text", "level-2"}
	for name, page := range pages {
		for _, m := range regexp.MustCompile(`class="([^"]+)"`).FindAllStringSubmatch(page, -1) {
			for _, class := range strings.Fields(m[1]) {
				if !strings.Contains(bare, "."+class) && !slices.Contains(unstyled, class) {
					t.Errorf("%s: no rule for the class %q", name, class)
				}
			}
		}
	}
}

// A replaced template is tried before a site is begun.
func TestTry(t *testing.T) {
	good, err := Open(Default, nil)
	if err != nil {
		t.Fatal(err)
	}
	if err := good.Try(); err != nil {
		t.Errorf("the theme itself: %v", err)
	}
	bad, err := Open(Default, map[string]string{"claims.html.tmpl": `{{define "title"}}{{end}}{{define "main"}}{{range .Notes}}{{.Nothing}}{{end}}{{end}}`})
	if err != nil {
		t.Fatal(err)
	}
	if err := bad.Try(); err == nil {
		t.Error("a template that asks for a field that is not there passes")
	}
}
