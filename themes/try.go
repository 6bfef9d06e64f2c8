package themes

import "io"

// Try writes a page of each kind with every part filled and throws it away, so
// that a replaced template that asks for what the contract lacks is found
// before a site is begun.
func (t *Theme) Try() error {
	site := Site{Title: "t", Summary: "s", Authors: []string{"a"}, Language: "en", Root: "../", Program: "p"}
	findings := []Finding{
		{Says: "s", Standing: "holds", Value: "1", Bound: "at least 1", Probability: "90 %", Asked: "80 %", Href: "#a"},
		{Says: "s", Standing: "fails", Value: "1", Bound: "at least 2", Href: "#b"},
		{Says: "s", Standing: "undecided", Value: "1", Bound: "at most 1", Href: "#c"},
	}
	tally := Tally{Holds: 1, Fails: 1, Undecided: 1}
	link := []Link{{Href: "x.html", Text: "x"}}
	entry := Entry{Href: "x.html", Title: "x", Summary: "s", Status: "draft", Date: "2031-01-01", Tags: []string{"t"}, Claims: tally}
	for _, write := range []func() error{
		func() error {
			return t.Page(io.Discard, Page{Site: site, Title: "t", Status: "draft", Date: "2031-01-01", Summary: "s", Authors: []string{"a"}, Tags: []string{"t"},
				Findings: findings, Contents: []Heading{{Level: 2, ID: "h", Text: "h"}}, Heading: "<h1>t</h1>", Body: "<p>b</p>", Downloads: link, MentionedIn: link, InputHash: "0"})
		},
		func() error {
			return t.Contents(io.Discard, Contents{Site: site, Front: "<p>f</p>", Folders: []Folder{{Name: "f", Entries: []Entry{entry}}}, Claims: tally})
		},
		func() error {
			return t.Claims(io.Discard, Claims{Site: site, Tally: tally, Notes: []NoteClaims{{Href: "x.html", Title: "x", Findings: findings}}})
		},
		func() error {
			return t.Colophon(io.Discard, Colophon{Site: site, Revision: "r", Methods: []string{"m"}, Inputs: []Input{{Note: "n", Hash: "h"}}})
		},
	} {
		if err := write(); err != nil {
			return err
		}
	}
	return nil
}
