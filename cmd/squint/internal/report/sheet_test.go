package report

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
)

func TestSheetWords(t *testing.T) {
	// Of the sample's viewpoints the first fails and the second is undecided.
	w := sheetWords(sample("desk 1", "desk 2", "desk 3"), Options{Version: "v1"})
	for _, want := range []string{"2 of 3 viewpoints have glare or may have it", "the worst is desk 1", "where 5 % are allowed"} {
		if !strings.Contains(w.Sentence, want) {
			t.Errorf("sentence: got %q, want %q in it", w.Sentence, want)
		}
	}
	titles := map[string]int{}
	for _, table := range w.Tables {
		titles[table.Title] = len(table.Rows)
		for _, row := range table.Rows {
			if table.Head != nil && len(row) != len(table.Head) {
				t.Errorf("%s: got a row of %d cells under %d headings: %q", table.Title, len(row), len(table.Head), row)
			}
		}
	}
	if titles["Glare at every level of EN 17037:2018"] != 3 || titles["Daylight on the work planes"] != 1 || titles["Inputs"] != 3 {
		t.Errorf("got tables %v", titles)
	}
	met := sheetWords(sample("desk", "b", "c", "d"), Options{})
	if strings.Contains(met.Sentence, "All ") {
		t.Errorf("got %q of a study that fails", met.Sentence)
	}
}

// A comparison that names a folder outside its own is refused.
func TestSheetStaysInItsFolder(t *testing.T) {
	dir := t.TempDir()
	if err := os.WriteFile(filepath.Join(dir, AlternativesFile), []byte(`{"alternatives":[{"folder":"../other"}]}`), 0o666); err != nil {
		t.Fatal(err)
	}
	if err := RemakeSheet(dir, ""); err == nil || !strings.Contains(err.Error(), `got folder "../other", want one below it`) {
		t.Errorf("got %v", err)
	}
}
