package film

import (
	"math"
	"reflect"
	"sync"
	"testing"
)

// scene is a picture that is made of three patterns that change smoothly and a
// sun patch that moves: what a film is for, so it must come back within the
// steps of the scale. exact: by construction.
func scene(frame, point int) (all, sun float32) {
	x, t := float64(point)/200, float64(frame)/90
	rest := math.Exp(4 + math.Sin(3*x)*math.Cos(t) + 0.5*x*math.Sin(2*t) + 0.2*math.Cos(9*x)*math.Sin(5*t))
	if point/10 == frame%20 {
		sun = float32(3000 * (1 + x) * (1.2 + math.Sin(t)))
	}
	return float32(rest) + sun, sun
}

func shoot(workers int) *Roll {
	r := NewRoll(200, 300, 0.1, 1e6)
	var wg sync.WaitGroup
	for w := range workers {
		wg.Add(1)
		go func() {
			defer wg.Done()
			all, sun := make([]float32, 200), make([]float32, 200)
			for i := 299 - w; i >= 0; i -= workers {
				for p := range all {
					all[p], sun[p] = scene(i, p)
				}
				r.Keep(i, all, sun, 0)
			}
		}()
	}
	wg.Wait()
	return r
}

// worst is the largest relative difference between scene and film.
func worst(f *Film) float64 {
	out := make([]float64, f.Points)
	far := 0.0
	for i := range f.Frames {
		f.At(i, out)
		for p, v := range out {
			all, _ := scene(i, p)
			far = math.Max(far, math.Abs(v-float64(all))/float64(all))
		}
	}
	return far
}

// Bound: half a step of the scale for the rest and for the sun each, and a
// quarter step for the rounding of patterns and weights.
func TestFilmShowsWhatWasKept(t *testing.T) {
	r := shoot(1)
	bound := math.Exp(1.25*r.stepLn()) - 1
	f := r.Develop(6, Fine)
	if far := worst(f); far > bound {
		t.Errorf("largest relative difference: got %.4f, want at most %.4f", far, bound)
	}
	if e := f.Exact(); e.Rank != f.Rank || !(e.Median > 0 && e.Median < e.Wide && e.Wide < bound) {
		t.Errorf("stated errors: got %+v, want all %d patterns and 0 < median < wide < %.4f", e, f.Rank, bound)
	}
}

// The twin: with too few patterns the same scene must miss the bound, and the
// film must say so.
func TestFilmWithTooFewPatternsIsFound(t *testing.T) {
	r := shoot(1)
	bound := math.Exp(1.25*r.stepLn()) - 1
	f := r.Develop(1, Fine)
	if far := worst(f); far <= bound {
		t.Errorf("one pattern: got a largest difference of %.4f, want more than %.4f", far, bound)
	}
	if f.Exact().Wide <= bound {
		t.Errorf("one pattern: got a stated error of %.4f, want more than %.4f", f.Exact().Wide, bound)
	}
}

// The first patterns alone are stated to be as exact as a film of no more: they
// are its patterns. exact: but for the last digits of the singular directions,
// bounded by the same fifth of a step.
func TestStepsStateWhatTheyLeave(t *testing.T) {
	r := shoot(1)
	f := r.Develop(6, Fine)
	for i, s := range f.Steps {
		if want := stepEvery * (i + 1); s.Rank != want {
			t.Errorf("step %d: got %d patterns, want %d", i, s.Rank, want)
		}
		alone := r.Develop(s.Rank, Fine).Exact()
		if far := math.Abs(s.Wide - alone.Wide); far > 0.2*r.stepLn() {
			t.Errorf("%d patterns: got %.4f, want %.4f as of a film of so many", s.Rank, s.Wide, alone.Wide)
		}
	}
	if f.Steps[0].Wide <= f.Exact().Wide {
		t.Errorf("got %.4f with %d patterns, want more than the %.4f of all", f.Steps[0].Wide, f.Steps[0].Rank, f.Exact().Wide)
	}
}

func TestFilmDoesNotDependOnOrder(t *testing.T) {
	a, b := shoot(1).Develop(6, Fine), shoot(7).Develop(6, Fine)
	if !reflect.DeepEqual(a, b) {
		t.Error("films of the same frames kept in another order differ")
	}
}

func TestFilmOfNothing(t *testing.T) {
	for _, r := range []*Roll{NewRoll(0, 5, 1, 10), NewRoll(5, 0, 1, 10), NewRoll(3, 4, 1, 10)} {
		f := r.Develop(4, Fine)
		out := make([]float64, f.Points)
		for i := range f.Frames {
			f.At(i, out)
			for _, v := range out {
				if math.Abs(v-1) > 0.01 {
					t.Errorf("dark frame: got %g, want the least value 1", v)
				}
			}
		}
	}
}

// TestKeptAgain: a frame that is kept a second time, or put from another roll,
// shows nothing of what was there before; one that does not fit is refused.
func TestKeptAgain(t *testing.T) {
	sunny, dull := []float32{100, 100}, []float32{50, 50}
	r := NewRoll(2, 1, 0.1, 1000)
	r.Keep(0, sunny, []float32{90, 90}, 0)
	r.Keep(0, dull, []float32{0, 0}, 0)
	once := NewRoll(2, 1, 0.1, 1000)
	once.Keep(0, dull, []float32{0, 0}, 0)
	if !reflect.DeepEqual(r.Frame(0), once.Frame(0)) {
		t.Errorf("got %v, want %v as kept once", r.Frame(0), once.Frame(0))
	}
	other := NewRoll(2, 1, 0.1, 1000)
	if !other.Put(0, r.Frame(0)) || !reflect.DeepEqual(other.Develop(1, Fine), once.Develop(1, Fine)) {
		t.Errorf("a frame put from another roll differs")
	}
	if NewRoll(3, 1, 0.1, 1000).Put(0, r.Frame(0)) || other.Put(0, Frame{Rest: []uint8{1, 2}, Lit: []LitPoint{{Point: 2}}}) {
		t.Errorf("a frame that does not fit was taken")
	}
}

// Merged points are the means of their groups; a group is lit where half of it
// is, and else the sun on it is part of the rest. Bound: half a step each of what
// was kept and of what is kept now. exact: the means.
func TestMergedPoints(t *testing.T) {
	r := NewRoll(5, 2, 0.1, 1000)
	all, sun := []float32{10, 30, 500, 100, 50}, []float32{0, 0, 300, 0, 0}
	r.Keep(0, all, sun, 0)
	m := r.Merged([]int{1, 0}, [][]uint16{{0, 1}, {2, 3}, {2, 3, 4}})
	bound := math.Exp(r.stepLn()) - 1
	value := func(c uint8) float64 { return 0.1 * math.Exp(r.stepLn()*float64(c)) }
	for p, want := range []float64{20, 150, (500 + 100 + 50) / 3.0} {
		if got := value(m.Frame(1).Rest[p]); math.Abs(got-want)/want > bound {
			t.Errorf("point %d: got %.1f, want %.1f", p, got, want)
		}
	}
	lit := m.Frame(1).Lit
	if len(lit) != 1 || lit[0].Point != 1 || math.Abs(value(lit[0].Code)-150)/150 > bound {
		t.Errorf("got the sun on %v, want on point 1 alone, 150", lit)
	}
	if m.Frame(0).Rest != nil {
		t.Error("a frame that was not kept is there")
	}
}

// A coarse film is off by no more than its steps allow: half a code of its grain
// for each pattern's weight, half of that for the mean, beside the fine film's own
// quarter and half a step; and it says that it is less exact than a fine one.
func TestCoarseGrain(t *testing.T) {
	r := shoot(1)
	const rank = 6
	f := r.Develop(rank, Coarse)
	bound := math.Exp((0.5+0.25+rank*0.5/float64(Coarse)+0.25/float64(Coarse))*r.stepLn()) - 1
	if far := worst(f); far > bound {
		t.Errorf("largest relative difference: got %.4f, want at most %.4f", far, bound)
	}
	if fine := r.Develop(rank, Fine); f.Exact().Median <= fine.Exact().Median {
		t.Errorf("got a median of %.4f, want more than the fine film's %.4f", f.Exact().Median, fine.Exact().Median)
	}
}
