package history

import (
	"context"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
)

func TestRevision(t *testing.T) {
	if _, err := exec.LookPath("git"); err != nil {
		t.Skip("git is not installed")
	}
	ctx, dir := context.Background(), t.TempDir()
	t.Setenv("GIT_CEILING_DIRECTORIES", filepath.Dir(dir))
	if r := Of(ctx, dir, "published"); r.String() != "" {
		t.Errorf("a folder without git has revision %q", r)
	}
	write := func(name, text string) {
		t.Helper()
		file := filepath.Join(dir, name)
		if err := os.MkdirAll(filepath.Dir(file), 0o777); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(file, []byte(text), 0o666); err != nil {
			t.Fatal(err)
		}
	}
	run := func(args ...string) {
		t.Helper()
		args = append([]string{"-c", "user.name=T", "-c", "user.email=t@example.org"}, args...)
		if out, err := git(ctx, dir, args...); err != nil {
			t.Fatalf("git %v: %v %s", args, err, out)
		}
	}
	write("note.md", "# One\n")
	run("init", "-q")
	run("add", ".")
	run("commit", "-q", "-m", "first")
	clean := Of(ctx, dir, "published")
	if clean.Edited || len(clean.Commit) < 40 {
		t.Errorf("after a commit: %+v", clean)
	}
	write("published/index.html", "site")
	if r := Of(ctx, dir, "published"); r != clean {
		t.Errorf("the site counts as a change: %+v", r)
	}
	write("note.md", "# Two\n")
	if r := Of(ctx, dir, "published"); !r.Edited || !strings.Contains(r.String(), "not committed") {
		t.Errorf("an edit is not seen: %+v", r)
	}
}
