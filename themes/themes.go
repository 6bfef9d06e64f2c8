// Package themes dresses pages: embedded templates and styles, and the typed
// contract between them and the program. It knows no notebook and no chemistry.
//
// A theme is five templates (html/template) and a style sheet; see Files. The
// frame holds what every page shares and calls two templates that each page
// defines, "title" and "main". What a template is given stands in the contract:
// Page, Contents, Claims and Colophon. Pages link to assets/style.css, which is
// the theme's Stylesheet, and to nothing outside the site.
package themes

import (
	"embed"
	"errors"
	"fmt"
	"html/template"
	"io"
	"io/fs"
	"slices"
	"strings"
)

//go:embed fieldbook/frame.html.tmpl fieldbook/page.html.tmpl fieldbook/contents.html.tmpl
//go:embed fieldbook/claims.html.tmpl fieldbook/colophon.html.tmpl fieldbook/style.css
var embedded embed.FS

// Default is the theme for screens.
const Default = "fieldbook"

const (
	frame = "frame.html.tmpl"
	style = "style.css"
)

// pages are the templates that stand in the frame.
var pages = []string{"page.html.tmpl", "contents.html.tmpl", "claims.html.tmpl", "colophon.html.tmpl"}

// Names lists the themes there are.
func Names() []string { return []string{Default} }

// Files lists what a theme is made of.
func Files() []string { return append(append([]string{frame}, pages...), style) }

// A Theme makes whole pages from the data of the contract. Its methods may be
// called from several goroutines at once.
type Theme struct {
	pages map[string]*template.Template
	style string
}

// ErrUnknown says that a theme, or a file of one, is not known by that name.
var ErrUnknown = errors.New("not known")

// Open reads a theme. replace gives other text for some of its files, by name.
// An unknown name (ErrUnknown) and a template that does not parse are
// errors. A template that asks for what the contract does not hold fails when
// its page is written.
func Open(name string, replace map[string]string) (*Theme, error) {
	if !slices.Contains(Names(), name) {
		return nil, fmt.Errorf("theme %q is %w; write one of %s", name, ErrUnknown, strings.Join(Names(), ", "))
	}
	if err := known(replace); err != nil {
		return nil, err
	}
	read := func(file string) (string, error) {
		if text, ok := replace[file]; ok {
			return text, nil
		}
		text, err := fs.ReadFile(embedded, name+"/"+file)
		return string(text), err
	}
	t := &Theme{pages: map[string]*template.Template{}}
	shared, err := read(frame)
	if err != nil {
		return nil, err
	}
	for _, page := range pages {
		text, err := read(page)
		if err != nil {
			return nil, err
		}
		tmpl, err := template.New(frame).Parse(shared)
		if err == nil {
			_, err = tmpl.New(page).Parse(text)
		}
		if err != nil {
			return nil, fmt.Errorf("theme %q: %w; mend the template at the line it names", name, err)
		}
		t.pages[page] = tmpl
	}
	t.style, err = read(style)
	return t, err
}

func known(replace map[string]string) error {
	var wrong []string
	for file := range replace {
		if !slices.Contains(Files(), file) {
			wrong = append(wrong, file)
		}
	}
	if len(wrong) == 0 {
		return nil
	}
	slices.Sort(wrong)
	return fmt.Errorf("a file %q of the theme is %w; replace one of %s", wrong[0], ErrUnknown, strings.Join(Files(), ", "))
}

// Page writes the page of a note. A failing template leaves a part of the page
// in w, here and below.
func (t *Theme) Page(w io.Writer, p Page) error { return t.pages["page.html.tmpl"].Execute(w, p) }

// Contents writes the front page.
func (t *Theme) Contents(w io.Writer, c Contents) error {
	return t.pages["contents.html.tmpl"].Execute(w, c)
}

// Claims writes the page of all claims.
func (t *Theme) Claims(w io.Writer, c Claims) error {
	return t.pages["claims.html.tmpl"].Execute(w, c)
}

// Colophon writes the page on how the site was made.
func (t *Theme) Colophon(w io.Writer, c Colophon) error {
	return t.pages["colophon.html.tmpl"].Execute(w, c)
}

// Stylesheet is the style of every page; extra is that of the figures.
func (t *Theme) Stylesheet(extra string) string { return t.style + "\n" + extra }
