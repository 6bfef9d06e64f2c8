package unit

// Constants of nature and of custom. All but the hartree and the mass unit are exact.
// Sources: see the package doc.
const (
	Boltzmann        = 1.380649e-23                   // J/K
	Planck           = 6.62607015e-34                 // J s
	Avogadro         = 6.02214076e23                  // 1/mol
	LightSpeed       = 299792458                      // m/s
	ElementaryCharge = 1.602176634e-19                // C
	GasConstant      = Boltzmann * Avogadro           // J/mol/K
	Calorie          = 4.184                          // J
	Atmosphere       = 101325                         // Pa
	Bar              = 100000                         // Pa
	ZeroCelsius      = 273.15                         // K
	Hartree          = 4.3597447222060e-18            // J; CODATA 2022, standard uncertainty 4.8e-30 J
	MassUnit         = 1.66053906892e-27              // kg; CODATA 2022, standard uncertainty 5.2e-37 kg
	WavenumberEnergy = Planck * LightSpeed * Avogadro // J m/mol: energy per mole of a wavenumber in 1/m
)
