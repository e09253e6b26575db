package main

import "runtime/debug"

// version says which program this is, as far as its build knows.
func version() string {
	info, ok := debug.ReadBuildInfo()
	if !ok {
		return "unknown"
	}
	return versionOf(info)
}

func versionOf(info *debug.BuildInfo) string {
	v := info.Main.Version
	if v == "" {
		v = "(devel)"
	}
	var revision, dirty string
	for _, s := range info.Settings {
		switch {
		case s.Key == "vcs.revision":
			revision = s.Value
		case s.Key == "vcs.modified" && s.Value == "true":
			dirty = ", modified"
		}
	}
	// A version made up by the go command holds the revision already.
	if v == "(devel)" && revision != "" {
		v += " " + revision[:min(12, len(revision))] + dirty
	}
	return v
}
