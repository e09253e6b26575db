package surface

import (
	"context"
	"slices"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/materials/sampling"
	"squint/scene"
	"squint/scene/sky"
	"squint/trace"
	"squint/trace/parallel"
)

// Link says that light leaving diffusely from a texel side arrives: the
// receiving illuminance gains W times the sender's illuminance (reflectance
// and, for translucent finishes, transmittance are folded in).
type Link struct {
	Side int32
	W    float32
}

// PatchWeight is a Link from a sky patch: its mean luminance times W (sr)
// arrives as illuminance. Side holds the patch.
type PatchWeight = Link

// Rows holds, in compressed form, what each receiver of a batch gathers:
// links, sky patches and the endless ground. Receivers here are texel sides;
// sensors use the same form.
type Rows struct {
	linkStart  []int32
	links      []Link
	groundLink []Link // senders on the ground plane, reflectance not folded in
	groundFrom []int32
	patchStart []int32
	patches    []PatchWeight
	below      []float32 // sr of the endless ground seen
}

// Config sets how surface coefficients are computed.
type Config struct {
	Batches int // independent repetitions, at least 2
	// Samples is the number of rays from a texel side over all batches.
	Samples int
	// Photons is the number shot from the sun at mirrors, glossy surfaces and
	// panes at each moment, over all batches; 0 leaves that light out.
	Photons int
	Seed    uint64
	Workers int
	// Coarsen multiplies every texel edge; 1 where memory allows.
	Coarsen float64
	// Receivers are points of view and sensors; parts that they hardly see
	// are cut more coarsely. None: all parts alike.
	Receivers []r3.Vec
}

// portalShare is the share of a texel's rays that aim at openings.
const portalShare = 1.0 / 3

// Transport is the diffuse exchange of a scene: texel sides that matter to the
// receivers, and their rows in every batch.
type Transport struct {
	World   *trace.World
	Texels  *Texels
	Patches *sky.Patches
	Config  Config

	active []int32 // texel side -> dense index + 1, 0 where not (yet) active
	sides  []int32 // dense index -> texel side
	rows   []Rows  // by batch
	done   int
	near   neighbours
}

// NewTransport prepares the exchange; sides become active when a receiver
// asks for them by Activate, and Trace follows them up.
func NewTransport(w *trace.World, patches *sky.Patches, cfg Config) *Transport {
	if cfg.Coarsen < 1 {
		cfg.Coarsen = 1
	}
	t := &Transport{World: w, Patches: patches, Config: cfg}
	t.Texels = Cut(w, cfg.Coarsen, cellFactors(w, cfg.Receivers, cfg.Seed))
	t.active = make([]int32, 2*t.Texels.Len())
	t.rows = make([]Rows, cfg.Batches)
	for b := range t.rows {
		t.rows[b] = NewRows()
	}
	return t
}

// NewRows returns rows without receivers.
func NewRows() Rows {
	return Rows{linkStart: []int32{0}, groundFrom: []int32{0}, patchStart: []int32{0}}
}

// Len is the number of active texel sides.
func (t *Transport) Len() int { return len(t.sides) }

// side2 numbers the two sides of a texel.
func side2(texel int32, side materials.Side) int32 { return 2*texel + int32(side) }

// SideAt is the texel side of a landing, -1 where the surface has no texel.
func (t *Transport) SideAt(h *trace.Hit) int32 {
	k := t.Texels.At(h.Prim, h.Point)
	if k < 0 {
		return -1
	}
	return side2(k, h.Side)
}

// Activate marks texel sides as needed. Not for concurrent use.
func (t *Transport) Activate(sides []int32) {
	for _, s := range sides {
		if s >= 0 && t.active[s] == 0 {
			t.sides = append(t.sides, s)
			t.active[s] = int32(len(t.sides))
		}
	}
}

// Index is the dense index of a texel side, -1 where it is not active.
func (t *Transport) Index(side int32) int32 {
	if side < 0 {
		return -1
	}
	return t.active[side] - 1
}

// Side is the texel side of the dense index i, the inverse of Index: twice the
// texel, and one more for its back.
func (t *Transport) Side(i int32) int32 { return t.sides[i] }

// Part is the part of the active side i.
func (t *Transport) Part(i int32) int32 { return t.Texels.Part(t.sides[i] / 2) }

// Gathered is what one receiver's rays found in one batch, equal terms summed.
type Gathered struct {
	Links   []Link // Side is a texel side, not yet a dense index
	Patches []PatchWeight
	Below   float32
}

// wavePortion is the number of sides traced before their rows are stored.
const wavePortion = 4096

// Trace walks the rays of all active sides, and of those they reach, until no
// new side appears. progress, if not nil, hears of the sides done so far.
func (t *Transport) Trace(ctx context.Context, progress func(done, known int)) error {
	direct := len(t.sides)
	for t.done < len(t.sides) {
		// In portions, so that what is found and not yet compressed stays small.
		wave := t.sides[t.done:min(len(t.sides), t.done+wavePortion)]
		out := make([][]Gathered, len(wave))
		err := parallel.EachWith(ctx, t.Config.Workers, len(wave), func() func(int) {
			var found trace.Found
			return func(i int) { out[i] = t.traceSide(wave[i], &found) }
		})
		if err != nil {
			return err
		}
		t.done += len(wave)
		for _, rs := range out {
			for b := range rs {
				for _, l := range rs[b].Links {
					t.Activate([]int32{l.Side})
				}
				t.rows[b].Add(t, &rs[b])
			}
		}
		if progress != nil {
			progress(t.done, len(t.sides))
		}
	}
	t.dropDark(direct)
	t.near = t.findNeighbours()
	return nil
}

func (t *Transport) traceSide(side int32, found *trace.Found) []Gathered {
	cfg := t.Config
	out := make([]Gathered, cfg.Batches)
	k := side / 2
	per := max(cfg.Samples/cfg.Batches, 1)
	centre, n := t.Texels.Sample(k, 0.5, 0.5, 0.5)
	if side&1 == int32(materials.Back) {
		n = r3.Scale(-1, n)
	}
	portals := t.World.PortalsSeen(centre, n)
	nPortal := 0
	if !portals.Empty() {
		nPortal = int(float64(per) * portalShare)
	}
	// Rays start from several points of the texel, so that its illuminance is
	// its mean.
	const points = 4
	for b := range out {
		s := sampling.Stream4(cfg.Seed, streamTexel, uint64(side), uint64(b))
		found.Reset()
		for p := 0; p < points; p++ {
			pos, nn := t.Texels.Sample(k, s.Float64(), s.Float64(), (float64(p)+s.Float64())/points)
			if side&1 == int32(materials.Back) {
				nn = r3.Scale(-1, nn)
			}
			nc, np := share(per-nPortal, p, points), share(nPortal, p, points)
			t.gather(pos, nn, &portals, nc, np, &s, found)
		}
		// Each of the points gathers a full estimate.
		out[b] = t.Compress(found, t.Patches, 1.0/points)
	}
	return out
}

func (t *Transport) gather(pos, n r3.Vec, ps *trace.Portals, nc, np int, s *sampling.Stream, found *trace.Found) {
	t.World.Gather(pos, n, ps, max(nc, 1), np, s, found)
}

func share(total, i, parts int) int { return (total*(i+1))/parts - (total*i)/parts }

// streamTexel keeps the random streams of texels apart from those of
// receivers and of the sun.
const (
	streamTexel  = 1
	streamSun    = 2
	streamDisc   = 3
	streamLook   = 4
	streamPhoton = 5
	streamDivide = 6
)

// Compress sorts what was found by texel side and patch and sums equal ones.
// scale multiplies every weight.
func (t *Transport) Compress(f *trace.Found, patches *sky.Patches, scale float64) Gathered {
	var r Gathered
	for i := range f.Landings {
		l := &f.Landings[i]
		k := t.Texels.At(l.Hit.Prim, l.Hit.Point)
		if k < 0 {
			continue
		}
		for _, side := range []materials.Side{l.Hit.Side, 1 - l.Hit.Side} {
			rho, tau := l.Hit.BSDF.Lambert(side)
			m := rho
			if side != l.Hit.Side {
				m = tau
			}
			if m <= 0 {
				continue
			}
			if t.World.Scene.Parts[l.Hit.Part].Kind == scene.GroundPlane {
				m = 1 // the month decides, see Solve
			}
			// E = w L, L = m E'/pi.
			r.Links = append(r.Links, Link{side2(k, side), float32(l.Weight * m / pi * scale)})
		}
	}
	for i := range f.Exits {
		e := &f.Exits[i]
		w := float32(e.Weight * scale)
		if t.Hidden(e.Dir) {
			r.Below += w
			continue
		}
		r.Patches = append(r.Patches, PatchWeight{int32(patches.Index(e.Dir)), w})
	}
	r.Links = mergeLinks(sorted(r.Links))
	r.Patches = mergeLinks(sorted(r.Patches))
	return r
}

const pi = 3.14159265358979323846

// Hidden reports whether a direction looks at the endless ground or behind
// the horizon line instead of the sky.
func (t *Transport) Hidden(dir r3.Vec) bool {
	s := t.World.Scene
	return dir.Z <= 0 || (s.HasHorizon && s.Horizon.Hides(dir))
}

// sorted orders links by sender; the order of equal ones depends on the input
// alone, so sums come out the same on every run.
func sorted(l []Link) []Link {
	slices.SortFunc(l, func(a, b Link) int { return int(a.Side) - int(b.Side) })
	return l
}

func mergeLinks(l []Link) []Link {
	out := l[:0]
	for _, x := range l {
		if n := len(out); n > 0 && out[n-1].Side == x.Side {
			out[n-1].W += x.W
			continue
		}
		out = append(out, x)
	}
	return out
}

// Add appends one receiver; links are rewritten to dense indices.
func (r *Rows) Add(t *Transport, x *Gathered) {
	for _, l := range x.Links {
		d := Link{t.Index(l.Side), l.W}
		if d.Side < 0 {
			continue // dark
		}
		if t.World.Scene.Parts[t.Texels.Part(l.Side/2)].Kind == scene.GroundPlane {
			r.groundLink = append(r.groundLink, d)
		} else {
			r.links = append(r.links, d)
		}
	}
	r.linkStart = append(r.linkStart, int32(len(r.links)))
	r.groundFrom = append(r.groundFrom, int32(len(r.groundLink)))
	r.patches = append(r.patches, x.Patches...)
	r.patchStart = append(r.patchStart, int32(len(r.patches)))
	r.below = append(r.below, x.Below)
}
