package diagram

import (
	"bytes"
	"image"
	"image/color"
	"image/png"
	"math"
	"os"
	"path/filepath"
	"reflect"
	"strings"
	"testing"

	"saddlebook/diagram/skeleton"
)

func TestSkeletal(t *testing.T) {
	files, _ := filepath.Glob("skeleton/testdata/*.mol")
	if len(files) < 10 {
		t.Fatalf("%d molfiles", len(files))
	}
	for _, f := range files {
		text, err := os.ReadFile(f)
		if err != nil {
			t.Fatal(err)
		}
		m, err := skeleton.Read(text)
		if err != nil {
			t.Fatal(err)
		}
		for _, size := range []float64{7, 10, 24} {
			p := Skeletal(m, size)
			if !strings.Contains(p.Alt, m.Formula) || !strings.Contains(p.Alt, m.Name) {
				t.Errorf("%s: %q", f, p.Alt)
			}
			s := Scene{ID: "m", Title: p.Alt, Width: p.Width + 5, Height: p.Height + 7, Marks: []Mark{p.At(5, 7)}}
			if err := s.Check(); err != nil {
				t.Errorf("%s at %g: %v", f, size, err)
			}
			b, home := p.At(5, 7).Bounds(), bounds(p.Marks)
			if math.Abs(b.X0-home.X0-5) > 1e-9 || math.Abs(b.Y1-home.Y1-7) > 1e-9 {
				t.Errorf("%s: moved from %v to %v", f, home, b)
			}
		}
	}
}

// TestMoved: every kind of mark moves, and the picture itself stays.
func TestMoved(t *testing.T) {
	marks := []Mark{
		Line{"bond", 1, 2, 3, 4}, Box{Role: "bar", X: 1, Y: 2, W: 3, H: 4}, Dot{"peak", 1, 2, 3}, Words{Role: "atom", X: 1, Y: 2, Size: 3},
		Image{Role: "image", X: 1, Y: 2, W: 3, H: 4}, Curve{"bond", []Command{{Op: Move, X: 1, Y: 2}, {Cubic, 1, 2, 3, 4, 5, 6}, {Op: Close}}},
		Group{"", []Mark{Line{"bond", 1, 2, 3, 4}}},
	}
	p := Picture{Marks: marks}
	before := bounds(marks)
	g := p.At(10, 20)
	for i, m := range g.Marks {
		want := marks[i].Bounds()
		want = Rect{want.X0 + 10, want.Y0 + 20, want.X1 + 10, want.Y1 + 20}
		if m.Bounds() != want || m.style() != marks[i].style() {
			t.Errorf("%T: %v, want %v", m, m.Bounds(), want)
		}
	}
	if bounds(marks) != before {
		t.Error("the picture itself moved")
	}
	if back := (Picture{Marks: g.Marks}).At(-10, -20); !reflect.DeepEqual(back.Marks, marks) {
		t.Errorf("%v, want %v", back.Marks, marks)
	}
}

func pngFile(t *testing.T, w, h int) []byte {
	m := image.NewGray(image.Rect(0, 0, w, h))
	for x := range w {
		m.SetGray(x, x%h, color.Gray{Y: 200})
	}
	var b bytes.Buffer
	if err := png.Encode(&b, m); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

func TestFileImage(t *testing.T) {
	svg := func(inside string) []byte {
		return []byte(`<svg xmlns="http://www.w3.org/2000/svg" xmlns:xlink="http://www.w3.org/1999/xlink" viewBox="0 0 40 10">` + inside + `</svg>`)
	}
	for _, tt := range []struct {
		name string
		data []byte
		w, h float64
	}{
		{"png", pngFile(t, 40, 20), 100, 50},
		{"svg", svg(`<defs><linearGradient id="a"/></defs><rect width="4" height="4" fill="url(#a)" style="stroke: url( '#a' )"/><use xlink:href="#b"/><image href="data:image/png;base64,AA"/>`), 100, 25},
		{"svg by width", []byte(`<?xml version="1.0"?><!DOCTYPE svg PUBLIC "-//W3C//DTD SVG 1.1//EN" "x"><svg xmlns="http://www.w3.org/2000/svg" width="20px" height="60px"/>`), 20, 60},
	} {
		p, err := FileImage(tt.data, 100, 60, "a vessel")
		if err != nil {
			t.Errorf("%s: %v", tt.name, err)
			continue
		}
		if p.Width != tt.w || p.Height != tt.h || p.Alt != "a vessel" {
			t.Errorf("%s: %g by %g, %q; want %g by %g", tt.name, p.Width, p.Height, p.Alt, tt.w, tt.h)
		}
		if err := (Scene{ID: "i", Title: "t", Width: tt.w, Height: tt.h, Marks: []Mark{p.At(0, 0)}}).Check(); err != nil {
			t.Errorf("%s: %v", tt.name, err)
		}
	}
	wide := svg("")
	for _, tt := range []struct {
		name string
		data []byte
		says string
	}{
		{"empty", nil, "empty"},
		{"text", []byte("hello"), "neither PNG nor SVG"},
		{"html", []byte("<html/>"), `opens with "html"`},
		{"no namespace", []byte(`<svg viewBox="0 0 1 1"/>`), `opens with "svg"`},
		{"broken", []byte(`<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 1 1"><g>`), "nor sound SVG"},
		{"no size", []byte(`<svg xmlns="http://www.w3.org/2000/svg"/>`), "size"},
		{"size", []byte(`<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 NaN 2"/>`), "size"},
		{"thin", []byte(`<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 100 2"/>`), "as long as broad"},
		{"broken png", pngFile(t, 30, 30)[:60], "cannot be read"},
		{"large png", pngFile(t, 4001, 2), "4001 by 2 pixels"},
		{"heavy", bytes.Repeat([]byte(" "), 1<<20+1), "bytes"},
		{"script", svg(`<script>x</script>`), `"script"`},
		{"foreign", svg(`<foreignObject/>`), "foreignobject"},
		{"event", svg(`<g onclick="x"/>`), "onclick"},
		{"link", svg(`<use xlink:href="https://example.org/a.svg#b"/>`), "example.org"},
		{"nested svg", svg(`<image href="data:image/svg+xml,x"/>`), "data:image/svg"},
		{"base", svg(`<g xml:base="https://example.org/"/>`), "example.org"},
		{"style", svg(`<style>@im\70ort "x"</style>`), "outside it"},
		{"import", svg(`<style>@import "x";</style>`), "outside it"},
		{"url", svg(`<rect fill="URL( 'https://example.org/x')"/>`), "outside it"},
		{"animated link", svg(`<a><set attributeName="xlink:href" to="x"/></a>`), "while it is shown"},
		{"entities", append([]byte(`<!DOCTYPE svg [<!ENTITY a "b">]>`), wide...), "entities"},
		{"instruction", append([]byte(`<?xml-stylesheet href="x"?>`), wide...), "instruction"},
		{"deep", svg(strings.Repeat("<g>", 300) + strings.Repeat("</g>", 300)), "200 deep"},
	} {
		_, err := FileImage(tt.data, 100, 60, "a vessel")
		e, ok := err.(*Error)
		if !ok || !strings.Contains(e.Msg, tt.says) || e.Fix == "" {
			t.Errorf("%s: %v, want ... %s", tt.name, err, tt.says)
		}
	}
	if _, err := FileImage(wide, 100, 60, " "); err == nil {
		t.Error("a picture without words is taken")
	}
	if _, err := FileImage(wide, math.NaN(), 60, "a"); err == nil {
		t.Error("a room without a size is taken")
	}
}

func FuzzFileImage(f *testing.F) {
	f.Add([]byte(`<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 40 10"><g style="fill: url(#a)"/></svg>`))
	f.Fuzz(func(t *testing.T, data []byte) {
		p, err := FileImage(data, 100, 60, "a vessel")
		if err != nil {
			if e, ok := err.(*Error); !ok || e.Fix == "" {
				t.Fatalf("error %#v", err)
			}
			return
		}
		s := Scene{ID: "i", Title: "t", Width: 100, Height: 60, Marks: []Mark{p.At(0, 0)}}
		if err := s.Check(); err != nil {
			t.Fatal(err)
		}
	})
}
