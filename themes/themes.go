// Package themes dresses pages: embedded templates and styles, and the typed
// contract between them and the program. It knows no notebook and no chemistry.
package themes

import (
	"embed"
	"fmt"
	"html/template"
	"io"
	"io/fs"
	"sort"
	"strings"
)

//go:embed fieldbook/frame.html.tmpl fieldbook/page.html.tmpl fieldbook/contents.html.tmpl
//go:embed fieldbook/claims.html.tmpl fieldbook/colophon.html.tmpl fieldbook/style.css
var embedded embed.FS

// Default is the theme for screens.
const Default = "fieldbook"

// files are what a theme is made of.
var files = []string{"frame.html.tmpl", "page.html.tmpl", "contents.html.tmpl", "claims.html.tmpl", "colophon.html.tmpl", "style.css"}

// A Theme makes whole pages from the data of the contract.
type Theme struct {
	pages map[string]*template.Template
	style string
}

// Open reads a theme. replace gives other text for some of its files, by name.
// An unknown name, or a template that does not parse, is an error.
func Open(name string, replace map[string]string) (*Theme, error) {
	for file := range replace {
		if !known(file) {
			return nil, fmt.Errorf("theme %q has no file %q; replace one of %s", name, file, strings.Join(files, ", "))
		}
	}
	read := func(file string) (string, error) {
		if text, ok := replace[file]; ok {
			return text, nil
		}
		data, err := fs.ReadFile(embedded, name+"/"+file)
		return string(data), err
	}
	t := &Theme{pages: map[string]*template.Template{}}
	frame, err := read("frame.html.tmpl")
	if err != nil {
		return nil, err
	}
	for _, page := range []string{"page", "contents", "claims", "colophon"} {
		text, err := read(page + ".html.tmpl")
		if err != nil {
			return nil, err
		}
		tmpl := template.New("frame.html.tmpl").Option("missingkey=error")
		if tmpl, err = tmpl.Parse(frame); err != nil {
			return nil, err
		}
		if _, err = tmpl.New(page + ".html.tmpl").Parse(text); err != nil {
			return nil, err
		}
		t.pages[page] = tmpl
	}
	t.style, err = read("style.css")
	return t, err
}

func known(file string) bool {
	i := sort.SearchStrings(sorted, file)
	return i < len(sorted) && sorted[i] == file
}

var sorted = func() []string {
	s := append([]string{}, files...)
	sort.Strings(s)
	return s
}()

// Files lists what a theme is made of.
func Files() []string { return append([]string{}, files...) }

// Page writes the page of a note.
func (t *Theme) Page(w io.Writer, p Page) error { return t.pages["page"].Execute(w, p) }

// Contents writes the front page.
func (t *Theme) Contents(w io.Writer, c Contents) error { return t.pages["contents"].Execute(w, c) }

// Claims writes the page of all claims.
func (t *Theme) Claims(w io.Writer, c Claims) error { return t.pages["claims"].Execute(w, c) }

// Colophon writes the page on how the site was made.
func (t *Theme) Colophon(w io.Writer, c Colophon) error { return t.pages["colophon"].Execute(w, c) }

// Stylesheet is the style of every page; extra is that of the figures.
func (t *Theme) Stylesheet(extra string) string { return t.style + "\n" + extra }
