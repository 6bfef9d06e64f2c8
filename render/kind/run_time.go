package kind

import (
	"math"
	"strings"

	"saddlebook/kinetics/unit"
)

// timeWords is a time of a run: exact where that is short ("7 h", "23 h 20 min"),
// else rounded as results are.
func timeWords(seconds float64) string {
	text := unit.Span(seconds)
	if q, err := unit.Parse(strings.ReplaceAll(text, "\u00a0", " "), unit.Unit{}, unit.Time); err == nil && near(q.SI, seconds) {
		return strings.Replace(text, ".0\u00a0", "\u00a0", 1)
	}
	minutes := math.Round(seconds / 60)
	if minutes >= 60 && minutes < 100*60 && near(60*minutes, seconds) {
		return unit.Fixed(math.Floor(minutes/60), 0) + "\u00a0h " + unit.Fixed(math.Mod(minutes, 60), 0) + "\u00a0min"
	}
	return text
}

func near(a, b float64) bool { return math.Abs(a-b) <= 1e-9*math.Abs(b) }

// distinctTimes words times with as many digits as it takes to tell them apart,
// up to six.
func distinctTimes(times []float64) []string {
	out := make([]string, len(times))
	for i, t := range times {
		out[i] = timeWords(t)
	}
	for digits := 3; digits <= 6; digits++ {
		alike := map[string][]int{}
		for i, text := range out {
			alike[text] = append(alike[text], i)
		}
		for i, text := range out {
			for _, other := range alike[text] {
				if !near(times[i], times[other]) {
					out[i] = timeDigits(times[i], digits)
					break
				}
			}
		}
	}
	return out
}

// timeDigits is a time with a number of digits, in the unit that suits it.
func timeDigits(seconds float64, digits int) string {
	text := unit.Span(seconds)
	symbol := text[strings.LastIndex(text, "\u00a0")+len("\u00a0"):]
	u, err := unit.Lookup(symbol, unit.Time)
	if err != nil {
		return text
	}
	return unit.Digits(u.Of(seconds), digits) + "\u00a0" + symbol
}

// firstWords says how long an addition takes that begins at the start.
func firstWords(q unit.Quantity) string {
	if q.Unit.Of(q.SI) == 1 {
		if word, ok := map[string]string{"s": "second", "min": "minute", "h": "hour", "d": "day", "week": "week", "year": "year"}[q.Unit.Symbol]; ok {
			return "the first " + word
		}
	}
	return "the first " + spanWords(q)
}
