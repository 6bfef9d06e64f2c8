package diagram

import (
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"
)

// reads makes a network of steps such as "A + 2*B = C" (returns) or "A > B", named
// s1, s2 and so on.
func reads(steps ...string) Network {
	n := Network{ID: "n"}
	seen := map[string]bool{}
	for i, text := range steps {
		s := NetworkStep{Name: fmt.Sprint("s", i+1)}
		left, right, ok := strings.Cut(text, " = ")
		if s.Returns = ok; !ok {
			left, right, _ = strings.Cut(text, " > ")
		}
		for side, terms := range []string{left, right} {
			for _, t := range strings.Split(terms, " + ") {
				term := NetworkTerm{Node: t}
				if k, name, ok := strings.Cut(t, "*"); ok {
					fmt.Sscan(k, &term.N)
					term.Node = name
				}
				if !seen[term.Node] {
					n.Nodes = append(n.Nodes, NetworkNode{Name: term.Node})
				}
				seen[term.Node] = true
				if side == 0 {
					s.From = append(s.From, term)
				} else {
					s.To = append(s.To, term)
				}
			}
		}
		n.Steps = append(n.Steps, s)
	}
	return n
}

func (n Network) layered() *netLayers {
	return n.graph(func(i int) bool { return n.Nodes[i].Beside }).layers()
}

// mechanisms are typical ones, each of which can be drawn without a crossing.
var mechanisms = []struct {
	name   string
	layout string // at the default width
	steps  []string
}{
	{"linear", "right", []string{"A > B", "B = C", "C > D"}},
	{"long", "down", []string{"A > B", "B > C", "C > D", "D > E", "E > F", "F > G", "G > H", "H > I", "I > J", "J > K", "K > L"}},
	{"branching", "right", []string{"A = B", "B > C", "B > D", "D > E", "D > F"}},
	{"many products", "right", []string{"A > B", "A > C", "A > D", "A > E", "A > F", "A > G"}},
	{"competing partners", "right", []string{"R + X > A", "R + X > B"}},
	{"competing partners, quenched", "right", []string{"R + X > A", "R + X > B", "A + Q > C", "B + Q > D"}},
	{"competing, isomerising", "right", []string{"R > A", "R > B", "A = B"}},
	{"rejoining", "right", []string{"A > B", "A > C", "B > D", "C > D"}},
	{"pre-equilibrium", "right", []string{"A + B = I", "I > P", "I + B > Q"}},
	{"scrambling", "ring", []string{"A = B", "B = C", "C = A", "A > P", "B > Q", "C > R"}},
	{"chain", "", []string{"I > 2*X", "X + M > Y", "Y + I > P + X", "2*X > I2"}},
	{"autocatalysis", "right", []string{"A > B", "A + B > 2*B"}},
	{"catalytic cycle", "ring", []string{"C + S > CS", "CS > CP", "CP > C + P"}},
	{"cycle of two steps", "ring", []string{"E + S > F + P", "F + T > E + Q"}},
	{"cycle, reversible, with inhibitor", "ring", []string{"E + S = ES", "ES > E + P", "E + I = EI"}},
	{"cycle with off-cycle rest", "ring", []string{"C + S > CS", "CS + T > CP", "CP > C + P", "2*C = CC", "PC = C + L"}},
	{"cycle that dies", "ring", []string{"C + S > CS", "CS > C + P", "C > dead"}},
	{"cycle with long way in", "", []string{"PC > PD", "PD > C", "C + S > CS", "CS > C + P"}},
	{"two cycles", "", []string{"C + S > A", "A > C + P", "C + T > B", "B > C + Q"}},
	{"coupled cycles", "", []string{"C + S > CS", "CS + N > C + P + M", "E + M > EM", "EM + F > E + N + G"}},
	{"thermodynamic cycle", "right", []string{"A = B", "A = C", "B = C"}},
}

func TestNoCrossings(t *testing.T) {
	for _, m := range mechanisms {
		t.Run(m.name, func(t *testing.T) {
			n := reads(m.steps...)
			if len(n.Nodes) > 12 {
				t.Fatalf("%d nodes", len(n.Nodes))
			}
			if l := n.layered(); l.crossings != 0 {
				t.Errorf("%d crossings in layers", l.crossings)
			}
			n.Width = 720
			p, err := n.plan()
			if err != nil {
				t.Fatal(err)
			}
			if m.layout != "" && p.kind != m.layout {
				t.Errorf("laid out %q, want %q", p.kind, m.layout)
			}
			if p.crossings != 0 {
				t.Errorf("%d crossings", p.crossings)
			}
		})
	}
	// Two nodes of every step in common with two others, and three with three:
	// the complete bipartite graph of 3 and 3 has no drawing without a crossing
	// (Kuratowski, Fund. Math. 15, 271, 1930).
	if l := reads("A + B + C > P", "A + B + C > Q", "A + B + C > R").layered(); l.crossings == 0 {
		t.Error("a graph that is not planar has no crossings")
	}
}

// shuffled is the same network with other names and in another order.
func shuffled(n Network, r *rand.Rand) Network {
	names := map[string]string{}
	for i, k := range r.Perm(len(n.Nodes)) {
		names[n.Nodes[i].key()] = fmt.Sprint("node ", k)
	}
	out := n
	out.Nodes = make([]NetworkNode, len(n.Nodes))
	for i, k := range r.Perm(len(n.Nodes)) {
		out.Nodes[i] = n.Nodes[k]
		out.Nodes[i].Name, out.Nodes[i].Label = names[n.Nodes[k].key()], ""
	}
	out.Steps = make([]NetworkStep, len(n.Steps))
	for i, k := range r.Perm(len(n.Steps)) {
		s := n.Steps[k]
		s.Name, s.Label = fmt.Sprint("step ", k), ""
		for _, side := range []*[]NetworkTerm{&s.From, &s.To} {
			terms := make([]NetworkTerm, len(*side))
			for a, b := range r.Perm(len(*side)) {
				terms[a] = NetworkTerm{names[(*side)[b].Node], (*side)[b].N}
			}
			*side = terms
		}
		out.Steps[i] = s
	}
	return out
}

// TestCrossingsKeep: the number of crossings does not change with the names and
// the order in which nodes, steps and their sides are listed.
func TestCrossingsKeep(t *testing.T) {
	some := 0
	for seed := range 120 {
		r := rand.New(rand.NewPCG(uint64(seed), 21))
		n := randomNetwork(r, 4+r.IntN(14))
		if seed < len(mechanisms) {
			n = reads(mechanisms[seed].steps...)
		}
		want := n.layered().crossings
		if want > 0 {
			some++
		}
		for range 3 {
			if got := shuffled(n, r).layered().crossings; got != want {
				t.Errorf("seed %d: %d crossings in another order, %d before", seed, got, want)
			}
		}
	}
	if some < 20 {
		t.Errorf("%d networks with crossings: the test sees too few", some)
	}
}

// TestCrossingsAreDrawn: what the layout counts is what the lines do.
func TestCrossingsAreDrawn(t *testing.T) {
	sum := 0
	for seed := range 60 {
		r := rand.New(rand.NewPCG(uint64(seed), 23))
		var steps []string
		for range 5 + r.IntN(16) {
			a, b := r.IntN(12), r.IntN(12)
			if a == b {
				b = (a + 1) % 12
			}
			steps = append(steps, fmt.Sprintf("N%d > N%d", a, b))
		}
		n := reads(steps...)
		pens, _ := n.pens()
		l := n.layered()
		for _, right := range []bool{false, true} {
			s := l.sheet(right, 100, pens)
			chains := make([][]int, len(s.g.legs))
			for _, k := range s.inOrder() {
				chains[s.edges[k].leg] = append(chains[s.edges[k].leg], k)
			}
			lines := make([][]spot, len(s.g.legs))
			for k := range lines {
				lines[k] = flat(s.path(k, chains[k]))
			}
			got := 0
			for i := range lines {
				for k := range i {
					if s.g.legs[i].step != s.g.legs[k].step {
						got += meetings(lines[i], lines[k])
					}
				}
			}
			if got != l.crossings {
				t.Errorf("seed %d: %d crossings drawn, %d counted", seed, got, l.crossings)
			}
			sum += got
		}
	}
	if sum < 20 {
		t.Errorf("%d crossings in all: the test sees too few", sum)
	}
}

func meetings(a, b []spot) int {
	n := 0
	for i := 1; i < len(a); i++ {
		for k := 1; k < len(b); k++ {
			if cross(Line{X1: a[i-1].x, Y1: a[i-1].y, X2: a[i].x, Y2: a[i].y}, Line{X1: b[k-1].x, Y1: b[k-1].y, X2: b[k].x, Y2: b[k].y}) {
				n++
			}
		}
	}
	return n
}

// TestNetworkWidths: lines are as wide as the flux, in the direction of the flux,
// and dashed where there is next to none.
func TestNetworkWidths(t *testing.T) {
	n := reads("A > B", "B = C", "C = D", "D = E")
	flux := []float64{4, 2, -1, 1e-4}
	for i := range flux {
		n.Steps[i].Flux = &flux[i]
	}
	pens, full := n.pens()
	if full != 4 {
		t.Errorf("full %g", full)
	}
	for i, want := range []netPen{
		{forward: netMost}, {forward: netMost / 2, back: netThin / 2}, {forward: netThin / 2, back: netMost / 4}, {forward: netThin, back: netThin, idle: true},
	} {
		if pens[i] != want {
			t.Errorf("step %d: %+v, want %+v", i+1, pens[i], want)
		}
	}
	// The outline of a ribbon is as wide as it should be, on lines and curves.
	path := []Command{{Op: Move}, {Op: To, X: 0, Y: 20}, {Cubic, 0, 40, 30, 40, 30, 60}, {Op: To, X: 30, Y: 80}}
	for _, w := range []float64{0.6, 3, 5.5} {
		edges := [2][]spot{closer(flat(offset(path, w/2)), 0.5), flat(offset(path, -w/2))}
		for _, p := range edges[0] {
			d := math.Inf(1)
			for k := 1; k < len(edges[1]); k++ {
				d = math.Min(d, apart(p, edges[1][k-1], edges[1][k]))
			}
			if math.Abs(d-w) > 0.05*w {
				t.Errorf("a line %g wide is %.3g wide at %.4g", w, d, p)
			}
		}
	}
}

func TestNetworkWords(t *testing.T) {
	n := reads("A + 2*X = B", "B > P")
	flux := []float64{-3e-6, 1e-6}
	half := 0.5
	for i := range flux {
		n.Steps[i].Flux = &flux[i]
	}
	n.FluxUnit = "mol/L/s"
	n.Nodes[2].Note, n.Nodes[2].Share = "resting state", &half
	n.Steps[1].Note, n.Steps[1].Text = "limiting step", "k = 3/s"
	s, err := n.Scene()
	if err != nil {
		t.Fatal(err)
	}
	want := "4 nodes and 2 steps, the largest net flux 3.0 × 10⁻⁶ mol/L/s in s1. Resting state: B. Limiting step: s2. Amounts: B 50.0 %. " +
		"Steps: s1: A + 2 X ⇌ B, −3.0 × 10⁻⁶ mol/L/s; s2: B → P, k = 3/s, 1.0 × 10⁻⁶ mol/L/s."
	if got := strings.ReplaceAll(s.Desc, "\u00a0", " "); got != want {
		t.Errorf("description\n%s, want\n%s", got, want)
	}
}

func TestNetworkRefuses(t *testing.T) {
	with := func(change func(*Network)) Network {
		n := reads("A + X > B", "B = C", "C > A")
		change(&n)
		return n
	}
	minus, inf, big := -1.0, math.Inf(1), 1.5
	for _, tt := range []struct {
		network Network
		msg     string
	}{
		{Network{}, "0 nodes and 0 steps"},
		{with(func(n *Network) { n.Nodes = make([]NetworkNode, 41) }), "41 nodes"},
		{with(func(n *Network) { n.Steps = make([]NetworkStep, 61) }), "61 steps"},
		{with(func(n *Network) { n.Width = 100 }), "100 wide"},
		{with(func(n *Network) { n.Width = math.NaN() }), "NaN wide"},
		{with(func(n *Network) { n.Nodes[1].Name = "" }), "node 2 of"},
		{with(func(n *Network) { n.Nodes[1].Name = "A" }), `have the name "A"`},
		{with(func(n *Network) { n.Nodes[1].Share = &big }), `"X" has the share 1.5`},
		{with(func(n *Network) { n.Nodes = append(n.Nodes, NetworkNode{Name: "Z"}) }), `has the node "Z"`},
		{with(func(n *Network) { n.Steps[1].Name = "" }), "step 2 of"},
		{with(func(n *Network) { n.Steps[1].Name = "s1" }), `have the name "s1"`},
		{with(func(n *Network) { n.Steps[1].From = nil }), "0 nodes on one side"},
		{with(func(n *Network) { n.Steps[1].From = make([]NetworkTerm, 7) }), "7 and 1 nodes"},
		{with(func(n *Network) { n.Steps[1].From = []NetworkTerm{{"Z", 1}} }), `node "Z"`},
		{with(func(n *Network) { n.Steps[1].From = []NetworkTerm{{"B", 1}, {"B", 1}} }), `"B" twice`},
		{with(func(n *Network) { n.Steps[1].From[0].N = -1 }), "-1 times"},
		{with(func(n *Network) { n.Steps[0].Flux = &big }), "state a flux"},
		{with(func(n *Network) {
			for i := range n.Steps {
				n.Steps[i].Flux = &minus
			}
		}), "does not return and has the flux -1"},
		{with(func(n *Network) {
			for i := range n.Steps {
				n.Steps[i].Flux = &inf
			}
		}), "flux +Inf"},
		{with(func(n *Network) { n.Cycle = []string{"s9"} }), `the step "s9"`},
		{with(func(n *Network) { n.Cycle = []string{"s1"} }), "cycle of one step"},
		{with(func(n *Network) { n.Cycle = []string{"s1", "s1"} }), `"s1" twice`},
		{reads("A > B", "C > D", "B > A").cycle("s1", "s2"), `from "s2" to "s1"`},
	} {
		_, err := tt.network.Scene()
		var e *Error
		if !errors.As(err, &e) || !strings.Contains(e.Msg, tt.msg) || e.Fix == "" {
			t.Errorf("error %v, want one with %q and a remedy", err, tt.msg)
		}
	}
}

func (n Network) cycle(steps ...string) Network {
	n.Cycle = steps
	return n
}

func BenchmarkNetwork(b *testing.B) {
	for _, size := range []int{8, 20, 40} {
		b.Run(fmt.Sprint("nodes=", size), func(b *testing.B) {
			n := randomNetwork(rand.New(rand.NewPCG(5, 5)), size)
			b.ReportAllocs()
			for b.Loop() {
				if _, err := n.Scene(); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}
