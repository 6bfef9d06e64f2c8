package stiff

import (
	"fmt"
	"math"
	"testing"
)

// Closed solutions of elementary rate laws. Formulas are those of any kinetics
// textbook; the numbers were evaluated from them with 30 digits.
func TestClosedForms(t *testing.T) {
	const source = "closed form, evaluated with 30 digits: "
	type check struct {
		species int
		want    float64
	}
	for _, tt := range []struct {
		name   string
		n      int
		steps  []step
		start  []float64
		t      float64
		want   []check
		source string
	}{
		{"consecutive/1", 3, chain(1, 0.5), []float64{1, 0, 0}, 2, []check{{0, 0.1353352832366127}, {1, 0.4650883158696593}, {2, 0.399576400893728}}, "A -> B -> C"},
		{"consecutive/2", 3, chain(0.1, 0.01), []float64{1, 0, 0}, 20, []check{{0, 0.1353352832366127}, {1, 0.7593282998237435}, {2, 0.1053364169396438}}, "A -> B -> C"},
		{"consecutive/3", 3, chain(0.02, 0.2), []float64{1, 0, 0}, 100, []check{{1, 0.0150372534639399}, {2, 0.8496274632994474}}, "A -> B -> C"},
		{"consecutive/equal", 3, chain(1, 1), []float64{1, 0, 0}, 2, []check{{1, 0.2706705664732254}, {2, 0.5939941502901619}}, "A -> B -> C"},
		{"consecutive/close", 3, chain(1, 1.000001), []float64{1, 0, 0}, 2, []check{{1, 0.2706702958028394}, {2, 0.593994420960548}}, "A -> B -> C"},
		{"consecutive/stiff", 3, chain(0.001, 1000), []float64{1, 0, 0}, 2000, []check{{1, 1.353354185720313e-7}, {2, 0.8646645814279687}}, "A -> B -> C"},
		{"bateman", 4, chain(1, 0.5, 0.2), []float64{1, 0, 0, 0}, 20, []check{{0, 2.061153622438558e-9}, {1, 9.079573721772483e-5}, {2, 0.03800625049542995}, {3, 0.9619029517061987}}, "Bateman 1910"},
		{"opposing/1", 2, []step{{1, []int{0}, []int{1}}, {0.5, []int{1}, []int{0}}}, []float64{1, 0}, 0.6666666666666667, []check{{0, 0.5785862941142949}}, "A <-> B"},
		{"opposing/2", 2, []step{{0.003, []int{0}, []int{1}}, {0.001, []int{1}, []int{0}}}, []float64{1, 0}, 250, []check{{0, 0.5259095808785817}}, "A <-> B"},
		{"second order/1", 3, []step{{0.5, []int{0, 1}, []int{2}}}, []float64{1, 2, 0}, 1, []check{{0, 0.4352665983935839}, {1, 1.435266598393584}}, "A + B -> P"},
		{"second order/2", 3, []step{{2, []int{0, 1}, []int{2}}}, []float64{0.1, 0.3, 0}, 5, []check{{0, 0.009448594974808773}, {1, 0.2094485949748088}}, "A + B -> P"},
		{"order 2", 2, []step{{0.15, []int{0, 0}, []int{1}}}, []float64{2, 0}, 1, []check{{0, 1.25}}, "1/a = 1/a0 + 2 k t for 2 A -> P with rate k a^2"},
		{"order 3", 2, []step{{0.1, []int{0, 0, 0}, []int{1}}}, []float64{2, 0}, 1, []check{{0, 1.084652289093281}}, "1/a^2 = 1/a0^2 + 6 k t for 3 A -> P with rate k a^3"},
		{"autocatalysis", 2, []step{{2, []int{0, 1}, []int{1, 1}}}, []float64{1, 0.01}, 2, []check{{1, 0.3659755447126462}}, "A + X -> 2 X"},
		{"dimer", 3, []step{{10, []int{0, 1}, []int{2}}, {1, []int{2}, []int{0, 1}}}, []float64{1, 1, 0}, 100, []check{{2, 0.7298437881283576}}, "equilibrium of A + B <-> C, K = 10"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			sys, k := build(t, tt.n, tt.steps)
			y, _ := end(t, sys, Options{RTol: 1e-10, ATol: 1e-18}, &Problem{To: tt.t, Start: tt.start, Rates: k})
			for _, c := range tt.want {
				near(t, fmt.Sprintf("y[%d]", c.species), y[c.species], c.want, 1e-9, source+tt.source)
			}
		})
	}
}

func chain(k ...float64) []step {
	var out []step
	for i, x := range k {
		out = append(out, step{x, []int{i}, []int{i + 1}})
	}
	return out
}

// TestOrder measures the order of single steps of fixed length on smooth
// problems: the error at the end falls as h^5.
func TestOrder(t *testing.T) {
	for _, tt := range []struct {
		name  string
		steps []step
		rates func(k Constant) Rates
		exact func(t float64) float64
	}{
		{"autonomous", []step{{1, []int{0, 0}, []int{1}}}, func(k Constant) Rates { return k },
			func(t float64) float64 { return 1 / (1 + 2*t) }},
		{"rate constant moves", []step{{1, []int{0, 0}, []int{1}}}, func(Constant) Rates { return wave{} },
			func(t float64) float64 { return 1 / (1 + 2*(t+(1-math.Cos(3*t))/3*0.5)) }},
	} {
		for _, m := range []*tableau{&rodas5p} {
			t.Run(tt.name+"/"+m.name, func(t *testing.T) {
				sys, k := build(t, 2, tt.steps)
				errAt := func(n int) (atEnd, between float64) {
					s, err := NewSolver(sys, Options{})
					if err != nil {
						t.Fatal(err)
					}
					s.e.method = m
					e := &s.e
					e.y[e.order.place[0]], e.y[e.order.place[1]] = 1, 0
					e.rates = tt.rates(k)
					e.moving = !e.rates.Held(0)
					e.ratesAt(0, false)
					h := 2.0 / float64(n)
					out := make([]float64, 2)
					for i := range n {
						tau := float64(i) * h
						clear(e.jac)
						e.prepare(tau)
						if !e.factor(m.gamma * h) {
							t.Fatal("no factorisation")
						}
						e.step(tau, h)
						s.step.set(e, tau, tau+h, 3, false)
						for _, th := range []float64{0.3, 0.5, 0.8} {
							s.step.At(tau+th*h, out)
							between = max(between, math.Abs(out[0]-tt.exact(tau+th*h)))
						}
						e.y, e.next = e.next, e.y
						// The method itself keeps A + 2 B, before any correction.
						if sum := e.y[e.order.place[0]] + 2*e.y[e.order.place[1]]; math.Abs(sum-1) > 1e-14 {
							t.Fatalf("A + 2 B = %.17g after step %d, want 1", sum, i+1)
						}
					}
					return math.Abs(e.y[e.order.place[0]] - tt.exact(2)), between
				}
				want := float64(m.estimate)
				a, da := errAt(40)
				b, db := errAt(80)
				if p := math.Log2(a / b); !(p > want-0.3) {
					t.Errorf("order %.2f at the end, want %g (errors %.2e, %.2e)", p, want, a, b)
				}
				if p := math.Log2(da / db); !(p > want-0.3) {
					t.Errorf("order %.2f of the dense output, want %g (errors %.2e, %.2e)", p, want, da, db)
				}
			})
		}
	}
}

// wave is a rate constant 1 + sin(3t)/2.
type wave struct{}

func (wave) Corners() []float64 { return nil }
func (wave) Held(int) bool      { return false }
func (wave) At(_ int, t float64, k, dk []float64) {
	k[0] = 1 + 0.5*math.Sin(3*t)
	if dk != nil {
		dk[0] = 1.5 * math.Cos(3*t)
	}
}

// TestTableaux checks the row sums: with the stages written as k_i, the
// arguments lie at t + c_i h, and d_i is the sum of the gammas of the row.
func TestTableaux(t *testing.T) {
	for _, m := range []*tableau{&rodas5p} {
		// u = G k with G the lower triangle of gammas; C = 1/gamma I - G^-1.
		s := m.stages
		var inv, g [maxStages][maxStages]float64
		for i := range s {
			for j := range i {
				inv[i][j] = -m.c[i][j]
			}
			inv[i][i] = 1 / m.gamma
		}
		for col := range s {
			for i := range s {
				x := 0.0
				if i == col {
					x = 1
				}
				for j := range i {
					x -= inv[i][j] * g[j][col]
				}
				g[i][col] = x / inv[i][i]
			}
		}
		for i := range s {
			c, d := 0.0, 0.0
			for j := range s {
				d += g[i][j]
				for l := range i {
					c += m.a[i][l] * g[l][j]
				}
			}
			if math.Abs(c-m.node[i]) > 1e-12 || math.Abs(d-m.d[i]) > 1e-12 {
				t.Errorf("%s stage %d: row sums %.15g, %.15g, want c = %.15g, d = %.15g", m.name, i+1, c, d, m.node[i], m.d[i])
			}
		}
	}
}
