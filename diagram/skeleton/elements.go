package skeleton

import "strings"

var elements = list(`H D T He Li Be B C N O F Ne Na Mg Al Si P S Cl Ar K Ca Sc Ti V Cr Mn Fe Co Ni Cu Zn
	Ga Ge As Se Br Kr Rb Sr Y Zr Nb Mo Tc Ru Rh Pd Ag Cd In Sn Sb Te I Xe Cs Ba La Ce Pr Nd Pm Sm Eu Gd Tb
	Dy Ho Er Tm Yb Lu Hf Ta W Re Os Ir Pt Au Hg Tl Pb Bi Po At Rn Fr Ra Ac Th Pa U Np Pu Am Cm Bk Cf Es Fm
	Md No Lr Rf Db Sg Bh Hs Mt Ds Rg Cn Nh Fl Mc Lv Ts Og`)

// nonmetals are the elements whose bonds to others are counted in full.
var nonmetals = list(`H D T He B C N O F Ne Si P S Cl Ar Ge As Se Br Kr Te I Xe At Rn`)

// groups are short names of groups in common use, which may be turned round in a
// label: OMe, MeO.
var groups = list(`Me Et Pr nPr iPr cPr Bu nBu sBu iBu tBu Ph Bn Bz Ac Ar R X L Cy Cp Tf Ts Ms Ns Boc Cbz
	Fmoc Alloc Troc Mes Trt Tr Bpin pin TMS TES TBS TBDMS TIPS TBDPS PMB MOM MEM SEM THP Piv Vn Np Hex Oct Tol Nap`)

func list(words string) map[string]bool {
	m := map[string]bool{}
	for _, w := range strings.Fields(words) {
		m[w] = true
	}
	return m
}

// shell gives the outer electrons of the elements that take implicit hydrogens,
// and the period.
var shell = map[string]struct{ electrons, period int }{
	"B": {3, 2}, "C": {4, 2}, "N": {5, 2}, "O": {6, 2}, "F": {7, 2},
	"Al": {3, 3}, "Si": {4, 3}, "P": {5, 3}, "S": {6, 3}, "Cl": {7, 3},
	"Ge": {4, 4}, "As": {5, 4}, "Se": {6, 4}, "Br": {7, 4},
	"Sn": {4, 5}, "Sb": {5, 5}, "Te": {6, 5}, "I": {7, 5}, "At": {7, 6},
}

// natural gives the mass number that the mass differences of V2000 count from: the atomic
// weight, rounded (IUPAC 2021 abridged values).
var natural = map[string]int{"H": 1, "B": 11, "C": 12, "N": 14, "O": 16, "F": 19, "Si": 28, "P": 31, "S": 32, "Cl": 35, "Br": 80, "I": 127}

// lowest gives the lowest valence of an atom and the highest it can be raised to
// in steps of two. ok is false for elements that take no implicit hydrogens.
func (a *atom) lowest() (low, high int, ok bool) {
	s, ok := shell[a.symbol]
	if !ok || !a.element() {
		return 0, 0, false
	}
	e := s.electrons - a.charge
	switch {
	case e < 0 || e > 8:
		return 0, 0, true
	case e <= 4:
		return e, e, true
	case s.period > 2 && e < 7:
		return 8 - e, e, true
	}
	return 8 - e, 8 - e, true
}

// hydrogens sets the implicit hydrogens of every atom. inRing tells which atoms
// have a double bond of an aromatic ring.
func (m *Molecule) hydrogens(inRing []bool) {
	for i := range m.atoms {
		a := &m.atoms[i]
		sum, metal := 0, 0
		for _, k := range a.next {
			b := m.bonds[k]
			o := &m.atoms[b.other(i)]
			if o.element() && !nonmetals[o.symbol] {
				metal += b.valence()
			} else {
				sum += b.valence()
			}
		}
		if inRing[i] {
			sum++
		}
		if a.valence >= 0 {
			if a.element() {
				a.implicit = max(0, a.valence-sum-metal)
			}
			continue
		}
		low, high, ok := a.lowest()
		switch {
		case !ok, len(a.next) == 0 && !nonmetals[a.symbol]:
		case sum+metal <= low-a.radical:
			a.implicit = low - a.radical - sum - metal
		case metal > 0 && sum <= low:
		default:
			v := low
			for v < high && v-a.radical < sum+metal {
				v += 2
			}
			a.implicit = max(0, v-a.radical-sum-metal)
			if a.symbol == "C" && sum > low {
				m.note("a carbon atom has more bonds than its valence allows")
			}
		}
	}
}
