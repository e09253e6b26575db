package report

import (
	"io"
	"strings"

	"squint/cmd/squint/internal/study"
	"squint/cmd/squint/internal/sunpath"
)

// SunPathPlace names project, design and place of a sun path.
func SunPathPlace(in *study.Input) string {
	p, site := in.Project, in.Climate.Year.Site
	text := plain(title(p, newPaths(p, in.Scene)))
	if p.Alternative != "" {
		text += `, design "` + plain(p.Alternative) + `"`
	}
	text += ", " + coordinate(site.LatitudeDeg, "N", "S") + ", " + coordinate(site.LongitudeDeg, "E", "W")
	if Invented(in) {
		text += ", " + inventedWords
	}
	return text
}

// Invented reports whether project or weather are no real ones.
func Invented(in *study.Input) bool { return invented(in.Project, in.Climate.Year) }

// SunPath prints when the sun gets to a point: the finding, the minutes a day,
// and the files that were written.
func SunPath(w io.Writer, in *study.Input, y *sunpath.Year, notes []string, files [][2]string, folder string) error {
	var p page
	p.head("When the sun gets to " + y.Input.Point.Name)
	p.para(0, SunPathPlace(in))
	p.gap()
	p.para(0, y.Finding())
	for _, text := range append([]string{y.View(), y.Weather(), y.Clock(), y.Caution()}, notes...) {
		if text != "" {
			p.para(0, text)
		}
	}
	p.gap()
	var table strings.Builder
	if err := y.WriteTable(&table); err != nil {
		return err
	}
	p.b.WriteString(table.String())
	p.gap()
	for _, f := range files {
		p.line(left(f[0], 12) + " " + f[1])
	}
	p.line("Written to:")
	p.path(2, folder)
	return p.print(w)
}
