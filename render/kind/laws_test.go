package kind_test

import (
	"math"
	"strconv"
	"strings"
	"testing"

	"saddlebook/render/kind"
)

// block puts the lines of a mechanism block at 25 °C into a note.
func block(lines string) string {
	return "# Test\n\n```toml mechanism\nid = \"m\"\ntemperature = \"25 °C\"\n" + lines + "\n```\n"
}

// Every form of a rate against its closed form, from the block to the results.
func TestRatesAgainstClosedForms(t *testing.T) {
	const T, T1, T2 = 298.15, 313.15, 333.15
	kcal := 1000 * calorie
	s := good(t, block(`at = ["25 °C", "60 °C"]
viscosity = "0.89 mPa s"
[species]
R = {}
X = {}
A = {}
B = {}
C = {}
D = {}
[step]
S1 = { reaction = "R + X <=> A", k = "0.12 M-1 s-1", at = "40 °C", Ea = 12.5, k-back = "2e-4 s-1", at-back = "40 °C", Ea-back = 21 }
S2 = { reaction = "A -> B", A = "2e11 s-1", Ea = 20 }
S3 = { reaction = "B + X <=> C", diffusion = true, K = "1e3 M-1", heat = "-40 kJ/mol" }
S4 = { reaction = "C <=> D", fast = true, K = 3 }
S5 = { reactions = ["R -> D", "D -> B"], k = "1.8e-3 min-1" }
S6 = { reaction = "A + B -> D", barrier = 3, limit = "diffusion" }`), nil)
	// 8RT/3η at 25 °C and 0.890 mPa s, recomputed from exact constants; trade value 7.4e9.
	const limit = 7427586605.55023
	k1 := 0.12 * math.Exp(-12.5*kcal/gasConstant*(1/T2-1/T1))
	back1 := 2e-4 * math.Exp(-21*kcal/gasConstant*(1/T2-1/T1))
	k6 := boltzmann / planck * T * math.Exp(-3*kcal/(gasConstant*T))
	for _, tt := range []struct {
		key  string
		want float64
	}{
		{"m/rate/S1@60 °C", k1},
		{"m/rate-back/S1@60 °C", back1},
		{"m/equilibrium-constant/S1@60 °C", k1 / back1},
		{"m/reaction-energy/S1@60 °C", -gasConstant * T2 * math.Log(k1/back1)},
		{"m/barrier/S1@60 °C", gasConstant * T2 * math.Log(boltzmann/planck*T2/k1)},
		{"m/rate/S2@60 °C", 2e11 * math.Exp(-20*kcal/(gasConstant*T2))},
		{"m/rate/S3", limit},
		{"m/rate-back/S3", limit / 1e3},
		{"m/equilibrium-constant/S3@60 °C", 1e3 * math.Exp(40e3/gasConstant*(1/T2-1/T))},
		{"m/rate/S4", 1e9},
		{"m/rate-back/S4", 1e9 / 3},
		{"m/equilibrium-constant/S4@60 °C", math.Pow(3, T/T2)},
		{"m/rate/S5.1", 3e-5},
		{"m/rate/S5.2@60 °C", 3e-5 * T2 / T * math.Exp(gasConstant*T*math.Log(3e-5/(boltzmann/planck*T))/gasConstant*(1/T2-1/T))},
		{"m/half-life/S5.1", math.Ln2 / 3e-5},
		{"m/rate/S6", 1 / (1/k6 + 1/limit)},
		{"m/diffusion-factor/S6", 1 / (1 + k6/limit)},
	} {
		near(t, tt.key, value(t, s, tt.key), tt.want, 1e-9)
	}
	for _, key := range []string{"m/reaction-energy/S2", "m/position/S2", "m/reaction-energy/S6@60 °C"} {
		if r := result(t, s, key); r.Value.Kind != kind.Nothing || r.Value.Text != "not known" {
			t.Errorf("%s: %+v, want not known", key, r.Value)
		}
	}
	for key, want := range map[string]string{
		"m/rate/S1@60 °C":                 "S1: its rate constant is stated",
		"m/rate/S4":                       "S4: kept fast",
		"m/rate/S5.1@60 °C":               "S5.1: the ΔG‡ that k implies is held constant from 25 °C to 60 °C; over 35 K an unknown ΔS‡ of −30 cal/mol/K would move this barrier by 1.1 kcal/mol",
		"m/equilibrium-constant/S4@60 °C": "S4: the ΔG that K implies is held constant",
	} {
		if a := strings.Join(result(t, s, key).Assumes, " | "); !strings.Contains(a, want) {
			t.Errorf("%s assumes %q, want %q", key, a, want)
		}
	}
}

// A ± on k is log-normal: the interval of k is k·exp(±1.645·sd/k), and steps that
// share the rate share the draw.
func TestErrorOfStatedRate(t *testing.T) {
	s := good(t, block(`[species]
A = { G = 0 }
B = { G = -2 }
C = { G = -3 }
[step]
S = { reactions = ["A <=> B", "B <=> C"], k = "2.0e-4 ± 0.2e-4 s-1" }
Q = { reaction = "A <=> C", k = "1e-5 s-1", K = "158 ± 15.8" }`), nil)
	for _, key := range []string{"m/rate/S.1", "m/rate/S.2"} {
		r := result(t, s, key)
		near(t, key+" low", *r.Low, 2e-4*math.Exp(-1.6448536269514722*0.1), 0.01)
		near(t, key+" high", *r.High, 2e-4*math.Exp(1.6448536269514722*0.1), 0.01)
	}
	if r := result(t, s, "m/equilibrium-constant/S.1"); r.Low != nil && *r.High-*r.Low > 1e-6**r.Low {
		t.Errorf("the error of k moves K: %g to %g", *r.Low, *r.High)
	}
}

// E with frequencies, against published entropies and the model's own numbers.
func TestFormsOfEnergy(t *testing.T) {
	s := good(t, block(`standard = "1 bar"
energies = "kJ/mol"
[species]
N = { E = -10, mass = "28.0134 u", rotation = [1.98958], frequencies = [2329.92], symmetry = 2 }
O = { E = 0, mass = "31.9988 g/mol", rotation = [1.43768], frequencies = [1556.23], symmetry = 2, multiplicity = 3 }
W = { E = 0, frequencies = [1594.7, 3657.1, 3755.9], symmetry = 2, atoms = """
O 0 0 0.1173
H 0 0.7572 -0.4692
H 0 -0.7572 -0.4692""" }
A = { conformers = [{ E = 0, mass = "28.0134 u", rotation = [1.98958], frequencies = [2329.92] }, { E = 0, mass = "28.0134 u", rotation = [1.98958], frequencies = [2329.92] }] }
[step]
T1 = { reaction = "N -> A", barrier = 90, tunnelling = "Eckart", imaginary = "1000 cm-1", V-forward = "10 kcal/mol", V-back = "10 kcal/mol" }
T2 = { reaction = "N -> O", k = "1 s-1" }
T3 = { reaction = "N -> W", barrier = 90 }`), nil)
	for _, tt := range []struct {
		key    string
		want   float64
		tol    float64
		source string
	}{
		{"m/entropy/N", 191.6001529089064, 1e-6, "the model of these inputs, recomputed; NASA Glenn TP-2002-211556 has 191.61"},
		{"m/zero-point/N", 13936.016390645646, 1e-9, "the model of these inputs, recomputed"},
		{"m/enthalpy/N", -10000 + 13936.016390645646 + 8676.714530147049, 1e-6, "the model of these inputs, recomputed; CODATA key values 1989 have H(T) − H(0) of 8670"},
		{"m/entropy/O", 205.152, 2e-4, "CODATA key values 1989, from memory"},
		{"m/entropy/W", 188.834, 1e-3, "JANAF, 4th ed. 1998"},
		{"m/tunnelling/T1", 3.06503009898, 1e-8, "independent quadrature with 30 digits"},
		// Twice the same conformer without the symmetry of N, 10 kJ/mol above it.
		{"m/reaction-energy/T1", 10000 - gasConstant*298.15*math.Log(4), 1e-9, "symmetry numbers and a sum of two"},
	} {
		near(t, tt.key+" ("+tt.source+")", value(t, s, tt.key), tt.want, tt.tol)
	}
	// At 1 M in place of 1 bar a step of two molecules to one moves by RT ln(c°RT/p°)
	// if the free energies were given there; those from frequencies are what they are.
	two := func(standard string) float64 {
		s := good(t, block(`standard = "`+standard+`"
[species]
N = { E = 0, mass = "28 u", rotation = [2], frequencies = [2330] }
D = { E = -5, mass = "56 u", rotation = [0.1], frequencies = [100, 100, 2330, 2330, 50, 50, 200] }
[step]
T1 = { reaction = "2 N <=> D", barrier = 30, standard = "1 M" }`), nil)
		return value(t, s, "m/reaction-energy/T1")
	}
	near(t, "1 M and 1 bar", two("1 M"), two("1 bar"), 1e-9)
}

// Eckart's heights come from E and frequencies of all states where they are there.
func TestHeightsFromFrequencies(t *testing.T) {
	states := `[species]
A = { E = 0, mass = "44 u", rotation = [2], frequencies = [500, 500, 1000, 3000] }
B = { E = -10, mass = "44 u", rotation = [2], frequencies = [500, 500, 1100, 3000] }
[step]
T1 = { reaction = "A -> B", E = 20, mass = "44 u", rotation = [2], frequencies = [-1500, 500, 500, 2500], tunnelling = "Eckart"`
	own := good(t, block(states+" }"), nil)
	zero := func(sum float64) float64 { return planck * 299792458 * 6.02214076e23 * sum * 100 / 2 }
	forward := 20*1000*calorie + zero(3500-5000)
	back := 30*1000*calorie + zero(3500-5100)
	stated := good(t, block(strings.TrimSuffix(states, "\n")+", V-forward = \""+digits(forward/1000)+" kJ/mol\", V-back = \""+digits(back/1000)+" kJ/mol\" }"), nil)
	near(t, "factor", value(t, own, "m/tunnelling/T1"), value(t, stated, "m/tunnelling/T1"), 1e-9)
	if k := value(t, own, "m/tunnelling/T1"); k < 10 {
		t.Errorf("the factor of a thin barrier is %g", k)
	}
}

// A formula column in the table balances steps as a formula in the block does.
func TestFormulaColumn(t *testing.T) {
	lines := `table = { file = "e.csv", sum = ["E"] }`
	good(t, block(lines), map[string]string{"e.csv": "name,reaction,formula,E\nA,,C2H4,0\nB,,C2H4,-3.5\nTS,A <=> B,,20\n"})
	wrong(t, block(lines), map[string]string{"e.csv": "name,reaction,formula,E\nA,,C2H4,0\nB,,C2H6,-3.5\nTS,A <=> B,,20\n"}, "step TS gains 2 H")
	wrong(t, block(lines), map[string]string{"e.csv": "name,reaction,formula,E\nA,,C2H4,0\nB,,C2x,-3.5\nTS,A <=> B,,20\n"}, "e.csv:3:")
}

func digits(x float64) string { return strconv.FormatFloat(x, 'g', -1, 64) }

// wrong evaluates a note that must have a fault with these words.
func wrong(t *testing.T, note string, files map[string]string, want string) {
	t.Helper()
	_, faults := evaluate(t, note, files)
	var b strings.Builder
	faults.Write(&b)
	if !faults.Failed() || !strings.Contains(b.String(), want) {
		t.Errorf("faults:\n%s\nwant %q", b.String(), want)
	}
}

// What a block can get wrong about a rate, at its place and with its remedy.
func TestLawFaults(t *testing.T) {
	for _, tt := range []struct{ name, step, want string }{
		{"two rates", `{ reaction = "A -> B", k = "1 s-1", barrier = 20 }`, "step.S.k: k stands beside barrier; keep one of them: a step has one rate"},
		{"k beside an energy", `{ reaction = "A -> B", k = "1 s-1", G = 20 }`, "step.S.k: k stands beside an energy of the transition state; keep one of them"},
		{"the unit of k", `{ reaction = "A -> B", k = "1 M-1 s-1" }`, `step.S.k: "1 M-1 s-1" is a rate constant in M-1 s-1, and the step is of order 1; write it in s-1`},
		{"the unit of k-back", `{ reaction = "A <=> B + C", k = "1 s-1", k-back = "1 s-1" }`, `step.S.k-back: "1 s-1" is a rate constant in s-1, and its return is of order 2; write it in M-1 s-1`},
		{"the unit of K", `{ reaction = "A <=> B + C", k = "1 s-1", K = 12 }`, `step.S.K: "12" is a constant without a unit, and the step makes 2 molecules of 1; write it in M`},
		{"the unit of K of one", `{ reaction = "A <=> B", k = "1 s-1", K = "12 M" }`, `step.S.K: "12 M" is a constant in M, and the step keeps the number of molecules; write it without a unit`},
		{"the unit of A", `{ reaction = "2 A -> B", A = "1e9 s-1", Ea = 3 }`, `step.S.A: "1e+09 s-1" is a factor in s-1, and the step is of order 2; write it in M-1 s-1`},
		{"k of zero", `{ reaction = "A -> B", k = "0 s-1" }`, "a rate constant of 0 s-1 makes no sense; give a number above 0"},
		{"A without Ea", `{ reaction = "A -> B", A = "1e9 s-1" }`, "step.S.A: A has no Ea beside it"},
		{"A with at", `{ reaction = "A -> B", A = "1e9 s-1", Ea = 9, at = "25 °C" }`, "step.S.at: at stands beside A"},
		{"at without k", `{ reaction = "A -> B", barrier = 20, at = "40 °C" }`, "step.S.at: at has no k beside it"},
		{"Ea without k", `{ reaction = "A -> B", barrier = 20, Ea = 20 }`, "step.S.Ea: Ea has no k or A beside it"},
		{"Ea-back alone", `{ reaction = "A <=> B", k = "1 s-1", K = 2, Ea-back = 20 }`, "step.S.Ea-back: Ea-back has no k-back or A-back beside it"},
		{"k-back beside a barrier", `{ reaction = "A <=> B", barrier = 20, k-back = "1 s-1" }`, "step.S.k-back: k-back stands beside barrier; give K in its place"},
		{"K beside an energy", `{ reaction = "A <=> B", G = 20, K = 2 }`, "step.S.K: K has no k, A, barrier, diffusion or fast beside it"},
		{"± on Ea", `{ reaction = "A -> B", k = "1 s-1", Ea = "20 ± 1" }`, `step.S.Ea: the ± of "20 ± 1 kcal/mol" is not carried on`},
		{"degeneracy beside k", `{ reaction = "A -> B", k = "1 s-1", degeneracy = 2 }`, "step.S.degeneracy: degeneracy stands beside k, and a rate as it is stated holds it already"},
		{"no way back", `{ reaction = "A <=> B", k = "1 s-1" }`, "step.S: step S is reversible, and nothing says how fast it returns: A and B have no energy"},
		{"diffusion of one", `{ reaction = "A -> B", diffusion = true }`, "step.S.diffusion: no two molecules meet in step S"},
		{"reactions of two orders", `{ reactions = ["A -> B", "A + B -> C"], k = "1 s-1" }`, `step.S.reactions.2: 2 molecules meet in "A + B -> C" and 1 in the first reaction`},
		{"reactions of an energy", `{ reactions = ["A -> B", "B -> C"], G = 20 }`, "step.S.reactions: several reactions share no energy of a transition state"},
		{"a reaction of none", `{ reactions = ["A -> B", "B -> Q"], k = "1 s-1" }`, `step.S.reactions.2: "Q" in reaction "B -> Q" is not a species`},
		{"reaction beside reactions", `{ reaction = "A -> B", reactions = ["A -> B", "B -> C"], k = "1 s-1" }`, "step.S.reaction: reaction stands beside reactions"},
		{"tunnelling without a wavenumber", `{ reaction = "A -> B", barrier = 20, tunnelling = "Wigner" }`, "step.S.tunnelling: tunnelling has no imaginary wavenumber"},
		{"Eckart without heights", `{ reaction = "A -> B", barrier = 20, tunnelling = "Eckart", imaginary = 900 }`, "step.S.tunnelling: the correction of Eckart has no V-forward to go by"},
		{"heights for Wigner", `{ reaction = "A -> B", barrier = 20, tunnelling = "Wigner", imaginary = 900, V-back = 3 }`, "step.S.V-back: the correction of Wigner takes no V-back"},
		{"Bell too cold", `{ reaction = "A -> B", barrier = 20, tunnelling = "Bell", imaginary = 1500 }`, "step.S.tunnelling: tunnelling in step S at 25 °C"},
		{"imaginary without tunnelling", `{ reaction = "A -> B", barrier = 20, imaginary = 900 }`, "step.S.imaginary: imaginary has no tunnelling beside it"},
		{"limit of one", `{ reaction = "A -> B", barrier = 20, limit = "diffusion" }`, "step.S.limit: step S cannot be limited by diffusion"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			wrong(t, block("[species]\nA = {}\nB = {}\nC = {}\n[step]\nS = "+tt.step+"\nZ = { reaction = \"A + B -> C\", barrier = 20 }"), nil, tt.want)
		})
	}
}

// What a block can get wrong about a molecule.
func TestMoleculeFaults(t *testing.T) {
	for _, tt := range []struct{ name, species, want string }{
		{"E alone", `{ E = 0 }`, "species.A.E: E has no geometry beside it"},
		{"frequencies alone", `{ frequencies = [100] }`, "species.A.frequencies: frequencies has no E beside it"},
		{"E beside G", `{ E = 0, G = 1 }`, "species.A.E: E stands beside G, H, S or Cp"},
		{"shape twice", `{ E = 0, mass = "2 u", atoms = "H 0 0 0" }`, "species.A.atoms: atoms stand beside mass or rotation"},
		{"too few frequencies", `{ E = 0, mass = "18 u", rotation = [9, 8, 7], frequencies = [100, 200] }`, "species.A.frequencies: number of frequencies of 2 is not possible"},
		{"imaginary in a minimum", `{ E = 0, mass = "28 u", rotation = [2], frequencies = [-100] }`, "species.A.frequencies: frequency 1 (cm-1) of -100 is not possible; a minimum has no imaginary mode"},
		{"two constants", `{ E = 0, mass = "28 u", rotation = [2, 3], frequencies = [100] }`, "species.A.rotation: number of rotational constants of 2"},
		{"a symmetry of zero", `{ E = 0, mass = "28 u", rotation = [2], frequencies = [100], symmetry = 0 }`, "species.A.symmetry: a symmetry of 0 makes no sense"},
		{"a scale of zero", `{ E = 0, mass = "28 u", rotation = [2], frequencies = [100], frequency-scale = 0 }`, "species.A.frequency-scale: a factor of 0"},
		{"a line of atoms", `{ E = 0, atoms = "H 0 0" }`, `species.A.atoms: "H 0 0" is not a symbol and three coordinates`},
		{"a symbol", `{ E = 0, atoms = "Xq 0 0 0" }`, `species.A.atoms: no mass is known for "Xq"`},
		{"a coordinate", `{ E = 0, atoms = "H 0 0 1,2" }`, `species.A.atoms: "1,2" in "H 0 0 1,2" is not a coordinate`},
		{"mass in the wrong unit", `{ E = 0, mass = "28 kg" }`, "species.A.mass:"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			wrong(t, block("[species]\nA = "+tt.species+"\nB = { G = 0 }\n[step]\nS = { reaction = \"A -> B\", G = 20 }"), nil, tt.want)
		})
	}
	wrong(t, block("low-modes = { treatment = \"harmonic\", below = 100 }\n[species]\nA = { G = 0 }\nB = { G = 0 }\n[step]\nS = { reaction = \"A -> B\", G = 20 }"), nil,
		`low-modes.below: below has no part in the treatment "harmonic"; leave it out`)
}
