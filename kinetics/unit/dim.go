package unit

// A Dim is the kind of a quantity, as powers of its base kinds. Volume and
// Pressure count as base kinds: chemists write L and bar, not m³ and kg/m/s².
type Dim struct{ Energy, Amount, Volume, Time, Temperature, Pressure, Length, Mass, Equivalent int8 }

// The kinds of quantity that sources hold and pages print.
var (
	None          = Dim{}
	MolarEnergy   = Dim{Energy: 1, Amount: -1}
	MolarEntropy  = Dim{Energy: 1, Amount: -1, Temperature: -1} // molar heat capacities too
	Temperature   = Dim{Temperature: 1}
	Time          = Dim{Time: 1}
	Concentration = Dim{Amount: 1, Volume: -1}
	Pressure      = Dim{Pressure: 1}
	Viscosity     = Dim{Pressure: 1, Time: 1}
	Wavenumber    = Dim{Length: -1}
	Equivalent    = Dim{Equivalent: 1} // multiples of the basis: equiv, mol%
	Length        = Dim{Length: 1}
	Volume        = Dim{Volume: 1}
	Mass          = Dim{Mass: 1}
	Amount        = Dim{Amount: 1}
	Density       = Dim{Mass: 1, Volume: -1}
	SpecificHeat  = Dim{Energy: 1, Mass: -1, Temperature: -1}
	MolarMass     = Dim{Mass: 1, Amount: -1}
	Inertia       = Dim{Mass: 1, Length: 2}
	Heat          = Dim{Energy: 1, Volume: -1}           // per volume of a mixture
	HeatRate      = Dim{Energy: 1, Volume: -1, Time: -1} // likewise
)

// RateConstant is the kind of a rate constant of the given order: 1/s for 1,
// L/mol/s for 2, mol/L/s for 0.
func RateConstant(order int) Dim {
	return Dim{Amount: int8(1 - order), Volume: int8(order - 1), Time: -1}
}

// EquilibriumConstant is the kind of a constant of a reaction that makes
// change more molecules than it takes: (mol/L)^change. It is None for 0 and
// Concentration for 1.
func EquilibriumConstant(change int) Dim {
	return Dim{Amount: int8(change), Volume: int8(-change)}
}

// A kind is a Dim that a quantity may have, in words, with an example for
// remedies and the units to suggest, the usual ones first.
type kind struct {
	dim           Dim
	name, example string
	units         []string
}

var kinds = []kind{
	{None, "a plain number", "0.9", []string{"%"}},
	{MolarEnergy, "an energy per mole", "18.4 kcal/mol", []string{"kcal/mol", "kJ/mol", "eV", "Eh", "cm-1", "J/mol", "cal/mol", "meV", "mEh"}},
	{MolarEntropy, "an entropy or heat capacity per mole", "-33 cal/mol/K", []string{"cal/mol/K", "J/mol/K", "kcal/mol/K", "kJ/mol/K", "eV/K", "Eh/K"}},
	{Temperature, "a temperature", "-78 °C", []string{"°C", "K"}},
	{Time, "a time", "2 h", []string{"h", "min", "s", "ms", "µs", "ns", "ps", "fs", "d", "week", "year"}},
	{Concentration, "a concentration", "0.20 M", []string{"M", "mM", "µM", "nM", "mol/L", "mmol/L", "mol/m3"}},
	{Pressure, "a pressure", "1 atm", []string{"atm", "bar", "mbar", "Pa", "hPa", "kPa", "MPa", "Torr"}},
	{Viscosity, "a viscosity", "0.89 mPa s", []string{"mPa s", "cP", "Pa s"}},
	{Wavenumber, "a wavenumber", "100 cm-1", []string{"cm-1"}},
	{Equivalent, "an amount in equivalents", "1.1 equiv", []string{"equiv", "mol%"}},
	{Length, "a length", "4.5 Å", []string{"Å", "nm", "pm", "µm", "mm", "cm", "m"}},
	{Volume, "a volume", "50 mL", []string{"mL", "L", "µL", "m3", "dm3", "cm3"}},
	{Mass, "a mass", "25 g", []string{"g", "mg", "kg", "µg"}},
	{Amount, "an amount of substance", "5 mmol", []string{"mmol", "mol", "µmol", "kmol"}},
	{Density, "a density", "0.87 g/mL", []string{"g/mL", "kg/L", "kg/m3", "g/cm3", "g/L"}},
	{SpecificHeat, "a heat capacity per mass", "1.7 J/g/K", []string{"J/g/K", "kJ/kg/K", "J/kg/K", "cal/g/K"}},
	{MolarMass, "a molar mass", "28.01 g/mol", []string{"g/mol", "u", "kg/mol"}},
	{Inertia, "a moment of inertia", "1e-44 kg m2", []string{"kg m2"}},
	{Heat, "a heat per volume", "34 kJ/L", []string{"kJ/L", "J/L", "kcal/L", "J/mL"}},
	{HeatRate, "a heat per volume and time", "12 W/L", []string{"W/L", "mW/mL", "kW/m3", "kJ/L/h"}},
	{RateConstant(0), "a rate constant of order 0", "2e-5 M s-1", []string{"M s-1", "mM s-1", "M min-1", "M h-1", "mol L-1 s-1"}},
	{RateConstant(1), "a rate constant of order 1", "3.5e-4 s-1", []string{"s-1", "min-1", "h-1", "ms-1", "d-1"}},
	{RateConstant(2), "a rate constant of order 2", "0.12 M-1 s-1", []string{"M-1 s-1", "L mol-1 s-1", "M-1 min-1", "M-1 h-1", "mM-1 s-1"}},
	{RateConstant(3), "a rate constant of order 3", "40 M-2 s-1", []string{"M-2 s-1", "L2 mol-2 s-1", "M-2 min-1", "M-2 h-1"}},
	{EquilibriumConstant(-3), "an equilibrium constant", "1e9 M-3", []string{"M-3", "mM-3"}},
	{EquilibriumConstant(-2), "an equilibrium constant", "1e6 M-2", []string{"M-2", "mM-2"}},
	{EquilibriumConstant(-1), "an equilibrium constant", "1e3 M-1", []string{"M-1", "mM-1", "µM-1", "L/mol"}},
	{EquilibriumConstant(2), "an equilibrium constant", "1e-6 M2", []string{"M2", "mM2"}},
	{EquilibriumConstant(3), "an equilibrium constant", "1e-9 M3", []string{"M3", "mM3"}},
}

func (d Dim) kind() (kind, bool) {
	for _, k := range kinds {
		if k.dim == d {
			return k, true
		}
	}
	return kind{}, false
}

// String names the kind with its article, for messages: "an energy per mole".
func (d Dim) String() string {
	if k, ok := d.kind(); ok {
		return k.name
	}
	return "a quantity of an unusual kind"
}

// Example is a quantity of this kind as an author writes it, for remedies:
// "18.4 kcal/mol". It is "" for a kind that no source may hold.
func (d Dim) Example() string {
	k, _ := d.kind()
	return k.example
}
