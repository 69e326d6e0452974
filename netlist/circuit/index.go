package circuit

import (
	"hash/maphash"
	"strings"
	"sync"
)

// index numbers names without regard to case, from 0 in the order they are
// added. It is a plain hash table because a netlist of a million parts spends
// much of its time here: eight bytes for a name keep most of it in the cache,
// and looking a name up allocates nothing.
type index struct {
	table []indexEntry // at least twice as many as names; their number is a power of two
	names []string
}

// indexEntry is a place in the table; number counts from 1.
type indexEntry struct {
	hash   uint32
	number int32
}

// seed keeps a netlist from being made so that all its names collide.
var seed = sync.OnceValue(maphash.MakeSeed)

// newIndex returns an index with room for a number of names.
func newIndex(count int) *index {
	size := 16
	for size < 2*count {
		size *= 2
	}
	return &index{table: make([]indexEntry, size), names: make([]string, 0, count)}
}

func hashName(name string) uint32 {
	var buffer [64]byte
	if low, plain := lowered(buffer[:0], name); !plain {
		return uint32(maphash.Bytes(seed(), low))
	}
	return uint32(maphash.String(seed(), name))
}

// find returns the number of a name.
func (x *index) find(name string) (number int32, ok bool) {
	e := x.entry(name, hashName(name))
	return e.number - 1, e.number > 0
}

// add returns the number of a name, a new one where it was not met before.
func (x *index) add(name string) (number int32, fresh bool) {
	hash := hashName(name)
	e := x.entry(name, hash)
	if e.number > 0 {
		return e.number - 1, false
	}
	x.names = append(x.names, name)
	*e = indexEntry{hash, int32(len(x.names))}
	if 2*len(x.names) > len(x.table) {
		x.grow()
	}
	return int32(len(x.names) - 1), true
}

// entry returns the place of a name, or the empty one where it belongs.
func (x *index) entry(name string, hash uint32) *indexEntry {
	mask := uint32(len(x.table) - 1)
	for i := hash & mask; ; i = (i + 1) & mask {
		e := &x.table[i]
		if e.number == 0 || e.hash == hash && strings.EqualFold(x.names[e.number-1], name) {
			return e
		}
	}
}

func (x *index) grow() {
	old := x.table
	x.table = make([]indexEntry, 2*len(old))
	mask := uint32(len(x.table) - 1)
	for _, e := range old {
		if e.number == 0 {
			continue
		}
		i := e.hash & mask
		for x.table[i].number != 0 {
			i = (i + 1) & mask
		}
		x.table[i] = e
	}
}

// lowered appends a name in lower case to a buffer. plain says that the name is
// in lower case already, in which case nothing is appended.
func lowered(buffer []byte, name string) (low []byte, plain bool) {
	plain = true
	for i := range len(name) {
		switch c := name[i]; {
		case c >= 0x80:
			return append(buffer, strings.ToLower(name)...), false
		case c >= 'A' && c <= 'Z':
			plain = false
		}
	}
	if plain {
		return buffer, true
	}
	for i := range len(name) {
		c := name[i]
		if c >= 'A' && c <= 'Z' {
			c |= 0x20
		}
		buffer = append(buffer, c)
	}
	return buffer, false
}
