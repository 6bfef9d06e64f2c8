package diagram

import (
	"bytes"
	"encoding/xml"
	"image/png"
	"io"
	"math"
	"strconv"
	"strings"
	"unicode"
)

// Image is a picture from a file. Package ink writes it as an image element with
// its bytes inside; no reader runs scripts or fetches anything in an image.
type Image struct {
	Role       Role
	X, Y, W, H float64
	Type       string // "image/png" or "image/svg+xml"
	Data       []byte
	Alt        string
}

func (m Image) style() Role { return m.Role }

// Bounds of an image.
func (m Image) Bounds() Rect { return Rect{m.X, m.Y, m.X + m.W, m.Y + m.H} }

// Limits on pictures from files.
const (
	maxImageBytes = 1 << 20
	maxImageSide  = 4000 // pixels
	maxImageRatio = 20   // of the longer side to the shorter
)

// FileImage makes a picture of a PNG or SVG file, as large as fits into width and height. It
// stands on a white plate in light and dark, since its colours are its own. alt
// says what it shows. An SVG file that holds scripts, or asks for anything outside itself, is
// refused, although images run and fetch nothing: figures are passed on to programs that may.
func FileImage(data []byte, width, height float64, alt string) (Picture, error) {
	switch {
	case !(width >= 8 && height >= 8 && width < 1e5 && height < 1e5):
		return Picture{}, refuse("give it 8 px or more either way", "the picture has a room of %g by %g px", width, height)
	case strings.TrimSpace(alt) == "":
		return Picture{}, refuse("say in a few words what it shows", "the picture has no text for readers who do not see it")
	case len(data) > maxImageBytes:
		return Picture{}, refuse("make it smaller", "the picture has %d bytes, more than %d", len(data), maxImageBytes)
	}
	kind, w, h := "image/svg+xml", 0.0, 0.0
	if bytes.HasPrefix(data, []byte("\x89PNG\r\n\x1a\n")) {
		kind = "image/png"
		c, err := png.DecodeConfig(bytes.NewReader(data))
		if err == nil && (c.Width > maxImageSide || c.Height > maxImageSide) {
			return Picture{}, refuse("make it smaller", "the picture has %d by %d pixels, more than %d", c.Width, c.Height, maxImageSide)
		}
		if err == nil {
			_, err = png.Decode(bytes.NewReader(data))
		}
		if err != nil {
			return Picture{}, refuse("save it anew as PNG", "the picture cannot be read (%v)", err)
		}
		w, h = float64(c.Width), float64(c.Height)
	} else {
		var err error
		if w, h, err = plainSVG(data); err != nil {
			return Picture{}, err
		}
	}
	if ratio := math.Max(w/h, h/w); !(ratio <= maxImageRatio) {
		return Picture{}, refuse("cut it to a more even shape", "the picture is %.4g times as long as broad, more than %d", ratio, maxImageRatio)
	}
	scale := math.Min(width/w, height/h)
	w, h = w*scale, h*scale
	return Picture{Width: w, Height: h, Alt: alt, Marks: []Mark{
		Box{Role: "plate", W: w, H: h},
		Image{Role: "image", W: w, H: h, Type: kind, Data: bytes.Clone(data), Alt: alt},
	}}, nil
}

const plainFix = "save it as plain SVG, or as PNG"

// plainSVG gives the size of an SVG file, and refuses what could act or fetch.
func plainSVG(data []byte) (w, h float64, err error) {
	d := xml.NewDecoder(bytes.NewReader(data))
	depth, root, style := 0, false, 0
	for {
		t, err := d.Token()
		if err == io.EOF {
			break
		}
		if err != nil {
			return 0, 0, refuse("give a PNG or SVG file", "the picture is neither PNG nor sound SVG (%v)", err)
		}
		switch t := t.(type) {
		case xml.StartElement:
			name := strings.ToLower(t.Name.Local)
			if depth == 0 {
				if root || name != "svg" || t.Name.Space != "http://www.w3.org/2000/svg" {
					return 0, 0, refuse("give a PNG or SVG file", "the picture opens with %q, not with svg", t.Name.Local)
				}
				root = true
				if w, h, err = svgSize(t.Attr); err != nil {
					return 0, 0, err
				}
			}
			if depth++; depth > 200 {
				return 0, 0, refuse(plainFix, "the picture nests more than 200 deep")
			}
			if err := plainElement(name, t.Attr); err != nil {
				return 0, 0, err
			}
			if name == "style" {
				style = depth
			}
		case xml.EndElement:
			if style == depth {
				style = 0
			}
			depth--
		case xml.CharData:
			if depth == 0 && len(bytes.TrimSpace(t)) > 0 {
				return 0, 0, refuse("give a PNG or SVG file", "the picture is neither PNG nor SVG")
			}
			if style > 0 && !plainStyle(string(t)) {
				return 0, 0, refuse(plainFix, "the style of the picture asks for something outside it")
			}
		case xml.Directive:
			if strings.ContainsRune(string(t), '[') {
				return 0, 0, refuse(plainFix, "the picture declares entities")
			}
		case xml.ProcInst:
			if t.Target != "xml" {
				return 0, 0, refuse(plainFix, "the picture holds the instruction %q", t.Target)
			}
		}
	}
	if !root {
		return 0, 0, refuse("give a PNG or SVG file", "the picture is empty")
	}
	return w, h, nil
}

func plainElement(name string, attrs []xml.Attr) error {
	switch name {
	case "script", "foreignobject", "iframe", "object", "embed", "audio", "video", "handler", "listener":
		return refuse(plainFix, "the picture holds the element %q", name)
	}
	for _, a := range attrs {
		key, value := strings.ToLower(a.Name.Local), strings.TrimSpace(a.Value)
		switch {
		case strings.HasPrefix(key, "on"):
			return refuse(plainFix, "the picture holds a script in %q", a.Name.Local)
		case key == "base" && value != "":
			return refuse(plainFix, "the picture takes its parts from %.40q", value)
		case key == "href" || key == "src":
			if !strings.HasPrefix(value, "#") && !strings.HasPrefix(value, "data:image/png;") && !strings.HasPrefix(value, "data:image/jpeg;") {
				return refuse(plainFix, "the picture asks for %.40q", value)
			}
		case key == "attributename" && (strings.HasSuffix(strings.ToLower(value), "href") || strings.HasPrefix(strings.ToLower(value), "on")):
			return refuse(plainFix, "the picture changes %q while it is shown", value)
		case a.Name.Space == "xmlns" || key == "xmlns":
		case !plainStyle(value):
			return refuse(plainFix, "the picture asks for something outside it in %q", a.Name.Local)
		}
	}
	return nil
}

// plainStyle reports whether a style fetches nothing: url() only of the file's own parts.
// Backslashes, which could hide such words, are refused.
func plainStyle(css string) bool {
	css = strings.Map(func(r rune) rune {
		if unicode.IsSpace(r) || r == '"' || r == '\'' {
			return -1
		}
		return unicode.ToLower(r)
	}, css)
	if strings.Contains(css, "@import") || strings.Contains(css, `\`) || strings.Contains(css, "javascript:") || strings.Contains(css, "image-set(") {
		return false
	}
	for _, after := range strings.Split(css, "url(")[1:] {
		if !strings.HasPrefix(after, "#") {
			return false
		}
	}
	return true
}

// svgSize takes the size from the viewBox, else from width and height in px.
func svgSize(attrs []xml.Attr) (w, h float64, err error) {
	at := map[string]string{}
	for _, a := range attrs {
		if a.Name.Space == "" {
			at[a.Name.Local] = a.Value
		}
	}
	words := strings.FieldsFunc(at["viewBox"], func(r rune) bool { return r == ',' || unicode.IsSpace(r) })
	if len(words) != 4 {
		words = []string{"0", "0", strings.TrimSuffix(at["width"], "px"), strings.TrimSuffix(at["height"], "px")}
	}
	w, err = strconv.ParseFloat(words[2], 64)
	if err == nil {
		h, err = strconv.ParseFloat(words[3], 64)
	}
	if err != nil || !(w > 0 && h > 0 && w < 1e9 && h < 1e9) {
		return 0, 0, refuse("give the svg element a viewBox such as 0 0 200 100", "the size of the picture cannot be read (viewBox %q, width %q, height %q)", at["viewBox"], at["width"], at["height"])
	}
	return w, h, nil
}
