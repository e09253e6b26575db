package main

import (
	"bytes"
	"encoding/binary"
	"errors"
	"flag"
	"io/fs"
	"maps"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
	"time"

	"github.com/rogpeppe/go-internal/testscript"
)

var update = flag.Bool("update", false, "rewrite the expected texts in testdata/script")

func TestMain(m *testing.M) {
	testscript.Main(m, map[string]func(){"squint": patient})
}

// patient is main with a clock that stands, so that a slow machine does not
// print lines of progress into what scripts compare.
func patient() {
	h := machine()
	start := h.now()
	h.now = func() time.Time { return start }
	live(h)
}

// TestScripts runs every script in the folder.
func TestScripts(t *testing.T) {
	testscript.Run(t, testscript.Params{
		Dir:                 "testdata/script",
		UpdateScripts:       *update,
		RequireExplicitExec: true,
		RequireUniqueNames:  true,
		Cmds: map[string]func(*testscript.TestScript, bool, []string){
			"small":      cmdSmall,
			"edit":       cmdEdit,
			"ends":       cmdEnds,
			"refuses":    cmdRefuses,
			"same-files": cmdSameFiles,
			"cut":        cmdCut,
			"rows":       cmdRows,
			"stl":        cmdSTL,
			"photo":      cmdPhoto,
			"shade":      cmdShade,
			"agrees":     cmdAgrees,
		},
	})
}

// small [DIR] writes the small project.
func cmdSmall(ts *testscript.TestScript, _ bool, args []string) {
	dir := "."
	if len(args) == 1 {
		dir = args[0]
	}
	ts.Check(os.MkdirAll(ts.MkAbs(dir), 0o777))
	ts.Check(writeSmall(ts.MkAbs(dir)))
}

// edit FILE OLD NEW replaces a text that is there exactly once; \n is a line's
// end.
func cmdEdit(ts *testscript.TestScript, _ bool, args []string) {
	if len(args) != 3 {
		ts.Fatalf("usage: edit FILE OLD NEW")
	}
	text := ts.ReadFile(args[0])
	line := strings.NewReplacer(`\n`, "\n")
	old := line.Replace(args[1])
	if n := strings.Count(text, old); n != 1 {
		ts.Fatalf("edit: %s has %q %d times, want once", args[0], old, n)
	}
	text = strings.Replace(text, old, line.Replace(args[2]), 1)
	ts.Check(os.WriteFile(ts.MkAbs(args[0]), []byte(text), 0o666))
}

// ends STATUS ARG... runs squint and wants that exit status.
func cmdEnds(ts *testscript.TestScript, _ bool, args []string) {
	if len(args) < 1 {
		ts.Fatalf("usage: ends STATUS ARG...")
	}
	want, err := strconv.Atoi(args[0])
	ts.Check(err)
	got := 0
	if err := ts.Exec("squint", args[1:]...); err != nil {
		var exit *exec.ExitError
		if !errors.As(err, &exit) {
			ts.Fatalf("squint did not run: %v", err)
		}
		got = exit.ExitCode()
	}
	if got != want {
		ts.Fatalf("squint ended with %d, want %d", got, want)
	}
}

// refuses ARG... runs squint and wants what every bad input must get: the
// status of wrong use, a message without usage, and no file written.
func cmdRefuses(ts *testscript.TestScript, _ bool, args []string) {
	before := tree(ts, ts.MkAbs("."))
	cmdEnds(ts, false, append([]string{strconv.Itoa(int(statusUsage))}, args...))
	if after := tree(ts, ts.MkAbs(".")); !maps.Equal(after, before) {
		ts.Fatalf("squint wrote or changed files: %d before, %d after", len(before), len(after))
	}
	text := ts.ReadFile("stderr")
	switch {
	case !strings.HasPrefix(text, "squint: "):
		ts.Fatalf("got no message but %q", text)
	case strings.Contains(text, "Usage:"):
		ts.Fatalf("bad input printed usage")
	case strings.Contains(text, "goroutine "):
		ts.Fatalf("squint panicked")
	case ts.ReadFile("stdout") != "":
		ts.Fatalf("squint began although the input is bad")
	}
}

// tree maps each file and folder below dir to its bytes.
func tree(ts *testscript.TestScript, dir string) map[string]string {
	files := map[string]string{}
	ts.Check(filepath.WalkDir(dir, func(path string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		name, err := filepath.Rel(dir, path)
		if err != nil || d.IsDir() {
			files[name+"/"] = ""
			return err
		}
		data, err := os.ReadFile(path)
		files[name] = string(data)
		return err
	}))
	return files
}

// same-files A B wants two folders to hold the same files, byte by byte;
// negated, that at least one differs.
func cmdSameFiles(ts *testscript.TestScript, neg bool, args []string) {
	if len(args) != 2 {
		ts.Fatalf("usage: same-files A B")
	}
	a, b := tree(ts, ts.MkAbs(args[0])), tree(ts, ts.MkAbs(args[1]))
	if len(a) < 2 {
		ts.Fatalf("%s is empty", args[0])
	}
	different := ""
	for name, data := range a {
		if other, ok := b[name]; !ok || other != data {
			different = name
		}
	}
	if len(a) != len(b) {
		different = "the list of files"
	}
	if neg == (different == "") {
		ts.Fatalf("%s and %s: different: %q, of %d files", args[0], args[1], different, len(a))
	}
}

// cut FILE BYTES shortens a file by so many bytes.
func cmdCut(ts *testscript.TestScript, _ bool, args []string) {
	n, err := strconv.Atoi(args[1])
	ts.Check(err)
	text := ts.ReadFile(args[0])
	ts.Check(os.WriteFile(ts.MkAbs(args[0]), []byte(text[:len(text)-n]), 0o666))
}

// rows FILE drop N | set N COLUMN TEXT | swap COLUMN COLUMN changes the data
// rows of an EPW file: N counts them from 1, columns count from 1.
func cmdRows(ts *testscript.TestScript, _ bool, args []string) {
	const header = 8
	lines := strings.Split(strings.TrimRight(ts.ReadFile(args[0]), "\n"), "\n")
	number := func(i int) int {
		n, err := strconv.Atoi(args[i])
		ts.Check(err)
		return n
	}
	switch args[1] {
	case "drop":
		k := header + number(2) - 1
		lines = append(lines[:k], lines[k+1:]...)
	case "set":
		k := header + number(2) - 1
		f := strings.Split(lines[k], ",")
		f[number(3)-1] = args[4]
		lines[k] = strings.Join(f, ",")
	case "swap":
		a, b := number(2)-1, number(3)-1
		for k := header; k < len(lines); k++ {
			f := strings.Split(lines[k], ",")
			f[a], f[b] = f[b], f[a]
			lines[k] = strings.Join(f, ",")
		}
	default:
		ts.Fatalf("usage: rows FILE drop|set|swap ...")
	}
	ts.Check(os.WriteFile(ts.MkAbs(args[0]), []byte(strings.Join(lines, "\n")+"\n"), 0o666))
}

// stl FILE COUNT [nan] writes a binary STL of one triangle whose header counts
// COUNT, with a coordinate that is no number if asked.
func cmdSTL(ts *testscript.TestScript, _ bool, args []string) {
	count, err := strconv.ParseUint(args[1], 10, 32)
	ts.Check(err)
	b := bytes.NewBuffer(make([]byte, 80))
	put := func(v any) { ts.Check(binary.Write(b, binary.LittleEndian, v)) }
	put(uint32(count))
	corners := []float32{0, 0, 1, 0, 0, 0, 4, 0, 0, 0, 4, 0}
	if len(args) > 2 && args[2] == "nan" {
		corners[5] = float32(math.NaN())
	}
	put(corners)
	put(uint16(0))
	ts.Check(os.WriteFile(ts.MkAbs(args[0]), b.Bytes(), 0o666))
}
