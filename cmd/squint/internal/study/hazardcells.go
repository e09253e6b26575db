package study

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/trace"
)

// cell is one entry of the table.
type cell struct {
	key           uint64
	single, other float32
	at            int32 // of the surface's point, -1 in the air
}

// cells is a table of cells by key, cleared by forgetting what was used.
type cells struct {
	slots []cell
	used  []int32
	edgeM float64
	spots []spot
	near  []r3.Vec // places close before mirrors, one a cell
	// about and withinM, where not 0, bound what is counted in the air.
	about   r3.Vec
	withinM float64
}

type spot struct {
	point, normal r3.Vec
	part          int32
}

func newCells(edgeM float64) *cells { return &cells{slots: make([]cell, 1<<15), edgeM: edgeM} }

const (
	axisBits   = 16
	indoorsBit = 3 * axisBits
)

// key packs a point's cell, whether it is indoors, and a surface's part + 1.
func (c *cells) key(p r3.Vec, indoors bool, part int32) uint64 {
	axis := func(x float64) uint64 {
		return uint64(int64(math.Floor(x/c.edgeM))+1<<(axisBits-1)) & (1<<axisBits - 1)
	}
	k := axis(p.X) | axis(p.Y)<<axisBits | axis(p.Z)<<(2*axisBits) | uint64(part+1)&0x7fff<<(indoorsBit+1)
	if indoors {
		k |= 1 << indoorsBit
	}
	return k
}

// middle is the middle of a key's cell.
func (c *cells) middle(key uint64) r3.Vec {
	axis := func(k uint64) float64 {
		return (float64(int64(k&(1<<axisBits-1))-1<<(axisBits-1)) + .5) * c.edgeM
	}
	return r3.Vec{X: axis(key), Y: axis(key >> axisBits), Z: axis(key >> (2 * axisBits))}
}

// clip is the piece of a beam that is counted.
func (c *cells) clip(b *trace.Beam, length float64) (from, to float64) {
	if c.withinM <= 0 {
		return 0, length
	}
	o := r3.Sub(c.about, b.From)
	mid := r3.Dot(o, b.Dir)
	half := c.withinM*c.withinM - (r3.Norm2(o) - mid*mid)
	if half <= 0 {
		return 0, 0
	}
	half = math.Sqrt(half)
	return math.Max(0, mid-half), math.Min(length, mid+half)
}

// find is the slot of a key, taken if it is new.
func (c *cells) find(key uint64) (e *cell, fresh bool) {
	if 2*len(c.used) >= len(c.slots) {
		c.grow()
	}
	mask := uint64(len(c.slots) - 1)
	for i := scatter(key) & mask; ; i = (i + 1) & mask {
		e := &c.slots[i]
		if e.key == key && (e.single != 0 || e.other != 0) {
			return e, false
		}
		if e.single == 0 && e.other == 0 {
			*e = cell{key: key, at: -1}
			c.used = append(c.used, int32(i))
			return e, true
		}
	}
}

// scatter spreads keys over the slots. Source: Knuth, The Art of Computer
// Programming 3, section 6.4, multiplicative hashing by the golden ratio.
func scatter(key uint64) uint64 { return key * 0x9e3779b97f4a7c15 >> 24 }

func (c *cells) grow() {
	old, used := c.slots, c.used
	c.slots, c.used = make([]cell, 2*len(old)), make([]int32, 0, len(used))
	for _, i := range used {
		e, _ := c.find(old[i].key)
		*e = old[i]
	}
}

// add puts light into a cell; x is positive.
func (c *cells) add(key uint64, x float64, single bool) (e *cell, fresh bool) {
	e, fresh = c.find(key)
	if single {
		e.single += float32(x)
	} else {
		e.other += float32(x)
	}
	return e, fresh
}
