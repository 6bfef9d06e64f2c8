package content

import (
	"fmt"
	"io/fs"
	"path"
	"slices"
	"strings"

	"saddlebook/content/fault"
	"saddlebook/content/schema"
)

// linker checks the links of a notebook whose notes are all read.
type linker struct {
	nb     *Notebook
	notes  map[string]*Note // by path
	known  []string         // paths of notes
	assets map[string]bool  // by path; false: looked for and not there
	faults fault.List
}

// link checks every link, and sets Mentions and Assets.
func (nb *Notebook) link() fault.List {
	l := &linker{nb: nb, notes: map[string]*Note{}, assets: map[string]bool{}}
	for _, n := range nb.All() {
		l.notes[n.Path] = n
		l.known = append(l.known, n.Path)
	}
	for _, n := range nb.All() {
		for _, k := range n.Links {
			l.check(n, k)
		}
		slices.Sort(n.Mentions)
		n.Mentions = slices.Compact(n.Mentions)
	}
	for p, there := range l.assets {
		if there {
			nb.Assets = append(nb.Assets, p)
		}
	}
	slices.Sort(nb.Assets)
	return l.faults
}

func (l *linker) fault(k Link, fix, format string, args ...any) {
	l.faults = append(l.faults, fault.Diagnostic{At: k.At, Msg: fmt.Sprintf(format, args...), Fix: fix})
}

func (l *linker) check(n *Note, k Link) {
	what := "link"
	if k.Image {
		what = "image"
	}
	if k.Path == ".." || strings.HasPrefix(k.Path, "../") {
		l.fault(k, "move the file into the notebook", "the %s %q leaves the notebook", what, k.To)
		return
	}
	target := l.notes[k.Path]
	switch {
	case target != nil && k.Image:
		l.fault(k, "leave the ! out to link to the note", "the image %q is a note and no picture", k.To)
	case target != nil:
		if target != n {
			n.Mentions = append(n.Mentions, target.Name)
		}
		if k.Anchor != "" && !target.unread {
			l.anchor(k, target)
		}
	default:
		l.file(n, k, what)
	}
}

// anchor checks a link to a heading or a block of a note.
func (l *linker) anchor(k Link, target *Note) {
	var known []string
	for _, h := range target.Headings {
		known = append(known, h.ID)
	}
	for _, b := range target.Blocks {
		if a := b.Anchor(); a != "" {
			known = append(known, a)
		}
	}
	if slices.Contains(known, k.Anchor) {
		return
	}
	slices.Sort(known)
	fix := "link to the note without #" + k.Anchor
	if near := schema.Nearest(k.Anchor, known); near != "" {
		fix = "write #" + near
	} else if len(known) > 0 {
		fix = "write one of #" + strings.Join(known[:min(len(known), 8)], ", #")
	}
	l.fault(k, fix, "the link %q names no heading and no block of %s", k.To, target.Path)
}

// file checks a link to anything but a note that was read.
func (l *linker) file(n *Note, k Link, what string) {
	p := strings.TrimSuffix(k.Path, "/")
	for _, part := range strings.Split(p, "/") {
		if strings.HasPrefix(part, ".") && part != "." {
			l.fault(k, "link to a file whose name does not start with a dot", "the %s %q names a hidden file, which is not published", what, k.To)
			return
		}
	}
	if p == Published || strings.HasPrefix(p, Published+"/") {
		l.fault(k, "link to the note and not to its page", "the %s %q points into the published site", what, k.To)
		return
	}
	info, err := fs.Stat(l.nb.FS, p)
	if err == nil && p != k.Path && !info.IsDir() {
		err = fs.ErrNotExist // "file.csv/"
	}
	switch {
	case err != nil:
		l.broken(n, k, what)
	case info.IsDir():
		l.fault(k, "link to a note in it", "the %s %q is a folder", what, k.To)
	case !info.Mode().IsRegular():
		l.fault(k, "link to a file on disk", "the %s %q is no ordinary file", what, k.To)
	case strings.HasSuffix(p, ".md"):
		l.fault(k, "take it out of leave-out in "+SettingsFile, "the %s %q is left out of the notebook", what, k.To)
	case p == SettingsFile:
		l.fault(k, "describe the settings in words", "the %s %q names the settings, which are not published", what, k.To)
	case k.Anchor != "":
		l.fault(k, "take #"+k.Anchor+" away", "the %s %q names a place in a file that is no note", what, k.To)
	default:
		l.assets[p] = true
	}
}

// broken reports a link to nothing, with the nearest path there is.
func (l *linker) broken(n *Note, k Link, what string) {
	fix := "write the path of a file in the notebook"
	if near := schema.Nearest(k.Path, l.candidates(k)); near != "" {
		fix = "write " + relative(path.Dir(n.Path), near)
	}
	l.fault(k, fix, "the %s %q names no file of the notebook", what, k.To)
}

// candidates returns the paths a broken link may have meant: the notes, and the
// files of the folder it names.
func (l *linker) candidates(k Link) []string {
	known := slices.Clone(l.known)
	dir := path.Dir(strings.TrimSuffix(k.Path, "/"))
	if !fs.ValidPath(dir) {
		return known
	}
	entries, err := fs.ReadDir(l.nb.FS, dir)
	if err != nil { // there is no such folder: the notes are left to choose from
		return known
	}
	for _, e := range entries {
		p := path.Join(dir, e.Name())
		if !e.IsDir() && !strings.HasPrefix(e.Name(), ".") && p != SettingsFile && l.notes[p] == nil && !strings.HasSuffix(p, ".md") {
			known = append(known, p)
		}
	}
	return known
}

// relative returns the path of a file as seen from a folder, both from the top of
// the notebook.
func relative(dir, to string) string {
	if dir == "." {
		return to
	}
	from, rest := strings.Split(dir, "/"), strings.Split(to, "/")
	for len(from) > 0 && len(rest) > 1 && from[0] == rest[0] {
		from, rest = from[1:], rest[1:]
	}
	return strings.Repeat("../", len(from)) + strings.Join(rest, "/")
}
