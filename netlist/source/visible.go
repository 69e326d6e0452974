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

// Brief cuts the middle out of a message that would fill a screen, as a word of
// a hundred thousand letters makes it.
func Brief(message string) string {
	const most, head, tail = 600, 350, 200
	if len(message) <= most {
		return message
	}
	start := strings.ToValidUTF8(message[:head], "")
	end := strings.ToValidUTF8(message[len(message)-tail:], "")
	return fmt.Sprintf("%s ... (%d bytes) ... %s", start, len(message)-head-tail, end)
}
