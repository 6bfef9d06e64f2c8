package kind

import "saddlebook/kinetics/unit"

// The units that results are printed in.
var (
	plain   = unit.Unit{Scale: 1} // a number without a unit
	percent = unit.Must("%")

	kcalPerMol = unit.Must("kcal/mol")
	kJPerMol   = unit.Must("kJ/mol")

	molar   = unit.Must("M")
	seconds = unit.Must("s")
	celsius = unit.Must("°C")

	// rateUnits are those of steps of one, two and three molecules.
	rateUnits = [...]unit.Unit{unit.Must("s-1"), unit.Must("M-1 s-1"), unit.Must("M-2 s-1")}

	// constantUnits are those of equilibrium constants, by the change of molecules.
	constantUnits = map[int]unit.Unit{
		-2: unit.Must("M-2"), -1: unit.Must("M-1"), 0: plain, 1: molar, 2: unit.Must("M2"),
	}
)

// energyUnits returns the unit that differences of energy are printed in where a
// mechanism gives its energies in the given unit, and the unit beside it. Hartree
// are too large for differences.
func energyUnits(given string) (first, beside unit.Unit) {
	switch given {
	case "", "kcal/mol", "Eh":
		return kcalPerMol, kJPerMol
	case "kJ/mol":
		return kJPerMol, kcalPerMol
	}
	return unit.Must(given, unit.MolarEnergy), kJPerMol
}
