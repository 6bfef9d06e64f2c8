package render

import (
	"bytes"
	"encoding/json"
	"fmt"
	"html/template"
	"io/fs"
	"net/url"
	"path"
	"slices"
	"strings"

	"saddlebook/content"
	"saddlebook/diagram/ink"
	"saddlebook/render/kind"
	"saddlebook/render/paper"
	"saddlebook/render/site"
	"saddlebook/render/study"
	"saddlebook/themes"
)

// press prints the pages of an evaluated notebook.
type press struct {
	study    *study.Study
	theme    *themes.Theme
	revision string              // of the notebook; "" if it is not known
	mentions map[string][]string // by note: the notes that link to it
}

func newPress(s *study.Study, revision string) (*press, error) {
	theme, err := dress(s.Book)
	if err != nil {
		return nil, err
	}
	p := &press{study: s, revision: revision, theme: theme, mentions: map[string][]string{}}
	for _, n := range s.Book.Notes {
		for _, to := range n.Mentions {
			p.mentions[to] = append(p.mentions[to], n.Name)
		}
	}
	return p, nil
}

// dress opens the theme, with what the notebook puts in place of its files.
func dress(book *content.Notebook) (*themes.Theme, error) {
	replace := map[string]string{}
	for file, from := range book.Settings.Replace {
		data, err := fs.ReadFile(book.FS, from)
		if err != nil {
			return nil, err
		}
		replace[file] = string(data)
	}
	theme, err := themes.Open(themes.Default, replace)
	if err != nil {
		return nil, err
	}
	return theme, theme.Try()
}

// site is what a page at that path knows of the notebook.
func (p *press) site(at string) themes.Site {
	set := p.study.Book.Settings
	return themes.Site{Title: set.Title, Summary: set.Summary, Authors: set.Authors, Language: set.Language, Root: strings.Repeat("../", strings.Count(at, "/")), Program: Program()}
}

// about is what the note's own block says of the page, or the plain truth.
func (p *press) about(n *content.Note) kind.About {
	for _, b := range n.Blocks {
		if e := p.study.Of(b); e != nil && e.Done {
			if about, ok := e.Kind.About(e.Spec, e.Value); ok {
				if about.Title == "" {
					about.Title = n.Title
				}
				return about
			}
		}
	}
	return kind.About{Title: n.Title}
}

// findings are the claims of a note; href leads to its page.
func (p *press) findings(n *content.Note, href string) []themes.Finding {
	var out []themes.Finding
	for _, b := range n.Blocks {
		e := p.study.Of(b)
		if e == nil {
			continue
		}
		for _, f := range e.Findings() {
			out = append(out, themes.Finding{Says: f.Says, Standing: string(f.Standing), Value: f.Value, Bound: f.Bound,
				Probability: f.Probability, Asked: f.Asked, Href: href + "#" + onPage(e).Within(f.Anchor)})
		}
	}
	return out
}

// longNote is the number of headings from which a note lists its contents.
const longNote = 4

// note writes the page of a note and the files that go with it.
func (p *press) note(n *content.Note, stage *site.Stage) error {
	at := pageOf(n)
	text, err := body(p.study, n)
	if err != nil {
		return err
	}
	about := p.about(n)
	page := themes.Page{Site: p.site(at), Title: about.Title, Status: about.Status, Date: about.Date, Summary: about.Summary,
		Authors: about.Authors, Tags: about.Tags, Findings: p.findings(n, ""), InputHash: p.inputHash(n)}
	page.Heading, page.Body = heading(text)
	if page.Downloads, err = p.downloads(n, stage); err != nil {
		return err
	}
	for _, from := range p.mentions[n.Name] {
		page.MentionedIn = append(page.MentionedIn, themes.Link{Href: relative(at, from+".html"), Text: p.about(p.study.Book.Note(from)).Title})
	}
	if len(n.Headings) >= longNote {
		for _, h := range n.Headings {
			if h.Level > 1 {
				page.Contents = append(page.Contents, themes.Heading{Level: h.Level, ID: h.ID, Text: h.Text})
			}
		}
	}
	var out bytes.Buffer
	if err := p.theme.Page(&out, page); err != nil {
		return err
	}
	return stage.Write(at, out.Bytes())
}

// heading parts a page's text behind its level-1 heading, so that what the
// page says of itself can stand between. A note without one at its top stays
// whole.
func heading(text string) (head, rest template.HTML) {
	const end = "</h1>"
	text = strings.TrimLeft(text, "\n ")
	if i := strings.Index(text, end); i >= 0 && strings.HasPrefix(text, "<h1") {
		return template.HTML(text[:i+len(end)]), template.HTML(text[i+len(end):])
	}
	return "", template.HTML(text)
}

// downloads writes the note's figures and results as files beside its page.
func (p *press) downloads(n *content.Note, stage *site.Stage) ([]themes.Link, error) {
	var links []themes.Link
	give := func(name, text string, data []byte) error {
		links = append(links, themes.Link{Href: relative(n.Name+".html", name), Text: text})
		return stage.Write(name, data)
	}
	var lines []Line
	for _, b := range n.Blocks {
		e := p.study.Of(b)
		if e == nil || !e.Done {
			continue
		}
		lines = append(lines, resultsOf(e)...)
		sheet, err := lay(e)
		if err != nil {
			return nil, err
		}
		for i, f := range sheet.Figures() {
			var svg bytes.Buffer
			if err := ink.Alone(&svg, f.Scene); err != nil {
				return nil, fmt.Errorf("%s:%d: %w", n.Path, b.At.Line, err)
			}
			name := fmt.Sprintf("%s/%s.svg", n.Name, figureName(b, i))
			if err := give(name, figureName(b, i)+".svg", svg.Bytes()); err != nil {
				return nil, err
			}
		}
		for _, d := range sheet.Files() {
			var out bytes.Buffer
			if err := d.CSV(&out); err != nil {
				return nil, err
			}
			if err := give(n.Name+"/"+dataName(b, d), dataName(b, d), out.Bytes()); err != nil {
				return nil, err
			}
		}
	}
	if len(lines) == 0 {
		return links, nil
	}
	for _, format := range []string{"csv", "json"} {
		var out bytes.Buffer
		if err := WriteResults(&out, lines, format); err != nil {
			return nil, err
		}
		if err := give(n.Name+"/results."+format, "results."+format, out.Bytes()); err != nil {
			return nil, err
		}
	}
	return links, nil
}

func figureName(b *content.Block, i int) string {
	if i == 0 {
		return b.Anchor()
	}
	return fmt.Sprintf("%s-%d", b.Anchor(), i+1)
}

// dataName is the file of a block's numbers.
func dataName(b *content.Block, d paper.Data) string { return b.Anchor() + "-" + d.Name + ".csv" }

// relative is the address of one file of the site as seen from another.
func relative(from, to string) string {
	up := strings.Split(path.Dir(from), "/")
	down := strings.Split(path.Dir(to), "/")
	if up[0] == "." {
		up = nil
	}
	if down[0] == "." {
		down = nil
	}
	for len(up) > 0 && len(down) > 0 && up[0] == down[0] {
		up, down = up[1:], down[1:]
	}
	to = strings.Repeat("../", len(up)) + path.Join(append(slices.Clone(down), path.Base(to))...)
	return (&url.URL{Path: to}).String()
}

// inputHash is a hash of all that the page of a note depends on: its text and
// what its blocks and readings computed.
func (p *press) inputHash(n *content.Note) string {
	parts := [][]byte{n.Source}
	for _, b := range n.Blocks {
		if e := p.study.Of(b); e != nil {
			parts = append(parts, []byte(e.Hash))
		}
	}
	for _, r := range n.Readings {
		if a, d, pending := p.study.Answer(r); d == nil && !pending {
			parts = append(parts, []byte(a.Block.Hash))
		}
	}
	return study.HashOf(parts...)[:16]
}

// notebookPages writes the contents, the claims, the colophon and the style.
func (p *press) notebookPages(stage *site.Stage) error {
	contents := themes.Contents{Site: p.site(contentsFile)}
	claims := themes.Claims{Site: p.site(claimsFile)}
	kinds := map[string]bool{} // those in use
	colophon := themes.Colophon{Site: p.site(colophonFile), Revision: p.revision}
	if front := p.study.Book.Front; front != nil {
		text, err := body(p.study, front)
		if err != nil {
			return err
		}
		contents.Front = template.HTML(text)
	}
	for _, n := range p.study.Book.Notes {
		about := p.about(n)
		href := relative(contentsFile, pageOf(n))
		findings := p.findings(n, href)
		var tally themes.Tally
		for _, f := range findings {
			switch kind.Standing(f.Standing) {
			case kind.Holds:
				tally.Holds++
			case kind.Fails:
				tally.Fails++
			default:
				tally.Undecided++
			}
		}
		claims.Tally.Holds += tally.Holds
		claims.Tally.Fails += tally.Fails
		claims.Tally.Undecided += tally.Undecided
		entry := themes.Entry{Href: href, Title: about.Title, Summary: about.Summary, Status: about.Status, Date: about.Date, Tags: about.Tags, Claims: tally}
		contents.Folders = addTo(contents.Folders, path.Dir(n.Path), entry)
		if len(findings) > 0 {
			claims.Notes = append(claims.Notes, themes.NoteClaims{Href: href, Title: about.Title, Findings: findings})
		}
		colophon.Inputs = append(colophon.Inputs, themes.Input{Note: n.Path, Hash: p.inputHash(n)})
		for _, b := range n.Blocks {
			if e := p.study.Of(b); e != nil && e.Done {
				kinds[e.Kind.Name] = true
			}
		}
	}
	contents.Claims = claims.Tally
	for _, name := range kind.Names() {
		if kinds[name] && kind.Find(name).Method != "" {
			colophon.Methods = append(colophon.Methods, kind.Find(name).Method)
		}
	}
	for _, page := range []struct {
		at    string
		write func(*bytes.Buffer) error
	}{
		{contentsFile, func(w *bytes.Buffer) error { return p.theme.Contents(w, contents) }},
		{claimsFile, func(w *bytes.Buffer) error { return p.theme.Claims(w, claims) }},
		{colophonFile, func(w *bytes.Buffer) error { return p.theme.Colophon(w, colophon) }},
		{provenanceFile, func(w *bytes.Buffer) error { return provenance(w, colophon) }},
		{styleFile, func(w *bytes.Buffer) error {
			_, err := w.WriteString(p.theme.Stylesheet(ink.Style()))
			return err
		}},
	} {
		var out bytes.Buffer
		if err := page.write(&out); err != nil {
			return err
		}
		if err := stage.Write(page.at, out.Bytes()); err != nil {
			return err
		}
	}
	return nil
}

// addTo adds an entry to its folder; notes come sorted by path, but a folder
// may be met again after one below it.
func addTo(folders []themes.Folder, name string, e themes.Entry) []themes.Folder {
	if name == "." {
		name = ""
	}
	for i := range folders {
		if folders[i].Name == name {
			folders[i].Entries = append(folders[i].Entries, e)
			return folders
		}
	}
	return append(folders, themes.Folder{Name: name, Entries: []themes.Entry{e}})
}

func provenance(w *bytes.Buffer, c themes.Colophon) error {
	inputs := map[string]string{}
	for _, i := range c.Inputs {
		inputs[i.Note] = i.Hash
	}
	data, err := json.MarshalIndent(map[string]any{"program": c.Site.Program, "revision": c.Revision, "inputs": inputs}, "", "  ")
	if err != nil {
		return err
	}
	_, err = w.Write(append(data, '\n'))
	return err
}
