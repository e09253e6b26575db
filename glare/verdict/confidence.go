package verdict

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// Z is how many standard errors wide each of `looks` values must be taken so
// that all of them together are right with the confidence (between 0 and 1,
// 0.99 say). Looks counts views times repeated looks; below 1 it is 1. The
// errors may be correlated in any way. Outside its domain Z is +Inf: nothing
// is decided.
// Source: Sidak 1967, Rectangular confidence regions for the means of
// multivariate normal distributions, JASA 62(318), 626-633, corollary 1.
func Z(confidence float64, looks int) float64 {
	p, ok := perLook(confidence, looks)
	if !ok {
		return math.Inf(1)
	}
	return distuv.UnitNormal.Quantile(p)
}

// T is Z where the standard errors themselves come from few batches: the
// quantile of Student's distribution with dof = batches - 1 degrees of
// freedom. With dof below 1 it is +Inf.
// Source: Student 1908, The probable error of a mean, Biometrika 6(1).
func T(confidence float64, looks, dof int) float64 {
	p, ok := perLook(confidence, looks)
	if !ok || dof < 1 {
		return math.Inf(1)
	}
	return distuv.StudentsT{Mu: 0, Sigma: 1, Nu: float64(dof)}.Quantile(p)
}

// perLook is the probability below the upper end of one look's two-sided
// interval.
func perLook(confidence float64, looks int) (float64, bool) {
	if !(confidence > 0 && confidence < 1) {
		return 0, false
	}
	each := math.Pow(confidence, 1/float64(max(1, looks)))
	return 1 - (1-each)/2, true
}
