package spread

import (
	"errors"
	"math"
	"reflect"
	"slices"
	"testing"
)

// The 95 % point of the standard normal distribution: Abramowitz and Stegun,
// table 26.5 (the number from memory, and equal to √2 erfinv 0.9 in double precision).
const z95 = 1.6448536270

func TestNormalsMargins(t *testing.T) {
	for _, n := range []int{Draws, 1001} {
		p := Normals(40, n, Seed)
		for j := range p.Dim() {
			values := make([]float64, n)
			square := 0.0
			for i := range values {
				values[i] = p.At(i)[j]
				square += values[i] * values[i]
			}
			q := Quantiles(values, 0.05, 0.5, 0.95)
			if q[1] != 0 || math.Abs(q[2]-z95) > 0.01 || math.Abs(q[0]+q[2]) > 1e-12 {
				t.Errorf("coordinate %d: quantiles %v", j, q)
			}
			if v := square / float64(n); math.Abs(v-1) > 4e-3 { // the outermost strata are cut at their centres
				t.Errorf("coordinate %d: variance %g", j, v)
			}
		}
	}
}

func TestNormalsCoordinatesAreIndependent(t *testing.T) {
	p := Normals(40, Draws, Seed)
	for a := range p.Dim() {
		for b := range a {
			var r, squares float64
			for i := range p.Len() {
				x, y := p.At(i)[a], p.At(i)[b]
				r += x * y
				squares += (x*x - 1) * (y*y - 1) / 2
			}
			if r /= float64(p.Len()); math.Abs(r) > 1e-3 {
				t.Errorf("coordinates %d and %d correlate by %g", a, b, r)
			}
			if squares /= float64(p.Len()); math.Abs(squares) > 0.16 {
				t.Errorf("squares of coordinates %d and %d correlate by %g", a, b, squares)
			}
		}
	}
}

func TestNormalsAreTheSame(t *testing.T) {
	if !reflect.DeepEqual(Normals(7, 100, 1), Normals(7, 100, 1)) {
		t.Error("the same call gave other points")
	}
	if reflect.DeepEqual(Normals(7, 100, 1), Normals(7, 100, 2)) {
		t.Error("another seed gave the same points")
	}
	if p := Normals(3, 1, 1); p.At(0)[2] != 0 {
		t.Errorf("a single point is %v, not the centre", p.At(0))
	}
	if p := Normals(0, 5, 1); len(p.At(4)) != 0 {
		t.Error("no coordinates, yet some")
	}
}

// ln(kA/kB) of two uncertain barriers, from samples and in closed form.
func TestSampleAgainstClosedForm(t *testing.T) {
	const T = 195.15
	const kcal = 4184.0
	for _, tt := range []struct {
		name        string
		plan        Plan
		a, b        int
		sdA, sdB    float64
		correlation float64
		off         float64 // standard deviations
	}{
		{"independent", Plan{Own: []float64{kcal, kcal}}, 0, 1, kcal, kcal, 0, 0.01},
		{"unequal", Plan{Own: []float64{0.4 * kcal, 0, 0.3 * kcal}}, 0, 2, 0.4 * kcal, 0.3 * kcal, 0, 0.015},
		{"strongly shared", Strong([]float64{kcal, kcal}, []int{0, 1}), 0, 1, kcal, kcal, 0.9, 0.01},
		{"strongly shared, unequal", Strong([]float64{kcal, 0.5 * kcal}, []int{0, 1}), 0, 1, kcal, 0.5 * kcal, 0.9, 0.015},
		{"own and common", Plan{Own: []float64{0.3 * kcal, 0.4 * kcal}, Common: []Part{{[]int{0, 1}, []float64{1.5 * kcal, 1.5 * kcal}}}},
			0, 1, 0.3 * kcal, 0.4 * kcal, 0, 0.015},
		{"two of five", Plan{Own: []float64{kcal, kcal, kcal, kcal, kcal}}, 1, 4, kcal, kcal, 0, 0.02},
	} {
		t.Run(tt.name, func(t *testing.T) {
			columns, err := Sample(tt.plan, Draws, func(x []float64) ([]float64, error) {
				return []float64{(x[tt.b] - x[tt.a]) / (gasConstant * T)}, nil
			})
			if err != nil {
				t.Fatal(err)
			}
			sd := LnRatioSD(tt.sdA, tt.sdB, tt.correlation, T)
			iv := IntervalOf(tt.plan.Case, columns[0])
			for _, q := range []struct {
				name      string
				got, want float64
			}{{"5 %", iv.Low, -z95 * sd}, {"median", iv.Median, 0}, {"95 %", iv.High, z95 * sd}} {
				if e := math.Abs(q.got-q.want) / sd; !(e <= tt.off) {
					t.Errorf("%s point is %g, want %g: off by %.3f sd", q.name, q.got, q.want, e)
				}
			}
		})
	}
}

// The deviations that the package doc states.
func TestAccuracyAsStated(t *testing.T) {
	for _, tt := range []struct {
		dim        int
		rms, worst float64
	}{{5, 0.01, 0.02}, {10, 0.01, 0.03}, {40, 0.015, 0.08}} {
		p := Normals(tt.dim, Draws, Seed)
		sum, worst, pairs := 0.0, 0.0, 0
		v := make([]float64, p.Len())
		for a := range tt.dim {
			for b := range a {
				for i := range v {
					v[i] = (p.At(i)[a] - p.At(i)[b]) / math.Sqrt2
				}
				iv := IntervalOf(Stated, v)
				if math.Abs(iv.Median) > 1e-12 {
					t.Errorf("median of a difference is %g", iv.Median)
				}
				e := math.Abs(iv.High - z95)
				worst = math.Max(worst, e)
				sum += e * e
				pairs++
			}
		}
		if rms := math.Sqrt(sum / float64(pairs)); !(rms <= tt.rms && worst <= tt.worst) {
			t.Errorf("%d parts: deviation usually %.4f, at most %.4f; stated %g and %g", tt.dim, rms, worst, tt.rms, tt.worst)
		}
	}
}

// Errors shared in full cancel in a ratio, to the last digit.
func TestSharedErrorsCancel(t *testing.T) {
	plan := Plan{Own: []float64{0, 0}, Common: []Part{{[]int{0, 1}, []float64{6276, 6276}}}}
	spread := 0.0
	columns, err := Sample(plan, 500, func(x []float64) ([]float64, error) {
		spread = math.Max(spread, math.Abs(x[0]))
		return []float64{x[0] - x[1]}, nil
	})
	if err != nil {
		t.Fatal(err)
	}
	if spread < 2*6276 {
		t.Errorf("the energies moved by %g at most", spread)
	}
	for _, v := range columns[0] {
		if v != 0 {
			t.Fatalf("a difference is off by %g", v)
		}
	}
	if sd := LnRatioSD(6276, 6276, 1, 300); sd != 0 {
		t.Errorf("closed form gives %g", sd)
	}
}

func TestLnRatioSD(t *testing.T) {
	// By hand: √(3² + 4²) kJ/mol over RT at 300 K, and the plain formula.
	if got, want := LnRatioSD(3000, 4000, 0, 300), 5000/(8.31446261815324*300); math.Abs(got-want) > 1e-12 {
		t.Errorf("got %g, want %g", got, want)
	}
	for _, r := range []float64{-1, -0.5, 0, 0.3, 0.9, 1} {
		got := LnRatioSD(2000, 5000, r, 250)
		want := math.Sqrt(2000*2000+5000*5000-2*r*2000*5000) / (gasConstant * 250)
		if math.Abs(got-want) > 1e-12*want {
			t.Errorf("correlation %g: got %g, want %g", r, got, want)
		}
	}
	for _, bad := range [][4]float64{{-1, 1, 0, 300}, {1, -1, 0, 300}, {1, 1, 2, 300}, {1, 1, 0, 0}, {math.NaN(), 1, 0, 300}} {
		if got := LnRatioSD(bad[0], bad[1], bad[2], bad[3]); !math.IsNaN(got) {
			t.Errorf("%v gave %g", bad, got)
		}
	}
}

func TestQuantiles(t *testing.T) {
	inf := math.Inf(1)
	for _, tt := range []struct {
		values []float64
		p      float64
		want   float64
	}{
		{[]float64{3, 1, 2, 4}, 0.5, 2.5},
		{[]float64{3, 1, 2, 4}, 0, 1},
		{[]float64{3, 1, 2, 4}, 1, 4},
		{[]float64{3, 1, 2, 4}, 0.1, 1.3}, // type 7: 1 + 0.1 × 3
		{[]float64{7}, 0.95, 7},
		{[]float64{1, inf, inf}, 0.5, inf},
		{[]float64{1, inf, inf}, 0.25, inf},
		{[]float64{-inf, 1, 2}, 0.75, 1.5},
		{nil, 0.5, math.NaN()},
		{[]float64{1, math.NaN()}, 0.5, math.NaN()},
		{[]float64{1, 2}, 1.5, math.NaN()},
	} {
		before := slices.Clone(tt.values)
		got := Quantiles(tt.values, tt.p)[0]
		if got != tt.want && !(math.IsNaN(got) && math.IsNaN(tt.want)) && !(math.Abs(got-tt.want) < 1e-12) {
			t.Errorf("quantile %g of %v is %g, want %g", tt.p, tt.values, got, tt.want)
		}
		for i := range before {
			if before[i] != tt.values[i] && !math.IsNaN(before[i]) {
				t.Errorf("Quantiles changed its values to %v", tt.values)
			}
		}
	}
}

func TestPlanRefuses(t *testing.T) {
	for name, p := range map[string]Plan{
		"negative":     {Own: []float64{-1}},
		"not a number": {Own: []float64{math.NaN()}},
		"no state":     {Own: []float64{1}, Common: []Part{{[]int{1}, []float64{1}}}},
		"lengths":      {Own: []float64{1}, Common: []Part{{[]int{0}, nil}}},
		"twice":        {Own: []float64{1, 1}, Common: []Part{{[]int{0, 0}, []float64{1, 1}}}},
		"negative sd":  {Own: []float64{1}, Common: []Part{{[]int{0}, []float64{-1}}}},
		"too many":     {Own: slices.Repeat([]float64{1}, MaxDim+1)},
	} {
		if _, err := Sample(p, 10, func([]float64) ([]float64, error) { return nil, nil }); !errors.Is(err, ErrPlan) {
			t.Errorf("%s: error %v", name, err)
		}
	}
	if _, err := Sample(Plan{Own: []float64{1}}, 0, nil); !errors.Is(err, ErrPlan) {
		t.Errorf("no samples: error %v", err)
	}
	stop := errors.New("stop")
	calls := 0
	err := Plan{Own: []float64{1}}.Draw(10, func([]float64) error { calls++; return stop })
	if !errors.Is(err, stop) || calls != 1 {
		t.Errorf("error %v after %d calls", err, calls)
	}
}

func TestStrongKeepsDeviations(t *testing.T) {
	p := Strong([]float64{1000, 0, 500, 2000}, []int{0, 2})
	for i, want := range []float64{1000, 0, 500, 2000} {
		if got := p.SD(i); math.Abs(got-want) > 1e-9 {
			t.Errorf("state %d: sd %g, want %g", i, got, want)
		}
	}
	if r := p.Covariance(0, 2) / (1000 * 500); math.Abs(r-SharedCorrelation) > 1e-12 {
		t.Errorf("correlation %g", r)
	}
	if p.Covariance(0, 3) != 0 {
		t.Error("a state apart shares an error")
	}
	if math.Abs(p.Covariance(3, 3)-4e6) > 1e-6 {
		t.Error("covariance of a state with itself is not its variance")
	}
}
