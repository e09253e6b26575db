package report

import (
	"errors"
	"io"

	sheet "squint/cmd/squint/internal/page"
	"squint/cmd/squint/internal/study"
)

// Names of the files in the results folder; pictures are in a folder of their
// own.
const (
	SummaryFile = "summary.json"
	ViewsFile   = "hours-views.csv"
	SensorsFile = "hours-sensors.csv"
	// openingsFile holds the sunlit share of each opening.
	openingsFile = "hours-openings.csv"
	PictureDir   = "worst-hour"
)

// Options are what the study does not know.
type Options struct {
	Version       string // of the program
	WeatherSHA256 string // of the weather file's bytes, hexadecimal; "" unknown
	// Variants are studies of the same project with finishes varied; nil for
	// none, and no file of them.
	Variants []Variant
}

// Write writes the results of a study to the folder dir, which it makes. On an
// error nothing has changed there, save for an error in the final renaming,
// which leaves whole files only. summary.json is renamed last and lists the
// others: what it does not list is not of this study.
func Write(dir string, r *study.Result, o Options) error {
	f, err := openFolder(dir)
	if err != nil {
		return err
	}
	if err := stageAll(f, r, o); err != nil {
		return errors.Join(err, f.abandon())
	}
	if err := f.commit(); err != nil {
		return errors.Join(err, f.abandon())
	}
	return nil
}

func stageAll(f *folder, r *study.Result, o Options) error {
	var files []string
	add := func(name string, write func(io.Writer) error) error {
		files = append(files, name)
		return f.stage(name, write)
	}
	pics, err := pictures(r, o)
	if err != nil {
		return err
	}
	for _, p := range pics {
		if err := add(p.file, p.write); err != nil {
			return err
		}
	}
	if len(r.Views) > 0 {
		if err := add(ViewsFile, func(w io.Writer) error { return writeViewHours(w, r) }); err != nil {
			return err
		}
	}
	if r.Scene.Sensors() > 0 {
		if err := add(SensorsFile, func(w io.Writer) error { return writeSensorHours(w, r) }); err != nil {
			return err
		}
	}
	if len(r.Openings) > 0 {
		if err := add(openingsFile, func(w io.Writer) error { return writeOpeningHours(w, r) }); err != nil {
			return err
		}
	}
	if o.Variants != nil {
		if err := add(sensitivityFile, func(w io.Writer) error { return writeSensitivity(w, r, o.Variants) }); err != nil {
			return err
		}
	}
	data := sheet.Build(r, sheetWords(r, o))
	if err := add(SheetDataFile, data.Write); err != nil {
		return err
	}
	return f.stage(SummaryFile, func(w io.Writer) error { return writeSummary(w, r, o, files) })
}
