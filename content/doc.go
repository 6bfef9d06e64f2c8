// Package content reads a notebook: a folder with a saddlebook.toml and notes.
// It finds the notes, turns their Markdown into HTML with holes where blocks and
// readings stand, parses the TOML of the blocks with the place of every key, and
// checks every link.
//
// It knows no block kinds, no result keys and no numbers: what a block says is
// decoded elsewhere, with package content/schema, from [Block.Tree].
//
// # Places and faults
//
// Every place names the file as the author would: the notebook's root joined
// with the path of the note. Columns count characters. [Open] reports all faults
// of all files at once, sorted; an author's mistake never panics.
package content
