package report

import (
	"strconv"

	"padproof/cmd/padproof/internal/result"
)

// A piece is a stretch of text on the page. A figure among them names the field
// of the JSON that it is, as a JSON pointer (RFC 6901), and carries that field's
// whole value beside the rounded text.
type piece struct {
	Text  string
	Field string // "" for words
	Value string // of a figure; "" where the field is null
	Name  bool   // words that a sheet, a folder or a recorder chose
	Link  string // where a name leads to, "" for nowhere
}

// A phrase is a row of pieces.
type phrase []piece

func words(text string) piece { return piece{Text: text} }

// name is words that somebody else chose: the page keeps their direction to
// themselves.
func name(text string) piece { return piece{Text: text, Name: true} }

// say is a phrase of words alone.
func say(text string) phrase { return phrase{words(text)} }

// figure is a field's value in the text that was made of it.
func figure(field string, n result.Number, text string) piece {
	p := piece{Text: text, Field: field}
	if n.OK() {
		p.Value = strconv.FormatFloat(float64(n), 'g', -1, 64)
	}
	return p
}

// known reports whether a field that the JSON may leave out holds a figure.
func known(n *result.Number) bool { return n != nil && n.OK() }

// count is a figure that is a whole number.
func count(field string, n int) piece { return figure(field, result.Number(n), strconv.Itoa(n)) }

// limitPhrase is the text of limits with each end as a figure.
func limitPhrase(field string, c result.Check, places int) phrase {
	if c.Unit != "" {
		places = max(places, 2)
	}
	low, high := figure(field+"/low", c.Low, fixed(c.Low, places)), figure(field+"/high", c.High, fixed(c.High, places))
	switch {
	case c.Low.OK() && c.Low == c.High:
		return phrase{low}
	case c.Low.OK() && c.High.OK():
		return phrase{low, words(" to "), high}
	case c.Low.OK():
		return phrase{words("from "), low}
	case c.High.OK():
		return phrase{words("up to "), high}
	}
	return say(dash)
}
