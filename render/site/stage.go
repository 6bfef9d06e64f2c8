package site

import (
	"bytes"
	"crypto/sha256"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"slices"
	"sync"

	"github.com/gofrs/flock"
)

// A Stage is a site in the making. It holds the lock of its target until
// Commit or Abandon.
type Stage struct {
	places
	tricks
	lockHeld *flock.Flock
	made     []string // folders made above the target
	was      standing // the target as it was found

	folders struct {
		sync.Mutex
		made map[string]bool // of the stage, by slash path; "." is the stage
	}
	mu     sync.Mutex
	files  map[string]entry
	failed error // the first failure of a Write
	ended  bool
}

// entry is a file of the site to come.
type entry struct {
	sum  digest
	kept bool // the target holds the same bytes
}

// A Report says what a publish did. The list of files is not counted.
type Report struct {
	Written   int      // new or different
	Kept      int      // the same bytes as before
	Removed   int      // no longer part of the site
	Changed   []string // the paths written, sorted
	Unchanged bool     // the target was right already and was not touched
}

// Begin locks the target, clears what a killed publish left beside it, and
// refuses a target that it may not replace. The target need not exist; the
// folders above it are made. Errors match ErrRefused, or are the machine's.
func Begin(target string) (*Stage, error) { return begin(target, tricks{}) }

func begin(target string, t tricks) (*Stage, error) {
	p, err := resolve(target)
	if err != nil {
		return nil, err
	}
	s := &Stage{places: p, tricks: t, files: map[string]entry{}}
	s.folders.made = map[string]bool{}
	if s.made, err = p.makeParent(); err != nil {
		return nil, errors.Join(err, s.unmakeParent())
	}
	if s.lockHeld, err = p.lock(); err != nil {
		return nil, errors.Join(p.besides(err), s.unmakeParent())
	}
	if err := s.look(); err != nil {
		s.ended = true
		return nil, errors.Join(err, s.release())
	}
	return s, nil
}

// look makes the surroundings clean and takes stock of the target.
func (s *Stage) look() error {
	if err := s.recoverPlaces(s.tricks); err != nil {
		return fmt.Errorf("clearing what an earlier publish left: %w", s.besides(err))
	}
	var err error
	if s.was, err = s.survey(); err != nil || !s.was.exists {
		return err
	}
	alone, err := apart(s.target, s.parent)
	if err == nil && alone {
		err = &refusal{what: s.name, why: "nothing can be staged beside this folder: it is a file system of its own (a mount point)",
			fix: "publish to a folder within it, or to another one"}
	}
	return err
}

// Write hands over one file: a relative path with slashes, and its bytes, which
// are not kept. It is safe for concurrent use. A path is written once. After an
// error Commit publishes nothing.
func (s *Stage) Write(path string, data []byte) error {
	err := s.write(path, data)
	if err != nil {
		s.mu.Lock()
		defer s.mu.Unlock()
		if s.failed == nil {
			s.failed = err
		}
	}
	return err
}

func (s *Stage) write(path string, data []byte) error {
	if err := checkPath(path); err != nil {
		return err
	}
	if err := s.reserve(path); err != nil {
		return err
	}
	e := entry{sum: sha256.Sum256(data)}
	perm := noPerm
	if s.was.files[path] {
		var err error
		if e.kept, perm, err = holds(s.inTarget(path), data); err != nil {
			return err
		}
	}
	if !e.kept {
		if err := s.put(path, data, perm); err != nil {
			return err
		}
	}
	s.mu.Lock()
	s.files[path] = e
	s.mu.Unlock()
	return nil
}

// reserve takes a path for one file.
func (s *Stage) reserve(path string) error {
	s.mu.Lock()
	defer s.mu.Unlock()
	if s.ended {
		return errEnded
	}
	if _, twice := s.files[path]; twice {
		return &refusal{what: fmt.Sprintf("%q", path), why: "two files of the site have this path", fix: "rename one of them"}
	}
	s.files[path] = entry{}
	return nil
}

var errEnded = errors.New("this publish has ended; begin another")

// Commit publishes what was written, whole, and ends the stage; every Write must
// have returned. On an error the
// target is as it was, unless the error says that the new site stands.
func (s *Stage) Commit() (Report, error) {
	s.mu.Lock()
	if s.ended {
		s.mu.Unlock()
		return Report{}, errEnded
	}
	s.ended = true
	err := s.failed
	s.mu.Unlock()
	if err != nil {
		return Report{}, errors.Join(err, s.clear())
	}
	r := s.report()
	list := formatList(s.files)
	if r.Written == 0 && r.Removed == 0 && s.was.exists && bytes.Equal(list, s.was.list) {
		r.Unchanged = true
		return r, s.clear()
	}
	done, err := s.publish(list)
	if !done {
		return Report{}, errors.Join(err, s.clear())
	}
	if err = errors.Join(err, s.clear()); err != nil {
		err = fmt.Errorf("%s: the new site stands, but its surroundings could not be cleared: %w", s.name, err)
	}
	return r, err
}

func (s *Stage) report() Report {
	var r Report
	for p, e := range s.files {
		if e.kept {
			r.Kept++
		} else {
			r.Changed = append(r.Changed, p)
		}
	}
	slices.Sort(r.Changed)
	r.Written = len(r.Changed)
	for p := range s.was.files {
		if _, stays := s.files[p]; !stays {
			r.Removed++
		}
	}
	return r
}

// publish completes the stage and puts it in place.
func (s *Stage) publish(list []byte) (done bool, err error) {
	if err := s.makeFolder("."); err != nil {
		return false, err
	}
	kept := make([]string, 0, len(s.files))
	for p, e := range s.files {
		if e.kept {
			kept = append(kept, p)
		}
	}
	slices.Sort(kept)
	for _, p := range kept {
		if err := s.carry(p); err != nil {
			return false, err
		}
	}
	if err := s.put(ListName, list, noPerm); err != nil {
		return false, err
	}
	if err := s.settle(); err != nil {
		return false, err
	}
	// Something may have been put there while we worked.
	now, err := s.survey()
	if err != nil {
		return false, err
	}
	return s.takePlace(now.exists, s.tricks)
}

// settle forces to disk what a power cut must not take: the list, without which
// the target would be refused, and when a site is to be replaced, the new one.
func (s *Stage) settle() error {
	if s.noSync {
		return nil
	}
	s.at("sync")
	// Windows flushes only what was opened for writing.
	list, err := os.OpenFile(s.inStage(ListName), os.O_RDWR, 0)
	if err != nil {
		return err
	}
	err = list.Sync()
	if cerr := list.Close(); err == nil {
		err = cerr
	}
	if err != nil || s.was.list == nil {
		return err
	}
	return settle(s.stage)
}

// Abandon ends the stage and leaves the target as it was. After Commit it does
// nothing, so it may be deferred.
func (s *Stage) Abandon() error {
	s.mu.Lock()
	defer s.mu.Unlock()
	if s.ended {
		return nil
	}
	s.ended = true
	return s.clear()
}

// clear removes what is at the place of the stage and gives the lock back.
func (s *Stage) clear() error {
	return errors.Join(discard(s.stage, s.tricks), s.release())
}

func (s *Stage) release() error {
	return errors.Join(s.unlock(s.lockHeld), s.unmakeParent())
}

// unmakeParent removes the folders made above the target as far as they are
// empty.
func (s *Stage) unmakeParent() error {
	for _, dir := range slices.Backward(s.made) {
		entries, err := os.ReadDir(dir)
		switch {
		case errors.Is(err, fs.ErrNotExist):
			continue
		case err != nil:
			return err
		case len(entries) > 0:
			return nil
		}
		if err := os.Remove(dir); err != nil && !errors.Is(err, fs.ErrNotExist) {
			return err
		}
	}
	return nil
}
