package luminance

import (
	"bytes"
	"errors"
	"io"
	"io/fs"
)

// Read reads an image file of any kind this package knows, which it tells by
// the first bytes. Errors are of type *ParseError with the file's name, or
// those of fsys.
func Read(fsys fs.FS, name string) (*Image, error) {
	f, err := fsys.Open(name)
	if err != nil {
		return nil, err
	}
	defer f.Close()
	var head [4]byte
	n, err := io.ReadFull(f, head[:])
	if err != nil && !errors.Is(err, io.ErrUnexpectedEOF) && !errors.Is(err, io.EOF) {
		return nil, err
	}
	r := io.MultiReader(bytes.NewReader(head[:n]), f)
	var im *Image
	switch {
	case string(head[:n]) == exrMagic:
		im, err = ReadEXR(r)
	case n > 1 && head[0] == 'P' && (head[1] == 'f' || head[1] == 'F'):
		im, err = ReadPFM(r)
	default:
		err = &ParseError{Problem: "got neither OpenEXR nor PFM; save the image as one of these", Err: ErrFormat}
	}
	var pe *ParseError
	if errors.As(err, &pe) {
		pe.File = name
	}
	return im, err
}
