package axis

import (
	"fmt"
	"math"
	"math/rand/v2"
	"strconv"
	"strings"
	"testing"
)

func TestTicks(t *testing.T) {
	for _, tt := range []struct {
		low, high float64
		n         int
		want      string
	}{
		{-5.1, 13.8, 6, "−10 −5 0 5 10 15"},
		{0, 1, 6, "0.0 0.2 0.4 0.6 0.8 1.0"},
		{0, 0, 6, "−0.6 −0.4 −0.2 0.0 0.2 0.4 0.6"},
		{7, 7, 6, "6.4 6.6 6.8 7.0 7.2 7.4 7.6"},
		{-36.5, 88.9, 6, "−50 0 50 100"},
		{-2345.6789, -2345.6612, 5, "−2345.680 −2345.675 −2345.670 −2345.665 −2345.660"},
		{-1e12, 1e12, 3, "−1000000000000 0 1000000000000"},
		{math.NaN(), 1, 6, ""}, {1, 0, 6, ""}, {0, math.Inf(1), 6, ""}, {-math.MaxFloat64, math.MaxFloat64, 6, ""}, {0, 1, 1, ""},
	} {
		values, decimals := Ticks(tt.low, tt.high, tt.n)
		var got []string
		for _, v := range values {
			got = append(got, Text(v, decimals))
		}
		if s := strings.Join(got, " "); s != tt.want {
			t.Errorf("Ticks(%g, %g, %d) = %s, want %s", tt.low, tt.high, tt.n, s, tt.want)
		}
	}
}

// TestTicksHold: ticks cover the range, are evenly spaced, print exactly, and
// are neither too many nor too few.
func TestTicksHold(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	for range 5000 {
		low := (r.Float64() - 0.5) * math.Pow(10, float64(r.IntN(14)-4))
		high := low + math.Pow(10, r.Float64()*12-5)
		n := 3 + r.IntN(8)
		values, decimals := Ticks(low, high, n)
		name := fmt.Sprintf("Ticks(%g, %g, %d) = %v", low, high, n, values)
		if len(values) < 2 || len(values) > 2*n+2 {
			t.Fatalf("%s: %d ticks", name, len(values))
		}
		step := values[1] - values[0]
		if values[0] > low+1e-8*step || values[len(values)-1] < high-1e-8*step {
			t.Errorf("%s does not cover the range", name)
		}
		for i, v := range values {
			if i > 0 && math.Abs(v-values[i-1]-step) > 1e-6*step {
				t.Errorf("%s is uneven", name)
			}
			printed, err := strconv.ParseFloat(strings.Replace(Text(v, decimals), "−", "-", 1), 64)
			if err != nil || math.Abs(printed-v) > 1e-6*step {
				t.Errorf("%s: %v prints as %s", name, v, Text(v, decimals))
			}
		}
	}
}

func TestText(t *testing.T) {
	for _, tt := range []struct {
		v        float64
		decimals int
		want     string
	}{{-0.04, 1, "0.0"}, {math.Copysign(0, -1), 0, "0"}, {-0.05001, 1, "−0.1"}, {12, 0, "12"}, {-3.25, 2, "−3.25"}} {
		if got := Text(tt.v, tt.decimals); got != tt.want {
			t.Errorf("Text(%g, %d) = %q, want %q", tt.v, tt.decimals, got, tt.want)
		}
	}
}

func TestScale(t *testing.T) {
	s := Scale{Low: -10, High: 20, From: 300, To: 0}
	for v, want := range map[float64]float64{-10: 300, 20: 0, 5: 150} {
		if got := s.At(v); got != want {
			t.Errorf("At(%g) = %g, want %g", v, got, want)
		}
	}
	if got := (Scale{1, 1, 0, 8}).At(1); got != 4 {
		t.Errorf("a scale without extent gives %g, want 4", got)
	}
}
