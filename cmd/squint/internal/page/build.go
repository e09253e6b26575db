package page

import (
	"cmp"
	"math"
	"sort"
	"time"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/cmd/squint/internal/study"
	"squint/glare"
	"squint/glare/daylight"
	"squint/scene"
	"squint/scene/project"
	"squint/scene/sky"
)

// Build reduces a study to what a page needs. words come from the caller, who
// says the same in its other files.
func Build(r *study.Result, words Words) *Archive {
	a := &Archive{blobs: map[string]blobData{}}
	c := r.Project.Criteria
	d := &a.Design
	fromH, toH := r.Calendar.FromH, r.Calendar.ToH
	for i, u := range r.Uses {
		if i == 0 {
			fromH, toH = u.Calendar.FromH, u.Calendar.ToH
		}
		fromH, toH = min(fromH, u.Calendar.FromH), max(toH, u.Calendar.ToH)
	}
	*d = Design{
		Schema: Schema, SchemaVersion: SchemaVersion, Words: words,
		NorthRad: r.Project.Site.NorthDeg * math.Pi / 180,
		FromH:    fromH, ToH: toH, PerHour: perHour(r),
		Levels: levels(), Asked: -1, Sources: sources(c),
		Standings: r.Standings, Views: []View{}, Planes: []Plane{},
	}
	for k, l := range d.Levels {
		if l.Name == c.Glare {
			d.Asked = k
		}
	}
	a.addYear(r)
	b := a.addRoom(r)
	for i := range r.Views {
		d.Views = append(d.Views, a.view(b, r, &r.Views[i]))
	}
	for i := range r.Planes {
		d.Planes = append(d.Planes, a.plane(r, &r.Planes[i]))
	}
	return a
}

// perHour is the number of records in an hour.
func perHour(r *study.Result) int {
	return r.Climate.PerHour()
}

// sources resolves the project's rule for sources of glare.
func sources(c project.Criteria) Sources {
	return Sources{Of: map[string]string{"field mean": "field", "sight mean": "sight"}[c.SourceRule],
		CdM2: cmp.Or(c.SourceLuminance, glare.DefaultThresholdCdM2), Multiple: cmp.Or(c.SourceMultiple, glare.DefaultMultiple),
		SightRad: glare.DefaultTaskRadiusRad}
}

func vec(v r3.Vec) [3]float64 { return [3]float64{v.X, v.Y, v.Z} }

// addYear packs what belongs to the year and not to a receiver.
func (a *Archive) addYear(r *study.Result) {
	n := daylight.HoursPerYear * perHour(r)
	used, standing := make([]uint8, n), make([]uint8, n)
	for _, h := range r.Occupied {
		used[h] = 1
	}
	for h := range standing {
		standing[h] = math.MaxUint8 // in the dark
		if h < len(r.Standing) && r.Standing[h] >= 0 {
			standing[h] = uint8(min(r.Standing[h], math.MaxUint8-1))
		}
	}
	var p packer
	pack(&p, "used", "u8", used)
	pack(&p, "standing", "u8", standing)
	a.Design.Records = a.add(&p)

	days := n / 24 / perHour(r)
	shift, rise, set := make([]uint8, days), make([]uint16, days), make([]uint16, days)
	for d := range days {
		shift[d] = uint8(r.Calendar.ClockShiftH(d))
		rise[d], set[d] = horizonCrossings(r.Climate, d)
	}
	p = packer{}
	pack(&p, "shift", "u8", shift)
	pack(&p, "rise", "u16", rise)
	pack(&p, "set", "u16", set)
	a.Design.Days = a.add(&p)

	var record []uint32 // steps of 5 minutes are more than 16 bits count
	var minute []uint16
	var sun []int16
	var direct, sky []uint32
	for _, m := range r.Climate.Moments {
		record = append(record, uint32(m.Step))
		minute = append(minute, uint16(m.Time.Hour()*60+m.Time.Minute()))
		for _, x := range vec(m.Sun) {
			sun = append(sun, int16(math.Round(x*32767)))
		}
		direct = append(direct, uint32(math.Round(m.SunNormalLx)))
		sky = append(sky, uint32(math.Round(m.DiffuseLx)))
	}
	p = packer{}
	pack(&p, "record", "u32", record)
	pack(&p, "minute", "u16", minute)
	pack(&p, "sun", "i16", sun)
	pack(&p, "direct", "u32", direct)
	pack(&p, "sky", "u32", sky)
	a.Design.Moments = a.add(&p)
}

// noTime is where the sun does not cross the horizon on a day.
const noTime = math.MaxUint16

// horizonCrossings are the minutes of the day, in standard time, at which the
// middle of the sun rises and sets, without refraction; noTime on a day without.
func horizonCrossings(c *scene.Climate, day int) (rise, set uint16) {
	rise, set = noTime, noTime
	start := c.Year.Moment(24*day, -1)
	up := func(minute int) bool {
		s, err := sky.SunAt(c.Site, start.Add(time.Duration(minute)*time.Minute))
		return err == nil && s.Direction.Z > 0
	}
	const hour = 60
	for m := 0; m < 24*hour; m += hour {
		before := up(m)
		if before == up(m+hour) {
			continue
		}
		at := m + sort.Search(hour, func(k int) bool { return up(m+k) != before })
		if before {
			set = uint16(at)
		} else {
			rise = uint16(at)
		}
	}
	return rise, set
}

// plane packs a work plane's year.
func (a *Archive) plane(r *study.Result, p *study.PlaneResult) Plane {
	out := Plane{Name: p.Plane.Name, HeightM: p.Plane.HeightM, SpacingM: p.Plane.SpacingM, Polygon: p.Plane.PolygonM}
	n := len(p.Plane.Sensors)
	if n == 0 {
		return out
	}
	out.Origin = [2]float64{math.Inf(1), math.Inf(1)}
	for _, s := range p.Plane.Sensors {
		out.Origin[0], out.Origin[1] = math.Min(out.Origin[0], s.Position.X), math.Min(out.Origin[1], s.Position.Y)
	}
	var x, y []uint32
	for _, s := range p.Plane.Sensors {
		x = append(x, uint32(math.Round(1000*(s.Position.X-out.Origin[0]))))
		y = append(y, uint32(math.Round(1000*(s.Position.Y-out.Origin[1]))))
	}
	var q packer
	pack(&q, "x", "u32", x)
	pack(&q, "y", "u32", y)
	add := func(m Metric, value func(i int) float64) {
		v := make([]uint16, n)
		for i := range v {
			v[i] = uint16(math.Max(0, math.Min(65534, math.Round(value(i)*m.Scale))))
		}
		out.Metrics = append(out.Metrics, m)
		pack(&q, m.Key, "u16", v)
	}
	share := func(key, title string) Metric { return Metric{key, title, "%", 1, 50000, 0} }
	if len(p.DA) == n {
		add(share("da", "daylight autonomy, 300 lx"), func(i int) float64 { return p.DA[i] })
	}
	if len(p.UDI) == n {
		add(share("udi", "useful daylight, 100 to 3,000 lx"), func(i int) float64 { return p.UDI[i].Useful() })
	}
	if len(p.Factor) == n {
		add(Metric{"df", "daylight factor", "%", 0.1, 50000, 1}, func(i int) float64 { return p.Factor[i] })
	}
	if len(p.ASE.SensorHours) == n {
		add(Metric{"sun", "hours with sun above 1,000 lx", "h", 1000, 1, 0}, func(i int) float64 { return float64(p.ASE.SensorHours[i]) })
	}
	out.Points = a.add(&q)

	mean := make([]uint32, len(r.Climate.Moments))
	for k, m := range r.Climate.Moments {
		sum := 0.0
		for i := range n {
			sum += float64(p.E[i][m.Step])
		}
		mean[k] = uint32(math.Round(sum / float64(n)))
	}
	q = packer{}
	pack(&q, "mean", "u32", mean)
	out.Mean = a.add(&q)
	out.Shots = a.planeShots(r, p)
	return out
}
