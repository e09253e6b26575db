package falsecolour

import (
	"fmt"
	"image/color"
	"strings"
)

// Map is a sequence of colours whose lightness only rises, so that it can be
// read in grey print.
type Map int

// The maps. The same quantity has the same map everywhere: luminance has
// Inferno on a log scale, illuminance Cividis.
const (
	Inferno Map = iota
	Cividis
	Viridis
)

var maps = [...]struct {
	name  string
	table *[256]uint32
}{
	Inferno: {"inferno", &inferno},
	Cividis: {"cividis", &cividis},
	Viridis: {"viridis", &viridis},
}

// String returns the usual name of the map.
func (m Map) String() string {
	if m < 0 || int(m) >= len(maps) {
		return fmt.Sprintf("map(%d)", int(m))
	}
	return maps[m].name
}

// ParseMap is the inverse of Map.String.
func ParseMap(name string) (Map, error) {
	names := make([]string, len(maps))
	for i, m := range maps {
		if m.name == name {
			return Map(i), nil
		}
		names[i] = m.name
	}
	return 0, fmt.Errorf("%w: colour map: got %q, want one of %s", ErrInvalid, name, strings.Join(names, ", "))
}

// At is the colour at t, 0 to 1; what lies outside gets the colour of the
// end, and NaN that of 0.
func (m Map) At(t float64) color.RGBA {
	if m < 0 || int(m) >= len(maps) {
		m = Inferno
	}
	i := 0
	if t > 0 {
		i = int(min(t, 1)*255 + 0.5)
	}
	return rgb(maps[m].table[i])
}

func rgb(v uint32) color.RGBA {
	return color.RGBA{R: uint8(v >> 16), G: uint8(v >> 8), B: uint8(v), A: 255}
}

// The sheet's own colours.
const (
	paper    = 0xFBFAF6
	ink      = 0x22252A
	hairline = 0xD8D4C8
	quiet    = 0x6B6F76
)
