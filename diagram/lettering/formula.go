package lettering

import (
	"strconv"
	"strings"
)

// The rule that tells a formula from a name. A piece of text is a formula only if
//
//  1. it parses to its end into symbols, each with a count or none, and brackets
//     of the same, with a charge or none behind: element symbols, D, and the
//     usual short names of groups (Me, Ph, Ac, ...; R, L and X in company);
//     oxidation numbers in brackets, as in Cu(I), count as part of their symbol;
//  2. every count is 2 or more, so TS1, P1 and Pr1 are names;
//  3. a single symbol with a count is H2, N2, O2, O3, Cl2 or Br2, so R2, I2, B2
//     and P2 are names (iodine is written I_2);
//  4. of one-letter symbols alone, it holds H, D, O or F, and a lone count at its
//     end stands behind one of these, so PC2, IN2 and BP86 are names and CO2, BF3, H2O and
//     NH3 are formulas (CS2 is listed);
//  5. L and X need a symbol of two letters beside them, so PdL2 is a formula and
//     B3LYP a name.
//
// A single symbol with a number and a sign is an ion, Cu2+: the number is its
// charge; so it is behind square brackets, [Cu(NH3)4]2+. A hyphen behind one letter is a charge only for H and halogens, since
// "C- and O-attack" has none.

// part is a symbol or a bracket of a formula.
type part struct {
	text   string
	count  int  // 0: none
	group  bool // a bracket
	inside []part
}

// formula sets core if it is a formula with something to set.
func formula(core string) ([]Run, bool) {
	n := digits(core) // 2H2O: a number of molecules, or of a compound
	lead, rest := core[:n], core[n:]
	body, charge := cutCharge(rest)
	parts, left := parse(body, 0)
	if left != "" || len(parts) == 0 {
		return nil, false
	}
	single := len(parts) == 1 && !parts[0].group
	switch {
	case single && lead != "":
		return nil, false
	case single && charge != "":
		p := parts[0]
		if !elements[p.text] || p.count == 1 || p.count > 8 {
			return nil, false
		}
		if charge == "-" && p.text != "H" && p.text != "F" && p.text != "Cl" && p.text != "Br" && p.text != "I" {
			return nil, false
		}
		parts[0], charge = ion(p, charge)
	case single:
		if s := body; s != "H2" && s != "N2" && s != "O2" && s != "O3" && s != "Cl2" && s != "Br2" {
			return nil, false
		}
	case len(parts) == 1 && len(parts[0].inside) < 2:
		return nil, false
	default:
		var f facts
		f.see(parts)
		if !f.formula(parts) && body != "CS2" || f.counts == 0 && charge == "" {
			return nil, false
		}
	}
	if last := len(parts) - 1; charge != "" && last == 0 && parts[0].group && parts[0].text == "[]" {
		parts[0], charge = ion(parts[0], charge)
	}
	var b setter
	b.add(lead, Base)
	b.parts(parts)
	b.add(strings.ReplaceAll(charge, "-", "−"), Super)
	return b.done(), true
}

// ion takes the number behind p as its charge.
func ion(p part, sign string) (part, string) {
	if p.count > 0 {
		sign, p.count = strconv.Itoa(p.count)+sign, 0
	}
	return p, sign
}

// cutCharge takes the sign off the end.
func cutCharge(s string) (body, charge string) {
	for _, sign := range []string{"+", "-", "−"} {
		if body, ok := strings.CutSuffix(s, sign); ok {
			return body, sign
		}
	}
	return s, ""
}

// parse reads parts until a bracket closes or nothing fits. depth bounds nesting.
func parse(s string, depth int) (parts []part, rest string) {
	for s != "" {
		p := part{}
		switch {
		case s[0] == '(' || s[0] == '[':
			closing := byte(')')
			if s[0] == '[' {
				closing = ']'
			}
			if end := strings.IndexByte(s, closing); len(parts) > 0 && end > 1 && oxidation(s[1:end]) {
				parts[len(parts)-1].text += s[:end+1]
				s = s[end+1:]
				continue
			}
			if depth > 4 {
				return parts, s
			}
			inside, after := parse(s[1:], depth+1)
			if len(inside) == 0 || after == "" || after[0] != closing {
				return parts, s
			}
			p.group, p.inside = true, inside
			p.text = s[:1] + string(closing)
			s = after[1:]
		default:
			n := symbol(s)
			if n == 0 {
				return parts, s
			}
			p.text = s[:n]
			s = s[n:]
		}
		if n := digits(s); n > 0 {
			if n > 3 || s[0] == '0' {
				return parts, s
			}
			p.count, _ = strconv.Atoi(s[:n])
			s = s[n:]
		}
		parts = append(parts, p)
	}
	return parts, ""
}

func oxidation(s string) bool {
	switch s {
	case "0", "I", "II", "III", "IV", "V", "VI", "VII", "VIII":
		return true
	}
	return false
}

// symbol gives the length of the longest symbol at the front of s. An element
// wins over a group of equal length; both are listed.
func symbol(s string) int {
	for n := min(3, len(s)); n > 0; n-- {
		if elements[s[:n]] || groups[s[:n]] {
			// A lower-case letter behind would break the symbol: Int is not In and t.
			if n < len(s) && s[n] >= 'a' && s[n] <= 'z' {
				continue
			}
			return n
		}
	}
	return 0
}

// facts are what rules 2, 4 and 5 ask about.
type facts struct {
	counts, ones int
	long         bool // a symbol of two letters, or a bracket
	ligand       bool // L or X
	anchor       bool // H, D, O or F
}

func (f *facts) see(parts []part) {
	for _, p := range parts {
		name, _, _ := strings.Cut(p.text, "(")
		switch {
		case p.group:
			f.long = true
			f.see(p.inside)
		case len(name) > 1:
			f.long = true
		case name == "L" || name == "X":
			f.ligand = true
		}
		f.anchor = f.anchor || anchors(p)
		if p.count > 0 {
			f.counts++
		}
		if p.count == 1 {
			f.ones++
		}
	}
}

// anchors reports whether p is one of the elements that rule 4 looks for.
func anchors(p part) bool { return p.text == "H" || p.text == "D" || p.text == "O" || p.text == "F" }

func (f *facts) formula(parts []part) bool {
	switch {
	case f.ones > 0:
		return false
	case f.long:
		return true
	case f.ligand || !f.anchor:
		return false
	}
	last := parts[len(parts)-1]
	return f.counts != 1 || last.count == 0 || anchors(last)
}

// parts sets the parts of a formula.
func (b *setter) parts(parts []part) {
	for _, p := range parts {
		if p.group {
			b.add(p.text[:1], Base)
			b.parts(p.inside)
			b.add(p.text[1:], Base)
		} else {
			b.add(p.text, Base)
		}
		if p.count > 0 {
			b.add(strconv.Itoa(p.count), Sub)
		}
	}
}

var elements = words(`H D He Li Be B C N O F Ne Na Mg Al Si P S Cl Ar K Ca Sc Ti V Cr Mn Fe Co Ni Cu Zn
	Ga Ge As Se Br Kr Rb Sr Y Zr Nb Mo Tc Ru Rh Pd Ag Cd In Sn Sb Te I Xe Cs Ba La Ce Pr Nd Pm Sm Eu Gd Tb
	Dy Ho Er Tm Yb Lu Hf Ta W Re Os Ir Pt Au Hg Tl Pb Bi Po At Rn Fr Ra Ac Th Pa U Np Pu Am Cm Bk Cf Es Fm
	Md No Lr`)

// groups are short names of groups and ligands in common use.
var groups = words(`R L X Me Et Bu Ph Bn Bz Cy Cp Tf Ts Ms Boc Cbz Mes acac dba bpy cod nbd pin`)

func words(list string) map[string]bool {
	m := map[string]bool{}
	for _, w := range strings.Fields(list) {
		m[w] = true
	}
	return m
}
