package main

import (
	"fmt"
	"go/ast"
	"go/parser"
	"go/token"
	"io/fs"
	"os"
	"path"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"
	"testing/fstest"
)

const module = "squint"

// order is the house: a package imports only packages of ours that stand
// before it.
var order = []string{
	"materials/sampling",
	"materials",
	"scene/photometry",
	"scene/mesh",
	"scene/weather",
	"scene/sky",
	"scene/view",
	"scene/system",
	"scene/sizing",
	"scene/project",
	"scene",
	"scene/scenetest",
	"scene/export",
	"trace/parallel",
	"trace/bvh",
	"trace",
	"trace/outlook",
	"trace/soundness",
	"trace/surface",
	"trace/coeff",
	"trace/annual",
	"trace/picture",
	"glare/luminance",
	"glare/photograph",
	"glare/falsecolour",
	"glare",
	"glare/daylight",
	"glare/control",
	"glare/verdict",
	"cmd/squint/internal/sunpath",
	"cmd/squint/internal/film",
	"cmd/squint/internal/study",
	"cmd/squint/internal/page",
	"cmd/squint/internal/explore",
	"cmd/squint/internal/verify",
	"cmd/squint/internal/report",
	"cmd/squint/demo",
	"cmd/squint/guide",
	"cmd/squint",
}

// machine packages and names reach the machine: files, environment, network,
// clock.
var (
	machinePackages = []string{"os", "os/exec", "os/signal", "os/user", "io/ioutil", "net", "net/http", "syscall", "path/filepath", "runtime/debug"}
	machineNames    = map[string][]string{
		"time": {"Now", "Since", "Until", "After", "AfterFunc", "Tick", "NewTicker", "NewTimer", "Sleep"},
	}
	// environment is what even those that may open files leave to main.
	environment = map[string][]string{
		"os": {"Getenv", "LookupEnv", "Environ", "ExpandEnv", "Args", "Exit", "Stdin", "Stdout", "Stderr"},
	}
)

// writes lists the packages beside main that may use files: the results are
// written there, into a folder that main names.
var writes = []string{"cmd/squint/internal/report"}

// TestImportsFollowTheOrder holds every package of ours against the order, and
// wants only cmd/squint to reach for the machine.
func TestImportsFollowTheOrder(t *testing.T) {
	root, err := filepath.Abs("../..")
	if err != nil {
		t.Fatal(err)
	}
	problems, packages, err := checkHouse(os.DirFS(root))
	if err != nil {
		t.Fatal(err)
	}
	for _, p := range problems {
		t.Error(p)
	}
	// A walk that finds nothing finds no fault either.
	for _, want := range []string{"materials", "scene", "trace", "glare", "cmd/squint"} {
		if !slices.Contains(packages, want) {
			t.Errorf("the walk over the repository did not find %s, only %v", want, packages)
		}
	}
}

// checkHouse parses the Go files of a repository, tests left out, and returns
// what is against the rules and the packages seen. Programs other than
// cmd/squint, such as generators, are no part of the house.
func checkHouse(fsys fs.FS) (problems, packages []string, err error) {
	rank := map[string]int{}
	for i, p := range order {
		rank[p] = i
	}
	err = fs.WalkDir(fsys, ".", func(name string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		base := path.Base(name)
		if d.IsDir() {
			if base == "testdata" || name != "." && strings.HasPrefix(base, ".") {
				return fs.SkipDir
			}
			return nil
		}
		if path.Ext(name) != ".go" || strings.HasSuffix(name, "_test.go") {
			return nil
		}
		source, err := fs.ReadFile(fsys, name)
		if err != nil {
			return err
		}
		file, err := parser.ParseFile(token.NewFileSet(), name, source, parser.SkipObjectResolution)
		if err != nil {
			return err
		}
		pkg := path.Dir(name)
		if file.Name.Name == "main" && pkg != "cmd/squint" {
			return nil
		}
		if !slices.Contains(packages, pkg) {
			packages = append(packages, pkg)
		}
		own, known := rank[pkg]
		if !known {
			problems = append(problems, fmt.Sprintf("%s: package %s has no place in the order", name, pkg))
			return nil
		}
		problems = append(problems, checkFile(name, pkg, own, rank, file)...)
		return nil
	})
	return problems, packages, err
}

func checkFile(name, pkg string, own int, rank map[string]int, file *ast.File) (problems []string) {
	called := map[string]string{} // name in the file -> import path
	for _, im := range file.Imports {
		target, err := strconv.Unquote(im.Path.Value)
		if err != nil {
			continue
		}
		local := path.Base(target)
		if im.Name != nil {
			local = im.Name.Name
		}
		called[local] = target
		if ours, ok := strings.CutPrefix(target, module+"/"); ok {
			if at, ok := rank[ours]; !ok {
				problems = append(problems, fmt.Sprintf("%s: imports %s, which has no place in the order", name, ours))
			} else if at >= own {
				problems = append(problems, fmt.Sprintf("%s: %s imports %s, against the order", name, pkg, ours))
			}
			continue
		}
		if pkg != "cmd/squint" && !slices.Contains(writes, pkg) && slices.Contains(machinePackages, target) {
			problems = append(problems, fmt.Sprintf("%s: %s imports %q; only cmd/squint knows the machine", name, pkg, target))
		}
		if local == "." || local == "_" && slices.Contains(machinePackages, target) {
			problems = append(problems, fmt.Sprintf("%s: imports %q without a name", name, target))
		}
	}
	if pkg == "cmd/squint" {
		return problems
	}
	ast.Inspect(file, func(n ast.Node) bool {
		sel, ok := n.(*ast.SelectorExpr)
		if !ok {
			return true
		}
		x, ok := sel.X.(*ast.Ident)
		if !ok {
			return true
		}
		target := called[x.Name]
		if slices.Contains(machineNames[target], sel.Sel.Name) || slices.Contains(environment[target], sel.Sel.Name) {
			problems = append(problems, fmt.Sprintf("%s: %s uses %s.%s; only cmd/squint knows clock and environment", name, pkg, target, sel.Sel.Name))
		}
		return true
	})
	return problems
}

// Each planted fault must be found, and the sound twin must not.
func TestImportsCheckFindsFaults(t *testing.T) {
	for _, c := range []struct{ name, file, source, want string }{
		{"sound", "trace/walk.go", "package trace\nimport (\"time\"; \"squint/scene\")\nvar D = time.Second\nvar S = scene.Room\n", ""},
		{"main may", "cmd/squint/main.go", "package main\nimport (\"os\"; \"time\"; \"squint/cmd/squint/internal/report\")\nvar T = time.Now()\nvar A = os.Args\nvar R = report.Write\n", ""},
		{"report may write", "cmd/squint/internal/report/a.go", "package report\nimport \"os\"\nvar C = os.Create\n", ""},
		{"generator", "cmd/squint/demo/generate/main.go", "package main\nimport \"os\"\nvar C = os.Create\n", ""},
		{"tests may", "trace/walk_test.go", "package trace\nimport (\"os\"; \"squint/glare\")\n", ""},
		{"upwards", "trace/walk.go", "package trace\nimport \"squint/glare\"\n", "trace imports glare, against the order"},
		{"itself", "scene/a.go", "package scene\nimport \"squint/scene\"\n", "scene imports scene, against the order"},
		{"renamed", "materials/a.go", "package materials\nimport s \"squint/scene\"\n", "materials imports scene, against the order"},
		{"other system", "trace/bvh/a_windows.go", "//go:build windows\n\npackage bvh\nimport \"squint/trace\"\n", "trace/bvh imports trace, against the order"},
		{"unknown", "scene/util/a.go", "package util\n", "package scene/util has no place in the order"},
		{"unknown import", "trace/a.go", "package trace\nimport \"squint/lamp\"\n", "imports lamp, which has no place"},
		{"files", "scene/a.go", "package scene\nimport \"os\"\n", "scene imports \"os\"; only cmd/squint"},
		{"files in guide", "cmd/squint/guide/a.go", "package guide\nimport \"os\"\n", "only cmd/squint knows the machine"},
		{"clock", "glare/a.go", "package glare\nimport \"time\"\nvar T = time.Now()\n", "glare uses time.Now"},
		{"clock renamed", "glare/a.go", "package glare\nimport clock \"time\"\nvar T = clock.Since\n", "glare uses time.Since"},
		{"environment", "cmd/squint/internal/report/a.go", "package report\nimport \"os\"\nvar E = os.Getenv(\"X\")\n", "uses os.Getenv"},
		{"dot import", "glare/a.go", "package glare\nimport . \"time\"\n", "without a name"},
	} {
		t.Run(c.name, func(t *testing.T) {
			problems, _, err := checkHouse(fstest.MapFS{c.file: {Data: []byte(c.source)}})
			if err != nil {
				t.Fatal(err)
			}
			got := strings.Join(problems, "\n")
			if c.want == "" && got != "" || c.want != "" && !strings.Contains(got, c.want) {
				t.Errorf("got %q, want %q", got, c.want)
			}
		})
	}
}
