package source

import (
	"fmt"
	"strings"
	"unicode"
	"unicode/utf8"
)

// Visible returns text in a form that cannot steer a terminal: control
// characters, bidirectional overrides, other invisible format characters and
// bytes that are no UTF-8 are written out as \xNN or \u{NNNN}.
func Visible(text string) string {
	plain := true
	for i := 0; i < len(text); i++ {
		if c := text[i]; c < 0x20 || c >= 0x7f {
			plain = false
			break
		}
	}
	if plain {
		return text
	}
	var b strings.Builder
	for i := 0; i < len(text); {
		r, size := utf8.DecodeRuneInString(text[i:])
		switch {
		case r == utf8.RuneError && size == 1:
			fmt.Fprintf(&b, `\x%02x`, text[i])
		case r == '\t':
			b.WriteByte(' ')
		case r < 0x20 || r == 0x7f:
			fmt.Fprintf(&b, `\x%02x`, r)
		case unicode.IsPrint(r):
			b.WriteRune(r)
		default:
			fmt.Fprintf(&b, `\u{%x}`, r)
		}
		i += size
	}
	return b.String()
}
