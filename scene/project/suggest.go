package project

import (
	"slices"
	"strings"
)

// Suggest returns the known name nearest to an unknown one, or "" where none
// is near: the same name in other case or with its words in another order, or
// within one typing error for each three letters. Of equals the first wins.
func Suggest(unknown string, known []string) string {
	best, least := "", 0
	plain := reordered(unknown)
	for _, k := range known {
		other := reordered(k)
		d := min(edits(plain, other), edits(strings.ToLower(unknown), strings.ToLower(k)))
		if limit := max(1, min(len(plain), len(other))/3); d <= limit && (best == "" || d < least) {
			best, least = k, d
		}
	}
	return best
}

// DidYouMean is a message's ending for an unknown name: the nearest known
// name, or else the list of all, shortened.
func DidYouMean(unknown string, known []string) string {
	if s := Suggest(unknown, known); s != "" {
		return "did you mean " + quote(s) + "?"
	}
	if len(known) == 0 {
		return "there are none"
	}
	const most = 8
	shown := make([]string, 0, most)
	for _, k := range known[:min(most, len(known))] {
		shown = append(shown, quote(k))
	}
	list := "known: " + strings.Join(shown, ", ")
	if len(known) > most {
		list += ", ..."
	}
	return list
}

// reordered is the name in lower case with its words in sorted order.
func reordered(name string) string {
	words := strings.FieldsFunc(strings.ToLower(name), func(r rune) bool {
		return r == '_' || r == '-' || r == ' ' || r == '.'
	})
	slices.Sort(words)
	return strings.Join(words, "_")
}

// edits counts insertions, deletions, replacements and swaps of neighbours
// (Damerau 1964, "A technique for computer detection and correction of
// spelling errors"; the restricted distance), in bytes. Names longer than 64
// bytes are compared by their beginning.
func edits(a, b string) int {
	const longest = 64
	a, b = a[:min(len(a), longest)], b[:min(len(b), longest)]
	var rows [3][longest + 1]int
	before, last, now := &rows[0], &rows[1], &rows[2]
	for j := range len(b) + 1 {
		last[j] = j
	}
	for i := 1; i <= len(a); i++ {
		now[0] = i
		for j := 1; j <= len(b); j++ {
			cost := 1
			if a[i-1] == b[j-1] {
				cost = 0
			}
			now[j] = min(last[j]+1, now[j-1]+1, last[j-1]+cost)
			if i > 1 && j > 1 && a[i-1] == b[j-2] && a[i-2] == b[j-1] {
				now[j] = min(now[j], before[j-2]+1)
			}
		}
		before, last, now = last, now, before
	}
	return last[len(b)]
}
