package annual_test

import (
	"fmt"
	"math"
	"testing"

	"gonum.org/v1/gonum/stat/distuv"
)

// outcome is one comparison. allow bounds what is known to differ other than
// by chance (patches, texels, facets, the reference's own digits) and is
// derived where it is set. stdErr has dof degrees of freedom.
type outcome struct {
	name              string
	want, got, stdErr float64
	allow             float64
	dof               int
}

// z is the distance in standard errors beyond what is allowed.
func (o outcome) z() float64 {
	d := math.Max(0, math.Abs(o.got-o.want)-o.allow)
	if d == 0 {
		return 0
	}
	return math.Copysign(d/math.Max(o.stdErr, 1e-300), o.got-o.want)
}

// parity is a family of comparisons: an engine against the published values of
// one group.
type parity struct {
	group string
	rows  []outcome
}

func (p *parity) add(o outcome) { p.rows = append(p.rows, o) }

// familyError is the chance that a family of right values has one or more
// rejected.
const familyError = 0.01

// limit is the two-sided quantile of Student's t for one of m comparisons.
// Source: Sidak 1967, Rectangular confidence regions for the means of
// multivariate normal distributions, JASA 62 (for dependent ones it is on the
// safe side).
func limit(m, dof int) float64 {
	tail := (1 - math.Pow(1-familyError, 1/float64(m))) / 2
	return distuv.StudentsT{Mu: 0, Sigma: 1, Nu: float64(dof)}.Quantile(1 - tail)
}

func (p *parity) rejected(change func(outcome) outcome) (n int, worst outcome) {
	for _, o := range p.rows {
		if change != nil {
			o = change(o)
		}
		if !(math.Abs(o.z()) <= limit(len(p.rows), o.dof)) {
			n++
		}
		if math.Abs(o.z()) >= math.Abs(worst.z()) {
			worst = o
		}
	}
	return n, worst
}

// judge prints the table under -v, fails on rejected rows, and demands that a
// planted defect, all values larger by the share defect, is rejected.
func (p *parity) judge(t *testing.T, defect float64) {
	t.Helper()
	if len(p.rows) == 0 {
		t.Fatalf("%s: no comparisons", p.group)
	}
	board.post(p)
	if testing.Verbose() {
		t.Logf("%s\n%s", p.group, p.text())
	}
	for _, o := range p.rows {
		if z := limit(len(p.rows), o.dof); !(math.Abs(o.z()) <= z) {
			t.Errorf("%s: %s: got %.6g, want %.6g within %.2f x %.3g + %.3g (Sidak, %d cases, family error %g); z %.2f",
				p.group, o.name, o.got, o.want, z, o.stdErr, o.allow, len(p.rows), familyError, o.z())
		}
	}
	_, w := p.rejected(nil)
	t.Logf("%s: %d cases, worst z %.2f (limit %.2f) at %s: wanted %.6g, ours %.6g, standard error %.2g, allowed %.2g",
		p.group, len(p.rows), w.z(), limit(len(p.rows), w.dof), w.name, w.want, w.got, w.stdErr, w.allow)
	planted := func(o outcome) outcome { o.got *= 1 + defect; return o }
	if n, _ := p.rejected(planted); n == 0 {
		t.Errorf("%s: twin: values larger by %.3g were not rejected in any of %d cases: the test has no power", p.group, defect, len(p.rows))
	}
}

func (p *parity) text() string {
	s := fmt.Sprintf("%-44s %12s %12s %10s %10s %6s\n", "case", "wanted", "ours", "std err", "allowed", "z")
	for _, o := range p.rows {
		s += fmt.Sprintf("%-44s %12.6g %12.6g %10.2g %10.2g %6.2f\n", o.name, o.want, o.got, o.stdErr, o.allow, o.z())
	}
	return s
}

// mean and its standard error of independent values.
type tally struct {
	n           int
	sum, square float64
	first       float64
}

func (a *tally) add(x float64) {
	if a.n == 0 {
		a.first = x
	}
	a.n++
	d := x - a.first // shifted: no cancellation
	a.sum += d
	a.square += d * d
}

func (a *tally) mean() float64 { return a.first + a.sum/float64(a.n) }

func (a *tally) stdErr() float64 {
	n := float64(a.n)
	m := a.sum / n
	return math.Sqrt(math.Max(0, a.square/n-m*m) / (n - 1))
}
