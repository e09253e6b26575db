// Command generate draws the pictures of the guide: for every project of the
// gallery the window from indoors and from outdoors, at one moment of the
// invented year, in one scale.
//
// It is run by go generate in squint/cmd/squint/guide and takes the folder of
// the gallery and the folder to write to.
package main

import (
	"context"
	"fmt"
	"image/png"
	"io/fs"
	"os"
	"path/filepath"
	"runtime"
	"strings"

	"squint/cmd/squint/demo"
	"squint/cmd/squint/internal/study"
	"squint/glare/falsecolour"
	"squint/scene/project"
	"squint/scene/view"
	"squint/trace/picture"
)

func main() {
	if len(os.Args) != 3 {
		fmt.Fprintln(os.Stderr, "usage: generate GALLERY FOLDER")
		os.Exit(2)
	}
	if err := run(os.Args[1], os.Args[2]); err != nil {
		fmt.Fprintln(os.Stderr, err)
		os.Exit(1)
	}
}

// gallery is the folder of projects with the year that they name.
type gallery struct{ fs.FS }

func (g gallery) Open(name string) (fs.File, error) {
	if name == "weather.epw" {
		return demo.Starter().Open("site.epw")
	}
	return g.FS.Open(name)
}

func run(from, to string) error {
	files := gallery{os.DirFS(from)}
	names, err := fs.Glob(files, "*.toml")
	if err != nil {
		return err
	}
	for _, name := range names {
		if err := draw(files, name, filepath.Join(to, strings.TrimSuffix(name, ".toml")+".png")); err != nil {
			return fmt.Errorf("%s: %w", name, err)
		}
		fmt.Println(name)
	}
	return nil
}

func draw(files fs.FS, name, to string) error {
	p, err := project.Load(files, name)
	if err != nil {
		return err
	}
	eye := func(name string, position, toward [3]float64) project.Viewpoint {
		return project.Viewpoint{Name: name, PositionM: position, TowardM: &toward}
	}
	p.Viewpoints = []project.Viewpoint{
		eye("from indoors", [3]float64{2.9, 4.4, 1.5}, [3]float64{1.9, -0.3, 1.75}),
		eye("from outdoors", [3]float64{-0.4, -3.6, 2.9}, [3]float64{2.1, -0.3, 1.75}),
	}
	o := study.LookOptions{AllViews: true, Projection: view.Perspective, FOVDeg: 62, Width: 320, Height: 256, Workers: runtime.NumCPU(),
		When: []study.When{study.AtHour(study.ClockTime{Month: 3, Day: 21, Hour: 10, Minute: 30})}}
	shots, err := study.TakeAll(context.Background(), files, []study.Design{{Project: p}}, o, picture.Options{Samples: 16})
	if err != nil {
		return err
	}
	var figures []falsecolour.Figure
	for _, s := range shots {
		figures = append(figures, falsecolour.Figure{
			Width: s.Picture.Width, Height: s.Picture.Height, Values: s.Picture.Mean, Smooth: true, MinWidthPx: 320,
			Map: falsecolour.Inferno, Scale: falsecolour.Scale{Min: 50, Max: 20000, Log: true, Quantity: "Luminance", Unit: "cd/m2"},
			Title: s.Name,
		})
	}
	sheet, err := falsecolour.Sheet(p.Title, []string{"Invented office and year, 21 March, 10:30 h."}, 2, figures...)
	if err != nil {
		return err
	}
	f, err := os.Create(to)
	if err != nil {
		return err
	}
	defer f.Close()
	if err := (&png.Encoder{CompressionLevel: png.BestCompression}).Encode(f, sheet); err != nil {
		return err
	}
	return f.Close()
}
