package skeleton

// Molecule is a connection table that was read, checked and laid out. The zero
// value draws nothing.
type Molecule struct {
	Name    string   // the first line of the file; may be empty
	Formula string   // in the order of Hill, such as "C6H6O", a charge behind; short names of groups after a comma
	Notes   []string // what the file holds and the drawing does not

	atoms []atom
	bonds []bond

	em layout // in em
}

type atom struct {
	symbol   string // as written: an element, or a short name
	alias    string // shown in its place
	x, y, z  float64
	charge   int
	mass     int // 0: natural
	radical  int // electrons: 0, 1, 2
	singlet  bool
	valence  int  // stated; -1: not
	group    int  // number of an R group; 0: none
	bare     bool // the middle of several atoms: no label
	implicit int  // hydrogens
	at       place

	next []int // its bonds
}

// element reports whether the atom is one of the periodic table, and shown as such.
func (a *atom) element() bool { return a.alias == "" && a.group == 0 && elements[a.symbol] }

// order of a bond, by the numbers of the format.
type order int

const (
	single   order = 1
	double   order = 2
	triple   order = 3
	aromatic order = 4
	dative   order = 9
	hydrogen order = 10
)

// look of a bond beyond its order.
type look int8

const (
	plain look = iota
	wedge      // towards the reader, narrow at a
	hash       // away, narrow at a
	wavy       // either; of a double bond: crossed
)

type bond struct {
	a, b  int
	order order
	look  look
	at    place
}

func (b bond) other(i int) int { return b.a + b.b - i }

// valence is what a bond counts; an aromatic bond counts one here, and the
// double bonds of its ring are added per atom.
func (b bond) valence() int {
	switch b.order {
	case dative, hydrogen:
		return 0
	case double, triple:
		return int(b.order)
	}
	return 1
}

// connect gives every atom its bonds.
func (m *Molecule) connect() {
	for i, b := range m.bonds {
		m.atoms[b.a].next = append(m.atoms[b.a].next, i)
		m.atoms[b.b].next = append(m.atoms[b.b].next, i)
	}
}

func (m *Molecule) note(text string) {
	for _, n := range m.Notes {
		if n == text {
			return
		}
	}
	m.Notes = append(m.Notes, text)
}
