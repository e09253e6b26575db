package study

import (
	"fmt"
	"math"
	"sort"
	"strings"
)

// sortCauses renumbers the causes in the order of their words, since frames
// arrive in no certain order.
func (v *ViewResult) sortCauses() {
	order := make([]int, len(v.Causes))
	for i := range order {
		order[i] = i
	}
	sort.Slice(order, func(a, b int) bool { return v.Causes[order[a]].String() < v.Causes[order[b]].String() })
	place := make([]int16, len(order))
	causes := make([]Cause, len(order))
	for k, i := range order {
		place[i] = int16(k)
		causes[k] = v.Causes[i]
	}
	for h, c := range v.Cause {
		if c >= 0 {
			v.Cause[h] = place[c]
		}
	}
	v.Causes = causes
}

// mostly is the share of the hours that "mostly" speaks for; own choice.
const mostly = 0.7

// evenMonths is the span of months that glare spread evenly over the year
// gives: 0.7 of 12, rounded up.
const evenMonths = 9

// when says when the hours above a limit fall and what carries them.
func (v *ViewResult) when(r *Result, limit float64) string {
	var above []int
	for _, h := range r.UseOf(v.Viewpoint.Room).Hours {
		if float64(v.DGP[h]) > limit {
			above = append(above, h)
		}
	}
	return v.whenOf(r, above)
}

// whenOpen says which hours leave a verdict open, and how close to the limit
// they are.
func (v *ViewResult) whenOpen(r *Result, limit, z float64) string {
	open := r.openHours(v, limit, z)
	if len(open) == 0 {
		return ""
	}
	far := 0.0
	for _, h := range open {
		far = math.Max(far, math.Abs(float64(v.DGP[h])-limit))
	}
	return fmt.Sprintf("%s open: %s, DGP within %.2g of the limit", count(len(open), stepWord(r.Climate)), v.whenOf(r, open), far)
}

// whenOf says of hours the shortest span of clock hours and the shortest span
// of months that hold most of them, and the commonest cause. Empty when there
// are none.
func (v *ViewResult) whenOf(r *Result, hours []int) string {
	var byHour [24]int
	var byMonth [12]int
	byCause := map[int16]int{}
	for _, h := range hours {
		_, clock := r.Calendar.ClockAt(h)
		byHour[int(clock)]++
		byMonth[r.Climate.Year.Records[h/r.Climate.PerHour()].Month-1]++
		byCause[v.Cause[h]]++
	}
	n := len(hours)
	if n == 0 {
		return ""
	}
	from, to := span(byHour[:], n, false)
	m0, m1 := span(byMonth[:], n, true)
	cause, most := int16(-1), 0
	for c := range v.Causes {
		if byCause[int16(c)] > most {
			cause, most = int16(c), byCause[int16(c)]
		}
	}
	var b strings.Builder
	fmt.Fprintf(&b, "mostly %d to %d h", from, to+1)
	if m0 == m1 {
		fmt.Fprintf(&b, " in %s", months[m0])
	} else if (m1-m0+12)%12 < evenMonths-1 {
		fmt.Fprintf(&b, " from %s to %s", months[m0], months[m1])
	} else {
		b.WriteString(" all year")
	}
	if cause >= 0 {
		fmt.Fprintf(&b, ", by %s", v.Causes[cause])
	}
	return b.String()
}

var months = [12]string{"January", "February", "March", "April", "May", "June", "July", "August", "September", "October", "November", "December"}

// span finds the shortest run of bins that holds the share mostly of n; wrap
// lets it run over the end.
func span(bins []int, n int, wrap bool) (from, to int) {
	need := int(mostly*float64(n) + 0.999)
	best := len(bins) + 1
	for i := range bins {
		sum := 0
		for k := 0; k < len(bins); k++ {
			j := i + k
			if j >= len(bins) {
				if !wrap {
					break
				}
				j -= len(bins)
			}
			sum += bins[j]
			if sum >= need {
				if k+1 < best {
					best, from, to = k+1, i, j
				}
				break
			}
		}
	}
	return from, to
}
