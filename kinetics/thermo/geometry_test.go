package thermo

import (
	"errors"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"saddlebook/kinetics/rate"
)

const angstrom = 1e-10 // m

func diatomic(a, b string, r float64) []Atom {
	return []Atom{{Symbol: a}, {Symbol: b, Z: r * angstrom}}
}

// water with its O-H distance in Å and its angle in degrees.
func water(h string, r, angle float64) []Atom {
	s, c := math.Sincos(angle / 2 * math.Pi / 180)
	return []Atom{{Symbol: "O"}, {Symbol: h, X: r * s * angstrom, Y: r * c * angstrom}, {Symbol: h, X: -r * s * angstrom, Y: r * c * angstrom}}
}

func TestDiatomicConstants(t *testing.T) {
	for _, a := range []struct {
		name, a, b string
		r, Be      float64 // Å, cm-1
	}{
		{"CO", "C", "O", 1.128323, 1.93128087},
		{"N2", "N", "N", 1.097685, 1.998241},
		{"HCl", "H", "Cl", 1.274552, 10.59341},
		{"DCl", "D", "35Cl", 1.274581, 5.448796},
		{"HBr", "H", "81Br", 1.414435, 8.46488},
	} {
		const source = "equilibrium distance and rotational constant: Huber and Herzberg, Constants of Diatomic Molecules (1979), from memory"
		I, err := Moments(diatomic(a.a, a.b, a.r))
		if err != nil || len(I) != 1 {
			t.Fatal(a.name, I, err)
		}
		if got := RotationalConstant(I[0]) / cm; !near(got, a.Be, 3e-4) {
			t.Errorf("%s: B %v cm-1, want %v\nsource: %s", a.name, got, a.Be, source)
		}
	}
}

// Closed forms of moments of inertia.
func TestMoments(t *testing.T) {
	m := func(symbol string) float64 { return isotopeMass[symbol] * MassUnit / rate.Avogadro }
	mH, mO := m("H"), m("O")
	r := 0.9584 * angstrom
	s, c := math.Sincos(104.45 / 2 * math.Pi / 180)
	ia := 2 * mH * mO / (2*mH + mO) * r * r * c * c
	ib := 2 * mH * r * r * s * s
	a := 1.09 * angstrom / math.Sqrt(3)
	methane := []Atom{{Symbol: "C"}, {Symbol: "H", X: a, Y: a, Z: a}, {Symbol: "H", X: a, Y: -a, Z: -a}, {Symbol: "H", X: -a, Y: a, Z: -a}, {Symbol: "H", X: -a, Y: -a, Z: a}}
	carbon := []Atom{{Symbol: "O", X: -1.16 * angstrom}, {Symbol: "C"}, {Symbol: "O", X: 1.16 * angstrom}}
	ic := 8 * mH * a * a
	for _, x := range []struct {
		name  string
		atoms []Atom
		want  []float64
	}{
		{"water", water("H", 0.9584, 104.45), []float64{ia, ib, ia + ib}},
		{"methane", methane, []float64{ic, ic, ic}},
		{"carbon dioxide", carbon, []float64{2 * mO * 1.16 * 1.16 * angstrom * angstrom}},
		{"argon", []Atom{{Symbol: "Ar", X: angstrom}}, nil},
	} {
		rng := rand.New(rand.NewPCG(6, 6))
		for range 20 {
			got, err := Moments(turned(x.atoms, rng))
			if err != nil || len(got) != len(x.want) {
				t.Fatalf("%s: %v, %v; want %v", x.name, got, err, x.want)
			}
			for i := range got {
				if !near(got[i], x.want[i], 1e-12) {
					t.Errorf("%s: moment %d %v, want %v", x.name, i+1, got[i], x.want[i])
				}
			}
		}
	}
}

// turned moves and turns a geometry.
func turned(atoms []Atom, rng *rand.Rand) []Atom {
	out := append([]Atom(nil), atoms...)
	for range 4 {
		s, c := math.Sincos(2 * math.Pi * rng.Float64())
		dx, dy := 3*angstrom*rng.Float64(), 3*angstrom*rng.Float64()
		for i, a := range out { // about one axis, then the axes change places
			out[i].X, out[i].Y, out[i].Z = a.Z+dx, c*a.X-s*a.Y+dy, s*a.X+c*a.Y
		}
	}
	return out
}

// A geometry and its rotational constants give the same free energy, and heavy
// isotopes lower it.
func TestGeometry(t *testing.T) {
	nu := []float64{3657 * cm, 1595 * cm, 3756 * cm}
	from := &Molecule{Atoms: water("H", 0.9584, 104.45), Frequencies: nu, Symmetry: 2, Standard: rate.Standard{Pressure: rate.Bar}}
	I, err := Moments(from.Atoms)
	if err != nil {
		t.Fatal(err)
	}
	by := &Molecule{Mass: (2*isotopeMass["H"] + isotopeMass["O"]) * MassUnit, Rotation: constants(I), Frequencies: nu, Symmetry: 2, Standard: from.Standard}
	if a, b := at(t, from, 298.15), at(t, by, 298.15); !near(a.G, b.G, 1e-13) || from.Linear() {
		t.Errorf("from atoms %v, from constants %v", a.G, b.G)
	}
	const source = "S 188.834: " + janaf + "; r 0.9584 Å and 104.45°: vibrationally averaged geometry near that of Herzberg 1966, from memory"
	if s := at(t, from, 298.15).S; math.Abs(s-188.834) > 0.3 {
		t.Errorf("S of water %v, want 188.834\nsource: %s", s, source)
	}
	heavy := *from
	heavy.Atoms = water("D", 0.9584, 104.45)
	if d := at(t, &heavy, 298.15).Translation.S - at(t, from, 298.15).Translation.S; !near(d, 1.5*rate.R*math.Log((2*isotopeMass["D"]+isotopeMass["O"])/(2*isotopeMass["H"]+isotopeMass["O"])), 1e-10) {
		t.Errorf("deuterium adds %v to the entropy of translation", d)
	}
	heavy.Atoms[1].Mass = 2.5e-3
	if _, err := heavy.At(300); err != nil {
		t.Error(err)
	}
	line := &Molecule{Atoms: diatomic("C", "O", 1.128), Frequencies: []float64{2143 * cm}}
	if !line.Linear() || at(t, line, 300).Rotation.Cp != rate.R {
		t.Error("CO is not linear")
	}
}

// Coordinates of a linear molecule that are rounded stay linear; a molecule that is
// bent by 5 degrees does not become so.
func TestLinear(t *testing.T) {
	nu := []float64{1333 * cm, 667 * cm, 667 * cm, 2349 * cm}
	m := &Molecule{Atoms: []Atom{{Symbol: "O", X: -1.16 * angstrom, Y: 3e-4 * angstrom}, {Symbol: "C"}, {Symbol: "O", X: 1.16 * angstrom}}, Frequencies: nu, Symmetry: 2}
	if err := m.Check(); err != nil || !m.Linear() {
		t.Errorf("CO2 with rounded coordinates: linear %v, %v", m.Linear(), err)
	}
	m.Atoms[1].Y = 0.05 * angstrom
	if err := m.Check(); err == nil || !strings.Contains(err.Error(), "number of frequencies of 4 is not possible; 3 atoms that are not on one line have 3") {
		t.Errorf("bent CO2 with the modes of a linear one: %v", err)
	}
}

func TestGeometryCheck(t *testing.T) {
	for _, a := range []struct {
		atoms []Atom
		says  string
	}{
		{nil, "number of atoms of 0"},
		{[]Atom{{Symbol: "Xx"}}, `atom 1: outside the possible range: no mass is known for the symbol "Xx"; correct it, or give the mass of the atom`},
		{[]Atom{{Symbol: "H", Mass: -1}}, "atom 1: mass (kg/mol) of -1"},
		{[]Atom{{Symbol: "H"}, {Symbol: "H", Z: 0.74}}, "coordinate (m) of atom 2 of 0.74 is not possible; give metres"},
		{[]Atom{{Symbol: "H"}, {Symbol: "H", Z: math.NaN()}}, "coordinate (m) of atom 2 of NaN"},
		{[]Atom{{Symbol: "H"}, {Symbol: "H", Z: 1e-12}}, "distance (m) of atoms 1 and 2 of 1e-12"},
	} {
		if _, err := Moments(a.atoms); !errors.Is(err, rate.ErrDomain) || !strings.Contains(err.Error(), a.says) {
			t.Errorf("error %v, want one that says %q", err, a.says)
		}
	}
	if !math.IsNaN(RotationalConstant(0)) {
		t.Error("a moment of 0 has a rotational constant")
	}
}

// Masses are near their mass numbers, and below them beyond neon.
func TestIsotopes(t *testing.T) {
	for symbol, mass := range isotopeMass {
		number := 0.0
		for _, c := range symbol {
			if c >= '0' && c <= '9' {
				number = 10*number + float64(c-'0')
			}
		}
		if number == 0 {
			number = math.Round(mass)
		}
		if math.Abs(mass-number) > 0.1 || mass > 20 && mass > number {
			t.Errorf("%s: %v u against the mass number %v", symbol, mass, number)
		}
	}
	for same, name := range map[string]string{"H": "1H", "D": "2H", "T": "3H", "C": "12C", "N": "14N", "O": "16O", "S": "32S", "Cl": "35Cl", "Br": "79Br", "Se": "80Se"} {
		if isotopeMass[same] != isotopeMass[name] {
			t.Errorf("%s and %s differ", same, name)
		}
	}
}
