// Package axis chooses tick values and maps values to places on a figure.
package axis

import (
	"math"
	"strconv"
	"strings"
)

// Scale maps values between Low and High to places between From and To, in a
// straight line. From may lie beyond To: y runs downwards.
type Scale struct{ Low, High, From, To float64 }

// At gives the place of v. A scale without extent puts everything half way.
func (s Scale) At(v float64) float64 {
	if s.High == s.Low {
		return (s.From + s.To) / 2
	}
	return s.From + (v-s.Low)/(s.High-s.Low)*(s.To-s.From)
}

// Ticks gives round values (1, 2 or 5 times a power of ten apart) from the last
// one at or below low to the first one at or above high, about n of them and
// never more than 2n+2, and the decimals that print them all exactly. Equal low
// and high are set apart first. low and high must be finite with low ≤ high, and
// n ≥ 2; otherwise there are no ticks.
func Ticks(low, high float64, n int) (values []float64, decimals int) {
	if !(low <= high) || math.IsInf(high-low, 0) || n < 2 {
		return nil, 0
	}
	// Below a part in 10^9 the steps would drown in rounding.
	if size := math.Max(math.Abs(low), math.Abs(high)); high-low <= 1e-9*size || high == low {
		room := math.Max(1e-9*size, 0.5)
		if size > 0 && size < 0.5 {
			room = size / 2
		}
		low, high = low-room, high+room
	}
	raw := (high - low) / float64(n-1)
	power := int(math.Floor(math.Log10(raw)))
	unit := 10.0
	for _, u := range []float64{1, 2, 5} {
		if u*math.Pow10(power) >= raw*0.999999 {
			unit = u
			break
		}
	}
	if unit == 10 {
		unit, power = 1, power+1
	}
	at := func(i float64) float64 { // exact where the value is
		if power < 0 {
			return i * unit / math.Pow10(-power)
		}
		return i * unit * math.Pow10(power)
	}
	step := at(1)
	first, last := math.Floor(low/step+1e-9), math.Ceil(high/step-1e-9)
	for i := first; i <= last; i++ {
		values = append(values, at(i)+0) // never -0
	}
	return values, max(0, -power)
}

// Text prints v with a number of decimals, with a true minus and never "-0".
func Text(v float64, decimals int) string {
	s := strconv.FormatFloat(v, 'f', decimals, 64)
	digits, minus := strings.CutPrefix(s, "-")
	if minus && strings.Trim(digits, "0.") != "" {
		return "−" + digits
	}
	return digits
}
