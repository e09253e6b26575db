package report

import (
	"bytes"
	"flag"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"charm.land/lipgloss/v2"

	"squint/cmd/squint/internal/study"
	"squint/glare/verdict"
	"squint/scene/project"
)

var update = flag.Bool("update", false, "rewrite the expected texts")

// golden compares with testdata; -update rewrites it, to be read before it is
// believed.
func golden(t *testing.T, name, got string) {
	t.Helper()
	file := filepath.Join("testdata", name)
	if *update {
		if err := os.WriteFile(file, []byte(got), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	if got != string(want) {
		t.Errorf("%s differs; got\n%s\nwant\n%s", file, got, want)
	}
}

// sound is what holds for everything printed.
func sound(t *testing.T, text string) {
	t.Helper()
	for i, l := range strings.Split(text, "\n") {
		if n := lipgloss.Width(l); n > columns {
			t.Errorf("line %d has %d columns, want at most %d: %q", i+1, n, columns, l)
		}
		if strings.TrimRight(l, " ") != l {
			t.Errorf("line %d ends in a blank: %q", i+1, l)
		}
	}
	for _, bad := range []string{"\x1b", "NaN", "Inf", "complian", "!"} {
		if strings.Contains(text, bad) {
			t.Errorf("text contains %q:\n%s", bad, text)
		}
	}
}

func printed(t *testing.T, r *study.Result) string {
	t.Helper()
	// What a user's environment says must not decide.
	for _, k := range []string{"CLICOLOR_FORCE", "TTY_FORCE", "NO_COLOR"} {
		t.Setenv(k, "")
	}
	var b bytes.Buffer
	if err := Terminal(&b, r, "results/office", 83*time.Second); err != nil {
		t.Fatal(err)
	}
	sound(t, b.String())
	return b.String()
}

func TestTerminal(t *testing.T) {
	nobody := sample()
	nobody.Views, nobody.Planes, nobody.Verdicts, nobody.Scene.WorkPlanes = nil, nil, nil, nil
	met := sample("desk 1", "desk 2", "desk 3")
	met.Views = met.Views[2:]
	met.Verdicts = met.Verdicts[2:]
	met.Outcome = verdict.Combine(met.Verdicts)
	invented := sample("desk 1", "desk 2", "desk 3", "desk 4", "desk 5")
	invented.Project.Invented = true
	invented.Project.Finishes = []project.Finish{{Name: "polished", Type: "mirror"}}
	invented.Warnings = []string{"surfaces are cut 2.0 times more coarsely than asked, to fit memory_mib = 64."}
	invented.Climate.Fit.Contradicts = true
	var many []string
	for range 30 {
		many = append(many, "a workstation with quite a long name")
	}
	crowd := sample(many...)
	for i := range crowd.Views { // all like the first, which fails
		crowd.Views[i].Levels, crowd.Views[i].When = crowd.Views[0].Levels, crowd.Views[0].When
	}
	for _, c := range []struct {
		name string
		r    *study.Result
	}{{"nothing", nobody}, {"met", met}, {"invented", invented}, {"crowd", crowd}} {
		t.Run(c.name, func(t *testing.T) { golden(t, c.name+".txt", printed(t, c.r)) })
	}
}

// TestTerminalHostile checks that names cannot write to the terminal, and that
// nothing is too wide to be cut.
func TestTerminalHostile(t *testing.T) {
	names := []string{"\x1b[31mred\x07", "a\nb\tc", strings.Repeat("x", 200), "書斎の机、窓を向いて長い長い名前の机である書斎の机、窓を向いて長い長い名前の机", "\u202etfel", "bad \xff utf-8", ""}
	r := sample(names...)
	r.Project.Title = "\x1b]0;title\x07 of " + strings.Repeat("very ", 40) + "long"
	r.Planes[0].Plane.Name = "\x1b[2J" + strings.Repeat("wide ", 30)
	r.Warnings = []string{"\x1b[0m" + strings.Repeat("warning", 40)}
	text := printed(t, r)
	for _, bad := range []string{"\x07", "\u202e", "\t"} {
		if strings.Contains(text, bad) {
			t.Errorf("text contains %q", bad)
		}
	}
	if !strings.Contains(text, "[31mred") {
		t.Error("the name itself was lost")
	}
}

// TestSoundRejects plants what sound looks for.
func TestSoundRejects(t *testing.T) {
	for _, bad := range []string{strings.Repeat("x", 81), "\x1b[1mbold\x1b[0m", "blank ", "NaN lx"} {
		var fake testing.T
		sound(&fake, bad)
		if !fake.Failed() {
			t.Errorf("%q passed", bad)
		}
	}
}

// TestTerminalColour forces colour and looks that the words are the same.
func TestTerminalColour(t *testing.T) {
	r := sample("desk 1", "desk 2", "desk 3")
	plain := printed(t, r)
	t.Setenv("CLICOLOR_FORCE", "1")
	t.Setenv("TERM", "xterm-256color")
	var b bytes.Buffer
	if err := Terminal(&b, r, "results/office", 83*time.Second); err != nil {
		t.Fatal(err)
	}
	if !strings.Contains(b.String(), "\x1b[") {
		t.Fatal("got no colour, want some where it is forced")
	}
	if got := stripANSI(b.String()); got != plain {
		t.Errorf("in colour the words differ:\n%s\nwant\n%s", got, plain)
	}
}

func stripANSI(s string) string {
	var b strings.Builder
	for {
		before, after, ok := strings.Cut(s, "\x1b[")
		b.WriteString(before)
		if !ok {
			return b.String()
		}
		_, s, _ = strings.Cut(after, "m")
	}
}

func TestHeader(t *testing.T) {
	r := sample("desk 1")
	r.Project.Finishes = []project.Finish{{Name: "glass", Type: "glazing"}}
	r.Project.WorkPlanes = []project.WorkPlane{{Name: "open plan"}}
	in := &study.Input{Project: r.Project, Scene: r.Scene, Climate: r.Climate, Notes: r.Notes, Occupied: r.Occupied}
	var b bytes.Buffer
	t.Setenv("CLICOLOR_FORCE", "")
	if err := new(Headers).Print(&b, in); err != nil {
		t.Fatal(err)
	}
	sound(t, b.String())
	golden(t, "header.txt", b.String())
}

// TestWrap holds the pieces of a text against the text.
func TestWrap(t *testing.T) {
	for _, c := range []struct {
		text  string
		width int
		want  []string
	}{
		{"", 10, []string{""}},
		{"one two three", 7, []string{"one two", "three"}},
		{"about 300 lx here", 9, []string{"about", "300 lx", "here"}}, // unit with its number
		{"share 5.5 %, limit", 9, []string{"share", "5.5 %,", "limit"}},
		{"abcdefgh", 3, []string{"abc", "def", "gh"}},
		{"0.98 ± 0.01", 6, []string{"0.98 ±", " 0.01"}},
	} {
		got := wrap(c.text, c.width)
		if strings.Join(got, "|") != strings.Join(c.want, "|") {
			t.Errorf("wrap(%q, %d) = %q, want %q", c.text, c.width, got, c.want)
		}
	}
}
