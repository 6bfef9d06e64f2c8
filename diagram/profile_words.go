package diagram

import (
	"fmt"
	"math"
	"strings"

	"saddlebook/diagram/axis"
)

// complete fills what may be left out: the name of a state that comes again, and
// values without a text, all to the same decimals. A value that would read as
// zero and is not, or like a differing one near it (up to two points away in its
// path, or at its place in another path), gets more of them.
func (p *Profile) complete() {
	paths := make([]ProfilePath, len(p.Paths))
	for i, path := range p.Paths {
		paths[i] = path
		paths[i].Points = append([]ProfilePoint{}, path.Points...)
		for k := range path.Points {
			q := &paths[i].Points[k]
			if q.Again && q.key() == "" {
				q.Name, q.Label = path.Points[0].Name, path.Points[0].Label
			}
		}
	}
	p.Paths = paths
	decimals := p.decimals()
	for i := range paths {
		for k := range paths[i].Points {
			q := &paths[i].Points[k]
			if q.Text == "" {
				q.Text = axis.Text(q.Value, finer(q.Value, p.near(i, k), decimals))
			}
			if q.SD != nil && !strings.Contains(q.Text, "±") {
				q.Text += " ± " + axis.Text(*q.SD, finer(*q.SD, nil, decimals))
			}
		}
	}
}

// near lists the values that point k of path i is read beside.
func (p Profile) near(i, k int) []float64 {
	var out []float64
	for j, path := range p.Paths {
		low, high := k, k
		if j == i {
			low, high = k-2, k+2
		}
		for m := max(0, low); m <= min(high, len(path.Points)-1); m++ {
			out = append(out, path.Points[m].Value)
		}
	}
	return out
}

// decimals that tell apart what can be told apart on the scale.
func (p Profile) decimals() int {
	low, high := p.extent()
	switch span := high - low; {
	case span >= 300:
		return 0
	case span > 0:
		return min(6, max(1, 1-int(math.Floor(math.Log10(span/3)))))
	}
	return 1
}

// finer gives the decimals for v: at least so many that it does not read as zero
// or as one of the others that it is not, within reason.
func finer(v float64, others []float64, decimals int) int {
	const most = 9
	if v != 0 && math.Abs(v) < 0.5*math.Pow10(-decimals) {
		decimals = min(most, 1-int(math.Floor(math.Log10(math.Abs(v)))))
	}
	for up := 0; up < 3 && decimals < most; up++ {
		same := false
		for _, o := range others {
			// Beyond twelve digits two values differ by rounding alone.
			if math.Abs(o-v) > 1e-12*math.Abs(v) && axis.Text(o, decimals) == axis.Text(v, decimals) {
				same = true
				break
			}
		}
		if !same {
			break
		}
		decimals++
	}
	return decimals
}

// extent is the range of the values with their deviations.
func (p Profile) extent() (low, high float64) {
	low, high = math.Inf(1), math.Inf(-1)
	for _, path := range p.Paths {
		for _, q := range path.Points {
			sd := q.sd()
			low, high = math.Min(low, q.Value-sd), math.Max(high, q.Value+sd)
		}
	}
	return low, high
}

func (q ProfilePoint) sd() float64 {
	if q.SD == nil {
		return 0
	}
	return *q.SD
}

// mostTold is how many points are told one by one.
const mostTold = 24

// words tells the profile to those who do not see it: its key numbers first, and
// the points one by one if they are not too many.
func (p Profile) words(measured []measure) string {
	var b strings.Builder
	points := 0
	top, bottom := p.Paths[0].Points[0], p.Paths[0].Points[0]
	for _, path := range p.Paths {
		points += len(path.Points)
		for _, q := range path.Points {
			if q.Value > top.Value {
				top = q
			}
			if q.Value < bottom.Value {
				bottom = q
			}
		}
	}
	kind := "Highest point"
	if top.Peak {
		kind = "Highest transition state"
	}
	unit := p.Unit
	if unit != "" {
		unit = " " + unit
	}
	fmt.Fprintf(&b, "%s %s at %s%s, lowest point %s at %s%s.", kind, top.shown(), top.Text, unit, bottom.shown(), bottom.Text, unit)
	for _, m := range measured {
		from, to := m.from.point.shown(), m.to.point.shown()
		switch m.kind {
		case span:
			fmt.Fprintf(&b, " From %s to %s: %s%s.", from, to, m.text, unit)
		case nextSpan:
			fmt.Fprintf(&b, " From %s: %s.", from, m.text)
		case turn:
			fmt.Fprintf(&b, " One %s%s.", m.text, unit)
		default:
			fmt.Fprintf(&b, " Barrier from %s over %s: %s%s.", from, to, m.text, unit)
		}
	}
	for _, path := range p.Paths {
		b.WriteByte(' ')
		if path.Name != "" {
			b.WriteString(path.Name + ": ")
		}
		if points > mostTold {
			q, r := path.Points[0], path.Points[len(path.Points)-1]
			fmt.Fprintf(&b, "%d points from %s (%s) to %s (%s).", len(path.Points), q.shown(), q.Text, r.shown(), r.Text)
			continue
		}
		for k, q := range path.Points {
			switch {
			case k == 0:
				b.WriteString("from ")
			case q.Peak:
				b.WriteString(" over ")
			case q.Again:
				b.WriteString(" back to ")
			default:
				b.WriteString(" to ")
			}
			b.WriteString(q.shown() + " (" + q.Text + ")")
			if q.Picture != nil && q.Picture.Alt != "" {
				b.WriteString(", shown as " + q.Picture.Alt)
			}
		}
		b.WriteByte('.')
	}
	return b.String()
}
