package report

import (
	"strconv"
	"strings"
)

// longestSlug leaves room for endings on every file system.
const longestSlug = 60

// Slug is a file name for one name.
func Slug(name string) string { return slugs([]string{name}, "design")[0] }

// slugs are file names for names, each its own even where a file system does
// not tell capitals from small letters. They depend on the names and their
// order alone.
func slugs(names []string, otherwise string) []string {
	taken := map[string]bool{}
	out := make([]string, len(names))
	for i, n := range names {
		base := slug(n)
		if base == "" || reserved(base) {
			base = strings.TrimRight(otherwise+"-"+base, "-")
		}
		s := base
		for k := 2; taken[s]; k++ {
			s = base + "-" + strconv.Itoa(k)
		}
		taken[s] = true
		out[i] = s
	}
	return out
}

// slug keeps small Latin letters and digits; everything else is a dash.
func slug(s string) string {
	var b strings.Builder
	for _, r := range strings.ToLower(s) {
		if r >= 'a' && r <= 'z' || r >= '0' && r <= '9' {
			b.WriteRune(r)
		} else if b.Len() > 0 && !strings.HasSuffix(b.String(), "-") {
			b.WriteByte('-')
		}
		if b.Len() >= longestSlug {
			break
		}
	}
	return strings.Trim(b.String(), "-")
}

// reserved tells the names of devices, which are no file names on Windows.
func reserved(s string) bool {
	switch s {
	case "con", "prn", "aux", "nul":
		return true
	}
	return len(s) == 4 && (s[:3] == "com" || s[:3] == "lpt") && s[3] >= '0' && s[3] <= '9'
}
