package main

import (
	"bytes"
	"fmt"
	"os"
	"path/filepath"
	"regexp"
	"strconv"
	"strings"
	"testing"
	"unicode/utf8"
)

// TestWrongNotes audits the notebooks of testdata/wrong, each with the faults
// that its name says. want.txt holds all that must stand on stderr, the folder
// left out of the file names; status holds the exit status where it is not 2.
func TestWrongNotes(t *testing.T) {
	t.Setenv("SADDLEBOOK_CACHE", "off")
	folders, err := filepath.Glob(filepath.Join("testdata", "wrong", "*", "saddlebook.toml"))
	if err != nil {
		t.Fatal(err)
	}
	counts := make([]wrongCount, len(folders))
	t.Run("notebooks", func(t *testing.T) {
		for i, f := range folders {
			dir := filepath.Dir(f)
			t.Run(filepath.Base(dir), func(t *testing.T) {
				t.Parallel()
				counts[i] = auditWrong(t, dir)
			})
		}
	})
	var sum wrongCount
	for _, c := range counts {
		sum.all += c.all
		sum.several += c.several
		sum.nested += c.nested
	}
	if sum.all < 40 || sum.several < 10 || sum.nested < 10 {
		t.Errorf("%d notebooks, %d with several faults, %d in quotes, lists, tables, tabs or CRLF; want 40, 10 and 10 at least", sum.all, sum.several, sum.nested)
	}
}

type wrongCount struct{ all, several, nested int }

// nested finds a block or a reading in a quote, a list or a table, a tab, and a
// line that ends in CRLF.
var nested = regexp.MustCompile("(?m)^[ >]+```toml |^\\|.*\\{=|\t|\r\n")

func auditWrong(t *testing.T, dir string) wrongCount {
	var out, errs bytes.Buffer
	status := run([]string{"audit", dir}, &out, &errs)
	got := strings.ReplaceAll(errs.String(), dir+string(filepath.Separator), "")
	if want := wantedStatus(t, dir); status != want {
		t.Errorf("status %d, want %d", status, want)
	}
	lines := checkDiagnostics(t, dir, got, status)
	golden := filepath.Join(dir, "want.txt")
	if *update {
		if err := os.WriteFile(golden, []byte(got), 0o666); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(golden)
	if err != nil {
		t.Fatal(err)
	}
	if got != string(want) {
		t.Errorf("got\n%s\nwant\n%s", got, want)
	}
	c := wrongCount{all: 1}
	if lines > 1 {
		c.several = 1
	}
	for _, name := range []string{"note.md", "energies.csv"} {
		if source, err := os.ReadFile(filepath.Join(dir, name)); err == nil && nested.Match(source) {
			c.nested = 1
		}
	}
	return c
}

func wantedStatus(t *testing.T, dir string) int {
	text, err := os.ReadFile(filepath.Join(dir, "status"))
	if os.IsNotExist(err) {
		return sourceWrong
	}
	if err != nil {
		t.Fatal(err)
	}
	n, err := strconv.Atoi(strings.TrimSpace(string(text)))
	if err != nil {
		t.Fatal(err)
	}
	return n
}

var diagnostic = regexp.MustCompile(`^([^:]+)(?::(\d+):(\d+))?: (error|warning): (.+); (.+)$`)

// checkDiagnostics holds that each line has a place that is there, a message
// and a remedy, that no two stand at one place, and that they are in order. It
// returns their number.
func checkDiagnostics(t *testing.T, dir, text string, status int) int {
	lines := strings.Split(strings.TrimSuffix(text, "\n"), "\n")
	before, failed := "", false
	for _, line := range lines {
		m := diagnostic.FindStringSubmatch(line)
		if m == nil {
			t.Errorf("no place, message and remedy: %q", line)
			continue
		}
		failed = failed || m[4] == "error"
		row, _ := strconv.Atoi(m[2]) // "" is the whole file
		col, _ := strconv.Atoi(m[3])
		if order := fmt.Sprintf("%s\x00%06d\x00%06d", m[1], row, col); order <= before {
			t.Errorf("not after the line before it, or at the same place: %q", line)
		} else {
			before = order
		}
		checkPlace(t, filepath.Join(dir, m[1]), row, col, m[2] == "")
	}
	if (status == sourceWrong) && !failed || status == good && failed {
		t.Errorf("status %d after\n%s", status, text)
	}
	return len(lines)
}

func checkPlace(t *testing.T, file string, row, col int, whole bool) {
	source, err := os.ReadFile(file)
	if err != nil {
		t.Error(err)
		return
	}
	if whole {
		return
	}
	lines := bytes.Split(bytes.TrimPrefix(source, []byte("\ufeff")), []byte("\n"))
	if row < 1 || row > len(lines) {
		t.Errorf("%s has no line %d", file, row)
		return
	}
	length := utf8.RuneCount(bytes.TrimSuffix(lines[row-1], []byte("\r")))
	if col < 1 || col > length+1 {
		t.Errorf("line %d of %s has %d characters and no column %d", row, file, length, col)
	}
}
