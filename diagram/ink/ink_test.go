package ink

import (
	"bytes"
	"encoding/xml"
	"errors"
	"fmt"
	"io"
	"math"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"saddlebook/diagram"
	"saddlebook/diagram/lettering"
)

// wild holds what a note could try to smuggle into a page.
const wild = `</text></svg><script>alert("1")</script> & ' " onload=x ]]> <!-- `

func wildScene(t *testing.T) diagram.Scene {
	s, err := diagram.Profile{
		ID: `a" onload="x`, Title: wild, Desc: wild, Axis: wild, Unit: wild, Zero: wild,
		Paths: []diagram.ProfilePath{
			{Name: wild + "1", Points: []diagram.ProfilePoint{level(wild, 0), peak(wild+"TS", 9, 0.5), level(wild+"P", -3)}},
			{Name: wild + "2", Points: []diagram.ProfilePoint{level(wild, 0), {Name: "x", Value: 8, Text: wild, Peak: true}, level("y", -4)}},
		},
	}.Scene()
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// element is what a parser finds in a file.
type element struct {
	name  string
	attrs map[string]string
}

func parse(t *testing.T, data []byte) (elements []element, text string) {
	d := xml.NewDecoder(bytes.NewReader(data))
	var b strings.Builder
	for {
		token, err := d.Token()
		if err == io.EOF {
			return elements, b.String()
		}
		if err != nil {
			t.Fatalf("not XML: %v", err)
		}
		switch token := token.(type) {
		case xml.StartElement:
			e := element{token.Name.Local, map[string]string{}}
			for _, a := range token.Attr {
				e.attrs[a.Name.Local] = a.Value
			}
			elements = append(elements, e)
		case xml.CharData:
			b.Write(token)
		}
	}
}

// TestSound holds every file to the rules: XML, known elements and attributes
// only, no styles inline, ids that start with the id of the figure, numbers with
// at most two decimals and no -0.
func TestSound(t *testing.T) {
	elementsKnown := map[string]bool{"svg": true, "title": true, "desc": true, "g": true, "line": true, "path": true, "rect": true, "circle": true, "text": true, "tspan": true, "image": true}
	attrsKnown := map[string]bool{}
	for _, a := range strings.Fields("xmlns space role aria-labelledby viewBox width height id class x y x1 y1 x2 y2 rx ry cx cy r d dy font-size text-anchor textLength lengthAdjust href aria-label") {
		attrsKnown[a] = true
	}
	numeric := regexp.MustCompile(`-?\d+(\.\d+)?`)
	scenes := map[string]diagram.Scene{"wild": wildScene(t)}
	for _, f := range figures {
		s, err := f.figure.Scene()
		if err != nil {
			t.Fatal(err)
		}
		scenes[f.name] = s
	}
	for name, s := range scenes {
		for _, alone := range []bool{false, true} {
			t.Run(fmt.Sprint(name, "/alone=", alone), func(t *testing.T) {
				var b bytes.Buffer
				if err := write(&b, s, alone); err != nil {
					t.Fatal(err)
				}
				if strings.Contains(b.String(), "NaN") || strings.Contains(b.String(), "Inf") {
					t.Error("NaN or Inf in the file")
				}
				if got := strings.HasPrefix(b.String(), "<?xml"); got != alone {
					t.Errorf("XML declaration: %t", got)
				}
				elements, _ := parse(t, b.Bytes())
				for _, e := range elements {
					if !elementsKnown[e.name] && !(alone && e.name == "style") {
						t.Errorf("element %q", e.name)
					}
					for k, v := range e.attrs {
						if !attrsKnown[k] {
							t.Errorf("attribute %q of %q", k, e.name)
						}
						switch k {
						case "id":
							if !strings.HasPrefix(v, ident(s.ID)+"-") {
								t.Errorf("id %q", v)
							}
						case "class", "role", "xmlns", "space", "aria-labelledby", "text-anchor", "lengthAdjust", "href", "aria-label":
						default:
							for _, n := range numeric.FindAllString(v, -1) {
								if _, decimals, _ := strings.Cut(n, "."); len(decimals) > 2 {
									t.Errorf("%s=%q has %d decimals", k, v, len(decimals))
								}
								if x, _ := strconv.ParseFloat(n, 64); x == 0 && n[0] == '-' {
									t.Errorf("%s=%q has a negative zero", k, v)
								}
							}
						}
					}
				}
			})
		}
	}
}

func TestWildNamesStayText(t *testing.T) {
	var b bytes.Buffer
	if err := Inline(&b, wildScene(t)); err != nil {
		t.Fatal(err)
	}
	elements, text := parse(t, b.Bytes())
	for _, e := range elements {
		if e.name == "script" || e.attrs["onload"] != "" {
			t.Errorf("a name became markup: %+v", e)
		}
	}
	if n := strings.Count(strings.ReplaceAll(text, "\n", ""), wild); n < 2 {
		t.Errorf("the wild name stands in the text %d times, want at least in title and description", n)
	}
	if !strings.Contains(text, "</text>") {
		t.Error("the wild name is not among the labels")
	}
}

func TestIdent(t *testing.T) {
	seen := map[string]string{}
	for _, id := range []string{"limits", "a b", "a_b", "a-b", "a_20_b", `"`, "é", "1a", "", "-", "a"} {
		got := ident(id)
		if !regexp.MustCompile(`^[A-Za-z_0-9-]*$`).MatchString(got) {
			t.Errorf("ident(%q) = %q", id, got)
		}
		if other, ok := seen[got]; ok {
			t.Errorf("%q and %q are both %q", id, other, got)
		}
		seen[got] = id
	}
}

// TestRolesHaveLooks: every class in the golden figures has a rule in both styles.
func TestRolesHaveLooks(t *testing.T) {
	plain := map[string]bool{"figure": true, "label": true, "name": true, "path-name": true, "axis-text": true, "group-text": true, "measure-text": true} // text as all text
	for _, f := range figures {
		s, _ := f.figure.Scene()
		var b bytes.Buffer
		if err := Inline(&b, s); err != nil {
			t.Fatal(err)
		}
		elements, _ := parse(t, b.Bytes())
		for _, e := range elements {
			for _, c := range strings.Fields(e.attrs["class"]) {
				rule := regexp.MustCompile(`\.` + regexp.QuoteMeta(c) + `[ ,.{]`)
				if !plain[c] && !(rule.MatchString(Style()) && rule.MatchString(aloneStyle())) {
					t.Errorf("%s: class %q has no rule", f.name, c)
				}
			}
		}
	}
	for _, style := range []string{Style(), aloneStyle()} {
		if strings.Contains(style, "$") || strings.Contains(style, "<") {
			t.Errorf("a style with a name left in it:\n%s", style)
		}
	}
	if strings.Contains(aloneStyle(), "var(") {
		t.Error("the style of files that stand alone uses variables")
	}
}

// TestContrast holds WCAG 2.1: 3:1 for lines (1.4.11), 4.5:1 for text (1.4.3).
func TestContrast(t *testing.T) {
	for name, c := range colours {
		if name == "ground" {
			continue
		}
		want := 3.0
		if name == "ink" || name == "soft" {
			want = 4.5
		}
		for _, pair := range [][2]string{{c.light, colours["ground"].light}, {c.dark, colours["ground"].dark}} {
			if got := contrast(t, pair[0], pair[1]); got < want {
				t.Errorf("%s: %s on %s has a contrast of %.2f, want %g", name, pair[0], pair[1], got, want)
			}
		}
	}
	// The published values in the palettes of Okabe and Ito against white, to check the formula.
	if got := contrast(t, "#0072b2", "#ffffff"); math.Abs(got-5.1854) > 1e-3 {
		t.Errorf("blue on white: %.4f, want 5.1854", got)
	}
}

func contrast(t *testing.T, a, b string) float64 {
	light := func(hex string) float64 {
		v, err := strconv.ParseUint(hex[1:], 16, 32)
		if err != nil {
			t.Fatal(err)
		}
		linear := func(c uint64) float64 {
			x := float64(c&255) / 255
			if x <= 0.04045 {
				return x / 12.92
			}
			return math.Pow((x+0.055)/1.055, 2.4)
		}
		return 0.2126*linear(v>>16) + 0.7152*linear(v>>8) + 0.0722*linear(v)
	}
	x, y := light(a), light(b)
	return (math.Max(x, y) + 0.05) / (math.Min(x, y) + 0.05)
}

func TestEveryMark(t *testing.T) {
	s := diagram.Scene{ID: "all", Width: 100, Height: 100, Title: "t", Marks: []diagram.Mark{
		diagram.Dot{Role: "peak", X: 5.125, Y: math.Copysign(0, -1) + 5, R: 2},
		diagram.Box{Role: "bar", X: -0.001, Y: 1, W: 3, H: 4, Round: 1},
		diagram.Curve{Role: "path", Path: []diagram.Command{{Op: diagram.Move, X: 1, Y: 1}, {Op: diagram.To, X: 2, Y: 9.999}, {Op: diagram.Close}}},
		diagram.Words{Role: "name", X: 10, Y: 50, Size: 10, Runs: lettering.Runs("H2O^+ x")},
		diagram.Group{Marks: []diagram.Mark{diagram.Line{Role: "tick", X2: 1}}},
	}}
	var b bytes.Buffer
	if err := Inline(&b, s); err != nil {
		t.Fatal(err)
	}
	for _, want := range []string{
		`<circle cx="5.13" cy="5.00" r="2.00" class="peak" />`, `<rect x="0" y="1" width="3" height="4" rx="1" ry="1" class="bar" />`,
		`<path d="M1 1 L2 10 Z" class="path" />`, `H<tspan dy="1.7" font-size="7.2" >2</tspan><tspan dy="-1.7" >O</tspan><tspan dy="-3.6" font-size="7.2" >+</tspan><tspan dy="3.6" > x</tspan></text>`,
		`<line x1="0" y1="0" x2="1" y2="0" class="tick" />`,
	} {
		if !strings.Contains(b.String(), want) {
			t.Errorf("no %s in\n%s", want, b.String())
		}
	}
}

type short struct{ left int }

var errFull = errors.New("disk full")

func (w *short) Write(b []byte) (int, error) {
	if w.left -= len(b); w.left < 0 {
		return 0, errFull
	}
	return len(b), nil
}

func TestWriteErrorIsKept(t *testing.T) {
	s, err := figures[0].figure.Scene()
	if err != nil {
		t.Fatal(err)
	}
	var b bytes.Buffer
	if err := Alone(&b, s); err != nil {
		t.Fatal(err)
	}
	for _, room := range []int{0, 10, 500, b.Len() - 1} {
		if err := Alone(&short{room}, s); !errors.Is(err, errFull) {
			t.Errorf("with room for %d bytes: error %v, want %v", room, err, errFull)
		}
	}
	if err := Alone(&short{b.Len()}, s); err != nil {
		t.Errorf("with room for all: %v", err)
	}
}

func TestBadSceneIsRefused(t *testing.T) {
	var b bytes.Buffer
	if err := Inline(&b, diagram.Scene{ID: "x", Title: "t", Width: 10, Height: math.NaN()}); err == nil || b.Len() > 0 {
		t.Errorf("error %v, %d bytes written", err, b.Len())
	}
}

func BenchmarkInline(b *testing.B) {
	s, err := figures[1].figure.Scene()
	if err != nil {
		b.Fatal(err)
	}
	b.ReportAllocs()
	for b.Loop() {
		if err := Inline(io.Discard, s); err != nil {
			b.Fatal(err)
		}
	}
}
