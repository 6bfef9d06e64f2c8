package ink

import (
	"fmt"
	"strings"

	"saddlebook/diagram"
)

func init() { figures = append(figures, networks...) }

// step reads "A + 2 B <=> C" or "A -> B".
func step(name, reaction string, flux ...float64) diagram.NetworkStep {
	s := diagram.NetworkStep{Name: name}
	left, right, ok := strings.Cut(reaction, " <=> ")
	s.Returns = ok
	if !ok {
		left, right, _ = strings.Cut(reaction, " -> ")
	}
	for i, side := range []string{left, right} {
		for _, t := range strings.Split(side, " + ") {
			term := diagram.NetworkTerm{Node: t}
			if n, err := fmt.Sscanf(t, "%d %s", &term.N, &term.Node); n == 2 && err == nil {
				term.Node = strings.TrimPrefix(t, fmt.Sprint(term.N, " "))
			}
			if i == 0 {
				s.From = append(s.From, term)
			} else {
				s.To = append(s.To, term)
			}
		}
	}
	if len(flux) > 0 {
		s.Flux = &flux[0]
	}
	return s
}

// web makes the nodes that the steps name, in that order.
func web(id, title string, steps []diagram.NetworkStep, change ...func(*diagram.Network)) diagram.Network {
	n := diagram.Network{ID: id, Title: title, Steps: steps, FluxUnit: "mol/L/s"}
	seen := map[string]bool{}
	for _, s := range steps {
		for _, side := range [][]diagram.NetworkTerm{s.From, s.To} {
			for _, t := range side {
				if !seen[t.Node] {
					n.Nodes = append(n.Nodes, diagram.NetworkNode{Name: t.Node})
				}
				seen[t.Node] = true
			}
		}
	}
	for _, c := range change {
		c(&n)
	}
	return n
}

// node finds a node to change.
func node(n *diagram.Network, name string) *diagram.NetworkNode {
	for i := range n.Nodes {
		if n.Nodes[i].Name == name {
			return &n.Nodes[i]
		}
	}
	panic("no node " + name)
}

func wide(w float64) func(*diagram.Network) { return func(n *diagram.Network) { n.Width = w } }

// addition is two competing additions to one enone, of which one returns.
func addition(id string, change ...func(*diagram.Network)) diagram.Network {
	return web(id, "Two additions to one enone", []diagram.NetworkStep{
		step("TSa", "enone 3 + nucleophile <=> 1,2-alkoxide", 4e-6),
		step("TSb", "enone 3 + nucleophile -> 1,4-enolate", 3.1e-5),
		step("quench a", "1,2-alkoxide + H+ -> 1,2-adduct", 4e-6),
		step("quench b", "1,4-enolate + H+ -> 1,4-adduct", 3.1e-5),
	}, append([]func(*diagram.Network){func(n *diagram.Network) {
		for name, share := range map[string]float64{"enone 3": 0.42, "1,2-adduct": 0.07, "1,4-adduct": 0.51} {
			node(n, name).Share = ref(share)
		}
	}}, change...)...)
}

// turning is a catalytic cycle with an off-cycle dimer and a way in.
func turning(id string, change ...func(*diagram.Network)) diagram.Network {
	return web(id, "One turn of a palladium catalyst", []diagram.NetworkStep{
		step("TS1", "PdL + ArBr -> LPd(Ar)Br", 2.4e-5),
		step("TS2", "LPd(Ar)Br + R2NH <=> LPd(Ar)Br(NHR2)", 2.4e-5),
		step("TS3", "LPd(Ar)Br(NHR2) + base -> LPd(Ar)NR2 + base·HBr", 2.4e-5),
		step("TS4", "LPd(Ar)NR2 -> PdL + Ar–NR2", 2.4e-5),
		step("dimer", "2 LPd(Ar)Br <=> [LPd(Ar)Br]2", 0),
		step("start", "PdL2 <=> PdL + L", 1e-9),
	}, append([]func(*diagram.Network){func(n *diagram.Network) {
		n.Cycle = []string{"TS1", "TS2", "TS3", "TS4"}
		n.CycleName = "catalytic cycle"
		node(n, "[LPd(Ar)Br]2").Note = "resting state"
		node(n, "[LPd(Ar)Br]2").Share = ref(0.83)
		node(n, "LPd(Ar)Br").Share = ref(0.11)
		n.Steps[2].Note = "limiting step"
	}}, change...)...)
}

// large is an invented network of 40 nodes and 60 steps.
func large() diagram.Network {
	var steps []diagram.NetworkStep
	for i := range 60 {
		a, b := (i*7)%20, (i*7)%20+1+(i*i)%5
		if i < 39 {
			a, b = i*2/3, i+1
		}
		arrow := " -> "
		if i%3 == 0 {
			arrow = " <=> "
		}
		reaction := fmt.Sprintf("S%d%sS%d", a, arrow, b%40)
		if i%9 == 4 {
			reaction = fmt.Sprintf("S%d + 2 S%d%sS%d", a, (a+3)%40, arrow, b%40)
		}
		steps = append(steps, step(fmt.Sprint("k", i+1), reaction, 1e-5*float64((i*37)%60)/60))
	}
	return web("net-large", "Forty intermediates", steps)
}

var networks = []golden{
	{"network_linear", web("net-linear", "", []diagram.NetworkStep{step("k1", "A <=> B"), step("k2", "B -> C"), step("k3", "C -> D")})},
	{"network_competing", addition("net-competing")},
	{"network_competing_column", addition("net-competing-column", wide(340))},
	{"network_cycle", turning("net-cycle")},
	{"network_cycle_column", turning("net-cycle-column", wide(340))},
	{"network_two_cycles", web("net-two-cycles", "Two coupled cycles", []diagram.NetworkStep{
		step("TS1", "Cat + S -> Cat·S", 3e-6), step("TS2", "Cat·S + NADH -> Cat + P + NAD+", 3e-6),
		step("TS3", "Enz + NAD+ <=> Enz·NAD+", 3e-6), step("TS4", "Enz·NAD+ + HCO2- -> Enz + NADH + CO2", 3e-6),
	}, func(n *diagram.Network) {
		n.Cycle, n.CycleName = []string{"TS1", "TS2"}, "reduction"
		n.Steps[3].Note = "limiting step"
		node(n, "Enz·NAD+").Note = "resting state"
	})},
	{"network_autocatalysis", web("net-auto", "A product that makes itself", []diagram.NetworkStep{
		step("slow", "A -> B", 1e-8), step("fast", "A + B -> 2 B", 5e-6), step("back", "B <=> C", -2e-6)})},
	{"network_beside", web("net-beside", "A base used everywhere", []diagram.NetworkStep{
		step("k1", "ketone + LDA -> enolate + HNR2"), step("k2", "enolate + MeI -> product"), step("k3", "product + LDA -> enolate 2 + HNR2"), step("k4", "enolate 2 + MeI -> double product"),
	}, func(n *diagram.Network) {
		for _, name := range []string{"LDA", "HNR2", "MeI"} {
			node(n, name).Beside = true
		}
	})},
	{"network_large", large()},
	{"network_wild", web(`n" onload="x`, wild, []diagram.NetworkStep{{Name: wild, Text: wild, Note: wild, From: []diagram.NetworkTerm{{Node: wild}}, To: []diagram.NetworkTerm{{Node: "x", N: 2}}, Flux: ref(1)}},
		func(n *diagram.Network) { n.Flux, n.FluxUnit = wild, wild })},
}
