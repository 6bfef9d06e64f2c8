// Package unit reads quantities as authors write them, converts them to the
// base quantities of the program and prints numbers with the digits they
// deserve. It is a leaf: every package may use it.
//
// # Base quantities
//
// Energies are J/mol, entropies and heat capacities J/mol/K, temperatures K,
// times s, concentrations mol/L, pressures Pa, viscosities Pa s, lengths m,
// wavenumbers 1/m, volumes L, masses kg, amounts mol; shares and percentages
// are fractions, equivalents plain multiples.
//
// # Reading
//
// A quantity is a number, an optional ± (or +/-) standard deviation and an
// optional unit that holds for both:
//
//	18.4 kcal/mol    -78 °C    9.9 ± 0.3    (1.5 ± 0.1) × 10⁻³ M⁻¹ s⁻¹    1.1 equiv
//
// A unit is a product of the symbols in the one table (table.go), with powers
// as s^-1, s-1 or s⁻¹, divided by / and grouped by brackets: J/(mol K). Case
// counts, as in the SI: m is a metre and M is mol/L. eV, meV, Eh and mEh are
// per molecule by custom and read as energies per mole; cm-1 is an energy per
// mole where one is wanted and a wavenumber elsewhere.
//
// # Printing
//
// Printed text has the minus sign U+2212 and no-break spaces (U+00A0), so that
// a number is never parted from its sign, power or unit. Quantity.String is
// meant for sources and messages and has the hyphen and the space of a
// keyboard. Both read back.
//
// # Errors
//
// Everything an author can cause is an *Error with a remedy and a place in the
// text. Only Must panics.
//
// # Sources
//
//   - BIPM, The International System of Units, 9th edition (2019), Table 1
//     (defining constants, exact), Table 8 (min, h, d, L) and section 2.3.1
//     (degree Celsius)
//   - CODATA 2022 recommended values of the fundamental physical constants
//     (NIST, May 2024), for the hartree
//   - IUPAC, Quantities, Units and Symbols in Physical Chemistry, 3rd edition
//     (2007), chapter 7 (thermochemical calorie of 4.184 J, atm, bar, Torr,
//     poise; the year of 365.25 d)
package unit
