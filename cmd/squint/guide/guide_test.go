package guide

import (
	"regexp"
	"slices"
	"strings"
	"testing"
	"unicode/utf8"

	"squint/glare/daylight"
	"squint/glare/verdict"
	"squint/scene/project"
)

var someStatuses = []Status{{0, "completed", "the work was done"}, {130, "cancelled", "stopped by a signal"}}

func page(t *testing.T, name string) string {
	t.Helper()
	s, err := Page(name, someStatuses)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// Every page is plain text of at most 80 columns with a title, no template
// left over and no trailing blanks.
func TestPagesArePlain(t *testing.T) {
	for _, name := range Names() {
		s := page(t, name)
		if !strings.HasPrefix(s, "# ") || !strings.HasSuffix(s, "\n") || strings.HasSuffix(s, "\n\n") {
			t.Errorf("%s: want a title first and one line's end last", name)
		}
		for i, line := range strings.Split(s, "\n") {
			switch {
			case utf8.RuneCountInString(line) > Columns:
				t.Errorf("%s:%d: %d columns: %s", name, i+1, utf8.RuneCountInString(line), line)
			case strings.TrimRight(line, " ") != line:
				t.Errorf("%s:%d: blanks at the end", name, i+1)
			case strings.ContainsAny(line, "\t\x1b") || strings.Contains(line, "{{"):
				t.Errorf("%s:%d: not plain: %q", name, i+1, line)
			}
		}
	}
	for _, line := range strings.Split(Index(), "\n") {
		if len(line) > Columns {
			t.Errorf("index: too wide: %s", line)
		}
	}
}

// Every file is a topic and every topic has its file.
func TestTopicsAreFiles(t *testing.T) {
	list, err := pages.ReadDir("text")
	if err != nil {
		t.Fatal(err)
	}
	var files []string
	for _, e := range list {
		files = append(files, strings.TrimSuffix(e.Name(), ".md"))
	}
	want := Names()
	slices.Sort(want)
	if !slices.Equal(files, want) {
		t.Errorf("files %v, topics %v", files, want)
	}
	if _, err := Page("nothing", nil); err == nil {
		t.Error("an unknown topic has a page")
	}
}

// unwrapped undoes the line breaks.
func unwrapped(s string) string { return strings.Join(strings.Fields(s), " ") }

// Every key of the project file is explained, with its default and where that
// comes from.
func TestEveryKeyIsExplained(t *testing.T) {
	all := unwrapped(page(t, "project") + page(t, "finishes"))
	if n := len(project.Keys()); n < 60 {
		t.Fatalf("only %d keys: the table is not whole", n)
	}
	for _, k := range project.Keys() {
		want := k.Name + " " + k.About + ": " + k.Want + "."
		if k.Required {
			want += " Required."
		} else if k.Default != "" {
			want += " Default " + k.Default
			if k.Source == "" {
				t.Errorf("%s.%s: a default without a source", k.Table, k.Name)
			}
			want += " (" + k.Source + ")."
		}
		if !strings.Contains(all, unwrapped(want)) {
			t.Errorf("%s.%s: the guide lacks %q", k.Table, k.Name, want)
		}
	}
}

// What pages name in backquotes as a table or key of the project is one.
func TestNamedKeysExist(t *testing.T) {
	known := map[string]bool{}
	for _, k := range project.Keys() {
		known[k.Name], known["["+k.Table+"]"], known["[["+k.Table+"]]"] = true, true, true
	}
	known["[mesh.finishes]"] = true
	word := regexp.MustCompile("`(\\[+[a-z_.]+\\]+|[a-z]+_[a-z_]+)`")
	n := 0
	for _, name := range Names() {
		for _, m := range word.FindAllStringSubmatch(page(t, name), -1) {
			n++
			if !known[m[1]] {
				t.Errorf("%s: %s is no table or key of the project", name, m[1])
			}
		}
	}
	if n < 20 {
		t.Errorf("only %d names found", n)
	}
}

// Pages point only to pages that there are.
func TestReferencesLead(t *testing.T) {
	for _, name := range Names() {
		for _, m := range regexp.MustCompile(`squint guide\s+([a-z]+)`).FindAllStringSubmatch(page(t, name), -1) {
			if _, ok := Find(m[1]); !ok {
				t.Errorf("%s: points to %q", name, m[1])
			}
		}
	}
}

func TestTablesAreWhole(t *testing.T) {
	criteria := unwrapped(page(t, "criteria"))
	for _, r := range daylight.HourRules {
		if want := unwrapped(r.Metric + " " + r.Base.String() + ". " + r.Source); !strings.Contains(criteria, want) {
			t.Errorf("criteria lacks %q", want)
		}
	}
	for _, l := range verdict.ProtectionLevels {
		if !strings.Contains(criteria, l.Name+" DGP over") {
			t.Errorf("criteria lacks glare level %s", l.Name)
		}
	}
	for _, l := range daylight.ProvisionLevels {
		if !regexp.MustCompile(l.Name + ` \d+ lx on`).MatchString(criteria) {
			t.Errorf("criteria lacks provision level %s", l.Name)
		}
	}
	for _, l := range daylight.RoofProvisionLevels {
		if !regexp.MustCompile(l.Name + ` \d+ lx on 95 % of the plane`).MatchString(criteria) {
			t.Errorf("criteria lacks the roof lights' level %s", l.Name)
		}
	}
	outlook := unwrapped(page(t, "outlook"))
	for _, l := range verdict.ViewLevels {
		if !regexp.MustCompile(l.Name + ` \d+ degrees, \d+ m,`).MatchString(outlook) {
			t.Errorf("outlook lacks view level %s", l.Name)
		}
	}
	for _, l := range verdict.SunLevels {
		if !regexp.MustCompile(l.Name + ` [\d.]+ h`).MatchString(outlook) {
			t.Errorf("outlook lacks sunlight level %s", l.Name)
		}
	}
	results := page(t, "results")
	for _, s := range someStatuses {
		if want := s.Name + " " + s.Meaning; !strings.Contains(unwrapped(results), want) {
			t.Errorf("results lacks %q", want)
		}
	}
}

// No page promises what only codes and licensed practice can decide.
func TestNothingIsPromised(t *testing.T) {
	for _, name := range Names() {
		for _, m := range regexp.MustCompile(`(?i)[^.]*\b(compl(y|ies|iant|iance)|guarantee|certif)[^.]*\.`).FindAllString(unwrapped(page(t, name)), -1) {
			if !strings.Contains(m, "No output of squint states") {
				t.Errorf("%s: %s", name, m)
			}
		}
	}
}

func TestHang(t *testing.T) {
	got := Hang("  key   ", strings.Repeat("word ", 20))
	want := "  key   word word word word word word word word word word word word word word\n        word word word word word word\n"
	if got != want {
		t.Errorf("got %q, want %q", got, want)
	}
	if got := Hang("a ", strings.Repeat("x", 90)); got != "a "+strings.Repeat("x", 90)+"\n" {
		t.Errorf("a long word: %q", got)
	}
	if got := Hang("a ", ""); got != "a \n" {
		t.Errorf("nothing: %q", got)
	}
}
