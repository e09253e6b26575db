package main

import (
	"bytes"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/cmd/squint/internal/page"
	"squint/cmd/squint/internal/study"
	"squint/scene"
)

// Model and plan show what moves as it stands at the hour. Two designs have the
// same two standings, without and with a board above the desks, and stand the one
// and the other way all year; the rest is the same.
func TestPageDrawsWhatStands(t *testing.T) {
	if testing.Short() {
		t.Skip("starts a browser")
	}
	dir := t.TempDir()
	r, w, inside := madeUpYear(t, dir, 24)
	board := *r.Scene
	board.Parts = append(slices.Clone(board.Parts), scene.Part{Name: "board", Kind: scene.System})
	a, b, c := r3.Vec{X: 1, Y: 1, Z: 1.9}, r3.Vec{X: 3, Y: 1, Z: 1.9}, r3.Vec{X: 1, Y: 3, Z: 1.9}
	board.Triangles = append(slices.Clone(board.Triangles), scene.Triangle{V: [3]r3.Vec{a, b, c}, Part: int32(len(board.Parts) - 1)})
	r.Stood, r.Standings = []*scene.Scene{r.Scene, &board}, []string{"board: away", "board: out"}
	r.Views = append(r.Views, floorView(r, 0, w, inside, 8, 1))
	other := *r
	other.Standing = make([]int16, len(r.Standing))
	for i := range other.Standing {
		other.Standing[i] = 1
	}
	var all []*page.Archive
	for i, x := range []*study.Result{r, &other, r} {
		all = append(all, page.Build(x, page.Words{Alternative: string(rune('a' + i)), Outcome: "met"}))
	}
	var text bytes.Buffer
	if err := page.Write(&text, all, page.Options{}); err != nil {
		t.Fatal(err)
	}
	file := filepath.Join(dir, "page.html")
	if err := os.WriteFile(file, text.Bytes(), 0o666); err != nil {
		t.Fatal(err)
	}
	tab := openTab(t, file)
	var seen []map[string]string
	for i, want := range []string{"With board: away.", "With board: out.", "With board: away."} {
		eval[bool](t, tab, "squint.show({record:squint.lit[60],design:"+string(rune('0'+i))+"}),true")
		tab.settle(t)
		if got := eval[string](t, tab, "document.getElementById('r-room').textContent"); !strings.HasSuffix(got, want) {
			t.Errorf("design %d: got %q, want it to end with %q", i, got, want)
		}
		seen = append(seen, pictures(t, tab))
	}
	for _, name := range []string{"c-room", "c-plan"} {
		if seen[0][name] == seen[1][name] {
			t.Errorf("%s: got the same drawing with the board and without", name)
		}
		if seen[0][name] != seen[2][name] {
			t.Errorf("%s: the same hour of the same design is drawn in two ways", name)
		}
	}
	if len(tab.complaints) > 0 {
		t.Errorf("the browser complained: %q", tab.complaints)
	}
}
