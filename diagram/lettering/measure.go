package lettering

import (
	"sync"
	"unicode"

	"github.com/go-fonts/liberation/liberationsansregular"
	"golang.org/x/image/font"
	"golang.org/x/image/font/sfnt"
	"golang.org/x/image/math/fixed"
)

// Family is the list of fonts that the measures hold for, first to last.
const Family = `"Liberation Sans", Arial, Helvetica, sans-serif`

// Proportions, in em. The ink of a line, shifts included, stays between Ascent
// above its base line and Descent below it.
const (
	Ascent  = 0.90
	Descent = 0.26
	Leading = 1.22 // base line to base line
	Small   = 0.72 // size of a subscript or superscript
	Drop    = 0.17 // how far a subscript stands below the line
	Rise    = 0.36 // how far a superscript stands above the line
)

// tableEnd bounds the letters that are measured from the font. Liberation Sans
// has next to nothing above it.
const tableEnd = 0x2600

// advances holds the advance width of every letter below tableEnd, in em; a
// negative width marks a letter that the font lacks.
var advances = sync.OnceValue(func() []float32 {
	f, err := sfnt.Parse(liberationsansregular.TTF)
	if err != nil {
		panic("lettering: the embedded font does not parse: " + err.Error())
	}
	var buf sfnt.Buffer
	em := fixed.I(int(f.UnitsPerEm()))
	t := make([]float32, tableEnd)
	for r := range t {
		t[r] = -1
		g, err := f.GlyphIndex(&buf, rune(r))
		if err != nil || g == 0 {
			continue
		}
		if a, err := f.GlyphAdvance(&buf, g, em, font.HintingNone); err == nil {
			t[r] = float32(a) / float32(em)
		}
	}
	return t
})

// Width gives the width of runs at a size, without kerning.
func Width(runs []Run, size float64) float64 {
	w := 0.0
	for _, run := range runs {
		s := size
		if run.Shift != Base {
			s *= Small
		}
		for _, r := range run.Text {
			w += advance(r) * s
		}
	}
	return w
}

// advance gives the width of a letter in em.
func advance(r rune) float64 {
	if r >= 0 && r < tableEnd {
		if a := advances()[r]; a >= 0 {
			return float64(a)
		}
	}
	if unicode.In(r, unicode.Mn, unicode.Me, unicode.Cf) {
		return 0
	}
	return 1
}
