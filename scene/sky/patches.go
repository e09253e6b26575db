package sky

import (
	"fmt"
	"math"
	"sort"

	"gonum.org/v1/gonum/spatial/r3"
)

// MaxPatchFactor is the finest division that NewPatches makes: 36,865 patches.
const MaxPatchFactor = 16

const (
	rowHeightRad    = 12 * degree
	capHalfAngleRad = 6 * degree
)

// tregenzaRows holds the number of patches in the rows centred at 6, 18, ... 78
// degrees of altitude; the zenith patch follows.
// Source: Tregenza (1987).
var tregenzaRows = [7]int{30, 30, 24, 24, 18, 12, 6}

// Patches divides the sky into patches: Tregenza's 145, or each of them but the
// zenith's cut into factor x factor, rows of equal height and patches of equal
// width. The cap of 6 degrees around the zenith stays whole. So every finer
// division nests in the 145.
//
// Patches are numbered row by row from the horizon up, clockwise in each row, the
// zenith patch last. With factor 1 the first patch of a row is centred on north;
// with others a row begins at the west edge of that patch.
//
// It does not change once made and may be used by many goroutines.
//
// Source: Tregenza, Subdivision of the sky hemisphere for luminance measurements,
// Lighting Research & Technology 19(1), 1987, 13-14. Factor: Bourgeois, Reinhart &
// Ward, Standard daylight coefficient model for dynamic daylighting simulations,
// Building Research & Information 36(1), 2008, 68-82, who count 144 m^2 + 1
// patches; equal heights within each 12 degrees are our choice, their own rows
// were not at hand.
type Patches struct {
	rows   []patchRow // from the horizon up, the cap last
	rowRad float64
	count  int
	// samples are directions spread evenly over the solid angle of each patch:
	// perPatch for each, perCap for the cap at the end.
	samples          []r3.Vec
	perPatch, perCap int
}

type patchRow struct {
	first, count          int
	startRad              float64 // azimuth at which the row begins
	lowRad, highRad       float64 // altitudes
	solidAngle, projected float64 // sr, of one patch
}

// NewPatches divides the sky with a factor of 1 (145 patches), 2 (577), 3 (1297),
// 4 (2305) and so on to MaxPatchFactor; outside that range it panics.
func NewPatches(factor int) *Patches {
	if factor < 1 || factor > MaxPatchFactor {
		panic(fmt.Sprintf("sky: subdivision factor: got %d, want 1 to %d", factor, MaxPatchFactor))
	}
	p := &Patches{rowRad: rowHeightRad / float64(factor)}
	for i, n := range tregenzaRows {
		for k := range factor {
			low := rowHeightRad*float64(i) + p.rowRad*float64(k)
			p.addRow(n*factor, -math.Pi/float64(n), low, low+p.rowRad)
		}
	}
	p.addRow(1, 0, math.Pi/2-capHalfAngleRad, math.Pi/2)
	// 6 x 6 directions in each of the 145 patches, at least 2 x 2 in a smaller one.
	p.spread(max(2, 6/factor))
	return p
}

func (p *Patches) addRow(count int, startRad, lowRad, highRad float64) {
	sinLow, sinHigh := math.Sin(lowRad), math.Sin(highRad)
	width := 2 * math.Pi / float64(count)
	p.rows = append(p.rows, patchRow{
		first: p.count, count: count, startRad: startRad, lowRad: lowRad, highRad: highRad,
		solidAngle: width * (sinHigh - sinLow),
		projected:  width * (sinHigh*sinHigh - sinLow*sinLow) / 2,
	})
	p.count += count
}

// spread lays side x side directions into each patch, in the middle of cells of
// equal solid angle, and 6 rings of 12 into the cap.
func (p *Patches) spread(side int) {
	const capRings, capTurns = 6, 12
	p.perPatch, p.perCap = side*side, capRings*capTurns
	for _, row := range p.rows {
		rings, turns := side, row.count*side
		if row.count == 1 {
			rings, turns = capRings, capTurns
		}
		sinLow, sinHigh := math.Sin(row.lowRad), math.Sin(row.highRad)
		for i := range row.count {
			for t := range turns / row.count {
				azimuth := row.startRad + 2*math.Pi*(float64(i*turns/row.count+t)+0.5)/float64(turns)
				sinA, cosA := math.Sincos(azimuth)
				for r := range rings {
					z := sinLow + (sinHigh-sinLow)*(float64(r)+0.5)/float64(rings)
					h := math.Sqrt(1 - z*z)
					p.samples = append(p.samples, r3.Vec{X: h * sinA, Y: h * cosA, Z: z})
				}
			}
		}
	}
}

// Count returns the number of patches.
func (p *Patches) Count() int { return p.count }

// Index returns the number of the patch that holds a direction (unit vector), or
// -1 below the horizon and for what is not a number.
func (p *Patches) Index(dir r3.Vec) int {
	// The difference of a number and itself is 0, of Inf and NaN it is NaN.
	if !(dir.Z >= 0) || dir.X-dir.X+dir.Y-dir.Y+dir.Z-dir.Z != 0 {
		return -1
	}
	altitude := math.Atan2(dir.Z, math.Hypot(dir.X, dir.Y))
	last := len(p.rows) - 1
	if altitude >= p.rows[last].lowRad {
		return p.rows[last].first
	}
	row := &p.rows[min(int(altitude/p.rowRad), last-1)]
	k := int((azimuthOf(dir) - row.startRad) / (2 * math.Pi) * float64(row.count))
	if k >= row.count { // west of north, in the row's first patch
		k -= row.count
	}
	return row.first + k
}

// Centre returns the direction to the middle of patch i, in altitude and azimuth.
// Like all methods that take a patch number it panics where there is no such
// patch.
func (p *Patches) Centre(i int) r3.Vec {
	row := p.row(i)
	if row.count == 1 {
		return r3.Vec{Z: 1}
	}
	azimuth := row.startRad + 2*math.Pi*(float64(i-row.first)+0.5)/float64(row.count)
	sinH, cosH := math.Sincos((row.lowRad + row.highRad) / 2)
	sinA, cosA := math.Sincos(azimuth)
	return r3.Vec{X: cosH * sinA, Y: cosH * cosA, Z: sinH}
}

// SolidAngle returns the solid angle of patch i (sr). Their sum is 2 pi.
func (p *Patches) SolidAngle(i int) float64 { return p.row(i).solidAngle }

// ProjectedSolidAngle returns the integral of the sine of the altitude over patch
// i (sr), which is its illuminance on a level plane for a luminance of 1. Their
// sum is pi.
func (p *Patches) ProjectedSolidAngle(i int) float64 { return p.row(i).projected }

func (p *Patches) row(i int) *patchRow {
	if i < 0 || i >= p.count {
		panic(fmt.Sprintf("sky: patch number: got %d, want 0 to %d", i, p.count-1))
	}
	k := sort.Search(len(p.rows), func(k int) bool { return p.rows[k].first > i })
	return &p.rows[k-1]
}

// Average writes the mean luminance of each patch (cd/m2, over its solid angle)
// into out; it panics unless out has Count elements.
//
// The sum of mean luminance times projected solid angle departs from the sky's
// horizontal illuminance, because luminance and sine of altitude both change
// along the height of a patch: by 4 % at most with factor 1, 1 % with 2 and 0.3 %
// with 4, most under clear skies with a low sun (measured over the CIE skies and
// the published checks of the all-weather model; 0.3 % in the median of a typical
// year with factor 1).
func (p *Patches) Average(s *Sky, out []float64) {
	if len(out) != p.count {
		panic(fmt.Sprintf("sky: patch averages: got room for %d, want %d", len(out), p.count))
	}
	samples := p.samples
	for i := range out {
		n := p.perPatch
		if i == p.count-1 {
			n = p.perCap
		}
		var sum float64
		for _, dir := range samples[:n] {
			sum += s.Luminance(dir)
		}
		out[i] = sum / float64(n)
		samples = samples[n:]
	}
}
