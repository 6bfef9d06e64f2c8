package kind

import (
	"context"

	"saddlebook/content/schema"
	"saddlebook/kinetics"
	"saddlebook/kinetics/unit"
	"saddlebook/render/paper"
)

func init() {
	Register(Kind[mechanismSource, mechanismValue]{
		Name:    "mechanism",
		Doc:     "Species and steps under one id, with the free energies that say which way and how fast.",
		Method:  "Rate constants by the Eyring equation with the exact constants of 2019; equilibrium constants from the free energies, so that every reversible step obeys detailed balance; positions by the Marcus relation.",
		Version: 1,
		Fields:  mechanismFields,
		ID:      func(s *mechanismSource) string { return s.ID },
		Files: func(s *mechanismSource) []string {
			if s.Table == nil {
				return nil
			}
			return []string{s.Table.File}
		},
		Compute: func(_ context.Context, s *mechanismSource, in Inputs) (mechanismValue, error) {
			m, problems := s.build(in)
			if problems.Failed() {
				return mechanismValue{}, problems
			}
			v, err := s.tabulate(m)
			if err != nil {
				return v, err
			}
			if len(problems) > 0 {
				return v, problems
			}
			return v, nil
		},
		Results: (*mechanismSource).results,
		Gives: []Gift{
			{"barrier/STEP@T", "free energy of activation, forward"},
			{"barrier-back/STEP@T", "free energy of activation of the return"},
			{"reaction-energy/STEP@T", "free energy of reaction"},
			{"rate/STEP@T", "rate constant, forward"},
			{"rate-back/STEP@T", "rate constant of the return"},
			{"equilibrium-constant/STEP@T", "forward over back rate constant"},
			{"half-life/STEP@T", "half-life of the reactant; for more than one molecule, with the others at half-life-at"},
			{"half-life-back/STEP@T", "the same for the return"},
			{"position/STEP@T", "position of the transition state between reactants (0) and products (1)"},
			{"character/STEP@T", "early, central or late"},
			{"racemisation/STEP@T", "rate constant of racemisation of a step between enantiomers: twice its rate constant"},
			{"racemisation-half-life/STEP@T", "time in which the ee halves by that step"},
			{"ee-loss/STEP@T", "time in which one per cent of the ee is lost by that step"},
		},
		Present: (*mechanismSource).present,
		Sampler: func(_ context.Context, s *mechanismSource, in Inputs) (Sampler, error) {
			m, problems := s.build(in)
			if problems.Failed() {
				return Sampler{}, problems
			}
			return Sampler{Mechanism: m, Temperatures: kelvins(s.temperatures()), Results: func(m *kinetics.Mechanism) ([]Result, error) {
				v, err := s.tabulate(m)
				if err != nil {
					return nil, err
				}
				return s.results(v), nil
			}}, nil
		},
	})
}

type mechanismSource struct {
	ID          string          `key:"id"`
	Title       string          `key:"title"`
	Energies    string          `key:"energies"`
	Temperature unit.Quantity   `key:"temperature"`
	At          []unit.Quantity `key:"at"`
	Standard    string          `key:"standard"`
	Method      string          `key:"method"`
	HalfLifeAt  *unit.Quantity  `key:"half-life-at"`
	Enantiomers []string        `key:"enantiomers"`
	Viscosity   *unit.Quantity  `key:"viscosity"`
	Error       *errorSource    `key:"error"`
	Shared      []sharedSource  `key:"shared"`
	Table       *tableSource    `key:"table"`
	Species     []speciesSource `key:"species"`
	Step        []stepSource    `key:"step"`
}

type errorSource struct {
	Species       *unit.Quantity `key:"species"`
	Step          *unit.Quantity `key:"step"`
	SharedSpecies *unit.Quantity `key:"shared-species"`
	SharedStep    *unit.Quantity `key:"shared-step"`
}

type sharedSource struct {
	Of []string      `key:"of"`
	SD unit.Quantity `key:"sd"`
}

var mechanismFields = []schema.Field{
	{Key: "id", Doc: "the name by which other blocks and readings call this mechanism", Type: schema.Text, Name: true, Required: true, Example: "addition"},
	{Key: "title", Doc: "the heading of its table", Type: schema.Text, Example: "Addition to enone 3"},
	{Key: "energies", Doc: "the unit of bare energies", Type: schema.Text, OneOf: []string{"kcal/mol", "kJ/mol", "eV", "Eh", "cm-1"}, Default: "kcal/mol"},
	{Key: "temperature", Doc: "the temperature at which given G values hold", Type: schema.Amount, Dims: []unit.Dim{unit.Temperature}, Required: true, Example: "25 °C"},
	{Key: "at", Doc: "the temperatures of the table", Type: schema.Amounts, Dims: []unit.Dim{unit.Temperature}, Default: "the mechanism's own temperature", Example: "25 °C"},
	{Key: "standard", Doc: "the standard state of the given energies; the program works at 1 M", Type: schema.Text, OneOf: []string{"1 M", "1 atm", "1 bar"}, Default: "1 M"},
	{Key: "method", Doc: "where the energies come from, printed as provenance", Type: schema.Text, Example: "functional/basis, solvent model"},
	{Key: "half-life-at", Doc: "the concentration of the other molecules for half-lives of steps of more than one", Type: schema.Amount, Dims: []unit.Dim{unit.Concentration}, Default: "1 M", Example: "0.2 M"},
	{Key: "enantiomers", Doc: "two species that mirror each other; a step between them racemises", Type: schema.Words, Wants: "species", Example: `["R", "S"]`},
	{Key: "viscosity", Doc: "of the solvent, for the diffusion limit that steps of two molecules are held against", Type: schema.Amount, Dims: []unit.Dim{unit.Viscosity}, Default: "1 mPa s", Example: "0.6 mPa s"},
	{Key: "error", Doc: "standard deviations where a state gives none of its own", Type: schema.Table, Fields: []schema.Field{
		{Key: "species", Doc: "own error of each species", Type: schema.Amount, Dims: []unit.Dim{unit.MolarEnergy}, Bare: "@energies", Example: "0.5 kcal/mol"},
		{Key: "step", Doc: "own error of each transition state", Type: schema.Amount, Dims: []unit.Dim{unit.MolarEnergy}, Bare: "@energies", Example: "0.8 kcal/mol"},
		{Key: "shared-species", Doc: "error that all species have in common", Type: schema.Amount, Dims: []unit.Dim{unit.MolarEnergy}, Bare: "@energies", Example: "1 kcal/mol"},
		{Key: "shared-step", Doc: "error that all transition states have in common", Type: schema.Amount, Dims: []unit.Dim{unit.MolarEnergy}, Bare: "@energies", Example: "1.5 kcal/mol"},
	}},
	{Key: "shared", Doc: "errors that the named states have in common", Type: schema.Tables, Fields: []schema.Field{
		{Key: "of", Doc: "species and steps", Type: schema.Words, Required: true, Wants: "state", Example: `["TSa", "TSb"]`},
		{Key: "sd", Doc: "the common standard deviation", Type: schema.Amount, Dims: []unit.Dim{unit.MolarEnergy}, Bare: "@energies", Required: true, Example: "2 kcal/mol"},
	}},
	{Key: "table", Doc: "a CSV file beside the note with a row for each state: columns name, optional reaction, label and source, and the columns to add up", Type: schema.Table, Fields: []schema.Field{
		{Key: "file", Doc: "the file", Type: schema.Text, Required: true, Example: "energies.csv"},
		{Key: "sum", Doc: "the columns whose sum is G", Type: schema.Words, Required: true, Example: `["E", "Gcorr", "Gsolv"]`},
		{Key: "unit", Doc: "the unit of these columns", Type: schema.Text, OneOf: []string{"kcal/mol", "kJ/mol", "eV", "Eh", "cm-1"}, Default: "the unit of bare energies"},
	}},
	{Key: "species", Doc: "the minima, by name", Type: schema.Named, Fields: append(energyFields(), []schema.Field{
		{Key: "forms", Doc: "how many indistinct forms the species stands for (2 for a racemate): G - RT ln n", Type: schema.Whole, Default: "1"},
		{Key: "formula", Doc: "composition and charge; with it every step must balance", Type: schema.Text, Example: "C6H10O"},
	}...)},
	{Key: "step", Doc: "the elementary steps, by the name of their transition state", Type: schema.Named, Fields: append([]schema.Field{
		{Key: "reaction", Doc: "what goes to what; <=> is reversible, -> has no return", Type: schema.Text, Example: "R + X <=> A"},
		{Key: "barrier", Doc: "free energy of activation above the reactants, in place of an energy", Type: schema.Amount, Dims: []unit.Dim{unit.MolarEnergy}, Bare: "@energies", Example: "22.4"},
		{Key: "degeneracy", Doc: "number of equivalent paths, in both directions", Type: schema.Real, Default: "1", Example: "2"},
		{Key: "transmission", Doc: "transmission coefficient, in both directions", Type: schema.Real, Default: "1"},
	}, energyFields()...)},
}

func (s *mechanismSource) present(v mechanismValue, sheet *paper.Sheet) {
	presentMechanism(s, v, sheet)
}
