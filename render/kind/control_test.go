package kind_test

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"saddlebook/render/kind"
)

// turnoverCycle is the first cycle of Kozuch and Shaik's relations (Acc. Chem.
// Res. 44, 101 (2011), from memory) that package control checks too: an invented
// profile, I = 0, -5, -3 and T = 12, 10, 15 kcal/mol, -10 for a turn.
const turnoverCycle = "# T\n\n```toml mechanism\n" + `id = "m"
temperature = "25 °C"
[species]
S = { G = 0 }
P = { G = -10 }
c1 = { G = 0 }
c2 = { G = -5 }
c3 = { G = -3 }
[step]
TS1 = { reaction = "c1 + S <=> c2", G = 12 }
TS2 = { reaction = "c2 <=> c3", G = 10 }
TS3 = { reaction = "c3 <=> c1 + P", G = 15 }
` + "```\n"

func controlBlock(lines string) string {
	return "\n```toml control\nid = \"c\"\nmechanism = \"m\"\n" + lines + "\n```\n"
}

func TestControlOfACycle(t *testing.T) {
	s := good(t, turnoverCycle+controlBlock(`rate-of = "P"
at = { S = "1 M", P = "1 M", c1 = "1 M" }
catalyst = "c1"
turnover = ["TS1", "TS2", "TS3"]`), nil)
	for key, want := range map[string]float64{
		"c/turnover": 0.0131333281249666, "c/turns": 0.0131333281249666, "c/span-turns": 0.0135881500478748, "c/rate": 0.0131333281249666,
		"c/span": 20000 * calorie, "c/turn-energy": -10000 * calorie,
		"c/control/TS3": 0.999789612097186, "c/turnover-control/TS3": 0.999789612097186, "c/turnover-control/c2": 0.966737112836507,
		"c/control/c2": -0.966737112836507, "c/resting-share": 0.966737112836507, "c/amount/c3": 0.0330524995566454, "c/order/c1": 1,
	} {
		near(t, key, value(t, s, key), want, 1e-9)
	}
	for key, want := range map[string]string{"c/resting-state": "c2", "c/span-pair": "TS3 over c2",
		"c/activation-energy": "the barrier of TS3 is held constant over temperature; give H and S, or an Ea"} {
		if got := result(t, s, key).Value.Text; got != want {
			t.Errorf("%s: %q, want %q", key, got, want)
		}
	}
	if got, _ := result(t, s, "c/turnover").Print(""); got != "47\u00a0h⁻¹" {
		t.Errorf("the turnover reads %q", got)
	}
	for _, key := range []string{"c/turnover", "c/turns", "c/span-turns", "c/rate"} {
		if a := strings.Join(result(t, s, key).Assumes, "; "); !strings.Contains(a, "At 25\u00a0°C with 1.00\u00a0M S, 1.00\u00a0M P and 1.00\u00a0M c1 in all") {
			t.Errorf("%s does not name its concentrations: %q", key, a)
		}
	}
}

// A plain sequence at two temperatures: k = k1 k2/(km1 + k2).
func TestControlOfASequence(t *testing.T) {
	note := "# T\n\n```toml mechanism\n" + `id = "m"
temperature = "25 °C"
[species]
A = { H = 0, S = 0 }
I = { H = 5, S = 0 }
P = { H = -5, S = 0 }
[step]
TS1 = { reaction = "A <=> I", H = 17, S = -2 }
TS2 = { reaction = "I -> P", H = 16, S = -6 }
` + "```\n" + controlBlock("rate-of = \"P\"\nat = { A = \"0.3 M\", P = 0 }\ntemperature = [\"25 °C\", \"80 °C\"]")
	note = strings.NewReplacer("S = -2 ", `S = "-2 cal/mol/K" `, "S = -6 ", `S = "-6 cal/mol/K" `).Replace(note)
	s := good(t, note, nil)
	for _, T := range []float64{298.15, 353.15} {
		k := func(h, s, from float64) float64 {
			return boltzmann / planck * T * math.Exp(-((h-from)*1000*calorie-T*s*calorie)/(gasConstant*T))
		}
		k1, km1, k2 := k(17, -2, 0), k(17, -2, 5), k(16, -6, 5)
		at := fmt.Sprintf("@%g °C", T-273.15)
		near(t, "rate", value(t, s, "c/rate"+at), 0.3*k1*k2/(km1+k2), 1e-9)
		x1 := k2 / (km1 + k2)
		near(t, "X of TS1", value(t, s, "c/control/TS1"+at), x1, 1e-8)
		near(t, "Ea", value(t, s, "c/activation-energy"+at), x1*17000*calorie+(1-x1)*16000*calorie+gasConstant*T, 1e-8)
		f := math.Exp(-1000 * calorie / (gasConstant * T))
		near(t, "factor of TS2", value(t, s, "c/factor/TS2"+at), (km1+k2)*f/(km1+k2*f), 1e-9)
	}
	if r := result(t, s, "c/order/P"); r.Value.Kind != kind.Nothing {
		t.Errorf("an order in what is 0: %v", r.Value)
	}
}

// ln of the rate moves by X·sd/RT: with one step that decides, the interval of
// the rate is that of its rate constant.
func TestControlInterval(t *testing.T) {
	s := good(t, strings.Replace(turnoverCycle, "G = 15", `G = "15 ± 0.2"`, 1)+controlBlock("rate-of = \"P\"\nat = { S = \"1 M\", P = \"1 M\", c1 = \"1 M\" }\ncatalyst = \"c1\""), nil)
	r := result(t, s, "c/rate")
	if r.Low == nil {
		t.Fatal("no interval")
	}
	const z = 1.6448536269514722 // 95 % point of the normal distribution, Abramowitz and Stegun 26.2
	near(t, "ln of the width", math.Log(*r.High / *r.Low), 2*z*0.2*1000*calorie/(gasConstant*298.15), 0.01)
	if r := result(t, s, "c/order/c1"); r.Low != nil {
		t.Errorf("an order of 1 whatever the energies has an interval of %g to %g", *r.Low, *r.High)
	}
}

// The composition of a run at a time: as it stands the rate is that of the last
// step; with the catalyst at its steady state its total is kept.
func TestControlOfARun(t *testing.T) {
	run := "\n```toml run\nid = \"batch\"\nmechanism = \"m\"\ncharge = { S = \"1 M\", c1 = \"10 mM\" }\nprogramme = [\"40 h at 25 °C\"]\nproducts = [\"P\"]\nreport-at = [\"1 h\"]\n```\n"
	s := good(t, turnoverCycle+run+controlBlock("rate-of = \"P\"\nrun = \"batch\"\ntime = \"60 min\""), nil)
	kT := boltzmann / planck * 298.15
	RT := gasConstant * 298.15 / (1000 * calorie)
	want := value(t, s, "batch/amount/c3@1 h")*kT*math.Exp(-18/RT) - value(t, s, "batch/amount/c1@1 h")*value(t, s, "batch/amount/P@1 h")*kT*math.Exp(-25/RT)
	near(t, "rate as it stands", value(t, s, "c/rate@1 h"), want, 1e-9)
	near(t, "X of TS3", value(t, s, "c/control/TS3"), 1, 1e-9)

	s = good(t, turnoverCycle+run+controlBlock("rate-of = \"P\"\nrun = \"batch\"\ntime = \"1 h\"\ncatalyst = \"c1\"\nsteady = [\"c2\", \"c3\"]"), nil)
	total := value(t, s, "c/amount/c1") + value(t, s, "c/amount/c2") + value(t, s, "c/amount/c3")
	near(t, "total", total, 0.01, 1e-8)
	near(t, "rate at the steady state", value(t, s, "c/rate"), want, 1e-3)
	near(t, "order in the catalyst", value(t, s, "c/order/c1"), 1, 1e-9)
	// Its states are found from its total.
	found := good(t, turnoverCycle+run+controlBlock("rate-of = \"P\"\nrun = \"batch\"\ntime = \"1 h\"\ncatalyst = \"c1\""), nil)
	near(t, "rate with the states found", value(t, found, "c/rate"), value(t, s, "c/rate"), 1e-14)
	near(t, "the catalyst rests in c2", value(t, s, "c/resting-share"), value(t, s, "batch/amount/c2@1 h")/0.01, 1e-3)
}

// A cycle that runs backwards has a rate below 0 and no span.
func TestControlBackwards(t *testing.T) {
	s := good(t, strings.Replace(turnoverCycle, "P = { G = -10 }", "P = { G = -1 }", 1)+controlBlock("rate-of = \"P\"\nat = { S = \"1 mM\", P = \"1 M\", c1 = \"1 mM\" }\ncatalyst = \"c1\""), nil)
	if got := result(t, s, "c/span").Value.Text; got != "runs backwards" {
		t.Errorf("span %q", got)
	}
	if r := value(t, s, "c/rate"); r >= 0 {
		t.Errorf("rate %g", r)
	}
}

func TestControlRefusals(t *testing.T) {
	run := "\n```toml run\nid = \"batch\"\nmechanism = \"m\"\ncharge = { S = \"1 M\", c1 = \"10 mM\" }\nprogramme = [\"40 h at 25 °C\"]\n```\n"
	const at = "\nat = { S = \"1 M\", P = \"1 M\", c1 = \"1 M\" }"
	for _, tt := range []struct{ name, lines, want string }{
		{"nothing", ``, `the key "rate-of" is missing`},
		{"no composition", `rate-of = "P"`, `no composition is stated; state what is held, such as at = { S = "0.50 M" }, or name a run`},
		{"both", `rate-of = "P"` + at + "\nrun = \"batch\"", "a composition is stated and a run is named; keep one of the two"},
		{"unknown product", `rate-of = "Q"` + at, `"Q"`},
		{"unknown species", "rate-of = \"P\"\nat = { S = \"1 M\", Z = \"1 M\" }", `at.Z: "Z" is not a species of mechanism "m"`},
		{"no total", "rate-of = \"P\"\nat = { S = \"1 M\", P = \"1 M\" }\ncatalyst = \"c1\"", `at: the total of c1 is not stated; add it, such as c1 = "1 mM"`},
		{"nothing of the catalyst", "rate-of = \"P\"\nat = { S = \"1 M\", P = \"1 M\" }", "at: c1 cannot form from what is stated"},
		{"catalyst not named", `rate-of = "P"` + at, ""},
		{"product not held", "rate-of = \"P\"\nat = { S = \"1 M\", c1 = \"1 M\" }\ncatalyst = \"c1\"", "at: P is to be formed, so it cannot be at its own steady state; state its concentration"},
		{"reagent not held", "rate-of = \"P\"\nat = { P = \"1 M\", c1 = \"1 M\" }\ncatalyst = \"c1\"", "at: P comes to a standstill: nothing replaces, or nothing takes away, S; state the concentration of S"},
		{"negative", "rate-of = \"P\"\nat = { S = \"-1 M\", P = 0, c1 = \"1 M\" }", `at.S: "-1 M" is negative; state 0 or more`},
		{"no basis", "rate-of = \"P\"\nat = { S = \"1 M\", P = 0, c1 = \"2 mol%\" }", `at.c1: "2 mol%" has no basis`},
		{"basis without amount", "rate-of = \"P\"\nbasis = \"S\"\nat = { S = \"1 equiv\", P = 0, c1 = \"2 mol%\" }", `basis: "S" has no concentration in at`},
		{"unknown step", `rate-of = "P"` + at + "\ncatalyst = \"c1\"\nturnover = [\"TS4\"]", `turnover.1: "TS4" is not a step of mechanism "m"`},
		{"wrong turn", `rate-of = "P"` + at + "\ncatalyst = \"c1\"\nturnover = [\"TS1\", \"TS3\", \"TS2\"]", "turnover: the steps TS1, TS3, TS2 are not the turn of the catalyst that makes P; write TS1, TS2, TS3, or leave the turnover out"},
		{"turnover alone", `rate-of = "P"` + at + "\nturnover = [\"TS1\"]", "turnover: a turnover needs a catalyst"},
		{"no pair", `rate-of = "P"` + at + "\nratio = \"P\"", `ratio: "P" is not a pair of products`},
		{"time without a run", `rate-of = "P"` + at + "\ntime = \"2 h\"", "time: there is no run for this time"},
		{"no time", "rate-of = \"P\"\nrun = \"batch\"\ntime = \"soon\"", "time: "},
		{"not reported", "rate-of = \"P\"\nrun = \"batch\"\ntime = \"2 h\"", `time: the run does not report at 2 h; add "2 h" to its report-at`},
		{"after the run", "rate-of = \"P\"\nrun = \"batch\"\ntime = \"50 h\"", "time: the run is over after"},
		{"no run", "rate-of = \"P\"\nrun = \"m\"", `run: "m" keeps no composition; name a block of kind run`},
		{"temperature of a run", "rate-of = \"P\"\nrun = \"batch\"\ntemperature = \"25 °C\"", "temperature: the run has a temperature of its own"},
		{"states not steady", "rate-of = \"P\"\nrun = \"batch\"\ncatalyst = \"c1\"\nsteady = [\"c2\"]", `steady: c1 has no total: it turns into species that are held; let every state of the catalyst be at its steady state: list them in steady, such as steady = ["c2", "c3"]`},
		{"states not told", "rate-of = \"S\"\nrun = \"batch\"\ncatalyst = \"P\"", `catalyst: no conserved total counts P and leaves out what is formed, so its states are not known; name its states, such as steady = ["int", "rest"]`},
		{"no product held", "rate-of = \"P\"\nratio = \"P:S\"\nat = { c1 = \"1 M\" }\ncatalyst = \"c1\"", "at: P and S are to be formed, so they cannot be at their own steady state; state their concentrations, 0 M for an initial rate"},
		{"a state held beside the total", "rate-of = \"P\"\nat = { S = \"1 M\", P = 0, c1 = \"1 M\", c2 = \"1 mM\" }\ncatalyst = \"c1\"", "at: the total of c1 is not kept: it exchanges with c2, which is held; leave out the concentration of c2"},
		{"no catalyst at all", "rate-of = \"P\"\nat = { S = \"1 M\", P = 0, c1 = 0 }\ncatalyst = \"c1\"", "at: the total of c1 is 0, and turnover is counted by it; state a total above 0"},
		{"a total twice", "rate-of = \"P\"" + at + "\ncatalyst = \"c1\"\ntotals = [\"c1\"]", `totals.1: the amount of "c1" is a total already; leave it out here`},
	} {
		t.Run(tt.name, func(t *testing.T) {
			_, faults := evaluate(t, turnoverCycle+run+controlBlock(tt.lines), nil)
			var b strings.Builder
			faults.Write(&b)
			if tt.want == "" && strings.Contains(b.String(), "c2 cannot form") || tt.want != "" && !strings.Contains(b.String(), tt.want) {
				t.Errorf("got %q, want %q in it", b.String(), tt.want)
			}
		})
	}
}

// The share is that of the state named, in draws where another holds more too:
// c2 and c3 of the cycle share the catalyst about evenly within the errors.
func TestRestingShareIsOfOneState(t *testing.T) {
	s := good(t, strings.Replace(turnoverCycle, "c3 = { G = -3 }", "c3 = { G = \"-4.9 ± 1\" }", 1)+controlBlock("rate-of = \"P\"\nat = { S = \"1 M\", P = \"1 M\", c1 = \"1 M\" }\ncatalyst = \"c1\""), nil)
	r := result(t, s, "c/resting-share")
	RT := gasConstant * 298.15 / (1000 * calorie)
	share := func(c3 float64) float64 { return 1 / (1 + math.Exp(-(5+c3)/RT)) } // of c2, c1 being scarce
	near(t, "share", r.Value.Value, share(-4.9), 1e-3)
	const z = 1.6448536269514722 // 95 % point of the normal distribution, Abramowitz and Stegun 26.2
	near(t, "low", *r.Low, share(-4.9-z), 0.03)
	near(t, "high", *r.High, share(-4.9+z), 0.03)
	near(t, "share of c3", value(t, s, "c/share/c3"), 1-share(-4.9), 1e-2)
}

// Two catalyst molecules that meet: no span, and the results say so.
func TestControlWithoutASpan(t *testing.T) {
	note := strings.Replace(strings.Replace(turnoverCycle, "c3 = {", "dim = { G = -9 }\nc3 = {", 1), "[step]", "[step]\njoin = { reaction = \"2 c1 <=> dim\", G = 9 }", 1)
	s := good(t, note+controlBlock("rate-of = \"P\"\nat = { S = \"1 M\", P = \"1 M\", c1 = \"1 M\" }\ncatalyst = \"c1\""), nil)
	for _, key := range []string{"turns", "span", "span-turns", "span-pair", "turn-energy"} {
		if v := result(t, s, "c/"+key).Value; v.Kind != kind.Nothing || v.Text != "two catalyst molecules meet in join" {
			t.Errorf("%s: %+v", key, v)
		}
	}
	near(t, "all of the catalyst", value(t, s, "c/share/c1")+value(t, s, "c/share/c2")+value(t, s, "c/share/c3")+value(t, s, "c/share/dim"), 1, 1e-12)
}

// Energies are printed in the unit that the mechanism gives them in.
func TestControlFollowsTheUnitOfTheMechanism(t *testing.T) {
	s := good(t, strings.Replace(turnoverCycle, "[species]", "energies = \"kJ/mol\"\n[species]", 1)+controlBlock("rate-of = \"P\"\nat = { S = \"1 M\", P = \"1 M\", c1 = \"1 M\" }\ncatalyst = \"c1\"")+
		"\n```toml profile\nid = \"p\"\nmechanism = \"m\"\npath = [{ through = [\"c1 + S\", \"TS1\", \"c2\"] }]\n```\n", nil)
	for key, want := range map[string]string{"c/span": "20.0\u00a0kJ/mol", "c/turn-energy": "−10.0\u00a0kJ/mol", "p/level/TS1": "12.0\u00a0kJ/mol"} {
		if got, _ := result(t, s, key).Print(""); got != want {
			t.Errorf("%s reads %q, want %q", key, got, want)
		}
	}
}
