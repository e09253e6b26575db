package demo

import (
	"bytes"
	"compress/gzip"
	"embed"
	"io"
	"io/fs"
)

// Names of the project files within FS and Starter.
const (
	Project        = "demo.toml"
	StarterProject = "project.toml"
)

//go:embed files starter
var embedded embed.FS

// The year is 1.8 MB of text, a fourteenth of that packed.
//
//go:embed year.epw.gz
var packedYear []byte

// unpackYear takes some milliseconds; nobody opens the file often.
func unpackYear() ([]byte, error) {
	z, err := gzip.NewReader(bytes.NewReader(packedYear))
	if err != nil {
		return nil, err
	}
	return io.ReadAll(z)
}

// FS is the demo's folder: the project file named Project and what it refers
// to.
func FS() fs.FS { return folder{"files", "skerrow.epw"} }

// Starter is a folder to start from: the project file named StarterProject,
// room.obj, room.mtl and site.epw.
func Starter() fs.FS { return folder{"starter", "site.epw"} }
