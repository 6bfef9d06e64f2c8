package thermo

import (
	"encoding/json"
	"errors"
	"math"
	"reflect"
	"strings"
	"testing"

	"saddlebook/kinetics/rate"
)

// A transition state is a minimum without its imaginary mode.
func TestSaddle(t *testing.T) {
	m := gas(t, "C2H4")
	m.Frequencies[4] *= -1
	if _, err := m.At(300); !errors.Is(err, rate.ErrDomain) || !strings.Contains(err.Error(), "frequency 5 (cm-1) of -3103 is not possible; a minimum has no imaginary mode") {
		t.Errorf("a minimum with an imaginary mode: %v", err)
	}
	m.Saddle, m.Scale = true, 0.5
	ts := at(t, m, 300)
	if nu, ok := m.Imaginary(); !ok || nu != 3103*cm/2 {
		t.Errorf("imaginary frequency %v, %v", nu, ok)
	}
	whole := gas(t, "C2H4")
	whole.Scale = 0.5
	w := at(t, whole, 300)
	lost := mode(3103*cm/2, 300, LowModes{})
	if !near(w.Vibration.S-ts.Vibration.S, lost.S, 1e-9) || !near(w.ZPE-ts.ZPE, waveEnergy*3103*cm/4, 1e-12) {
		t.Errorf("with the mode %+v, without %+v", w, ts)
	}
	m.Frequencies[0] *= -1
	if err := m.Check(); err == nil || !strings.Contains(err.Error(), "number of imaginary modes in a transition state of 2") {
		t.Errorf("two imaginary modes: %v", err)
	}
	if _, ok := m.Imaginary(); ok {
		t.Error("two imaginary modes give one")
	}
	m = gas(t, "C2H4")
	m.Saddle = true
	if err := m.Check(); err == nil || !strings.Contains(err.Error(), "transition state of 0") {
		t.Errorf("no imaginary mode: %v", err)
	}
}

func TestMoleculeCheck(t *testing.T) {
	inf, nan := math.Inf(1), math.NaN()
	for _, a := range []struct {
		name   string
		change func(m *Molecule)
		says   string
	}{
		{"E", func(m *Molecule) { m.E = nan }, "electronic energy (J/mol) of NaN"},
		{"mass", func(m *Molecule) { m.Mass = 0 }, "mass (kg/mol) of 0 is not possible; give a finite one above zero, or atoms"},
		{"two constants", func(m *Molecule) { m.Rotation = m.Rotation[:2] }, "number of rotational constants of 2"},
		{"a constant of zero", func(m *Molecule) { m.Rotation[2] = 0 }, "rotational constant 3 (cm-1) of 0"},
		{"no constants", func(m *Molecule) { m.Rotation, m.Symmetry = nil, 0 }, "number of frequencies of 3 is not possible; an atom has none; give rotation or atoms"},
		{"an atom that turns", func(m *Molecule) { m.Rotation, m.Frequencies = nil, nil }, "symmetry number of an atom of 2"},
		{"linear by mistake", func(m *Molecule) { m.Rotation = m.Rotation[:1] }, "3N − 5"},
		{"a mode forgotten", func(m *Molecule) { m.Frequencies = m.Frequencies[1:] }, "number of frequencies of 2 is not possible; a molecule of N atoms that is not linear has 3N − 6"},
		{"no modes", func(m *Molecule) { m.Frequencies = nil }, "number of frequencies of 0"},
		{"a translation left in", func(m *Molecule) { m.Frequencies[1] = 0.02 }, "leave translations and rotations out"},
		{"infinite mode", func(m *Molecule) { m.Frequencies[1] = inf }, "frequency 2 (cm-1) of +Inf"},
		{"symmetry", func(m *Molecule) { m.Symmetry = -1 }, "symmetry number of -1"},
		{"multiplicity", func(m *Molecule) { m.Multiplicity = -3 }, "multiplicity of -3"},
		{"scale", func(m *Molecule) { m.Scale = -0.9 }, "scale factor of frequencies of -0.9"},
		{"pressure", func(m *Molecule) { m.Standard.Pressure = -1 }, "standard pressure (Pa) of -1"},
		{"treatment", func(m *Molecule) { m.LowModes.Treatment = "grim" }, `"grim" is not known; give "harmonic", "floor" or "free rotor"`},
		{"cutoff unused", func(m *Molecule) { m.LowModes.Cutoff = 5000 }, `cutoff of low modes (cm-1) of 50 is not possible; leave it out: the treatment "harmonic" does not use it`},
		{"exponent unused", func(m *Molecule) { m.LowModes = LowModes{Treatment: Floor, Exponent: 4} }, "exponent of the free rotor of 4"},
		{"moment", func(m *Molecule) { m.LowModes = LowModes{Treatment: FreeRotor, Moment: -1} }, "moment of inertia of the free rotor (kg m²) of -1"},
		{"shape twice", func(m *Molecule) { m.Atoms = []Atom{{Symbol: "H"}} }, "the shape is said twice"},
	} {
		m := gas(t, "H2O")
		a.change(m)
		err := m.Check()
		if !errors.Is(err, rate.ErrDomain) || !strings.Contains(err.Error(), a.says) {
			t.Errorf("%s: error %v, want one that says %q", a.name, err, a.says)
		}
		if err2 := (Energy{Molecule: m}).Check(); err2 == nil {
			t.Errorf("%s: Energy.Check lets it pass", a.name)
		}
		if _, err := m.At(300); err == nil {
			t.Errorf("%s: At lets it pass", a.name)
		}
	}
	for _, T := range []float64{0, -5, nan, inf, 1e300} {
		if _, err := gas(t, "H2O").At(T); !errors.Is(err, rate.ErrDomain) {
			t.Errorf("at %g K: %v", T, err)
		}
	}
}

// The energy of a state follows its molecule, sums with others and survives JSON.
func TestEnergyOfMolecule(t *testing.T) {
	m := gas(t, "CO2")
	m.E, m.LowModes = -1e6, LowModes{Treatment: FreeRotor, Moment: 2e-44}
	e := Energy{Molecule: m, Offset: 50, Forms: 2}
	for _, T := range []float64{195.15, 298.15, 700} {
		if got, want := e.At(T), at(t, m, T).G+50-rate.R*T*math.Ln2; got != want {
			t.Errorf("at %g K: %v, want %v", T, got, want)
		}
	}
	if !e.Follows() || e.Mixed() || e.Check() != nil {
		t.Errorf("follows %v, mixed %v, %v", e.Follows(), e.Mixed(), e.Check())
	}
	pair := Energy{Conformers: []Energy{{Molecule: m}, {Molecule: m}}}
	if got, want := pair.At(300), at(t, m, 300).G-rate.R*300*math.Ln2; !near(got, want, 1e-14) || !pair.Follows() {
		t.Errorf("two alike: %v, want %v", got, want)
	}
	if !(Energy{Conformers: []Energy{{Molecule: m}, Constant(1)}}).Mixed() {
		t.Error("a molecule beside a constant is not mixed")
	}
	for _, e := range []Energy{e, pair, {Molecule: &Molecule{Atoms: []Atom{{Symbol: "Ar"}}}}} {
		text, err := json.Marshal(e)
		if err != nil {
			t.Fatal(err)
		}
		var back Energy
		if err := json.Unmarshal(text, &back); err != nil || !reflect.DeepEqual(back, e) {
			t.Errorf("%s comes back as %+v, %v", text, back, err)
		}
	}
	if err := (Energy{Molecule: m, Heat: &Heat{}}).Check(); err == nil || !strings.Contains(err.Error(), "said twice") {
		t.Errorf("molecule and heat: %v", err)
	}
	if got := (Energy{Molecule: &Molecule{}}).At(300); !math.IsNaN(got) {
		t.Errorf("a molecule without a shape has the energy %v", got)
	}
}

func FuzzMolecule(f *testing.F) {
	f.Add(0.018, 2000.0, 1500.0, 900.0, 300000.0, 1.0, 298.15, 3)
	f.Add(1e-300, 1e-300, 1e300, 1.0, 1.0, 1e-300, 1e-300, 2)
	f.Add(0.5, 1.0, 1.0, 1.0, 1.0, 100.0, 1e5, 1)
	f.Fuzz(func(t *testing.T, mass, a, b, c, nu, scale, T float64, low int) {
		m := &Molecule{Mass: mass, Rotation: []float64{a, b, c}, Frequencies: []float64{nu, 2 * nu, 3 * nu}, Scale: scale}
		m.LowModes.Treatment = []Treatment{Harmonic, Floor, FreeRotor, "none"}[((low%4)+4)%4]
		got, err := m.At(T)
		if err != nil {
			if !errors.Is(err, rate.ErrDomain) || err.Error() == "" {
				t.Errorf("%+v at %g K: %v", m, T, err)
			}
			return
		}
		if math.IsNaN(got.G) || math.IsInf(got.G, 0) || got.Vibration.H < 0 || got.Vibration.Cp < 0 {
			t.Errorf("%+v at %g K: %+v", m, T, got)
		}
	})
}
