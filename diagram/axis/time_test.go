package axis

import (
	"math"
	"strings"
	"testing"
)

func joined(ticks []Tick) string {
	var out []string
	for _, t := range ticks {
		out = append(out, t.Text)
	}
	return strings.Join(out, " ")
}

func TestTimes(t *testing.T) {
	for _, tt := range []struct {
		low, high float64
		n         int
		want      string
		unit      string
		power     int
	}{
		{0, 45, 6, "0 10 20 30 40", "s", 0},
		{0, 179, 6, "0 50 100 150", "s", 0},
		{0, 180, 6, "0 1 2 3", "min", 0},
		{0, 3600, 6, "0 15 30 45 60", "min", 0},
		{0, 17 * 3600, 8, "0 3 6 9 12 15", "h", 0},
		{0, 48 * 3600, 6, "0 12 24 36 48", "h", 0},
		{0, 3 * 3600, 8, "0.0 0.5 1.0 1.5 2.0 2.5 3.0", "h", 0},
		{0, 10 * 86400, 7, "0 2 4 6 8 10", "d", 0},
		{0, 30 * 365.25 * 86400, 5, "0 10 20 30", "years", 0},
		{0, 4e6 * 365.25 * 86400, 5, "0 1 2 3 4", "years", 6},
		{0, 0.25, 6, "0 50 100 150 200 250", "ms", 0},
		{0, 2e-6, 5, "0.0 0.5 1.0 1.5 2.0", "µs", 0},
		{0, 2e-15, 5, "0.0 0.5 1.0 1.5 2.0", "ps", -3},
		{3600, 2 * 3600, 5, "60 75 90 105 120", "min", 0},
		{5, 5, 5, "", "s", 0},
		{0, math.Inf(1), 5, "", "s", 0},
		{math.NaN(), 1, 5, "", "s", 0},
	} {
		ticks, unit, power := Times(tt.low, tt.high, tt.n)
		if got := joined(ticks); got != tt.want || unit != tt.unit || power != tt.power {
			t.Errorf("Times(%g, %g, %d): %q in 10^%d %s, want %q in 10^%d %s", tt.low, tt.high, tt.n, got, power, unit, tt.want, tt.power, tt.unit)
		}
	}
}

func TestTimesAreFew(t *testing.T) {
	for high := 1e-14; high < 1e20; high *= 1.37 {
		for n := 2; n < 12; n++ {
			ticks, _, _ := Times(0, high, n)
			if len(ticks) > n || len(ticks) < 2 && n > 4 {
				t.Errorf("Times(0, %g, %d) gives %d", high, n, len(ticks))
			}
			for i, k := range ticks {
				if k.At < 0 || k.At > high*(1+1e-9) || i > 0 && !(k.At > ticks[i-1].At) || len(k.Text) > 6 {
					t.Errorf("Times(0, %g, %d): %+v", high, n, ticks)
				}
			}
		}
	}
}

func TestLogTimes(t *testing.T) {
	ranked := func(low, high float64, most int) string {
		var out []Tick
		for _, k := range LogTimes(low, high) {
			if k.Rank <= most {
				out = append(out, k)
			}
		}
		return joined(out)
	}
	for _, tt := range []struct {
		low, high float64
		rank      int
		want      string
	}{
		{1e-3, 2e5, 0, "1 ms|1 s|1 min|1 h|1 d"},
		{1e-3, 2e5, 1, "1 ms|10 ms|100 ms|1 s|10 s|1 min|10 min|1 h|10 h|1 d"},
		{60, 3600, 2, "1 min|2 min|5 min|10 min|20 min|50 min|1 h"},
		{1e-12, 1e-9, 0, "1 ps|1 ns"},
		{1e7, 1e14, 1, "1 year|10 years|100 years|10^3 years|10^4 years|10^5 years|10^6 years"},
		{0, 1, 3, ""}, {2, 1, 3, ""}, {1, math.Inf(1), 3, ""}, {math.NaN(), 1, 3, ""},
	} {
		want := strings.ReplaceAll(tt.want, "|", " ")
		if got := ranked(tt.low, tt.high, tt.rank); got != want {
			t.Errorf("LogTimes(%g, %g) to rank %d: %q, want %q", tt.low, tt.high, tt.rank, got, want)
		}
	}
	if n := len(LogTimes(1e-300, 1e300)); n > 500 {
		t.Errorf("%d times", n)
	}
}

func TestDecades(t *testing.T) {
	for _, tt := range []struct {
		low, high float64
		n         int
		want      string
	}{
		{1e-3, 50, 9, "10^−3 10^−2 10^−1 1 10 10^2"},
		{1, 1, 9, "10^−1 1"},
		{1e-12, 1, 5, "10^−12 10^−9 10^−6 10^−3 1"},
		{2, 3, 5, "1 10"},
		{0, 1, 5, ""}, {2, 1, 5, ""}, {math.NaN(), 1, 5, ""},
	} {
		if got := joined(Decades(tt.low, tt.high, tt.n)); got != tt.want {
			t.Errorf("Decades(%g, %g, %d): %q, want %q", tt.low, tt.high, tt.n, got, tt.want)
		}
	}
}

func TestPower(t *testing.T) {
	for x, want := range map[float64]int{0: 0, 1: 0, 0.001: 0, 99999: 0, 1e5: 3, 1e6: 6, 9.9e-4: -6, -2e-9: -9, 1e-9: -9, 1e-320: -306} {
		if got := Power(x); got != want {
			t.Errorf("Power(%g) = %d, want %d", x, got, want)
		}
	}
}

func TestLogScale(t *testing.T) {
	s := Log{Low: 1, High: 100, From: 10, To: 30}
	for v, want := range map[float64]float64{1: 10, 10: 20, 100: 30} {
		if got := s.At(v); math.Abs(got-want) > 1e-12 {
			t.Errorf("At(%g) = %g, want %g", v, got, want)
		}
	}
}
