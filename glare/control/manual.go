package control

// Active is somebody who opens the unit on arrival, once a day, closes it when
// the sun on any place of work is above CloseWm2, and then leaves it closed
// until the next day of use. While the room is not in use nothing moves.
// Source: the active user of Reinhart 2004, Solar Energy 77(1), from memory.
// The passive one, who keeps it closed all year, is Always.
type Active struct {
	CloseWm2     float64
	Open, Closed int
}

// Choose implements Law. The year starts open.
func (l Active) Choose(u *Unit, steps []Step, f Facts) ([]int, error) {
	if f.DeskWm2 == nil {
		return nil, lacking(u, "the sun on the places of work")
	}
	list := make([]int, len(steps))
	state, arrived := l.Open, -1
	used := f.inUse(steps)
	for i, s := range steps {
		if used[i] {
			if s.Day != arrived {
				state, arrived = l.Open, s.Day
			}
			for _, e := range f.DeskWm2(i) {
				if e > l.CloseWm2 {
					state = l.Closed
				}
			}
		}
		list[i] = state
	}
	return list, nil
}
