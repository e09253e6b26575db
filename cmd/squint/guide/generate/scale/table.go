package main

import (
	"bufio"
	"fmt"
	"io"
	"math"
	"strconv"
	"strings"

	"squint/glare/falsecolour"
)

// table is what BenchmarkFloor printed, and the lines that say where and when.
type table struct {
	about []string // without their #
	cpu   string
	rows  map[string][]row // by what is varied
}

type row struct {
	size, prepare, seconds, mib float64 // CPU seconds of preparing and of computing
}

// sizes are what BenchmarkFloor varies, in the order of the sheet.
var sizes = []string{"views", "sensors", "hours", "triangles"}

// read takes the benchmark's lines.
func read(from io.Reader) (*table, error) {
	t := &table{rows: map[string][]row{}}
	lines := bufio.NewScanner(from)
	for n := 1; lines.Scan(); n++ {
		l := lines.Text()
		if text, ok := strings.CutPrefix(l, "# "); ok {
			t.about = append(t.about, text)
		}
		if text, ok := strings.CutPrefix(l, "cpu: "); ok {
			t.cpu = text
		}
		name, _, ok := strings.Cut(strings.TrimPrefix(l, "BenchmarkFloor/"), "=")
		if !ok || !strings.HasPrefix(l, "BenchmarkFloor/") {
			continue
		}
		values := map[string]float64{}
		f := strings.Fields(l)
		for i := 2; i+1 < len(f); i += 2 {
			v, err := strconv.ParseFloat(f[i], 64)
			if err != nil {
				return nil, fmt.Errorf("line %d: got %q before %s, want a number", n, f[i], f[i+1])
			}
			values[f[i+1]] = v
		}
		r := row{values[name], values["prepare-cpu-s"], values["run-cpu-s"], values["peak-MiB"]}
		if !(r.size > 0 && r.seconds > 0 && r.mib > 0) {
			return nil, fmt.Errorf("line %d: got no %s, prepare-cpu-s, run-cpu-s or peak-MiB, want all of them", n, name)
		}
		t.rows[name] = append(t.rows[name], r)
	}
	for _, s := range sizes {
		if len(t.rows[s]) < 3 {
			return nil, fmt.Errorf("got %d lines of BenchmarkFloor/%s, want 3 or more", len(t.rows[s]), s)
		}
	}
	return t, lines.Err()
}

// law is the line a + b x through places by least squares.
func law(x, y []float64) (a, b float64) {
	var sx, sy, sxx, sxy float64
	n := float64(len(x))
	for i := range x {
		sx, sy, sxx, sxy = sx+x[i], sy+y[i], sxx+x[i]*x[i], sxy+x[i]*y[i]
	}
	b = (n*sxy - sx*sy) / (n*sxx - sx*sx)
	return (sy - b*sx) / n, b
}

// prepared tells what reading and building took, which is not in the plots.
func (t *table) prepared() string {
	rows := t.rows["triangles"]
	few, many := rows[0], rows[len(rows)-1]
	return fmt.Sprintf("Not in them: reading the model and building its search trees, %.1f s of %s triangles and %.1f s of %s.",
		few.prepare, falsecolour.Number(few.size), many.prepare, falsecolour.Number(many.size))
}

// top is the least of 1, 2, 4, 5 or 8 times a power of ten that is no less.
func top(v float64) float64 {
	p := math.Pow(10, math.Floor(math.Log10(v)))
	for _, k := range []float64{1, 2, 4, 5, 8} {
		if k*p >= v*(1-1e-9) {
			return k * p
		}
	}
	return 10 * p
}

// steps are round numbers from 0 to a top.
func steps(most float64) (list []float64) {
	n := 4
	if lead := most / math.Pow(10, math.Floor(math.Log10(most)+1e-9)); math.Round(lead) == 1 || math.Round(lead) == 5 {
		n = 5
	}
	for i := range n + 1 {
		list = append(list, most*float64(i)/float64(n))
	}
	return list
}
