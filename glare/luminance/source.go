package luminance

import (
	"bufio"
	"bytes"
	"encoding/binary"
	"errors"
	"fmt"
	"io"
)

// source counts the bytes read, so that errors can say where they are, and
// never allocates more than what the file really holds: a length that a file
// claims is believed only as its bytes arrive.
type source struct {
	r   *bufio.Reader
	at  int64
	buf bytes.Buffer
}

func newSource(r io.Reader) *source { return &source{r: bufio.NewReader(r)} }

// fail returns a ParseError at the current byte.
func (s *source) fail(cause error, key, format string, args ...any) error {
	return &ParseError{Offset: s.at, Key: key, Problem: fmt.Sprintf(format, args...), Err: cause}
}

// bytes returns the next n bytes; they hold until the next call.
func (s *source) bytes(n int, key string) ([]byte, error) {
	s.buf.Reset()
	got, err := io.CopyN(&s.buf, s.r, int64(n))
	s.at += got
	if err != nil {
		return nil, s.cut(err, key, "%d of %d bytes", got, n)
	}
	return s.buf.Bytes(), nil
}

// cut turns the error of a read into a ParseError.
func (s *source) cut(err error, key, format string, args ...any) error {
	if errors.Is(err, io.EOF) || errors.Is(err, io.ErrUnexpectedEOF) {
		return s.fail(ErrTruncated, key, "file ends early: got "+format, args...)
	}
	return s.fail(err, key, "%v", err)
}

// skip passes over n bytes.
func (s *source) skip(n int64, key string) error {
	got, err := io.CopyN(io.Discard, s.r, n)
	s.at += got
	if err != nil {
		return s.cut(err, key, "%d of %d bytes", got, n)
	}
	return nil
}

// int32 reads a little-endian integer.
func (s *source) int32(key string) (int32, error) {
	b, err := s.bytes(4, key)
	if err != nil {
		return 0, err
	}
	return int32(binary.LittleEndian.Uint32(b)), nil
}

// text reads up to a zero byte, of which there must be one within limit bytes.
func (s *source) text(limit int, key string) (string, error) {
	var b []byte
	for {
		c, err := s.r.ReadByte()
		if err != nil {
			return "", s.cut(err, key, "no end of the text")
		}
		s.at++
		if c == 0 {
			return string(b), nil
		}
		if len(b) == limit {
			return "", s.fail(ErrMalformed, key, "got %q..., want at most %d characters", b[:min(16, len(b))], limit)
		}
		b = append(b, c)
	}
}
