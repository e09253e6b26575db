package page

import (
	"fmt"
	"html"
	"html/template"
	"math"
	"strings"
)

// The drawing of alternatives, in its own units.
const (
	tradeWide, tradeHigh          = 640.0, 360.0
	tradeLeft, tradeBottom        = 64.0, 48.0
	tradeRight, tradeTop          = 150.0, 24.0
	tradeLabelDrop, tradeDotRadii = 4.0, 5.0
	// Labels beside each other closer than this move down by a line.
	tradeLabelWide, tradeLine = 150.0, 15.0
)

// tradeOff draws light at the rear against glare at the worst viewpoint, a
// dot for each alternative. Empty where there is nothing to weigh.
func tradeOff(all []*Design, chosen int) template.HTML {
	most, n := 0.0, 0
	for _, d := range all {
		if d.Row.WorstOver >= 0 && d.Row.RearDA >= 0 {
			n++
			most = math.Max(most, d.Row.WorstOver)
		}
	}
	if n < 2 {
		return ""
	}
	limit := -1.0
	if a := all[chosen].Asked; a >= 0 && a < len(all[chosen].Levels) {
		limit = all[chosen].Levels[a].Share
		most = math.Max(most, limit)
	}
	top := math.Max(0.1, math.Ceil(most*10)/10)
	x := func(v float64) float64 { return tradeLeft + v/top*(tradeWide-tradeLeft-tradeRight) }
	y := func(v float64) float64 { return tradeHigh - tradeBottom - v*(tradeHigh-tradeBottom-tradeTop) }
	var b strings.Builder
	fmt.Fprintf(&b, `<svg class="trade" viewBox="0 0 %g %g" role="img" aria-label="Light at the rear against glare at the worst viewpoint; the table has the numbers">`, tradeWide, tradeHigh)
	for i := range 5 {
		v := float64(i) / 4
		fmt.Fprintf(&b, `<line class="hair" x1="%.1f" y1="%.1f" x2="%.1f" y2="%.1f"/><text class="tick end" x="%.1f" y="%.1f">%.0f %%</text>`, x(0), y(v), x(top), y(v), x(0)-8, y(v)+4, 100*v)
	}
	for i := range 6 {
		v := top * float64(i) / 5
		fmt.Fprintf(&b, `<text class="tick mid" x="%.1f" y="%.1f">%s</text>`, x(v), y(0)+18, strings.Replace(share(v), ".0", "", 1))
	}
	fmt.Fprintf(&b, `<text class="axis" x="%.1f" y="%.1f">hours over the limit at the worst viewpoint</text>`, x(0), y(0)+38)
	fmt.Fprintf(&b, `<text class="axis" x="%.1f" y="%.1f">hours with 300 lx at the rear</text>`, 4.0, tradeTop-10)
	if limit >= 0 {
		fmt.Fprintf(&b, `<line class="limit" x1="%.1f" y1="%.1f" x2="%.1f" y2="%.1f"/><text class="tick" x="%.1f" y="%.1f">limit %s</text>`, x(limit), y(0), x(limit), y(1), x(limit)+5, y(1)+12, strings.Replace(share(limit), ".0", "", 1))
	}
	var taken [][2]float64
	for i, d := range all {
		if d.Row.WorstOver < 0 || d.Row.RearDA < 0 {
			continue
		}
		px, py := x(d.Row.WorstOver), y(d.Row.RearDA)
		class := "dot"
		if i == chosen {
			class = "dot chosen"
		}
		ty := py + tradeLabelDrop
		for moved := true; moved; {
			moved = false
			for _, t := range taken {
				// Half a unit less than a line, so that rounding cannot keep it moving.
				if math.Abs(t[0]-px) < tradeLabelWide && math.Abs(t[1]-ty) < tradeLine-0.5 {
					ty, moved = t[1]+tradeLine, true
				}
			}
		}
		taken = append(taken, [2]float64{px, ty})
		fmt.Fprintf(&b, `<circle class="%s" cx="%.1f" cy="%.1f" r="%g"/><text class="name" x="%.1f" y="%.1f">%s</text>`, class, px, py, tradeDotRadii, px+10, ty, html.EscapeString(d.Alternative))
	}
	b.WriteString("</svg>")
	return template.HTML(b.String())
}
