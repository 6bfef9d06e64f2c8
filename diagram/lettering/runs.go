package lettering

import (
	"strings"
	"unicode"
	"unicode/utf8"
)

// Shift tells how a run stands on the line.
type Shift int8

const (
	Base  Shift = iota // on the line
	Sub                // low and small
	Super              // high and small
)

// Run is a stretch of text of one kind.
type Run struct {
	Text   string
	Shift  Shift
	Italic bool // for quantity symbols; Runs never sets it
}

// Runs sets plain text: see the package comment. The runs are joined where they
// can be, so that neighbours differ. Empty text gives no runs.
func Runs(text string) []Run {
	var b setter
	text = clean(text)
	for text != "" {
		r, size := utf8.DecodeRuneInString(text)
		if r == ' ' {
			b.add(" ", Base)
			text = text[size:]
			continue
		}
		end := strings.IndexByte(text, ' ')
		if end < 0 {
			end = len(text)
		}
		b.word(text[:end])
		text = text[end:]
	}
	return b.done()
}

// Plain gives the text as one run on the line, with nothing set.
func Plain(text string) []Run {
	var b setter
	b.add(clean(text), Base)
	return b.done()
}

// Text joins the letters of runs.
func Text(runs []Run) string {
	var b strings.Builder
	for _, r := range runs {
		b.WriteString(r.Text)
	}
	return b.String()
}

// clean drops what no figure or page can hold (control characters, broken
// UTF-8) and makes every space a single plain one.
func clean(text string) string {
	var b strings.Builder
	space := true // swallow leading spaces
	for _, r := range text {
		switch {
		case unicode.IsSpace(r) && r != '\u00a0':
			if !space {
				b.WriteByte(' ')
			}
			space = true
			continue
		case r == utf8.RuneError || unicode.IsControl(r) || r == 0xFFFE || r == 0xFFFF || unicode.Is(unicode.Bidi_Control, r):
			r = '\uFFFD'
		}
		b.WriteRune(r)
		space = false
	}
	return strings.TrimRight(b.String(), " ")
}

// setter collects runs.
type setter struct {
	runs  []Run
	last  []byte // text of the run being collected
	shift Shift
	tail  [8]rune // the letters set last, the newest at the end
}

func (b *setter) add(text string, s Shift) {
	if text == "" {
		return
	}
	if s != b.shift {
		b.flush()
		b.shift = s
	}
	b.last = append(b.last, text...)
	for _, r := range text {
		copy(b.tail[:], b.tail[1:])
		b.tail[len(b.tail)-1] = r
	}
}

func (b *setter) flush() {
	if len(b.last) > 0 {
		b.runs = append(b.runs, Run{Text: string(b.last), Shift: b.shift})
		b.last = b.last[:0]
	}
}

// done gives the runs.
func (b *setter) done() []Run {
	b.flush()
	return b.runs
}

// seams part a word into pieces that are judged each on its own.
const seams = "-–—/,·=≡:;|+→⇌←…\"“”"

// word sets one word, which holds no space.
func (b *setter) word(w string) {
	for w != "" {
		end := pieceEnd(w)
		b.piece(w[:end])
		w = w[end:]
		if w == "" {
			return
		}
		r, size := utf8.DecodeRuneInString(w)
		if r == '-' && len(w) > 1 && isDigit(w[1]) && b.opens() {
			r = '−'
		}
		b.add(string(r), Base)
		w = w[size:]
	}
}

// opens reports whether the next letter opens a word or a bracket, so that a
// hyphen before a number is a minus.
func (b *setter) opens() bool {
	switch b.tail[len(b.tail)-1] {
	case 0, ' ', '(', '[':
		return true
	}
	return false
}

// pieceEnd finds where the first piece of w ends: at a seam, unless the seam is
// a charge at the end of the word or part of a written-out shift.
func pieceEnd(w string) int {
	for i, r := range w {
		if !strings.ContainsRune(seams, r) {
			continue
		}
		if prefix := w[:i]; strings.HasSuffix(prefix, "^") || inPower(prefix) {
			continue
		}
		if (r == '+' || r == '-') && i > 0 && closes(w[i+utf8.RuneLen(r):]) {
			continue
		}
		return i
	}
	return len(w)
}

// inPower reports whether prefix ends inside a shift such as ^2 or _{a.
func inPower(prefix string) bool {
	if open := strings.LastIndexByte(prefix, '{'); open > 0 && !strings.Contains(prefix[open:], "}") {
		return prefix[open-1] == '^' || prefix[open-1] == '_'
	}
	k := strings.LastIndexByte(prefix, '^')
	return k >= 0 && digits(prefix[k+1:]) == len(prefix)-k-1
}

// closes reports whether nothing but closing marks follows.
func closes(rest string) bool { return strings.Trim(rest, ")].,;:!?'\"”‡") == "" }

// piece sets a stretch without seams.
func (b *setter) piece(p string) {
	head, core, tail := trim(p)
	b.add(head, Base)
	if low, ok := nucleophilic(core); ok {
		b.add("S", Base)
		b.add("N", Sub)
		core = low
	} else {
		cut := strings.IndexAny(core, "^_‡†")
		if cut < 0 {
			cut = len(core)
		}
		if parts, ok := formula(core[:cut]); ok {
			for _, q := range parts {
				b.add(q.Text, q.Shift)
			}
			core = core[cut:]
		}
	}
	b.marked(core)
	b.marked(tail)
}

// trim parts brackets that have no partner and punctuation from the ends.
func trim(p string) (head, core, tail string) {
	round := strings.Count(p, "(") - strings.Count(p, ")")
	square := strings.Count(p, "[") - strings.Count(p, "]")
	from, to := 0, len(p)
	for from < to {
		switch c := p[to-1]; {
		case strings.IndexByte(".,;:!?", c) >= 0:
			to--
			continue
		case c == ')' && round < 0:
			to, round = to-1, round+1
			continue
		case c == ']' && square < 0:
			to, square = to-1, square+1
			continue
		}
		switch c := p[from]; {
		case c == '(' && round > 0:
			from, round = from+1, round-1
			continue
		case c == '[' && square > 0:
			from, square = from+1, square-1
			continue
		}
		break
	}
	return p[:from], p[from:to], p[to:]
}

// nucleophilic recognises SN1, SN2, SN2', SNAr and SNi and gives what follows
// the low N.
func nucleophilic(core string) (rest string, ok bool) {
	switch rest, ok = strings.CutPrefix(core, "SN"); rest {
	case "1", "2", "1'", "2'", "1′", "2′", "Ar", "i":
		return rest, ok
	}
	return "", false
}

// marked sets what is written out: ^2-, _a, ₂, ⁻¹, ‡ and primes.
func (b *setter) marked(p string) {
	for p != "" {
		r, size := utf8.DecodeRuneInString(p)
		rest := p[size:]
		switch {
		case r == '^' || r == '_':
			if text, after, ok := shifted(r, rest); ok {
				s := Super
				if r == '_' {
					s = Sub
				}
				b.add(strings.ReplaceAll(text, "-", "−"), s)
				p = after
				continue
			}
			b.add(string(r), Base)
		case r == '‡' || r == '†':
			b.add(string(r), Super)
		case r == '\'' && b.primes(rest):
			b.add("′", Base)
		default:
			if plain, ok := high[r]; ok {
				b.add(plain, Super)
			} else if plain, ok := low[r]; ok {
				b.add(plain, Sub)
			} else {
				b.add(string(r), Base)
			}
		}
		p = rest
	}
}

// primes reports whether an apostrophe is a prime: it ends a short label, such
// as TSa' or 2', and is not the apostrophe of a word.
func (b *setter) primes(rest string) bool {
	if next, _ := utf8.DecodeRuneInString(rest); unicode.IsLetter(next) {
		return false
	}
	letters, named := 0, false
	for i := len(b.tail) - 1; i >= 0; i-- {
		r := b.tail[i]
		if r == 0 || strings.ContainsRune(" -(/,", r) {
			break
		}
		if r != '′' {
			letters++
			named = named || unicode.IsUpper(r) || unicode.IsDigit(r)
		}
	}
	return named && letters <= 5
}

// shifted reads what follows ^ or _: {...}, or digits with a sign before or
// after, or (after _) up to three letters and digits that end the piece.
func shifted(mark rune, s string) (text, after string, ok bool) {
	if strings.HasPrefix(s, "{") {
		if end := strings.IndexByte(s[:min(len(s), 40)], '}'); end > 1 {
			return s[1:end], s[end+1:], true
		}
		return "", "", false
	}
	sign := func(i int) int {
		for _, m := range []string{"+", "-", "−"} {
			if mark == '^' && strings.HasPrefix(s[i:], m) {
				return len(m)
			}
		}
		return 0
	}
	i := sign(0)
	n := digits(s[i:])
	if i > 0 || n > 0 {
		if i == 0 {
			n += sign(n)
		}
		return s[:i+n], s[i+n:], true
	}
	end := strings.IndexFunc(s, func(r rune) bool { return !unicode.IsLetter(r) && !unicode.IsDigit(r) })
	if end < 0 {
		end = len(s)
	}
	if k := utf8.RuneCountInString(s[:end]); mark == '_' && k >= 1 && k <= 3 && !strings.HasPrefix(s[end:], "_") {
		return s[:end], s[end:], true
	}
	return "", "", false
}

func isDigit(c byte) bool { return '0' <= c && c <= '9' }

func digits(s string) int {
	n := 0
	for n < len(s) && isDigit(s[n]) {
		n++
	}
	return n
}

var high = map[rune]string{
	'⁰': "0", '¹': "1", '²': "2", '³': "3", '⁴': "4", '⁵': "5", '⁶': "6", '⁷': "7", '⁸': "8", '⁹': "9",
	'⁺': "+", '⁻': "−", 'ⁿ': "n",
}

var low = map[rune]string{
	'₀': "0", '₁': "1", '₂': "2", '₃': "3", '₄': "4", '₅': "5", '₆': "6", '₇': "7", '₈': "8", '₉': "9",
	'₊': "+", '₋': "−", 'ₙ': "n",
}
