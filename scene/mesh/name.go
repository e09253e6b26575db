package mesh

import (
	"path"
	"strings"
	"unicode"
	"unicode/utf8"
)

// cleanName makes a name from a file valid UTF-8 without control characters,
// with blanks at its ends removed and runs of them collapsed. latin1 says that
// it was not UTF-8 and was read as Latin-1 (ISO 8859-1), whose codes are the
// first 256 of Unicode.
func cleanName(raw []byte) (name string, latin1 bool) {
	plain := true
	for i, c := range raw {
		if c < 0x20 || c >= 0x7f || c == ' ' && (i == 0 || i == len(raw)-1 || raw[i-1] == ' ') {
			plain = false
			break
		}
	}
	if plain {
		return string(raw), false
	}
	latin1 = !utf8.Valid(raw)
	var b strings.Builder
	gap := false
	put := func(r rune) {
		if unicode.IsSpace(r) && r != 0x85 {
			gap = b.Len() > 0
			return
		}
		if unicode.IsControl(r) {
			r = utf8.RuneError
		}
		if gap {
			b.WriteByte(' ')
			gap = false
		}
		b.WriteRune(r)
	}
	if latin1 {
		for _, c := range raw {
			put(rune(c))
		}
	} else {
		for _, r := range string(raw) {
			put(r)
		}
	}
	return b.String(), latin1
}

// baseName returns the file's name without folders and extension.
func baseName(file string) string {
	base := path.Base(file)
	name, _ := cleanName([]byte(strings.TrimSuffix(base, path.Ext(base))))
	if name == "" {
		return "mesh"
	}
	return name
}
