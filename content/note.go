package content

import (
	"bytes"
	"fmt"
	"path"
	"strings"
	"unicode/utf8"

	"saddlebook/content/fault"
	"saddlebook/content/mark"
	"saddlebook/content/place"
	"saddlebook/content/schema"
)

// newNote names a note; its source is read by parse.
func newNote(p string) *Note {
	name := strings.TrimSuffix(p, ".md")
	return &Note{Path: p, Name: name, Title: name}
}

// reader turns one source into a Note and its faults.
type reader struct {
	note   *Note
	file   string // as places name it
	lines  *place.Lines
	faults fault.List
}

// parse reads the source of a note. The tree of the Markdown is dropped before
// it returns.
func (n *Note) parse(source []byte, file string) fault.List {
	n.Source = bytes.TrimPrefix(source, []byte("\ufeff"))
	r := &reader{note: n, file: file}
	if at, msg, fix := unreadable(source); msg != "" {
		n.unread = true
		r.faults = append(r.faults, fault.Diagnostic{At: r.at(at), Msg: msg, Fix: fix})
		return r.faults
	}
	page := mark.Parse(n.Source)
	blocks := map[*mark.Block]*Block{}
	for _, b := range page.Blocks {
		blocks[b] = r.block(b)
	}
	for _, f := range page.Faults {
		d := fault.Diagnostic{At: r.at(f.Start), Msg: f.Msg, Fix: f.Fix}
		if f.Warn {
			d.Severity = fault.Warning
		}
		if f.Block != nil {
			d.Block = blocks[f.Block].Label
		}
		r.faults = append(r.faults, d)
	}
	taken := r.ids()
	html, holes, err := page.Render(taken)
	if err != nil {
		r.faults = append(r.faults, fault.Diagnostic{At: fault.Place{File: file}, Err: err,
			Msg: fmt.Sprintf("the page could not be made: %v", err), Fix: "report this fault with the note"})
	}
	readings := map[*mark.Reading]*Reading{}
	for _, m := range page.Readings {
		reading := &Reading{Note: n, At: r.at(m.Start), Key: m.Key, In: m.In}
		readings[m] = reading
		n.Readings = append(n.Readings, reading)
	}
	r.pieces(html, holes, blocks, readings)
	r.headings(page.Headings)
	r.links(page.Links)
	return r.faults
}

// at returns the place of an offset of the source.
func (r *reader) at(offset int) fault.Place {
	if r.lines == nil {
		r.lines = place.NewLines(r.note.Source)
	}
	line, col := r.lines.At(offset)
	return fault.Place{File: r.file, Line: line, Col: col}
}

// unreadable returns the first reason not to parse a source, with its offset
// after the byte order mark; msg is "" if there is none.
func unreadable(source []byte) (at int, msg, fix string) {
	const utf8Fix = "save the file as UTF-8"
	switch {
	case bytes.HasPrefix(source, []byte{0xff, 0xfe}), bytes.HasPrefix(source, []byte{0xfe, 0xff}):
		return 0, "the file is UTF-16", utf8Fix
	}
	text := bytes.TrimPrefix(source, []byte("\ufeff"))
	for i := 0; i < len(text); {
		c := text[i]
		switch {
		case c == 0:
			if len(text) > 1 && bytes.Count(text[:min(len(text), 200)], []byte{0}) > min(len(text), 200)/3 {
				return 0, "the file is UTF-16", utf8Fix
			}
			return i, "the file holds a NUL character", "delete it, or save the file as plain UTF-8 text"
		case c == '\r' && (i+1 == len(text) || text[i+1] != '\n'):
			return i, "a line ends with a carriage return alone", "save the file with LF or CRLF line ends"
		case c < utf8.RuneSelf:
			i++
			continue
		}
		_, width := utf8.DecodeRune(text[i:])
		if width == 1 {
			return i, fmt.Sprintf("the byte 0x%02X is not UTF-8", c), utf8Fix
		}
		i += width
	}
	return 0, "", ""
}

// block parses the TOML of a block.
func (r *reader) block(m *mark.Block) *Block {
	b := &Block{Note: r.note, Kind: m.Kind, At: r.at(m.Start), KindAt: r.at(m.KindAt), Text: m.Text, Label: m.Kind}
	tree, faults := schema.Parse(m.Text, func(i int) fault.Place { return r.at(m.Offset(i)) })
	b.Tree = tree
	tree.KeyAt = b.At
	if strings.TrimSpace(m.Text) == "" {
		tree.Broken = true // the fault is that it is empty
	}
	switch i := strayFence(m.Text); {
	case !tree.Broken:
	case !m.Closed:
		faults = nil // it was read into the text behind it, and the page says so
	case i >= 0: // so was this one, up to the end of the next block
		faults = fault.List{{At: b.At, Fix: "add " + m.Fence + " on a line of its own after its last line",
			Msg: fmt.Sprintf("the block is not closed before the fence in line %d", r.at(m.Offset(i)).Line)}}
	}
	if id := b.ID(); id != "" {
		b.Label = fmt.Sprintf("%s %q", m.Kind, id)
	}
	tree.Label = b.Label
	for _, f := range faults {
		if f.Block == "" {
			f.Block = b.Label
		}
		r.faults = append(r.faults, f)
	}
	r.note.Blocks = append(r.note.Blocks, b)
	return b
}

// strayFence returns the offset of a line in the text of a block that opens
// another fence, or -1.
func strayFence(text string) int {
	at := 0
	for line := range strings.Lines(text) {
		if s := strings.TrimSpace(line); strings.HasPrefix(s, "```") || strings.HasPrefix(s, "~~~") {
			return at
		}
		at += len(line)
	}
	return -1
}

func anchorOf(id string) string { return strings.Join(strings.Fields(id), "-") }

// ids checks that no two blocks of the note share an anchor, and returns all.
func (r *reader) ids() []string {
	var taken []string
	first := map[string]*Block{}
	for _, b := range r.note.Blocks {
		a := b.Anchor()
		if a == "" {
			continue
		}
		taken = append(taken, a)
		if other, ok := first[a]; ok {
			r.faults = append(r.faults, fault.Diagnostic{At: b.Tree.Get("id").At, Block: b.Label, Key: "id",
				Msg: fmt.Sprintf("the id %q is taken by the block %s at %s", b.ID(), other.Label, other.Tree.Get("id").At),
				Fix: "give each block of a note an id of its own"})
			continue
		}
		first[a] = b
	}
	return taken
}

// pieces cuts the page at its holes.
func (r *reader) pieces(html string, holes []mark.Hole, blocks map[*mark.Block]*Block, readings map[*mark.Reading]*Reading) {
	from := 0
	text := func(to int) {
		if to > from {
			r.note.Pieces = append(r.note.Pieces, Piece{HTML: html[from:to]})
			from = to
		}
	}
	for _, h := range holes {
		text(h.At)
		if h.Block != nil {
			r.note.Pieces = append(r.note.Pieces, Piece{Block: blocks[h.Block]})
		} else {
			r.note.Pieces = append(r.note.Pieces, Piece{Reading: readings[h.Reading]})
		}
	}
	text(len(html))
}

// headings keeps the headings and takes the title from the first of level 1.
func (r *reader) headings(found []mark.Heading) {
	titled := false
	for _, h := range found {
		r.note.Headings = append(r.note.Headings, Heading{Level: h.Level, ID: h.ID, Text: h.Text, At: r.at(h.Start)})
		if h.Level != 1 || titled {
			continue
		}
		titled = true
		if h.Text != "" {
			r.note.Title = h.Text
			continue
		}
		r.faults = append(r.faults, fault.Diagnostic{At: r.at(h.Start), Msg: "the title of the note is empty",
			Fix: "write it after the #, as in # Addition to enone 3"})
	}
	if !titled && r.note.Path != frontPath {
		r.faults = append(r.faults, fault.Diagnostic{At: r.at(0), Msg: "the note has no title",
			Fix: "start it with a level-1 heading, as in # Addition to enone 3"})
	}
}

// links keeps the destinations within the notebook. Whether they exist is known
// when every note is read.
func (r *reader) links(found []*mark.Link) {
	for _, l := range found {
		if l.Outside {
			continue
		}
		to := r.note.Path
		if l.Path != "" {
			to = path.Join(path.Dir(r.note.Path), l.Path)
			if strings.HasSuffix(l.Path, "/") {
				to += "/"
			}
		}
		r.note.Links = append(r.note.Links, Link{At: r.at(l.Start), To: l.Written, Path: to, Anchor: l.Anchor, Image: l.Image})
	}
}
