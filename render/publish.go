package render

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"path/filepath"
	"runtime"
	"sync"

	"saddlebook/content"
	"saddlebook/content/fault"
	"saddlebook/render/history"
	"saddlebook/render/site"
	"saddlebook/render/study"
)

// Published is the outcome of a publish.
type Published struct {
	Faults fault.List
	Broken bool // a source is wrong: nothing was written
	Tally  Tally
	Site   site.Report
	To     string
	Note   error // a trouble that cost time and no result: the cache could not be written
}

// Summary words the outcome on one line.
func (p Published) Summary() string {
	if p.Site.Unchanged {
		return fmt.Sprintf("%s: nothing changed; %s", p.To, p.Tally)
	}
	return fmt.Sprintf("%s: %s written, %d kept, %d removed; %s", p.To, count(p.Site.Written, "file"), p.Site.Kept, p.Site.Removed, p.Tally)
}

// Target is where the site of a source goes when nothing else is said.
func (src Source) Target() string {
	return filepath.Join(src.Folder, content.Published)
}

// Publish writes the site of a notebook, all or nothing.
func Publish(ctx context.Context, src Source, to string, o Options) (Published, error) {
	if to == "" {
		to = src.Target()
	}
	out := Published{To: to}
	s, faults, err := open(ctx, src, o)
	if err != nil {
		return out, err
	}
	out.Faults = faults
	if out.Broken = faults.Failed(); out.Broken {
		return out, nil
	}
	out.Note = s.CacheError
	out.Tally = tally(s)
	out.Faults = append(out.Faults, claimFaults(s)...)
	out.Faults.Sort()
	revision := src.revision(ctx, to) // before the stage puts its lock beside the target
	stage, err := site.Begin(to)
	if err != nil {
		return out, err
	}
	defer stage.Abandon()
	if err := writeSite(ctx, s, revision, stage, o); err != nil {
		return out, err
	}
	if out.Site, err = stage.Commit(); err != nil {
		return out, err
	}
	return out, nil
}

// revision is that of the notebook in git; "" for the embedded one, which is
// that of the program.
func (src Source) revision(ctx context.Context, target string) string {
	if src.Embedded {
		return ""
	}
	without := content.Published
	folder, err1 := filepath.Abs(src.Folder)
	site, err2 := filepath.Abs(target)
	if err1 == nil && err2 == nil {
		if rel, err := filepath.Rel(folder, site); err == nil && filepath.IsLocal(rel) {
			without = filepath.ToSlash(rel)
		}
	}
	return history.Of(ctx, folder, without).String()
}

// writeSite hands every page and file to the stage, several at once.
func writeSite(ctx context.Context, s *study.Study, revision string, stage *site.Stage, o Options) error {
	p, err := newPress(s, revision)
	if err != nil {
		return err
	}
	var works []func() error
	for _, n := range s.Book.Notes {
		works = append(works, func() error { return p.note(n, stage) })
	}
	for _, a := range s.Book.Assets {
		works = append(works, func() error {
			data, err := fs.ReadFile(s.Book.FS, a)
			if err != nil {
				return err
			}
			return stage.Write(a, data)
		})
	}
	works = append(works, func() error { return p.notebookPages(stage) })
	return together(ctx, o.Jobs, works)
}

// together runs the works with at most jobs at once; the first error counts.
func together(ctx context.Context, jobs int, works []func() error) error {
	if jobs <= 0 {
		jobs = runtime.NumCPU()
	}
	jobs = max(1, min(jobs, len(works)))
	next := make(chan func() error)
	errs := make([]error, jobs)
	var group sync.WaitGroup
	for i := range jobs {
		group.Add(1)
		go func() {
			defer group.Done()
			for w := range next {
				if errs[i] == nil {
					errs[i] = w()
				}
			}
		}()
	}
	var stopped error
	for _, w := range works {
		if stopped = ctx.Err(); stopped != nil {
			break
		}
		next <- w
	}
	close(next)
	group.Wait()
	return errors.Join(append(errs, stopped)...)
}
