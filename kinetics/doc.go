// Package kinetics turns the free energies of a mechanism into rate constants,
// equilibrium constants, kinetic limits and equilibrium compositions.
//
// A Mechanism holds the energies as an author gives them. At sets a temperature
// and returns a Network: one number for each species and transition state, all
// on one scale, and a rate constant for each direction of each step. Everything
// else is computed from the Network.
//
// # Units
//
// Energies are J/mol, entropies J/mol/K, temperatures K, times s,
// concentrations mol/L, pressures Pa; shares are fractions. Every energy in a
// Network stands at 1 mol/L, whatever standard state it was given for. Messages
// print kcal/mol with kJ/mol beside.
//
// # Mathematics
//
// A species with n indistinct forms has G − RT ln n. An energy for a standard
// pressure p° is shifted by RT ln(c°RT/p°) at the temperature in use, c° being
// 1 mol/L: every species and every transition state once. A barrier given above
// n reactant molecules is a difference, so it shifts by (1 − n) times that.
//
// Rate constants are Eyring's. Degeneracy and transmission multiply both
// directions and the equilibrium constant is exp(−ΔG/RT) whatever they are, so
// every closed loop of steps obeys detailed balance by construction. The
// position of a transition state is √f/(√f + √r) with f and r the barriers
// forward and back.
//
// A step may state its rate in place of an energy (Law): a measured constant, at
// its temperature, carried to others by Ea or at the ΔG‡ that it implies; the
// diffusion limit; or an equilibrium that is kept fast. Its equilibrium constant
// is k over k-back, or K, or that of the species. Species without an energy take
// theirs from such constants: each is one linear equation, ΣνG = −RT ln K. What
// is left free stands at 0, and a step whose free energy of reaction nothing
// gives has NaN for it. Constants that say the same thing twice, around a cycle
// or beside energies, must agree within 5 %, and the last then follows from the
// others; beyond that they are refused. Tunnelling and the limit by diffusion
// multiply both directions, as degeneracy does.
//
// # Errors
//
// What an author can cause comes back as a *ReactionError (a reaction that
// cannot be read), a *FormulaError (a formula that cannot be read), Complaints
// (energies that make no sense, steps that do not balance), a *LimitError (a
// limit that is not defined) or a *PathError (a profile that cannot be walked).
// A panic means a fault in the calling code: an index or a length that does not
// fit the mechanism.
//
// # Limits
//
// Elementary steps of up to three molecules, well mixed, ideal solution, no
// volume change. The kinetic limit is computed for what is of first order in
// the followed species. Rate constants too small for a float64 are 0; their
// logarithms, which the limits use, are not.
//
// # Sources
//
// Page numbers and DOIs are from memory, unverified.
//
//   - rate constants: Eyring, J. Chem. Phys. 3, 107 (1935), doi:10.1063/1.1749604
//   - diffusion limit: von Smoluchowski, Z. Phys. Chem. 92, 129 (1917)
//   - position: Marcus, J. Phys. Chem. 72, 891 (1968), doi:10.1021/j100849a019
//   - fast exchange: Seeman, Chem. Rev. 83, 83 (1983), doi:10.1021/cr00054a001
//   - branching without subtraction: Grassmann, Taksar, Heyman, Oper. Res. 33,
//     1107 (1985), doi:10.1287/opre.33.5.1107
//   - kinetic control as the limit without return, and the warning below a
//     barrier of 3 kcal/mol: common practice
package kinetics
