package materials

import (
	"fmt"
	"strconv"
)

// RangeError says that a number of a finish is out of its range. Key is the
// project file's word for it; a reader of files puts file and line before it.
type RangeError struct {
	Key    string
	Got    float64
	Want   string
	Advice string // what to do; may be empty
}

func (e *RangeError) Error() string {
	s := fmt.Sprintf("%s: got %s, want %s", e.Key, strconv.FormatFloat(e.Got, 'g', 6, 64), e.Want)
	if e.Advice != "" {
		s += "; " + e.Advice
	}
	return s
}

// sumSlack forgives the rounding of decimal shares that add up to 1, a few
// units in the last place.
const sumSlack = 1e-12

// checkShare returns an error unless v lies in 0 to 1 (NaN does not).
func checkShare(key string, v float64) error {
	if v >= 0 && v <= 1 {
		return nil
	}
	return &RangeError{Key: key, Got: v, Want: "0 to 1", Advice: "give a share, not per cent"}
}

// share is a named share, for sums.
type share struct {
	key   string
	value float64
}

// checkShares checks each share and that together they are at most 1.
func checkShares(shares ...share) error {
	sum, names := 0.0, ""
	for i, s := range shares {
		if err := checkShare(s.key, s.value); err != nil {
			return err
		}
		sum += s.value
		if i > 0 {
			names += " + "
		}
		names += s.key
	}
	if sum > 1+sumSlack {
		return &RangeError{Key: names, Got: sum, Want: "at most 1",
			Advice: "more light would leave than arrives: lower one of them"}
	}
	return nil
}
