package weather

import (
	"errors"
	"fmt"
)

// Causes that a caller may want to tell apart with errors.Is.
var (
	ErrFormat      = errors.New("not a readable EPW or TMY3 file")
	ErrField       = errors.New("bad field")
	ErrMissing     = errors.New("value missing")
	ErrCalendar    = errors.New("not a complete year of hours")
	ErrImplausible = errors.New("values do not agree with each other")
)

// ParseError tells where a weather file is wrong, what was found there, what
// was wanted and what to do.
type ParseError struct {
	File string
	Line int    // 1 is the first line; 0 when the whole file is meant
	Key  string // column or header entry
	Got  string
	Want string
	Do   string // what the user can do about it
	Err  error  // one of the Err variables, or a reader's error
}

// Error returns "file:line: key: got X, want Y; what to do".
func (e *ParseError) Error() string {
	where := e.File
	if e.Line > 0 {
		where = fmt.Sprintf("%s:%d", e.File, e.Line)
	}
	s := fmt.Sprintf("%s: %s: got %s, want %s", where, e.Key, e.Got, e.Want)
	if e.Do != "" {
		s += "; " + e.Do
	}
	return s
}

// Unwrap returns the cause.
func (e *ParseError) Unwrap() error { return e.Err }
