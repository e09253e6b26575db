package mesh

import (
	"fmt"
	"slices"
	"testing"
)

func TestLineReader(t *testing.T) {
	tests := []struct {
		text string
		want []string // number of the line where it starts, and the line
	}{
		{"", nil},
		{"\n", []string{"1 "}},
		{"a\nb", []string{"1 a", "2 b"}},
		{"a\r\n\r\nb\r\n", []string{"1 a", "2 ", "3 b"}},
		{"a\\\nb\\\nc\nd", []string{"1 a b c", "4 d"}},
		{"a\\\r\nb", []string{"1 a b"}},
		{"a\\", []string{"1 a "}},
		{"# a\\\nb", []string{`1 # a\`, "2 b"}},
		{"\\\n\\\n", []string{"1   "}},
	}
	for _, tt := range tests {
		r := lineReader{data: []byte(tt.text)}
		var got []string
		for line, ok := r.next(); ok; line, ok = r.next() {
			got = append(got, fmt.Sprintf("%d %s", r.line, line))
		}
		if !slices.Equal(got, tt.want) {
			t.Errorf("%q: got %q, want %q", tt.text, got, tt.want)
		}
	}
}
