package main

import (
	"runtime/debug"
	"testing"
)

func TestVersionOf(t *testing.T) {
	setting := func(k, v string) debug.BuildSetting { return debug.BuildSetting{Key: k, Value: v} }
	for _, c := range []struct {
		version  string
		settings []debug.BuildSetting
		want     string
	}{
		{"v1.2.3", nil, "v1.2.3"},
		{"", nil, "(devel)"},
		{"(devel)", []debug.BuildSetting{setting("vcs.revision", "0123456789abcdef"), setting("vcs.modified", "false")}, "(devel) 0123456789ab"},
		{"(devel)", []debug.BuildSetting{setting("vcs.revision", "0123456789abcdef"), setting("vcs.modified", "true")}, "(devel) 0123456789ab, modified"},
		{"v0.0.0-20260101000000-0123456789ab", []debug.BuildSetting{setting("vcs.revision", "0123456789abcdef")}, "v0.0.0-20260101000000-0123456789ab"},
	} {
		if got := versionOf(&debug.BuildInfo{Main: debug.Module{Version: c.version}, Settings: c.settings}); got != c.want {
			t.Errorf("%q: got %q, want %q", c.version, got, c.want)
		}
	}
}
