package circuit

import "strings"

// index numbers names without regard to case. Looking a name up allocates
// nothing.
type index map[string]int32

func (x index) find(name string) (int32, bool) {
	var buffer [64]byte
	low, plain := lowered(buffer[:0], name)
	if plain {
		i, ok := x[name]
		return i, ok
	}
	i, ok := x[string(low)]
	return i, ok
}

// add gives a new name the next number.
func (x index) add(name string) int32 {
	i := int32(len(x))
	x[strings.ToLower(name)] = i
	return i
}

// lowered appends a name in lower case to a buffer. plain says that the name is
// in lower case already, in which case nothing is appended.
func lowered(buffer []byte, name string) (low []byte, plain bool) {
	plain = true
	for i := range len(name) {
		switch c := name[i]; {
		case c >= 0x80:
			name = strings.ToLower(name)
			return append(buffer[:0], name...), false
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
