package main

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"github.com/spf13/pflag"

	"squint/cmd/squint/internal/report"
)

// overlayFlags are what false-colour pictures show on top, as text.
type overlayFlags struct {
	contours string
	points   []string
}

func (o *overlayFlags) bind(f *pflag.FlagSet) {
	f.StringVar(&o.contours, "contours", "", "labelled lines of equal `values`, with\ncommas between")
	f.StringArrayVar(&o.points, "point", nil, "`x,y` in pixels, from the top left: write the\nvalue there; repeat it for several")
}

// read checks the flags.
func (o *overlayFlags) read() (v report.Overlay, err error) {
	if o.contours != "" {
		if v.Contours, err = numbers(o.contours); err != nil {
			return v, fmt.Errorf("--contours: %w, with commas between, such as 500,2000", err)
		}
	}
	for _, text := range o.points {
		x, y, ok := strings.Cut(text, ",")
		a, err1 := strconv.ParseFloat(strings.TrimSpace(x), 64)
		b, err2 := strconv.ParseFloat(strings.TrimSpace(y), 64)
		if !ok || err1 != nil || err2 != nil || !(a >= 0 && b >= 0) || math.IsInf(a+b, 0) {
			return v, fmt.Errorf("--point: got %q, want x,y in pixels, such as 256,180", text)
		}
		v.Points = append(v.Points, [2]float64{a, b})
	}
	return v, nil
}
