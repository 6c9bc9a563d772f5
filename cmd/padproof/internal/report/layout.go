package report

import (
	"fmt"
	"io"
	"strings"
	"unicode"
	"unicode/utf8"
)

const lineWidth = 96

// A page writes lines and remembers the first error.
type page struct {
	w   io.Writer
	err error
}

func (p *page) line(format string, args ...any) {
	if p.err == nil {
		_, p.err = fmt.Fprintf(p.w, format+"\n", args...)
	}
}

// heading starts a part of the page.
func (p *page) heading(text string) {
	p.line("")
	p.line("%s", text)
}

// item writes a paragraph behind a mark, wrapped, its further lines under its
// first word.
func (p *page) item(mark, text string) { p.itemAs(mark, mark, text) }

// itemAs is the same with a mark that is shown in another form, as wide as itself.
func (p *page) itemAs(mark, shown, text string) {
	indent := strings.Repeat(" ", utf8.RuneCountInString(mark))
	for i, row := range wrap(clean(text), lineWidth-len(indent)) {
		if i == 0 {
			p.line("%s%s", shown, row)
		} else {
			p.line("%s%s", indent, row)
		}
	}
}

// table writes rows in columns, each as wide as its widest cell.
func (p *page) table(indent string, rows [][]string) {
	var widths []int
	for _, row := range rows {
		for i, cell := range row {
			if i == len(widths) {
				widths = append(widths, 0)
			}
			widths[i] = max(widths[i], utf8.RuneCountInString(clean(cell)))
		}
	}
	for _, row := range rows {
		var b strings.Builder
		for i, cell := range row {
			cell = clean(cell)
			b.WriteString(p.hue(cell))
			b.WriteString(strings.Repeat(" ", widths[i]-utf8.RuneCountInString(cell)+2))
		}
		p.line("%s", strings.TrimRight(indent+b.String(), " "))
	}
}

// wrap breaks a text at spaces into lines no longer than width.
func wrap(text string, width int) []string {
	var lines []string
	line := ""
	for _, word := range strings.Fields(text) {
		switch {
		case line == "":
			line = word
		case utf8.RuneCountInString(line)+1+utf8.RuneCountInString(word) <= width:
			line += " " + word
		default:
			lines, line = append(lines, line), word
		}
	}
	return append(lines, line)
}

// clean keeps control and direction marks of names in sheets and folders from
// reaching a terminal.
func clean(text string) string {
	return strings.Map(func(r rune) rune {
		switch {
		case r == '\n' || r == '\t':
			return ' '
		case unicode.IsControl(r) || unicode.Is(unicode.Cf, r) || r == utf8.RuneError:
			return '?'
		}
		return r
	}, text)
}
