package report

import (
	"fmt"
	"strings"
	"unicode"
	"unicode/utf8"
)

// visible makes a text from a sheet or a folder fit for a page: characters that
// cannot be seen but would turn, hide or end what follows are shown by their
// number. Joiners and direction marks that emoji and right-to-left names need
// stay; the page isolates each name.
func visible(text string) string {
	if !strings.ContainsFunc(text, isHidden) && utf8.ValidString(text) {
		return text
	}
	var b strings.Builder
	for _, r := range strings.ToValidUTF8(text, "\ufffd") {
		if isHidden(r) {
			fmt.Fprintf(&b, "[U+%04X]", r)
			continue
		}
		b.WriteRune(r)
	}
	return b.String()
}

// isHidden tells control characters, but for a line's end and a tab, and the
// marks that embed, override or isolate a direction (UAX #9).
func isHidden(r rune) bool {
	switch {
	case r == '\n' || r == '\t':
		return false
	case r >= 0x202a && r <= 0x202e, r >= 0x2066 && r <= 0x2069, r == 0x2028, r == 0x2029:
		return true
	}
	return unicode.IsControl(r) || r >= 0xfdd0 && r <= 0xfdef || r&0xfffe == 0xfffe
}
