package page

import (
	"crypto/sha256"
	"encoding/hex"
)

// Blob refers to packed numbers in the archive.
type Blob struct {
	ID    string `json:"id"`
	Parts []Part `json:"parts"`
}

// Part is one list of a blob. Lists follow each other; one of several bytes a
// number holds all lowest bytes first, then the next ones, which packs better.
type Part struct {
	Name string `json:"name"`
	Type string `json:"type"` // u8, i8, u16, i16, u32; z16: i16 as 0, -1, 1, -2, ... in u16
	N    int    `json:"n"`
}

// packer puts lists into a blob.
type packer struct {
	blob Blob
	data []byte
}

type whole interface {
	~uint8 | ~int8 | ~uint16 | ~int16 | ~uint32
}

func pack[T whole](p *packer, name, kind string, v []T) {
	bytes := map[string]int{"u8": 1, "i8": 1, "u16": 2, "i16": 2, "u32": 4}[kind]
	p.blob.Parts = append(p.blob.Parts, Part{name, kind, len(v)})
	for b := range bytes {
		for _, x := range v {
			p.data = append(p.data, byte(uint32(x)>>(8*b)))
		}
	}
}

// blobID names a blob by its bytes.
func blobID(data []byte) string {
	sum := sha256.Sum256(data)
	return hex.EncodeToString(sum[:8])
}

// packSmall packs numbers that are mostly near 0: their high bytes are all 0.
func packSmall(p *packer, name string, v []int16) {
	folded := make([]uint16, len(v))
	for i, x := range v {
		folded[i] = uint16(x<<1) ^ uint16(x>>15)
	}
	pack(p, name, "u16", folded)
	p.blob.Parts[len(p.blob.Parts)-1].Type = "z16"
}

// add closes the blob and stores it.
func (a *Archive) add(p *packer) Blob {
	p.blob.ID = blobID(p.data)
	a.blobs[p.blob.ID] = blobData{raw: p.data}
	return p.blob
}
