package report

import (
	"cmp"
	"fmt"
	"math"
	"slices"
	"strings"

	"squint/cmd/squint/internal/study"
	"squint/glare/daylight"
	"squint/glare/verdict"
)

func sortByRank(f []finding) {
	slices.SortStableFunc(f, func(a, b finding) int { return cmp.Compare(b.rank, a.rank) })
}

// planeNameWidth leaves the numbers their room.
const planeNameWidth = 18

// planeColumns are the table's columns after the name.
var planeColumns = []struct {
	above, head string
	width       int
	value       func(*study.PlaneResult) string
}{
	{"daylight", "mean", 9, func(p *study.PlaneResult) string { return share(p.Factors.Mean) }},
	{"factor", "median", 7, func(p *study.PlaneResult) string { return share(p.Factors.Median) }},
	{"", "unif.", 6, func(p *study.PlaneResult) string { return cell(p.Factors.Uniformity, 2) }},
	{"", "DA", 6, func(p *study.PlaneResult) string { return share(p.MeanDA) }},
	{"", "cDA", 6, func(p *study.PlaneResult) string { return share(p.MeanCDA) }},
	{"", "UDI", 6, func(p *study.PlaneResult) string { return share(p.MeanUDI.Useful()) }},
	{"", "sDA", 14, func(p *study.PlaneResult) string { return spread(p.SDA.Share) }},
	{"", "ASE", 6, func(p *study.PlaneResult) string { return share(p.ASE.Share.Estimate) }},
}

// planeSection is the daylight of each work plane.
func planeSection(p *page, r *study.Result) {
	if len(r.Planes) == 0 {
		return
	}
	p.gap()
	p.head("Work planes, in per cent")
	for _, row := range []func(i int) string{
		func(i int) string { return planeColumns[i].above },
		func(i int) string { return planeColumns[i].head },
	} {
		line := strings.Repeat(" ", 2+planeNameWidth)
		for i := range planeColumns {
			line += right(row(i), planeColumns[i].width)
		}
		p.line(quiet().Render(strings.TrimRight(line, " ")))
	}
	for i := range r.Planes {
		q := &r.Planes[i]
		line := "  " + left(fit(plain(q.Plane.Name), planeNameWidth), planeNameWidth)
		for _, c := range planeColumns {
			line += right(c.value(q), c.width)
		}
		p.line(line)
	}
	p.para(2, "Means over the sensors. unif.: least to mean daylight factor. DA, cDA: 300 lx in the hours of use. "+
		"UDI: 100 to 3,000 lx. sDA (300 lx in half of the hours from 8 to 18) is "+shadingWords(r)+"; "+
		exposureWords(r)+": more than 250 of those hours above 1,000 lx of direct sun.")
	for i := range r.Planes {
		if i == mostInFull && len(r.Planes) > mostInFull+1 {
			p.para(2, "The levels that the other work planes reach stand in summary.json.")
			break
		}
		if s := levelsText(r.Planes[i].Levels); s != "" {
			p.para(2, r.Planes[i].Plane.Name+", EN 17037 provision: "+s+".")
		}
	}
}

// shadingWords tell how the sun protection stands in sDA, which is the same for
// all planes.
func shadingWords(r *study.Result) string {
	switch s := r.Planes[0].SDA.Shading; s {
	case daylight.ByBlindRule:
		return "with blinds operated by the rule of IES LM-83: closed while more than 2 % of the sensors have 1,000 lx of direct sun"
	case daylight.AsOperated:
		return "with sun protection as operated here, which is not the rule of IES LM-83"
	case daylight.AsStanding:
		return "with sun protection as it stands all the year"
	}
	return "unshaded: blinds are not operated"
}

// exposureWords name ASE, which the standard wants with blinds open.
func exposureWords(r *study.Result) string {
	if r.Planes[0].SDA.Shading == daylight.AsStanding {
		return "ASE, so shaded and not with blinds open"
	}
	return "ASE"
}

func levelsText(levels []verdict.Verdict) string {
	var s []string
	for i, v := range levels {
		if i < len(daylight.ProvisionLevels) {
			s = append(s, daylight.ProvisionLevels[i].Name+" "+v.Outcome.String())
		}
	}
	return strings.Join(s, ", ")
}

// share is a share in per cent without the sign.
func share(x float64) string { return cell(100*x, 1) }

// cell is a number in a table; a dash where there is none.
func cell(x float64, n int) string {
	if math.IsNaN(x) || math.IsInf(x, 0) {
		return "-"
	}
	return fixed(x, n)
}

// spread is a share with its bounds where they differ at the digit shown.
func spread(b verdict.Bracket) string {
	lo, mid, hi := share(b.Surely), share(b.Estimate), share(b.Possibly)
	if lo == mid && mid == hi || lo == "-" || hi == "-" {
		return mid
	}
	return fmt.Sprintf("%s, %.0f-%.0f", mid, 100*b.Surely, 100*b.Possibly)
}
