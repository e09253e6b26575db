package report

import (
	"encoding/json"
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/glare/daylight"
)

// number is a JSON number; null where it is not finite, since JSON has no word
// for that.
type number float64

// MarshalJSON implements json.Marshaler.
func (n number) MarshalJSON() ([]byte, error) {
	if math.IsNaN(float64(n)) || math.IsInf(float64(n), 0) {
		return []byte("null"), nil
	}
	return json.Marshal(float64(n))
}

// bracket is a share or count as computed, with its bounds.
type bracket struct {
	Estimate number `json:"estimate"`
	Surely   number `json:"surely"`
	Possibly number `json:"possibly"`
}

func toBracket(b daylight.Bracket) bracket {
	return bracket{number(b.Estimate), number(b.Surely), number(b.Possibly)}
}

type vector [3]number

func toVector(v r3.Vec) vector { return vector{number(v.X), number(v.Y), number(v.Z)} }
