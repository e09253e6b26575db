package report

import (
	"io"
	"strings"

	"charm.land/lipgloss/v2"

	"squint/glare/verdict"
)

// columns is the width of everything printed.
const columns = 80

// page collects styled lines. The writer of lipgloss drops what the terminal
// at w cannot show, all of it where w is none.
type page struct{ b strings.Builder }

func (p *page) line(s string) {
	p.b.WriteString(strings.TrimRight(s, " "))
	p.b.WriteByte('\n')
}

func (p *page) gap() { p.b.WriteByte('\n') }

// head is a heading.
func (p *page) head(s string) {
	for _, l := range wrap(plain(s), columns) {
		p.line(bold().Render(l))
	}
}

// para is a text indented throughout.
func (p *page) para(indent int, s string) { p.item(indent, "", lipgloss.NewStyle(), indent, s) }

// item is a text with a word before it and a hanging indent.
func (p *page) item(before int, word string, style lipgloss.Style, indent int, s string) {
	for i, l := range wrap(plain(s), columns-indent) {
		if i > 0 || word == "" {
			p.line(strings.Repeat(" ", indent) + l)
			continue
		}
		pad := max(1, indent-before-lipgloss.Width(word))
		p.line(strings.Repeat(" ", before) + style.Render(word) + strings.Repeat(" ", pad) + l)
	}
}

// path prints a file's place on a line of its own, never broken, since it is
// there to be copied.
func (p *page) path(indent int, s string) { p.line(strings.Repeat(" ", indent) + plain(s)) }

func (p *page) print(w io.Writer) error {
	_, err := lipgloss.Fprint(w, p.b.String())
	return err
}

func bold() lipgloss.Style { return lipgloss.NewStyle().Bold(true) }

// quiet text is faint rather than grey: it holds on light and on dark.
func quiet() lipgloss.Style { return lipgloss.NewStyle().Faint(true) }

// warm is the accent, for warnings and invented data.
func warm() lipgloss.Style {
	return lipgloss.NewStyle().Bold(true).Foreground(lipgloss.Color("#C8761B"))
}

// verdictStyle colours a verdict's word; undecided keeps the terminal's ink.
func verdictStyle(o verdict.Outcome) lipgloss.Style {
	switch o {
	case verdict.Met:
		return bold().Foreground(lipgloss.Color("#1F7A6D"))
	case verdict.NotMet:
		return bold().Foreground(lipgloss.Color("#B5382B"))
	}
	return bold()
}
