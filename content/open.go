package content

import (
	"fmt"
	"io/fs"
	"path"
	"path/filepath"
	"runtime"
	"strings"
	"sync"
	"sync/atomic"

	"saddlebook/content/fault"
)

// frontPath is the note that becomes the text of the contents page.
const frontPath = "index.md"

// Open reads the notebook that fsys holds: saddlebook.toml at its top and every
// *.md below it, except in folders that start with a dot, in published and where
// leave-out says so.
//
// root says where the notebook stands, as the author typed it ("examples/cold",
// "../notes"); it only starts the file names in places. "" and "." add nothing.
//
// The notebook is never nil, and holds what could be read. Notes are parsed in
// parallel; the result does not depend on the order.
func Open(fsys fs.FS, root string) (*Notebook, fault.List) {
	nb := &Notebook{Root: root, FS: fsys}
	settings, faults, found := readSettings(fsys, nb.file(SettingsFile))
	nb.Settings = settings
	if !found {
		return nb, faults
	}
	notes, more := nb.find()
	faults = append(faults, more...)
	for _, list := range nb.parse(notes) {
		faults = append(faults, list...)
	}
	for _, n := range notes {
		if n.Path == frontPath {
			nb.Front = n
		} else {
			nb.Notes = append(nb.Notes, n)
		}
	}
	faults = append(faults, nb.front()...)
	faults = append(faults, nb.link()...)
	faults = append(faults, nb.outputs()...)
	faults.Sort()
	return nb, faults
}

// file returns the name of a file of the notebook for places.
func (nb *Notebook) file(p string) string {
	if nb.Root == "" || nb.Root == "." {
		return p
	}
	return filepath.Join(nb.Root, filepath.FromSlash(p))
}

// find lists the notes in the order of their paths.
func (nb *Notebook) find() (notes []*Note, faults fault.List) {
	err := fs.WalkDir(nb.FS, ".", func(p string, d fs.DirEntry, err error) error {
		if err != nil {
			faults = append(faults, fault.Diagnostic{At: fault.Place{File: nb.file(p)}, Err: err,
				Msg: fmt.Sprintf("cannot be read: %v", err), Fix: "make it readable, or name it in leave-out"})
			if d == nil || d.IsDir() {
				return fs.SkipDir
			}
			return nil
		}
		if d.IsDir() {
			if p != "." && (strings.HasPrefix(d.Name(), ".") || p == Published || nb.Settings.leaves(p)) {
				return fs.SkipDir
			}
			return nil
		}
		switch ext := path.Ext(p); {
		case strings.HasPrefix(d.Name(), ".") || nb.Settings.leaves(p):
		case ext == ".md" && d.Type()&^fs.ModeSymlink != 0:
			faults = append(faults, fault.Diagnostic{At: fault.Place{File: nb.file(p)},
				Msg: "is no ordinary file", Fix: "name it in leave-out"})
		case ext == ".md":
			notes = append(notes, newNote(p))
		case strings.EqualFold(ext, ".md") || strings.EqualFold(ext, ".markdown"):
			faults = append(faults, fault.Diagnostic{At: fault.Place{File: nb.file(p)}, Severity: fault.Warning,
				Msg: fmt.Sprintf("the file is not read as a note, because its name ends in %q", ext), Fix: "let the name end in .md, or name it in leave-out"})
		}
		return nil
	})
	if err != nil && len(faults) == 0 {
		faults = append(faults, fault.Diagnostic{At: fault.Place{File: nb.file(".")}, Err: err,
			Msg: fmt.Sprintf("the folder cannot be read: %v", err), Fix: "make it readable"})
	}
	return notes, faults
}

// parse reads the notes, as many at a time as there are processors, so that no
// more than that many trees are held at once.
func (nb *Notebook) parse(notes []*Note) []fault.List {
	faults := make([]fault.List, len(notes))
	var next atomic.Int64
	var wg sync.WaitGroup
	for range min(runtime.GOMAXPROCS(0), len(notes)) {
		wg.Go(func() {
			for i := int(next.Add(1)) - 1; i < len(notes); i = int(next.Add(1)) - 1 {
				faults[i] = nb.read(notes[i])
			}
		})
	}
	wg.Wait()
	return faults
}

func (nb *Notebook) read(n *Note) fault.List {
	source, err := fs.ReadFile(nb.FS, n.Path)
	if err != nil {
		n.unread = true
		return fault.List{{At: fault.Place{File: nb.file(n.Path)}, Err: err,
			Msg: fmt.Sprintf("the note cannot be read: %v", err), Fix: "make it readable, or name it in leave-out"}}
	}
	return n.parse(source, nb.file(n.Path))
}

// front holds index.md to text: the contents page has no place for blocks.
func (nb *Notebook) front() (faults fault.List) {
	if nb.Front == nil {
		return nil
	}
	if nb.Front.Title == nb.Front.Name && nb.Settings.Title != "" {
		nb.Front.Title = nb.Settings.Title
	}
	for _, b := range nb.Front.Blocks {
		faults = append(faults, fault.Diagnostic{At: b.At, Block: b.Label, Msg: "index.md is text for the contents page and takes no blocks",
			Fix: "move the block to a note of its own"})
	}
	return faults
}

// outputs checks that no two pages or files of the site share a path, on disks
// that ignore case too.
func (nb *Notebook) outputs() (faults fault.List) {
	owner := map[string]string{"index.html": "the contents page"} // lower-case path of the site to what is written there
	report := func(file, own, other string) {
		faults = append(faults, fault.Diagnostic{At: fault.Place{File: nb.file(file)},
			Msg: fmt.Sprintf("its place in the site, %q, is taken by %s", own, other), Fix: "rename the file"})
	}
	claim := func(file, out string) {
		lower := strings.ToLower(out)
		if other, ok := owner[lower]; ok {
			report(file, out, other)
			return
		}
		owner[lower] = file
	}
	var outs [][2]string
	for _, n := range nb.Notes {
		outs = append(outs, [2]string{n.Path, n.Name + ".html"})
	}
	for _, a := range nb.Assets {
		outs = append(outs, [2]string{a, a})
	}
	for _, o := range outs {
		claim(o[0], o[1])
	}
	for _, o := range outs { // a folder cannot stand where a file does
		for dir := path.Dir(o[1]); dir != "."; dir = path.Dir(dir) {
			if other, ok := owner[strings.ToLower(dir)]; ok {
				report(o[0], o[1], other)
			}
		}
	}
	return faults
}
