package skeleton

import (
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"
)

// TestValences: hydrogens of a lone atom, and of atoms with neighbours. The
// values are those of the compounds named, common knowledge of the trade.
func TestValences(t *testing.T) {
	for _, tt := range []struct {
		symbol  string
		charge  int
		radical int    // as in M  RAD
		orders  string // types of the bonds to carbon; m: single to Pd, d: dative to Pd
		want    int
		what    string
	}{
		{"C", 0, 0, "", 4, "methane"}, {"N", 0, 0, "", 3, "ammonia"}, {"O", 0, 0, "", 2, "water"}, {"F", 0, 0, "", 1, "hydrogen fluoride"},
		{"B", 0, 0, "", 3, "borane"}, {"Si", 0, 0, "", 4, "silane"}, {"P", 0, 0, "", 3, "phosphane"}, {"S", 0, 0, "", 2, "hydrogen sulfide"},
		{"I", 0, 0, "", 1, "hydrogen iodide"}, {"Na", 1, 0, "", 0, "sodium ion"}, {"Cl", -1, 0, "", 0, "chloride"}, {"Pd", 0, 0, "", 0, "palladium"},
		{"N", 1, 0, "", 4, "ammonium"}, {"O", 1, 0, "", 3, "oxonium"}, {"O", -1, 0, "", 1, "hydroxide"}, {"B", -1, 0, "", 4, "borohydride"},
		{"C", 1, 0, "", 3, "methyl cation"}, {"C", -1, 0, "", 3, "methanide"}, {"N", -1, 0, "", 2, "amide ion"}, {"H", 1, 0, "", 0, "proton"},
		{"C", 0, 2, "", 3, "methyl radical"}, {"C", 0, 1, "", 2, "singlet methylene"}, {"C", 0, 3, "", 2, "triplet methylene"}, {"O", 0, 2, "", 1, "hydroxyl radical"},
		{"N", 0, 0, "12", 0, "imine"}, {"N", 1, 0, "12", 1, "iminium"}, {"N", 0, 0, "122", 0, "nitro with five bonds"}, {"N", 1, 0, "1111", 0, "ammonium, full"},
		{"P", 0, 0, "111", 0, "phosphane, full"}, {"P", 0, 0, "112", 1, "secondary phosphane oxide"}, {"P", 1, 0, "111", 1, "phosphonium"}, {"P", 0, 0, "2111", 0, "ylide"},
		{"S", 0, 0, "112", 0, "sulfoxide"}, {"S", 0, 0, "1122", 0, "sulfone"}, {"S", 0, 0, "122", 1, "sulfinic hydrogen"}, {"S", 1, 0, "11", 1, "sulfonium"},
		{"Cl", 0, 0, "1222", 0, "perchlorate ester"}, {"I", 0, 0, "111", 0, "iodane"}, {"B", 0, 0, "11", 1, "dialkylborane"},
		{"P", 0, 0, "111m", 0, "phosphane on a metal, drawn with a single bond"}, {"P", 0, 0, "111d", 0, "the same, dative"}, {"N", 0, 0, "1d", 2, "primary amine on a metal"},
		{"Cl", 0, 0, "mm", 0, "bridging chloride"}, {"C", 0, 0, "m", 3, "methyl on a metal"}, {"O", 0, 0, "1m", 0, "alkoxide on a metal"},
	} {
		atoms := []string{at(0, 0, tt.symbol)}
		var bonds []string
		for k, o := range tt.orders {
			x, y := []float64{1, 0, -1, 0}[k], []float64{0, 1, 0, -1}[k]
			symbol, kind := "C", string(o)
			if o == 'm' || o == 'd' {
				symbol, kind = "Pd", map[rune]string{'m': "1", 'd': "9"}[o]
			}
			atoms = append(atoms, at(x, y, symbol))
			bonds = append(bonds, fmt.Sprintf("  1%3d%3s  0", k+2, kind))
		}
		var more []string
		if tt.charge != 0 {
			more = append(more, fmt.Sprintf("M  CHG  1   1 %3d", tt.charge))
		}
		if tt.radical != 0 {
			more = append(more, fmt.Sprintf("M  RAD  1   1 %3d", tt.radical))
		}
		m, err := Read([]byte(v2(atoms, bonds, more...)))
		if err != nil {
			t.Errorf("%s: %v", tt.what, err)
			continue
		}
		if got := m.atoms[0].implicit; got != tt.want {
			t.Errorf("%s: %d hydrogens, want %d", tt.what, got, tt.want)
		}
	}
}

// TestStatedValence: a stated valence wins, and 15 is none.
func TestStatedValence(t *testing.T) {
	for code, want := range map[int]int{0: 4, 3: 3, 15: 0} {
		m, err := Read([]byte(v2([]string{at(0, 0, "C") + fmt.Sprintf(" 0  0  0  0  0%3d", code)}, nil)))
		if err != nil || m.atoms[0].implicit != want {
			t.Errorf("valence %d: %v, %v; want %d", code, m, err, want)
		}
	}
}

// TestAromaticHydrogens: rings written with bonds of type 4.
func TestAromaticHydrogens(t *testing.T) {
	for _, tt := range []struct{ ring, want string }{
		{"C C C C C C", "C6H6"}, {"N C C C C C", "C5H5N"}, {"O C C C C", "C4H4O"}, {"S C N C C", "C3H3NS"},
		{"C+ C C C C C C", "C7H7+"}, {"C- C C C C", "C5H5-"}, {"O+ C C C C C", "C5H5O+"}, {"C C C C C", ""}, {"N C C N C", ""},
	} {
		symbols := strings.Fields(tt.ring)
		n := len(symbols)
		var atoms, bonds, more []string
		for i, s := range symbols {
			y, x := math.Sincos(2 * math.Pi * float64(i) / float64(n))
			name := strings.TrimRight(s, "+-")
			atoms = append(atoms, at(x, y, name))
			bonds = append(bonds, fmt.Sprintf("%3d%3d  4  0", i+1, (i+1)%n+1))
			if name != s {
				more = append(more, fmt.Sprintf("M  CHG  1 %3d %3d", i+1, map[string]int{"+": 1, "-": -1}[s[len(name):]]))
			}
		}
		m, err := Read([]byte(v2(atoms, bonds, more...)))
		switch {
		case tt.want == "" && err == nil:
			t.Errorf("%s: read as %s, want a refusal", tt.ring, m.Formula)
		case tt.want != "" && (err != nil || m.Formula != tt.want):
			t.Errorf("%s: %v, %v; want %s", tt.ring, m, err, tt.want)
		}
	}
}

// TestMatch compares with a search through all pairings, on random graphs.
func TestMatch(t *testing.T) {
	r := rand.New(rand.NewPCG(9, 9))
	for range 2000 {
		n := 1 + r.IntN(10)
		next := make([][]int, n)
		for i := range n {
			for k := range i {
				if r.IntN(3) == 0 {
					next[i], next[k] = append(next[i], k), append(next[k], i)
				}
			}
		}
		var most func(used, from int) int
		most = func(used, from int) int {
			for from < n && used>>from&1 == 1 {
				from++
			}
			if from >= n {
				return 0
			}
			best := most(used|1<<from, from+1)
			for _, k := range next[from] {
				if used>>k&1 == 0 {
					best = max(best, 1+most(used|1<<from|1<<k, from+1))
				}
			}
			return best
		}
		mate := match(next)
		pairs := 0
		for i, k := range mate {
			if k >= 0 {
				if mate[k] != i {
					t.Fatalf("%v: %d and %d", mate, i, k)
				}
				pairs++
			}
		}
		if want := most(0, 0); pairs != 2*want {
			t.Fatalf("%d pairs in %v, want %d", pairs/2, next, want)
		}
	}
}
