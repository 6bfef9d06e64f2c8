package content

import (
	"io/fs"

	"saddlebook/content/fault"
	"saddlebook/content/schema"
)

// SettingsFile is the file that makes a folder a notebook.
const SettingsFile = "saddlebook.toml"

// Published is the folder of a notebook that holds its site; no note is read there.
const Published = "published"

// A Notebook is a folder of notes, read and checked.
type Notebook struct {
	Root     string // where it stands, as the author typed it; the start of the file names in places
	FS       fs.FS  // the folder itself
	Settings Settings
	Front    *Note    // index.md at the top: text for the contents page; nil without one
	Notes    []*Note  // without Front, sorted by path
	Assets   []string // paths of the files that notes show or link to, sorted
}

// Note returns the note of that name ("cold/addition"), or nil.
func (nb *Notebook) Note(name string) *Note {
	for _, n := range nb.All() {
		if n.Name == name {
			return n
		}
	}
	return nil
}

// All returns the front page's text, if there is one, and the notes.
func (nb *Notebook) All() []*Note {
	if nb.Front == nil {
		return nb.Notes
	}
	return append([]*Note{nb.Front}, nb.Notes...)
}

// A Note is one Markdown file.
type Note struct {
	Path     string  // within the notebook: "cold/addition.md"
	Name     string  // "cold/addition"
	Title    string  // the first level-1 heading, plain; Name without one
	Source   []byte  // without a byte order mark
	Pieces   []Piece // in order
	Blocks   []*Block
	Readings []*Reading
	Links    []Link // every destination within the notebook
	Headings []Heading
	Mentions []string // names of other notes it links to, sorted

	unread bool // could not be parsed: its anchors are not known
}

// A Piece is a part of a note's page. Exactly one field is set.
type Piece struct {
	HTML    string
	Block   *Block
	Reading *Reading
}

// A Block is a fence with the information string `toml KIND`.
type Block struct {
	Note   *Note
	Kind   string
	At     fault.Place  // of the opening fence
	KindAt fault.Place  // of the word that names the kind
	Text   string       // the TOML, without the prefixes of quotes and lists
	Tree   *schema.Node // never nil; Broken if Text is empty or not well-formed TOML, which is then among the faults
	Label  string       // `mechanism "addition"`; `claims` for a block without an id
}

// ID returns the block's id, or "".
func (b *Block) ID() string {
	if id := b.Tree.Get("id"); id != nil && id.Kind == schema.Text {
		return id.Text
	}
	return ""
}

// Anchor returns the id of the block's element on the page: its id with hyphens
// for spaces; "" without an id.
func (b *Block) Anchor() string { return anchorOf(b.ID()) }

// A Reading is a result set into the text of a note.
type Reading struct {
	Note    *Note
	At      fault.Place // of the `{`
	Key, In string      // In is "" without a unit
}

// A Link is a destination within the notebook.
type Link struct {
	At     fault.Place // of the destination
	To     string      // as written
	Path   string      // from the top of the notebook; the note's own for "#anchor"
	Anchor string      // "" without one
	Image  bool
}

// A Heading of a note.
type Heading struct {
	Level    int
	ID, Text string // ID is unique among the headings and blocks of the note
	At       fault.Place
}
