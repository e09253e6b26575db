package system

import "fmt"

// DimensionError is a dimension that a system cannot have.
type DimensionError struct {
	// Dimension is "height", "thickness", "gap", "extension", "drop", "opening",
	// "stack", "spacing", "position", "width", "pitch", "sagitta", "facet",
	// "tilt", "cavity", "side", "low" or "high"; of the parts of a shelf
	// "outside" or "inside" with "depth", "tilt", "profile", "sagitta", "focus"
	// or "polyline" after it; of an anidolic ceiling "axis tilt", "acceptance",
	// "collector share", "collector space", "duct height", "duct length",
	// "outlet length", "outlet cut-off" or "facet error".
	Dimension string
	Message   string // what was got and the limit
}

func (e *DimensionError) Error() string { return e.Dimension + ": " + e.Message }

func dimension(name, format string, args ...any) error {
	return &DimensionError{Dimension: name, Message: fmt.Sprintf(format, args...)}
}
