package guide

import (
	"embed"
	"fmt"
	"strings"
	"text/template"
)

//go:embed text/*.md
var pages embed.FS

// Topic is one page.
type Topic struct {
	Name  string // as typed, and of the file text/NAME.md
	About string // one line for the list
}

// topics in the order in which they are best read.
var topics = []Topic{
	{"start", "what squint does, and a first check"},
	{"project", "the project file, key by key"},
	{"geometry", "room models: formats, units, groups, openings"},
	{"finishes", "surfaces: from matte walls to glass, cloth and mirrors"},
	{"systems", "light shelves, blinds, louvres, rollers; the gallery"},
	{"anidolic", "anidolic ceilings: collector, mirrored duct and outlet"},
	{"control", "when what moves is opened and closed"},
	{"weather", "weather files, and the moment each record stands for"},
	{"criteria", "what is judged, which hours count, and the sources"},
	{"outlook", "view out, exposure to sunlight, sun on the glass"},
	{"glare", "HDR images and site photographs evaluated for glare"},
	{"results", "the results folder, confidence, exit statuses"},
	{"sensitivity", "what finishes that are off by a little would change"},
	{"report", "the interactive page: one file for client and authority"},
	{"look", "luminance pictures of a moment, and plans"},
	{"export", "the built scene as files for CAD and viewers"},
	{"method", "how it is computed, in plain words"},
	{"scale", "what large floors cost in time and memory"},
	{"limits", "what this version does not do"},
	{"cautions", "what can go wrong in the building itself"},
	{"glossary", "the words of the trade that squint uses"},
}

// Status is one exit status of the program.
type Status struct {
	Code          int
	Name, Meaning string
}

// Names of the topics, in order.
func Names() []string {
	list := make([]string, len(topics))
	for i, t := range topics {
		list[i] = t.Name
	}
	return list
}

// Find returns the topic of that name.
func Find(name string) (Topic, bool) {
	for _, t := range topics {
		if t.Name == name {
			return t, true
		}
	}
	return Topic{}, false
}

// Index lists the topics, one a line.
func Index() string {
	var b strings.Builder
	b.WriteString("Topics, each shown by \"squint guide TOPIC\":\n\n")
	for _, t := range topics {
		fmt.Fprintf(&b, "  %-11s %s\n", t.Name, t.About)
	}
	return b.String()
}

// Page is the text of a topic, in lines of at most Columns characters. An
// unknown topic is an error.
func Page(name string, statuses []Status) (string, error) {
	if _, ok := Find(name); !ok {
		return "", fmt.Errorf("guide: got topic %q, want one of %s", name, strings.Join(Names(), ", "))
	}
	source, err := pages.ReadFile("text/" + name + ".md")
	if err != nil {
		return "", err
	}
	t, err := template.New(name).Funcs(template.FuncMap{
		"keys":       keys,
		"kind":       kind,
		"hours":      hours,
		"protection": protection,
		"provision":  provision,
		"roofs":      roofs,
		"viewlevels": viewLevels,
		"sunlevels":  sunLevels,
		"statuses":   func() string { return statusList(statuses) },
		"topics":     Index,
	}).Parse(string(source))
	if err != nil {
		return "", err
	}
	var b strings.Builder
	if err := t.Execute(&b, nil); err != nil {
		return "", err
	}
	return b.String(), nil
}
