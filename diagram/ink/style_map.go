package ink

import (
	"fmt"
	"math"
	"strconv"

	"saddlebook/diagram"
)

// cividis holds the published colours of the map cividis at nine even steps, dark
// to light: Nuñez, Anderton and Renslow, PLoS ONE 13 (7), e0199239 (2018), as
// the R package viridisLite has them at 0, 32, ... 224 and 255 of 255. Its
// lightness rises steadily for every kind of colour vision, and so in greyscale.
var cividis = []string{
	"#00204d", "#06366e", "#414d6b", "#61646f", "#7d7c78", "#9c9577", "#beaf6f", "#e1cc5d", "#ffea46",
}

// The shades of a map are the same on light and on dark ground, so that a colour
// means one value; lines and texts on them are black or white, whichever reads
// better. What lies over several shades brings its own ground.
func init() {
	for k := range diagram.MapShades {
		rules = append(rules, struct{ selector, body string }{fmt.Sprintf(".shade-%d", k+1), "fill: " + shadeColour(k)})
	}
	rules = append(rules, []struct{ selector, body string }{
		{".contour", "fill: none; stroke-width: 1.1; stroke-linejoin: round"},
		{".contour.on-dark", "stroke: #ffffff"},
		{".contour.on-light", "stroke: #000000"},
		{"text.level-text.on-dark", "fill: #ffffff"},
		{"text.level-text.on-light", "fill: #000000"},
		{".backing", "fill: $ground; fill-opacity: 0.88; stroke: none"},
		{".blank", "fill: $ground; stroke: none"},
		{".hatch-blank", "fill: none; stroke: $rule; stroke-width: 0.75"},
		{".hatch-under", "fill: none; stroke: $ground; stroke-width: 2; stroke-opacity: 0.7"},
		{".hatch", "fill: none; stroke: $ink; stroke-width: 0.8"},
		{".outline-under, .border-under", "fill: none; stroke: $ground; stroke-width: 3.5; stroke-linejoin: round"},
		{".outline", "fill: none; stroke: $ink; stroke-width: 1.75; stroke-linejoin: round"},
		{".border", "fill: none; stroke: $ink; stroke-width: 1.5; stroke-dasharray: 7 3 1.5 3; stroke-linejoin: round"},
		{".run", "fill: $ink; stroke: $ground; stroke-width: 1.5; stroke-linejoin: round"},
		{".meet", "fill: none; stroke: $ink; stroke-width: 1.25"},
		{".path.beyond", "stroke-width: 1; stroke-dasharray: 4 3"},
		{".open", "fill: $ground; stroke: $ink; stroke-width: 1.25"},
		{".map-leader", "fill: none; stroke: $ink; stroke-width: 1"},
	}...)
}

// shadeColour is the colour of shade k, from 0: a published one or one on the
// straight line between two.
func shadeColour(k int) string {
	at := float64(k) / float64(diagram.MapShades-1) * float64(len(cividis)-1)
	i := min(int(at), len(cividis)-2)
	a, _ := strconv.ParseUint(cividis[i][1:], 16, 32)
	b, _ := strconv.ParseUint(cividis[i+1][1:], 16, 32)
	text := "#"
	for shift := 16; shift >= 0; shift -= 8 {
		x, y := float64(a>>shift&255), float64(b>>shift&255)
		text += fmt.Sprintf("%02x", int(math.Round(x+(y-x)*(at-float64(i)))))
	}
	return text
}
