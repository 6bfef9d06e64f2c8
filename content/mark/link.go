package mark

import (
	"net/url"
	"strings"

	"github.com/yuin/goldmark/util"
)

// A Link is one destination of a link or an image.
type Link struct {
	Start   int    // offset of the destination
	Image   bool   // an image, which must be shown, and not a link
	Written string // the destination with its escapes resolved
	Outside bool   // an address of the web or of mail; the rest is not set
	Path    string // relative to the note, decoded; "" for the note itself
	Anchor  string // decoded; "" if there is none

	href string // what the page says
}

// scheme returns what stands before the first colon if it reads as the scheme of
// an address (RFC 3986, section 3.1), else "".
func scheme(dest string) string {
	for i, c := range []byte(dest) {
		switch {
		case 'a' <= c && c <= 'z' || 'A' <= c && c <= 'Z':
		case i > 0 && ('0' <= c && c <= '9' || c == '+' || c == '-' || c == '.'):
		case c == ':':
			return dest[:i]
		default:
			return ""
		}
	}
	return ""
}

// newLink reads a destination. Within the notebook, `x.md` becomes `x.html`.
// A destination with a problem gets no href.
func newLink(dest []byte, image bool) (*Link, *problem) {
	l := &Link{Image: image, Written: resolve(dest)}
	d := l.Written
	switch name := scheme(d); {
	case d == "" || d == "#":
		return l, &problem{"the link names no destination", "write a note, a file or a web address between the parentheses"}
	case name != "":
		l.Outside = true
		switch strings.ToLower(name) {
		case "http", "https", "mailto":
			l.href = d
			if image {
				return l, &problem{quoted("the image", d, "lies outside the notebook, and pages must work without the web"),
					"put the file beside the note and link to that"}
			}
			return l, nil
		case "doi":
			return l, &problem{quoted("the link", d, "is no address a browser opens"), "write https://doi.org/" + d[len(name)+1:]}
		}
		return l, &problem{quoted("the link", d, "uses the scheme "+name+":, which pages do not carry"), "write https:, mailto: or a path within the notebook"}
	case strings.HasPrefix(d, "//"):
		return l, &problem{quoted("the link", d, "has no scheme"), "write https:" + d}
	case strings.HasPrefix(d, "/"):
		return l, &problem{quoted("the link", d, "leaves the notebook: it starts at the root of the disk or server"), "write a path relative to the note, such as other.md"}
	case strings.Contains(d, `\`):
		return l, &problem{quoted("the link", d, "has a backslash"), `write "/" between folders`}
	}
	rest, anchor, _ := strings.Cut(d, "#")
	rest, query, _ := strings.Cut(rest, "?")
	var err error
	if l.Path, err = url.PathUnescape(rest); err != nil {
		return l, &problem{quoted("the link", d, "has a % that is not followed by two hexadecimal digits"), "write %25 for a plain %"}
	}
	if l.Anchor, err = url.PathUnescape(anchor); err != nil {
		return l, &problem{quoted("the link", d, "has a % that is not followed by two hexadecimal digits"), "write %25 for a plain %"}
	}
	if query != "" {
		return l, &problem{quoted("the link", d, "has a query, which a file cannot answer"), "write %3F for a plain ?, or leave the query out"}
	}
	u := url.URL{Path: l.Path, Fragment: l.Anchor}
	if name, ok := strings.CutSuffix(l.Path, ".md"); ok {
		u.Path = name + ".html"
	}
	l.href = u.String()
	return l, nil
}

func quoted(before, value, after string) string { return before + ` "` + value + `" ` + after }

// resolve returns Markdown text with backslash escapes and entities replaced.
func resolve(v []byte) string {
	return string(util.ResolveEntityNames(util.ResolveNumericReferences(util.UnescapePunctuations(v))))
}

// offsetIn returns where part, a slice of source, starts in it; -1 if it is not
// a slice of source. Slices of one array end at the same capacity.
func offsetIn(source, part []byte) int {
	at := cap(source) - cap(part)
	if len(part) == 0 || at < 0 || at >= len(source) || &source[at] != &part[0] {
		return -1
	}
	return at
}
