package render_test

import (
	"go/parser"
	"go/token"
	"io/fs"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
)

// allowed lists, for each package of ours, which packages of ours it may
// import. A name stands for the package and all below it; within one top
// folder everything is allowed unless a line says otherwise.
var allowed = map[string][]string{
	"cmd":                 {"render", "content/fault"},
	"content":             {"content", "kinetics/unit"},
	"content/fault":       {},
	"diagram":             {"diagram", "kinetics/unit"},
	"diagram/lettering":   {},
	"diagram/skeleton":    {"diagram/lettering"},
	"kinetics":            {"kinetics"},
	"kinetics/unit":       {},
	"kinetics/rate":       {},
	"kinetics/branch":     {},
	"kinetics/spread":     {},
	"kinetics/firstorder": {},
	"kinetics/stiff":      {"kinetics/stiff"},
	"render":              {"render", "content", "kinetics", "diagram", "themes"},
	"render/kind":         {"content/fault", "content/schema", "kinetics", "diagram", "render/paper"},
	"render/history":      {},
	"render/paper":        {"diagram", "kinetics/unit"},
	"render/site":         {},
	"render/study":        {"content", "kinetics", "render/kind"},
	"themes":              {},
}

// only says which outside module belongs to which package alone.
var only = map[string]string{
	"github.com/yuin/goldmark":   "content/mark",
	"github.com/ajstarks/svgo":   "diagram/ink",
	"github.com/BurntSushi/toml": "content/schema",
	"github.com/go-fonts":        "diagram/lettering",
	"github.com/gofrs/flock":     "render/site",
	"github.com/spf13/cobra":     "cmd/saddlebook",
	"golang.org/x/image":         "diagram/lettering",
}

func TestImports(t *testing.T) {
	root := ".."
	seen := 0
	err := filepath.WalkDir(root, func(p string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		if d.IsDir() && (strings.HasPrefix(d.Name(), ".") && p != root || d.Name() == "testdata") {
			return fs.SkipDir
		}
		if d.IsDir() || !strings.HasSuffix(p, ".go") || strings.HasSuffix(p, "_test.go") {
			return nil
		}
		rel, err := filepath.Rel(root, filepath.Dir(p))
		if err != nil {
			return err
		}
		pkg := filepath.ToSlash(rel)
		file, err := parser.ParseFile(token.NewFileSet(), p, nil, parser.ImportsOnly)
		if err != nil {
			return err
		}
		seen++
		for _, spec := range file.Imports {
			path, err := strconv.Unquote(spec.Path.Value)
			if err != nil {
				return err
			}
			if ours, ok := strings.CutPrefix(path, "saddlebook/"); ok {
				if !within(rule(pkg), ours) {
					t.Errorf("%s imports %s, and %s may import %v", p, path, pkg, rule(pkg))
				}
				continue
			}
			for module, owner := range only {
				if (path == module || strings.HasPrefix(path, module+"/")) && pkg != owner {
					t.Errorf("%s imports %s, which belongs to %s alone", p, path, owner)
				}
			}
		}
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	if seen < 50 {
		t.Fatalf("only %d files were looked at", seen)
	}
}

// rule finds the line of the package, or of the nearest folder above it.
func rule(pkg string) []string {
	for p := pkg; p != "."; p = filepath.ToSlash(filepath.Dir(p)) {
		if list, ok := allowed[p]; ok {
			return list
		}
	}
	return nil
}

func within(list []string, pkg string) bool {
	for _, l := range list {
		if pkg == l || strings.HasPrefix(pkg, l+"/") {
			return true
		}
	}
	return false
}
