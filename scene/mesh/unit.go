package mesh

import "fmt"

// Unit is the length unit of a mesh file. The zero value states none, which
// Read refuses.
type Unit int

// The units of length a file may be in.
const (
	NoUnit Unit = iota
	Metre
	Centimetre
	Millimetre
	Foot
	Inch
)

// unitTable holds the name and length in metres of each unit. Foot and inch
// are exact: NIST Special Publication 811 (2008), appendix B.8, international
// foot and inch.
var unitTable = [...]struct {
	name   string
	metres float64
}{
	NoUnit:     {"", 0},
	Metre:      {"m", 1},
	Centimetre: {"cm", 0.01},
	Millimetre: {"mm", 0.001},
	Foot:       {"ft", 0.3048},
	Inch:       {"in", 0.0254},
}

// ParseUnit returns the unit called "m", "cm", "mm", "ft" or "in".
func ParseUnit(s string) (Unit, error) {
	for u := Metre; u <= Inch; u++ {
		if unitTable[u].name == s {
			return u, nil
		}
	}
	return NoUnit, fmt.Errorf("unit: got %q, want \"m\", \"cm\", \"mm\", \"ft\" or \"in\"", s)
}

func (u Unit) known() bool { return u >= Metre && u <= Inch }

// String returns the name that ParseUnit reads, "" for no unit.
func (u Unit) String() string {
	if !u.known() {
		return ""
	}
	return unitTable[u].name
}

// Metres returns the length of the unit in metres, 0 for no unit.
func (u Unit) Metres() float64 {
	if !u.known() {
		return 0
	}
	return unitTable[u].metres
}
