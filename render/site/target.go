package site

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path"
	"path/filepath"
	"strings"
	"syscall"
)

// places are the paths of one publish.
type places struct {
	name                 string // the target as the user wrote it
	target, parent       string // absolute
	stage, old, lockFile string // beside the target
}

// resolve finds the target and the names beside it. A link to a folder is
// followed, so that staging happens on the file system of the folder.
func resolve(name string) (places, error) {
	p := places{name: name}
	if name == "" {
		return p, &refusal{what: `""`, why: "the folder to publish to has no name", fix: "name one"}
	}
	full, err := filepath.Abs(name)
	if err != nil {
		return p, fmt.Errorf("%s: %w", name, err)
	}
	switch real, err := filepath.EvalSymlinks(full); {
	case err == nil:
		info, err := os.Stat(real)
		if err != nil {
			return p, err
		}
		if !info.IsDir() {
			return p, &refusal{what: name, why: "this is a file, not a folder", fix: "name a folder to publish to"}
		}
		full = real
	case errors.Is(err, fs.ErrNotExist):
		if info, err := os.Lstat(full); err == nil && info.Mode()&fs.ModeSymlink != 0 {
			return p, &refusal{what: name, why: "this is a link to something that does not exist", fix: "remove the link, or make the folder it points to"}
		}
	case errors.Is(err, syscall.ENOTDIR):
		return p, &refusal{what: name, why: "a part of this path is a file, not a folder", fix: "name another folder to publish to", cause: err}
	default:
		return p, err
	}
	p.target, p.parent = full, filepath.Dir(full)
	if p.parent == full {
		return p, &refusal{what: name, why: "nothing can be staged beside the topmost folder", fix: "name a folder within it"}
	}
	beside := func(what string) string { return filepath.Join(p.parent, "."+filepath.Base(full)+".saddlebook-"+what) }
	p.stage, p.old, p.lockFile = beside("stage"), beside("old"), beside("lock")
	return p, nil
}

// makeParent makes the folders above the target and returns the ones it made,
// topmost first.
func (p places) makeParent() (made []string, err error) {
	for dir := p.parent; ; dir = filepath.Dir(dir) {
		if _, err := os.Stat(dir); err == nil || !errors.Is(err, fs.ErrNotExist) {
			break
		}
		made = append([]string{dir}, made...)
	}
	return made, p.besides(os.MkdirAll(p.parent, 0o777))
}

// besides turns the errors of a folder that cannot be staged beside into a
// refusal with the reason.
func (p places) besides(err error) error {
	var why, fix string
	switch {
	case err == nil:
		return nil
	case errors.Is(err, fs.ErrPermission):
		why = fmt.Sprintf("nothing can be staged beside this folder: no permission to write in %q (%v)", p.parent, err)
		fix = "grant it, or publish to another folder"
	case errors.Is(err, syscall.EROFS):
		why = fmt.Sprintf("nothing can be staged beside this folder: %q is on a read-only file system", p.parent)
		fix = "publish to another folder"
	case errors.Is(err, syscall.EBUSY), errors.Is(err, syscall.EXDEV):
		why = fmt.Sprintf("the system cannot rename this folder (%v)", err)
		fix = "publish to a folder within it, or to another one"
	default:
		return err
	}
	return &refusal{what: p.name, why: why, fix: fix, cause: err}
}

// standing is what a target holds.
type standing struct {
	exists bool
	files  map[string]bool // listed and there
	list   []byte          // the list as it is, nil if there is none
}

// survey lists the target and refuses it when it holds something that this
// program did not write.
func (p places) survey() (standing, error) {
	at := standing{files: map[string]bool{}}
	if _, err := os.Lstat(p.target); errors.Is(err, fs.ErrNotExist) {
		return at, nil
	} else if err != nil {
		return at, err
	}
	at.exists = true
	listed, err := p.readList(&at)
	if err != nil {
		return at, err
	}
	folders := map[string]bool{".": true}
	for f := range listed {
		for dir := path.Dir(f); !folders[dir]; dir = path.Dir(dir) {
			folders[dir] = true
		}
	}
	var strange []string
	more := 0
	note := func(what string) {
		if len(strange) < 3 {
			strange = append(strange, what)
		} else {
			more++
		}
	}
	err = filepath.WalkDir(p.target, func(full string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		rel, err := filepath.Rel(p.target, full)
		if err != nil {
			return err
		}
		rel = filepath.ToSlash(rel)
		_, known := listed[rel]
		switch {
		case d.IsDir():
			if !folders[rel] {
				note(fmt.Sprintf("the folder %q", rel))
				return fs.SkipDir
			}
		case d.Type()&fs.ModeSymlink != 0:
			note(fmt.Sprintf("the link %q", rel))
		case !d.Type().IsRegular():
			note(fmt.Sprintf("the special file %q", rel))
		case known:
			at.files[rel] = true
		case rel != ListName:
			note(fmt.Sprintf("%q", rel))
		}
		return nil
	})
	if err != nil {
		return at, err
	}
	if len(strange) == 0 {
		return at, nil
	}
	found := strings.Join(strange, ", ")
	if more > 0 {
		found += fmt.Sprintf(" and %d more", more)
	}
	r := &refusal{what: p.name, why: "this folder holds what this program did not write: " + found,
		fix: "move that elsewhere, or publish to another folder"}
	if at.list == nil {
		r.why = "this folder holds files and no list of a site (" + ListName + "), so this program did not write them: " + found
		r.fix = "publish to a new or an empty folder"
	}
	return at, r
}

// readList reads the list of the site that stands in the target, if there is one.
func (p places) readList(at *standing) (map[string]digest, error) {
	full := filepath.Join(p.target, ListName)
	info, err := os.Lstat(full)
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return nil, nil
	case err != nil:
		return nil, err
	case !info.Mode().IsRegular():
		return nil, &refusal{what: p.name, why: fmt.Sprintf("%q in this folder is not a plain file", ListName), fix: "publish to another folder"}
	}
	if at.list, err = os.ReadFile(full); err != nil {
		return nil, err
	}
	listed, err := parseList(at.list)
	if err != nil {
		return nil, &refusal{what: p.name, why: fmt.Sprintf("the list of this site, %q, is damaged: %v", ListName, err),
			fix: "restore it, or publish to a new or an empty folder", cause: err}
	}
	return listed, nil
}
