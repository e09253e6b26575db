package guide

import (
	"strings"
	"unicode/utf8"
)

// Columns is the widest line.
const Columns = 80

// Hang writes text after a first part, wrapped at Columns, further lines
// indented as far as the first part reaches. Words longer than a line stand
// out.
func Hang(first, text string) string {
	indent := utf8.RuneCountInString(first)
	var b strings.Builder
	b.WriteString(first)
	at := indent
	for i, w := range strings.Fields(text) {
		n := utf8.RuneCountInString(w)
		switch {
		case i == 0:
		case at+1+n > Columns:
			b.WriteString("\n" + strings.Repeat(" ", indent))
			at = indent
		default:
			b.WriteByte(' ')
			at++
		}
		b.WriteString(w)
		at += n
	}
	return b.String() + "\n"
}
