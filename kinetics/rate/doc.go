// Package rate turns free energies of activation into rate constants and back,
// and rate constants into half-lives; it places a transition state between the
// two sides of its step, shifts standard states and gives the diffusion limit.
// It counts tunnelling, carries constants to other temperatures and gives the
// isotope effects of frequencies.
//
// # Units
//
// Energies are J/mol, temperatures K, times s, concentrations mol/L, pressures
// Pa, viscosities Pa s, frequencies 1/m. Every free energy is at the standard
// state of 1 mol/L; the constant of a step of n molecules is then in
// L^(n-1)/mol^(n-1)/s, because the power of the standard concentration is a power
// of one. Standard.Shift brings an energy given at a pressure there.
//
// # Errors
//
// Functions that can be given the impossible return a *DomainError, which
// matches ErrDomain. Those that return one number only give NaN instead.
//
// # Sources
//
//   - Constants: BIPM, The International System of Units (SI), 9th ed. (2019)
//   - Eyring, J. Chem. Phys. 3, 107 (1935), doi:10.1063/1.1749604
//   - Evans and Polanyi, Trans. Faraday Soc. 31, 875 (1935), doi:10.1039/TF9353100875
//   - Hammond, J. Am. Chem. Soc. 77, 334 (1955), doi:10.1021/ja01607a027
//   - Marcus, J. Phys. Chem. 72, 891 (1968), doi:10.1021/j100849a019
//   - von Smoluchowski, Z. Phys. Chem. 92, 129 (1917)
//   - Those of single functions stand beside them; they are cited from memory
package rate
