package ink

import (
	"fmt"
	"sort"
	"strings"

	"saddlebook/diagram/lettering"
)

// Colours by the name that rules use for them, for light ground and for dark.
//
// The colours of paths are from Okabe and Ito, Color Universal Design (2008): on
// light ground blue, vermilion, bluish green and reddish purple; on dark ground
// sky blue, orange, bluish green and reddish purple. The greys are our own.
// Against its ground every line has a contrast of 3:1 or more and every text one
// of 4.5:1 or more (WCAG 2.1, 1.4.3 and 1.4.11); a test holds both.
var colours = map[string]struct{ light, dark string }{
	"ground": {"#ffffff", "#14171b"},
	"ink":    {"#202328", "#e8e5de"},
	"soft":   {"#5b6068", "#a7abb2"},
	"rule":   {"#868b93", "#757b84"},
	"path-1": {"#0072b2", "#56b4e9"},
	"path-2": {"#d55e00", "#e69f00"},
	"path-3": {"#009e73", "#009e73"},
	"path-4": {"#cc79a7", "#cc79a7"},
}

// rules gives each role its look. A name behind $ is a colour.
var rules = []struct{ selector, body string }{
	{"text", "fill: $ink; font-family: " + lettering.Family + "; font-style: normal; font-weight: 400; font-size-adjust: none; font-kerning: none; font-variant-ligatures: none; letter-spacing: 0; word-spacing: 0; text-transform: none"},
	{".ground", "fill: $ground"},
	{".axis, .tick", "stroke: $rule; stroke-width: 1; fill: none"},
	{".zero", "stroke: $rule; stroke-width: 0.75; stroke-dasharray: 1 3; fill: none"},
	{".leader", "stroke: $rule; stroke-width: 0.75; fill: none"},
	{"text.tick-text, text.value, text.aside", "fill: $soft"},
	{".quantity", "font-style: italic"},
	{".path", "fill: none; stroke: $ink; stroke-width: 1.5; stroke-linejoin: round"},
	{".level", "stroke: $ink; stroke-width: 3; stroke-linecap: butt; fill: none"},
	{".peak", "stroke: $ink; stroke-width: 2.25; stroke-linecap: butt; fill: none"},
	{".spread", "fill: $ink; fill-opacity: 0.12; stroke: none"},
	{".path-1", "stroke: $path-1"},
	{".path-2", "stroke: $path-2"},
	{".path-3", "stroke: $path-3"},
	{".path-4", "stroke: $path-4"},
	{".path-5", "stroke: $path-1"},
	{".path-6", "stroke: $path-2"},
	{".path-7", "stroke: $path-3"},
	{".path-8", "stroke: $path-4"},
	{".path-9", "stroke: $path-1"},
	{".path-10", "stroke: $path-2"},
	{".path-11", "stroke: $path-3"},
	{".path-12", "stroke: $path-4"},
	{".path.path-2", "stroke-dasharray: 7 3.5"},
	{".path.path-3", "stroke-dasharray: 2 3"},
	{".path.path-4", "stroke-dasharray: 9 3 2 3"},
	{".path.path-5", "stroke-dasharray: 14 4"},
	{".path.path-6", "stroke-dasharray: 4 2"},
	{".path.path-7", "stroke-dasharray: 9 3 2 3 2 3"},
	{".path.path-8", "stroke-dasharray: 1 4"},
	{".path.path-9", "stroke-dasharray: 12 2 2 2 2 2"},
	{".path.path-10", "stroke-dasharray: 6 6"},
	{".path.path-11", "stroke-dasharray: 16 2 4 2"},
	{".path.path-12", "stroke-dasharray: 3 5"},
	{".path.heavy", "stroke-width: 2.5"},
	{".programme", "stroke: $soft"},
	{".event", "stroke: $rule; stroke-width: 0.75; stroke-dasharray: 2 2; fill: none"},
	{".fill-1", "fill: $path-1"},
	{".fill-2", "fill: $path-2"},
	{".fill-3", "fill: $path-3"},
	{".fill-4", "fill: $path-4"},
	{".marker", "stroke: none"},
	{".point", "fill: $ink; stroke: none"},
	{".band", "fill-opacity: 0.16; stroke: none"},
	{".bar", "fill: $path-1; fill-opacity: 0.28; stroke: $path-1; stroke-width: 1"},
	{".minus", "fill: $path-2; stroke: $path-2"},
	{".whisker", "stroke: $ink; stroke-width: 1.25; fill: none"},
	{".guide, .seam", "stroke: $rule; stroke-width: 0.75; fill: none"},
	{".seam", "stroke-dasharray: 2 2"},
	{".measure", "stroke: $soft; stroke-width: 1; fill: none"},
	{".tip", "fill: $soft; stroke: none"},
	{"text.group-text", "fill: $ink; font-weight: 400"},
	{".bond", "stroke: $ink; stroke-width: 1.1; stroke-linecap: round; fill: none"},
	{".bond.rung", "stroke-linecap: butt"},
	{".wedge", "fill: $ink; stroke: none"},
	{"text.atom", "fill: $ink"},
	{".plate", "fill: #ffffff; stroke: none"},
	{".image", "image-rendering: auto"},
	{".node", "fill: none; stroke: $rule; stroke-width: 1"},
	{".node.noted", "stroke: $ink; stroke-width: 2"},
	{".flow", "fill: $ink; stroke: none"},
	{".reaction", "fill: none; stroke: $ink; stroke-width: 1.25"},
	{".reaction.idle", "stroke: $soft; stroke-width: 1; stroke-dasharray: 4 3"},
}

// Style returns the CSS for pages that hold inline figures. Its colours are CSS
// variables named --figure-..., which a theme may set on .figure; ink itself is
// the colour of the page's text. Figures follow the reader's wish for dark, and
// print on light.
func Style() string {
	var b strings.Builder
	b.WriteString(".figure { max-width: 100%; height: auto;")
	names := colourNames()
	for _, n := range names {
		fmt.Fprintf(&b, " --figure-%s: %s;", n, colours[n].light)
	}
	b.WriteString(" }\n@media screen and (prefers-color-scheme: dark) {\n.figure {")
	for _, n := range names {
		fmt.Fprintf(&b, " --figure-%s: %s;", n, colours[n].dark)
	}
	b.WriteString(" }\n}\n")
	for _, r := range rules {
		if r.selector == ".ground" {
			continue // the page has its own
		}
		fmt.Fprintf(&b, "%s { %s }\n", within(r.selector), colour(r.body, func(n string) string {
			if n == "ink" {
				return "currentColor"
			}
			return "var(--figure-" + n + ")"
		}))
	}
	return b.String()
}

// aloneStyle uses plain colours, since some readers of SVG files know no variables.
func aloneStyle() string {
	var b strings.Builder
	for _, r := range rules {
		fmt.Fprintf(&b, "%s { %s }\n", r.selector, colour(r.body, func(n string) string { return colours[n].light }))
	}
	b.WriteString("@media screen and (prefers-color-scheme: dark) {\n")
	for _, r := range rules {
		var parts []string
		for _, part := range strings.Split(r.body, "; ") {
			if strings.Contains(part, "$") {
				parts = append(parts, part)
			}
		}
		if len(parts) > 0 {
			fmt.Fprintf(&b, "%s { %s }\n", r.selector, colour(strings.Join(parts, "; "), func(n string) string { return colours[n].dark }))
		}
	}
	b.WriteString("}\n")
	return b.String()
}

// within puts .figure before each part of a selector.
func within(selector string) string {
	parts := strings.Split(selector, ", ")
	for i, p := range parts {
		parts[i] = ".figure " + p
	}
	return strings.Join(parts, ", ")
}

func colourNames() []string {
	var names []string
	for n := range colours {
		if n != "ink" && n != "ground" {
			names = append(names, n)
		}
	}
	sort.Strings(names)
	return names
}

// colour puts real colours where a rule has names.
func colour(body string, of func(string) string) string {
	for _, n := range append(colourNames(), "ink", "ground") {
		body = strings.ReplaceAll(body, "$"+n, of(n))
	}
	return body
}
