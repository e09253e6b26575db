package page

import (
	"archive/zip"
	"bytes"
	"compress/flate"
	"encoding/json"
	"fmt"
	"io"
	"slices"
	"strings"
)

// Schema names the archive's layout; a reader refuses others.
const (
	Schema        = "squint page data"
	SchemaVersion = 2
)

// designFile holds the texts; blobs are in blobDir.
const (
	designFile = "design.json"
	blobDir    = "numbers/"
)

// Archive is one design, ready to be put into a page.
type Archive struct {
	Design Design
	blobs  map[string]blobData
}

type blobData struct {
	raw    []byte // nil where only deflated is known
	packed []byte // deflated; nil until it is asked for
}

// Write writes the archive as a zip file. The same design gives the same
// bytes.
func (a *Archive) Write(w io.Writer) error {
	z := zip.NewWriter(w)
	z.RegisterCompressor(zip.Deflate, func(w io.Writer) (io.WriteCloser, error) {
		return flate.NewWriter(w, flate.BestCompression)
	})
	text, err := json.Marshal(a.Design)
	if err != nil {
		return err
	}
	if err := put(z, designFile, text); err != nil {
		return err
	}
	ids := make([]string, 0, len(a.blobs))
	for id := range a.blobs {
		ids = append(ids, id)
	}
	slices.Sort(ids)
	for _, id := range ids {
		raw := a.blobs[id].raw
		if packed := a.blobs[id].packed; raw == nil && packed != nil {
			if raw, err = inflate(id, packed); err != nil {
				return err
			}
		}
		if err := put(z, blobDir+id, raw); err != nil {
			return err
		}
	}
	return z.Close()
}

func put(z *zip.Writer, name string, data []byte) error {
	f, err := z.CreateHeader(&zip.FileHeader{Name: name, Method: zip.Deflate})
	if err != nil {
		return err
	}
	_, err = f.Write(data)
	return err
}

// mostText and mostNumbers bound what an archive may claim for its texts, and
// for one list of numbers.
const (
	mostText    = 256 << 20
	mostNumbers = 64 << 20
)

// Read reads an archive. name is for messages.
func Read(name string, r io.ReaderAt, size int64) (*Archive, error) {
	z, err := zip.NewReader(r, size)
	if err != nil {
		return nil, fmt.Errorf("%s: got no zip file of page data (%w); run squint check again", name, err)
	}
	a := &Archive{blobs: map[string]blobData{}}
	var found bool
	for _, f := range z.File {
		id, isBlob := strings.CutPrefix(f.Name, blobDir)
		switch {
		case f.Name == designFile:
			found = true
			err = a.readDesign(f)
		case isBlob:
			err = a.readBlob(id, f)
		}
		if err != nil {
			return nil, fmt.Errorf("%s: %s: %w; run squint check again", name, f.Name, err)
		}
	}
	if !found {
		return nil, fmt.Errorf("%s: got no %s in it, want one; run squint check again", name, designFile)
	}
	if a.Design.Schema != Schema || a.Design.SchemaVersion != SchemaVersion {
		return nil, fmt.Errorf("%s: got %q version %d, want %q version %d; run squint check again with this program",
			name, a.Design.Schema, a.Design.SchemaVersion, Schema, SchemaVersion)
	}
	return a, nil
}

func (a *Archive) readDesign(f *zip.File) error {
	in, err := f.Open()
	if err != nil {
		return err
	}
	defer in.Close()
	return json.NewDecoder(io.LimitReader(in, mostText)).Decode(&a.Design)
}

func (a *Archive) readBlob(id string, f *zip.File) error {
	if f.Method != zip.Deflate {
		return fmt.Errorf("got method %d, want deflate", f.Method)
	}
	in, err := f.OpenRaw()
	if err != nil {
		return err
	}
	packed, err := io.ReadAll(in)
	if err != nil {
		return err
	}
	if _, err := inflate(id, packed); err != nil {
		return err
	}
	a.blobs[id] = blobData{packed: packed}
	return nil
}

// inflate unpacks a blob, whose name must be that of its bytes.
func inflate(id string, packed []byte) ([]byte, error) {
	raw, err := io.ReadAll(io.LimitReader(flate.NewReader(bytes.NewReader(packed)), mostNumbers+1))
	switch {
	case err != nil:
		return nil, fmt.Errorf("got damaged numbers: %w", err)
	case len(raw) > mostNumbers:
		return nil, fmt.Errorf("got numbers of more than %d MiB", mostNumbers>>20)
	case blobID(raw) != id:
		return nil, fmt.Errorf("got numbers of the name %q, want %s, as their bytes give", id, blobID(raw))
	}
	return raw, nil
}
