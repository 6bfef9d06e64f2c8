package main

import (
	"errors"
	"flag"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"testing"

	"github.com/rogpeppe/go-internal/testscript"
)

var update = flag.Bool("update", false, "rewrite the golden files; read the change before it is kept")

func TestMain(m *testing.M) {
	testscript.Main(m, map[string]func(){"saddlebook": main})
}

// TestScripts runs the command line as a user does. Each script has a home and
// a cache of its own.
func TestScripts(t *testing.T) {
	testscript.Run(t, testscript.Params{
		Dir:                 filepath.Join("testdata", "script"),
		RequireExplicitExec: true,
		RequireUniqueNames:  true,
		UpdateScripts:       *update,
		Cmds:                map[string]func(*testscript.TestScript, bool, []string){"status": exitStatus},
		Setup: func(e *testscript.Env) error {
			home := filepath.Join(e.WorkDir, ".home")
			e.Setenv("HOME", home)
			e.Setenv("SADDLEBOOK_CACHE", filepath.Join(home, "cache"))
			return os.Mkdir(home, 0o777)
		},
	})
}

// exitStatus is the script command `status N program arguments...`: the program
// must end with status N. Its output is then there for stdout, stderr and cmp.
func exitStatus(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) < 2 {
		ts.Fatalf("usage: status N program arguments...")
	}
	want, err := strconv.Atoi(args[0])
	ts.Check(err)
	got := 0
	err = ts.Exec(args[1], args[2:]...)
	var exit *exec.ExitError
	switch {
	case errors.As(err, &exit):
		got = exit.ExitCode()
	case err != nil:
		ts.Fatalf("%s: %v", args[1], err)
	}
	if got != want {
		ts.Fatalf("status %d, want %d\nstdout: %s\nstderr: %s", got, want, ts.ReadFile("stdout"), ts.ReadFile("stderr"))
	}
}
