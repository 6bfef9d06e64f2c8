package render

import (
	"bytes"
	"fmt"
	"go/ast"
	"go/parser"
	"go/printer"
	"go/token"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

// seams are the declarations that the packages meet at. DEVELOPERS.md lists
// their signatures, and TestSeams holds it to the code.
var seams = []struct {
	title, pkg string
	names      []string // types come with their exported methods
}{
	{"Diagnostics", "content/fault", []string{"Place", "Severity", "Diagnostic", "List", "Problem", "Problems"}},
	{"Quantities", "kinetics/unit", []string{"Dim", "Unit", "Quantity", "Form", "Error", "Lookup", "Must", "Known", "Parse", "Bare", "ParseRatio",
		"RateConstant", "EquilibriumConstant", "Print", "PrintBare", "Fixed", "Digits", "Percent", "Ratio", "RatioToOne", "Span"}},
	{"Sources", "content", []string{"Notebook", "Settings", "Note", "Piece", "Block", "Reading", "Link", "Heading", "Open"}},
	{"Field lists", "content/schema", []string{"Node", "Parse", "Field", "Decode", "Check", "Group", "Bound", "NamedAmount", "Nearest", "Reference", "JSONSchema"}},
	{"Mechanism and network", "kinetics", []string{"Term", "Species", "Step", "Law", "Constant", "StatedK", "Common", "Mechanism", "Complaint", "ParseReaction", "ParseSum",
		"Network", "Reaction", "Limit", "Limits", "Composition", "Level"}},
	{"Sampling", "kinetics/spread", []string{"Case", "Plan", "Part", "Sample", "Interval", "Quantiles"}},
	{"Runs", "kinetics/course", []string{"Simulate", "Prepare", "Plan", "Run", "Leg", "Dose", "Removal", "Until", "Product", "Course", "Point", "Pair", "Warming", "Heat", "HeatData", "HeatPoint"}},
	{"What decides", "kinetics/control", []string{"Analyse", "Steady", "Problem", "Result", "State", "Order", "Cycle", "Level", "Pair", "PointError"}},
	{"Block kinds and results", "render/kind", []string{"Kind", "Register", "Ref", "Inputs", "Draws", "Draw", "Gift", "Key", "Number", "Result", "Sampler", "Finding", "Standing"}},
	{"Scenes", "diagram", []string{"Scene", "Role", "Mark", "Line", "Curve", "Box", "Dot", "Words", "Group", "Profile", "ProfilePath", "ProfilePoint", "Bars", "BarGroup", "Bar",
		"SignedBars", "SignedGroup", "SignedBar", "TimeCourse", "TimeLine", "TimePoint", "TimeNode", "TimeMark",
		"ProfileBarrier", "ProfileSpan", "Picture", "Image", "ContourMap", "MapLevel", "MapPoint", "MapRegion", "OverTemperature", "TempLine", "TempPoint", "TempMark", "TempCross",
		"StraightPlot", "StraightPoint", "StraightBand", "Network", "NetworkNode", "NetworkStep", "NetworkTerm"}},
	{"Page parts", "render/paper", []string{"Block", "Sheet", "New", "Value", "Table", "Column", "Cell", "Figure", "ClaimRow", "Data"}},
}

const (
	seamsBegin = "<!-- seams: written by go test ./render -run Seams -update -->\n"
	seamsEnd   = "<!-- end of seams -->\n"
)

func TestSeams(t *testing.T) {
	const file = "../DEVELOPERS.md"
	data, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	before, rest, ok1 := strings.Cut(string(data), seamsBegin)
	was, after, ok2 := strings.Cut(rest, seamsEnd)
	if !ok1 || !ok2 {
		t.Fatal("the marks of the seams are missing from DEVELOPERS.md")
	}
	var want strings.Builder
	for _, s := range seams {
		fmt.Fprintf(&want, "\n### %s (`%s`)\n\n```go\n%s```\n", s.title, s.pkg, declarations(t, s.pkg, s.names))
	}
	want.WriteString("\n")
	if was == want.String() {
		return
	}
	if !*update {
		t.Fatal("the seams in DEVELOPERS.md are not those of the code; run go test ./render -run Seams -update and read the change")
	}
	if err := os.WriteFile(file, []byte(before+seamsBegin+want.String()+seamsEnd+after), 0o666); err != nil {
		t.Fatal(err)
	}
}

// declarations prints the named declarations of a package, without bodies.
func declarations(t *testing.T, pkg string, names []string) string {
	t.Helper()
	fset := token.NewFileSet()
	files, err := filepath.Glob("../" + pkg + "/*.go")
	if err != nil {
		t.Fatal(err)
	}
	types, funcs, methods := map[string]string{}, map[string]string{}, map[string][]string{}
	for _, name := range files {
		if strings.HasSuffix(name, "_test.go") {
			continue
		}
		f, err := parser.ParseFile(fset, name, nil, parser.ParseComments)
		if err != nil {
			t.Fatal(err)
		}
		for _, d := range f.Decls {
			switch d := d.(type) {
			case *ast.GenDecl:
				for _, spec := range d.Specs {
					if ts, ok := spec.(*ast.TypeSpec); ok {
						unexported(ts)
						types[ts.Name.Name] = printed(t, fset, &ast.GenDecl{Tok: token.TYPE, Specs: []ast.Spec{ts}})
					}
				}
			case *ast.FuncDecl:
				if !d.Name.IsExported() {
					continue
				}
				text := printed(t, fset, &ast.FuncDecl{Recv: d.Recv, Name: d.Name, Type: d.Type})
				if d.Recv == nil {
					funcs[d.Name.Name] = text
				} else {
					on := receiver(d.Recv.List[0].Type)
					methods[on] = append(methods[on], text)
				}
			}
		}
	}
	var out strings.Builder
	for _, n := range names {
		text, ok := types[n]
		if !ok {
			text, ok = funcs[n]
		}
		if !ok {
			t.Errorf("package %s has no %s", pkg, n)
		}
		out.WriteString(text + "\n")
		slices.Sort(methods[n])
		for _, m := range methods[n] {
			out.WriteString(m + "\n")
		}
	}
	return out.String()
}

// unexported drops the fields of a struct that only its package sees, and doc
// comments above fields, which the code has.
func unexported(ts *ast.TypeSpec) {
	ts.Doc = nil
	st, ok := ts.Type.(*ast.StructType)
	if !ok {
		return
	}
	var kept []*ast.Field
	for _, f := range st.Fields.List {
		f.Doc = nil
		if len(f.Names) == 0 || f.Names[0].IsExported() {
			kept = append(kept, f)
		}
	}
	st.Fields.List = kept
}

func receiver(e ast.Expr) string {
	switch e := e.(type) {
	case *ast.StarExpr:
		return receiver(e.X)
	case *ast.IndexExpr:
		return receiver(e.X)
	case *ast.Ident:
		return e.Name
	}
	return ""
}

// printed prints a declaration without its place in the file, so that lines
// that were dropped leave no gap.
func printed(t *testing.T, fset *token.FileSet, node any) string {
	t.Helper()
	var b bytes.Buffer
	if err := (&printer.Config{Mode: printer.UseSpaces | printer.TabIndent, Tabwidth: 8}).Fprint(&b, fset, node); err != nil {
		t.Fatal(err)
	}
	var lines []string
	for _, l := range strings.Split(b.String(), "\n") {
		if strings.TrimSpace(l) != "" {
			lines = append(lines, l)
		}
	}
	return strings.Join(lines, "\n")
}
