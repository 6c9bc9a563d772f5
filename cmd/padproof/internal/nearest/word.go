// Package nearest finds the known word that a mistyped one was meant to be.
//
// It serves the errors and warnings of sheets and folders: "did you mean
// loss_plus_minus_db?". [Word] always answers with the nearest; [Slip] answers
// only where a slip of the fingers is likely.
package nearest

import "strings"

// Word returns the word of known that takes the fewest edits to make of word,
// and how many. An edit adds, drops or changes one letter, or swaps two
// neighbours (optimal string alignment, common practice). Case does not count,
// nor whether blanks, hyphens or underscores part the word. Of equals the first
// is taken. With nothing known it returns "" and -1.
func Word(word string, known []string) (best string, edits int) {
	edits = -1
	for _, k := range known {
		if n := distance(plain(word), plain(k)); edits < 0 || n < edits {
			best, edits = k, n
		}
	}
	return best, edits
}

// Slip returns the nearest word of known if word is likely to be a slip for
// it: at most a third of the shorter one's letters differ, or it is the start of the known
// word and three letters or longer. A single letter is a slip for the same
// letter in the other case alone.
func Slip(word string, known []string) (string, bool) {
	best, edits := Word(word, known)
	if edits >= 0 && edits <= min(len([]rune(word)), len([]rune(best)))/3 {
		return best, true
	}
	if len(word) < 3 {
		return "", false
	}
	for _, k := range known {
		if strings.HasPrefix(plain(k), plain(word)) {
			return k, true
		}
	}
	return "", false
}

// plain brings a word to the form in which words are compared.
func plain(word string) string {
	return strings.NewReplacer(" ", "-", "_", "-").Replace(strings.ToLower(word))
}

// distance counts the edits between two words, with three rows of the usual
// table. Words over longest letters are cut: nobody means those.
func distance(a, b string) int {
	const longest = 64
	from, to := cut([]rune(a), longest), cut([]rune(b), longest)
	before, last, row := make([]int, len(to)+1), make([]int, len(to)+1), make([]int, len(to)+1)
	for j := range last {
		last[j] = j
	}
	for i := 1; i <= len(from); i++ {
		row[0] = i
		for j := 1; j <= len(to); j++ {
			cost := 1
			if from[i-1] == to[j-1] {
				cost = 0
			}
			row[j] = min(last[j]+1, row[j-1]+1, last[j-1]+cost)
			if i > 1 && j > 1 && from[i-1] == to[j-2] && from[i-2] == to[j-1] {
				row[j] = min(row[j], before[j-2]+1)
			}
		}
		before, last, row = last, row, before
	}
	return last[len(to)]
}

func cut(r []rune, longest int) []rune {
	return r[:min(len(r), longest)]
}
