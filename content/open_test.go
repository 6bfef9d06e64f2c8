package content

import (
	"fmt"
	"path"
	"slices"
	"strings"
	"testing"
	"testing/fstest"

	"saddlebook/content/fault"
	"saddlebook/content/schema"
)

// files makes a notebook in memory; saddlebook.toml is added if it is not given.
func files(pairs ...string) fstest.MapFS {
	m := fstest.MapFS{SettingsFile: {Data: []byte("title = \"Test\"\n")}}
	for i := 0; i+1 < len(pairs); i += 2 {
		m[pairs[i]] = &fstest.MapFile{Data: []byte(pairs[i+1])}
	}
	return m
}

func listed(l fault.List) string {
	var sb strings.Builder
	for _, d := range l {
		sb.WriteString(d.Error() + "\n")
	}
	return sb.String()
}

// page writes the pieces of a note with its holes in brackets.
func page(n *Note) string {
	var sb strings.Builder
	for _, p := range n.Pieces {
		switch {
		case p.Block != nil:
			fmt.Fprintf(&sb, "[%s]", p.Block.Label)
		case p.Reading != nil:
			fmt.Fprintf(&sb, "[%s in %q]", p.Reading.Key, p.Reading.In)
		default:
			sb.WriteString(p.HTML)
		}
	}
	return sb.String()
}

func TestOpen(t *testing.T) {
	nb, faults := Open(files(
		SettingsFile, "title = \"Enones\"\nsummary = \"S\"\nauthors = [\"A\", \"B\"]\nleave-out = [\"drafts\", \"plans/*.md\"]\n[theme]\nreplace = { \"style.css\" = \"our.css\" }\n",
		"our.css", "x",
		"b.md", "# Second\n\nSee [a](cold/a.md#addition) and [csv](cold/x.csv) and {= cold/a#addition/barrier/TSa in kJ/mol }.\n",
		"cold/a.md", "\ufeff# First *note*\n\n> ```toml mechanism\n> id = \"addition\"\n> ```\n\n![p](../p.png) [back](../b.md) [self](#first-note)\n",
		"cold/x.csv", "", "p.png", "", "unused.png", "",
		"drafts/x.md", "no title", "plans/x.md", "no title", "x/drafts/y.md", "no title",
		".git/x.md", "no title", "published/x.md", "no title", ".hidden.md", "no title",
		"index.md", "Welcome. [a](cold/a.md)\n",
	), "nb")
	if len(faults) > 0 {
		t.Fatal(listed(faults))
	}
	if len(nb.Notes) != 2 || nb.Notes[0].Path != "b.md" || nb.Notes[1].Name != "cold/a" || nb.Front == nil {
		t.Fatalf("notes %v, front %v", nb.Notes, nb.Front)
	}
	b, a := nb.Notes[0], nb.Notes[1]
	if a.Title != "First note" || nb.Note("cold/a") != a || nb.Front.Title != "Enones" {
		t.Errorf("titles %q, %q", a.Title, nb.Front.Title)
	}
	if want := "<h1 id=\"second\">Second</h1>\n<p>See <a href=\"cold/a.html#addition\">a</a> and <a href=\"cold/x.csv\">csv</a> and [cold/a#addition/barrier/TSa in \"kJ/mol\"].</p>\n"; page(b) != want {
		t.Errorf("got  %q\nwant %q", page(b), want)
	}
	if want := "<h1 id=\"first-note\">First <em>note</em></h1>\n<blockquote>\n[mechanism \"addition\"]</blockquote>\n<p><img src=\"../p.png\" alt=\"p\"> <a href=\"../b.html\">back</a> <a href=\"#first-note\">self</a></p>\n"; page(a) != want {
		t.Errorf("got  %q\nwant %q", page(a), want)
	}
	if got := strings.Join(nb.Assets, " "); got != "cold/x.csv p.png" {
		t.Errorf("assets %s", got)
	}
	if got := fmt.Sprint(b.Mentions, a.Mentions, nb.Front.Mentions); got != "[cold/a] [b] [cold/a]" {
		t.Errorf("mentions %s", got)
	}
	if at := a.Blocks[0].At; at != (fault.Place{File: "nb/cold/a.md", Line: 3, Col: 3}) {
		t.Errorf("block at %v", at)
	}
	if at := a.Blocks[0].Tree.Place("id"); at != (fault.Place{File: "nb/cold/a.md", Line: 4, Col: 3}) {
		t.Errorf("id at %v", at)
	}
	if at := b.Readings[0].At; at != (fault.Place{File: "nb/b.md", Line: 3, Col: 55}) {
		t.Errorf("reading at %v", at)
	}
	if at := b.Links[0].At; at != (fault.Place{File: "nb/b.md", Line: 3, Col: 9}) || b.Links[0].Path != "cold/a.md" || b.Links[0].Anchor != "addition" {
		t.Errorf("link %+v", b.Links[0])
	}
	s := nb.Settings
	if s.Title != "Enones" || s.Summary != "S" || s.Language != "en" || len(s.Authors) != 2 || s.Replace["style.css"] != "our.css" {
		t.Errorf("settings %+v", s)
	}
}

// Each case is one file of an otherwise good notebook and what Open says.
func TestFaults(t *testing.T) {
	for _, tt := range []struct{ name, file, source, want string }{
		{"not UTF-8", "n.md", "# é\n\nab\xe9c\n", "n.md:3:3: error: the byte 0xE9 is not UTF-8; save the file as UTF-8"},
		{"cut character", "n.md", "# a\n\xe2\x82", "n.md:2:1: error: the byte 0xE2 is not UTF-8; save the file as UTF-8"},
		{"surrogate", "n.md", "# a\n\xed\xa0\x80", "n.md:2:1: error: the byte 0xED is not UTF-8; save the file as UTF-8"},
		{"NUL", "n.md", "# a\nb\x00c and some more text", "n.md:2:2: error: the file holds a NUL character; delete it, or save the file as plain UTF-8 text"},
		{"UTF-16 with mark", "n.md", "\xff\xfe#\x00 \x00a\x00", "n.md:1:1: error: the file is UTF-16; save the file as UTF-8"},
		{"UTF-16 without mark", "n.md", "#\x00 \x00a\x00", "n.md:1:1: error: the file is UTF-16; save the file as UTF-8"},
		{"bare carriage return", "n.md", "# a\rb", "n.md:1:4: error: a line ends with a carriage return alone; save the file with LF or CRLF line ends"},
		{"no title", "n.md", "## a\n", "n.md:1:1: error: the note has no title; start it with a level-1 heading, as in # Addition to enone 3"},
		{"empty note", "n.md", "", "n.md:1:1: error: the note has no title; start it with a level-1 heading, as in # Addition to enone 3"},
		{"empty title", "n.md", "#\n", "n.md:1:1: error: the title of the note is empty; write it after the #, as in # Addition to enone 3"},
		{"raw HTML", "n.md", "# a\n\nb <i>c\n", "n.md:3:3: warning: the raw HTML \"<i>\" is left out; write Markdown, or \\< for the character itself"},
		{"unclosed", "n.md", "# a\n\n```toml run\nid = \"b\"\n", "n.md:3:1: error: run \"b\": the block is not closed; add ``` on a line of its own after its last line"},
		{"open block", "n.md", "# a\n\n```toml run\nid = \"a\"\n\nAnd more.\n", "n.md:3:1: error: run \"a\": the block is not closed; add ``` on a line of its own after its last line"},
		{"open block before another", "n.md", "# a\n\n~~~~toml run\nid = \"a\"\n\nMore:\n\n  ~~~toml run\nid = \"b\"\n~~~~\n", "n.md:3:1: error: run \"a\": the block is not closed before the fence in line 8; add ~~~~ on a line of its own after its last line"},
		{"empty block", "n.md", "# a\n\n> ```toml run\n> ```\n", "n.md:3:6: error: run: the block is empty; write its keys between the fences, or take the block away"},
		{"duplicate id", "n.md", "# a\n\n```toml run\nid = \"b\"\n```\n```toml map\nid = \"b\"\n```\n", "n.md:7:6: error: map \"b\", id: the id \"b\" is taken by the block run \"b\" at n.md:4:6; give each block of a note an id of its own"},
		{"key twice", "n.md", "# a\n\n- ```toml run\n  id = \"b\"\n  x = 1\n  x = 2\n  ```\n", "n.md:6:3: error: run \"b\", x: "},
		{"lost reading", "n.md", "# a\n\n| b |\n|---|\n| c | {= d } |\n", "n.md:5:7: error: the reading stands in a table cell beyond the columns of the heading row, so it is not shown; add a column to the heading row, or take the cell away"},
		{"broken link", "n.md", "# a\n\n[b](othr.md)\n", "n.md:3:5: error: the link \"othr.md\" names no file of the notebook; write other.md"},
		{"broken link from a folder", "f/n.md", "# a\n\n[b](../othr.md)\n", "f/n.md:3:5: error: the link \"../othr.md\" names no file of the notebook; write ../other.md"},
		{"broken image", "n.md", "# a\n\n![b](pictures/pot.png)\n", "n.md:3:6: error: the image \"pictures/pot.png\" names no file of the notebook; write pictures/plot.png"},
		{"broken anchor", "n.md", "# a\n\n[b](other.md#fist-part)\n", "n.md:3:5: error: the link \"other.md#fist-part\" names no heading and no block of other.md; write #first-part"},
		{"broken anchor of a block", "n.md", "# a\n\n[b](other.md#adition)\n", "n.md:3:5: error: the link \"other.md#adition\" names no heading and no block of other.md; write #addition"},
		{"broken own anchor", "n.md", "# a\n\n[b](#zzz)\n", "n.md:3:5: error: the link \"#zzz\" names no heading and no block of n.md; write one of #a"},
		{"leaves the notebook", "n.md", "# a\n\n[b](../x.md)\n", "n.md:3:5: error: the link \"../x.md\" leaves the notebook; move the file into the notebook"},
		{"absolute", "n.md", "# a\n\n[b](/x.md)\n", "n.md:3:5: error: the link \"/x.md\" leaves the notebook: it starts at the root of the disk or server; write a path relative to the note, such as other.md"},
		{"script", "n.md", "# a\n\n[b](javascript:x)\n", "n.md:3:5: error: the link \"javascript:x\" uses the scheme javascript:, which pages do not carry; write https:, mailto: or a path within the notebook"},
		{"folder", "n.md", "# a\n\n[b](pictures)\n", "n.md:3:5: error: the link \"pictures\" is a folder; link to a note in it"},
		{"folder with slash", "n.md", "# a\n\n[b](pictures/)\n", "n.md:3:5: error: the link \"pictures/\" is a folder; link to a note in it"},
		{"hidden", "n.md", "# a\n\n[b](.secret)\n", "n.md:3:5: error: the link \".secret\" names a hidden file, which is not published; link to a file whose name does not start with a dot"},
		{"note as image", "n.md", "# a\n\n![b](other.md)\n", "n.md:3:6: error: the image \"other.md\" is a note and no picture; leave the ! out to link to the note"},
		{"file with a trailing slash", "n.md", "# a\n\n![b](pictures/plot.png/)\n", "n.md:3:6: error: the image \"pictures/plot.png/\" names no file of the notebook; "},
		{"no alternative text", "n.md", "# a\n\n![](pictures/plot.png)\n", "n.md:3:1: warning: the image has no text for readers who cannot see it; "},
		{"same page", "Other.md", "# a\n", "other.md: error: its place in the site, \"other.html\", is taken by Other.md; rename the file"},
		{"page of the contents", "Index.md", "# a\n", "Index.md: error: its place in the site, \"Index.html\", is taken by the contents page; rename the file"},
		{"folder like a page", "other.html/n.md", "# a\n", "other.html/n.md: error: its place in the site, \"other.html/n.html\", is taken by other.md; rename the file"},
		{"block on the front page", "index.md", "```toml run\nid = \"b\"\n```\n", "index.md:1:1: error: run \"b\": index.md is text for the contents page and takes no blocks; move the block to a note of its own"},
		{"capital extension", "n.MD", "# a\n", "n.MD: warning: the file is not read as a note, because its name ends in \".MD\"; let the name end in .md, or name it in leave-out"},
		{"no settings title", SettingsFile, "summary = \"x\"\n", SettingsFile + ":1:1: error: title: "},
		{"unknown setting", SettingsFile, "title = \"x\"\nsumary = \"x\"\n", SettingsFile + ":2:1: error: sumary: "},
		{"unknown setting of the theme", SettingsFile, "title = \"x\"\n[theme]\nreplac = { a = \"b\" }\n", SettingsFile + ":3:1: error: theme.replac: "},
		{"settings of the wrong type", SettingsFile, "title = 3\n", SettingsFile + ":1:9: error: title: "},
		{"settings not TOML", SettingsFile, "title = \n", SettingsFile + ":1:"},
		{"language", SettingsFile, "title = \"x\"\nlanguage = \"british english\"\n", SettingsFile + ":2:12: error: language: \"british english\" is no language tag; write a tag such as \"en\", \"de\" or \"en-GB\""},
		{"pattern", SettingsFile, "title = \"x\"\nleave-out = [\"a\", \"[\"]\n", SettingsFile + ":2:19: error: leave-out.2: the pattern \"[\" is not well formed; close the [ or take it away"},
		{"pattern outside", SettingsFile, "title = \"x\"\nleave-out = [\"../a\"]\n", SettingsFile + ":2:14: error: leave-out.1: the pattern \"../a\" matches no path; "},
		{"missing replacement", SettingsFile, "title = \"x\"\ntheme.replace = { a = \"b\" }\n", SettingsFile + ":2:23: error: theme.replace.a: the notebook has no file \"b\"; write the path of a file from the top of the notebook"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			_, faults := Open(files(
				"other.md", "# Other\n\n## First part\n\n```toml mechanism\nid = \"addition\"\n```\n",
				"pictures/plot.png", "", ".secret", "", tt.file, tt.source), ".")
			if len(faults) != 1 || !strings.HasPrefix(faults[0].Error(), tt.want) || faults[0].Fix == "" {
				t.Errorf("got\n%swant\n%s", listed(faults), tt.want)
			}
		})
	}
}

func TestLeftOutLink(t *testing.T) {
	_, faults := Open(files(SettingsFile, "title = \"x\"\nleave-out = [\"drafts\"]\n", "drafts/d.md", "", "n.md", "# a\n\n[b](drafts/d.md)\n"), "")
	if want := "n.md:3:5: error: the link \"drafts/d.md\" is left out of the notebook; take it out of leave-out in saddlebook.toml\n"; listed(faults) != want {
		t.Errorf("got %s", listed(faults))
	}
}

func TestNoNotebook(t *testing.T) {
	nb, faults := Open(fstest.MapFS{"n.md": {Data: []byte("x")}}, "some/where")
	if nb == nil || len(faults) != 1 || !strings.HasPrefix(faults[0].Error(), "some/where/saddlebook.toml: error: the folder is no notebook") {
		t.Errorf("got %s", listed(faults))
	}
}

// All faults of all notes come at once, sorted, and the same each time.
func TestAllFaultsAtOnce(t *testing.T) {
	pairs := []string{}
	for i := range 40 {
		pairs = append(pairs, fmt.Sprintf("n%02d.md", i), "no title\n\n{= \n\n[b](gone.md)\n")
	}
	var first string
	for range 5 {
		_, faults := Open(files(pairs...), ".")
		got := listed(faults)
		if strings.Count(got, "\n") != 120 {
			t.Fatalf("%d faults", strings.Count(got, "\n"))
		}
		if first == "" {
			first = got
		}
		if got != first {
			t.Fatal("the order of the faults changes")
		}
	}
	if !slices.IsSortedFunc(strings.Split(strings.TrimSpace(first), "\n"), func(a, b string) int { return strings.Compare(a[:6], b[:6]) }) {
		t.Error("not sorted by file")
	}
}

func TestSettingsFields(t *testing.T) {
	if err := schema.Check(SettingsFields(), &written{}); err != nil {
		t.Error(err)
	}
}

func TestEmbedded(t *testing.T) {
	for name, fsys := range map[string]func() (*Notebook, fault.List){
		"demo":  func() (*Notebook, fault.List) { return Open(Demo(), "demo") },
		"begin": func() (*Notebook, fault.List) { return Open(Begin(), "begin") },
	} {
		nb, faults := fsys()
		if faults.Failed() || nb.Settings.Title == "" {
			t.Errorf("%s: %s", name, listed(faults))
		}
	}
}

func TestRelative(t *testing.T) {
	for _, tt := range []struct{ dir, to, want string }{
		{".", "a/b.md", "a/b.md"}, {"a", "a/b.md", "b.md"}, {"a", "b.md", "../b.md"}, {"a/b", "a/c/d.md", "../c/d.md"}, {"a/b", "c.md", "../../c.md"},
	} {
		got := relative(tt.dir, tt.to)
		if got != tt.want || path.Join(tt.dir, got) != tt.to {
			t.Errorf("from %s to %s: %s", tt.dir, tt.to, got)
		}
	}
}
