package demo

import (
	"bytes"
	"io"
	"io/fs"
	"slices"
	"strings"
	"time"
)

// folder is an embedded folder without subfolders to which the unpacked year
// is added under a name.
type folder struct{ dir, yearName string }

// Open implements fs.FS.
func (f folder) Open(name string) (fs.File, error) {
	if !fs.ValidPath(name) {
		return nil, &fs.PathError{Op: "open", Path: name, Err: fs.ErrInvalid}
	}
	switch name {
	case ".":
		list, err := f.list()
		if err != nil {
			return nil, err
		}
		return &openFolder{list: list}, nil
	case f.yearName:
		data, err := unpackYear()
		if err != nil {
			return nil, &fs.PathError{Op: "open", Path: name, Err: err}
		}
		return &openYear{Reader: bytes.NewReader(data), info: yearInfo{name, int64(len(data))}}, nil
	}
	file, err := embedded.Open(f.dir + "/" + name)
	if err != nil {
		return nil, &fs.PathError{Op: "open", Path: name, Err: fs.ErrNotExist}
	}
	return file, nil
}

func (f folder) list() ([]fs.DirEntry, error) {
	list, err := fs.ReadDir(embedded, f.dir)
	if err != nil {
		return nil, err
	}
	data, err := unpackYear()
	if err != nil {
		return nil, &fs.PathError{Op: "open", Path: f.yearName, Err: err}
	}
	list = append(list, fs.FileInfoToDirEntry(yearInfo{f.yearName, int64(len(data))}))
	slices.SortFunc(list, func(a, b fs.DirEntry) int { return strings.Compare(a.Name(), b.Name()) })
	return list, nil
}

// openYear is the weather file, opened.
type openYear struct {
	*bytes.Reader
	info yearInfo
}

func (f *openYear) Stat() (fs.FileInfo, error) { return f.info, nil }
func (f *openYear) Close() error               { return nil }

type yearInfo struct {
	name string
	size int64
}

func (i yearInfo) Name() string       { return i.name }
func (i yearInfo) Size() int64        { return i.size }
func (i yearInfo) Mode() fs.FileMode  { return 0o444 }
func (i yearInfo) ModTime() time.Time { return time.Time{} }
func (i yearInfo) IsDir() bool        { return false }
func (i yearInfo) Sys() any           { return nil }

// openFolder is the folder itself, opened; at counts the entries already read.
type openFolder struct {
	list []fs.DirEntry
	at   int
}

func (f *openFolder) Stat() (fs.FileInfo, error) { return rootInfo{}, nil }
func (f *openFolder) Close() error               { return nil }

func (f *openFolder) Read([]byte) (int, error) {
	return 0, &fs.PathError{Op: "read", Path: ".", Err: fs.ErrInvalid}
}

// ReadDir implements fs.ReadDirFile.
func (f *openFolder) ReadDir(n int) ([]fs.DirEntry, error) {
	left := len(f.list) - f.at
	if n > 0 && left == 0 {
		return nil, io.EOF
	}
	if n <= 0 || n > left {
		n = left
	}
	some := slices.Clone(f.list[f.at : f.at+n])
	f.at += n
	return some, nil
}

type rootInfo struct{}

func (rootInfo) Name() string       { return "." }
func (rootInfo) Size() int64        { return 0 }
func (rootInfo) Mode() fs.FileMode  { return fs.ModeDir | 0o555 }
func (rootInfo) ModTime() time.Time { return time.Time{} }
func (rootInfo) IsDir() bool        { return true }
func (rootInfo) Sys() any           { return nil }
