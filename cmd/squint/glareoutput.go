package main

import (
	"fmt"
	"io"
	"path/filepath"
	"strings"

	"squint/cmd/squint/internal/report"
	"squint/glare/falsecolour"
)

// largestPicture is the widest picture of one image, pixels. Own choice: what
// a screen shows.
const largestPicture = 1200

// glareFiles are the files that --out writes: a picture of each image, one
// sheet of several, and the tables.
func glareFiles(images []*report.Image, format string, over report.Overlay) []exportFile {
	scale := report.ImagesScale(images)
	var files []exportFile
	for i, name := range pictureNames(images) {
		files = append(files, exportFile{name + "." + format, "false-colour pictures", func(w io.Writer) error {
			picture, err := falsecolour.Render(report.ImageFigure(images[i], scale, over, largestPicture))
			if err != nil {
				return err
			}
			return falsecolour.Encode(w, picture, format)
		}})
	}
	if len(images) > 1 {
		files = append(files, exportFile{"sheet." + format, "sheet." + format + ": all on one scale", func(w io.Writer) error {
			picture, err := report.ImagesSheet(images, scale, over)
			if err != nil {
				return err
			}
			return falsecolour.Encode(w, picture, format)
		}})
	}
	return append(files,
		exportFile{"glare.json", "glare.json: every number", func(w io.Writer) error { return report.ImagesJSON(w, images) }},
		exportFile{"glare.csv", "glare.csv: a row for each image", func(w io.Writer) error { return report.ImagesCSV(w, images) }},
		exportFile{"sources.csv", "sources.csv: a row for each source", func(w io.Writer) error { return report.SourcesCSV(w, images) }})
}

// pictureNames are the images' names without ending, numbered where they are
// the same, also to file systems that do not tell capitals apart.
func pictureNames(images []*report.Image) []string {
	taken := map[string]bool{"sheet": true, "glare": true, "sources": true}
	var names []string
	for _, im := range images {
		base := filepath.Base(im.File)
		base = strings.TrimSuffix(base, filepath.Ext(base))
		name := base
		for k := 2; taken[strings.ToLower(name)]; k++ {
			name = fmt.Sprintf("%s-%d", base, k)
		}
		taken[strings.ToLower(name)] = true
		names = append(names, name)
	}
	return names
}
