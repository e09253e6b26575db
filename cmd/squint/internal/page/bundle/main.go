// Bundle makes bundle.js, the page's one script, of the modules in web/. Run it
// by "go generate" in the package above; the same sources give the same bytes.
// With -check it writes nothing and fails where they differ.
package main

import (
	"bytes"
	"fmt"
	"os"
	"slices"

	"github.com/evanw/esbuild/pkg/api"
)

const file = "bundle.js"

func main() {
	r := api.Build(api.BuildOptions{
		EntryPoints: []string{"web/main.js"}, Outfile: file,
		Bundle: true, Format: api.FormatIIFE, Target: api.ES2022, Charset: api.CharsetASCII,
		MinifyWhitespace: true, MinifySyntax: true, MinifyIdentifiers: true, LogLevel: api.LogLevelWarning,
	})
	if len(r.Errors) > 0 {
		os.Exit(1)
	}
	made := r.OutputFiles[0].Contents
	if slices.Contains(os.Args[1:], "-check") {
		if old, err := os.ReadFile(file); err != nil || !bytes.Equal(old, made) {
			fmt.Fprintln(os.Stderr, file+" is not what web/ gives; run go generate ./cmd/squint/internal/page")
			os.Exit(1)
		}
		return
	}
	if err := os.WriteFile(file, made, 0o644); err != nil {
		fmt.Fprintln(os.Stderr, err)
		os.Exit(1)
	}
}
