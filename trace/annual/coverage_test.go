package annual_test

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
	"gonum.org/v1/gonum/stat/distuv"

	"squint/scene"
	"squint/trace"
)

// office is a small room with everything the annual engine distinguishes: a
// glazed window, ground outside, a sill that the sun grazes.
func office(t testing.TB, texelM float64) (*trace.World, []scene.Sensor) {
	m := newModel(t, texelM)
	lo, hi := r3.Vec{}, r3.Vec{X: 3, Y: 5, Z: 2.8}
	a := aperture{false, hole{.5, .9, 2.5, 2.5}}
	m.box(lo, hi, m.matte(.2), m.matte(.8), m.matte(.5), a)
	m.pane(lo, hi, a, glazing(t, .78, 2))
	m.face(m.part("shelf", scene.System), m.matte(.7), r3.Vec{X: .5, Y: .05, Z: 1.9}, r3.Vec{X: 2}, r3.Vec{Y: .5}, nil)
	m.texelM = 2
	ground := m.part("ground", scene.GroundPlane)
	m.face(ground, m.matte(1), r3.Vec{X: -20, Y: -20, Z: -.5}, r3.Vec{X: 40}, r3.Vec{Y: 40}, nil)
	for k := range m.s.GroundReflectance {
		m.s.GroundReflectance[k] = .2
	}
	m.s.GroundReflectance[0] = .6 // snow: a block of its own
	return m.world(), []scene.Sensor{up(1.5, 1, .8), up(.7, 2.5, .8), up(2.2, 4.5, .8),
		{Position: r3.Vec{X: 1.5, Y: 3, Z: 1.2}, Normal: r3.Vec{Y: -1}}}
}

// officeMoments are hours with and without sun.
func officeMoments(t testing.TB, n int) []*scene.Moment {
	var out []*scene.Moment
	for i := range n {
		alt, az := deg(12+float64(i*37%55)), deg(-60+float64(i*53%120))
		mo := skyMoment(i, standardSky(t, 1+i%15, az))
		if i%3 != 0 {
			mo.Sun = direction(alt, az)
			mo.SunNormalLx = 4 * mo.DiffuseLx
			mo.GlobalLx += mo.SunNormalLx * mo.Sun.Z
		}
		mo.Month = i % 12
		mo.Occupied = i%4 != 1
		out = append(out, mo)
	}
	return out
}

// TestBatchErrorsCover: over many seeds, the 95 % interval from the 8 batches
// of a run (Student, 7 degrees of freedom) contains the value on which the other
// runs agree. The number of times it does is binomial; too few, by a chance
// of 0.01 over all sensors and moments together (Bonferroni), is a failure. Errors
// 0.3 times as large must be rejected.
func TestBatchErrorsCover(t *testing.T) {
	seeds := 64
	if testing.Short() {
		seeds = 24
	}
	w, sensors := office(t, .4)
	moments := officeMoments(t, 6)
	if testing.Short() {
		moments = moments[:3]
	}
	est := make([][][]estimate, seeds)
	for s := range est {
		est[s] = year(t, w, sensors, moments, effort{batches: 8, texelSamples: 64, sensorSamples: 512, seed: uint64(s)})
	}
	cases := len(sensors) * len(moments)
	least := binomialQuantile(seeds, .95, familyError/float64(cases))
	quantile := distuv.StudentsT{Sigma: 1, Nu: 7}.Quantile(.975) // 2.3646
	covered := func(i, k int, shrink float64) int {
		// The mean of the others has an error of its own, by the spread of all.
		var all float64
		var a tally
		for s := range est {
			all += est[s][i][k].mean
			a.add(est[s][i][k].mean)
		}
		n := 0
		for s := range est {
			e := est[s][i][k]
			others := (all - e.mean) / float64(seeds-1)
			if math.Abs(e.mean-others) <= quantile*math.Hypot(e.stdErr*shrink, a.stdErr()*shrink) {
				n++
			}
		}
		return n
	}
	var total int
	rejected := false
	for i := range sensors {
		for k := range moments {
			n := covered(i, k, 1)
			total += n
			if n < least {
				t.Errorf("sensor %d, moment %d: got %d of %d intervals that cover, want at least %d (binomial, p 0.95, chance %.2g)", i, k, n, seeds, least, familyError/float64(cases))
			}
			rejected = rejected || covered(i, k, .3) < least
		}
	}
	t.Logf("coverage of 95 %% intervals: %.3f over %d sensors x moments x %d seeds; each at least %d of %d wanted",
		float64(total)/float64(cases*seeds), cases, seeds, least, seeds)
	if !rejected {
		t.Error("twin: errors 0.3 times as large were not rejected: the test has no power")
	}
}

// binomialQuantile is the largest k for which fewer than k successes of n have
// a chance of at most tail.
func binomialQuantile(n int, p, tail float64) int {
	d := distuv.Binomial{N: float64(n), P: p}
	k := 0
	for d.CDF(float64(k)) <= tail {
		k++
	}
	return k
}
