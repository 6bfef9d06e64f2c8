package render

import (
	"fmt"
	"path"
	"strings"
	"unicode"

	"saddlebook/content"
	"saddlebook/content/fault"
	"saddlebook/render/study"
)

// The pages and files that every site has, whatever its notes.
const (
	contentsFile   = "index.html"
	claimsFile     = "claims.html"
	colophonFile   = "colophon.html"
	provenanceFile = "provenance.json"
	styleFile      = "assets/style.css"
)

const noteOwner = "the note"

// collisions refuses notes and files that would take the place of another file
// of the site.
func collisions(s *study.Study) fault.List {
	var out fault.List
	owner := map[string]string{contentsFile: "the contents", claimsFile: "the page of all claims", colophonFile: "the colophon",
		provenanceFile: "the provenance", styleFile: "the style"}
	take := func(file, who string, at fault.Place, fix string) {
		other := owner[file]
		if other == noteOwner && who != noteOwner {
			return // told by content
		}
		for dir := path.Dir(file); dir != "." && other == ""; dir = path.Dir(dir) {
			other = owner[dir]
		}
		if other != "" {
			out = append(out, fault.Diagnostic{At: at, Severity: fault.Error,
				Msg: fmt.Sprintf("%s would be published as %q, which is %s", who, file, other), Fix: fix})
			return
		}
		owner[file] = who
	}
	for _, n := range s.Book.Notes {
		at := fault.Place{File: path.Join(s.Book.Root, n.Path), Line: 1, Col: 1}
		if strings.ContainsFunc(n.Name, unicode.IsControl) {
			out = append(out, fault.Diagnostic{At: at, Severity: fault.Error, Msg: fmt.Sprintf("the name of the note %q holds a control character", n.Path), Fix: "rename the file"})
			continue
		}
		take(pageOf(n), noteOwner, at, "give the note another name")
		for _, name := range filesOf(s, n) {
			take(name, "a file of note "+n.Path, at, "give the note or the block another name")
		}
	}
	linked := map[string]fault.Place{}
	for _, n := range s.Book.All() {
		for _, l := range n.Links {
			if _, known := linked[l.Path]; !known {
				linked[l.Path] = l.At
			}
		}
	}
	for _, a := range s.Book.Assets {
		take(a, "the file "+a, linked[a], "give the file another name")
	}
	return out
}

// pageOf is the file of a note's page.
func pageOf(n *content.Note) string { return n.Name + ".html" }

// filesOf lists the files that go with a note's page: its figures and results.
func filesOf(s *study.Study, n *content.Note) []string {
	var out []string
	results := false
	for _, b := range n.Blocks {
		e := s.Of(b)
		if e == nil || !e.Done {
			continue
		}
		results = results || len(e.Results) > 0
		sheet, err := lay(e)
		if err != nil {
			continue // told by unlaid
		}
		for i := range sheet.Figures() {
			out = append(out, n.Name+"/"+figureName(b, i)+".svg")
		}
		for _, d := range sheet.Files() {
			out = append(out, n.Name+"/"+dataName(b, d))
		}
	}
	if results {
		out = append(out, n.Name+"/results.csv", n.Name+"/results.json")
	}
	return out
}
