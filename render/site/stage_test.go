package site

import (
	"bytes"
	"errors"
	"fmt"
	"io/fs"
	"maps"
	"os"
	"path/filepath"
	"runtime"
	"slices"
	"strings"
	"sync"
	"sync/atomic"
	"testing"
	"time"
)

// release makes the files of an invented site. Between releases a fifth of the
// pages change, some come and some go, and a file becomes a folder.
func release(name string) map[string][]byte {
	files := map[string][]byte{"index.html": []byte("contents"), "empty.css": {}}
	for i := range 200 {
		body := fmt.Sprintf("page %d", i)
		switch {
		case i%5 == 0:
			body += " of release " + name
		case i%7 == 0 && name == "B", i%11 == 0 && name != "B":
			continue
		}
		files[fmt.Sprintf("notes/part-%d/page-%d.html", i%4, i)] = []byte(body)
	}
	files["data/long.csv"] = bytes.Repeat([]byte("0.5,1.25\n"), 8_000)
	tail := bytes.Clone(files["data/long.csv"])
	tail[len(tail)-1] = name[0] // same length, last byte differs
	files["data/tail.csv"] = tail
	if name == "B" {
		files["branch/leaf.html"] = []byte("leaf")
	} else {
		files["branch"] = []byte("a file here, a folder in the other release")
	}
	return files
}

func publish(t *testing.T, target string, files map[string][]byte, with tricks) Report {
	t.Helper()
	r, err := tryPublish(target, files, with)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

func tryPublish(target string, files map[string][]byte, with tricks) (Report, error) {
	s, err := begin(target, with)
	if err != nil {
		return Report{}, err
	}
	defer s.Abandon()
	for _, p := range slices.Sorted(maps.Keys(files)) {
		if err := s.Write(p, files[p]); err != nil {
			return Report{}, err
		}
	}
	return s.Commit()
}

// quick leaves out forcing to disk, which no test here can see.
var quick = tricks{noSync: true}

// difference compares a folder with a release, every byte and every name.
func difference(target string, files map[string][]byte) error {
	want := maps.Clone(files)
	sums := map[string]entry{}
	for p, data := range files {
		sums[p] = entry{sum: sum(data)}
	}
	want[ListName] = formatList(sums)
	err := filepath.WalkDir(target, func(full string, d fs.DirEntry, err error) error {
		if err != nil || d.IsDir() {
			return err
		}
		rel, err := filepath.Rel(target, full)
		if err != nil {
			return err
		}
		rel = filepath.ToSlash(rel)
		data, err := os.ReadFile(full)
		if err != nil {
			return err
		}
		right, ok := want[rel]
		switch {
		case !ok:
			return fmt.Errorf("%s is too much", rel)
		case !bytes.Equal(data, right):
			return fmt.Errorf("%s has other bytes", rel)
		}
		delete(want, rel)
		return nil
	})
	if err == nil && len(want) > 0 {
		err = fmt.Errorf("%d files are missing, such as %s", len(want), slices.Sorted(maps.Keys(want))[0])
	}
	return err
}

func mustHold(t *testing.T, target string, files map[string][]byte) {
	t.Helper()
	if err := difference(target, files); err != nil {
		t.Fatal(err)
	}
}

// mustBeAlone checks that nothing stands beside the target.
func mustBeAlone(t *testing.T, target string) {
	t.Helper()
	entries, err := os.ReadDir(filepath.Dir(target))
	if err != nil {
		t.Fatal(err)
	}
	for _, e := range entries {
		if e.Name() != filepath.Base(target) {
			t.Fatalf("left beside the target: %s", e.Name())
		}
	}
}

func write(t *testing.T, name, text string) {
	t.Helper()
	if err := os.MkdirAll(filepath.Dir(name), 0o777); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(name, []byte(text), 0o666); err != nil {
		t.Fatal(err)
	}
}

func must(t *testing.T, err error) {
	t.Helper()
	if err != nil {
		t.Fatal(err)
	}
}

func mustStat(t *testing.T, name string) fs.FileInfo {
	t.Helper()
	info, err := os.Lstat(name)
	must(t, err)
	return info
}

// eachWay runs a test in every way a site can be put in place.
func eachWay(t *testing.T, test func(t *testing.T, with tricks)) {
	for _, way := range []struct {
		name string
		with tricks
	}{
		{"as the system can", tricks{}},
		{"without exchange", tricks{noExchange: true, noSync: true}},
		{"without links", tricks{noLinks: true, noSync: true}},
		{"without either", tricks{noExchange: true, noLinks: true, noSync: true}},
	} {
		t.Run(way.name, func(t *testing.T) { test(t, way.with) })
	}
}

func TestPublishThereAndBack(t *testing.T) {
	eachWay(t, func(t *testing.T, with tricks) {
		target := filepath.Join(t.TempDir(), "published")
		a, b := release("A"), release("B")
		r := publish(t, target, a, with)
		if r.Written != len(a) || r.Kept != 0 || r.Removed != 0 || r.Unchanged || len(r.Changed) != len(a) {
			t.Fatalf("first publish: %+v", r)
		}
		mustHold(t, target, a)
		mustBeAlone(t, target)

		long := time.Date(2020, 2, 3, 4, 5, 6, 123456700, time.UTC)
		before := map[string]fs.FileInfo{}
		for p := range a {
			full := filepath.Join(target, filepath.FromSlash(p))
			must(t, os.Chtimes(full, long, long))
			before[p] = mustStat(t, full)
		}
		for _, step := range []map[string][]byte{b, a} {
			r := publish(t, target, step, with)
			if r.Written+r.Kept != len(step) || r.Written == 0 || r.Kept == 0 || r.Removed == 0 || r.Unchanged || !slices.IsSorted(r.Changed) {
				t.Fatalf("%+v", r)
			}
			mustHold(t, target, step)
			mustBeAlone(t, target)
		}
		same := 0
		for p, data := range a {
			if !bytes.Equal(b[p], data) || p == "branch" {
				continue
			}
			same++
			now := mustStat(t, filepath.Join(target, filepath.FromSlash(p)))
			if !now.ModTime().Equal(before[p].ModTime()) {
				t.Errorf("%s: time %v, was %v", p, now.ModTime(), before[p].ModTime())
			}
			if os.SameFile(now, before[p]) == with.noLinks {
				t.Errorf("%s: same file is %v", p, !with.noLinks)
			}
		}
		if same < 50 {
			t.Fatalf("only %d files are the same in both releases", same)
		}
	})
}

func TestNothingChangedTouchesNothing(t *testing.T) {
	target := filepath.Join(t.TempDir(), "published")
	a := release("A")
	publish(t, target, a, quick)
	long := time.Date(2020, 2, 3, 4, 5, 6, 0, time.UTC)
	must(t, os.Chtimes(target, long, long))
	before := mustStat(t, target)
	var done []string
	r := publish(t, target, a, tricks{before: func(op string) { done = append(done, op) }})
	if !r.Unchanged || r.Kept != len(a) || r.Written != 0 || r.Removed != 0 || r.Changed != nil {
		t.Errorf("%+v", r)
	}
	if len(done) > 0 {
		t.Errorf("operations on the disk: %v", done)
	}
	after := mustStat(t, target)
	if !os.SameFile(before, after) || !after.ModTime().Equal(long) {
		t.Error("the folder was replaced or touched")
	}
	mustHold(t, target, a)
	mustBeAlone(t, target)
}

func TestWhatStandsThere(t *testing.T) {
	site := map[string][]byte{"index.html": []byte("one"), "notes/a.html": []byte("two")}
	for _, tt := range []struct {
		name    string
		prepare func(t *testing.T, target string)
		changed []string // nil: unchanged
	}{
		{"the site itself", func(*testing.T, string) {}, nil},
		{"a file changed by hand, same length", func(t *testing.T, target string) {
			write(t, filepath.Join(target, "index.html"), "ONE")
		}, []string{"index.html"}},
		{"a file deleted by hand", func(t *testing.T, target string) {
			must(t, os.RemoveAll(filepath.Join(target, "notes", "a.html")))
		}, []string{"notes/a.html"}},
		{"a folder deleted by hand", func(t *testing.T, target string) {
			must(t, os.RemoveAll(filepath.Join(target, "notes")))
		}, []string{"notes/a.html"}},
		{"an empty folder", func(t *testing.T, target string) {
			must(t, os.RemoveAll(target))
			must(t, os.Mkdir(target, 0o777))
		}, []string{"index.html", "notes/a.html"}},
		{"nothing", func(t *testing.T, target string) {
			must(t, os.RemoveAll(target))
		}, []string{"index.html", "notes/a.html"}},
		{"line ends of the list turned", func(t *testing.T, target string) {
			list := filepath.Join(target, ListName)
			data, err := os.ReadFile(list)
			must(t, err)
			write(t, list, strings.ReplaceAll(string(data), "\n", "\r\n"))
		}, []string{}},
	} {
		t.Run(tt.name, func(t *testing.T) {
			target := filepath.Join(t.TempDir(), "published")
			publish(t, target, site, quick)
			tt.prepare(t, target)
			r := publish(t, target, site, quick)
			if !slices.Equal(r.Changed, tt.changed) || r.Unchanged != (tt.changed == nil) || r.Kept != len(site)-len(tt.changed) {
				t.Errorf("%+v", r)
			}
			mustHold(t, target, site)
			mustBeAlone(t, target)
		})
	}
}

func TestPermissionBitsStay(t *testing.T) {
	if runtime.GOOS == "windows" {
		t.Skip("no such bits there")
	}
	target := filepath.Join(t.TempDir(), "published")
	publish(t, target, release("A"), quick)
	bits := map[string]fs.FileMode{".": 0o750, "notes": 0o710, "notes/part-0": 0o555, "notes/part-0/page-0.html": 0o640}
	for p, m := range bits {
		must(t, os.Chmod(filepath.Join(target, p), m))
	}
	publish(t, target, release("B"), quick)
	bits["notes/part-0"] = 0o755 // the owner must be able to remove it
	for p, m := range bits {
		if got := mustStat(t, filepath.Join(target, p)).Mode().Perm(); got != m {
			t.Errorf("%s: %v, want %v", p, got, m)
		}
	}
	mustHold(t, target, release("B"))
	mustBeAlone(t, target)
}

func TestThroughALink(t *testing.T) {
	real := filepath.Join(t.TempDir(), "real")
	must(t, os.Mkdir(real, 0o777))
	link := filepath.Join(t.TempDir(), "published")
	if err := os.Symlink(real, link); err != nil {
		t.Skip("no links here:", err)
	}
	for _, v := range []string{"A", "B"} {
		publish(t, link, release(v), quick)
		mustHold(t, real, release(v))
	}
	if mustStat(t, link).Mode()&fs.ModeSymlink == 0 {
		t.Error("the link was replaced")
	}
	mustBeAlone(t, real)
	mustBeAlone(t, link)
}

func TestFromManyGoroutines(t *testing.T) {
	target := filepath.Join(t.TempDir(), "deep", "er", "published")
	for _, v := range []string{"A", "B", "A"} {
		s, err := begin(target, quick)
		must(t, err)
		var wg sync.WaitGroup
		var wrong atomic.Int32
		files := release(v)
		for p, data := range files {
			wg.Go(func() {
				if s.Write(p, data) != nil {
					wrong.Add(1)
				}
			})
		}
		wg.Wait()
		_, err = s.Commit()
		must(t, err)
		if wrong.Load() > 0 {
			t.Fatal("a write failed")
		}
		mustHold(t, target, files)
		mustBeAlone(t, target)
	}
}

func TestAbandonLeavesNothing(t *testing.T) {
	top := filepath.Join(t.TempDir(), "top")
	for _, standing := range []bool{false, true} {
		target := filepath.Join(top, "in", "published")
		if standing {
			publish(t, target, release("A"), quick)
		}
		s, err := begin(target, quick)
		must(t, err)
		must(t, s.Write("index.html", []byte("other")))
		must(t, s.Abandon())
		must(t, s.Abandon())
		if _, err := s.Commit(); err == nil {
			t.Error("a commit after the end succeeded")
		}
		if err := s.Write("more.html", nil); err == nil {
			t.Error("a write after the end succeeded")
		}
		if standing {
			mustHold(t, target, release("A"))
			mustBeAlone(t, target)
		} else if _, err := os.Lstat(top); !errors.Is(err, fs.ErrNotExist) {
			t.Error("the folders above the target were left")
		}
	}
}
