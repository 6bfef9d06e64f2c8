package kind

import (
	"math"
	"slices"
	"strings"
	"testing"

	"saddlebook/kinetics/course"
)

func TestProgrammeReads(t *testing.T) {
	h := 3600.0
	for _, tt := range []struct {
		texts []string
		want  []course.Leg
	}{
		{[]string{"2 h at -78 °C", "ramp to 20 °C over 3 h", "12 h at 20 °C"},
			[]course.Leg{{To: 195.15, Lasts: 2 * h}, {Ramp: true, To: 293.15, Lasts: 3 * h}, {To: 293.15, Lasts: 12 * h}}},
		{[]string{"  30\u00a0min   at \u221278 °C ", "Ramp  to 300 K over 90 min"},
			[]course.Leg{{To: 195.15, Lasts: h / 2}, {Ramp: true, To: 300, Lasts: 1.5 * h}}},
		{[]string{"1 h at 20 °C", "ramp to 50 °C at 0.5 K/min"},
			[]course.Leg{{To: 293.15, Lasts: h}, {Ramp: true, To: 323.15, Lasts: 60 * 60}}},
		{[]string{"1 h at 20 °C", "ramp to -10 °C at 20 °C / h"},
			[]course.Leg{{To: 293.15, Lasts: h}, {Ramp: true, To: 263.15, Lasts: 1.5 * h}}},
		{[]string{"1 h at 20 °C", "1 h at 60 °C"},
			[]course.Leg{{To: 293.15, Lasts: h}, {To: 333.15, Lasts: h}}},
	} {
		p, ps := readProgramme(tt.texts)
		if len(ps) > 0 {
			t.Errorf("%q: %v", tt.texts, ps)
			continue
		}
		if len(p.legs) != len(tt.want) {
			t.Errorf("%q: %d legs", tt.texts, len(p.legs))
			continue
		}
		for i, l := range p.legs {
			w := tt.want[i]
			if l.Ramp != w.Ramp || math.Abs(l.To-w.To) > 1e-9 || math.Abs(l.Lasts-w.Lasts) > 1e-6 {
				t.Errorf("%q, leg %d: %+v, want %+v", tt.texts, i+1, l, w)
			}
		}
	}
}

// Each fault stands at the character where it begins.
func TestProgrammeFaults(t *testing.T) {
	const hold = "1 h at 20 °C"
	for _, tt := range []struct {
		text      string
		first     bool
		char      int
		msg, hint string
	}{
		{"ramp to 20 °C over 3 h", true, 0, "begins with a ramp", "begin with a hold"},
		{"", false, 0, "empty", "2 h at -78 °C"},
		{"2 h", false, 0, "does not say at which temperature", "2 h at -78 °C"},
		{"hold 2 h at 20 °C", false, 0, "neither a hold nor a ramp", "2 h at -78 °C"},
		{" cool to -78 °C over 1 h", false, 1, "neither a hold nor a ramp", "ramp to"},
		{"3 h to 20 °C", false, 4, "neither a hold nor a ramp", "ramp to"},
		{"2 hxx at 20 °C", false, 2, `unit "hxx" is not known`, "h"},
		{"2 h at 20 °X", false, 10, "is not known", ""},
		{"2 h at 20", false, 9, "no unit", "20 °C"},
		{"2 h at", false, 6, "empty", ""},
		{"at 20 °C", false, 0, "neither a hold nor a ramp", ""},
		{"0 h at 20 °C", false, 0, "lasts no time", "above 0"},
		{"-2 h at 20 °C", false, 0, "lasts no time", "above 0"},
		{"2 ± 1 h at 20 °C", false, 0, "±", "leave out"},
		{"2 h at -300 °C", false, 7, "below absolute zero", ""},
		{"2 h at 0 K", false, 7, "nothing moves", "above absolute zero"},
		{"ramp 20 °C over 3 h", false, 5, "to which temperature", "ramp to"},
		{"ramp", false, 4, "to which temperature", "ramp to"},
		{"ramp to 60 °C", false, 0, "how fast", "over 3 h"},
		{"ramp to 60 °C over 3 h at 2 K/min", false, 23, "both a duration and a rate", "keep one"},
		{"ramp to 60 °C over", false, 18, "empty", ""},
		{"ramp to 20 °C over 3 h", false, 8, "where it begins", "write a hold"},
		{"ramp to 60 °C at 2 K", false, 17, "not a rate", "0.5 K/min"},
		{"ramp to 60 °C at 2 K/kg", false, 21, "measures", ""},
		{"ramp to 60 °C at 2 h/min", false, 19, "measures a time", ""},
		{"ramp to 60 °C at 0 K/min", false, 17, "never ends", "above 0"},
		{"ramp to 0 °C at -2 K/min", false, 16, "has a sign", "leave the sign out"},
	} {
		texts := []string{hold, tt.text}
		if tt.first {
			texts = texts[1:]
		}
		_, ps := readProgramme(texts)
		if len(ps) != 1 {
			t.Errorf("%q: %d problems", tt.text, len(ps))
			continue
		}
		p := ps[0]
		if p.Char != tt.char || !strings.Contains(p.Msg, tt.msg) || !strings.Contains(p.Fix, tt.hint) || p.Fix == "" {
			t.Errorf("%q: character %d, %q; %q\nwant %d, %q; %q", tt.text, p.Char, p.Msg, p.Fix, tt.char, tt.msg, tt.hint)
		}
	}
}

func TestWarmings(t *testing.T) {
	for _, tt := range []struct {
		texts []string
		want  []float64 // min
	}{
		{[]string{"2 h at -78 °C", "ramp to 20 °C over 3 h", "12 h at 20 °C"}, []float64{120}},
		{[]string{"1 h at 0 °C", "ramp to 20 °C over 1 h", "ramp to 60 °C over 1 h", "1 h at 60 °C", "ramp to 80 °C over 1 h"}, []float64{60, 240}},
		{[]string{"1 h at 0 °C", "1 h at 20 °C", "1 h at 40 °C"}, []float64{60, 120}},
		{[]string{"1 h at 0 °C", "ramp to -20 °C over 1 h", "ramp to 0 °C over 1 h"}, []float64{120}},
		{[]string{"1 h at 0 °C"}, nil},
	} {
		p, ps := readProgramme(tt.texts)
		if len(ps) > 0 {
			t.Fatal(ps)
		}
		got := p.warmings()
		for i := range got {
			got[i] /= 60
		}
		if !slices.Equal(got, tt.want) {
			t.Errorf("%q: warming starts at %v min, want %v", tt.texts, got, tt.want)
		}
	}
}

// Whatever is written, the reader answers with legs that last or with faults
// that have a place in the text and a remedy.
func FuzzProgramme(f *testing.F) {
	for _, s := range []string{"2 h at -78 °C", "ramp to 20 °C over 3 h", "ramp to 20 °C at 0.5 K/min", "ramp to", "at at", "ramp to 9 °C at /min", "\u00a0", "1e300 h at 1e-300 K"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) {
		p, ps := readProgramme([]string{"1 h at 20 °C", text})
		for _, b := range ps {
			if b.Msg == "" || b.Fix == "" || b.Char < 0 || b.Char > len([]rune(text)) {
				t.Errorf("%q: %+v", text, b)
			}
			_ = b.Error()
		}
		if len(ps) == 0 && len(p.legs) != 2 {
			t.Errorf("%q: %d legs and no fault", text, len(p.legs))
		}
		for _, l := range p.legs {
			if !(l.Lasts > 0) || math.IsInf(l.Lasts, 0) || !(l.To > 0) || math.IsInf(l.To, 0) {
				t.Errorf("%q: %+v", text, l)
			}
		}
	})
}
