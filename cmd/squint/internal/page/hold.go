package page

import (
	"bytes"
	"compress/flate"
	"encoding/ascii85"
	"fmt"
	"strings"
)

// blobBlock is how a page holds a blob: its name, then the text of it deflated.
const blobBlock = "<script type=\"application/json\" id=\"n-%s\">\"%s\"</script>\n"

// asText writes bytes in base 85, four in five characters, which takes 6 % less
// than base 64. What JSON or HTML would read otherwise, and the sign for four
// zeros, are written in characters that base 85 leaves free.
func asText(packed []byte) []byte {
	out := make([]byte, ascii85.MaxEncodedLen(len(packed)))
	out = out[:ascii85.Encode(out, packed)]
	for i, c := range out {
		if k := strings.IndexByte(taken, c); k >= 0 {
			out[i] = free[k]
		}
	}
	return out
}

// taken are the characters that are replaced, free what stands for them.
const (
	taken = "\"\\<&"
	free  = "vwxy"
)

// How large a page may become by its pictures of any hour: so much for each
// viewpoint of each design, within limits. Own choice.
const (
	bytesByView = 64e3
	leastPage   = 3.9e6
	mostPage    = 38e6
)

// wholeSteps is how many steps of patterns pictures at full size must have room
// for; else those of the designs that are not chosen are the small ones. Own choice.
const wholeSteps = 2

// heldBlob is a blob that goes into the page.
type heldBlob struct {
	id     string
	packed []byte
}

// hold chooses the blobs that the page holds, in a fixed order. written is the
// page's size without them. All is held but pictures of any hour: of these each
// design gets the first patterns, then all get more in turn, the chosen one
// first, as long as the page does not become too large. Where it would with all
// of them, the other designs' are the small ones.
func hold(all []*Archive, chosen, written int) (out []heldBlob, err error) {
	has := map[string]bool{}
	take := func(a *Archive, ids []string) (list []heldBlob, size int, err error) {
		seen := map[string]bool{}
		for _, id := range ids {
			if id == "" || has[id] || seen[id] {
				continue
			}
			seen[id] = true
			packed, err := a.deflated(id)
			if err != nil {
				return nil, 0, err
			}
			list = append(list, heldBlob{id, packed})
			size += len(blobBlock) + len(id) + ascii85.MaxEncodedLen(len(packed))
		}
		return list, size, nil
	}
	put := func(list []heldBlob, size int) {
		for _, b := range list {
			has[b.id] = true
		}
		out, written = append(out, list...), written+size
	}
	views := 0
	for _, a := range all {
		list, size, err := take(a, a.needed())
		if err != nil {
			return nil, err
		}
		put(list, size)
		views += len(a.Design.Views)
	}
	budget := int(min(mostPage, max(leastPage, bytesByView*float64(views))))
	order := []int{chosen}
	for i := range all {
		if i != chosen {
			order = append(order, i)
		}
	}
	whole := written // with the first patterns of all, at full size
	for _, i := range order {
		for step := range wholeSteps {
			_, size, err := take(all[i], all[i].pictures(step, false))
			if err != nil {
				return nil, err
			}
			whole += size
		}
	}
	full := map[int]bool{}
	for step, more := 0, true; more; step++ {
		more = false
		for _, i := range order {
			ids := all[i].pictures(step, whole > budget && i != chosen)
			if full[i] || len(ids) == 0 {
				continue
			}
			list, size, err := take(all[i], ids)
			if err != nil {
				return nil, err
			}
			if full[i] = written+size > budget; !full[i] {
				put(list, size)
				more = true
			}
		}
	}
	return out, nil
}

// needed lists the blobs without which the page cannot be.
func (a *Archive) needed() []string {
	d := &a.Design
	list := []string{d.Records.ID, d.Days.ID, d.Moments.ID, d.Room.Fabric.Numbers.ID}
	for i := range d.Room.Systems {
		list = append(list, d.Room.Systems[i].Numbers.ID)
	}
	for i := range d.Planes {
		list = append(list, d.Planes[i].Points.ID, d.Planes[i].Mean.ID)
	}
	for i := range d.Views {
		v := &d.Views[i]
		list = append(list, v.Series.ID, v.WorstShot.ID)
		for k := range v.Seen {
			list = append(list, v.Seen[k].ID)
		}
	}
	return list
}

// pictures lists the blobs of one step of all pictures of any hour, of views the
// small ones where there are; none where there is no such step.
func (a *Archive) pictures(step int, small bool) (list []string) {
	add := func(s *Shots) {
		if step >= len(s.Steps) {
			return
		}
		if step == 0 {
			list = append(list, s.Numbers.ID)
		}
		list = append(list, s.Steps[step].Numbers.ID)
	}
	for i := range a.Design.Planes {
		add(&a.Design.Planes[i].Shots)
	}
	for i := range a.Design.Views {
		v := &a.Design.Views[i]
		if small && len(v.Small.Steps) > 0 {
			add(&v.Small)
		} else {
			add(&v.Shots)
		}
	}
	return list
}

// deflated is a blob as the zip file holds it.
func (a *Archive) deflated(id string) ([]byte, error) {
	b, ok := a.blobs[id]
	if !ok {
		return nil, fmt.Errorf("page data: numbers %q are missing; run squint check again", id)
	}
	if b.packed != nil {
		return b.packed, nil
	}
	var out bytes.Buffer
	z, err := flate.NewWriter(&out, flate.BestCompression)
	if err != nil {
		return nil, err
	}
	if _, err := z.Write(b.raw); err != nil {
		return nil, err
	}
	if err := z.Close(); err != nil {
		return nil, err
	}
	b.packed = out.Bytes()
	a.blobs[id] = b
	return b.packed, nil
}
