package daylight

// Bracket holds a count or share in three readings, Surely <= Estimate <=
// Possibly: counting only what clears the threshold by more than its error,
// taking every value as computed, and counting all that may clear it.
type Bracket struct{ Surely, Estimate, Possibly float64 }

// Scale multiplies all three by f >= 0.
func (b Bracket) Scale(f float64) Bracket {
	return Bracket{b.Surely * f, b.Estimate * f, b.Possibly * f}
}

// over divides by n correctly rounded, so that a share equal to a limit such
// as 0.95 compares as equal to it.
func (b Bracket) over(n float64) Bracket {
	return Bracket{b.Surely / n, b.Estimate / n, b.Possibly / n}
}

// Plane is the work plane's series with its errors.
type Plane struct {
	E  [][]float32 // lx, [sensor][hour]
	SE [][]float32 // standard error of E, lx; nil: E is exact
	Z  float64     // errors are taken Z standard errors wide
}

// shifted is E[sensor][hour] moved by sign*Z standard errors. All hours of a
// sensor are moved the same way at once: they come from the same paths, so
// their errors largely agree, and nothing is won by letting them cancel.
func (p Plane) shifted(sensor, hour int, sign float64) float64 {
	e := float64(p.E[sensor][hour])
	if p.SE == nil || sign == 0 || p.Z == 0 {
		return e
	}
	if p.SE[sensor][hour] == 0 {
		return e // exact, however large Z
	}
	return e + sign*p.Z*float64(p.SE[sensor][hour])
}

// hoursReached counts the hours in which the sensor, moved by sign*Z standard
// errors, reaches the threshold. An unknown error (NaN) or illuminance counts
// as never reached downwards and as reached upwards.
func (p Plane) hoursReached(sensor int, hours Hours, thresholdLx, sign float64) int {
	n := 0
	for _, h := range hours {
		e := p.shifted(sensor, h, sign)
		if e >= thresholdLx || (sign > 0 && e != e) {
			n++
		}
	}
	return n
}

// TimeShare is the share of the hours in which one sensor reaches thresholdLx
// (its DA): as computed, surely, and possibly.
func (p Plane) TimeShare(sensor int, hours Hours, thresholdLx float64) Bracket {
	return Bracket{
		Surely:   float64(p.hoursReached(sensor, hours, thresholdLx, -1)),
		Estimate: float64(p.hoursReached(sensor, hours, thresholdLx, 0)),
		Possibly: float64(p.hoursReached(sensor, hours, thresholdLx, 1)),
	}.over(float64(len(hours)))
}

// SensorShare is the share of sensors that reach thresholdLx in at least
// timeShare of the hours: as computed, surely, and possibly.
func (p Plane) SensorShare(hours Hours, thresholdLx, timeShare float64) Bracket {
	return p.sharing(hours, timeShare, func(s int) Bracket { return p.TimeShare(s, hours, thresholdLx) })
}

// sharing is the share of sensors whose own share of the hours is at least
// timeShare.
func (p Plane) sharing(hours Hours, timeShare float64, of func(sensor int) Bracket) Bracket {
	var b Bracket
	for s := range p.E {
		t := of(s)
		if t.Surely >= timeShare {
			b.Surely++
		}
		if t.Estimate >= timeShare {
			b.Estimate++
		}
		if t.Possibly >= timeShare {
			b.Possibly++
		}
	}
	if len(hours) == 0 {
		b = Bracket{}.over(0)
	}
	return b.over(float64(len(p.E)))
}

// TimeWithin is the share of the hours in which one sensor's value lies from
// low to high, both included: as computed, surely, and possibly. NaN lies
// possibly within, never surely. Bounds may be infinite.
func (p Plane) TimeWithin(sensor int, hours Hours, low, high float64) Bracket {
	var b Bracket
	for _, h := range hours {
		down, e, up := p.shifted(sensor, h, -1), p.shifted(sensor, h, 0), p.shifted(sensor, h, 1)
		if down >= low && up <= high {
			b.Surely++
		}
		if e >= low && e <= high {
			b.Estimate++
		}
		if !(up < low || down > high) {
			b.Possibly++
		}
	}
	return b.over(float64(len(hours)))
}

// SensorsWithin is the share of sensors whose value lies from low to high in at
// least timeShare of the hours.
func (p Plane) SensorsWithin(hours Hours, low, high, timeShare float64) Bracket {
	return p.sharing(hours, timeShare, func(s int) Bracket { return p.TimeWithin(s, hours, low, high) })
}

// EachWithin is SensorsWithin with hours of its own for each sensor.
func (p Plane) EachWithin(hours []Hours, low, high, timeShare float64) Bracket {
	var all Hours
	for _, h := range hours {
		all = append(all, h...)
	}
	return p.sharing(all, timeShare, func(s int) Bracket { return p.TimeWithin(s, hours[s], low, high) })
}

// Reached is the illuminance (lx) that the sensor reaches in at least
// timeShare of the hours, with its bounds Z standard errors apart. Here
// Surely and Possibly are illuminances: the lower and the upper bound.
func (p Plane) Reached(sensor int, hours Hours, timeShare float64) Bracket {
	value := func(sign float64) float64 {
		v := make([]float64, len(hours))
		for i, h := range hours {
			v[i] = p.shifted(sensor, h, sign)
		}
		return reached(v, timeShare)
	}
	return Bracket{Surely: value(-1), Estimate: value(0), Possibly: value(1)}
}
