package mesh

import (
	"bytes"
	"encoding/binary"
	"fmt"

	"github.com/hschendel/stl"
)

// Layout of a binary STL: 80 bytes of comment, a 32-bit count, and 50 bytes
// for each triangle. Source: 3D Systems (1989), see doc.go; from memory.
const (
	stlHeaderBytes   = 84
	stlTriangleBytes = 50
)

// readSTL tells binary from ASCII by size first, since the comment of a binary
// file may well start with "solid".
func readSTL(b *builder, data []byte) error {
	if n := stlRoom(data); n >= 0 && stlCount(data) == n {
		return readBinarySTL(b, data)
	}
	if stlIsText(data) {
		text, err := plainText(b.mesh.File, data)
		if err != nil {
			return err
		}
		return readASCIISTL(b, text)
	}
	return stlMismatch(b.mesh.File, data)
}

// stlRoom returns how many whole triangles fit in a binary file of this size,
// or -1 if not even its header does.
func stlRoom(data []byte) int64 {
	if len(data) < stlHeaderBytes {
		return -1
	}
	return int64(len(data)-stlHeaderBytes) / stlTriangleBytes
}

func stlCount(data []byte) int64 {
	return int64(binary.LittleEndian.Uint32(data[stlHeaderBytes-4:]))
}

// stlIsText reports whether data is text that starts with the word solid. The
// count in a binary file's header has a zero byte up to 16 million triangles.
func stlIsText(data []byte) bool {
	head := bytes.TrimPrefix(data, []byte("\xef\xbb\xbf"))
	if bytes.HasPrefix(head, []byte{0xff, 0xfe}) || bytes.HasPrefix(head, []byte{0xfe, 0xff}) {
		return bytes.Contains(head[:min(len(head), 512)], []byte("s\x00")) || bytes.Contains(head[:min(len(head), 512)], []byte("\x00s"))
	}
	if bytes.IndexByte(head[:min(len(head), 512)], 0) >= 0 {
		return false
	}
	s := stlScanner{data: head}
	return s.isWord(s.next(), "solid")
}

// stlMismatch explains why data is no STL file.
func stlMismatch(file string, data []byte) error {
	room := stlRoom(data)
	if room < 0 {
		return &ParseError{File: file, Err: ErrTruncated, Problem: fmt.Sprintf(
			"got %d bytes that do not start with \"solid\", want an ASCII STL or a binary one of at least %d bytes; export it again", len(data), stlHeaderBytes)}
	}
	count, want := stlCount(data), stlHeaderBytes+stlTriangleBytes*stlCount(data)
	e := &ParseError{File: file, Key: "triangle count"}
	const both = "it is neither a whole binary STL nor an ASCII one, which starts with \"solid\""
	if count > room {
		e.Err = ErrTruncated
		e.Problem = fmt.Sprintf("got %d in the header, which takes %d bytes, but the file has %d, room for %d; it was cut short, or %s; export it again",
			count, want, len(data), room, both)
	} else {
		e.Problem = fmt.Sprintf("got %d in the header, which takes %d bytes, but the file has %d, room for %d; the header is wrong, or %s; export it again",
			count, want, len(data), room, both)
	}
	return e
}

// readBinarySTL reads a file whose count agrees with its size.
func readBinarySTL(b *builder, data []byte) error {
	count := stlCount(data)
	whole := stlHeaderBytes + stlTriangleBytes*count
	if extra := int64(len(data)) - whole; extra > 0 {
		b.notef("%s after the last triangle ignored", plural(int(extra), "byte"))
	}
	sink := stlSink{builder: b}
	if count > 0 {
		sink.group = b.group(baseName(b.mesh.File))
		b.mesh.Triangles = make([]Triangle, 0, count)
	}
	if err := stl.CopyAll(bytes.NewReader(data[:whole]), &sink); err != nil {
		return &ParseError{File: b.mesh.File, Problem: "cannot read: " + err.Error(), Err: err}
	}
	return sink.err
}

// stlSink takes triangles from the library's reader.
type stlSink struct {
	*builder
	group int32
	read  int
	err   error
}

func (s *stlSink) SetName(string)          {}
func (s *stlSink) SetBinaryHeader([]byte)  {}
func (s *stlSink) SetASCII(bool)           {}
func (s *stlSink) SetTriangleCount(uint32) {}

// AppendTriangle keeps the first error; the library cannot be told of it.
func (s *stlSink) AppendTriangle(t stl.Triangle) {
	s.read++
	if s.err != nil {
		return
	}
	var v [3]struct{ x, y, z float64 }
	tri := Triangle{Group: s.group, Material: -1}
	for i, p := range t.Vertices {
		v[i].x, v[i].y, v[i].z = float64(p[0]), float64(p[1]), float64(p[2])
		var ok bool
		if tri.V[i], ok = s.point(v[i].x, v[i].y, v[i].z); !ok {
			s.err = &ParseError{File: s.mesh.File, Triangle: s.read, Key: "vertex",
				Problem: badPoint(v[i].x, v[i].y, v[i].z), Err: ErrNotFinite}
			return
		}
	}
	s.add(tri.V, tri.Group, tri.Material)
}
