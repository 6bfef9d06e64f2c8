package render_test

import (
	"context"
	"encoding/json"
	"fmt"
	"io/fs"
	"net/url"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"sync"
	"testing"
	"time"

	"github.com/chromedp/cdproto/emulation"
	"github.com/chromedp/cdproto/log"
	"github.com/chromedp/cdproto/network"
	"github.com/chromedp/cdproto/runtime"
	"github.com/chromedp/chromedp"

	"saddlebook/content"
	"saddlebook/render"
)

// TestBrowser opens every page of the embedded notebook in a browser, from the
// disk, in light and dark, in a narrow and a wide window and for print, and
// looks at what is drawn. SADDLEBOOK_BROWSER=required makes a missing browser
// an error.
func TestBrowser(t *testing.T) {
	b := openBrowser(t)
	t.Run("faults", b.testFaults)
	site := publishDemo(t)
	css, err := os.ReadFile(filepath.Join(site, "assets", "style.css"))
	if err != nil {
		t.Fatal(err)
	}
	light, dark, err := paperColours(string(css))
	if err != nil {
		t.Fatal(err)
	}
	pages := htmlFiles(t, site)
	if len(pages) < 4 {
		t.Fatalf("only %d pages: %v", len(pages), pages)
	}
	targets := map[string]map[string]bool{} // ids by file
	links := map[string][]link{}
	for _, page := range pages {
		t.Run(page, func(t *testing.T) {
			found := map[string][]string{}
			for _, v := range []view{
				{Width: 1280, Paper: light, Least: 11}, {Width: 360, Paper: light},
				{Width: 1280, Paper: dark, Dark: true, Least: 11}, {Width: 360, Paper: dark, Dark: true},
				{Width: 794, Paper: "white", Dark: true, Print: true}, {Width: 794, Paper: "white", Print: true},
			} {
				seen, err := b.look(site, page, v)
				if err != nil {
					t.Fatalf("%s: %v", v, err)
				}
				for _, f := range seen.Faults {
					found[f] = append(found[f], v.String())
				}
				if targets[page] == nil {
					targets[page] = map[string]bool{}
					for _, id := range seen.IDs {
						targets[page][id] = true
					}
					links[page] = seen.Links
				}
			}
			report(t, found)
		})
	}
	t.Run("links", func(t *testing.T) {
		for _, page := range pages {
			for _, f := range deadLinks(site, links[page], targets) {
				t.Errorf("%s: %s", page, f)
			}
		}
	})
}

// report fails once for each fault, with the views it was seen in.
func report(t *testing.T, found map[string][]string) {
	t.Helper()
	faults := make([]string, 0, len(found))
	for f := range found {
		faults = append(faults, f)
	}
	slices.Sort(faults)
	for _, f := range faults {
		t.Errorf("%s\n\tseen in: %s", f, strings.Join(found[f], "; "))
	}
}

func publishDemo(t *testing.T) string {
	t.Helper()
	dir, err := filepath.EvalSymlinks(t.TempDir())
	if err != nil {
		t.Fatal(err)
	}
	site := filepath.Join(dir, "site")
	out, err := render.Publish(context.Background(), render.Source{FS: content.Demo(), Name: "demo", Embedded: true}, site, render.Options{})
	if err != nil {
		t.Fatal(err)
	}
	if out.Broken {
		var b strings.Builder
		out.Faults.Write(&b)
		t.Fatalf("the embedded notebook is wrong:\n%s", b.String())
	}
	return site
}

func htmlFiles(t *testing.T, site string) []string {
	t.Helper()
	var pages []string
	err := filepath.WalkDir(site, func(p string, d fs.DirEntry, err error) error {
		if err == nil && !d.IsDir() && filepath.Ext(p) == ".html" {
			rel, rerr := filepath.Rel(site, p)
			pages, err = append(pages, filepath.ToSlash(rel)), rerr
		}
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	return pages
}

var (
	comment     = regexp.MustCompile(`(?s)/\*.*?\*/`)
	paperSet    = regexp.MustCompile(`--paper:\s*([^;}]+)`)
	darkScreens = regexp.MustCompile(`prefers-color-scheme:\s*dark`)
)

// paperColours reads the two values of --paper from the text of a style sheet:
// outside any @media, and in the first one for dark screens.
func paperColours(css string) (light, dark string, err error) {
	css = comment.ReplaceAllString(css, "")
	var preludes []string // of the open blocks
	begin := 0
	for i, c := range css {
		switch c {
		case '{':
			preludes = append(preludes, css[begin:i])
			begin = i + 1
		case ';', '}':
			value := paperSet.FindStringSubmatch(css[begin:i])
			outer := strings.Join(preludes, " ")
			switch {
			case value == nil:
			case !strings.Contains(outer, "@media") && light == "":
				light = strings.TrimSpace(value[1])
			case darkScreens.MatchString(outer) && dark == "":
				dark = strings.TrimSpace(value[1])
			}
			begin = i + 1
			if c == '}' && len(preludes) > 0 {
				preludes = preludes[:len(preludes)-1]
			}
		}
	}
	if light == "" || dark == "" || light == dark {
		return "", "", fmt.Errorf("the style sheet gives --paper as %q in light and %q in dark", light, dark)
	}
	return light, dark, nil
}

// deadLinks says which links of a page lead nowhere: to no file of the site, or
// to no id of its page. A link to another site is a reader's business.
func deadLinks(site string, links []link, targets map[string]map[string]bool) []string {
	var faults []string
	seen := map[link]bool{}
	for _, l := range links {
		if seen[l] {
			continue
		}
		seen[l] = true
		u, err := url.Parse(l.URL)
		if err != nil {
			faults = append(faults, fmt.Sprintf("the link %q cannot be read: %v", l.Text, err))
			continue
		}
		switch u.Scheme {
		case "https", "http", "mailto":
			continue
		case "file":
		default:
			faults = append(faults, fmt.Sprintf("the link %q has the scheme %q", l.Text, u.Scheme))
			continue
		}
		rel, err := filepath.Rel(site, filepath.FromSlash(u.Path))
		if err != nil || !filepath.IsLocal(rel) {
			faults = append(faults, fmt.Sprintf("the link %q leads out of the site", l.Text))
			continue
		}
		info, err := os.Stat(filepath.Join(site, rel))
		switch {
		case err != nil:
			faults = append(faults, fmt.Sprintf("the link %q leads to no file", l.Text))
		case info.IsDir():
			faults = append(faults, fmt.Sprintf("the link %q leads to a folder", l.Text))
		case u.Fragment != "" && !targets[filepath.ToSlash(rel)][u.Fragment]:
			faults = append(faults, fmt.Sprintf("the link %q leads to no id of its page", l.Text))
		}
	}
	return faults
}

// view is one way to look at a page. Its fields go to look.js.
type view struct {
	Width int     `json:"width"` // CSS px
	Paper string  `json:"paper"`
	Dark  bool    `json:"dark"`
	Print bool    `json:"print"`
	Least float64 `json:"least"` // of text in figures, CSS px; 0: not looked at
}

func (v view) String() string {
	scheme, medium := "light", "screen"
	if v.Dark {
		scheme = "dark"
	}
	if v.Print {
		medium = "print"
	}
	return fmt.Sprintf("%s %s, %d px", scheme, medium, v.Width)
}

type link struct{ Text, URL string }

// sight is what look.js returns.
type sight struct {
	Faults []string
	IDs    []string
	Links  []link
}

// browser is one tab of one browser.
type browser struct {
	ctx    context.Context
	script string

	mu       sync.Mutex
	messages []string
	requests []string
	pending  map[network.RequestID]string
}

var browserNames = []string{"chromium", "chromium-browser", "chrome"}

func openBrowser(t *testing.T) *browser {
	t.Helper()
	var program string
	for _, name := range browserNames {
		if p, err := exec.LookPath(name); err == nil {
			program = p
			break
		}
	}
	if program == "" {
		const missing = "no browser: no page was looked at; install one of these: "
		if os.Getenv("SADDLEBOOK_BROWSER") == "required" {
			t.Fatal(missing + strings.Join(browserNames, ", "))
		}
		t.Skip(missing + strings.Join(browserNames, ", "))
	}
	script, err := os.ReadFile("testdata/browser/look.js")
	if err != nil {
		t.Fatal(err)
	}
	flags := []chromedp.ExecAllocatorOption{chromedp.ExecPath(program), chromedp.Headless, chromedp.Flag("force-color-profile", "srgb")}
	for _, f := range []string{"no-sandbox", "disable-gpu", "disable-quic", "no-first-run", "disable-background-networking",
		"disable-component-update", "disable-sync", "disable-dev-shm-usage"} {
		flags = append(flags, chromedp.Flag(f, true))
	}
	limited, stop := context.WithTimeout(context.Background(), 3*time.Minute) // a browser that hangs
	allocated, release := chromedp.NewExecAllocator(limited, flags...)
	b := &browser{script: string(script), pending: map[network.RequestID]string{}}
	ctx, closeTab := chromedp.NewContext(allocated, chromedp.WithListener(b.hear))
	b.ctx = ctx
	t.Cleanup(func() { closeTab(); release(); stop() })
	if err := chromedp.Do(ctx); err != nil {
		t.Fatalf("%s does not start: %v", program, err)
	}
	return b
}

// hear notes what the page asks for and what the browser says of it.
func (b *browser) hear(event any) {
	b.mu.Lock()
	defer b.mu.Unlock()
	switch e := event.(type) {
	case *runtime.EventConsoleAPICalled:
		text := make([]string, len(e.Args))
		for i, a := range e.Args {
			text[i] = string(a.Value) + a.Description
		}
		b.messages = append(b.messages, fmt.Sprintf("the console has %s: %s", e.Type, strings.Join(text, " ")))
	case *runtime.EventExceptionThrown:
		b.messages = append(b.messages, "an exception: "+thrown(e.ExceptionDetails))
	case *log.EventEntryAdded:
		b.messages = append(b.messages, fmt.Sprintf("the browser says (%s, %s): %s %s", e.Entry.Source, e.Entry.Level, e.Entry.Text, e.Entry.URL))
	case *network.EventRequestWillBeSent:
		b.pending[e.RequestID] = e.Request.URL
		b.requests = append(b.requests, e.Request.URL)
	case *network.EventLoadingFailed:
		b.messages = append(b.messages, fmt.Sprintf("%s was not loaded: %s %s", b.pending[e.RequestID], e.ErrorText, e.BlockedReason))
	}
}

func thrown(d *runtime.ExceptionDetails) string {
	if d.Exception == nil {
		return d.Text
	}
	return d.Text + " " + d.Exception.Description
}

var printedPage = regexp.MustCompile(`/Type\s*/Page\b`)

// look opens a page of the site and says what is wrong with it in that view.
func (b *browser) look(site, page string, v view) (sight, error) {
	folder := url.URL{Scheme: "file", Path: filepath.ToSlash(site) + "/"}
	address := folder.JoinPath(page).String()
	scheme, medium := "light", ""
	if v.Dark {
		scheme = "dark"
	}
	if v.Print {
		medium = "print"
	}
	media := emulation.SetEmulatedMediaParams{Media: medium, Features: []*emulation.MediaFeature{{Name: "prefers-color-scheme", Value: scheme}}}
	if _, err := chromedp.Call(b.ctx, emulation.SetEmulatedMedia, media); err != nil {
		return sight{}, err
	}
	b.mu.Lock()
	b.messages, b.requests = nil, nil
	b.mu.Unlock()
	if err := chromedp.Do(b.ctx, chromedp.EmulateViewport(int64(v.Width), 900), chromedp.Navigate(address)); err != nil {
		return sight{}, err
	}
	asked, err := json.Marshal(v)
	if err != nil {
		return sight{}, err
	}
	seen, err := chromedp.Run(b.ctx, chromedp.Evaluate[sight](fmt.Sprintf("(%s)(%s)", b.script, asked)))
	if err != nil {
		return sight{}, err
	}
	if v.Print {
		paper, err := chromedp.Run(b.ctx, chromedp.PrintToPDF(chromedp.PDFPaper(chromedp.PaperA4), chromedp.PDFPreferCSSPageSize()))
		if err != nil {
			return sight{}, err
		}
		if !strings.HasPrefix(string(paper), "%PDF-") || !printedPage.Match(paper) {
			seen.Faults = append(seen.Faults, fmt.Sprintf("printing gives %d bytes that are no PDF with a page", len(paper)))
		}
	}
	b.mu.Lock()
	defer b.mu.Unlock()
	seen.Faults = append(seen.Faults, b.messages...)
	if len(b.requests) == 0 {
		seen.Faults = append(seen.Faults, "the browser asked for nothing")
	}
	for _, r := range b.requests {
		if !strings.HasPrefix(r, folder.String()) {
			seen.Faults = append(seen.Faults, "the page asks for "+r)
		}
	}
	return seen, nil
}
