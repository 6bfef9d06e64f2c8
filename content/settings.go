package content

import (
	"errors"
	"fmt"
	"io/fs"
	"path"
	"regexp"
	"strconv"
	"strings"

	"saddlebook/content/fault"
	"saddlebook/content/place"
	"saddlebook/content/schema"
)

// Settings are what saddlebook.toml says.
type Settings struct {
	Title    string
	Summary  string
	Language string // a language tag, "en" without one
	Authors  []string
	LeaveOut []string          // path patterns of notes and folders that are not read
	Replace  map[string]string // theme file to the file of the notebook that stands in for it
}

// written is saddlebook.toml as it is decoded.
type written struct {
	Title    string   `key:"title"`
	Summary  string   `key:"summary"`
	Language string   `key:"language"`
	Authors  []string `key:"authors"`
	LeaveOut []string `key:"leave-out"`
	Theme    struct {
		Replace []schema.NamedText `key:"replace"`
	} `key:"theme"`
}

// SettingsFields lists the keys of saddlebook.toml.
func SettingsFields() []schema.Field {
	return []schema.Field{
		{Key: "title", Type: schema.Text, Required: true, Doc: "name of the notebook", Example: "Enone additions"},
		{Key: "summary", Type: schema.Text, Doc: "one or two sentences for the contents page", Example: "Which adduct forms, and when."},
		{Key: "language", Type: schema.Text, Doc: "language tag of the prose", Default: "en", Example: "en-GB"},
		{Key: "authors", Type: schema.Words, Doc: "who answers for the notebook", Example: `["Process chemistry"]`},
		{Key: "leave-out", Type: schema.Words, Doc: "patterns of notes and folders that are not read; one without a slash holds at any depth", Example: `["drafts", "plans/*.md"]`},
		{Key: "theme", Type: schema.Table, Doc: "changes to the look", Fields: []schema.Field{
			{Key: "replace", Type: schema.TextsByName, Doc: "files of the notebook that stand in for files of the theme", Example: `{ "style.css" = "our.css" }`},
		}},
	}
}

var languageTag = regexp.MustCompile(`^[A-Za-z]{2,8}(-[A-Za-z0-9]{1,8})*$`)

// readSettings reads saddlebook.toml. The bool is false if there is none to read.
func readSettings(fsys fs.FS, file string) (s Settings, _ fault.List, found bool) {
	s.Language = "en"
	source, err := fs.ReadFile(fsys, SettingsFile)
	if err != nil {
		d := fault.Diagnostic{At: fault.Place{File: file}, Err: err,
			Msg: fmt.Sprintf("the settings cannot be read: %v", err), Fix: "make the file readable"}
		if errors.Is(err, fs.ErrNotExist) {
			d.Msg = "the folder is no notebook: it holds no " + SettingsFile
			d.Fix = "name the folder of a notebook, or write the file with a title in it"
		}
		return s, fault.List{d}, false
	}
	lines := place.NewLines(source)
	at := func(i int) fault.Place {
		line, col := lines.At(i)
		return fault.Place{File: file, Line: line, Col: col}
	}
	if i, msg, fix := unreadable(source); msg != "" {
		return s, fault.List{{At: at(i), Msg: msg, Fix: fix}}, true
	}
	tree, faults := schema.Parse(string(source), at)
	if tree.Broken {
		return s, faults, true
	}
	var w written
	faults = append(faults, schema.Decode(tree, SettingsFields(), &w)...)
	s.Title, s.Summary, s.Authors = w.Title, w.Summary, w.Authors
	c := settingsCheck{tree: tree, fsys: fsys}
	s.Language = c.language(w.Language)
	s.LeaveOut = c.leaveOut(w.LeaveOut)
	s.Replace = c.replace(w.Theme.Replace)
	return s, append(faults, c.faults...), true
}

// settingsCheck tests what a list of fields cannot say.
type settingsCheck struct {
	tree   *schema.Node
	fsys   fs.FS
	faults fault.List
}

func (c *settingsCheck) fault(path []string, err error, msg, fix string) {
	at := c.tree.Place(path...)
	if n := c.tree.Get(path...); n != nil {
		at = n.At
	}
	c.faults = append(c.faults, fault.Diagnostic{At: at, Key: fault.Key(path), Msg: msg, Fix: fix, Err: err})
}

func (c *settingsCheck) language(tag string) string {
	if tag == "" {
		return "en"
	}
	if !languageTag.MatchString(tag) {
		c.fault([]string{"language"}, nil, fmt.Sprintf("%q is no language tag", tag), `write a tag such as "en", "de" or "en-GB"`)
		return "en"
	}
	return tag
}

func (c *settingsCheck) leaveOut(patterns []string) (good []string) {
	for i, p := range patterns {
		at := []string{"leave-out", strconv.Itoa(i + 1)}
		plain := strings.TrimSuffix(p, "/")
		if _, err := path.Match(p, ""); err != nil {
			c.fault(at, err, fmt.Sprintf("the pattern %q is not well formed", p), "close the [ or take it away")
		} else if plain == "." || path.IsAbs(p) || path.Clean(p) != plain || strings.HasPrefix(p, "..") {
			c.fault(at, nil, fmt.Sprintf("the pattern %q matches no path", p), `write a path from the top of the notebook, such as "drafts" or "plans/*.md"`)
		} else {
			good = append(good, plain)
		}
	}
	return good
}

func (c *settingsCheck) replace(files []schema.NamedText) map[string]string {
	if len(files) == 0 {
		return nil
	}
	replace := map[string]string{}
	for _, f := range files {
		if !isFile(c.fsys, f.Text) {
			c.fault([]string{"theme", "replace", f.Name}, nil, fmt.Sprintf("the notebook has no file %q", f.Text), "write the path of a file from the top of the notebook")
			continue
		}
		replace[f.Name] = f.Text
	}
	return replace
}

func isFile(fsys fs.FS, p string) bool {
	if !fs.ValidPath(p) {
		return false
	}
	info, err := fs.Stat(fsys, p)
	return err == nil && info.Mode().IsRegular()
}

// leaves reports whether a path of the notebook is left out: a pattern matches
// it, a folder above it or, for a pattern without a slash, one of their names.
func (s *Settings) leaves(p string) bool {
	for q := p; q != "."; q = path.Dir(q) {
		for _, pattern := range s.LeaveOut {
			subject := q
			if !strings.Contains(pattern, "/") {
				subject = path.Base(q)
			}
			if ok, _ := path.Match(pattern, subject); ok { // patterns were tested on reading
				return true
			}
		}
	}
	return false
}
