package system

import "fmt"

// DimensionError is a dimension that a system cannot have.
type DimensionError struct {
	// Dimension is "height", "thickness", "gap", "extension", "outside depth",
	// "inside depth", "outside tilt", "inside tilt", "drop" or "opening".
	Dimension string
	Message   string // what was got and the limit
}

func (e *DimensionError) Error() string { return e.Dimension + ": " + e.Message }

func dimension(name, format string, args ...any) error {
	return &DimensionError{Dimension: name, Message: fmt.Sprintf(format, args...)}
}
