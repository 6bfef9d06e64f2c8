package diagram

import "math"

// Network is a figure of what turns into what: nodes, such as species, joined by
// steps, each from one or several nodes to one or several.
//
// A step that goes one way is one line with a head; one that returns is two
// lines with half heads, the forward one on the left in the direction of travel.
// Numbers other than 1 stand beside the line at their node. Where the steps
// state their net flux, the line in the direction of the flux is as wide as
// that, on a linear scale written below; below a thousandth of the widest it is
// dashed.
//
// The layout follows a rule. A single cycle of steps, of which everything else
// hangs off directly, is laid out round a ring, clockwise, if that fits the
// width. What its steps take up enters and what they give off leaves outside; a
// node that is only taken up, or only given off, or that several steps of the
// Cycle named share, is drawn anew at each. Everything else is laid out in layers, with as few
// crossings as the search finds: from left to right if that fits the width, from
// top to bottom otherwise. The same network gives the same figure.
type Network struct {
	ID    string
	Title string // default "Reaction network"
	Desc  string // default: the size, the largest flux and the notes, then the steps in words
	Nodes []NetworkNode
	Steps []NetworkStep
	// Flux names what the width of lines shows, default "net flux"; FluxUnit is
	// its unit, such as "mol/L/s".
	Flux, FluxUnit string
	// Cycle names steps, in order, that form a cycle: it is drawn on a soft band
	// and named CycleName, default "cycle".
	Cycle     []string
	CycleName string
	Width     float64 // wished width, default 720; large networks need more and get it
}

// NetworkNode is a species or another thing that steps turn into another.
type NetworkNode struct {
	Name  string   // tells nodes apart; default Label
	Label string   // as shown; default Name
	Text  string   // the amount as printed, below the label; may be empty
	Share *float64 // a fraction, drawn as a filled part of a strip; nil: none
	Note  string   // such as "resting state": in words below, and a heavier frame
	// Beside draws it anew at each step that it takes part in, without a frame:
	// for reagents and by-products that would tie everything together.
	Beside bool
}

// NetworkStep turns nodes into nodes.
type NetworkStep struct {
	Name     string // tells steps apart; default Label
	Label    string // as shown; default Name
	Text     string // such as a rate constant, below the label; may be empty
	Note     string // such as "limiting step": in words below, and a dot on the line
	From, To []NetworkTerm
	Returns  bool
	Flux     *float64 // net, in FluxUnit, below 0 for a net way back; all steps or none
}

// NetworkTerm is a node in a step, N times.
type NetworkTerm struct {
	Node string
	N    int // 0 reads as 1
}

const (
	maxNetworkNodes = 40 // as many as stay legible
	maxNetworkSteps = 60
	maxNetworkTerms = 6 // on each side of a step
)

// Scene lays the figure out. The error is an *Error.
func (n Network) Scene() (Scene, error) {
	if n.Title == "" {
		n.Title = "Reaction network"
	}
	if n.Flux == "" {
		n.Flux = "net flux"
	}
	if n.CycleName == "" {
		n.CycleName = "cycle"
	}
	if n.Width == 0 {
		n.Width = 720
	}
	if !(n.Width >= 240 && n.Width <= 4000) {
		return Scene{}, refuse("use 240 to 4000", "a reaction network cannot be %g wide", n.Width)
	}
	if err := n.check(); err != nil {
		return Scene{}, err
	}
	p, err := n.plan()
	if err != nil {
		return Scene{}, err
	}
	if n.Desc == "" {
		n.Desc = n.words()
	}
	marks, width := p.draw()
	return network(n, marks, width), nil
}

// network centres the figure in the width.
func network(n Network, marks []Mark, width float64) Scene {
	all := bounds(marks)
	width = math.Ceil(math.Max(n.Width, width))
	dx := (width - all.X0 - all.X1) / 2
	return Scene{ID: n.ID, Title: n.Title, Desc: n.Desc, Width: width,
		Height: math.Ceil(all.Y1 - all.Y0 + 2*margin), Marks: moved(marks, dx, margin-all.Y0)}
}

func (d NetworkNode) key() string   { return firstOf(d.Name, d.Label) }
func (d NetworkNode) shown() string { return firstOf(d.Label, d.Name) }
func (s NetworkStep) key() string   { return firstOf(s.Name, s.Label) }
func (s NetworkStep) shown() string { return firstOf(s.Label, s.Name) }
func (t NetworkTerm) count() int    { return max(1, t.N) }

func firstOf(a, b string) string {
	if a != "" {
		return a
	}
	return b
}

func (n Network) check() error {
	switch {
	case len(n.Nodes) == 0 || len(n.Steps) == 0:
		return refuse("give at least one of each", "a reaction network of %d nodes and %d steps", len(n.Nodes), len(n.Steps))
	case len(n.Nodes) > maxNetworkNodes || len(n.Steps) > maxNetworkSteps:
		return refuse("draw the part that matters", "a reaction network of %d nodes and %d steps, more than the %d and %d that stay legible",
			len(n.Nodes), len(n.Steps), maxNetworkNodes, maxNetworkSteps)
	}
	known, used := map[string]bool{}, map[string]bool{}
	for i, d := range n.Nodes {
		switch {
		case d.key() == "":
			return refuse("name it", "node %d of the reaction network has no name", i+1)
		case known[d.key()]:
			return refuse("give each its own", "two nodes of the reaction network have the name %q", d.key())
		case d.Share != nil && !fraction(*d.Share):
			return refuse("use a fraction of 0 to 1", "%q has the share %g", d.key(), *d.Share)
		}
		known[d.key()] = true
	}
	steps := map[string]bool{}
	for i, s := range n.Steps {
		switch {
		case s.key() == "":
			return refuse("name it", "step %d of the reaction network has no name", i+1)
		case steps[s.key()]:
			return refuse("give each its own", "two steps of the reaction network have the name %q", s.key())
		case len(s.From) == 0 || len(s.To) == 0:
			return refuse("name at least one node on each side", "the step %q has %d nodes on one side and %d on the other", s.key(), len(s.From), len(s.To))
		case len(s.From) > maxNetworkTerms || len(s.To) > maxNetworkTerms:
			return refuse("leave out what does not matter", "the step %q has %d and %d nodes, more than %d on a side", s.key(), len(s.From), len(s.To), maxNetworkTerms)
		case (s.Flux == nil) != (n.Steps[0].Flux == nil):
			return refuse("give it for all or for none", "some steps of the reaction network state a flux, and %q and %q differ in that", n.Steps[0].key(), s.key())
		case s.Flux != nil && !(math.Abs(*s.Flux) <= mostValue):
			return refuse("use values within ±1e12, or a larger unit", "the step %q has the flux %g", s.key(), *s.Flux)
		case s.Flux != nil && *s.Flux < 0 && !s.Returns:
			return refuse("let it return, or give a flux of 0 or more", "the step %q does not return and has the flux %g", s.key(), *s.Flux)
		}
		steps[s.key()] = true
		for _, side := range [][]NetworkTerm{s.From, s.To} {
			seen := map[string]bool{}
			for _, t := range side {
				switch {
				case !known[t.Node]:
					return refuse("name a node of the network", "the step %q has the node %q, which the network does not have", s.key(), t.Node)
				case seen[t.Node]:
					return refuse("name it once, with N", "the step %q names the node %q twice on one side", s.key(), t.Node)
				case t.N < 0 || t.N > 99:
					return refuse("use 1 to 99", "the step %q has the node %q %d times", s.key(), t.Node, t.N)
				}
				seen[t.Node], used[t.Node] = true, true
			}
		}
	}
	for _, d := range n.Nodes {
		if !used[d.key()] {
			return refuse("leave it out, or name it in a step", "no step of the reaction network has the node %q", d.key())
		}
	}
	return nil
}

// ringOf finds the nodes that join the steps of Cycle: node i leads from step i-1
// to step i.
func (n Network) ringOf() (nodes, steps []int, err error) {
	stepAt, nodeAt := map[string]int{}, map[string]int{}
	for i, s := range n.Steps {
		stepAt[s.key()] = i
	}
	for i, d := range n.Nodes {
		nodeAt[d.key()] = i
	}
	seen := map[string]bool{}
	for _, name := range n.Cycle {
		i, ok := stepAt[name]
		switch {
		case !ok:
			return nil, nil, refuse("name a step of the network", "the cycle has the step %q, which the network does not have", name)
		case seen[name]:
			return nil, nil, refuse("name each step once", "the cycle has the step %q twice", name)
		}
		seen[name] = true
		steps = append(steps, i)
	}
	if len(steps) == 1 {
		return nil, nil, refuse("name at least two steps", "a cycle of one step, %q", n.Cycle[0])
	}
	taken := map[int]bool{}
	for k, i := range steps {
		before := n.Steps[steps[(k+len(steps)-1)%len(steps)]]
		at := -1
		for _, pair := range [][2][]NetworkTerm{{before.To, n.Steps[i].From}, {before.From, n.Steps[i].To}, {before.To, n.Steps[i].To}, {before.From, n.Steps[i].From}} {
			for _, t := range pair[0] {
				for _, u := range pair[1] {
					if at < 0 && t.Node == u.Node && !taken[nodeAt[t.Node]] {
						at = nodeAt[t.Node]
					}
				}
			}
		}
		if at < 0 || n.Nodes[at].Beside {
			return nil, nil, refuse("name the steps in the order of the cycle", "no node of its own leads from %q to %q in the cycle", before.key(), n.Steps[i].key())
		}
		taken[at] = true
		nodes = append(nodes, at)
	}
	return nodes, steps, nil
}
