// Package lettering turns plain text into measured runs: text that knows which
// of its letters stand as subscripts or superscripts, and how wide it is.
//
// # Units
//
// Sizes and widths are in the unit of the caller, such as SVG user units. One
// size is one em.
//
// # What is set
//
//   - Charges, powers and double daggers stand high: NH4+, Cu2+, mol^-1, ΔG‡.
//   - Counts in formulas stand low: H2O, Pd(PPh3)4. See formula.go for the rule
//     that tells a formula from a name such as TS2 or R2.
//   - SN2 gets its low N. TS2' gets a prime. A hyphen before a number becomes a
//     minus.
//   - Whatever the rule leaves plain can be written out: I_2, SO4^2-, k_{obs},
//     ^{13}C.
//
// # Measure
//
// Advance widths are those of Liberation Sans, which are also those of Arial and
// Helvetica. Letters outside that font count one em (wide scripts, symbols) or
// nothing (marks that combine). Kerning is left out: figures switch it off.
package lettering
