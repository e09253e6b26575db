package mesh

import (
	"testing"
	"unicode"
	"unicode/utf8"
)

func TestCleanName(t *testing.T) {
	tests := []struct {
		raw, want string
		latin1    bool
	}{
		{"Wall", "Wall", false},
		{"  Hard  Shiny\tPlastic ", "Hard Shiny Plastic", false},
		{"Dämmung 天井", "Dämmung 天井", false},
		{"Terraind\xe6k", "Terraindæk", true}, // ISO 8859-1: 0xe6 is ae
		{"bad\x1b[31m", "bad\ufffd[31m", false},
		{"\x85\xff", "\ufffdÿ", true}, // ISO 8859-1: 0xff is y with diaeresis, 0x85 a control
		{"", "", false},
		{" \t ", "", false},
	}
	for _, tt := range tests {
		got, latin1 := cleanName([]byte(tt.raw))
		if got != tt.want || latin1 != tt.latin1 {
			t.Errorf("cleanName(%q) = %q, %v; want %q, %v", tt.raw, got, latin1, tt.want, tt.latin1)
		}
	}
}

func TestBaseName(t *testing.T) {
	tests := []struct{ file, want string }{
		{"a/b/Room 1.obj", "Room 1"}, {"x.STL", "x"}, {"tar.gz.obj", "tar.gz"}, {".obj", "mesh"},
	}
	for _, tt := range tests {
		if got := baseName(tt.file); got != tt.want {
			t.Errorf("baseName(%q) = %q, want %q", tt.file, got, tt.want)
		}
	}
}

// checkName fails unless a name is fit to print.
func checkName(t *testing.T, name string) {
	t.Helper()
	if name == "" || !utf8.ValidString(name) {
		t.Errorf("name %q: want valid UTF-8, not empty", name)
	}
	for _, r := range name {
		if unicode.IsControl(r) {
			t.Errorf("name %q holds a control character", name)
		}
	}
}
