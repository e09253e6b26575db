package project

import (
	"fmt"
	"path"
	"strings"
	"unicode"
)

// text checks a string for what its key asks.
func (r *reader) text(n *node, key string, s *spec, text string, dst *string) string {
	got := "got " + quote(text)
	switch {
	case s.choices != nil:
		for _, c := range s.choices {
			if c == text {
				*dst = text
				return ""
			}
		}
		if near := Suggest(text, s.choices); near != "" {
			return got + ", want " + oneOf(s.choices) + "; did you mean " + quote(near) + "?"
		}
		return got + ", want " + oneOf(s.choices)
	case s.refers != "":
		r.refs = append(r.refs, reference{line: n.line, key: key, noun: s.refers, name: text, types: s.types, at: n})
	case s.form == filePath:
		resolved, why := resolve(r.dir, text)
		if why != "" {
			return got + ", " + why
		}
		text = resolved
	case s.form == itemName:
		if why := nameProblem(text); why != "" {
			return got + ", " + why
		}
	}
	*dst = text
	return ""
}

// nameProblem keeps names fit for tables, legends and messages.
func nameProblem(name string) string {
	const longest = 80
	switch {
	case strings.TrimSpace(name) == "":
		return "want a name that is not empty"
	case strings.TrimSpace(name) != name:
		return "want a name without spaces around it"
	case len([]rune(name)) > longest:
		return fmt.Sprintf("want a name of at most %d characters", longest)
	}
	for _, c := range name {
		if !unicode.IsPrint(c) {
			return "want a name of printable characters"
		}
	}
	return ""
}

// resolve makes a path that the project file names one from the root of the
// file system. It returns what is wrong with it.
func resolve(dir, file string) (resolved, why string) {
	switch {
	case strings.TrimSpace(file) == "":
		return "", "want the path of a file"
	case strings.ContainsRune(file, '\\'):
		return "", "want / between folders"
	case path.IsAbs(file), len(file) > 1 && file[1] == ':':
		return "", "an absolute path; want one relative to the project file's folder"
	}
	for _, c := range file {
		if unicode.IsControl(c) || c == unicode.ReplacementChar {
			return "", "want a path of printable characters"
		}
	}
	resolved = path.Join(dir, file)
	base := path.Base(path.Clean(file))
	switch {
	case resolved == ".." || strings.HasPrefix(resolved, "../"):
		return "", "which leaves the folder that the project may read; move the file into it, or start from a folder further up"
	case base == "." || base == ".." || strings.HasSuffix(file, "/"):
		return "", "want the path of a file, not of a folder"
	}
	return resolved, ""
}
