package kind

import (
	"fmt"
	"math"

	"saddlebook/content/fault"
	"saddlebook/content/schema"
	"saddlebook/kinetics/thermo"
	"saddlebook/kinetics/unit"
)

// energySource is the part of a species or a step that gives its energy.
type energySource struct {
	G          *unit.Quantity    `key:"G"`
	H          *unit.Quantity    `key:"H"`
	S          *unit.Quantity    `key:"S"`
	Cp         *unit.Quantity    `key:"Cp"`
	SameAs     string            `key:"same-as"`
	Conformers []conformerSource `key:"conformers"`
	Standard   string            `key:"standard"`
	Label      string            `key:"label"`
	Source     string            `key:"source"`
}

type conformerSource struct {
	G  *unit.Quantity `key:"G"`
	H  *unit.Quantity `key:"H"`
	S  *unit.Quantity `key:"S"`
	Cp *unit.Quantity `key:"Cp"`
}

type speciesSource struct {
	Name string `key:"*"`
	energySource
	Forms   int    `key:"forms"`
	Formula string `key:"formula"`
}

type stepSource struct {
	Name     string `key:"*"`
	Reaction string `key:"reaction"`
	energySource
	Barrier      *unit.Quantity `key:"barrier"`
	Degeneracy   *float64       `key:"degeneracy"`
	Transmission *float64       `key:"transmission"`
}

func amountFields() []schema.Field {
	energy, entropy := []unit.Dim{unit.MolarEnergy}, []unit.Dim{unit.MolarEntropy}
	return []schema.Field{
		{Key: "G", Doc: "free energy at the mechanism's temperature, held constant at others (and flagged)", Type: schema.Amount, Dims: energy, Bare: "@energies", Example: "12.4 ± 0.5"},
		{Key: "H", Doc: "enthalpy, with S", Type: schema.Amount, Dims: energy, Bare: "@energies", Example: "9.0"},
		{Key: "S", Doc: "entropy, with H; its unit must be written unless it is 0", Type: schema.Amount, Dims: entropy, Example: "-24.6 cal/mol/K"},
		{Key: "Cp", Doc: "heat capacity, with H and S at the mechanism's temperature", Type: schema.Amount, Dims: entropy, Example: "12 cal/mol/K"},
	}
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
}

// readAmounts turns one set of G, H, S and Cp into an energy. path leads to the set,
// home is the mechanism's temperature (K).
func readAmounts(c conformerSource, home float64, path []string) (given, *fault.Problem) {
	switch {
	case c.G != nil && (c.H != nil || c.S != nil || c.Cp != nil):
		return given{}, problem(append(path, "G"), "G stands beside H, S or Cp", "give either G, or H with S")
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
		return given{thermo.Energy{Heat: &thermo.Heat{H: c.H.SI, S: c.S.SI, Cp: cp, T0: home}}, deviation(c.H.SD), deviation(c.S.SD)}, nil
	case c.H != nil:
		return given{}, lacking("S", problem(append(path, "H"), "H has no S beside it", "add S, such as S = \"-24.6 cal/mol/K\", or give G"))
	case c.S != nil:
		return given{}, lacking("H", problem(append(path, "S"), "S has no H beside it", "add H, or give G"))
	case c.Cp != nil:
		return given{}, lacking("H", problem(append(path, "Cp"), "Cp has no H and S beside it", "add both, or give G"))
	}
	return given{}, problem(path, "no energy is given", "give G, or H with S, or conformers, or same-as")
}

func deviation(sd float64) *float64 {
	if sd == 0 {
		return nil
	}
	return &sd
}

// none tells whether the source gives no energy at all.
func (e energySource) none() bool {
	return e.G == nil && e.H == nil && e.S == nil && e.Cp == nil && e.SameAs == "" && len(e.Conformers) == 0
}

// read turns the source into an energy, same-as apart.
func (e energySource) read(home float64, path []string) (given, *fault.Problem) {
	single := conformerSource{e.G, e.H, e.S, e.Cp}
	if len(e.Conformers) == 0 {
		return readAmounts(single, home, path)
	}
	if single != (conformerSource{}) {
		return given{}, problem(append(path, "conformers"), "conformers stand beside another energy of the same state", "keep one of them")
	}
	var parts []thermo.Energy
	var sd float64
	for i, c := range e.Conformers {
		g, p := readAmounts(c, home, append(append([]string{}, path...), "conformers", fmt.Sprint(i+1)))
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
