package mesh

import (
	"errors"
	"fmt"
	"strings"
)

// Causes that a caller may want to tell apart with errors.Is.
var (
	ErrUnsupported = errors.New("not a mesh file this reader knows")
	ErrTooLarge    = errors.New("file too large")
	ErrTruncated   = errors.New("file cut short")
	ErrNoTriangles = errors.New("no triangles")
	ErrNotFinite   = errors.New("coordinate not usable")
)

// ParseError says where a mesh file is wrong. Line is counted from 1, and 0
// where lines mean nothing; Triangle is counted from 1 in a binary STL, and
// otherwise 0. Key is the statement or quantity concerned and may be empty.
type ParseError struct {
	File     string
	Line     int
	Triangle int
	Key      string
	Problem  string // got X, want Y; what to do
	Err      error  // cause, may be nil
}

func (e *ParseError) Error() string {
	var b strings.Builder
	b.WriteString(e.File)
	if e.Line > 0 {
		fmt.Fprintf(&b, ":%d", e.Line)
	}
	if e.Triangle > 0 {
		fmt.Fprintf(&b, ": triangle %d", e.Triangle)
	}
	if e.Key != "" {
		b.WriteString(": " + e.Key)
	}
	b.WriteString(": " + e.Problem)
	return b.String()
}

// Unwrap returns the cause: one of this package's errors, an error of the file
// system, or nil.
func (e *ParseError) Unwrap() error { return e.Err }
