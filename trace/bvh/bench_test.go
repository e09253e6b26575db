package bvh

import (
	"encoding/binary"
	"fmt"
	"maps"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

// benchScene is a set of triangles and the kinds of rays to shoot at it.
type benchScene struct {
	name string
	tris []Triangle
	rays map[string][]testRay
}

// benchScenes reads every NAME.tri with its NAME.KIND.ray in the folder that
// the environment variable SQUINT_RAYS names: little-endian float32, nine to a
// triangle (v0 v1 v2), eight to a ray (origin, tmin, direction, tmax). Without
// it, it makes rooms of its own.
func benchScenes(b *testing.B) []benchScene {
	dir := os.Getenv("SQUINT_RAYS")
	var scenes []benchScene
	if dir == "" {
		for _, n := range []int{5_000, 100_000} {
			tris := office(n)
			rays := officeRays(Build(tris, Config{}), tris, 20000)
			scenes = append(scenes, benchScene{fmt.Sprintf("office-%dk", n/1000), tris, rays})
		}
		return scenes
	}
	files, err := filepath.Glob(filepath.Join(dir, "*.tri"))
	if err != nil || len(files) == 0 {
		b.Fatalf("SQUINT_RAYS=%s: no .tri files, %v", dir, err)
	}
	for _, f := range files {
		name := strings.TrimSuffix(f, ".tri")
		s := benchScene{name: filepath.Base(name), rays: map[string][]testRay{}}
		x := floats(b, f)
		s.tris = make([]Triangle, len(x)/9)
		for i := range s.tris {
			for j, c := range x[9*i : 9*i+9] {
				s.tris[i][j/3][j%3] = c
			}
		}
		rays, _ := filepath.Glob(name + ".*.ray")
		for _, rf := range rays {
			kind := strings.TrimSuffix(strings.TrimPrefix(rf, name+"."), ".ray")
			x := floats(b, rf)
			rs := make([]testRay, len(x)/8)
			for i := range rs {
				y := x[8*i:]
				rs[i] = testRay{[3]float32(y[0:3]), y[3], [3]float32(y[4:7]), y[7]}
			}
			s.rays[kind] = rs
		}
		scenes = append(scenes, s)
	}
	return scenes
}

func floats(b *testing.B, file string) []float32 {
	data, err := os.ReadFile(file)
	if err != nil {
		b.Fatal(err)
	}
	x := make([]float32, len(data)/4)
	for i := range x {
		x[i] = math.Float32frombits(binary.LittleEndian.Uint32(data[4*i:]))
	}
	return x
}

// report gives millions of items per CPU second of the process.
func report(b *testing.B, items int, seconds float64, unit string) {
	b.ReportMetric(float64(items)*float64(b.N)/seconds/1e6, unit)
}

func BenchmarkBuild(b *testing.B) {
	for _, s := range benchScenes(b) {
		for _, w := range []int{1, 0} {
			b.Run(fmt.Sprintf("%s/workers-%d", s.name, w), func(b *testing.B) {
				start := cpuSeconds()
				for b.Loop() {
					Build(s.tris, Config{Workers: w})
				}
				report(b, len(s.tris), cpuSeconds()-start, "Mtris/cpu-s")
			})
		}
	}
}

func benchRays(b *testing.B, shoot func(t *Tree, r *testRay) bool) {
	for _, s := range benchScenes(b) {
		trees := twins(Build(s.tris, Config{}))
		for _, kind := range slices.Sorted(maps.Keys(s.rays)) {
			rays := s.rays[kind]
			for _, kernel := range slices.Sorted(maps.Keys(trees)) {
				tree := trees[kernel]
				b.Run(s.name+"/"+kind+"/"+kernel, func(b *testing.B) {
					hits := 0
					start := cpuSeconds()
					for b.Loop() {
						hits = 0
						for i := range rays {
							if shoot(tree, &rays[i]) {
								hits++
							}
						}
					}
					report(b, len(rays), cpuSeconds()-start, "Mrays/cpu-s")
					b.ReportMetric(float64(hits)/float64(len(rays)), "hits/ray")
				})
			}
		}
	}
}

func BenchmarkClosest(b *testing.B) {
	benchRays(b, func(t *Tree, r *testRay) bool {
		return t.Closest(r.org, r.dir, r.tmin, r.tmax).Prim >= 0
	})
}

func BenchmarkOccluded(b *testing.B) {
	benchRays(b, func(t *Tree, r *testRay) bool {
		return t.Occluded(r.org, r.dir, r.tmin, r.tmax)
	})
}
