package unit

// A part is one symbol that units are made of. A value in it times num/den,
// plus offset, is the value in base quantities. Numerator and denominator stand
// apart so that 1/1000 is rounded once and only once.
type part struct {
	symbol   string
	dim      Dim
	num, den float64
	offset   float64
	alone    bool     // not part of a product: °C, %, equiv
	also     []string // other ways of writing it
}

// The one table of units, in the order in which a product is written: energy,
// amount per volume, volume, amount, mass, length, pressure, time, temperature.
// Symbols, prefixes and their case follow the SI brochure; the words beside
// them are common practice.
var parts = []part{
	{symbol: "kcal", dim: Dim{Energy: 1}, num: 1000 * Calorie, den: 1},
	{symbol: "cal", dim: Dim{Energy: 1}, num: 1000 * Calorie, den: 1000},
	{symbol: "kJ", dim: Dim{Energy: 1}, num: 1000, den: 1},
	{symbol: "J", dim: Dim{Energy: 1}, num: 1, den: 1},
	{symbol: "kW", dim: Dim{Energy: 1, Time: -1}, num: 1000, den: 1},
	{symbol: "W", dim: Dim{Energy: 1, Time: -1}, num: 1, den: 1},
	{symbol: "mW", dim: Dim{Energy: 1, Time: -1}, num: 1, den: 1000},
	{symbol: "eV", dim: MolarEnergy, num: ElementaryCharge * Avogadro, den: 1},
	{symbol: "meV", dim: MolarEnergy, num: ElementaryCharge * Avogadro, den: 1000},
	{symbol: "Eh", dim: MolarEnergy, num: Hartree * Avogadro, den: 1, also: []string{"E_h", "hartree", "Hartree", "Ha"}},
	{symbol: "mEh", dim: MolarEnergy, num: Hartree * Avogadro, den: 1000, also: []string{"mE_h", "mHa"}},

	{symbol: "M", dim: Concentration, num: 1, den: 1},
	{symbol: "mM", dim: Concentration, num: 1, den: 1e3},
	{symbol: "µM", dim: Concentration, num: 1, den: 1e6, also: []string{"uM"}},
	{symbol: "nM", dim: Concentration, num: 1, den: 1e9},
	{symbol: "pM", dim: Concentration, num: 1, den: 1e12},

	{symbol: "L", dim: Volume, num: 1, den: 1, also: []string{"l"}},
	{symbol: "mL", dim: Volume, num: 1, den: 1e3, also: []string{"ml"}},
	{symbol: "µL", dim: Volume, num: 1, den: 1e6, also: []string{"µl", "uL", "ul"}},
	{symbol: "m3", dim: Volume, num: 1000, den: 1},
	{symbol: "dm3", dim: Volume, num: 1, den: 1},
	{symbol: "cm3", dim: Volume, num: 1, den: 1e3},
	{symbol: "mm3", dim: Volume, num: 1, den: 1e6},

	{symbol: "mol", dim: Amount, num: 1, den: 1},
	{symbol: "kmol", dim: Amount, num: 1000, den: 1},
	{symbol: "mmol", dim: Amount, num: 1, den: 1e3},
	{symbol: "µmol", dim: Amount, num: 1, den: 1e6, also: []string{"umol"}},

	{symbol: "kg", dim: Mass, num: 1, den: 1},
	{symbol: "g", dim: Mass, num: 1, den: 1e3},
	{symbol: "mg", dim: Mass, num: 1, den: 1e6},
	{symbol: "µg", dim: Mass, num: 1, den: 1e9, also: []string{"ug"}},

	{symbol: "m", dim: Length, num: 1, den: 1},
	{symbol: "dm", dim: Length, num: 1, den: 10},
	{symbol: "cm", dim: Length, num: 1, den: 100},
	{symbol: "mm", dim: Length, num: 1, den: 1e3},
	{symbol: "µm", dim: Length, num: 1, den: 1e6, also: []string{"um"}},
	{symbol: "nm", dim: Length, num: 1, den: 1e9},
	{symbol: "pm", dim: Length, num: 1, den: 1e12},
	{symbol: "Å", dim: Length, num: 1, den: 1e10, also: []string{"\u212b", "A\u030a", "angstrom"}},

	{symbol: "u", dim: MolarMass, num: MassUnit * Avogadro, den: 1, also: []string{"Da"}},

	{symbol: "bar", dim: Pressure, num: Bar, den: 1},
	{symbol: "mbar", dim: Pressure, num: Bar, den: 1000},
	{symbol: "atm", dim: Pressure, num: Atmosphere, den: 1},
	{symbol: "Torr", dim: Pressure, num: Atmosphere, den: 760, also: []string{"torr"}},
	{symbol: "Pa", dim: Pressure, num: 1, den: 1},
	{symbol: "hPa", dim: Pressure, num: 100, den: 1},
	{symbol: "kPa", dim: Pressure, num: 1e3, den: 1},
	{symbol: "MPa", dim: Pressure, num: 1e6, den: 1},
	{symbol: "mPa", dim: Pressure, num: 1, den: 1e3},
	{symbol: "cP", dim: Viscosity, num: 1, den: 1e3},

	{symbol: "s", dim: Time, num: 1, den: 1, also: []string{"sec", "second", "seconds"}},
	{symbol: "ms", dim: Time, num: 1, den: 1e3},
	{symbol: "µs", dim: Time, num: 1, den: 1e6, also: []string{"us"}},
	{symbol: "ns", dim: Time, num: 1, den: 1e9},
	{symbol: "ps", dim: Time, num: 1, den: 1e12},
	{symbol: "fs", dim: Time, num: 1, den: 1e15},
	{symbol: "min", dim: Time, num: 60, den: 1, also: []string{"minute", "minutes"}},
	{symbol: "h", dim: Time, num: 3600, den: 1, also: []string{"hr", "hour", "hours"}},
	{symbol: "d", dim: Time, num: 86400, den: 1, also: []string{"day", "days"}},
	{symbol: "week", dim: Time, num: 7 * 86400, den: 1, also: []string{"weeks"}},
	{symbol: "year", dim: Time, num: 365.25 * 86400, den: 1, also: []string{"a", "yr", "years"}}, // Julian year

	{symbol: "K", dim: Temperature, num: 1, den: 1, also: []string{"kelvin"}},
	{symbol: "°C", dim: Temperature, num: 1, den: 1, offset: ZeroCelsius, alone: true, also: []string{"C", "\u2103", "ºC", "degC"}},

	{symbol: "%", dim: None, num: 1, den: 100, alone: true},
	{symbol: "equiv", dim: Equivalent, num: 1, den: 1, alone: true, also: []string{"equiv.", "eq", "eq.", "equivalent", "equivalents"}},
	{symbol: "mol%", dim: Equivalent, num: 1, den: 100, alone: true, also: []string{"mol %", "mol-%"}},
}

// byName finds a part by any of its names.
var byName = func() map[string]int {
	names := make(map[string]int)
	add := func(name string, i int) {
		if _, double := names[name]; double {
			panic("unit: " + name + " stands twice in the table")
		}
		names[name] = i
	}
	for i, p := range parts {
		add(p.symbol, i)
		for _, name := range p.also {
			add(name, i)
		}
	}
	return names
}()
