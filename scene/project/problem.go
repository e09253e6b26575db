package project

import (
	"fmt"
	"slices"
	"strings"
)

// Problem is one thing wrong with a project file.
type Problem struct {
	File    string
	Line    int    // 1-based; 0 where no line is to blame
	Key     string // such as light_shelf.height_m; "" where no key is to blame
	Message string
	Err     error // cause, or nil
}

// Error is "file:line: key: message", without the parts that are missing.
func (p Problem) Error() string {
	var b strings.Builder
	b.WriteString(p.File)
	if p.Line > 0 {
		fmt.Fprintf(&b, ":%d", p.Line)
	}
	b.WriteString(": ")
	if p.Key != "" {
		b.WriteString(p.Key + ": ")
	}
	b.WriteString(p.Message)
	return b.String()
}

// Unwrap returns the cause.
func (p Problem) Unwrap() error { return p.Err }

// Problems are all things wrong with a project file, by rising line.
type Problems []Problem

// Error holds one problem per line and nothing else.
func (ps Problems) Error() string {
	lines := make([]string, len(ps))
	for i, p := range ps {
		lines[i] = p.Error()
	}
	return strings.Join(lines, "\n")
}

// Unwrap returns the problems one by one, for errors.Is and errors.As.
func (ps Problems) Unwrap() []error {
	errs := make([]error, len(ps))
	for i, p := range ps {
		errs[i] = p
	}
	return errs
}

// sorted orders by line; problems of one line stay as they were found.
func (ps Problems) sorted() Problems {
	slices.SortStableFunc(ps, func(a, b Problem) int { return a.Line - b.Line })
	return ps
}
