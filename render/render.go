// Package render turns a notebook into a site, checks it, and lists its
// results. It conducts: content reads, kinetics computes through the block
// kinds, diagram draws, themes dress, site writes.
package render

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path"
	"path/filepath"
	"runtime"

	"saddlebook/content"
	"saddlebook/content/fault"
	"saddlebook/render/study"
)

// A Source is where a notebook is read from.
type Source struct {
	FS       fs.FS
	Name     string // as diagnostics name it; "" for the current folder
	Folder   string // "" for the embedded notebook
	Only     string // a note within it, when one was named
	Embedded bool
}

// ErrNoNotebook says that a named folder holds no notebook.
var ErrNoNotebook = errors.New("no saddlebook.toml here or in a parent folder")

// Locate finds the notebook of a path: the folder or its nearest parent that
// holds saddlebook.toml. An empty path means the current folder, and without a
// notebook there, the embedded one.
func Locate(name string) (Source, error) {
	start := name
	if start == "" {
		start = "."
	}
	info, err := os.Stat(start)
	if errors.Is(err, fs.ErrNotExist) {
		return Source{}, fmt.Errorf("%s: there is no such file or folder; name one that exists", name)
	}
	if err != nil {
		return Source{}, err
	}
	dir := start
	if !info.IsDir() {
		dir = filepath.Dir(start)
	}
	for up := dir; ; up = filepath.Join(up, "..") {
		if _, err := os.Stat(filepath.Join(up, "saddlebook.toml")); err == nil {
			return at(up, start, info.IsDir())
		}
		here, err := filepath.Abs(up)
		if err != nil {
			return Source{}, err
		}
		if filepath.Dir(here) == here {
			break
		}
	}
	if name == "" {
		return Source{FS: content.Demo(), Name: "demo", Embedded: true}, nil
	}
	return Source{}, fmt.Errorf("%s: %w; name a folder that holds one, or make one with: saddlebook begin DIR", name, ErrNoNotebook)
}

func at(folder, named string, isDir bool) (Source, error) {
	folder = filepath.Clean(folder)
	root, err := os.OpenRoot(folder) // a link that leads out of the notebook is not followed
	if err != nil {
		return Source{}, err
	}
	src := Source{FS: root.FS(), Folder: folder, Name: filepath.ToSlash(folder)}
	if src.Name == "." {
		src.Name = ""
	}
	if !isDir {
		a, err := filepath.Abs(folder)
		if err != nil {
			return src, err
		}
		b, err := filepath.Abs(named)
		if err != nil {
			return src, err
		}
		rel, err := filepath.Rel(a, b)
		if err != nil {
			return src, err
		}
		src.Only = filepath.ToSlash(rel)
		if path.Ext(src.Only) != ".md" {
			return src, fmt.Errorf("%s is no note; name a Markdown file (.md) or the folder of a notebook", named)
		}
	}
	return src, nil
}

// Options steer an evaluation.
type Options struct {
	Jobs     int  // 0: one for each processor
	Fresh    bool // leave the cache alone
	Progress func(done, total int)
}

// open reads and evaluates a notebook, and checks all that a publish would trip
// over. The study is there whenever the error is nil.
func open(ctx context.Context, src Source, o Options) (*study.Study, fault.List, error) {
	book, faults := content.Open(src.FS, src.Name)
	jobs := o.Jobs
	if jobs <= 0 {
		jobs = runtime.NumCPU()
	}
	so := study.Options{Jobs: jobs, Progress: o.Progress}
	if !o.Fresh {
		if dir := cacheFolder(); dir != "" {
			so.Cache = study.Folder{Path: dir}
		}
	}
	s, more, err := study.Run(ctx, book, so)
	if err != nil {
		return nil, nil, err
	}
	faults = append(faults, more...)
	faults = append(faults, unlaid(s)...)
	faults = append(faults, collisions(s)...)
	if _, err := dress(book); err != nil {
		faults = append(faults, fault.Diagnostic{At: fault.Place{File: path.Join(book.Root, content.SettingsFile)}, Severity: fault.Error, Key: "theme.replace",
			Msg: fmt.Sprintf("the theme cannot be used: %v", err), Fix: "mend the file that stands in for the theme's own, or leave it out", Err: err})
	}
	faults.Sort()
	return s, faults, nil
}

// unlaid tells of blocks that were computed and cannot be shown.
func unlaid(s *study.Study) fault.List {
	var out fault.List
	for _, b := range s.Blocks {
		if !b.Done {
			continue
		}
		sheet, err := lay(b)
		if err == nil {
			_, err = sheet.HTML()
		}
		if err != nil {
			out = append(out, fault.Diagnostic{At: b.Source.At, Severity: fault.Error, Block: b.Source.Label,
				Msg: fmt.Sprintf("the block cannot be shown: %v", err), Fix: "correct what it shows", Err: err})
		}
	}
	return out
}

// cacheFolder is SADDLEBOOK_CACHE, or a folder in the user's cache; "" when
// there is neither, or when SADDLEBOOK_CACHE is "off".
func cacheFolder() string {
	if dir, ok := os.LookupEnv("SADDLEBOOK_CACHE"); ok {
		if dir == "off" {
			return ""
		}
		return dir
	}
	dir, err := os.UserCacheDir()
	if err != nil {
		return ""
	}
	return filepath.Join(dir, "saddlebook")
}
