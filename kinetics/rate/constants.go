package rate

// Exact values of the SI of 2019 (BIPM, SI brochure, 9th ed.) and the
// thermochemical calorie. They are untyped, so that products of them are exact.
const (
	Boltzmann = 1.380649e-23         // J/K
	Planck    = 6.62607015e-34       // J s
	Avogadro  = 6.02214076e23        // 1/mol
	R         = Avogadro * Boltzmann // J/mol/K: 8.31446261815324
	Calorie   = 4.184                // J

	Atmosphere = 101325.0 // Pa, standard atmosphere
	Bar        = 100000.0 // Pa
)
