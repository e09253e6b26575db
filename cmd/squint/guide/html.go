package guide

import (
	"bytes"
	"embed"
	"encoding/base64"
	"fmt"
	"html/template"
	"io/fs"
	"path"
	"strings"

	"github.com/yuin/goldmark"
	"github.com/yuin/goldmark/extension"
)

// The gallery's pictures are drawn by go generate, a quarter of an hour on two
// cores; pictures/demo/sheet.png is made by the command in text/look.md.
//
// pictures/scale holds what BenchmarkFloor of internal/study printed, and its plots.
//
//go:generate go run ./generate ../../../testdata/gallery pictures
//go:generate go run ./generate/scale pictures/scale/measured.txt pictures/scale/scale.png

//go:embed pictures/*.png pictures/demo/*.png pictures/scale/*.png
var pictures embed.FS

// Pictures are the names of the gallery's pictures, without ending, in order.
func Pictures() []string {
	files, err := fs.Glob(pictures, "pictures/*.png")
	if err != nil {
		return nil // the pattern is a constant
	}
	names := make([]string, len(files))
	for i, f := range files {
		names[i] = strings.TrimSuffix(path.Base(f), ".png")
	}
	return names
}

// chapter is a page as the HTML shows it.
type chapter struct {
	Name, About string
	Text        template.HTML // made from our own pages
	Figures     []figure
}

type figure struct {
	Caption, Alt string
	Data         template.URL // of the picture itself
}

func newFigure(file, caption, alt string) (figure, error) {
	data, err := pictures.ReadFile("pictures/" + file)
	return figure{caption, alt, template.URL("data:image/png;base64," + base64.StdEncoding.EncodeToString(data))}, err
}

// figures are the pictures of a topic.
func figures(topic string) (list []figure, err error) {
	add := func(file, caption, alt string) {
		f, e := newFigure(file, caption, alt)
		if err == nil {
			list, err = append(list, f), e
		}
	}
	switch topic {
	case "systems":
		for _, name := range Pictures() {
			add(name+".png", name+".toml", name+".toml of the gallery, seen from indoors and from outdoors in false colours")
		}
	case "look":
		add("demo/sheet.png", "The demo's morning and noon with each of its designs, by the command above.", "Ten fisheye pictures of one desk, in false colours with one scale")
	case "scale":
		add("scale/scale.png", "One size varied at a time, the others small.", "Eight plots: CPU time and memory against viewpoints, sensors, hours and triangles; the page above has the numbers")
	}
	return list, err
}

// HTML is the whole guide as one page that needs nothing else.
func HTML(statuses []Status) ([]byte, error) {
	md := goldmark.New(goldmark.WithExtensions(extension.Table))
	var chapters []chapter
	for _, t := range topics {
		text, err := Page(t.Name, statuses)
		if err != nil {
			return nil, err
		}
		var b bytes.Buffer
		if err := md.Convert([]byte(codeIndented(text)), &b); err != nil {
			return nil, err
		}
		c := chapter{Name: t.Name, About: t.About, Text: template.HTML(b.String())}
		if c.Figures, err = figures(t.Name); err != nil {
			return nil, err
		}
		chapters = append(chapters, c)
	}
	page, err := template.New("guide").Parse(pageTemplate)
	if err != nil {
		return nil, err
	}
	var b bytes.Buffer
	if err := page.Execute(&b, chapters); err != nil {
		return nil, fmt.Errorf("guide: %w", err)
	}
	return b.Bytes(), nil
}

// codeIndented makes what the pages indent by two blanks, lists of files and
// keys that are aligned by hand, code of Markdown: four blanks. Lines of lists
// stay, as they belong to an item.
func codeIndented(text string) string {
	var b strings.Builder
	inList, blank := false, true
	for _, l := range strings.SplitAfter(text, "\n") {
		bare := strings.TrimLeft(l, " ")
		indent := len(l) - len(bare)
		switch {
		case strings.TrimSpace(l) == "":
			blank = true
			b.WriteString(l)
			continue
		case indent == 0:
			inList = strings.HasPrefix(bare, "- ") || len(bare) > 2 && bare[0] >= '1' && bare[0] <= '9' && bare[1] == '.'
		case indent >= 2 && !inList:
			l = "    " + l
		case inList && blank && indent >= 4:
			l = "    " + l
		}
		blank = false
		b.WriteString(l)
	}
	return b.String()
}

const pageTemplate = `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta http-equiv="Content-Security-Policy" content="default-src 'none'; img-src data:; style-src 'unsafe-inline'">
<title>squint: the guide</title>
<style>
:root { --paper: #FBFAF6; --ink: #22252A; --hair: #D8D4C8; --quiet: #6B6F76; --sun: #C8761B; }
@media (prefers-color-scheme: dark) { :root { --paper: #15171A; --ink: #E9E6DE; --hair: #3A3D42; --quiet: #A0A4AB; } }
body { background: var(--paper); color: var(--ink); font: 16px/1.5 "Segoe UI", "Noto Sans", "Helvetica Neue", sans-serif; margin: 0 auto; padding: 2rem 1rem; max-width: 44rem; }
h1, h2 { font-family: Georgia, "Noto Serif", serif; font-weight: normal; line-height: 1.2; }
section { border-top: 1px solid var(--hair); margin-top: 3rem; padding-top: 1rem; }
h2 { font-size: 1.15rem; margin-top: 2rem; }
nav ol { padding-left: 1.6rem; columns: 2; column-gap: 3rem; }
nav li span { color: var(--quiet); }
a { color: inherit; text-decoration-color: var(--sun); }
pre { overflow-x: auto; font-size: 0.85rem; line-height: 1.4; border-left: 2px solid var(--hair); padding-left: 0.8rem; }
code { font-size: 0.9em; }
table { border-collapse: collapse; } td, th { border-bottom: 1px solid var(--hair); padding: 0.2rem 0.6rem 0.2rem 0; text-align: left; }
figure { margin: 1.5rem 0; } figcaption { color: var(--quiet); font-size: 0.9rem; } img { max-width: 100%; }
@media (max-width: 30rem) { nav ol { columns: 1; } }
@media print { section { break-before: page; } }
</style>
</head>
<body>
<main>
<h1>squint: the guide</h1>
<nav aria-label="Topics"><ol>{{range .}}<li><a href="#{{.Name}}">{{.Name}}</a> <span>{{.About}}</span></li>{{end}}</ol></nav>
{{range .}}<section id="{{.Name}}" aria-label="{{.Name}}">
{{.Text}}{{range .Figures}}<figure><img src="{{.Data}}" alt="{{.Alt}}"><figcaption>{{.Caption}}</figcaption></figure>
{{end}}</section>
{{end}}</main>
</body>
</html>
`
