// Package schema reads the TOML of a block by a list of fields. The list is the
// one source of the strict reading, of the reference text and of the JSON Schema
// of a block kind.
//
// Parse turns a text into a tree of nodes in source order, each with its exact
// place. Decode walks the tree by the list into a struct and converts every
// quantity to base quantities (see kinetics/unit). Check holds the list and the
// struct together at start-up.
//
// # Errors
//
// What an author can cause comes back as a fault.List with a place, the value
// quoted and a remedy; all faults of a well-formed text are reported at once, in
// source order. A panic means that a list and a struct disagree, which Check
// finds first.
//
// # Rules
//
// Keys are case-sensitive and unknown ones are refused. nan, inf, empty texts,
// byte order marks and control characters are refused. Two keys that cannot
// stand together are refused even where the TOML reader lets them through.
package schema
