// Package mark reads the Markdown of a note. It extends CommonMark with two
// things of our own, each a triple of node, parser and renderer:
//
//   - a fence whose information string is `toml KIND` becomes a [Block];
//   - `{= key }` or `{= key in unit }` in running text becomes a [Reading].
//
// Tables, footnotes, definition lists and typographic quotes are on; raw HTML
// is off. [Parse] reads a note; [Page.Render] returns it as HTML with holes where
// blocks and readings stand, and drops the tree.
//
// # Positions
//
// Every position is a byte offset into the source. The package knows no files,
// no lines, no block kinds and no result keys.
//
// # Faults
//
// Markdown parsers cannot return errors: whatever CommonMark would let vanish
// or stay literal in silence (an unclosed block, a reading in image text or in
// a surplus table cell, raw HTML, an unused footnote) is listed in Page.Faults.
package mark
