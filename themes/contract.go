package themes

import (
	"html/template"
	"strings"
)

// Site is what every page knows of its notebook.
type Site struct {
	Title, Summary string
	Authors        []string
	Language       string // a language tag, such as "en"
	Root           string // leads from the page to the top of the site: "" or "../"
	Program        string // name and version of the program
}

// English tells whether the notebook is written in the language of the frame.
func (s Site) English() bool { return s.Language == "en" || strings.HasPrefix(s.Language, "en-") }

// A Link leads to another page or file; Href is relative.
type Link struct{ Href, Text string }

// Heading is one heading of a page.
type Heading struct {
	Level    int
	ID, Text string
}

// Finding is one claim with its standing: "holds", "fails" or "undecided".
type Finding struct {
	Says, Standing, Value, Bound string
	Probability, Asked           string // "" if there is none
	Href                         string // to the claim on its page
}

// Tally counts claims by standing.
type Tally struct{ Holds, Fails, Undecided int }

// None tells whether there are no claims.
func (t Tally) None() bool { return t == Tally{} }

// Page is one note.
type Page struct {
	Site                         Site
	Title, Status, Date, Summary string
	Authors, Tags                []string
	Findings                     []Finding
	Contents                     []Heading     // empty for a short note
	Heading, Body                template.HTML // the level-1 heading, and all below it
	Downloads, MentionedIn       []Link
	InputHash                    string
}

// Untitled tells whether the note brings no level-1 heading of its own.
func (p Page) Untitled() bool { return untitled(p.Heading + p.Body) }

// Entry is a note in the list of notes.
type Entry struct {
	Href, Title, Summary, Status, Date string
	Tags                               []string
	Claims                             Tally
}

// Folder is the notes of one folder; Name is "" at the top.
type Folder struct {
	Name    string
	Entries []Entry
}

// Contents is the front page.
type Contents struct {
	Site    Site
	Front   template.HTML // the notebook's own words
	Folders []Folder
	Claims  Tally
}

// Untitled tells whether the notebook's own words bring no level-1 heading.
func (c Contents) Untitled() bool { return untitled(c.Front) }

func untitled(text template.HTML) bool { return !strings.Contains(string(text), "<h1") }

// NoteClaims is the claims of one note.
type NoteClaims struct {
	Href, Title string
	Findings    []Finding
}

// Claims is the page of all claims.
type Claims struct {
	Site  Site
	Tally Tally
	Notes []NoteClaims
}

// Input is one note with the hash of all that its page depends on.
type Input struct{ Note, Hash string }

// Colophon says how the site was made.
type Colophon struct {
	Site     Site
	Revision string   // of the notebook; "" if it is not known
	Methods  []string // the published methods behind the numbers, with their sources
	Inputs   []Input
}
