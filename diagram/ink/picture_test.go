package ink

import (
	"bytes"
	"encoding/base64"
	"image"
	"image/color"
	"image/png"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"saddlebook/diagram"
	"saddlebook/diagram/skeleton"
)

// formula is a figure of one molfile, to see it alone. The molecules are invented.
type formula struct {
	file string
	size float64
}

func (f formula) Scene() (diagram.Scene, error) {
	text, err := os.ReadFile(filepath.Join("..", "skeleton", "testdata", f.file+".mol"))
	if err != nil {
		return diagram.Scene{}, err
	}
	m, err := skeleton.Read(text)
	if err != nil {
		return diagram.Scene{}, err
	}
	p := diagram.Skeletal(m, f.size)
	return diagram.Scene{ID: "molecule-" + f.file, Width: p.Width, Height: p.Height, Title: p.Alt, Desc: p.Alt, Marks: []diagram.Mark{p.At(0, 0)}}, nil
}

var formulas = []golden{
	{"formula_enone", formula{"enone", 10}},             // ring double bond on its inner side, ketone, a lettered ether
	{"formula_naphthol", formula{"naphthol", 10}},       // aromatic bonds, a nitro group with charges
	{"formula_sugar", formula{"sugar", 10}},             // wedges and hashes, hydrogens left and right
	{"formula_ions", formula{"ions", 10}},               // charges, radicals, masses, lone atoms
	{"formula_protected", formula{"protected", 10}},     // short names, turned round where the bond comes from the right
	{"formula_palladium", formula{"palladium", 10}},     // dative and hydrogen bonds
	{"formula_linear", formula{"linear", 10}},           // triple bonds, cumulenes, diazo, trisubstituted alkene
	{"formula_open", formula{"open", 10}},               // wavy and crossed bonds, R groups, hydrogens above and below
	{"formula_sandwich", formula{"sandwich", 10}},       // V3000, bonds to the middle of rings, long names
	{"formula_tetracycle", formula{"tetracycle", 9.34}}, // V3000, fused rings, at 7 pt
	{"picture_files", pictured{}},                       // a PNG and an SVG file, with words that would break out
}

// pictured is a figure of an SVG file and a PNG file.
type pictured struct{}

func (pictured) Scene() (diagram.Scene, error) {
	m := image.NewNRGBA(image.Rect(0, 0, 12, 8))
	for x := range 12 {
		m.Set(x, x*8/12, color.Black)
	}
	var b bytes.Buffer
	if err := png.Encode(&b, m); err != nil {
		return diagram.Scene{}, err
	}
	raster, err := diagram.FileImage(b.Bytes(), 60, 60, wild)
	if err != nil {
		return diagram.Scene{}, err
	}
	drawn, err := diagram.FileImage([]byte(`<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 30 20"><circle cx="15" cy="10" r="8" fill="#0072b2"/></svg>`), 60, 60, "a disc")
	if err != nil {
		return diagram.Scene{}, err
	}
	return diagram.Scene{ID: "files", Title: "Two pictures from files", Width: 140, Height: 50, Marks: []diagram.Mark{raster.At(5, 5), drawn.At(75, 5)}}, nil
}

func TestImageBytes(t *testing.T) {
	s, err := pictured{}.Scene()
	if err != nil {
		t.Fatal(err)
	}
	var b bytes.Buffer
	if err := Inline(&b, s); err != nil {
		t.Fatal(err)
	}
	elements, _ := parse(t, b.Bytes())
	seen := 0
	for _, e := range elements {
		if e.name != "image" {
			continue
		}
		seen++
		kind, data, ok := strings.Cut(strings.TrimPrefix(e.attrs["href"], "data:"), ";base64,")
		bytes, err := base64.StdEncoding.DecodeString(data)
		if !ok || err != nil || len(bytes) == 0 || kind != "image/png" && kind != "image/svg+xml" {
			t.Errorf("%s, %v", e.attrs["href"], err)
		}
		if kind == "image/png" && e.attrs["aria-label"] != wild {
			t.Errorf("words %q", e.attrs["aria-label"])
		}
	}
	if seen != 2 {
		t.Errorf("%d images", seen)
	}
	s.Marks = []diagram.Mark{diagram.Image{Role: "image", W: 1, H: 1, Type: "text/html", Data: []byte("x")}}
	if err := Inline(&b, s); err == nil {
		t.Error("an image of another type is written")
	}
}
