package report

import "io"

// Coloured is a writer whose reader sees colours. Texts written to one have their
// verdicts coloured; nothing is said by colour alone.
type Coloured struct {
	io.Writer
}

// hues are the colours of words, as ECMA-48 (SGR) writes them: bold, then green,
// red or yellow.
var hues = map[string]string{"PASS": "\x1b[1;32m", "FAIL": "\x1b[1;31m", "UNPROVEN": "\x1b[1;33m"}

// hue is a word with its colour where the page's reader sees colours.
func (p *page) hue(word string) string {
	if _, coloured := p.w.(Coloured); !coloured || hues[word] == "" {
		return word
	}
	return hues[word] + word + "\x1b[0m"
}
