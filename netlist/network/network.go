// Package network holds the one dc solver of the project: resistors, ideal
// sources, piecewise-linear diodes and currents that follow theirs, between
// numbered nodes. A network is
// compiled once into an elimination order and then solved for as many sets of
// values as wanted, without allocation. It knows no part names and no trade.
package network

import "fmt"

// Node numbers a node. Node 0 is the reference.
type Node int

// Branch numbers a branch; its value stands at this index of a Solver's Values.
type Branch int

type branchKind int8

const (
	resistor branchKind = iota
	voltage
	current
	diode
)

type branch struct {
	kind branchKind
	a, b Node
}

// Network is a list of branches between nodes. The zero Network holds the
// reference node only.
type Network struct {
	nodes    int
	branches []branch
	follow   []follower
}

// Node adds a node.
func (n *Network) Node() Node {
	n.nodes++
	return Node(n.nodes)
}

func (n *Network) add(kind branchKind, a, b Node) Branch {
	n.branches = append(n.branches, branch{kind, a, b})
	return Branch(len(n.branches) - 1)
}

// Resistor adds a resistor between a and b; its value is in ohm. Less than a
// milliohm, as at the end of a potentiometer's travel, counts as a milliohm.
func (n *Network) Resistor(a, b Node) Branch { return n.add(resistor, a, b) }

// Voltage adds an ideal voltage source; its value is the voltage of plus over
// minus in volt.
func (n *Network) Voltage(plus, minus Node) Branch { return n.add(voltage, plus, minus) }

// Current adds an ideal current source that drives its value, in ampere, out of
// from, through itself, into to.
func (n *Network) Current(from, to Node) Branch { return n.add(current, from, to) }

// Diode adds a piecewise-linear diode. Its value is the threshold in volt; slope,
// breakdown and breakdown slope are set on the Solver by SetDiode.
func (n *Network) Diode(anode, cathode Node) Branch { return n.add(diode, anode, cathode) }

// Follow adds a current that follows that of a diode: gain times as much flows out of
// from, through the branch, into to. The gain is set on the Solver by SetGain. Two
// diodes that each make a current follow are a bipolar transistor, straight in pieces.
func (n *Network) Follow(d Branch, from, to Node) {
	n.follow = append(n.follow, follower{d, from, to})
}

// follower is a current that follows a diode's.
type follower struct {
	diode    Branch
	from, to Node
}

// LoopError says that ideal voltage sources form a loop.
type LoopError struct{ Branch Branch }

func (e LoopError) Error() string {
	return fmt.Sprintf("voltage source %d closes a loop of voltage sources", e.Branch)
}

// offset is how a node's potential follows from its root: plus or minus the
// values of voltage sources.
type offset struct {
	source Branch
	sign   float64
}

// Compile works out which nodes are tied by voltage sources and the order of
// elimination. A loop of voltage sources is a LoopError: the source that closes
// the loop is left out and the solver returned all the same.
func (n *Network) Compile() (*Solver, error) {
	s := &Solver{branches: n.branches, follow: n.follow,
		root: make([]int, n.nodes+1), offsets: make([][]offset, n.nodes+1)}
	err := s.tie(n)
	s.number()
	s.order()
	s.Values = make([]float64, len(n.branches))
	s.allocate()
	return s, err
}

// tie gives every node its root: the node reached through voltage sources, the
// reference where that can be reached.
func (s *Solver) tie(n *Network) error {
	touching := make([][]Branch, n.nodes+1)
	for i, b := range n.branches {
		if b.kind == voltage {
			touching[b.a] = append(touching[b.a], Branch(i))
			touching[b.b] = append(touching[b.b], Branch(i))
		}
	}
	for i := range s.root {
		s.root[i] = -1
	}
	var err error
	used := make([]bool, len(n.branches))
	for start := 0; start <= n.nodes; start++ {
		if s.root[start] >= 0 {
			continue
		}
		s.root[start] = start
		queue := []Node{Node(start)}
		for len(queue) > 0 {
			at := queue[0]
			queue = queue[1:]
			for _, i := range touching[at] {
				if used[i] {
					continue
				}
				used[i] = true
				b := n.branches[i]
				next, sign := b.a, 1.0
				if at == b.a {
					next, sign = b.b, -1.0
				}
				if s.root[next] >= 0 {
					err = LoopError{i}
					continue
				}
				s.root[next] = start
				s.offsets[next] = append(append([]offset{}, s.offsets[at]...), offset{i, sign})
				queue = append(queue, next)
			}
		}
	}
	return err
}

// number gives every root but the reference a row.
func (s *Solver) number() {
	s.row = make([]int, len(s.root))
	s.rows = 0
	for i, r := range s.root {
		switch {
		case r == 0:
			s.row[i] = -1
		case r == i:
			s.row[i] = s.rows
			s.rows++
		}
	}
	for i, r := range s.root {
		if r != 0 {
			s.row[i] = s.row[r]
		}
	}
}

// order renumbers the rows by least degree first and notes which rows each
// elimination touches.
func (s *Solver) order() {
	m := s.rows
	neighbours := make([]map[int]bool, m)
	for i := range neighbours {
		neighbours[i] = map[int]bool{}
	}
	for _, b := range s.branches {
		if b.kind != resistor && b.kind != diode {
			continue
		}
		i, j := s.row[b.a], s.row[b.b]
		join(neighbours, i, j)
	}
	for _, f := range s.follow {
		d := s.branches[f.diode]
		for _, i := range [2]int{s.row[f.from], s.row[f.to]} {
			join(neighbours, i, s.row[d.a])
			join(neighbours, i, s.row[d.b])
		}
	}
	position := make([]int, m)
	picked := make([]bool, m)
	touched := make([][]int, m) // in old numbers
	for k := 0; k < m; k++ {
		pick := -1
		for i := range m {
			if !picked[i] && (pick < 0 || len(neighbours[i]) < len(neighbours[pick])) {
				pick = i
			}
		}
		picked[pick], position[pick] = true, k
		for i := range neighbours[pick] {
			delete(neighbours[i], pick)
			touched[k] = append(touched[k], i)
			for j := range neighbours[pick] {
				if i != j {
					neighbours[i][j] = true
				}
			}
		}
	}
	for i := range s.row {
		if s.row[i] >= 0 {
			s.row[i] = position[s.row[i]]
		}
	}
	s.touched = make([][]int, m)
	for k := range touched {
		for _, old := range touched[k] {
			s.touched[k] = append(s.touched[k], position[old])
		}
		sortInts(s.touched[k])
	}
}

// join notes that two rows share an equation.
func join(neighbours []map[int]bool, i, j int) {
	if i >= 0 && j >= 0 && i != j {
		neighbours[i][j], neighbours[j][i] = true, true
	}
}

// sortInts sorts the few rows of one elimination so that results do not depend
// on map order.
func sortInts(a []int) {
	for i := 1; i < len(a); i++ {
		for j := i; j > 0 && a[j-1] > a[j]; j-- {
			a[j-1], a[j] = a[j], a[j-1]
		}
	}
}
