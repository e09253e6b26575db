package study

import (
	"context"
	"fmt"
	"strings"

	"squint/scene"
)

// Store keeps results between runs. It may lose or spoil them: what does not
// come back as it was saved is computed again.
type Store interface {
	Load(key string) ([]byte, bool)
	Save(key string, data []byte) error
}

// nowhere is a store that forgets.
type nowhere struct{}

func (nowhere) Load(string) ([]byte, bool) { return nil, false }
func (nowhere) Save(string, []byte) error  { return nil }

// traced says which receivers the year was computed for in this run.
type traced struct{ views, planes map[int]bool }

// words tell what was not; "" where it was all.
func (t traced) words(s *scene.Scene) string {
	var list []string
	for _, k := range []struct {
		all, ran int
		name     string
	}{{len(s.Viewpoints), len(t.views), "viewpoint"}, {len(s.WorkPlanes), len(t.planes), "work plane"}} {
		if k.all > k.ran {
			list = append(list, fmt.Sprintf("%d of %s", k.all-k.ran, count(k.all, k.name)))
		}
	}
	if list == nil {
		return ""
	}
	return strings.Join(list, " and ") + " reused"
}

// skies is the digest of the moments as the engine sees them, in use or not.
func skies(moments []*scene.Moment) string {
	var all []scene.Moment
	for _, m := range moments {
		c := *m
		c.Occupied = false
		all = append(all, c)
	}
	return digest(all)
}

// cellsOf groups the steps by day of the week, holidays apart, hour of the
// clock, and in use or not. Whatever full hours of the week an occupancy has, its
// worst step is the worst of a cell. They are listed by room.
func cellsOf(in *Input) map[string][]int {
	all := map[string][]int{}
	for _, u := range in.allUses() {
		all[u.Room] = u.cells()
	}
	return all
}

func (u *Use) cells() []int {
	cells := make([]int, u.Calendar.Steps())
	for i := range cells {
		day, clock := u.Calendar.ClockAt(i)
		weekday, holiday := u.Calendar.OnDay(day)
		if holiday {
			weekday = 7
		}
		cells[i] = 2 * (24*weekday + int(clock))
		if u.mask[i] {
			cells[i]++
		}
	}
	return cells
}

// reuseYear is traceYear for what the store does not have, which it then gets.
// Eyes are open at the moments in use: other hours of use cost those that are
// new.
func reuseYear(ctx context.Context, in *Input, opt Options, r *Result) (*year, error) {
	y := newYear(in, opt)
	y.glare.shots = opt.shots
	place := map[int]int{}
	for i, m := range in.Climate.Moments {
		place[m.Step] = i
	}
	total, before := 0, 0
	for _, st := range in.Standings {
		total += len(st.Moments)
	}
	if r.Settings.Workers == 0 { // where nothing is missing, nothing limits them
		r.Settings.Workers = opt.Workers
	}
	for k := range in.Standings {
		st := &in.Standings[k]
		if len(st.Moments) == 0 && k > 0 {
			continue
		}
		s := newShelf(in, k, opt)
		before += len(st.Moments) - len(s.lackHours)
		heard := opt.Progress
		s.opt.Progress = func(stage Stage, done, of int) {
			if stage == StageYear {
				done, of = before+done, total
			}
			heard(stage, done, of)
		}
		if err := s.compute(ctx, r); err != nil {
			return nil, err
		}
		before += len(s.lackHours)
		for i := range s.views {
			y.readView(s, i, r)
		}
		y.readPlanes(s, k == 0, place, r)
	}
	for i := range y.glare.views {
		y.glare.views[i].judgeResolution()
	}
	return y, nil
}
