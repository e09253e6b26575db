package picture

import (
	"context"
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
	"squint/trace"
	"squint/trace/parallel"
)

// Photons of one pass where mirrors or glossy surfaces are, and where only panes
// mirror the sun. Own choices.
const (
	passPhotons = 1 << 17
	panePhotons = 1 << 15
	shots       = 16 // portions of a pass's photons, each with its own stream
)

// firstRadiusM is the radius within which the first round counts photons: a
// quarter of a texel of the room. Own choice.
const firstRadiusM = 0.05

// radiusM is the radius in a round, from 0. Every pass of a round has the same,
// and photons of its own, so that passes are independent estimates whose mean
// tends to the truth: r[i+1]^2 = r[i]^2 (i+a)/(i+1), a = 2/3.
//
// Source: Hachisuka, Ogaki & Jensen 2008, Progressive photon mapping, ACM TOG
// 27(5); Hachisuka & Jensen 2009, Stochastic progressive photon mapping, ACM
// TOG 28(5); the series for independent passes: Knaus & Zwicker 2011,
// Progressive photon mapping: a probabilistic approach, ACM TOG 30(3) (from
// memory).
func radiusM(round int) float64 {
	const a = 2.0 / 3
	square := firstRadiusM * firstRadiusM
	for i := 1; i <= round; i++ {
		square *= (float64(i) + a) / (float64(i) + 1)
	}
	return math.Sqrt(square)
}

// photon is a landing of mirrored sun: where, on which side, and its flux, lm.
type photon struct {
	p, n [3]float32
	flux float32
}

// photonMap finds photons near a point: buckets of a hash of cubic cells with
// twice the radius as edge. Source: Teschner et al. 2003, Optimized spatial
// hashing for collision detection of deformable objects, VMV (from memory).
type photonMap struct {
	radius float64
	first  []int32
	list   []photon
}

// photons shoots the photons of a pass; nil where no mirror is in the sun. all
// takes those that land on surfaces that do not scatter too.
func (l *Light) photons(ctx context.Context, pass, round int, all bool) (*photonMap, error) {
	if l.aim == nil {
		return nil, nil
	}
	n := passPhotons
	if !l.world.Mirrors() {
		n = panePhotons
	}
	parts := make([][]photon, shots)
	rays := &l.sun[pass%lanes]
	err := parallel.Each(ctx, l.stage.cfg.Workers, shots, func(k int) {
		s := sampling.Stream4(l.stage.cfg.Seed, streamPhotons, uint64(pass), uint64(k)<<32|uint64(uint32(l.moment.Step)))
		l.aim.Beams(n/shots, rays.Draw, &s, func(b *trace.Beam) {
			if b.Hit == nil {
				return
			}
			if rho, tau := b.Hit.BSDF.Lambert(b.Hit.Side); rho <= 0 && tau <= 0 && !all {
				return
			}
			parts[k] = append(parts[k], photon{f32(b.Hit.Point), f32(b.Hit.Facing()), float32(rays.NormalLx * b.FluxM2 / shots)})
		})
	})
	if err != nil {
		return nil, err
	}
	return newPhotonMap(parts, radiusM(round)), nil
}

func newPhotonMap(parts [][]photon, radius float64) *photonMap {
	total := 0
	for _, p := range parts {
		total += len(p)
	}
	size := 1
	for size < total {
		size *= 2
	}
	m := &photonMap{radius: radius, first: make([]int32, size+1), list: make([]photon, total)}
	for _, part := range parts {
		for i := range part {
			m.first[m.bucketOf(&part[i])+1]++
		}
	}
	for i := range size {
		m.first[i+1] += m.first[i]
	}
	at := append([]int32(nil), m.first...)
	for _, part := range parts {
		for i := range part {
			b := m.bucketOf(&part[i])
			m.list[at[b]] = part[i]
			at[b]++
		}
	}
	return m
}

func (m *photonMap) bucketOf(p *photon) int {
	e := 2 * m.radius
	return m.bucket(floor(float64(p.p[0])/e), floor(float64(p.p[1])/e), floor(float64(p.p[2])/e))
}

func (m *photonMap) bucket(x, y, z int) int {
	h := uint64(x)*73856093 ^ uint64(y)*19349663 ^ uint64(z)*83492791
	return int(h & uint64(len(m.first)-2))
}

func floor(x float64) int { return int(math.Floor(x)) }

// Photons count on a surface within flatness radii of its plane and sameSide as
// the cosine between the normals. Own choices.
const (
	flatness = 0.2
	sameSide = 0.9
)

// illuminance is the mirrored sun on the plane with unit normal n at p, lx.
func (m *photonMap) illuminance(p, n r3.Vec) float64 {
	if m == nil || len(m.list) == 0 {
		return 0
	}
	e := 2 * m.radius
	x0, y0, z0 := floor((p.X-m.radius)/e), floor((p.Y-m.radius)/e), floor((p.Z-m.radius)/e)
	var seen [8]int
	sum, reach := 0.0, float32(m.radius*m.radius)
	px, nn := f32(p), f32(n)
	thin := float32(flatness * m.radius)
	for k := range 8 {
		b := m.bucket(x0+k&1, y0+k>>1&1, z0+k>>2)
		again := false
		for _, s := range seen[:k] {
			again = again || s == b
		}
		seen[k] = b
		if again {
			continue
		}
		list := m.list[m.first[b]:m.first[b+1]]
		for i := range list {
			q := &list[i]
			dx, dy, dz := q.p[0]-px[0], q.p[1]-px[1], q.p[2]-px[2]
			if dx*dx+dy*dy+dz*dz > reach {
				continue
			}
			if off := dx*nn[0] + dy*nn[1] + dz*nn[2]; off > thin || off < -thin {
				continue
			}
			if q.n[0]*nn[0]+q.n[1]*nn[1]+q.n[2]*nn[2] > sameSide {
				sum += float64(q.flux)
			}
		}
	}
	return sum / (math.Pi * m.radius * m.radius)
}

func f32(v r3.Vec) [3]float32 { return [3]float32{float32(v.X), float32(v.Y), float32(v.Z)} }
