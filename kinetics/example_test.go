package kinetics_test

import (
	"fmt"

	"saddlebook/kinetics"
	"saddlebook/kinetics/thermo"
)

// Two products from one reactant at -78 °C: barriers, and the ratio if neither
// product reacts again.
func Example() {
	const kcal = 4184
	m := &kinetics.Mechanism{ID: "two ways", Temperature: 195.15}
	for _, s := range []struct {
		name string
		g    float64
	}{{"R", 0}, {"A", -5}, {"B", -10}} {
		m.Species = append(m.Species, kinetics.Species{Name: s.name, Energy: thermo.Constant(s.g * kcal)})
	}
	for _, s := range []struct {
		name, reaction string
		g              float64
	}{{"TSa", "R <=> A", 13.8}, {"TSb", "R <=> B", 15}} {
		from, to, returns, err := kinetics.ParseReaction(s.reaction, []string{"R", "A", "B"})
		if err != nil {
			fmt.Println(err)
			return
		}
		m.Steps = append(m.Steps, kinetics.Step{Name: s.name, From: from, To: to, Returns: returns, Energy: thermo.Constant(s.g * kcal)})
	}
	n, err := m.At(m.Temperature)
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, r := range n.Reactions {
		fmt.Printf("%s: %.1f kcal/mol forward, %.1f back\n", r.Name, r.Barrier/kcal, r.BarrierBack/kcal)
	}
	l, err := n.KineticLimit(kinetics.Limit{From: 0, Products: []int{1, 2}})
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("kinetic %.1f %% A\n", 100*l.Shares[0])
	ratio, _ := n.EquilibriumRatio(1, 2)
	fmt.Printf("at equilibrium A:B is %.1e\n", ratio)
	// Output:
	// TSa: 13.8 kcal/mol forward, 18.8 back
	// TSb: 15.0 kcal/mol forward, 25.0 back
	// kinetic 95.7 % A
	// at equilibrium A:B is 2.5e-06
}

func ExampleParseReaction() {
	from, to, returns, err := kinetics.ParseReaction("2 A ⇌ A2", []string{"A", "A2"})
	fmt.Println(from, to, returns, err)
	_, _, _, err = kinetics.ParseReaction("A = A2", []string{"A", "A2"})
	fmt.Println(err)
	// Output:
	// [{0 2}] [{1 1}] true <nil>
	// "=" in reaction "A = A2" is not an arrow of a step; write <=> for a reversible step or -> for one without return
}

func ExampleMechanism_Held() {
	m := &kinetics.Mechanism{
		Temperature: 195.15,
		Species:     []kinetics.Species{{Name: "R"}, {Name: "A", Energy: thermo.Constant(-20000)}},
		Steps:       []kinetics.Step{{Name: "TS", From: []kinetics.Term{{Species: 0, N: 1}}, To: []kinetics.Term{{Species: 1, N: 1}}, Energy: thermo.Constant(60000)}},
	}
	fmt.Println(len(m.Held(195.15)))
	fmt.Println(m.Held(298.15)[0])
	// Output:
	// 0
	// TS: its G is held constant from −78 °C to 25 °C; over 103 K an unknown ΔS‡ of −30 cal/mol/K would move this barrier by 3.1 kcal/mol (12.9 kJ/mol)
}

// A mechanism of measured rates: no species has an energy, and K follows from
// the constants both ways.
func ExampleLaw() {
	names := []string{"R", "X", "A"}
	from, to, returns, err := kinetics.ParseReaction("R + X <=> A", names)
	if err != nil {
		fmt.Println(err)
		return
	}
	const home = 298.15
	ea, eaBack := 52e3, 90e3 // J/mol
	m := &kinetics.Mechanism{ID: "binding", Temperature: home}
	for _, n := range names {
		m.Species = append(m.Species, kinetics.Species{Name: n, Unknown: true})
	}
	m.Steps = []kinetics.Step{{Name: "TS", From: from, To: to, Returns: returns, Law: &kinetics.Law{
		Kind:    kinetics.Measured,
		Forward: &kinetics.Constant{K: 0.12, At: home, Ea: &ea},
		Back:    &kinetics.Constant{K: 2e-4, At: home, Ea: &eaBack},
	}}}
	for _, T := range []float64{298.15, 333.15} {
		n, err := m.At(T)
		if err != nil {
			fmt.Println(err)
			return
		}
		r := n.Reactions[0]
		fmt.Printf("%.2f K: k = %.2g L/mol/s, K = %.3g L/mol, ΔG = %.1f kJ/mol\n", T, r.Forward, r.K, r.DeltaG/1000)
	}
	heat, _ := m.Enthalpy(home)
	fmt.Printf("ΔH = %.0f kJ/mol\n", heat[0]/1000)
	// Output:
	// 298.15 K: k = 0.12 L/mol/s, K = 600 L/mol, ΔG = -15.9 kJ/mol
	// 333.15 K: k = 1.1 L/mol/s, K = 120 L/mol, ΔG = -13.3 kJ/mol
	// ΔH = -38 kJ/mol
}
