package render_test

import (
	"path/filepath"
	"strings"
	"testing"
)

// testFaults opens a page that has every fault the checks look for: a check
// that finds nothing here would find nothing anywhere.
func (b *browser) testFaults(t *testing.T) {
	site, err := filepath.Abs("testdata/browser")
	if err != nil {
		t.Fatal(err)
	}
	if site, err = filepath.EvalSymlinks(site); err != nil {
		t.Fatal(err)
	}
	for _, tt := range []struct {
		view view
		want []string
	}{
		{view{Width: 1280, Paper: "#fbfaf6", Least: 11}, []string{
			"the page stands on #ffffff, and the style sheet calls #fbfaf6 paper",
			"missing.css was not loaded",
			"missing.png was not loaded",
			`the console has warning: "a word"`,
			"an exception: Uncaught Error: a fault",
			"Applying inline style violates",
			"Executing inline script violates",
			"the page asks for file:",
			"the page is 15", // px wide
			` with all details open: th "A", pre "a line that is so long`,
			`of "Grey on white." in font: #999999 on #ffffff`,
			`of "dark on dark" in text: #000000 on #333333`,
			`"dark on dark" in the figure svg is 10.0 px high`,
			"the picture missing.png is not drawn",
			"img has the size 0 by 20 px",
			"the page has a script",
			"p has a script in onclick",
			"does not say its language",
			"the page has no title",
			"the page has 2 headings h1",
			`the heading "A level is skipped" is h3 behind h1`,
			"table 1 (A) has no caption",
			"table 1 (A) has head cells without scope",
			"table 2 (Without headsB) has no head cells",
			"svg has no title",
			`"pattern" stands on a pattern, on which contrast is not known`,
			"the picture missing.png has no alternative text",
			`the id "twice" stands twice`,
			`aria-labelledby of svg names "gone", which is no id`,
			`fill of rect uses "lost", which is no id`,
		}},
		{view{Width: 360, Paper: "white"}, []string{"the page is 15"}},
		{view{Width: 794, Paper: "black", Print: true}, []string{
			"the page stands on #ffffff, and the style sheet calls #000000 paper",
			`the link "Contents" of the masthead is printed`,
			`of "Grey on white." in font`,
		}},
		{view{Width: 1280, Paper: "no colour"}, []string{`the paper colour "no colour" of the style sheet cannot be read`}},
	} {
		seen, err := b.look(site, "bad.html", tt.view)
		if err != nil {
			t.Fatal(err)
		}
		all := strings.Join(seen.Faults, "\n")
		for _, w := range tt.want {
			if !strings.Contains(all, w) {
				t.Errorf("%s: nothing says %q; it says\n%s", tt.view, w, all)
			}
		}
		if !tt.view.Print && tt.view.Least > 0 {
			ids := map[string]bool{}
			for _, id := range seen.IDs {
				ids[id] = true
			}
			dead := strings.Join(deadLinks(site, seen.Links, map[string]map[string]bool{"bad.html": ids}), "\n")
			for _, w := range []string{`"nowhere.html" leads to no file`, `"#nowhere" leads to no id`, `"../browser" leads to a folder`,
				`"../../browser_test.go" leads out of the site`, `"about:blank" has the scheme "about"`, `"missing.css" leads to no file`} {
				if !strings.Contains(dead, w) {
					t.Errorf("no dead link %q among\n%s", w, dead)
				}
			}
		}
	}
}

func TestBrowserPaperColours(t *testing.T) {
	light, dark, err := paperColours(`/* --paper: red; } */ :root { --ink: #000; --paper: #fff } @media print { :root { --paper: #eee; } }
@media screen and (prefers-color-scheme: dark) { :root { color-scheme: dark; --paper: #111; } }`)
	if err != nil || light != "#fff" || dark != "#111" {
		t.Errorf("%q, %q, %v", light, dark, err)
	}
	for _, css := range []string{"", ":root { --paper: #fff; }", ":root { --paper: #fff; } @media (prefers-color-scheme: dark) { :root { --paper: #fff; } }"} {
		if light, dark, err := paperColours(css); err == nil {
			t.Errorf("%q passes as %q, %q", css, light, dark)
		}
	}
}
