package luminance

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"
)

// Causes that a caller may want to tell apart with errors.Is.
var (
	ErrFormat      = errors.New("not an image file this reader knows")
	ErrUnsupported = errors.New("kind of image not supported")
	ErrTruncated   = errors.New("file cut short")
	ErrMalformed   = errors.New("file damaged")
	ErrTooLarge    = errors.New("image too large")
)

// ParseError says where an image file is wrong.
type ParseError struct {
	File    string // "" where a reader was not given a name
	Line    int    // of a text header, counted from 1; 0 in binary parts
	Offset  int64  // byte of a binary part, counted from 0; near the fault
	Key     string // the quantity concerned, may be empty
	Problem string // got X, want Y; what to do
	Err     error  // cause: one of this package's errors or of the reader's
}

func (e *ParseError) Error() string {
	var b strings.Builder
	switch {
	case e.File != "" && e.Line > 0:
		fmt.Fprintf(&b, "%s:%d: ", e.File, e.Line)
	case e.File != "":
		b.WriteString(e.File + ": ")
	case e.Line > 0:
		fmt.Fprintf(&b, "line %d: ", e.Line)
	}
	if e.Line == 0 && e.Offset > 0 {
		fmt.Fprintf(&b, "byte %d: ", e.Offset)
	}
	if e.Key != "" {
		b.WriteString(e.Key + ": ")
	}
	b.WriteString(e.Problem)
	return b.String()
}

// Unwrap returns the cause.
func (e *ParseError) Unwrap() error { return e.Err }

func parseFinite(s string) (float64, error) {
	v, err := strconv.ParseFloat(s, 64)
	if err != nil || math.IsInf(v, 0) || math.IsNaN(v) {
		return 0, fmt.Errorf("%q is not a finite number", s)
	}
	return v, nil
}
