package schema

import "saddlebook/content/fault"

// Within returns the place of the value at the path, or of its character (from
// 0) if it is a text and character is not 0. A table stands at its key, and
// what does not exist at the deepest key that does.
func (n *Node) Within(character int, path ...string) fault.Place {
	v := n.Get(path...)
	switch {
	case v == nil || v == n || v.Kind == Table || v.Kind == Array:
		return n.Place(path...)
	case character > 0:
		return v.inside(character)
	}
	return v.At
}
