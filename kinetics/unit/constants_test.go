package unit

import (
	"math"
	"testing"
)

// near fails unless got is within a relative error of want; it also fails for NaN.
func near(t *testing.T, got, want, tol float64, source string) {
	t.Helper()
	if e := math.Abs(got-want) / math.Abs(want); !(e <= tol) {
		t.Errorf("got %.17g, want %.17g (relative error %.1e)\nsource: %s", got, want, e, source)
	}
}

func TestConstants(t *testing.T) {
	const (
		si     = "SI brochure, 9th edition (2019), Table 1 (exact)"
		custom = "exact by convention: IUPAC Green Book, 3rd edition, chapter 7"
		codata = "CODATA 2022, u = 4.8e-30 J"
		made   = "computed from the exact constants with 40 digits"
	)
	for _, tt := range []struct {
		name      string
		got, want float64
		tol       float64
		source    string
	}{
		{"Boltzmann", Boltzmann, 1.380649e-23, 0, si},
		{"Planck", Planck, 6.62607015e-34, 0, si},
		{"Avogadro", Avogadro, 6.02214076e23, 0, si},
		{"light", LightSpeed, 299792458, 0, si},
		{"charge", ElementaryCharge, 1.602176634e-19, 0, si},
		{"calorie", Calorie, 4.184, 0, custom},
		{"atmosphere", Atmosphere, 101325, 0, custom},
		{"bar", Bar, 1e5, 0, custom},
		{"zero Celsius", ZeroCelsius, 273.15, 0, si},
		{"hartree", Hartree, 4.3597447222060e-18, 0, codata},
		{"gas constant", GasConstant, 8.31446261815324, 1e-15, made},
		{"gas constant/cal", GasConstant / Calorie, 1.987204258640832, 1e-15, made},
		{"kB/h", Boltzmann / Planck, 20836619123.32757, 1e-15, made},
		{"RT/kJ", GasConstant * 298.15 / 1000, 2.478957029602389, 1e-15, made},
		{"hartree in eV", Hartree / ElementaryCharge, 27.211386245981, 2e-12, "CODATA 2022, u = 3.0e-11 eV"},
		{"R in L atm", GasConstant / Atmosphere * 1000, 0.08205736608095968, 1e-15, made},
	} {
		t.Run(tt.name, func(t *testing.T) { near(t, tt.got, tt.want, tt.tol, tt.source) })
	}
}

func TestConversions(t *testing.T) {
	const made = "computed from the exact SI constants (2019), the calorie of 4.184 J and the CODATA 2022 hartree with 40 digits"
	for _, tt := range []struct {
		from, to string
		want     Dim
		factor   float64
		source   string
	}{
		{"eV", "kJ/mol", MolarEnergy, 96.48533212331002, made},
		{"eV", "kcal/mol", MolarEnergy, 23.06054783061903, made},
		{"eV", "cm-1", MolarEnergy, 8065.543937349212, made},
		{"cm-1", "kJ/mol", MolarEnergy, 0.0119626565638697, made},
		{"cm-1", "kcal/mol", MolarEnergy, 0.002859143538209776, made},
		{"kcal/mol", "kJ/mol", MolarEnergy, 4.184, made},
		{"kcal/mol", "cm-1", MolarEnergy, 349.7550880660368, made},
		{"Eh", "kJ/mol", MolarEnergy, 2625.499639479163, made},
		{"Eh", "kcal/mol", MolarEnergy, 627.5094740628975, made},
		{"Eh", "eV", MolarEnergy, 27.21138624598117, made},
		{"Eh", "cm-1", MolarEnergy, 219474.6313631411, made},
		{"kcal/mol/K", "J/mol/K", MolarEntropy, 4184, made},
		{"eV/K", "kJ/mol/K", MolarEntropy, 96.48533212331002, made},
		{"Eh/K", "cal/mol/K", MolarEntropy, 627509.4740628975, made},
		{"cm-1", "m-1", Wavenumber, 100, "by definition"},
		{"atm", "bar", Pressure, 1.01325, "IUPAC Green Book: exact"},
		{"atm", "Torr", Pressure, 760, "IUPAC Green Book: exact"},
		{"cP", "mPa s", Viscosity, 1, "IUPAC Green Book: exact"},
		{"mol/m3", "mM", Concentration, 1, "by definition"},
		{"M-1 min-1", "L mol-1 s-1", RateConstant(2), 1.0 / 60, "by definition"},
		{"mM-2 s-1", "M-2 s-1", RateConstant(3), 1e6, "by definition"},
		{"cm6 mol-2 s-1", "M-2 s-1", RateConstant(3), 1e-6, "by definition"},
		{"mM/h", "M s-1", RateConstant(0), 1.0 / 3600000, "by definition"},
		{"year", "d", Time, 365.25, "IUPAC Green Book: Julian year"},
		{"g/cm3", "kg/m3", Density, 1000, "by definition"},
		{"J/g/K", "J/kg/K", SpecificHeat, 1000, "by definition"},
		{"u", "g/mol", MolarMass, 1.00000000105, "CODATA 2022: molar mass constant, relative standard uncertainty 3.1e-10"},
		{"kg Å2", "kg m2", Inertia, 1e-20, "by definition"},
		{"kcal/L", "J/L", Heat, 4184, "by definition"},
		{"kJ/L/h", "W/L", HeatRate, 1.0 / 3.6, "by definition"},
		{"kW/m3", "W/L", HeatRate, 1, "by definition"},
	} {
		t.Run(tt.from+" to "+tt.to, func(t *testing.T) {
			a, err := Lookup(tt.from, tt.want)
			if err != nil {
				t.Fatal(err)
			}
			b, err := Lookup(tt.to, tt.want)
			if err != nil {
				t.Fatal(err)
			}
			tol := 4e-16 * 2
			if tt.want == MolarMass {
				tol = 1e-11 // the digits of the source
			}
			near(t, b.Of(a.Base(1)), tt.factor, tol, tt.source)
		})
	}
	near(t, Must("°C").Base(25), 298.15, 0, "SI brochure, 9th edition, section 2.3.1")
	near(t, Must("°C").Base(-78), 195.15, 2e-16, "SI brochure, 9th edition, section 2.3.1")
	near(t, Must("°C").Of(0), -273.15, 0, "SI brochure, 9th edition, section 2.3.1")
}
