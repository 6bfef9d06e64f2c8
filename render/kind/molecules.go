package kind

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"
	"unicode/utf8"

	"saddlebook/content/fault"
	"saddlebook/content/schema"
	"saddlebook/kinetics/rate"
	"saddlebook/kinetics/thermo"
	"saddlebook/kinetics/unit"
)

// moleculeSource is what a calculation leaves of one state.
type moleculeSource struct {
	E            *unit.Quantity  `key:"E"`
	Frequencies  []unit.Quantity `key:"frequencies"`
	Atoms        string          `key:"atoms"`
	Mass         *unit.Quantity  `key:"mass"`
	Rotation     []unit.Quantity `key:"rotation"`
	Symmetry     *int            `key:"symmetry"`
	Multiplicity *int            `key:"multiplicity"`
	Scale        *float64        `key:"frequency-scale"`
}

// lowModesSource is the choice for vibrations that are too soft to be harmonic.
type lowModesSource struct {
	Treatment string         `key:"treatment"`
	Below     *unit.Quantity `key:"below"`
	Exponent  *float64       `key:"exponent"`
	Moment    *unit.Quantity `key:"moment"`
}

func moleculeFields() []schema.Field {
	wave := []unit.Dim{unit.Wavenumber}
	return []schema.Field{
		{Key: "E", Doc: "electronic energy at the stationary point, without zero point; with frequencies, and atoms or mass and rotation", Type: schema.Amount, Dims: []unit.Dim{unit.MolarEnergy}, Bare: "@energies", Example: "-76.42 Eh"},
		{Key: "frequencies", Doc: "wavenumbers of all vibrations, equal ones repeated; the imaginary one of a transition state below 0", Type: schema.Amounts, Dims: wave, Bare: "cm-1", Example: "[-1210, 640, 1595]"},
		{Key: "atoms", Doc: "the geometry: on each line a symbol (13C or D for an isotope) and x, y and z in Å", Type: schema.Text, Example: "O 0 0 0.117\nH 0 0.757 -0.469\nH 0 -0.757 -0.469"},
		{Key: "mass", Doc: "molar mass, in place of atoms", Type: schema.Amount, Dims: []unit.Dim{unit.MolarMass}, Bare: "g/mol", Example: "18.01 g/mol"},
		{Key: "rotation", Doc: "rotational constants, with mass: one of a linear molecule, three of any other, none of an atom", Type: schema.Amounts, Dims: wave, Bare: "cm-1", Example: "[27.9, 14.5, 9.3]"},
		{Key: "symmetry", Doc: "rotational symmetry number", Type: schema.Whole, Default: "1", Example: "2"},
		{Key: "multiplicity", Doc: "of the spin", Type: schema.Whole, Default: "1", Example: "3"},
		{Key: "frequency-scale", Doc: "factor on its frequencies", Type: schema.Real, Default: "the mechanism's", Example: "0.97"},
	}
}

var lowModesField = schema.Field{Key: "low-modes", Doc: "how vibrations of low frequency count towards the entropy", Type: schema.Table, Default: "harmonic", Fields: []schema.Field{
	{Key: "treatment", Doc: "harmonic; floor: modes below count as if at it, in heat and entropy but not in the zero point; free rotor: below, the entropy turns into that of a free rotor (Grimme 2012)", Type: schema.Text, OneOf: []string{string(thermo.Harmonic), string(thermo.Floor), string(thermo.FreeRotor)}, Required: true, Example: "free rotor"},
	{Key: "below", Doc: "the wavenumber of the floor, or at which oscillator and rotor count alike", Type: schema.Amount, Dims: []unit.Dim{unit.Wavenumber}, Bare: "cm-1", Default: "100 cm-1", Example: "100 cm-1"},
	{Key: "exponent", Doc: "how sharply oscillator turns into free rotor", Type: schema.Real, Default: "4"},
	{Key: "moment", Doc: "mean moment of inertia of the free rotors", Type: schema.Amount, Dims: []unit.Dim{unit.Inertia}, Default: "1e-44 kg m2", Example: "1e-44 kg m2"},
}}

// first returns the first key that is given.
func (m moleculeSource) first() (string, bool) {
	for _, k := range []struct {
		key   string
		given bool
	}{{"E", m.E != nil}, {"frequencies", m.Frequencies != nil}, {"atoms", m.Atoms != ""}, {"mass", m.Mass != nil}, {"rotation", m.Rotation != nil},
		{"symmetry", m.Symmetry != nil}, {"multiplicity", m.Multiplicity != nil}, {"frequency-scale", m.Scale != nil}} {
		if k.given {
			return k.key, true
		}
	}
	return "", false
}

// molecule turns what a calculation leaves into an energy.
func (r reader) molecule(s moleculeSource, path []string) (given, *fault.Problem) {
	at := func(key ...string) []string { return append(append([]string{}, path...), key...) }
	if s.E == nil {
		key, _ := s.first()
		return given{}, lacking("E", problem(at(key), key+" has no E beside it", "add E, such as E = \"-76.42 Eh\", or give G, or H with S"))
	}
	switch {
	case s.Atoms != "" && (s.Mass != nil || s.Rotation != nil):
		return given{}, problem(at("atoms"), "atoms stand beside mass or rotation", "keep atoms, or mass with rotation")
	case s.Atoms == "" && s.Mass == nil:
		return given{}, lacking("mass", problem(at("E"), "E has no geometry beside it", "add atoms, or mass and rotation; or give G, or H with S"))
	}
	m := &thermo.Molecule{E: s.E.SI, Saddle: r.saddle, Scale: r.scale, LowModes: r.low, Standard: r.standard}
	for i, f := range s.Frequencies {
		if f.SD != 0 {
			return given{}, problem(at("frequencies", fmt.Sprint(i+1)), fmt.Sprintf("the ± of %q is not carried on", f), "give the ± on E")
		}
		m.Frequencies = append(m.Frequencies, f.SI)
	}
	for i, b := range s.Rotation {
		if b.SD != 0 {
			return given{}, problem(at("rotation", fmt.Sprint(i+1)), fmt.Sprintf("the ± of %q is not carried on", b), "give the ± on E")
		}
		m.Rotation = append(m.Rotation, b.SI)
	}
	if s.Mass != nil {
		if s.Mass.SD != 0 {
			return given{}, problem(at("mass"), fmt.Sprintf("the ± of %q is not carried on", *s.Mass), "give the ± on E")
		}
		m.Mass = s.Mass.SI
	}
	if s.Atoms != "" {
		atoms, p := readAtoms(s.Atoms, at("atoms"))
		if p != nil {
			return given{}, p
		}
		m.Atoms = atoms
	}
	for _, n := range []struct {
		key  string
		from *int
		to   *int
	}{{"symmetry", s.Symmetry, &m.Symmetry}, {"multiplicity", s.Multiplicity, &m.Multiplicity}} {
		if n.from == nil {
			continue
		}
		if *n.from < 1 {
			return given{}, problem(at(n.key), fmt.Sprintf("a %s of %d makes no sense", n.key, *n.from), "give a whole number, 1 or more")
		}
		*n.to = *n.from
	}
	if s.Scale != nil {
		if !(*s.Scale > 0) {
			return given{}, problem(at("frequency-scale"), fmt.Sprintf("a factor of %g on frequencies makes no sense", *s.Scale), "give a number above 0, such as 0.97")
		}
		m.Scale = *s.Scale
	}
	if err := m.Check(); err != nil {
		key, msg, fix := moleculeFault(err, s)
		return given{}, problem(at(key), msg, fix)
	}
	return given{energy: thermo.Energy{Molecule: m}, sd: deviation(s.E.SD)}, nil
}

// moleculeFault finds the key behind a refusal of the core.
func moleculeFault(err error, s moleculeSource) (key, msg, fix string) {
	key, msg, fix = "E", err.Error(), "check the geometry and the frequencies"
	var d *rate.DomainError
	if errors.As(err, &d) {
		msg, fix = fmt.Sprintf("%s of %.6g is not possible", d.What, d.Value), d.Fix
	}
	text := err.Error()
	for _, k := range []struct {
		word, key string
		given     bool
	}{{"frequency ", "frequencies", s.Frequencies != nil}, {"number of frequencies", "frequencies", s.Frequencies != nil}, {"imaginary modes", "frequencies", s.Frequencies != nil},
		{"symmetry number", "symmetry", s.Symmetry != nil}, {"rotational constant", "rotation", s.Rotation != nil},
		{"atom", "atoms", s.Atoms != ""}, {"mass", "mass", s.Mass != nil}} {
		if k.given && strings.Contains(text, k.word) {
			return k.key, msg, fix
		}
	}
	return key, msg, fix
}

// readAtoms reads a symbol and three coordinates in Å from each line.
func readAtoms(text string, path []string) ([]thermo.Atom, *fault.Problem) {
	var atoms []thermo.Atom
	const angstrom = 1e-10 // m
	at := 0
	for _, line := range strings.Split(text, "\n") {
		fields := strings.Fields(line)
		start := at + utf8.RuneCountInString(line[:len(line)-len(strings.TrimLeft(line, " \t\r"))])
		at += utf8.RuneCountInString(line) + 1
		if len(fields) == 0 {
			continue
		}
		bad := func(msg, fix string) *fault.Problem {
			p := problem(path, msg, fix)
			p.Char = start
			return p
		}
		if len(fields) != 4 {
			return nil, bad(fmt.Sprintf("%q is not a symbol and three coordinates", strings.TrimSpace(line)), "write a line such as \"O 0.000 0.757 -0.469\", in Å")
		}
		a := thermo.Atom{Symbol: fields[0]}
		for k, into := range []*float64{&a.X, &a.Y, &a.Z} {
			x, err := strconv.ParseFloat(fields[k+1], 64)
			if err != nil || math.IsNaN(x) || math.IsInf(x, 0) {
				return nil, bad(fmt.Sprintf("%q in %q is not a coordinate", fields[k+1], strings.TrimSpace(line)), "write a number in Å, with a point")
			}
			*into = x * angstrom
		}
		if _, err := thermo.Moments([]thermo.Atom{a}); err != nil {
			var d *rate.DomainError
			if errors.As(err, &d) {
				return nil, bad(fmt.Sprintf("%q lies too far out", strings.TrimSpace(line)), "give coordinates in Å")
			}
			return nil, bad(fmt.Sprintf("no mass is known for %q", fields[0]), "write the symbol of an element, such as C, or of an isotope, such as 13C or D")
		}
		atoms = append(atoms, a)
	}
	if len(atoms) == 0 {
		return nil, problem(path, "there are no atoms", "write a line for each, such as \"O 0.000 0.757 -0.469\"")
	}
	return atoms, nil
}

// lowModes turns the choice of the block into that of the core.
func (s *mechanismSource) lowModes() (thermo.LowModes, *fault.Problem) {
	l := s.LowModes
	if l == nil {
		return thermo.LowModes{}, nil
	}
	out := thermo.LowModes{Treatment: thermo.Treatment(l.Treatment)}
	for _, n := range []struct {
		key   string
		given bool
		value float64
		into  *float64
		used  bool
	}{
		{"below", l.Below != nil, amountOr(l.Below), &out.Cutoff, out.Treatment != thermo.Harmonic},
		{"exponent", l.Exponent != nil, orNothing(l.Exponent), &out.Exponent, out.Treatment == thermo.FreeRotor},
		{"moment", l.Moment != nil, amountOr(l.Moment), &out.Moment, out.Treatment == thermo.FreeRotor},
	} {
		switch {
		case !n.given || l.Treatment == "":
		case !n.used:
			return out, problem([]string{"low-modes", n.key}, fmt.Sprintf("%s has no part in the treatment %q", n.key, l.Treatment), "leave it out")
		case !(n.value > 0):
			return out, problem([]string{"low-modes", n.key}, fmt.Sprintf("%s has to be above 0", n.key), "give a number above 0, or leave it out")
		default:
			*n.into = n.value
		}
	}
	return out, nil
}

func amountOr(q *unit.Quantity) float64 {
	if q == nil {
		return 0
	}
	return q.SI
}

func orNothing(x *float64) float64 {
	if x == nil {
		return 0
	}
	return *x
}
