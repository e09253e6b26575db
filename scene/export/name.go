package export

import (
	"strconv"
	"strings"
	"unicode"
)

// distinct numbers names that stand more than once: "a", "a 2" with a blank as
// gap. The first keeps its name.
func distinct(names []string, gap string) []string {
	given := make(map[string]bool, len(names))
	for _, n := range names {
		given[n] = true
	}
	taken := make(map[string]bool, len(names))
	out := make([]string, len(names))
	for i, n := range names {
		s := n
		// A made-up name must not be one that another has of its own.
		for k := 2; taken[s] || s != n && given[s]; k++ {
			s = n + gap + strconv.Itoa(k)
		}
		taken[s] = true
		out[i] = s
	}
	return out
}

// objNames are names as OBJ and MTL can hold them, in the same order: programs
// disagree whether a name may have blanks, "#" may begin a comment and "\" join
// lines, so each becomes "_".
func objNames(names []string) []string {
	out := make([]string, len(names))
	for i, n := range names {
		s := strings.Map(func(r rune) rune {
			if unicode.IsSpace(r) || unicode.IsControl(r) || r == '#' || r == '\\' {
				return '_'
			}
			return r
		}, strings.ToValidUTF8(n, "_"))
		if s == "" {
			s = "_"
		}
		out[i] = s
	}
	return distinct(out, "_")
}

func (m *Model) objPieces() []string {
	names := make([]string, len(m.Pieces))
	for i := range m.Pieces {
		names[i] = m.Pieces[i].Name
	}
	return objNames(names)
}

func (m *Model) objShades() []string {
	names := make([]string, len(m.Shades))
	for i := range m.Shades {
		names[i] = m.Shades[i].Name
	}
	return objNames(names)
}
