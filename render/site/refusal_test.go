package site

import (
	"errors"
	"io/fs"
	"os"
	"path/filepath"
	"runtime"
	"slices"
	"strings"
	"testing"
)

// tree lists everything below a folder, with the bytes of plain files.
func tree(t *testing.T, root string) []string {
	t.Helper()
	var out []string
	must(t, filepath.WalkDir(root, func(full string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		line := full + " " + d.Type().String()
		if d.Type().IsRegular() {
			data, err := os.ReadFile(full)
			if err != nil {
				return err
			}
			line += " " + string(data)
		}
		out = append(out, line)
		return nil
	}))
	return out
}

func TestRefusedTargets(t *testing.T) {
	site := map[string][]byte{"index.html": []byte("one"), "notes/a.html": []byte("two")}
	sited := func(more func(t *testing.T, target string)) func(t *testing.T, target string) {
		return func(t *testing.T, target string) {
			publish(t, target, site, quick)
			more(t, target)
		}
	}
	link := func(to, name string) func(t *testing.T, target string) {
		return func(t *testing.T, target string) {
			full := filepath.Join(target, name)
			must(t, os.RemoveAll(full))
			must(t, os.MkdirAll(filepath.Dir(full), 0o777))
			if err := os.Symlink(to, full); err != nil {
				t.Skip("no links here:", err)
			}
		}
	}
	for _, tt := range []struct {
		name, target string
		prepare      func(t *testing.T, target string)
		says         []string
	}{
		{"files and no list", "p", func(t *testing.T, target string) { write(t, filepath.Join(target, "thesis.txt"), "x") },
			[]string{"holds files and no list", `"thesis.txt"`, "publish to a new or an empty folder"}},
		{"folders and no list", "p", func(t *testing.T, target string) { write(t, filepath.Join(target, "raw", "x"), "x") },
			[]string{"no list", `the folder "raw"`}},
		{"a file more", "p", sited(func(t *testing.T, target string) { write(t, filepath.Join(target, "notes", "mine.txt"), "x") }),
			[]string{`did not write: "notes/mine.txt"; move that elsewhere`}},
		{"an empty folder more", "p", sited(func(t *testing.T, target string) { must(t, os.Mkdir(filepath.Join(target, "drafts"), 0o777)) }),
			[]string{`the folder "drafts"`}},
		{"five files more", "p", sited(func(t *testing.T, target string) {
			for _, n := range []string{"e", "d", "c", "b", "a"} {
				write(t, filepath.Join(target, n), "x")
			}
		}), []string{`"a", "b", "c" and 2 more`}},
		{"a link more", "p", sited(link("index.html", "here")), []string{`the link "here"`}},
		{"a listed file turned into a link", "p", sited(link("notes/a.html", "index.html")), []string{`the link "index.html"`}},
		{"a listed folder turned into a link", "p", sited(link("..", "notes")), []string{`the link "notes"`}},
		{"a listed file turned into a folder", "p", sited(func(t *testing.T, target string) {
			must(t, os.Remove(filepath.Join(target, "index.html")))
			must(t, os.Mkdir(filepath.Join(target, "index.html"), 0o777))
		}), []string{`the folder "index.html"`}},
		{"a damaged list", "p", sited(func(t *testing.T, target string) { write(t, filepath.Join(target, ListName), "<<<<<<< ours\n") }),
			[]string{"damaged: line 1", `"<<<<<<< ours"`, "restore it"}},
		{"a list that leaves the folder", "p", sited(func(t *testing.T, target string) {
			write(t, filepath.Join(target, ListName), strings.Repeat("0", 64)+"  ../thesis.txt\n")
		}), []string{`"../thesis.txt" has the part ".."`}},
		{"a list that is a link", "p", sited(link("index.html", ListName)), []string{"not a plain file"}},
		{"a file", "p", func(t *testing.T, target string) { write(t, target, "x") }, []string{"a file, not a folder"}},
		{"below a file", "p/q", func(t *testing.T, target string) { write(t, filepath.Dir(target), "x") }, []string{"is a file, not a folder"}},
		{"a link to nothing", "p", link("nowhere", "."), []string{"a link to something that does not exist"}},
	} {
		t.Run(tt.name, func(t *testing.T) {
			top := t.TempDir()
			target := filepath.Join(top, filepath.FromSlash(tt.target))
			tt.prepare(t, target)
			before := tree(t, top)
			_, err := Begin(target)
			if !errors.Is(err, ErrRefused) || errors.Is(err, ErrBusy) {
				t.Fatalf("got %v, want a refusal", err)
			}
			for _, say := range append(tt.says, target) {
				if !strings.Contains(err.Error(), say) {
					t.Errorf("%q does not say %q", err, say)
				}
			}
			if after := tree(t, top); !slices.Equal(before, after) {
				t.Errorf("touched:\n%v\nwas:\n%v", after, before)
			}
		})
	}
	for _, name := range []string{"", filepath.VolumeName(t.TempDir()) + string(filepath.Separator)} {
		if _, err := Begin(name); !errors.Is(err, ErrRefused) {
			t.Errorf("%q: got %v, want a refusal", name, err)
		}
	}
}

func TestRefusedPaths(t *testing.T) {
	for _, tt := range []struct{ path, says string }{
		{"", "empty"},
		{"/etc/x", "absolute"},
		{"../x", `the part ".."`},
		{"a/../../x", `the part ".."`},
		{"./x", `the part "."`},
		{"a//b", "empty part"},
		{"a/", "empty part"},
		{`a\b`, "backslash"},
		{"a\nb", "control character"},
		{"a\x00b", "control character"},
		{"a\xffb", "not UTF-8"},
		{ListName, "reserved"},
		{strings.ToUpper(ListName), "reserved"},
		{ListName + "/x", "reserved"},
		{"twice.html", "two files"},
	} {
		t.Run(tt.path, func(t *testing.T) {
			target := filepath.Join(t.TempDir(), "published")
			publish(t, target, release("A"), quick)
			s, err := begin(target, quick)
			must(t, err)
			must(t, s.Write("twice.html", []byte("x")))
			err = s.Write(tt.path, []byte("y"))
			if !errors.Is(err, ErrRefused) || !strings.Contains(err.Error(), tt.says) {
				t.Errorf("got %v", err)
			}
			if _, cerr := s.Commit(); !errors.Is(cerr, ErrRefused) || !strings.Contains(cerr.Error(), tt.says) {
				t.Errorf("the commit after it: got %v", cerr)
			}
			mustHold(t, target, release("A"))
			mustBeAlone(t, target)
		})
	}
}

func TestBusy(t *testing.T) {
	target := filepath.Join(t.TempDir(), "published")
	first, err := begin(target, quick)
	must(t, err)
	_, err = Begin(target)
	if !errors.Is(err, ErrBusy) || !errors.Is(err, ErrRefused) || !strings.Contains(err.Error(), "wait until it has ended") {
		t.Errorf("got %v", err)
	}
	must(t, first.Write("index.html", []byte("first")))
	_, err = first.Commit()
	must(t, err)
	mustHold(t, target, map[string][]byte{"index.html": []byte("first")})
	publish(t, target, release("A"), quick)
}

func TestPutThereMeanwhile(t *testing.T) {
	eachWay(t, func(t *testing.T, with tricks) {
		target := filepath.Join(t.TempDir(), "published")
		publish(t, target, release("A"), with)
		s, err := begin(target, with)
		must(t, err)
		must(t, s.Write("index.html", []byte("other")))
		write(t, filepath.Join(target, "mine.txt"), "x")
		_, err = s.Commit()
		if !errors.Is(err, ErrRefused) || !strings.Contains(err.Error(), `"mine.txt"`) {
			t.Fatalf("got %v", err)
		}
		must(t, os.Remove(filepath.Join(target, "mine.txt")))
		mustHold(t, target, release("A"))
		mustBeAlone(t, target)
	})
}

// A failure of the machine is no refusal, names the path and changes nothing.
func TestMachineFails(t *testing.T) {
	for _, tt := range []struct {
		name, op string
		nth      int
		with     tricks
		ruin     func(target string) error
	}{
		{"the stage cannot be written", "create", 3, tricks{noSync: true}, func(target string) error {
			return os.RemoveAll(filepath.Join(filepath.Dir(target), ".published.saddlebook-stage"))
		}},
		{"a file to keep is gone", "link", 1, tricks{noSync: true}, func(target string) error {
			return os.Remove(filepath.Join(target, "data", "long.csv"))
		}},
		{"the stage is gone before the exchange", "exchange", 1, tricks{noSync: true}, func(target string) error {
			return os.RemoveAll(filepath.Join(filepath.Dir(target), ".published.saddlebook-stage"))
		}},
		{"the stage is gone between the renames", "rename", 2, tricks{noSync: true, noExchange: true}, func(target string) error {
			return os.RemoveAll(filepath.Join(filepath.Dir(target), ".published.saddlebook-stage"))
		}},
	} {
		t.Run(tt.name, func(t *testing.T) {
			if tt.op == "exchange" && runtime.GOOS != "linux" {
				t.Skip("no exchange here")
			}
			target := filepath.Join(t.TempDir(), "published")
			publish(t, target, release("A"), quick)
			with, seen := tt.with, 0
			with.before = func(op string) {
				if op == tt.op {
					if seen++; seen == tt.nth {
						must(t, tt.ruin(target))
					}
				}
			}
			_, err := tryPublish(target, release("B"), with)
			if err == nil || errors.Is(err, ErrRefused) || !strings.Contains(err.Error(), filepath.Dir(target)) {
				t.Fatalf("got %v", err)
			}
			if tt.op == "link" {
				publish(t, target, release("A"), quick)
			}
			mustHold(t, target, release("A"))
			mustBeAlone(t, target)
		})
	}
}
