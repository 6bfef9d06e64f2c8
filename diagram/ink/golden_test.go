package ink

import (
	"bytes"
	"flag"
	"math"
	"os"
	"path/filepath"
	"slices"
	"testing"

	"saddlebook/diagram"
)

var update = flag.Bool("update", false, "write the golden files anew")

func ref(x float64) *float64 { return &x }

func level(name string, v float64) diagram.ProfilePoint {
	return diagram.ProfilePoint{Name: name, Value: v}
}

func peak(name string, v, position float64) diagram.ProfilePoint {
	return diagram.ProfilePoint{Name: name, Value: v, Peak: true, Position: position}
}

type scener interface{ Scene() (diagram.Scene, error) }

// figures are the golden cases: invented chemistry, each for one feature.
var figures = slices.Concat(plainFigures, timeCourses, formulas)

type golden struct {
	name   string
	figure scener
}

var plainFigures = []golden{
	{"one_step", diagram.Profile{ID: "one-step", Title: "One step", Unit: "kcal/mol", Paths: []diagram.ProfilePath{{
		Points: []diagram.ProfilePoint{level("enone 3 + nucleophile", 0), peak("TSa‡", 13.8, 0.41), level("1,2-adduct", -5.1)},
	}}}},
	{"four_steps", diagram.Profile{ID: "four-steps", Title: "Insertion and reduction", Unit: "kcal/mol", Zero: "Pd(PPh3)2 + ArBr", Paths: []diagram.ProfilePath{{
		Points: []diagram.ProfilePoint{
			level("Pd(PPh3)2 + ArBr", 0), peak("TS1", 11.4, 0.55), level("π-complex", 6.2), peak("TS2", 17.9, 0.62),
			level("trans-PdBr(Ar)(PPh3)2", -8.3), peak("TS3", 9.6, 0.4), level("I3", 2.4), peak("TS3'", 4.1, 0.5), level("I4", 1.9), peak("TS4", 12.7, 0.2), level("Ar–Nu + PdL2", -21.5),
		},
	}}}},
	{"two_paths", diagram.Profile{ID: "two-paths", Title: "Two ways on from one enone", Unit: "kcal/mol", Paths: []diagram.ProfilePath{
		{Name: "1,2-addition", Points: []diagram.ProfilePoint{level("enone 3", 0), peak("TSa", 13.8, 0.41), level("1,2-adduct", -5.1)}},
		{Name: "1,4-addition", Points: []diagram.ProfilePoint{level("enone 3", 0), peak("TSb", 15.0, 0.36), level("1,4-adduct", -10.4)}},
	}}},
	{"sides", diagram.Profile{ID: "sides", Title: "Parallel products of one enone", Unit: "kcal/mol", Zero: "R + X", Sides: true, Paths: []diagram.ProfilePath{
		{Name: "1,2-adduct", Points: []diagram.ProfilePoint{level("enone 3", 0), peak("TSa", 13.8, 0.41), level("1,2-adduct", -5.1)}},
		{Name: "1,4-adduct", Points: []diagram.ProfilePoint{level("enone 3", 0), peak("TSb", 15.0, 0.36), level("1,4-adduct", -10.4)}},
	}}},
	{"sides_in_steps", diagram.Profile{ID: "sides-in-steps", Title: "Two ways from one cation", Unit: "kcal/mol", Sides: true, Paths: []diagram.ProfilePath{
		{Name: "elimination", Points: []diagram.ProfilePoint{level("cation", 0), peak("TS-E", 6.4, 0.3), level("alkene·HX", -3.1), level("alkene + HX", -7.9)}},
		{Name: "substitution, SN1", Points: []diagram.ProfilePoint{level("cation", 0), peak("TS-S", 4.9, 0.25), level("oxonium ion", -6.2), peak("TS-H", -1.5, 0.5), level("ether + H3O+", -12.6)}},
	}}},
	{"branching", diagram.Profile{ID: "branching", Title: "Common intermediate, three products", Unit: "kJ/mol", Paths: []diagram.ProfilePath{
		{Name: "syn", Points: []diagram.ProfilePoint{level("R", 0), peak("TS0", 61, 0.5), level("I", 22), peak("TS-syn", 71.2, 0.4), level("S", -31)}},
		{Name: "anti", Points: []diagram.ProfilePoint{level("R", 0), peak("TS0", 61, 0.5), level("I", 22), peak("TS-anti", 74.6, 0.4), level("T", -36.5)}},
		{Name: "elimination", Points: []diagram.ProfilePoint{level("R", 0), peak("TS0", 61, 0.5), level("I", 22), peak("TS-E", 88.9, 0.55), level("alkene + HBr", -58), peak("TS-iso", 21, 0.5), level("conjugated alkene", -75)}},
	}}},
	{"near_equal", diagram.Profile{ID: "near-equal", Title: "Near-equal energies", Unit: "kcal/mol", Paths: []diagram.ProfilePath{
		{Name: "Re face", Points: []diagram.ProfilePoint{level("ketone", 0), peak("TS-Re", 12.10, 0.45), level("R-alcohol", -6.00)}},
		{Name: "Si face", Points: []diagram.ProfilePoint{level("ketone", 0), peak("TS-Si", 12.15, 0.45), level("S-alcohol", -6.00)}},
	}}},
	{"deviations", diagram.Profile{ID: "deviations", Title: "Energies with deviations", Unit: "kcal/mol", Paths: []diagram.ProfilePath{{
		Points: []diagram.ProfilePoint{level("A", 0), {Name: "TS1", Value: 18.4, Peak: true, Position: math.NaN(), SD: ref(0.9)}, {Name: "B", Value: 3.2, SD: ref(0.5)}, {Name: "TS2", Value: 15.1, Peak: true, Position: 0.3, SD: ref(1.4)}, {Name: "C", Value: -9.5, SD: ref(0.7)}},
	}}}},
	{"long_names", diagram.Profile{ID: "long-names", Title: "Long names", Unit: "kcal/mol", Paths: []diagram.ProfilePath{{
		Points: []diagram.ProfilePoint{level("solvent-separated ion pair of the lithium enolate", 0), peak("closed chair-like transition state", 13.8, 0.41), level("tetrahedral alkoxide with chelated lithium", -5.1), peak("proton transfer", -2.2, 0.5), level("1-hydroxy-2,2,6,6-tetramethylpiperidine adduct", -14)},
	}}}},
	{"shares", diagram.Bars{ID: "shares", Title: "Shares at equilibrium", Axis: "share at equilibrium", Groups: []diagram.BarGroup{
		{Name: "−78 °C", Bars: []diagram.Bar{{Name: "1,4-adduct", Share: 0.9991, Text: "99.91 %", Low: ref(0.981), High: ref(0.99995)}, {Name: "1,2-adduct", Share: 0.0009, Text: "0.09 %", Low: ref(0.00005), High: ref(0.019)}, {Name: "enone 3", Share: 0, Text: "2 × 10^-7 %"}}},
		{Name: "25 °C", Bars: []diagram.Bar{{Name: "1,4-adduct", Share: 0.721, Low: ref(0.55), High: ref(0.84)}, {Name: "1,2-adduct", Share: 0.262, Low: ref(0.14), High: ref(0.42)}, {Name: "enone 3", Share: 0.017}}},
	}}},
	{"signed", diagram.SignedBars{ID: "signed", Groups: []diagram.SignedGroup{
		{Name: "at 25 °C", Bars: []diagram.SignedBar{{Name: "TS1", Value: 0.04}, {Name: "TS2", Value: 0.93, Low: ref(0.71), High: ref(0.99)}, {Name: "off-cycle dimer Pd2L2", Value: -1.86, Low: ref(-1.95), High: ref(-1.4)}, {Name: "TS3‡", Value: 0}}},
		{Name: "at 80 °C", Bars: []diagram.SignedBar{{Name: "TS1", Value: 0.41}, {Name: "TS2", Value: 0.57}, {Name: "off-cycle dimer Pd2L2", Value: -0.62}, {Name: "TS3‡", Value: 0.02, Text: "0.02 (all at 80 °C)"}}},
	}}},
}

func TestGolden(t *testing.T) {
	for _, f := range figures {
		t.Run(f.name, func(t *testing.T) {
			s, err := f.figure.Scene()
			if err != nil {
				t.Fatal(err)
			}
			for _, form := range []struct {
				suffix string
				write  func(*bytes.Buffer) error
			}{
				{".inline.svg", func(b *bytes.Buffer) error { return Inline(b, s) }},
				{".svg", func(b *bytes.Buffer) error { return Alone(b, s) }},
			} {
				var b bytes.Buffer
				if err := form.write(&b); err != nil {
					t.Fatal(err)
				}
				file := filepath.Join("testdata", f.name+form.suffix)
				if *update {
					if err := os.WriteFile(file, b.Bytes(), 0o644); err != nil {
						t.Fatal(err)
					}
				}
				want, err := os.ReadFile(file)
				if err != nil {
					t.Fatal(err)
				}
				if !bytes.Equal(b.Bytes(), want) {
					t.Errorf("%s differs; look at it after go test -update", file)
				}
			}
		})
	}
}
