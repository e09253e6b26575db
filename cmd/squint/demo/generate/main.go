// Command generate writes the files of the demo and of the starting project:
// geometry, project files and the invented year of weather.
//
// It is run by go generate in squint/cmd/squint/demo and takes the folder to
// write to, which holds files/, starter/ and year.epw.gz.
package main

import (
	"bytes"
	"compress/gzip"
	"fmt"
	"os"
	"path/filepath"
)

func main() {
	if len(os.Args) != 2 {
		fmt.Fprintln(os.Stderr, "usage: generate FOLDER")
		os.Exit(2)
	}
	if err := run(os.Args[1]); err != nil {
		fmt.Fprintln(os.Stderr, err)
		os.Exit(1)
	}
}

func run(folder string) error {
	files, err := texts()
	if err != nil {
		return err
	}
	year, err := inventedEPW()
	if err != nil {
		return err
	}
	if files["year.epw.gz"], err = zip(year); err != nil {
		return err
	}
	for name, data := range files {
		path := filepath.Join(folder, filepath.FromSlash(name))
		if err := os.MkdirAll(filepath.Dir(path), 0o755); err != nil {
			return err
		}
		if err := os.WriteFile(path, data, 0o644); err != nil {
			return err
		}
	}
	return nil
}

// texts are the files that are embedded as they stand, by their path below
// the demo's folder.
func texts() (map[string][]byte, error) {
	files := map[string][]byte{}
	for _, m := range []struct {
		obj    string
		solids []solid
		mtl    bool
	}{
		{"files/room.obj", officeSolids(), true},
		{"files/frames.obj", plainFrames(), false},
		{"files/frames-mouth.obj", mouthFrames(), false},
		{"files/shed.obj", shedSolids(), false},
		{"starter/room.obj", starterSolids(), true},
	} {
		library := ""
		if m.mtl {
			library = "room.mtl"
			files[filepath.ToSlash(filepath.Dir(m.obj))+"/room.mtl"] = writeMTL(m.solids)
		}
		files[m.obj] = writeOBJ(m.solids, library)
	}
	demo, err := demoProject()
	if err != nil {
		return nil, err
	}
	files["files/demo.toml"] = demo
	files["starter/project.toml"] = []byte(starterProject)
	return files, nil
}

func zip(data []byte) ([]byte, error) {
	var b bytes.Buffer
	z, err := gzip.NewWriterLevel(&b, gzip.BestCompression)
	if err != nil {
		return nil, err
	}
	if _, err := z.Write(data); err != nil {
		return nil, err
	}
	if err := z.Close(); err != nil {
		return nil, err
	}
	return b.Bytes(), nil
}
