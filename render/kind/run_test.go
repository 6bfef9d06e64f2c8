package kind_test

import (
	"fmt"
	"math"
	"os"
	"regexp"
	"strings"
	"testing"

	"saddlebook/render/kind"
)

const cold2 = "\n```toml run\n" + `id        = "cold"
mechanism = "addition"
charge    = { R = "0.20 M", X = "1.1 equiv" }
basis     = "R"
programme = ["2 h at -78 °C", "ramp to 20 °C over 3 h", "12 h at 20 °C"]
products  = ["A", "B"]
report-at = ["30 min", "2 h", "end"]
` + "```\n"

// The worked example of the project's design, which gives 72 % conversion and
// A:B 21.7 after 2 h, a ratio of 1 near -2 °C in the ramp and B by thousands at
// the end, from an independent solution.
func TestRunWorkedExample(t *testing.T) {
	s := good(t, addition+cold2, nil)
	near(t, "conversion at 2 h", value(t, s, "cold/conversion@2 h"), 0.72, 0.007)
	near(t, "A:B at 2 h", value(t, s, "cold/ratio/A:B@2 h"), 21.7, 0.003)
	if T := value(t, s, "cold/even-temperature/A:B") - 273.15; math.Abs(T+2) > 0.5 {
		t.Errorf("the ratio is 1 at %.2f °C, want near -2", T)
	}
	if r := 1 / value(t, s, "cold/ratio/A:B@end"); r < 1000 || r > 10000 {
		t.Errorf("B:A at the end is %.0f, want thousands", r)
	}
	if got := value(t, s, "cold/ratio/A:B@120 min"); got != value(t, s, "cold/ratio/A:B@2 h") {
		t.Errorf("@120 min and @2 h differ: %g", got)
	}
	if got := value(t, s, "cold/conversion"); got != value(t, s, "cold/conversion@30 min") {
		t.Errorf("without @ the first time is meant, and here it is %g", got)
	}
	near(t, "unreacted when warming starts", value(t, s, "cold/unreacted-at-warming@2 h"), 1-value(t, s, "cold/conversion@2 h"), 1e-9)
	near(t, "mass balance", value(t, s, "cold/mass-balance@2 h"), 1, 1e-9)
	near(t, "end", value(t, s, "cold/end"), 17*3600, 1e-12)
	if got := result(t, s, "cold/ended-by").Value.Text; got != "the programme" {
		t.Errorf("ended by %q", got)
	}
	kin, eq := value(t, s, "cold/kinetic-share/A:B@2 h"), value(t, s, "cold/equilibrium-share/A:B@2 h")
	x := value(t, s, "cold/share/A@2 h")
	if got, want := value(t, s, "cold/control/A:B@2 h"), (x-kin)/(eq-kin); math.Abs(got-want) > 1e-8 {
		t.Errorf("control %g, want %g of its definition", got, want)
	}
	if at, T := value(t, s, "cold/changeover/A:B"), value(t, s, "cold/changeover-temperature/A:B"); math.Abs(195.15+(at-7200)*98/10800-T) > 1e-6 {
		t.Errorf("changeover after %g s at %g K, which is not on the ramp", at, T)
	}
}

// constants gives the rate constants of a mechanism of first-order steps.
const parallel = "# T\n\n```toml mechanism\n" + `id = "m"
energies = "kJ/mol"
temperature = "25 °C"
[species]
R = { G = 0 }
A = { G = -20 }
B = { G = -30 }
[step]
TSa = { reaction = "R -> A", G = 85 }
TSb = { reaction = "R -> B", G = 87 }
` + "```\n"

func eyring(kJ float64) float64 {
	const T = 298.15
	return boltzmann * T / planck * math.Exp(-kJ*1000/(gasConstant*T))
}

func run(body string) string {
	return "\n```toml run\nid = \"r\"\nmechanism = \"m\"\n" + body + "\n```\n"
}

// Parallel steps of first order, closed form: conversion 1 - exp(-(ka+kb) t) and
// a ratio of ka to kb at all times.
func TestRunAgainstClosedForm(t *testing.T) {
	s := good(t, parallel+run(`charge = { R = "0.1 M" }
basis = "R"
programme = "3 h at 25 °C"
products = ["A", "B"]
report-at = ["0 s", "10 min", "1 h"]`), nil)
	ka, kb := eyring(85), eyring(87)
	for at, seconds := range map[string]float64{"@10 min": 600, "@1 h": 3600, "@end": 10800} {
		left := math.Exp(-(ka + kb) * seconds)
		near(t, "conversion"+at, value(t, s, "r/conversion"+at), 1-left, 1e-8)
		if got := value(t, s, "r/amount/R"+at); math.Abs(got-0.1*left) > 1e-7*0.1*left+1e-20 {
			t.Errorf("amount of R%s = %g, want %g", at, got, 0.1*left)
		}
		near(t, "yield of A"+at, value(t, s, "r/yield/A"+at), (1-left)*ka/(ka+kb), 1e-8)
		near(t, "ratio"+at, value(t, s, "r/ratio/A:B"+at), ka/kb, 1e-8)
		near(t, "mass balance"+at, value(t, s, "r/mass-balance"+at), 1, 1e-9)
	}
	for _, key := range []string{"r/ratio/A:B@0 s", "r/share/A@0 s"} {
		if r := result(t, s, key); r.Value.Kind != kind.Nothing || r.Value.Text != "nothing has formed" {
			t.Errorf("%s reads %q", key, r.Value.Text)
		}
	}
	for _, key := range []string{"r/control/A:B@1 h", "r/changeover/A:B"} {
		if r := result(t, s, key); r.Value.Kind != kind.Nothing || !strings.Contains(r.Value.Text, "equilibrium is not reachable") {
			t.Errorf("%s reads %q", key, r.Value.Text)
		}
	}
	if r := result(t, s, "r/even/A:B"); r.Value.Kind != kind.Nothing {
		t.Errorf("the ratio does not pass 1, and even reads %v", r.Value)
	}
}

// 95 % conversion of a first-order reaction takes ln 20 over k; a yield of 50 %
// comes first here, after ln(1/(1 - 0.5 (ka+kb)/ka))/(ka+kb).
func TestRunUntil(t *testing.T) {
	ka, kb := eyring(85), eyring(87)
	for _, tt := range []struct {
		until, by string
		end       float64
	}{
		{`{ conversion = "95 %" }`, "conversion of R reached 95 %", math.Log(20) / (ka + kb)},
		{`{ conversion = "95 %" }, { yield = "A", reaches = "50 %" }`, "yield of A reached 50 %", -math.Log(1-0.5*(ka+kb)/ka) / (ka + kb)},
		{`{ amount = "R", reaches = "20 mol%" }`, "R reached 20 mol%", math.Log(5) / (ka + kb)},
		{`{ ratio = "B:A", reaches = "1:1" }`, "the programme", 86400},
	} {
		s := good(t, parallel+run(`charge = { R = "0.1 M" }
basis = "R"
programme = "24 h at 25 °C"
products = ["A", "B"]
report-at = ["1 min", "12 h"]
until = [`+tt.until+`]`), nil)
		near(t, "end with "+tt.until, value(t, s, "r/end"), tt.end, 1e-7)
		if got := result(t, s, "r/ended-by").Value.Text; got != tt.by {
			t.Errorf("%s: ended by %q, want %q", tt.until, got, tt.by)
		}
		if r := result(t, s, "r/conversion@12 h"); tt.end < 12*3600 && (r.Value.Kind != kind.Nothing || !strings.Contains(r.Value.Text, "ended before")) {
			t.Errorf("%s: after the end the conversion reads %v", tt.until, r.Value)
		}
		if value(t, s, "r/conversion@1 min") <= 0 {
			t.Errorf("%s: no conversion after 1 min", tt.until)
		}
	}
}

// A dimer holds two of what it is made of, and an addition of first-order
// consumption follows its closed form.
func TestRunDimerAndDose(t *testing.T) {
	s := good(t, "# T\n\n```toml mechanism\n"+`id = "m"
energies = "kJ/mol"
temperature = "25 °C"
[species]
R = { G = 0 }
D = { G = -30 }
[step]
TS = { reaction = "2 R <=> D", G = 75 }
`+"```\n"+run(`charge = { R = "0.3 M" }
basis = "R"
programme = "5 h at 25 °C"
products = ["D"]`), nil)
	near(t, "yield and what is left", value(t, s, "r/yield/D")+1-value(t, s, "r/conversion"), 1, 1e-9)
	near(t, "amount of D", 2*value(t, s, "r/amount/D"), 0.3*value(t, s, "r/yield/D"), 1e-12)

	// dR/dt = f - k R, so R = f/k (1 - exp(-k t)) while R is added
	s = good(t, parallel+run(`charge = { A = "0 M" }
basis = "R"
doses = [{ species = "R", amount = "0.2 M", from = "0 h", over = "2 h" }]
programme = "2.5 h at 25 °C"
products = { both = ["A", "B"] }
report-at = ["1 h", "2 h"]`), nil)
	k := eyring(85) + eyring(87)
	f := 0.2 / 7200
	near(t, "R during the addition", value(t, s, "r/amount/R@1 h"), f/k*(1-math.Exp(-k*3600)), 1e-7)
	left := f / k * (1 - math.Exp(-k*7200)) * math.Exp(-k*1800)
	near(t, "R after the addition", value(t, s, "r/amount/R@end"), left, 1e-6)
	near(t, "yield at the end", value(t, s, "r/yield/both@end"), 1-left/0.2, 1e-8)
	near(t, "mass balance", value(t, s, "r/mass-balance@1 h"), 1, 1e-8)
}

// A quench that leaves 1 %, and a first-order loss beside the reaction.
func TestRunRemoval(t *testing.T) {
	k := eyring(85) + eyring(87)
	s := good(t, parallel+run(`charge = { R = "0.1 M" }
basis = "R"
removal = [{ species = "R", at = "30 min", leaves = "1 %" }]
programme = "1 h at 25 °C"
report-at = ["10 min"]`), nil)
	near(t, "R after the quench", value(t, s, "r/amount/R@end"), 0.001*math.Exp(-k*3600), 1e-6)
	s = good(t, parallel+run(`charge = { R = "0.1 M" }
basis = "R"
removal = [{ species = "R", half-life = "20 min", to = "40 min" }]
programme = "1 h at 25 °C"
report-at = ["40 min"]`), nil)
	near(t, "R while it goes", value(t, s, "r/amount/R@40 min"), 0.1/4*math.Exp(-k*2400), 1e-7)
	near(t, "R afterwards", value(t, s, "r/amount/R@end"), 0.1/4*math.Exp(-k*3600), 1e-7)
}

// ee is signed, and of the two products named.
func TestRunEnantiomericExcess(t *testing.T) {
	note := strings.NewReplacer("A = {", "P = {", "R -> A", "R -> P").Replace(parallel)
	s := good(t, note+run(`charge = { R = "0.1 M" }
programme = "1 h at 25 °C"
products = ["P", "B"]
enantiomers = ["B", "P"]`), nil)
	r := math.Exp(2000 / (gasConstant * 298.15))
	near(t, "ee", value(t, s, "r/ee"), (1-r)/(1+r), 1e-8)
	if text, err := result(t, s, "r/ee").Print(""); err != nil || text != "\u221238\u00a0%" {
		t.Errorf("ee prints %q, %v", text, err)
	}
}

// A product that cannot form leaves an infinite ratio: null, beside both shares.
func TestRunEndlessRatio(t *testing.T) {
	note := strings.Replace(parallel, "B = { G = -30 }", "Y = { G = 0 }\nB = { G = -30 }", 1)
	s := good(t, strings.Replace(note, "R -> B", "R + Y -> B", 1)+run(`charge = { R = "0.1 M" }
programme = "1 h at 25 °C"
products = ["A", "B"]`), nil)
	if r := result(t, s, "r/ratio/A:B"); r.Value.Kind != kind.Endless {
		t.Errorf("the ratio reads %v", r.Value)
	}
	if a, b := value(t, s, "r/share/A"), value(t, s, "r/share/B"); a != 1 || b != 0 {
		t.Errorf("shares %g and %g, want 1 and 0", a, b)
	}
}

// Heat: R to B by -17 kcal/mol at 0.20 M is 14.2 kJ/L; the rise is that over
// density and heat capacity.
func TestRunHeat(t *testing.T) {
	heat := strings.Replace(cold2, "report-at", "density = \"0.87 g/mL\"\nheat-capacity = \"1.7 J/g/K\"\nreport-at", 1)
	s := good(t, addition+heat, nil)
	whole := 17.0 * 1000 * calorie * 0.20
	near(t, "rise", value(t, s, "cold/adiabatic-rise"), whole/(870*1.7), 1e-9)
	a, b := value(t, s, "cold/amount/A@2 h"), value(t, s, "cold/amount/B@2 h")
	near(t, "heat left", value(t, s, "cold/heat-left@2 h"), whole-(11.5*a+17*b)*1000*calorie, 1e-7)
	if value(t, s, "cold/heat-rate@30 min") <= 0 {
		t.Error("an exotherm gives no heat")
	}
	s = good(t, parallel+run(`charge = { R = "0.1 M" }
programme = "1 h at 25 °C"
density = "0.87 g/mL"
heat-capacity = "1.7 J/g/K"`), nil)
	if r := result(t, s, "r/adiabatic-rise"); r.Value.Kind != kind.Nothing || !strings.Contains(r.Value.Text, "not known") {
		t.Errorf("without enthalpies the rise reads %v", r.Value)
	}
}

// Errors of the energies give intervals, and the keys do not depend on where a
// draw ends.
func TestRunIntervals(t *testing.T) {
	note := strings.NewReplacer("G = 85 }", `G = "85 ± 2" }`, "G = 87 }", `G = "87 ± 2" }`).Replace(parallel)
	s := good(t, note+run(`charge = { R = "0.1 M" }
basis = "R"
programme = "4 h at 25 °C"
products = ["A", "B"]
report-at = ["1 h"]
until = [{ conversion = "90 %" }]`), nil)
	r := result(t, s, "r/ratio/A:B@end")
	if len(r.Intervals) != 2 {
		t.Fatalf("%d intervals, want the independent and the strongly shared one", len(r.Intervals))
	}
	const z = 1.6448536269514722 // 95 % point of the normal distribution, Abramowitz and Stegun 26.2
	for _, iv := range r.Intervals {
		correlation := 0.0
		if iv.Case.String() != r.Intervals[0].Case.String() {
			correlation = 0.9
		}
		want := z * math.Sqrt(2*2*2*(1-correlation)) * 1000 / (gasConstant * 298.15)
		if got := math.Log(iv.High/iv.Low) / 2; math.Abs(got-want) > 0.08*want {
			t.Errorf("%v: half width of ln is %.3f, want %.3f", iv.Case, got, want)
		}
	}
}

func TestRunRefusals(t *testing.T) {
	base := `charge = { R = "0.1 M" }
basis = "R"
programme = "3 h at 25 °C"
products = ["A", "B"]`
	for _, tt := range []struct{ extra, key, msg, fix string }{
		{`report-at = ["4 h"]`, "report-at.1", "beyond the end of the programme, which is at 3 h", "earlier time"},
		{`report-at = ["-> end"]`, "report-at.1", "-> end", ""},
		{`report-at = ["1 h", "60 min"]`, "report-at.2", "same time", "once"},
		{`report-at = ["1.1 h", "66 min"]`, "report-at.2", `"66 min" is the same time as "1.1 h"`, "once"},
		{`doses = [{ species = "A", amount = "2000 M", at = "1 h" }]`, "doses.1.amount", "more than any mixture holds", "unit"},
		{`doses = [{ species = "A", amount = "20000 equiv", at = "1 h" }]`, "doses.1.amount", "more than any mixture holds", "unit"},
		{`report-at = ["1 xh"]`, "report-at.1", "xh", ""},
		{`doses = [{ species = "Q", amount = "1 M", at = "1 h" }]`, "doses.1.species", `"Q" is not a species`, ""},
		{`doses = [{ species = "A", amount = "1 M" }]`, "doses.1", "does not say when", "at ="},
		{`doses = [{ species = "A", amount = "1 M", at = "3 h" }]`, "doses.1.at", "the run is over", ""},
		{`doses = [{ species = "A", amount = "1 M", from = "2 h", over = "2 h" }]`, "doses.1.over", "until 4 h", ""},
		{`doses = [{ species = "R", amount = "1 equiv", at = "1 h" }]`, "doses.1.amount", "refers to itself", "concentrations"},
		{`removal = [{ species = "A" }]`, "removal.1", "does not say when", ""},
		{`removal = [{ species = "A", from = "1 h" }]`, "removal.1", "how fast", "half-life"},
		{`removal = [{ species = "A", at = "1 h", leaves = "120 %" }]`, "removal.1.leaves", "no share", ""},
		{`removal = [{ species = "A", from = "2 h", to = "1 h", rate = "1e-3 s-1" }]`, "removal.1.from", "ends before it begins", ""},
		{`until = [{ reaches = "1 %" }]`, "until.1", "nothing is watched", "conversion"},
		{`until = [{ conversion = 95 }]`, "until.1.conversion", `"95" is no share`, `"95 %"`},
		{`until = [{ yield = "A" }]`, "until.1", "missing", "reaches"},
		{`until = [{ yield = "C", reaches = "5 %" }]`, "until.1.yield", `"C" is not among the products`, "A"},
		{`until = [{ ratio = "A:C", reaches = "5:1" }]`, "until.1.ratio", `"C" is not among the products`, ""},
		{`until = [{ amount = "A", reaches = "5 h" }]`, "until.1.reaches", "no concentration", "mM"},
		{`enantiomers = ["A"]`, "enantiomers", "two products", ""},
		{`enantiomers = ["A", "C"]`, "enantiomers.2", "not among the products", ""},
		{`basis-units = { C = 2 }`, "basis-units.C", "not among the products", ""},
		{`density = "0.9 g/mL"`, "density", "heat-capacity", "add heat-capacity"},
	} {
		t.Run(tt.extra, func(t *testing.T) {
			_, faults := evaluate(t, parallel+run(base+"\n"+tt.extra), nil)
			if len(faults) != 1 {
				var b strings.Builder
				faults.Write(&b)
				t.Fatalf("%d faults:\n%s", len(faults), b.String())
			}
			d := faults[0]
			if d.Key != tt.key || !strings.Contains(d.Msg, tt.msg) || !strings.Contains(d.Fix, tt.fix) {
				t.Errorf("%s: %s; %s\nwant %s: %s; %s", d.Key, d.Msg, d.Fix, tt.key, tt.msg, tt.fix)
			}
		})
	}
}

// Where a leg cannot be read nobody knows when the run ends, and no time is
// beyond it.
func TestRunOfAnUnknownLength(t *testing.T) {
	_, faults := evaluate(t, parallel+run(`charge = { R = "0.1 M" }
programme = ["1 h at 25 °C", "2 h somewhere"]
report-at = ["2 h"]
doses = [{ species = "A", amount = "1 M", at = "2 h" }, { species = "A", amount = "1 M", from = "1 h", over = "1 h" }]
removal = [{ species = "A", from = "90 min", half-life = "1 h" }]`), nil)
	if len(faults) != 1 || faults[0].Key != "programme.2" {
		t.Errorf("got %v, want the leg alone", faults)
	}
}

// The caution stands on the page of a run, and no word that calls conditions good.
func TestRunCaution(t *testing.T) {
	data, err := os.ReadFile("../testdata/kinds/run.html.golden")
	if err != nil {
		t.Fatal(err)
	}
	page := string(data)
	for _, want := range []string{"Not a safety assessment. Listed steps only: no decomposition, gas, mixing, heat transfer or toxicity.",
		"calorimetry on your material, site rules and qualified people decide.", "When warming starts, after 2\u00a0h, 27.5\u00a0% of the enone 3 charged is unreacted, and the listed steps can still set free 7.1\u00a0kJ/L (4.8\u00a0K adiabatic)."} {
		if !strings.Contains(page, want) {
			t.Errorf("the page does not say %q", want)
		}
	}
	if bad := regexp.MustCompile(`(?i)\b(safe|safely|recommended|optimal|optimum)\b`).FindString(page); bad != "" {
		t.Errorf("the page says %q", bad)
	}
}

// A charge that holds a name of no species suggests the nearest.
func TestRunChargeOfAnUnknownSpecies(t *testing.T) {
	_, faults := evaluate(t, strings.ReplaceAll(addition, "X", "amine")+strings.Replace(cold2, "X =", "amin =", 1), nil)
	if len(faults) != 1 || faults[0].Key != "charge.amin" || !strings.Contains(faults[0].Fix, `"amine"`) {
		t.Errorf("no suggestion of amine in %v", fmt.Sprint(faults))
	}
}
