package kind_test

import (
	"math"
	"strings"
	"testing"

	"saddlebook/kinetics/spread"
)

const limits = "\n```toml selectivity\n" + `id = "limits"
mechanism = "addition"
from = "R"
products = ["A", "B"]
at = ["-78 °C", "0 °C"]
` + "```\n"

func TestSelectivityAgainstClosedForms(t *testing.T) {
	s := good(t, addition+limits, nil)
	for T, at := range map[float64]string{cold: "@-78 °C", 273.15: "@0 °C"} {
		ddG := (9.9-9.0)*1000*calorie - T*(-26.1+24.6)*calorie
		kin := math.Exp(ddG / (gasConstant * T))
		dd := (-11.5+17.0)*1000*calorie - T*(-33+34)*calorie // A above B
		eq := math.Exp(-dd / (gasConstant * T))
		near(t, "kinetic ratio", value(t, s, "limits/kinetic-ratio/A:B"+at), kin, 1e-11)
		near(t, "kinetic share", value(t, s, "limits/kinetic/A"+at), kin/(1+kin), 1e-11)
		near(t, "pre-equilibrium ratio", value(t, s, "limits/pre-equilibrium-ratio/A:B"+at), kin, 1e-11)
		near(t, "equilibrium ratio", value(t, s, "limits/equilibrium-ratio/A:B"+at), eq, 1e-11)
		near(t, "equilibrium share", value(t, s, "limits/equilibrium/B"+at), 1/(1+eq), 1e-11)
	}
	if got := result(t, s, "limits/fast-exchange").Value.Text; got != "nothing to exchange" {
		t.Errorf("fast exchange %q", got)
	}
}

// Common practice: equal barriers give 50:50 under kinetic control.
func TestEqualBarriersGiveFiftyFifty(t *testing.T) {
	s := good(t, strings.Replace(addition, `H = 9.9, S = "-26.1`, `H = 9.0, S = "-24.6`, 1)+limits, nil)
	if got := value(t, s, "limits/kinetic/A"); got != 0.5 {
		t.Errorf("share %v, want exactly one half", got)
	}
}

// The interval of a two-path ratio by sampling against the closed form: ln of
// the ratio is normal with variance (sdA² + sdB² - 2 r sdA sdB)/(RT)².
func TestSelectivityIntervalAgainstClosedForm(t *testing.T) {
	note := strings.NewReplacer("H = 9.0,", `H = "9.0 ± 0.4",`, "H = 9.9,", `H = "9.9 ± 0.3",`).Replace(addition) + limits
	s := good(t, note, nil)
	r := result(t, s, "limits/kinetic-ratio/A:B")
	if len(r.Intervals) != 2 {
		t.Fatalf("%d intervals, want the independent and the strongly shared one", len(r.Intervals))
	}
	kcal := 1000 * calorie
	for _, iv := range r.Intervals {
		correlation := 0.0
		if iv.Case == spread.Shared {
			correlation = 0.9
		}
		sd := math.Sqrt(0.4*0.4+0.3*0.3-2*correlation*0.4*0.3) * kcal / (gasConstant * cold)
		centre := math.Log(r.Value.Value)
		const z = 1.6448536269514722 // 95 % point of the normal distribution, Abramowitz and Stegun 26.2
		for _, end := range []struct {
			name      string
			got, want float64
		}{{"low", iv.Low, centre - z*sd}, {"median", iv.Median, centre}, {"high", iv.High, centre + z*sd}} {
			if d := math.Abs(math.Log(end.got)-end.want) / sd; !(d < 0.02) {
				t.Errorf("%v %s: ln = %.4f, want %.4f: off by %.3f standard deviations", iv.Case, end.name, math.Log(end.got), end.want, d)
			}
		}
	}
	if *r.Low != math.Min(r.Intervals[0].Low, r.Intervals[1].Low) {
		t.Error("Low is not that of the wider interval")
	}
}

// Errors shared in full cancel in a ratio: no interval is left.
func TestSharedErrorsCancelInARatio(t *testing.T) {
	note := strings.Replace(addition, "[species]", "shared = [{ of = [\"TSa\", \"TSb\"], sd = \"2 kcal/mol\" }]\n[species]", 1) + limits
	s := good(t, note, nil)
	r := result(t, s, "limits/kinetic-ratio/A:B")
	for _, iv := range r.Intervals {
		if math.Abs(math.Log(iv.High/iv.Low)) > 1e-9 {
			t.Errorf("interval %g to %g, want none", iv.Low, iv.High)
		}
	}
	if b := result(t, s, "addition/barrier/TSa"); b.Low == nil {
		t.Error("the barrier itself has no interval")
	}
}

func TestSelectivityRefusals(t *testing.T) {
	for _, tt := range []struct{ name, from, to, want string }{
		{"drained", `TSb = { reaction = "R + X <=> B"`, `TSb = { reaction = "R + X -> B"`, ""},
	} {
		t.Run(tt.name, func(t *testing.T) {
			s := good(t, strings.Replace(addition, tt.from, tt.to, 1)+limits, nil)
			r := result(t, s, "limits/equilibrium-ratio/A:B")
			if r.Value.Text == "" || !strings.Contains(r.Value.Text, "equilibrium") {
				t.Errorf("the equilibrium of a product with no return reads %q", r.Value.Text)
			}
		})
	}
}

// States with one energy have one error: it cancels between them.
func TestSameAsSharesItsError(t *testing.T) {
	for _, given := range []string{`H = "9.0 ± 0.4"`, `H = 9.0`} {
		note := strings.NewReplacer("H = 9.0", given, `H = 9.9, S = "-26.1 cal/mol/K"`, `same-as = "TSa"`,
			"[species]", "error = { step = \"0.5 kcal/mol\" }\n[species]").Replace(addition) + limits
		r := result(t, good(t, note, nil), "limits/kinetic-ratio/A:B")
		if r.Low != nil {
			t.Errorf("%s: interval %g to %g of a ratio that is 1 by its symmetry", given, *r.Low, *r.High)
		}
	}
}

// Without from, a charge says whose fate is followed: the basis, or the only
// charged species that leads to the products.
func TestSelectivityFollowsTheCharge(t *testing.T) {
	const note = "# T\n\n```toml mechanism\nid = \"m\"\ntemperature = \"25 °C\"\n[species]\nR = { G = 0 }\nX = { G = 0 }\nA = { G = -3 }\nB = { G = -4 }\nZ = { G = 0 }\n" +
		"[step]\nTSa = { reaction = \"R + X <=> A\", G = 20 }\nTSb = { reaction = \"R + X <=> B\", G = 21 }\n```\n\n```toml selectivity\nid = \"s\"\nmechanism = \"m\"\nproducts = [\"A\", \"B\"]\nLINES\n```\n"
	want := value(t, good(t, strings.Replace(note, "LINES", `from = "R"`, 1), nil), "s/kinetic/A")
	for _, lines := range []string{"basis = \"R\"\ncharge = { R = \"1 M\", X = \"2 equiv\", Z = \"1 M\" }", "charge = { R = \"1 M\", Z = \"1 M\" }"} {
		near(t, lines, value(t, good(t, strings.Replace(note, "LINES", lines, 1), nil), "s/kinetic/A"), want, 1e-14)
	}
	for lines, want := range map[string]string{
		"":                                  `selectivity "s", from: no species is named whose fate is followed; name it, such as from = "R", or state a charge`,
		`charge = { R = "1 M", X = "1 M" }`: `from: a kinetic limit follows the fate of one species, and R and X lead to the products; name one of them, such as from = "R"`,
		`charge = { Z = "1 M" }`:            "charge: the products cannot be followed back to one charged species; name the species whose fate is followed",
	} {
		_, faults := evaluate(t, strings.Replace(note, "LINES", lines, 1), nil)
		var b strings.Builder
		faults.Write(&b)
		if !strings.Contains(b.String(), want) {
			t.Errorf("%q: got %q, want %q in it", lines, b.String(), want)
		}
	}
}
