package study

import (
	"bytes"
	"compress/flate"
	"crypto/sha256"
	"encoding/gob"
	"fmt"
	"sync"
)

// pack makes a record into bytes that begin with their own SHA-256.
func pack(record any) ([]byte, error) {
	var b bytes.Buffer
	b.Write(make([]byte, sha256.Size))
	w, err := flate.NewWriter(&b, flate.BestSpeed)
	if err != nil {
		return nil, err
	}
	if err := gob.NewEncoder(w).Encode(record); err != nil {
		return nil, err
	}
	if err := w.Close(); err != nil {
		return nil, err
	}
	sum := sha256.Sum256(b.Bytes()[sha256.Size:])
	copy(b.Bytes(), sum[:])
	return b.Bytes(), nil
}

// unpack fills a record; false where the bytes are not as pack made them.
func unpack(data []byte, record any) bool {
	if len(data) < sha256.Size || sha256.Sum256(data[sha256.Size:]) != [sha256.Size]byte(data) {
		return false
	}
	return gob.NewDecoder(flate.NewReader(bytes.NewReader(data[sha256.Size:]))).Decode(record) == nil
}

// load reads a record; name is its field for the key, by which a foreign
// record is known. What is not good leaves the record empty but for its key.
func load[T any](s *shelf, key string, record *T, name *string) {
	if data, ok := s.opt.Store.Load(key); ok && !(unpack(data, record) && *name == key) {
		var empty T
		*record = empty
	}
	*name = key
}

// save keeps a record and turns it into what a later run will read: packing
// does not tell -0 from 0. A full disk is no reason to lose the run. Records are
// packed side by side; one at a time holds the store and the result's notes.
func save[T any](s *shelf, key string, record *T, r *Result, one *sync.Mutex) {
	data, err := pack(record)
	if err == nil {
		var read T
		if unpack(data, &read) {
			*record = read
		}
	}
	one.Lock()
	defer one.Unlock()
	if err == nil {
		err = s.opt.Store.Save(key, data)
	}
	if err != nil {
		r.Notes = once(r.Notes, fmt.Sprintf("results could not be kept for the next run: %v.", err))
	}
}
