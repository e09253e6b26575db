package study

import (
	"cmp"
	"fmt"
	"slices"

	"squint/scene"
	"squint/trace/annual"
)

// planeRecord is what is known of one work plane in one scene, lx.
type planeRecord struct {
	Key     string
	Sides   int
	Coarsen float64

	Hours            []planeHour // by rising record
	Factor, FactorSE []float64   // daylight factor and its standard error, by sensor
	Clear            []clearSky
}

// planeHour is one record of the year, by sensor.
type planeHour struct {
	Hour              int
	E, StdErr, Direct []float32
}

// clearSky is a moment under a clear sky, by sensor.
type clearSky struct {
	Moment    string // its number among those asked for and its digest
	E, StdErr []float32
}

func (p *planeRecord) at(hour int) *planeHour {
	i, ok := slices.BinarySearchFunc(p.Hours, hour, func(x planeHour, h int) int { return cmp.Compare(x.Hour, h) })
	if !ok {
		return nil
	}
	return &p.Hours[i]
}

// clearName tells a moment under a clear sky from others, of this run and of
// earlier ones.
func clearName(in *Input, m *scene.Moment) string {
	return fmt.Sprint(slices.Index(in.Clear, m), " ", digest(*m))
}

func (p *planeRecord) clear(moment string) *clearSky {
	for i := range p.Clear {
		if p.Clear[i].Moment == moment {
			return &p.Clear[i]
		}
	}
	return nil
}

// learn adds what was computed of a plane whose n sensors begin at first; clear
// names the moments under a clear sky.
func (p *planeRecord) learn(y *year, first, n int, moments []*scene.Moment, clear []string, how *Settings) {
	p.Sides, p.Coarsen = max(p.Sides, how.TexelSides), max(p.Coarsen, how.Coarsen)
	column := func(of [][]float32, k int) []float32 {
		list := make([]float32, n)
		for i := range list {
			list[i] = of[first+i][k]
		}
		return list
	}
	var news []planeHour
	for k, m := range moments {
		if p.at(m.Step) == nil {
			news = append(news, planeHour{m.Step, column(y.light.E, k), column(y.light.StdErr, k), column(y.light.Direct, k)})
		}
	}
	p.Hours = append(p.Hours, news...)
	slices.SortFunc(p.Hours, func(a, b planeHour) int { return a.Hour - b.Hour })
	if p.Factor == nil && n > 0 {
		p.Factor, p.FactorSE = y.factors[first:first+n], y.factorE[first:first+n]
	}
	for k, at := range clear {
		if p.clear(at) == nil && n > 0 {
			p.Clear = append(p.Clear, clearSky{at, column(y.clear.E, k), column(y.clear.StdErr, k)})
		}
	}
}

// readPlanes takes the sensors into the year, with the daylight factors where
// they are those of the year.
func (y *year) readPlanes(s *shelf, factors bool, place map[int]int, r *Result) {
	first := 0
	for i, x := range s.planes {
		n := len(s.st.Scene.WorkPlanes[i].Sensors)
		r.tell(s.in, x.Sides, x.Coarsen)
		for _, h := range s.hours {
			a, k := x.at(h), place[h]
			for j := range n {
				y.light.E[first+j][k], y.light.StdErr[first+j][k], y.light.Direct[first+j][k] = a.E[j], a.StdErr[j], a.Direct[j]
			}
		}
		if factors {
			y.factors, y.factorE = append(y.factors, x.Factor...), append(y.factorE, x.FactorSE...)
		}
		for k, m := range s.in.Clear {
			c := x.clear(clearName(s.in, m))
			if c == nil || !slices.Contains(s.clear, m) {
				continue
			}
			if y.clear == nil {
				y.clear = annual.NewDaylight(s.in.Scene.Sensors(), len(s.in.Clear))
			}
			for j := range n {
				y.clear.E[first+j][k], y.clear.StdErr[first+j][k] = c.E[j], c.StdErr[j]
			}
		}
		first += n
	}
}
