package course

import (
	"math"
	"testing"

	"saddlebook/kinetics/thermo"
)

const closedSource = "closed solutions of elementary rate laws, as in any textbook of kinetics (Laidler, Chemical Kinetics, 3rd ed., chapter 2), evaluated to 16 digits"

// Values of closed solutions, by the exact path and by integration.
func TestClosedForms(t *testing.T) {
	type want struct {
		t float64
		c map[int]float64
	}
	chain := func(k ...float64) network {
		w := newNetwork(len(k) + 1)
		for i, x := range k {
			w.step(x, side(i), side(i+1))
		}
		return w
	}
	opposing := func(k, back float64) network {
		w := newNetwork(2)
		w.exchange(k, back, side(0), side(1))
		return w
	}
	meeting := func(k float64) network {
		w := newNetwork(3)
		w.step(k, side(0, 1), side(2))
		return w
	}
	autocatalysis := newNetwork(2)
	autocatalysis.step(2, side(0, 1), side(1, 1))
	dimer := newNetwork(2)
	dimer.step(0.3/2, side(0, 0), side(1)) // each turn takes two: −da/dt = 0.3 a²
	trimer := newNetwork(2)
	trimer.step(0.3/3, side(0, 0, 0), side(1))
	bound := newNetwork(3)
	bound.exchange(10, 1, side(0, 1), side(2))
	tight := newNetwork(3)
	tight.exchange(100, 1, side(0, 1), side(2))
	for _, tt := range []struct {
		name   string
		w      network
		charge []float64
		want   []want
		tol    float64
	}{
		{"consecutive 1, 0.5", chain(1, 0.5), []float64{1, 0, 0}, []want{{2, map[int]float64{0: 0.1353352832366127, 1: 0.4650883158696593, 2: 0.399576400893728}}}, 1e-9},
		{"consecutive 0.1, 0.01", chain(0.1, 0.01), []float64{1, 0, 0}, []want{{20, map[int]float64{0: 0.1353352832366127, 1: 0.7593282998237435, 2: 0.1053364169396438}}}, 1e-9},
		{"consecutive 0.02, 0.2", chain(0.02, 0.2), []float64{1, 0, 0}, []want{{100, map[int]float64{0: 0.1353352832366127, 1: 0.0150372534639399, 2: 0.8496274632994474}}}, 1e-9},
		{"consecutive equal", chain(1, 1), []float64{1, 0, 0}, []want{{2, map[int]float64{0: 0.1353352832366127, 1: 0.2706705664732254, 2: 0.5939941502901619}}}, 1e-9},
		{"consecutive almost equal", chain(1, 1.000001), []float64{1, 0, 0}, []want{{2, map[int]float64{1: 0.2706702958028394, 2: 0.593994420960548}}}, 1e-9},
		{"consecutive 0.001, 1000", chain(0.001, 1000), []float64{1, 0, 0}, []want{{2000, map[int]float64{0: 0.1353352832366127, 1: 1.353354185720313e-7, 2: 0.8646645814279687}}}, 1e-9},
		{"chain of three", chain(1, 0.5, 0.2), []float64{1, 0, 0, 0}, []want{
			{1, map[int]float64{0: 0.3678794411714423, 1: 0.4773024370823822, 2: 0.143769504667987, 3: 0.01104861707818845}},
			{5, map[int]float64{0: 0.006737946999085467, 1: 0.1506941032496267, 2: 0.501221274109699, 3: 0.3413466756415889}},
			{20, map[int]float64{0: 2.061153622438558e-9, 1: 9.079573721772483e-5, 2: 0.03800625049542995, 3: 0.9619029517061987}}}, 1e-9},
		{"opposing 1, 0.5", opposing(1, 0.5), []float64{1, 0}, []want{{0.6666666666666667, map[int]float64{0: 0.5785862941142949}}}, 1e-9},
		{"opposing 0.003, 0.001", opposing(0.003, 0.001), []float64{1, 0}, []want{{250, map[int]float64{0: 0.5259095808785817}}}, 1e-9},
		{"A + B", meeting(0.5), []float64{1, 2, 0}, []want{{1, map[int]float64{0: 0.4352665983935839, 1: 1.435266598393584}}}, 1e-9},
		{"A + B, dilute", meeting(2), []float64{0.1, 0.3, 0}, []want{{5, map[int]float64{0: 0.009448594974808773, 1: 0.2094485949748088}}}, 1e-9},
		{"second order", dimer, []float64{2, 0}, []want{{1, map[int]float64{0: 1.25}}}, 1e-9},
		{"third order", trimer, []float64{2, 0}, []want{{1, map[int]float64{0: 1.084652289093281}}}, 1e-9},
		{"autocatalysis", autocatalysis, []float64{1, 0.01}, []want{{2, map[int]float64{1: 0.3659755447126462}}}, 1e-9},
		{"A + B <=> C", bound, []float64{1, 1, 0}, []want{{1e4, map[int]float64{2: 0.7298437881283576}}}, 1e-9},
		{"A + B <=> C, tight", tight, []float64{1, 2, 0}, []want{{1e4, map[int]float64{2: 0.9901942113767562}}}, 1e-9},
	} {
		t.Run(tt.name, func(t *testing.T) {
			r := Run{Charge: tt.charge, Basis: 0}
			for _, w := range tt.want {
				r.Report = append(r.Report, w.t)
			}
			r.Programme = hold(r.Report[len(r.Report)-1] * 1.5)
			for _, c := range []*Course{simulate(t, tt.w.m, r), integrate(t, tt.w.m, r)} {
				for i, w := range tt.want {
					for s, x := range w.c {
						near(t, tt.w.m.Species[s].Name, c.Report[i].C[s], x, tt.tol)
					}
				}
				if c.Balance > 1e-12 {
					t.Errorf("balance %.1e", c.Balance)
				}
				if t.Failed() {
					t.Logf("%s\nsource: %s", c.Method, closedSource)
				}
			}
		})
	}
}

// The fastest moment of autocatalysis is where half has reacted: ln(a0/x0)/(k(a0+x0))
// (closed solution, as above).
func TestEndsAtRoot(t *testing.T) {
	w := newNetwork(2)
	w.step(2, side(0, 1), side(1, 1))
	c := simulate(t, w.m, Run{Charge: []float64{1, 0.01}, Basis: 0, Programme: hold(100), Until: []Until{{Of: Amount, Index: 1, Value: 0.505}}})
	near(t, "fastest moment", c.End, 2.279787220786184, 1e-9)

	// Half-life towards equilibrium of opposing reactions (closed solution).
	for _, k := range [][3]float64{{1, 0.5, 0.4620981203732969}, {0.003, 0.001, 173.2867951399863}} {
		w := newNetwork(2)
		w.exchange(k[0], k[1], side(0), side(1))
		r := Run{Charge: []float64{1, 0}, Basis: 0, Programme: hold(1e5), Until: []Until{{Of: Conversion, Value: k[0] / (k[0] + k[1]) / 2}}}
		near(t, "half-life, exact", simulate(t, w.m, r).End, k[2], 1e-11)
		near(t, "half-life, integrated", integrate(t, w.m, r).End, k[2], 1e-9)
	}
}

// Fast exchange of A and B that react to X and Y: Y:X follows the transition
// states alone. Value: exp(−ΔΔG‡/RT) at 298.15 K for 1 kcal/mol (Seeman 1983).
func TestFastExchange(t *testing.T) {
	w := newNetwork(4)
	for _, s := range []struct {
		from, to []int
		g        float64
		returns  bool
	}{{[]int{0}, []int{1}, 8, true}, {[]int{0}, []int{2}, 20, false}, {[]int{1}, []int{3}, 19, false}} {
		w.step(1, side(s.from...), side(s.to...))
		st := &w.m.Steps[len(w.m.Steps)-1]
		st.Above, st.Returns, st.Energy = false, s.returns, thermo.Constant(s.g*kcal)
	}
	w.m.Species[1].Energy = thermo.Constant(kcal)
	r := Run{Charge: []float64{1, 0, 0, 0}, Basis: 0, Programme: hold(1e5), Products: []Product{{"X", []int{2}}, {"Y", []int{3}}}, Report: []float64{1000}}
	for _, c := range []*Course{simulate(t, w.m, r), integrate(t, w.m, r)} {
		p := c.Report[0]
		near(t, "Y:X", p.C[3]/p.C[2], 5.407606565365828, 1e-7)
		near(t, "B:A", p.C[1]/p.C[0], 0.1849246959652564, 1e-7)
		if math.IsNaN(p.Shares[0]) {
			t.Error("no share")
		}
	}
}
