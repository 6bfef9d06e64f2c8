package kind_test

import (
	"math"
	"testing"
)

// A and B to C with K = 4 L/mol, 0.3 and 0.2 M charged: the extent solves
// K (a-x)(b-x) = x.
func TestEquilibriumAgainstClosedForm(t *testing.T) {
	s := good(t, "# T\n\n```toml mechanism\n"+`id = "m"
energies = "kJ/mol"
temperature = "25 °C"
[species]
A = { G = 0 }
B = { G = 0 }
C = { G = -3.4365644408 }
[step]
TS = { reaction = "A + B <=> C", G = 80 }
`+"```\n\n```toml equilibrium\n"+`id = "rest"
mechanism = "m"
charge = { A = "0.30 M", B = "0.20 M" }
`+"```\n", nil)
	K := math.Exp(3436.5644408 / (gasConstant * 298.15))
	a, b := 0.3, 0.2
	p := a + b + 1/K
	x := (p - math.Sqrt(p*p-4*a*b)) / 2
	near(t, "amount of C", value(t, s, "rest/amount/C"), x, 1e-9)
	near(t, "amount of A", value(t, s, "rest/amount/A"), a-x, 1e-9)
	total := a + b - x
	near(t, "share of C", value(t, s, "rest/share/C"), x/total, 1e-9)
}

// Butane, gauche 3.8 kJ/mol above anti and two gauche forms: 69.84 % anti at
// 25 °C. Source: 3.8 kJ/mol, OpenStax Organic Chemistry (2023), section 4.7;
// the share recomputed from exact constants.
func TestEquilibriumOfButane(t *testing.T) {
	s := good(t, "# T\n\n```toml mechanism\n"+`id = "m"
energies = "kJ/mol"
temperature = "25 °C"
[species]
anti = { G = 0 }
gauche = { G = 3.8, forms = 2 }
[step]
turn = { reaction = "anti <=> gauche", G = 15.9 }
`+"```\n\n```toml equilibrium\n"+`id = "rest"
mechanism = "m"
charge = { anti = "1 M" }
among = ["anti", "gauche"]
`+"```\n", nil)
	near(t, "anti", value(t, s, "rest/share/anti"), 0.6984137295420096, 1e-10)
	near(t, "anti over gauche", value(t, s, "rest/ratio/anti:gauche"), 0.6984137295420096/(1-0.6984137295420096), 1e-9)
}

// Equivalents refer to the basis.
func TestChargeByEquivalents(t *testing.T) {
	s := good(t, addition+"\n```toml equilibrium\nid = \"rest\"\nmechanism = \"addition\"\ncharge = { R = \"0.20 M\", X = \"1.1 equiv\" }\nbasis = \"R\"\n```\n", nil)
	x := value(t, s, "rest/amount/X") + value(t, s, "rest/amount/A") + value(t, s, "rest/amount/B")
	near(t, "X in all forms", x, 0.22, 1e-10)
}
