package mesh

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"path"
	"strings"
)

// DefaultMaxBytes is the size from which a file is refused unless Options say
// otherwise: 512 MiB, some 10 million triangles of a binary STL.
const DefaultMaxBytes = 512 << 20

// Options say what a mesh file does not.
type Options struct {
	Unit     Unit  // length unit of the file; must be stated
	Up       Axis  // axis of the file that points up; must be stated
	MaxBytes int64 // largest file read, in bytes, MTL files included; 0 means DefaultMaxBytes
}

// Read reads the STL or OBJ file called name, by its extension, upper or lower
// case. The result is in metres with z up and has at least one triangle.
//
// Errors: no unit or axis stated; an error of the file system; ErrUnsupported,
// ErrTooLarge, ErrTruncated, ErrNoTriangles or ErrNotFinite inside a
// *ParseError; a *ParseError for all else that is wrong in the file. A missing
// MTL file is no error, see Mesh.MissingMTL.
func Read(fsys fs.FS, name string, opt Options) (*Mesh, error) {
	switch {
	case !opt.Unit.known():
		return nil, fmt.Errorf("%s: unit: got none, want \"m\", \"cm\", \"mm\", \"ft\" or \"in\"; a mesh file does not say it", name)
	case opt.Up != Y && opt.Up != Z:
		return nil, fmt.Errorf("%s: up: got none, want \"y\" or \"z\"; a mesh file does not say it", name)
	case opt.MaxBytes < 0:
		return nil, fmt.Errorf("%s: largest file size: got %d bytes, want 0 (for %d) or more", name, opt.MaxBytes, int64(DefaultMaxBytes))
	case opt.MaxBytes == 0:
		opt.MaxBytes = DefaultMaxBytes
	}
	var parse func(*builder, []byte) error
	switch strings.ToLower(path.Ext(name)) {
	case ".stl":
		parse = readSTL
	case ".obj":
		parse = func(b *builder, data []byte) error { return readOBJ(b, fsys, opt.MaxBytes, data) }
	default:
		return nil, &ParseError{File: name, Err: ErrUnsupported,
			Problem: fmt.Sprintf("got the extension %q, want .stl or .obj; export the model as one of these", path.Ext(name))}
	}
	data, err := readCapped(fsys, name, opt.MaxBytes)
	if err != nil {
		return nil, err
	}
	b := newBuilder(name, opt)
	if err := parse(b, data); err != nil {
		return nil, err
	}
	return b.finish()
}

// readCapped returns the whole file, or an error if it is larger than limit.
func readCapped(fsys fs.FS, name string, limit int64) ([]byte, error) {
	f, err := fsys.Open(name)
	if err != nil {
		return nil, fmt.Errorf("mesh file: %w", err)
	}
	defer f.Close()
	tooLarge := &ParseError{File: name, Err: ErrTooLarge,
		Problem: fmt.Sprintf("got a file of more than %d bytes, want at most that; simplify the model or split it into several meshes", limit)}
	var buf bytes.Buffer
	if info, err := f.Stat(); err == nil {
		if info.IsDir() {
			return nil, &ParseError{File: name, Problem: "got a folder, want a mesh file", Err: ErrUnsupported}
		}
		if info.Size() > limit {
			return nil, tooLarge
		}
		buf.Grow(int(info.Size()) + bytes.MinRead)
	}
	if _, err := io.Copy(&buf, io.LimitReader(f, limit+1)); err != nil {
		var pathErr *fs.PathError
		if errors.As(err, &pathErr) {
			return nil, fmt.Errorf("mesh file: %w", err)
		}
		return nil, fmt.Errorf("mesh file: read %s: %w", name, err)
	}
	if int64(buf.Len()) > limit {
		return nil, tooLarge
	}
	return buf.Bytes(), nil
}

// plainText removes a UTF-8 byte order mark and turns lone carriage returns,
// the line ends of old files, into line feeds. UTF-16 is refused.
func plainText(file string, data []byte) ([]byte, error) {
	if bytes.HasPrefix(data, []byte{0xff, 0xfe}) || bytes.HasPrefix(data, []byte{0xfe, 0xff}) {
		return nil, &ParseError{File: file, Problem: "got UTF-16 text, want UTF-8 or ASCII; save the file in that encoding"}
	}
	data = bytes.TrimPrefix(data, []byte("\xef\xbb\xbf"))
	if bytes.IndexByte(data, '\n') < 0 && bytes.IndexByte(data, '\r') >= 0 {
		data = bytes.ReplaceAll(data, []byte{'\r'}, []byte{'\n'})
	}
	return data, nil
}
