package skeleton

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// v2 writes a molfile of version V2000 from atoms (x, y, symbol and what follows it in the
// columns from 35) and bonds.
func v2(atoms []string, bonds []string, properties ...string) string {
	lines := []string{"test", "  invented", "", fmt.Sprintf("%3d%3d  0  0  0  0            999 V2000", len(atoms), len(bonds))}
	lines = append(lines, atoms...)
	lines = append(lines, bonds...)
	lines = append(lines, properties...)
	return strings.Join(append(lines, "M  END", ""), "\n")
}

func at(x, y float64, symbol string) string {
	return fmt.Sprintf("%10.4f%10.4f%10.4f %-3s", x, y, 0.0, symbol)
}

var ethanol = []string{at(0, 0, "C"), at(0.866, 0.5, "C"), at(1.732, 0, "O")}

func testFiles(t testing.TB) map[string]string {
	files, err := filepath.Glob("testdata/*.mol")
	if err != nil || len(files) < 10 {
		t.Fatalf("%d molfiles, %v", len(files), err)
	}
	out := map[string]string{}
	for _, f := range files {
		text, err := os.ReadFile(f)
		if err != nil {
			t.Fatal(err)
		}
		out[strings.TrimSuffix(filepath.Base(f), ".mol")] = string(text)
	}
	return out
}

// TestFormulas: sums counted by hand on the drawings of the invented molecules.
func TestFormulas(t *testing.T) {
	want := map[string]string{
		"enone":      "C11H16O2",
		"naphthol":   "C11H6F3NO3",
		"sugar":      "C6H13NO5",
		"protected":  "C6H6, C6H4-p-NMe2, CH2OMOM, 2 CO2Et, NHBoc, OTBS, P(OEt)2, Ph",
		"palladium":  "C8H14BrNO2PPd, 3 Ph",
		"linear":     "C13H12BrClN4O2",
		"open":       "C13H15N4, *, R1, R2",
		"sandwich":   "C13H16FeN+, CH2CO2tBu, OTBDPS",
		"tetracycle": "C18H26O",
		"ions":       "C8H19Cl2DMgN2NaO3 3+",
	}
	for name, text := range testFiles(t) {
		m, err := Read([]byte(text))
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		if m.Formula != want[name] {
			t.Errorf("%s: %q, want %q", name, m.Formula, want[name])
		}
	}
}

func TestVersionsAgree(t *testing.T) {
	two := v2(ethanol, []string{"  1  2  1  1", "  2  3  1  0"}, "M  CHG  1   3  -1", "M  ISO  1   2  13")
	three := "test\n\n\n  0  0  0     0  0            999 V3000\nM  V30 BEGIN CTAB\nM  V30 COUNTS 3 2 0 0 0\nM  V30 BEGIN ATOM\n" +
		"M  V30 7 C 0 0 0 0\nM  V30 3 C .866 0.5 0 -\nM  V30 0 MASS=13\nM  V30 9 O 1.732 0 0 0 CHG=-1\nM  V30 END ATOM\n" +
		"M  V30 BEGIN BOND\nM  V30 1 1 7 3 CFG=1\nM  V30 2 1 3 9\nM  V30 END BOND\nM  V30 END CTAB\nM  END\n"
	var drawn []string
	for _, text := range []string{two, three, strings.ReplaceAll(two, "\n", "\r\n"), "\ufeff" + two, strings.ReplaceAll(two, " V2000", "")} {
		m, err := Read([]byte(text))
		if err != nil {
			t.Fatalf("%v in\n%s", err, text)
		}
		drawn = append(drawn, fmt.Sprintf("%s %+v", m.Formula, m.Draw(10)))
	}
	for _, d := range drawn[1:] {
		if d != drawn[0] {
			t.Errorf("%s\nand\n%s", d, drawn[0])
		}
	}
}

func v3(atoms, bonds string, n, k int) string {
	return fmt.Sprintf("test\n\n\n  0  0  0     0  0            999 V3000\nM  V30 BEGIN CTAB\nM  V30 COUNTS %d %d 0 0 0\nM  V30 BEGIN ATOM\n%sM  V30 END ATOM\nM  V30 BEGIN BOND\n%sM  V30 END BOND\nM  V30 END CTAB\nM  END\n", n, k, atoms, bonds)
}

const (
	atoms3 = "M  V30 1 C 0 0 0 0\nM  V30 2 O 1 0 0 0\n"
	bonds3 = "M  V30 1 1 1 2\n"
)

func TestRefusals(t *testing.T) {
	good := []string{"  1  2  1  0", "  2  3  1  0"}
	star := "M  V30 1 C 0 0 0 0\nM  V30 2 O 1 0 0 0\nM  V30 3 N 2 0.5 0 0\n"
	for _, tt := range []struct {
		name, text string
		line, col  int
		says       string
	}{
		{"empty", "", 1, 1, "ends after 1 lines"},
		{"version", strings.Replace(v2(ethanol, good), "V2000", "V4000", 1), 4, 34, `version of the molfile is "V4000"`},
		{"counts", strings.Replace(v2(ethanol, good), "  3  2", " 3a  2", 1), 4, 1, `number of atoms is "3a"`},
		{"no atoms", v2(nil, nil), 4, 1, "0 atoms"},
		{"many atoms", strings.Replace(v2(ethanol, good), "  3  2", "501  2", 1), 4, 1, "more than 500"},
		{"atom list", strings.Replace(v2(ethanol, good), "  3  2  0", "  3  2  1", 1), 4, 7, "atom lists"},
		{"cut off", strings.Join(strings.Split(v2(ethanol, good), "\n")[:6], "\n"), 6, 1, "where atom 3 should"},
		{"coordinate", v2([]string{"    0.0000    0.00x0    0.0000 C  "}, nil), 5, 11, `coordinate y of atom 1 is "0.00x0"`},
		{"infinite", v2([]string{"       inf    0.0000    0.0000 C  "}, nil), 5, 1, `"inf"`},
		{"symbol", v2([]string{at(0, 0, "CL")}, nil), 5, 32, `symbol "CL"; write "Cl"`},
		{"small", v2([]string{at(0, 0, "c")}, nil), 5, 32, `symbol "c"; write "C"`},
		{"no symbol", v2([]string{at(0, 0, "")}, nil), 5, 32, "no symbol"},
		{"query atom", v2([]string{at(0, 0, "A")}, nil), 5, 32, "any atom in a search"},
		{"charge code", v2([]string{at(0, 0, "N") + " 0  9"}, nil), 5, 37, "charge code is 9"},
		{"mass difference", v2([]string{at(0, 0, "Pd") + " 1"}, nil), 5, 35, "M  ISO"},
		{"hydrogen count", v2([]string{at(0, 0, "C") + " 0  0  0  2"}, nil), 5, 43, "belongs to a search"},
		{"valence", v2([]string{at(0, 0, "C") + " 0  0  0  0  0 16"}, nil), 5, 49, "valence is 16"},
		{"bond atom", v2(ethanol, []string{"  1  4  1  0"}), 8, 4, "names atom 4"},
		{"bond itself", v2(ethanol, []string{"  2  2  1  0"}), 8, 1, "to itself"},
		{"bond type", v2(ethanol, []string{"  1  2  8  0"}), 8, 1, "type 8 belongs to a search"},
		{"bond type unknown", v2(ethanol, []string{"  1  2 11  0"}), 8, 1, "type 11 is not known"},
		{"bond twice", v2(ethanol, []string{"  1  2  1  0", "  2  1  1  0"}), 9, 1, "two bonds"},
		{"wedge on double", v2(ethanol, []string{"  1  2  2  1"}), 8, 10, "stereo code"},
		{"topology", v2(ethanol, []string{"  1  2  1  0  0  1"}), 8, 16, "topology"},
		{"property", v2(ethanol, good, "M  ALS   1  1 F C"), 10, 1, `"M  ALS   1  1 F C" is not drawn`},
		{"property atom", v2(ethanol, good, "M  CHG  1   4   1"), 10, 11, "atom 4"},
		{"property count", v2(ethanol, good, "M  CHG  2   3   1"), 10, 7, "2 entries"},
		{"radical", v2(ethanol, good, "M  RAD  1   3   4"), 10, 15, "radical of atom 3 is 4"},
		{"mass", v2(ethanol, good, "M  ISO  1   3   0"), 10, 15, "mass of atom 3 is 0"},
		{"r group", v2(ethanol, good, "M  RGP  1   3   1"), 10, 15, "R group 1"},
		{"alias", v2(ethanol, good, "A    1", "  "), 11, 1, "alias of atom 1"},
		{"polymer", v2(ethanol, good, "M  STY  1   1 SRU"), 10, 15, "polymer"},
		{"no end", strings.Replace(v2(ethanol, good), "M  END\n", "", 1), 9, 1, "M  END"},
		{"second molecule", v2(ethanol, good) + "$$$$\nnext\n", 12, 1, "second molecule"},
		{"one point", v2([]string{at(0, 0, "C"), at(0, 0, "O")}, []string{"  1  2  1  0"}), 5, 32, "all 2 atoms stand in one point"},
		{"in space", v2([]string{at(0, 0, "C"), "    1.0000    0.0000    0.8000 O  "}, []string{"  1  2  1  0"}), 5, 32, "0.8 deep"},
		{"two in one place", v2([]string{at(0, 0, "C"), at(1, 0, "O"), at(1.01, 0, "N")}, []string{"  1  2  1  0", "  1  3  1  0"}), 7, 32, "atoms 2 (O) and 3 (N) stand in one place"},
		{"on a bond", v2([]string{at(0, 0, "C"), at(2, 0, "C"), at(1, 0.03, "C")}, []string{"  1  2  1  0", "  2  3  1  0"}), 7, 32, "stands on the bond"},
		{"far apart", v2([]string{at(0, 0, "C"), at(1, 0, "C"), at(900, 0, "C")}, []string{"  1  2  1  0"}), 5, 32, "900 bond lengths"},
		{"labels meet", v2([]string{at(0, 0, "C"), at(1, 0, "C"), at(2, 2, "Cl"), at(2.2, 2.1, "Br")}, []string{"  1  2  1  0"}), 8, 32, "the labels of atoms"},
		{"pyrrole", v2([]string{at(0, 1, "N"), at(.95, .31, "C"), at(.59, -.81, "C"), at(-.59, -.81, "C"), at(-.95, .31, "C")},
			[]string{"  1  2  4  0", "  2  3  4  0", "  3  4  4  0", "  4  5  4  0", "  5  1  4  0"}), 9, 32, "cannot be written as single and double bonds in turn"},
		{"v3 begin", strings.Replace(v3(atoms3, bonds3, 2, 1), "BEGIN CTAB", "BEGIN TAB", 1), 5, 8, "BEGIN CTAB"},
		{"v3 opening", strings.Replace(v3(atoms3, bonds3, 2, 1), "M  V30 COUNTS", "M  V31 COUNTS", 1), 6, 1, "COUNTS"},
		{"v3 too many", v3(atoms3, bonds3, 1, 1), 9, 8, "more lines stand in the part ATOM"},
		{"v3 too few", v3(atoms3, bonds3, 3, 1), 10, 8, "2 lines stand in the part ATOM"},
		{"v3 number", v3(strings.Replace(atoms3, "2 O", "1 O", 1), bonds3, 2, 1), 9, 8, `number of an atom is "1"`},
		{"v3 key", v3(strings.Replace(atoms3, "0\nM", "0 HCOUNT=2\nM", 1), bonds3, 2, 1), 8, 20, `"HCOUNT=2"`},
		{"v3 charge", v3(strings.Replace(atoms3, "0\nM", "0 CHG=x\nM", 1), bonds3, 2, 1), 8, 24, `CHG is "x"`},
		{"v3 quote", v3(strings.Replace(atoms3, " C ", ` "Ph `, 1), bonds3, 2, 1), 8, 10, "quote"},
		{"v3 list", v3(strings.Replace(atoms3, " C ", " [C,N] ", 1), bonds3, 2, 1), 8, 10, "search"},
		{"v3 bond atom", v3(atoms3, "M  V30 1 1 1 3\n", 2, 1), 12, 14, `names the atom "3"`},
		{"v3 bond stereo", v3(atoms3, "M  V30 1 2 1 2 CFG=1\n", 2, 1), 12, 16, "CFG"},
		{"v3 middle", v3(star, "M  V30 1 1 1 2 ENDPTS=(2 2 3)\n", 3, 1), 13, 8, "a * in their middle"},
		{"v3 rgroup", strings.Replace(v3(atoms3, bonds3, 2, 1), "M  END", "M  V30 BEGIN RGROUP 1\nM  END", 1), 15, 1, "where M  END should"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			_, err := Read([]byte(tt.text))
			var e *Error
			if !errors.As(err, &e) {
				t.Fatalf("error %v", err)
			}
			if e.Line != tt.line || e.Col != tt.col || !strings.Contains(e.Error(), tt.says) || e.Fix == "" {
				t.Errorf("%v\nwant line %d, column %d: ... %s", e, tt.line, tt.col, tt.says)
			}
		})
	}
	if _, err := Read(make([]byte, MaxBytes+1)); err == nil {
		t.Error("a file beyond the limit is read")
	}
}

func TestNotes(t *testing.T) {
	text := v2([]string{at(0, 0, "C") + " 0  0  0  0  0  0  0  0  0  5", at(1, 0, "O")}, []string{"  1  2  1  0"}, "M  STY  1   1 SUP", "M  SMT   1 X", "V    1 12", "S  SKP  1", "anything") + "> <NAME>\nx\n\n$$$$\n"
	m, err := Read([]byte(text))
	if err != nil {
		t.Fatal(err)
	}
	want := "atom map numbers|groups (their atoms are drawn in full)|values of atoms|skipped lines|data behind the molecule"
	if got := strings.Join(m.Notes, "|"); got != want {
		t.Errorf("%s, want %s", got, want)
	}
}

func FuzzRead(f *testing.F) {
	for _, text := range testFiles(f) {
		f.Add([]byte(text))
	}
	f.Add([]byte(v2(ethanol, []string{"  1  2  1  0", "  2  3  1  0"}, "M  RAD  1   3   2")))
	f.Fuzz(func(t *testing.T, text []byte) {
		m, err := Read(text)
		if err != nil {
			var e *Error
			if !errors.As(err, &e) || e.Fix == "" || e.Msg == "" || e.Error() == "" {
				t.Fatalf("error %#v", err)
			}
			return
		}
		sound(t, m.Draw(10))
	})
}
