package axis

import (
	"math"
	"sort"
)

// Tick is a value with a mark on an axis.
type Tick struct {
	At   float64
	Text string
	Rank int // 0 is the first to keep where there is no room for all
}

const (
	minute = 60.0
	hour   = 60 * minute
	day    = 24 * hour
	year   = 365.25 * day
)

// timeUnits are the units of time axes, largest first. An axis takes the first
// that it is at least so many of long.
var timeUnits = []struct {
	symbol        string
	seconds, long float64
	steps         []float64 // in the unit; nil: 1, 2 or 5 times a power of ten
}{
	{"years", year, 3, nil},
	{"d", day, 3, nil},
	{"h", hour, 3, []float64{0.5, 1, 2, 3, 4, 5, 6, 12, 24}},
	{"min", minute, 3, []float64{0.5, 1, 2, 5, 10, 15, 20, 30, 60}},
	{"s", 1, 1, nil},
	{"ms", 1e-3, 1, nil},
	{"µs", 1e-6, 1, nil},
	{"ns", 1e-9, 1, nil},
	{"ps", 1e-12, 1, nil},
}

// Times gives at most n round times from low to high (s), both included where
// they are round, and the unit that their texts are in, which is chosen by the
// span: s, min, h, d or years, or a part of a second. Beyond 10⁵ years and below
// a picosecond the texts are multiples of the power of ten that is returned too;
// it is 0 for all others. low and high must be finite, 0 ≤ low < high, and n ≥ 2;
// otherwise there are no ticks.
func Times(low, high float64, n int) (ticks []Tick, unit string, power int) {
	span := high - low
	if !(low >= 0 && span > 0) || math.IsInf(high, 0) || n < 2 {
		return nil, "s", 0
	}
	u := timeUnits[len(timeUnits)-1]
	for _, v := range timeUnits {
		if span >= v.long*v.seconds {
			u = v
			break
		}
	}
	size := u.seconds
	if x := high / size; x >= 1e5 || x < 1 {
		power = thousands(x)
		size *= math.Pow10(power)
	}
	from, to := low/size, high/size
	step, decimals := round((to-from)/float64(n-1)*(1-1e-9), u.steps)
	for i := math.Ceil(from/step - 1e-9); i*step <= to*(1+1e-9); i++ {
		ticks = append(ticks, Tick{At: i * step * size, Text: Text(i*step, decimals)})
	}
	return ticks, u.symbol, power
}

// round gives the least of steps that is at least raw, or the next one that is 1,
// 2 or 5 times a power of ten, and the decimals that print its multiples.
func round(raw float64, steps []float64) (step float64, decimals int) {
	for _, s := range steps {
		if s >= raw {
			if s != math.Floor(s) {
				decimals = 1
			}
			return s, decimals
		}
	}
	p := int(math.Floor(math.Log10(raw)))
	for _, m := range []float64{1, 2, 5, 10} {
		step = m * math.Pow10(p)
		if p < 0 {
			step = m / math.Pow10(-p)
		}
		if step >= raw*(1-1e-9) {
			if m == 10 {
				p++
			}
			break
		}
	}
	return step, max(0, -p)
}

// Power is the power of ten, a multiple of three, to print x as a multiple of
// where it has too many digits: 0 from 0.001 to 10⁵, and for 0.
func Power(x float64) int {
	x = math.Abs(x)
	if x == 0 || x >= 1e-3 && x < 1e5 || math.IsNaN(x) || math.IsInf(x, 0) {
		return 0
	}
	return thousands(x)
}

func thousands(x float64) int { return max(-306, 3*int(math.Floor(math.Log10(x)/3+1e-12))) }

// LogTimes gives times for a logarithmic axis from low to high (s): each unit
// from the picosecond to the year (rank 0), ten and a hundred of them (rank 1),
// two and five times those (rank 2) and three times (rank 3). They come in order
// of time. low must be above 0, and high finite and above low; otherwise there
// are none.
func LogTimes(low, high float64) []Tick {
	if !(low > 0 && high > low) || math.IsInf(high, 0) {
		return nil
	}
	var ticks []Tick
	add := func(at float64, text string, rank int) {
		if at >= low*(1-1e-9) && at <= high*(1+1e-9) {
			ticks = append(ticks, Tick{At: at, Text: text, Rank: rank})
		}
	}
	next := math.Inf(1)
	for i, u := range timeUnits {
		if i == 0 {
			for p := 3; p <= 300 && math.Pow10(p)*year <= high*(1+1e-9); p++ {
				rank := 1
				if p%3 == 0 {
					rank = 0
				}
				add(math.Pow10(p)*year, "10^"+Text(float64(p), 0)+" years", rank)
			}
			next = 1000 * year
		}
		for _, tens := range []float64{1, 10, 100} {
			for _, m := range []float64{1, 2, 3, 5} {
				x := tens * m
				if x*u.seconds >= next*(1-1e-9) {
					continue
				}
				rank := 3
				switch {
				case x == 1:
					rank = 0
				case m == 1:
					rank = 1
				case m != 3:
					rank = 2
				}
				symbol := u.symbol
				if symbol == "years" && x == 1 {
					symbol = "year"
				}
				add(x*u.seconds, Text(x, 0)+" "+symbol, rank)
			}
		}
		next = u.seconds
	}
	sort.Slice(ticks, func(i, k int) bool { return ticks[i].At < ticks[k].At })
	return ticks
}

// Decades gives whole powers of ten, at most n or so of them, from the last one
// at or below low to the first one at or above high, with texts such as "10^-3".
// low must be above 0, and high finite and at least low; otherwise there are none.
func Decades(low, high float64, n int) []Tick {
	if !(low > 0 && high >= low) || math.IsInf(high, 0) || n < 2 {
		return nil
	}
	first, last := int(math.Floor(math.Log10(low)+1e-9)), int(math.Ceil(math.Log10(high)-1e-9))
	if first == last {
		first--
	}
	step := 1
	for (last-first)/step >= n {
		step++
	}
	var ticks []Tick
	for p := first; p < last+step; p += step {
		text := "10^" + Text(float64(p), 0)
		switch p {
		case 0:
			text = "1"
		case 1:
			text = "10"
		}
		ticks = append(ticks, Tick{At: math.Pow10(p), Text: text})
	}
	return ticks
}

// Log maps values above 0 to places in a straight line of their logarithms.
type Log struct{ Low, High, From, To float64 }

// At gives the place of v, which must be above 0.
func (s Log) At(v float64) float64 {
	return Scale{math.Log(s.Low), math.Log(s.High), s.From, s.To}.At(math.Log(v))
}
