package stiff

import (
	"fmt"
	"math"
	"testing"
)

// Mazzia and Magherini, Test Set for Initial Value Problem Solvers, release
// 2.4: mechanisms, start values and reference values at the end time.
const testSet = "Test Set for IVP Solvers, release 2.4 (2008): "

type testProblem struct {
	name   string
	n      int
	steps  []step
	start  []float64
	t      float64
	atol   float64 // times rtol
	want   []float64
	digits float64 // relative accuracy of the values
	source string
}

func testProblems() []testProblem {
	w := 1 / 77.27
	return []testProblem{{
		name: "rober", n: 3,
		steps:  []step{{0.04, []int{0}, []int{1}}, {3e7, []int{1, 1}, []int{1, 2}}, {1e4, []int{1, 2}, []int{0, 2}}},
		start:  []float64{1, 0, 0},
		t:      1e11,
		atol:   1e-14,
		want:   []float64{0.2083340149701255e-07, 0.8333360770334713e-13, 0.9999999791665050},
		digits: 4e-13,
		source: testSet + "problem ROBER",
	}, {
		// The scaled Oregonator as mass action in three pools.
		name: "orego", n: 3,
		steps: []step{
			{77.27, []int{1}, []int{1, 0}}, {77.27, []int{0}, []int{0, 0}}, {77.27 * 8.375e-6, []int{0, 0}, []int{0}},
			{77.27, []int{0, 1}, []int{1}}, {w, []int{2}, []int{2, 1}}, {w, []int{1}, nil}, {w, []int{0, 1}, []int{0}},
			{0.161, []int{0}, []int{0, 2}}, {0.161, []int{2}, nil}},
		start:  []float64{1, 2, 3},
		t:      360,
		atol:   1e-6,
		want:   []float64{0.1000814870318523e1, 0.1228178521549917e4, 0.1320554942846706e3},
		digits: 2e-13,
		source: testSet + "problem OREGO",
	}, {
		name: "hires", n: 8,
		steps: []step{
			{0.0007, nil, []int{0}}, {1.71, []int{0}, []int{1}}, {0.43, []int{1}, []int{0}}, {8.32, []int{1}, []int{3}},
			{8.32, []int{2}, []int{0}}, {1.71, []int{2}, []int{3}}, {0.43, []int{3}, []int{2}}, {0.69, []int{3}, []int{5}},
			{0.035, []int{4}, []int{2}}, {1.71, []int{4}, []int{5}}, {0.43, []int{5}, []int{4}},
			{280, []int{5, 7}, []int{6}}, {0.43, []int{6}, []int{4, 7}}, {0.69, []int{6}, []int{5, 7}}, {0.69, []int{6}, []int{7}}},
		start: []float64{1, 0, 0, 0, 0, 0, 0, 0.0057},
		t:     321.8122,
		atol:  1e-4,
		want: []float64{0.7371312573325668e-3, 0.1442485726316185e-3, 0.5888729740967575e-4, 0.1175651343283149e-2,
			0.2386356198831331e-2, 0.6238968252742796e-2, 0.2849998395185769e-2, 0.2850001604814231e-2},
		digits: 6e-14,
		source: testSet + "problem HIRES",
	}, {
		name: "pollu", n: 20,
		steps: polluSteps(),
		start: []float64{1: 0.2, 3: 0.04, 6: 0.1, 7: 0.3, 8: 0.01, 16: 0.007, 19: 0},
		t:     60,
		atol:  1e-18,
		want: []float64{0.5646255480022769e-01, 0.1342484130422339, 0.4139734331099427e-08, 0.5523140207484359e-02,
			0.2018977262302196e-06, 0.1464541863493966e-06, 0.7784249118997964e-01, 0.3245075353396018,
			0.7494013383880406e-02, 0.1622293157301561e-07, 0.1135863833257075e-07, 0.2230505975721359e-02,
			0.2087162882798630e-03, 0.1396921016840158e-04, 0.8964884856898295e-02, 0.4352846369330103e-17,
			0.6899219696263405e-02, 0.1007803037365946e-03, 0.1772146513969984e-05, 0.5682943292316392e-04},
		digits: 3e-14,
		source: testSet + "problem POLLU",
	}}
}

func polluSteps() []step {
	k := []float64{0.35, 26.6, 1.23e4, 8.6e-4, 8.2e-4, 1.5e4, 1.3e-4, 2.4e4, 1.65e4, 9.0e3, 0.022, 1.2e4, 1.88, 1.63e4, 4.8e6,
		3.5e-4, 0.0175, 1.0e8, 4.44e11, 1.24e3, 2.1, 5.78, 0.0474, 1.78e3, 3.12}
	io := [][2][]int{
		{{0}, {1, 2}}, {{1, 3}, {0}}, {{4, 1}, {0, 5}}, {{6}, {4, 4, 7}}, {{6}, {7}}, {{6, 5}, {4, 7}}, {{8}, {9, 4, 7}},
		{{8, 5}, {10}}, {{10, 1}, {0, 9, 11}}, {{10, 0}, {12}}, {{12}, {10, 0}}, {{9, 1}, {13, 0}}, {{13}, {6, 4}}, {{0, 5}, {14}},
		{{2}, {3}}, {{3}, {15}}, {{3}, {2}}, {{15}, {5, 5}}, {{15}, {2}}, {{16, 5}, {17, 4}}, {{18}, {1}}, {{18}, {0, 2}},
		{{0, 3}, {18}}, {{18, 0}, {19}}, {{19}, {18, 0}}}
	var out []step
	for i, x := range io {
		out = append(out, step{k[i], x[0], x[1]})
	}
	return out
}

func TestTestSet(t *testing.T) {
	for _, p := range testProblems() {
		for _, rtol := range []float64{1e-4, 1e-6, 1e-8, 1e-10} {
			t.Run(fmt.Sprintf("%s/rtol=%g", p.name, rtol), func(t *testing.T) {
				sys, k := build(t, p.n, p.steps)
				y, s := end(t, sys, Options{RTol: rtol, ATol: rtol * p.atol}, &Problem{To: p.t, Start: p.start, Rates: k})
				for i, w := range p.want {
					near(t, fmt.Sprintf("y[%d]", i), y[i], w, max(10*rtol, 10*p.digits), p.source)
				}
				t.Logf("%+v", s.Stats())
			})
		}
	}
}

// TestE5 goes to the published end time. The published values of y2 and y3
// break the exact y2 = y3 + y4 by 0.15 %, so they hold to three digits; y1 is
// exp(-7890), so only its smallness is tested.
func TestE5(t *testing.T) {
	steps := []step{{7.89e-10, []int{0}, []int{1, 2}}, {1.1e7, []int{0, 2}, []int{3}}, {1.13e9, []int{1, 2}, nil}, {1.13e3, []int{3}, []int{2}}}
	sys, k := build(t, 4, steps)
	p := Problem{To: 1e13, Start: []float64{1.76e-3, 0, 0, 0}, Rates: k}
	y, _ := end(t, sys, Options{RTol: 1e-8, ATol: 1e-32}, &p)
	if !(math.Abs(y[0]) < 1e-40) {
		t.Errorf("y1 = %g, want below 1e-40", y[0])
	}
	near(t, "y2", y[1], 8.867655517642120e-23, 1e-3, testSet+"problem E5")
	near(t, "y3", y[2], 8.854814626268838e-23, 1e-3, testSet+"problem E5")
	const fine = "32-digit Radau IIA of order 9, and a second run on the system reduced by y2 = y3 + y4"
	near(t, "y2", y[1], 8.861233521291e-23, 1e-9, fine)
	near(t, "y3", y[2], 8.861233521291e-23, 1e-9, fine)
	p.To = 1e6
	y, _ = end(t, sys, Options{RTol: 1e-10, ATol: 1e-28}, &p)
	const source = "45-digit Radau IIA of order 13 for these constants, differs by 1.5e-13 from a looser run"
	for i, w := range []float64{4.9367194167280984e-08, 1.8615865976221867e-13, 1.8606924128410545e-13, 8.941847811321365e-17} {
		near(t, fmt.Sprintf("y%d(1e6 s)", i+1), y[i], w, 1e-9, source)
	}
}
