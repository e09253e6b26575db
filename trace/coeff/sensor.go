package coeff

import (
	"squint/materials/sampling"
	"squint/scene"
	"squint/scene/sky"
	"squint/trace"
	"squint/trace/surface"
)

// sensorPortalShare is the share of a sensor's rays that aim at openings.
const sensorPortalShare = 0.5

// TraceSensor gathers the illuminance of one sensor: samples rays over all
// batches, each followed to the surfaces, patches and ground it meets, added
// as one row to every batch of rows, and what its rays met of glossy surfaces.
// index numbers the sensor for its streams.
func TraceSensor(t *surface.Transport, sn scene.Sensor, index, samples int, seed uint64, fine *sky.Patches, found *trace.Found) ([]surface.Gathered, [][]ShineSample) {
	batches := t.Config.Batches
	per := max(samples/batches, 2)
	portals := t.World.PortalsSeen(sn.Position, sn.Normal)
	nPortal := 0
	if !portals.Empty() {
		nPortal = int(float64(per) * sensorPortalShare)
	}
	out := make([]surface.Gathered, batches)
	shines := make([][]ShineSample, batches)
	for b := range out {
		s := sampling.Stream4(seed, streamSensor, uint64(index), uint64(b))
		found.Reset()
		t.World.Gather(sn.Position, sn.Normal, &portals, per-nPortal, nPortal, &s, found)
		out[b] = t.Compress(found, fine, 1)
		shines[b] = Shines(t.World, found, 1, nil)
	}
	return out, shines
}
