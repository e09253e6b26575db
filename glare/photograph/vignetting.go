package photograph

import (
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"math"
	"strconv"
	"strings"
)

// ErrVignetting is wrapped by the errors about a vignetting.
var ErrVignetting = errors.New("vignetting")

// Vignetting is the share of the light that a lens lets through at an angle
// from its axis, against that on the axis. The zero value is a lens that loses
// nothing.
type Vignetting struct {
	coefficients []float64 // by powers of the angle in degrees
	deg, factor  []float64 // else a table, rising
}

// VignettingPolynomial is c0 + c1 a + c2 a^2 + ... of the angle a from the axis
// in degrees, the unit in which lenses are measured.
func VignettingPolynomial(coefficients []float64) Vignetting {
	return Vignetting{coefficients: coefficients}
}

// ReadVignetting reads a table: CSV with the header angle_deg,factor and rising
// angles from 0 on; lines that begin with # are left out. Errors name file and
// line.
func ReadVignetting(r io.Reader, file string) (Vignetting, error) {
	c := csv.NewReader(r)
	c.Comment, c.FieldsPerRecord, c.TrimLeadingSpace = '#', -1, true
	var v Vignetting
	fail := func(line int, format string, args ...any) (Vignetting, error) {
		return Vignetting{}, fmt.Errorf("%s:%d: %w: %s", file, line, ErrVignetting, fmt.Sprintf(format, args...))
	}
	for first := true; ; first = false {
		row, err := c.Read()
		if errors.Is(err, io.EOF) {
			break
		}
		if err != nil {
			return Vignetting{}, fmt.Errorf("%s: %w: %w", file, ErrVignetting, err)
		}
		line, _ := c.FieldPos(0)
		if first {
			if strings.Join(row, ",") != "angle_deg,factor" {
				return fail(line, "got the header %q, want angle_deg,factor", strings.Join(row, ","))
			}
			continue
		}
		if len(row) != 2 {
			return fail(line, "got %d columns, want 2", len(row))
		}
		a, errA := strconv.ParseFloat(row[0], 64)
		f, errF := strconv.ParseFloat(row[1], 64)
		switch n := len(v.deg); {
		case errA != nil || !(a >= 0 && a <= 180):
			return fail(line, "got the angle %q, want 0 to 180 degrees", row[0])
		case errF != nil || !(f >= minFactor && f <= maxFactor):
			return fail(line, "got the factor %q, want %g to %g", row[1], minFactor, maxFactor)
		case n == 0 && a != 0:
			return fail(line, "got %g degrees first, want 0: the table is relative to the axis", a)
		case n > 0 && a <= v.deg[n-1]:
			return fail(line, "got %g degrees after %g, want rising angles", a, v.deg[n-1])
		}
		v.deg, v.factor = append(v.deg, a), append(v.factor, f)
	}
	if len(v.deg) < 2 {
		return fail(1, "got %d rows, want at least 2", len(v.deg))
	}
	return v, nil
}

// At is the factor at an angle (rad) from the axis; tables are interpolated
// linearly.
func (v Vignetting) At(thetaRad float64) float64 {
	a := thetaRad * 180 / math.Pi
	if len(v.deg) > 0 {
		for i := 1; i < len(v.deg); i++ {
			if a <= v.deg[i] {
				t := (a - v.deg[i-1]) / (v.deg[i] - v.deg[i-1])
				return v.factor[i-1] + t*(v.factor[i]-v.factor[i-1])
			}
		}
		return v.factor[len(v.factor)-1]
	}
	if len(v.coefficients) == 0 {
		return 1
	}
	sum := 0.0
	for i := len(v.coefficients) - 1; i >= 0; i-- {
		sum = sum*a + v.coefficients[i]
	}
	return sum
}

// Range of factors that a lens can have. Own choice: outside of it the
// coefficients are for another unit or the table for another quantity.
const minFactor, maxFactor = 0.05, 1.5

// check wants a table to reach halfRad and all factors to be those of a lens.
func (v Vignetting) check(halfRad float64) error {
	half := halfRad * 180 / math.Pi
	if n := len(v.deg); n > 0 && v.deg[n-1] < half-1e-9 {
		return fmt.Errorf("%w: the table ends at %g degrees from the axis, want %g, half the field of view", ErrVignetting, v.deg[n-1], half)
	}
	for i := range 181 {
		a := half * float64(i) / 180
		if f := v.At(a * math.Pi / 180); !(f >= minFactor && f <= maxFactor) {
			return fmt.Errorf("%w: got a factor of %.3g at %.3g degrees from the axis, want %g to %g; coefficients are for the angle in degrees", ErrVignetting, f, a, minFactor, maxFactor)
		}
	}
	return nil
}
