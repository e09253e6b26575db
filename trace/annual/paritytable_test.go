package annual_test

import (
	"flag"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"testing"
)

// published are the tests that hold the engines against published or derived
// values; `go test -run Parity -v` runs them.
var published = []string{
	"TestViewFactors", "TestVerticalWindow", "TestRoomSkyComponents", "TestVerticalSkyComponent", "TestDaylightFactor",
	"TestUnitCube", "TestFurnace", "TestSphereWithPort", "TestParallelPlanes", "TestSunPatch", "TestSunFlux",
	"TestMirrorDuct", "TestSunHiddenInPart", "TestRoomsWithAnswers", "TestMirroredSunAlone",
}

// TestPublishedNames: a test that is renamed must not fall out of the table.
func TestPublishedNames(t *testing.T) {
	files, err := filepath.Glob("*_test.go")
	if err != nil {
		t.Fatal(err)
	}
	var all strings.Builder
	for _, f := range files {
		text, err := os.ReadFile(f)
		if err != nil {
			t.Fatal(err)
		}
		all.Write(text)
	}
	for _, name := range published {
		if !strings.Contains(all.String(), "\nfunc "+name+"(t *testing.T) {") {
			t.Errorf("got no test %s, want one; rename it in published too", name)
		}
	}
}

// board collects what every family of comparisons came to.
var board parityBoard

type parityBoard struct {
	mu    sync.Mutex
	lines []string
}

// post adds a family: its worst case relative to that case's own limit.
func (b *parityBoard) post(p *parity) {
	var worst outcome
	over, lim := -1.0, 0.0
	for _, o := range p.rows {
		l := limit(len(p.rows), o.dof)
		if x := math.Abs(o.z()) / l; !(x <= over) {
			over, lim, worst = x, l, o
		}
	}
	verdict := "within"
	if !(over <= 1) {
		verdict = "OUTSIDE"
	}
	b.mu.Lock()
	defer b.mu.Unlock()
	b.lines = append(b.lines, fmt.Sprintf("%-66s %5d %8.2f %7.2f  %s", p.group, len(p.rows), worst.z(), lim, verdict))
}

func (b *parityBoard) text() string {
	head := fmt.Sprintf("%-66s %5s %8s %7s", "case group, engine", "cases", "worst z", "limit")
	foot := fmt.Sprintf("z counts standard errors beyond what is allowed for patches, facets and digits;\n"+
		"limits are Student's, for a chance of %g that a group of right values has one rejected (Sidak).", familyError)
	return strings.Join(append(append([]string{head}, b.lines...), foot), "\n")
}

// TestMain lets -run Parity stand for the published cases and prints one table
// of all families under -v.
func TestMain(m *testing.M) {
	flag.Parse()
	if f := flag.Lookup("test.run"); f.Value.String() == "Parity" {
		if err := flag.Set("test.run", "^("+strings.Join(published, "|")+")$"); err != nil {
			fmt.Fprintln(os.Stderr, err)
			os.Exit(2)
		}
	}
	code := m.Run()
	if testing.Verbose() && len(board.lines) > 0 {
		fmt.Println(board.text())
	}
	os.Exit(code)
}
