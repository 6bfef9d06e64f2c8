package kind

import (
	"fmt"
	"math"

	"saddlebook/content/fault"
	"saddlebook/content/schema"
	"saddlebook/kinetics/rate"
	"saddlebook/kinetics/thermo"
	"saddlebook/kinetics/unit"
)

// amountsSource is one energy by numbers: a free energy, an enthalpy with an
// entropy, or what a calculation of frequencies leaves.
type amountsSource struct {
	G  *unit.Quantity `key:"G"`
	H  *unit.Quantity `key:"H"`
	S  *unit.Quantity `key:"S"`
	Cp *unit.Quantity `key:"Cp"`
	moleculeSource
}

// energySource is the part of a species or a step that gives its energy.
type energySource struct {
	amountsSource
	SameAs     string          `key:"same-as"`
	Conformers []amountsSource `key:"conformers"`
	Standard   string          `key:"standard"`
	Label      string          `key:"label"`
	Source     string          `key:"source"`
}

type speciesSource struct {
	Name string `key:"*"`
	energySource
	Forms   *int   `key:"forms"`
	Formula string `key:"formula"`
}

func amountFields() []schema.Field {
	energy, entropy := []unit.Dim{unit.MolarEnergy}, []unit.Dim{unit.MolarEntropy}
	return append([]schema.Field{
		{Key: "G", Doc: "free energy at the mechanism's temperature, held constant at others (and flagged)", Type: schema.Amount, Dims: energy, Bare: "@energies", Example: "12.4 ± 0.5"},
		{Key: "H", Doc: "enthalpy, with S", Type: schema.Amount, Dims: energy, Bare: "@energies", Example: "9.0"},
		{Key: "S", Doc: "entropy, with H; its unit must be written unless it is 0", Type: schema.Amount, Dims: entropy, Example: "-24.6 cal/mol/K"},
		{Key: "Cp", Doc: "heat capacity, with H and S at the mechanism's temperature", Type: schema.Amount, Dims: entropy, Example: "12 cal/mol/K"},
	}, moleculeFields()...)
}

func energyFields() []schema.Field {
	return append(amountFields(), []schema.Field{
		{Key: "same-as", Doc: "the name of a state with the same energy", Type: schema.Text, Wants: "state", Example: "A"},
		{Key: "conformers", Doc: "a list of energies, summed by their Boltzmann weights", Type: schema.Tables, Fields: amountFields(), Example: "[{ G = 0 }, { G = 0.9 }]"},
		{Key: "standard", Doc: "the standard state of this energy", Type: schema.Text, OneOf: []string{"1 M", "1 atm", "1 bar"}, Default: "the mechanism's"},
		{Key: "label", Doc: "the name on figures and tables", Type: schema.Text, Default: "its key", Example: "1,2-adduct"},
		{Key: "source", Doc: "where this energy comes from", Type: schema.Text, Example: "calorimetry, notebook 12 p. 40"},
	}...)
}

// given is an energy as read, with its own standard deviations.
type given struct {
	energy    thermo.Energy
	sd        *float64 // J/mol
	sdEntropy *float64 // J/mol/K
	unknown   bool     // a species without an energy
}

// reader is what the reading of one state's energy needs beside its source.
type reader struct {
	home     float64 // K, the mechanism's temperature
	saddle   bool    // a transition state
	standard rate.Standard
	low      thermo.LowModes
	scale    float64 // of frequencies, 0: none
}

// amounts turns one set of numbers into an energy. path leads to the set.
func (r reader) amounts(c amountsSource, path []string) (given, *fault.Problem) {
	key, computed := c.moleculeSource.first()
	switch {
	case c.G != nil && (c.H != nil || c.S != nil || c.Cp != nil):
		return given{}, problem(append(path, "G"), "G stands beside H, S or Cp", "give either G, or H with S")
	case computed && (c.G != nil || c.H != nil || c.S != nil || c.Cp != nil):
		return given{}, problem(append(path, key), fmt.Sprintf("%s stands beside G, H, S or Cp", key), "give either E with frequencies, or G, or H with S")
	case computed:
		return r.molecule(c.moleculeSource, path)
	case c.G != nil:
		return given{energy: thermo.Constant(c.G.SI), sd: deviation(c.G.SD)}, nil
	case c.H != nil && c.S != nil:
		cp, cpSD := 0.0, 0.0
		if c.Cp != nil {
			cp, cpSD = c.Cp.SI, c.Cp.SD
		}
		if cpSD != 0 {
			return given{}, problem(append(path, "Cp"), "a ± on Cp is not carried on", "give the ± on H or S")
		}
		return given{energy: thermo.Energy{Heat: &thermo.Heat{H: c.H.SI, S: c.S.SI, Cp: cp, T0: r.home}}, sd: deviation(c.H.SD), sdEntropy: deviation(c.S.SD)}, nil
	case c.H != nil:
		return given{}, lacking("S", problem(append(path, "H"), "H has no S beside it", "add S, such as S = \"-24.6 cal/mol/K\", or give G"))
	case c.S != nil:
		return given{}, lacking("H", problem(append(path, "S"), "S has no H beside it", "add H, or give G"))
	case c.Cp != nil:
		return given{}, lacking("H", problem(append(path, "Cp"), "Cp has no H and S beside it", "add both, or give G"))
	}
	return given{}, problem(path, "no energy is given", "give G, or H with S, or E with frequencies, or conformers, or same-as")
}

func deviation(sd float64) *float64 {
	if sd == 0 {
		return nil
	}
	return &sd
}

// none tells whether the source gives no energy at all.
func (a amountsSource) none() bool {
	_, computed := a.moleculeSource.first()
	return a.G == nil && a.H == nil && a.S == nil && a.Cp == nil && !computed
}

// none tells whether the source gives no energy at all.
func (e energySource) none() bool {
	return e.amountsSource.none() && e.SameAs == "" && len(e.Conformers) == 0
}

// energy turns the source into an energy, same-as apart.
func (r reader) energy(e energySource, path []string) (given, *fault.Problem) {
	if len(e.Conformers) == 0 {
		return r.amounts(e.amountsSource, path)
	}
	if !e.amountsSource.none() {
		return given{}, problem(append(path, "conformers"), "conformers stand beside another energy of the same state", "keep one of them")
	}
	var parts []thermo.Energy
	var sd float64
	for i, c := range e.Conformers {
		g, p := r.amounts(c, append(append([]string{}, path...), "conformers", fmt.Sprint(i+1)))
		if p != nil {
			return given{}, p
		}
		if g.sdEntropy != nil {
			return given{}, problem(append(path, "conformers", fmt.Sprint(i+1), "S"), "a ± on the entropy of a conformer is not carried on", "give the ± on its H")
		}
		if g.sd != nil {
			sd = math.Max(sd, *g.sd)
		}
		parts = append(parts, g.energy)
	}
	sum := thermo.Energy{Conformers: parts}
	if sum.Mixed() {
		return given{}, problem(append(path, "conformers"), "some conformers follow temperature and some do not", "give all of them as G, or all as H with S")
	}
	return given{energy: sum, sd: deviation(sd)}, nil
}

func lacking(key string, p *fault.Problem) *fault.Problem {
	p.Lacks = key
	return p
}

func problem(path []string, msg, fix string) *fault.Problem {
	return &fault.Problem{Path: append([]string{}, path...), Severity: fault.Error, Msg: msg, Fix: fix}
}
