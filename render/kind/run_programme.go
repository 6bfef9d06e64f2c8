package kind

import (
	"fmt"
	"math"
	"strings"
	"unicode"

	"saddlebook/content/fault"
	"saddlebook/kinetics/course"
	"saddlebook/kinetics/unit"
)

// A programme is the temperature of a run over time, leg after leg.
type programme struct {
	legs  []course.Leg
	ends  []float64 // s, by leg
	words []string  // by leg, in the units of its author
}

// end is when the programme is over, s.
func (p programme) end() float64 {
	if len(p.ends) == 0 {
		return 0
	}
	return p.ends[len(p.ends)-1]
}

// begin is when a leg begins, s.
func (p programme) begin(leg int) float64 {
	if leg == 0 {
		return 0
	}
	return p.ends[leg-1]
}

// before is the temperature that a leg finds, K.
func (p programme) before(leg int) float64 {
	if leg == 0 {
		return p.legs[0].To
	}
	return p.legs[leg-1].To
}

// temperatures are the distinct ones that legs hold or lead to, in order.
func (p programme) temperatures() []float64 {
	var out []float64
	seen := map[float64]bool{}
	for _, l := range p.legs {
		if !seen[l.To] {
			seen[l.To] = true
			out = append(out, l.To)
		}
	}
	return out
}

// extremes are the lowest and the highest temperature, K.
func (p programme) extremes() []float64 {
	if len(p.legs) == 0 {
		return nil
	}
	low, high := math.Inf(1), math.Inf(-1)
	for _, T := range p.temperatures() {
		low, high = math.Min(low, T), math.Max(high, T)
	}
	if low == high {
		return []float64{low}
	}
	return []float64{low, high}
}

// warmings are the times at which warming starts, s: a stretch of legs that
// each lead higher starts once.
func (p programme) warmings() []float64 {
	var out []float64
	rising := false
	for i, l := range p.legs {
		up := l.To > p.before(i)
		if up && !rising {
			out = append(out, p.begin(i))
		}
		rising = up && l.Ramp
	}
	return out
}

// jumps are the legs at whose beginning the temperature changes at once.
func (p programme) jumps() []int {
	var out []int
	for i, l := range p.legs {
		if i > 0 && !l.Ramp && l.To != p.before(i) {
			out = append(out, i)
		}
	}
	return out
}

const (
	holdExample = `"2 h at -78 °C"`
	rampExample = `"ramp to 20 °C over 3 h"`
)

// readProgramme reads the texts of a programme. What cannot be read is told
// and left out.
func readProgramme(texts []string) (programme, fault.Problems) {
	var p programme
	var ps fault.Problems
	for i, text := range texts {
		r := legReader{text: []rune(text), path: []string{"programme", fmt.Sprint(i + 1)}, first: i == 0, now: math.NaN()}
		if n := len(p.legs); n > 0 && n == i {
			r.now = p.legs[n-1].To
		}
		leg, bad := r.leg()
		if bad != nil {
			ps = append(ps, bad)
			continue
		}
		p.ends = append(p.ends, p.end()+leg.Lasts)
		p.legs, p.words = append(p.legs, leg), append(p.words, r.words)
	}
	return p, ps
}

// A legReader reads one leg: a hold, "2 h at -78 °C", or a ramp, "ramp to 20 °C
// over 3 h" or "ramp to 20 °C at 0.5 K/min".
type legReader struct {
	text  []rune
	path  []string
	first bool
	now   float64 // K, where the leg begins; NaN: not known
	span  string  // how long it lasts, as read
	words string  // the leg, as read
}

func (r *legReader) fault(at int, msg, fix string) *fault.Problem {
	p := problem(r.path, msg, fix)
	p.Char = at
	return p
}

func (r *legReader) leg() (course.Leg, *fault.Problem) {
	at := r.skip(0)
	end := len(r.text)
	for end > at && unicode.IsSpace(r.text[end-1]) {
		end--
	}
	r.text = r.text[:end]
	first, after := r.word(at)
	switch {
	case first == "":
		return course.Leg{}, r.fault(0, "the element is empty", "write a hold or a ramp, such as "+holdExample+" or "+rampExample)
	case strings.EqualFold(first, "ramp"):
		return r.ramp(at, after)
	case unicode.IsLetter(rune(first[0])):
		return course.Leg{}, r.fault(at, fmt.Sprintf("%q is neither a hold nor a ramp", string(r.text[at:])), "write "+holdExample+" for a hold, "+rampExample+" for a ramp")
	}
	return r.hold(at)
}

func (r *legReader) hold(at int) (course.Leg, *fault.Problem) {
	word, after := r.find(at, "at")
	if word < 0 {
		if over, _ := r.find(at, "to"); over >= 0 {
			return course.Leg{}, r.fault(over, fmt.Sprintf("%q is neither a hold nor a ramp", string(r.text[at:])), "write "+holdExample+" for a hold, "+rampExample+" for a ramp")
		}
		return course.Leg{}, r.fault(at, fmt.Sprintf("%q does not say at which temperature", string(r.text[at:])), "write how long and where, as in "+holdExample)
	}
	lasts, bad := r.lasts(at, word)
	if bad != nil {
		return course.Leg{}, bad
	}
	to, bad := r.quantity(after, len(r.text), unit.Temperature)
	if bad != nil {
		return course.Leg{}, bad
	}
	r.words = r.span + " at " + unit.Print(to.SI, to.Unit, unit.FormKelvin)
	return course.Leg{To: to.SI, Lasts: lasts}, r.cold(after, to)
}

func (r *legReader) ramp(start, at int) (course.Leg, *fault.Problem) {
	leg := course.Leg{Ramp: true}
	word, after := r.word(r.skip(at))
	if word != "to" {
		return leg, r.fault(r.skip(at), "the ramp does not say to which temperature", "write "+rampExample)
	}
	over, span := r.find(after, "over")
	by, rate := r.find(after, "at")
	end := over
	switch {
	case over >= 0 && by >= 0:
		return leg, r.fault(max(over, by), "the ramp has both a duration and a rate", "keep one: over 3 h, or at 0.5 K/min")
	case over < 0 && by < 0:
		return leg, r.fault(start, fmt.Sprintf("%q does not say how fast", string(r.text[start:])), "write over how long, as in "+rampExample+", or a rate, as in \"ramp to 20 °C at 0.5 K/min\"")
	case over < 0:
		end = by
	}
	to, bad := r.quantity(after, end, unit.Temperature)
	if bad == nil {
		bad = r.cold(after, to)
	}
	if bad != nil {
		return leg, bad
	}
	leg.To = to.SI
	if r.first {
		return leg, r.fault(start, "the programme begins with a ramp, which has nowhere to begin", "begin with a hold, such as "+holdExample)
	}
	if leg.To == r.now {
		return leg, r.fault(r.skip(after), fmt.Sprintf("the ramp leads to %q, where it begins", to), "write a hold, such as "+holdExample+", or another temperature")
	}
	r.words = "ramp to " + unit.Print(to.SI, to.Unit, unit.FormKelvin)
	if over >= 0 {
		leg.Lasts, bad = r.lasts(span, len(r.text))
		r.words += " over " + r.span
		return leg, bad
	}
	perSecond, bad := r.rate(rate)
	if bad != nil {
		return leg, bad
	}
	if math.IsNaN(r.now) {
		leg.Lasts = 1 // the leg before is at fault, which has been told
		return leg, nil
	}
	leg.Lasts = math.Abs(leg.To-r.now) / perSecond
	r.words += fmt.Sprintf(" at %s (%s)", strings.Join(strings.Fields(string(r.text[rate:])), "\u00a0"), timeWords(leg.Lasts))
	return leg, nil
}

// lasts reads how long a leg lasts, s.
func (r *legReader) lasts(from, to int) (float64, *fault.Problem) {
	q, bad := r.quantity(from, to, unit.Time)
	if bad == nil && !(q.SI > 0) {
		bad = r.fault(r.skip(from), fmt.Sprintf("a leg of %q lasts no time", q), "write a time above 0, or leave the leg out")
	}
	r.span = spanWords(q)
	return q.SI, bad
}

// cold refuses the absolute zero, at which nothing moves.
func (r *legReader) cold(from int, q unit.Quantity) *fault.Problem {
	if q.SI > 0 {
		return nil
	}
	return r.fault(r.skip(from), fmt.Sprintf("at %q nothing moves", q), "write a temperature above absolute zero")
}

// rate reads how fast a ramp goes, K/s: "0.5 K/min" or "0.5 °C/min".
func (r *legReader) rate(from int) (float64, *fault.Problem) {
	const example = `write it as in "ramp to 20 °C at 0.5 K/min"`
	from = r.skip(from)
	text := string(r.text[from:])
	slash := strings.LastIndex(text, "/")
	if slash < 0 {
		return 0, r.fault(from, fmt.Sprintf("%q is not a rate of heating or cooling", text), example)
	}
	divide := from + len([]rune(text[:slash]))
	u, err := unit.Lookup(strings.TrimSpace(text[slash+1:]), unit.Time)
	if err != nil {
		return 0, r.unit(r.skip(divide+1), err, example)
	}
	degrees := strings.TrimSpace(text[:slash])
	if strings.HasPrefix(degrees, "-") || strings.HasPrefix(degrees, "\u2212") {
		return 0, r.fault(from, fmt.Sprintf("the rate %q has a sign", text), "leave the sign out: the ramp goes where it leads to")
	}
	q, bad := r.quantity(from, divide, unit.Temperature)
	if bad != nil {
		return 0, bad
	}
	x := q.Unit.Of(q.SI) * q.Unit.Scale / u.Scale // a difference: without the offset of °C
	if !(x > 0) || math.IsInf(x, 0) {
		return 0, r.fault(from, fmt.Sprintf("at %q the ramp never ends", text), "write a rate above 0")
	}
	return x, nil
}

// quantity reads a quantity between two characters.
func (r *legReader) quantity(from, to int, want unit.Dim) (unit.Quantity, *fault.Problem) {
	from = r.skip(from)
	part := ""
	if from < to {
		part = strings.TrimRightFunc(string(r.text[from:to]), unicode.IsSpace)
	}
	q, err := unit.Parse(part, unit.Unit{}, want)
	if err != nil {
		return q, r.unit(from, err, fmt.Sprintf("write it as in %q", want.Example()))
	}
	if q.SD != 0 {
		return q, r.fault(from, fmt.Sprintf("the ± of %q is not carried on", q), "leave out the ±")
	}
	return q, nil
}

// unit places an error of package unit.
func (r *legReader) unit(from int, err error, fix string) *fault.Problem {
	e, ok := err.(*unit.Error)
	if !ok {
		return r.fault(from, err.Error(), fix)
	}
	return r.fault(from+e.At, e.Msg, or(e.Fix, fix))
}

// skip returns the first character from at that is no space.
func (r *legReader) skip(at int) int {
	for at < len(r.text) && unicode.IsSpace(r.text[at]) {
		at++
	}
	return at
}

// word returns the word at a character, and where it ends.
func (r *legReader) word(at int) (string, int) {
	end := at
	for end < len(r.text) && !unicode.IsSpace(r.text[end]) {
		end++
	}
	return string(r.text[at:end]), end
}

// find returns where a word stands from a character on, and where it ends; -1
// if it does not.
func (r *legReader) find(at int, word string) (int, int) {
	for at = r.skip(at); at < len(r.text); at = r.skip(at) {
		w, end := r.word(at)
		if w == word {
			return at, end
		}
		at = end
	}
	return -1, -1
}
