package sheet

import (
	"fmt"
	"maps"
	"slices"
	"strconv"
	"unicode"

	"padproof/cmd/padproof/internal/nearest"
)

// table is one table of a document, read key by key. Every key asked for is a
// known key; what was never asked for is an unknown one.
type table struct {
	doc    *document
	path   string // "" at the top, "limits", "parts[2]"
	values map[string]any
	asked  []string
	label  string // how messages name it, "part R3"; "" for its path
}

// table returns a table of the document by its path, empty if it is not there.
func (d *document) table(path string, values map[string]any) *table {
	t := &table{doc: d, path: path, values: values}
	d.tables = append(d.tables, t)
	return t
}

// section returns the [key] table below t, and whether the sheet has it.
func (t *table) section(key string) (*table, bool) {
	v, there := t.ask(key)
	values, fits := v.(map[string]any)
	if there && !fits {
		t.fail(key, "is "+kindOf(v)+", not a section", fmt.Sprintf("write [%s] on a line of its own, its keys below", key))
	}
	return t.doc.table(join(t.path, key), values), there
}

// listed returns the tables of the list whose key is a noun in the plural, "parts" of
// "part"; what is no table is a fault and left out. example is how one is written,
// owner what may have up to most of them.
func (t *table) listed(noun, example, owner string, most int) []*table {
	key := noun + "s"
	v, there := t.ask(key)
	items, fits := v.([]any)
	switch {
	case there && !fits:
		t.fail(key, "is "+kindOf(v)+", not a list", fmt.Sprintf("write %s = [ %s, ... ]", key, example))
		return nil
	case len(items) > most:
		t.fail(key, fmt.Sprintf("has %d %s", len(items), key), fmt.Sprintf("%s can have up to %d", owner, most))
		return nil
	}
	var all []*table
	for i, of := range items {
		path, label := item(key, i), fmt.Sprintf("%s %d", noun, i+1)
		values, fits := of.(map[string]any)
		if !fits {
			t.doc.fail(path, fmt.Sprintf("%s is %s, not a %s", label, kindOf(of), noun), "write "+example)
			continue
		}
		one := t.doc.table(path, values)
		one.label = label
		all = append(all, one)
	}
	return all
}

// ask returns the value of a key and marks the key as known.
func (t *table) ask(key string) (any, bool) {
	t.asked = append(t.asked, key)
	v, there := t.values[key]
	return v, there
}

// fail notes a fault of a key.
func (t *table) fail(key, text, hint string) {
	t.doc.fail(join(t.path, key), t.name(key)+" "+text, hint)
}

// name is how messages call a key.
func (t *table) name(key string) string {
	if t.label == "" {
		return join(t.path, key)
	}
	return t.label + ": " + join("", key)
}

// text returns a text value, "" if it is left out or no good.
func (t *table) text(key string) string {
	const longest = 200
	v, there := t.ask(key)
	if !there {
		return ""
	}
	s, fits := v.(string)
	switch {
	case !fits:
		t.fail(key, "is "+kindOf(v)+", not text", fmt.Sprintf("put it in quotes: %s = \"...\"", key))
		return ""
	case len(s) > longest:
		t.fail(key, "is too long", fmt.Sprintf("keep it under %d letters", longest))
		return ""
	case slices.ContainsFunc([]rune(s), unicode.IsControl):
		t.fail(key, "holds a control character", "write it in plain letters, on one line")
		return ""
	}
	return s
}

// word returns a text value that must be one of known, "" if it is left out.
func (t *table) word(key string, known ...string) string {
	s := t.text(key)
	if _, there := t.values[key].(string); !there || slices.Contains(known, s) {
		return s
	}
	hint := "write " + list(known)
	if slip, ok := nearest.Slip(s, known); ok {
		hint = fmt.Sprintf("did you mean %q? it can be %s", slip, list(known))
	}
	t.fail(key, quoted(s)+" is not known", hint)
	return ""
}

// truth returns a true or false, false if it is left out.
func (t *table) truth(key string) bool {
	v, there := t.ask(key)
	b, fits := v.(bool)
	if there && !fits {
		t.fail(key, "is "+kindOf(v)+", not true or false", key+" = true, without quotes")
	}
	return b
}

// span is the range in which a number makes sense.
type span struct {
	from, to float64
	open     bool   // from itself is left out
	mend     string // what to write, where the range alone does not say
}

// holds tells whether x lies in the span; NaN lies in none.
func (s span) holds(x float64) bool {
	return x <= s.to && (x > s.from || (x == s.from && !s.open))
}

func (s span) String() string {
	if s.open {
		return fmt.Sprintf("above %v, up to %v", s.from, s.to)
	}
	return fmt.Sprintf("from %v to %v", s.from, s.to)
}

// number returns a number, nil if it is left out or no good.
func (t *table) number(key string, s span) *float64 {
	v, there := t.ask(key)
	if !there {
		return nil
	}
	x, fits := asFloat(v)
	switch {
	case !fits:
		t.fail(key, "is "+kindOf(v)+", not a number", numberMend(key, v))
		return nil
	case !s.holds(x):
		mend := s.mend
		if mend == "" {
			mend = "write a number " + s.String()
		}
		t.fail(key, fmt.Sprintf("is %v; it must lie %v", x, s), mend)
		return nil
	}
	return &x
}

// numberMend tells how to write a number that was given as something else.
func numberMend(key string, v any) string {
	text, _ := v.(string)
	if ohms, err := ParseOhms(text); err == nil {
		return fmt.Sprintf("without quotes, in the unit of its name: %s = %s", key, strconv.FormatFloat(ohms.Value, 'f', -1, 64))
	}
	return "write the number alone, without quotes, in the unit of its name"
}

// asFloat returns a TOML number, whole or not.
func asFloat(v any) (float64, bool) {
	switch x := v.(type) {
	case int64:
		return float64(x), true
	case float64:
		return x, true
	}
	return 0, false
}

// kindOf names what kind of TOML value v is.
func kindOf(v any) string {
	switch v.(type) {
	case string:
		return "text"
	case int64, float64:
		return "a number"
	case bool:
		return "true or false"
	case []any:
		return "a list"
	case map[string]any:
		return "a table"
	}
	return "a date or time"
}

// unknown notes every key that nobody asked for. It comes after all reading, so
// that every table's known keys are known.
func (d *document) unknown() {
	for _, t := range d.tables {
		for _, key := range slices.Sorted(maps.Keys(t.values)) {
			if !slices.Contains(t.asked, key) {
				d.fail(join(t.path, key), "unknown key "+t.name(key), d.unknownMend(t, key))
			}
		}
	}
}

// unknownMend guesses what an unknown key was meant to be: a key of this table
// misspelt, or a key of another table or sheet in the wrong place.
func (d *document) unknownMend(t *table, key string) string {
	var homes []string
	for _, other := range d.tables {
		if other.label == "" && slices.Contains(other.asked, key) {
			homes = append(homes, home(other.path))
		}
	}
	if len(homes) > 0 {
		return key + " belongs " + list(homes)
	}
	if slip, ok := nearest.Slip(key, t.asked); ok {
		return "did you mean " + slip + "?"
	}
	for _, other := range d.tables {
		if slip, ok := nearest.Slip(key, other.asked); ok && other.label == "" {
			return fmt.Sprintf("did you mean %s, %s?", slip, home(other.path))
		}
	}
	if sheet := d.foreign[key]; sheet != "" && t.path == "" {
		return fmt.Sprintf("%s belongs in %s; are the two sheets swapped?", key, sheet)
	}
	return "drop it; known here are " + known(t.asked)
}

// home says where a table's keys are written.
func home(path string) string {
	if path == "" {
		return "at the top, before the first [section]"
	}
	return "under [" + path + "]"
}

func known(keys []string) string {
	if len(keys) == 0 {
		return "no keys"
	}
	return list(keys)
}
