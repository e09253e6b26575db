// Bundle makes bundle.js, the page's one script, of the modules in web/. Run it
// by "go generate" in the package above; the same sources give the same bytes.
package main

import (
	"fmt"
	"os"

	"github.com/evanw/esbuild/pkg/api"
)

func main() {
	r := api.Build(api.BuildOptions{
		EntryPoints: []string{"web/main.js"}, Outfile: "bundle.js",
		Bundle: true, Write: true, Format: api.FormatIIFE, Target: api.ES2022, Charset: api.CharsetASCII,
		MinifyWhitespace: true, MinifySyntax: true, MinifyIdentifiers: true, LogLevel: api.LogLevelWarning,
	})
	if len(r.Errors) > 0 {
		os.Exit(1)
	}
	for _, f := range r.OutputFiles {
		fmt.Printf("%s: %d bytes\n", f.Path, len(f.Contents))
	}
}
