package control

import "fmt"

// Always keeps the unit in one state.
type Always struct{ State int }

// Choose implements Law.
func (a Always) Choose(_ *Unit, steps []Step, _ Facts) ([]int, error) {
	list := make([]int, len(steps))
	for i := range list {
		list[i] = a.State
	}
	return list, nil
}

// Follow takes the state that the system's own law says suits the sun:
// slats by the cut-off angle or to redirect it, the cloth of an anidolic
// ceiling by the collector's acceptance.
type Follow struct{}

// Choose implements Law.
func (Follow) Choose(u *Unit, steps []Step, f Facts) ([]int, error) {
	if f.Following == nil {
		return nil, lacking(u, "the state that follows the sun")
	}
	list := make([]int, len(steps))
	for i := range list {
		name := f.Following(i)
		k, ok := u.index(name)
		if !ok {
			return nil, fmt.Errorf("control: %q: got the state %q to follow the sun, want one of %q", u.Name, name, u.States)
		}
		list[i] = k
	}
	return list, nil
}

// Period is a state and when it holds: on those days of the week and of the
// year, between two times of the clock.
type Period struct {
	Days     [7]bool // Monday first
	FromH    float64 // clock time, 0 to 24
	ToH      float64 // not included; below FromH for one that runs over midnight
	FirstDay int     // of the year, 0 to 364
	LastDay  int     // included; below FirstDay for one that runs over the new year
	State    int
}

func (p Period) holds(s Step) bool {
	return p.Days[s.Weekday] && inTurn(s.ClockH, p.FromH, p.ToH) && inTurn(float64(s.Day), float64(p.FirstDay), float64(p.LastDay)+0.5)
}

// inTurn is whether x lies between two places of a circle, the second one not
// included; the same place twice is all around.
func inTurn(x, from, to float64) bool {
	if from < to {
		return x >= from && x < to
	}
	return x >= from || x < to
}

// Timetable takes the state of the first period that holds, else State.
type Timetable struct {
	Periods []Period
	State   int
}

// Choose implements Law.
func (t Timetable) Choose(_ *Unit, steps []Step, _ Facts) ([]int, error) {
	list := make([]int, len(steps))
	for i, s := range steps {
		list[i] = t.State
		for _, p := range t.Periods {
			if p.holds(s) {
				list[i] = p.State
				break
			}
		}
	}
	return list, nil
}
