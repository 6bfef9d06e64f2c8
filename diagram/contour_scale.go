package diagram

import (
	"math"
	"sort"
	"strconv"
	"strings"

	"saddlebook/diagram/axis"
	"saddlebook/diagram/lettering"
	"saddlebook/kinetics/unit"
)

// valueScale maps values to 0 at its low end and 1 at its high end.
type valueScale struct {
	log       bool
	low, high float64 // the logarithms with log
	cut       bool    // there are values beyond an end
	floor     float64 // places below and above this are as good as it
	roof      float64
}

// at is NaN for NaN and else from floor to roof.
func (s valueScale) at(v float64) float64 {
	if s.log {
		v = math.Log10(v)
	}
	return math.Max(s.floor, math.Min(s.roof, (v-s.low)/(s.high-s.low)))
}

// scale chooses the value scale and its ticks.
func (l *mapLayout) scale() error {
	m := &l.m
	s := valueScale{log: m.LogValues}
	of := func(v float64) float64 {
		if s.log {
			return math.Log10(v)
		}
		return v
	}
	least, most := math.Inf(1), math.Inf(-1)
	for _, row := range m.Values {
		for _, v := range row {
			if u := of(v); !math.IsNaN(u) && !math.IsInf(u, 0) {
				least, most = math.Min(least, u), math.Max(most, u)
			}
		}
	}
	switch {
	case m.Low != nil:
		s.low, s.high = of(*m.Low), of(*m.High)
	case !s.log:
		ticks, _ := axis.Ticks(least, most, 6)
		s.low, s.high = ticks[0], ticks[len(ticks)-1]
		if m.Share && least > -1e-9 {
			s.low = math.Max(0, s.low)
		}
		if m.Share && most < 1+1e-9 {
			s.high = math.Min(1, s.high)
		}
	default:
		s.low, s.high = l.decades(least, most)
	}
	if !(s.high-s.low > 1e-9*math.Max(math.Abs(s.low), math.Abs(s.high))) {
		return refuse("set its ends farther apart", "the value scale of a map from %g to %g", s.low, s.high)
	}
	// A scale's length beyond its ends, and beyond all levels.
	s.floor, s.roof = -1, 2
	for _, v := range m.Levels {
		p := (of(v.Value) - s.low) / (s.high - s.low)
		s.floor, s.roof = math.Min(s.floor, p-1), math.Max(s.roof, p+1)
	}
	for _, row := range m.Values {
		for _, v := range row {
			if p := s.at(v); p < -1e-9 || p > 1+1e-9 {
				s.cut = true
			}
		}
	}
	l.values = s
	l.valueTicks()
	return nil
}

// decades chooses the ends of a logarithmic scale from the logarithms of the least
// and the greatest value.
func (l *mapLayout) decades(least, most float64) (low, high float64) {
	low, high = least, most
	if low > high { // 0 and infinite only
		low, high = 0, 0
	}
	first, last := math.Inf(1), math.Inf(-1)
	for _, v := range l.m.Levels {
		u := math.Log10(v.Value)
		first, last = math.Min(first, u), math.Max(last, u)
	}
	const beyond = 2.0
	if first <= last && low < last+beyond && high > first-beyond {
		low, high = math.Max(low, first-beyond), math.Min(high, last+beyond)
	} else {
		low = math.Max(low, high-8)
	}
	if high-low > 1.5 {
		return math.Floor(low + 1e-9), math.Ceil(high - 1e-9)
	}
	if room := 0.2 - (high - low); room > 0 {
		low, high = low-room/2, high+room/2
	}
	return low, high
}

// valueTicks sets the ticks of the bar and its title.
func (l *mapLayout) valueTicks() {
	m, s := &l.m, l.values
	if s.log {
		l.barTicks = logTicks(math.Pow(10, s.low), math.Pow(10, s.high))
		for i := range l.barTicks {
			t := &l.barTicks[i]
			switch v := t.At; {
			case m.Ratio && v >= 1:
				t.Text = power(v) + ":1"
			case m.Ratio:
				t.Text = "1:" + power(1/v)
			case m.Share:
				t.Text = power(100 * v)
			default:
				t.Text = power(v)
			}
		}
		l.barTitle = lettering.Quantity(m.Axis, m.barUnit())
		return
	}
	size, exponent := 1.0, 0
	switch {
	case m.Share:
		size = 0.01
	case !m.Ratio:
		exponent = axis.Power(math.Max(math.Abs(s.low), math.Abs(s.high)))
		size = math.Pow10(exponent)
	}
	ticks, decimals := axis.Ticks(s.low/size, s.high/size, 6)
	for _, v := range ticks {
		if p := s.at(v * size); p < -1e-9 || p > 1+1e-9 {
			continue
		}
		text := axis.Text(v, decimals)
		if m.Ratio {
			text += ":1"
		}
		l.barTicks = append(l.barTicks, axis.Tick{At: v * size, Text: text})
	}
	l.barTitle = scaled(m.Axis, m.barUnit(), exponent)
}

func (m *ContourMap) barUnit() string {
	if m.Share {
		return "%"
	}
	return m.Unit
}

// logTicks gives 1, 2 and 5 times the powers of ten from low to high, powers first
// in rank, every third and second of them before the others where there are many.
func logTicks(low, high float64) []axis.Tick {
	var ticks []axis.Tick
	first, last := int(math.Floor(math.Log10(low)-1e-9)), int(math.Ceil(math.Log10(high)+1e-9))
	for p := first; p <= last; p++ {
		for _, k := range []int{1, 2, 5} {
			v := float64(k) * math.Pow10(p)
			if p < 0 {
				v = float64(k) / math.Pow10(-p)
			}
			rank := 3
			switch {
			case k == 1 && p%4 == 0:
				rank = 0
			case k == 1 && p%2 == 0:
				rank = 1
			case k == 1:
				rank = 2
			case last-first > 3:
				continue
			}
			if v >= low*(1-1e-9) && v <= high*(1+1e-9) {
				ticks = append(ticks, axis.Tick{At: v, Rank: rank})
			}
		}
	}
	return ticks
}

// power prints a number with one digit that counts; as a power of ten, where it is
// one and long.
func power(v float64) string {
	p := int(math.Round(math.Log10(v)))
	if v > 0.9e-3 && v < 1.1e4 {
		return strconv.FormatFloat(v, 'g', 4, 64)
	}
	if k := v / math.Pow(10, float64(p)); math.Abs(k-1) > 1e-6 {
		return digitsText(v, 1)
	}
	return "10^{" + axis.Text(float64(p), 0) + "}"
}

// digitsText prints up to n digits, without closing zeros.
func digitsText(v float64, n int) string {
	text := strconv.FormatFloat(v, 'e', n-1, 64)
	head, tail, _ := strings.Cut(text, "e")
	if strings.Contains(head, ".") {
		head = strings.TrimRight(strings.TrimRight(head, "0"), ".")
	}
	p, _ := strconv.Atoi(tail)
	if p >= -4 && p < max(n, 5) {
		rounded, _ := strconv.ParseFloat(text, 64)
		return strings.ReplaceAll(strconv.FormatFloat(rounded, 'f', -1, 64), "-", "−")
	}
	return strings.ReplaceAll(head, "-", "−") + " × 10^{" + axis.Text(float64(p), 0) + "}"
}

// levelText is a level as it stands on its line.
func (m *ContourMap) levelText(v MapLevel) string {
	switch {
	case v.Text != "":
		return v.Text
	case m.Ratio && v.Value >= 1:
		return digitsText(v.Value, 6) + ":1"
	case m.Ratio && v.Value > 0:
		return "1:" + digitsText(1/v.Value, 4)
	case m.Share:
		return digitsText(100*v.Value, 6) + " %"
	}
	return digitsText(v.Value, 6)
}

// printed is a value in running text.
func (m *ContourMap) printed(v float64) string {
	switch {
	case m.Ratio:
		return unit.RatioToOne(v)
	case m.Share:
		return unit.Percent(v)
	case m.Unit == "":
		return unit.Digits(v, 3)
	}
	return unit.Digits(v, 3) + " " + m.Unit
}

// bar gives the marks of the value bar between the sides of the plot, its title
// above, and where they end.
func (l *mapLayout) bar(y float64) ([]Mark, float64) {
	const thick = 11.0
	var marks []Mark
	for _, line := range lettering.WrapRuns(l.barTitle, tickSize, l.m.Width-2*margin) {
		marks = append(marks, Words{Role: "axis-text", X: margin, Y: y + lettering.Ascent*tickSize, Size: tickSize, Runs: line})
		y += rowHeight
	}
	y += 3
	x := func(p float64) float64 { return l.left + p*(l.right-l.left) }
	for k := range MapShades {
		from, to := x(float64(k)/MapShades), x(float64(k+1)/MapShades)
		if k+1 < MapShades {
			to += 0.5 // under the next
		}
		marks = append(marks, Box{Role: shade(k), X: from, Y: y, W: to - from, H: thick})
	}
	for _, v := range l.m.Levels {
		if p := l.values.at(v.Value); p > 0 && p < 1 {
			marks = append(marks, Line{Role: onShade("contour", p), X1: x(p), Y1: y, X2: x(p), Y2: y + thick})
		}
	}
	foot := y + thick
	var placed []float64
	ticks := append([]axis.Tick{}, l.barTicks...)
	sort.SliceStable(ticks, func(i, k int) bool { return ticks[i].Rank < ticks[k].Rank })
	var ends [][2]float64
	for _, t := range ticks {
		at := x(l.values.at(t.At))
		text := Words{Role: "tick-text", X: at, Y: foot + 17, Size: tickSize, Anchor: Middle, Runs: lettering.Runs(t.Text)}
		b := text.Bounds()
		ok := b.X0 >= margin && b.X1 <= l.m.Width-margin
		for _, e := range ends {
			ok = ok && (b.X1+7 < e[0] || b.X0-7 > e[1])
		}
		if ok {
			ends = append(ends, [2]float64{b.X0, b.X1})
			marks = append(marks, text)
		}
		if ok || t.Rank < 3 {
			placed = append(placed, at)
		}
	}
	sort.Float64s(placed)
	for i, at := range placed {
		if i == 0 || at-placed[i-1] > 3 {
			marks = append(marks, Line{Role: "tick", X1: at, Y1: foot, X2: at, Y2: foot + courseTick})
		}
	}
	return marks, foot + 17 + lettering.Descent*tickSize
}
