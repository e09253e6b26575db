package guide

import (
	"fmt"
	"strings"

	"squint/glare/daylight"
	"squint/glare/verdict"
	"squint/scene/project"
)

// keys lists the keys of a table of the project file that all its items have.
func keys(table string) (string, error) { return kind(table, "") }

// kind lists the keys of one type of a table.
func kind(table, kind string) (string, error) {
	var b strings.Builder
	for _, k := range project.Keys() {
		if k.Table == table && k.Type == kind {
			b.WriteString(keyLine(k))
		}
	}
	if b.Len() == 0 {
		return "", fmt.Errorf("guide: the project file has no table %q with keys of type %q", table, kind)
	}
	return strings.TrimRight(b.String(), "\n"), nil
}

func keyLine(k project.Key) string {
	text := k.About + ": " + k.Want + "."
	switch {
	case k.Required:
		text += " Required."
	case k.Default != "":
		text += " Default " + k.Default
		if k.Source != "" {
			text += " (" + k.Source + ")"
		}
		text += "."
	}
	return Hang(fmt.Sprintf("  %-21s ", k.Name), text)
}

// hours is the one table of which hours count.
func hours() string {
	var b strings.Builder
	for _, r := range daylight.HourRules {
		b.WriteString(Hang(fmt.Sprintf("  %-19s ", r.Metric), r.Base.String()+". "+r.Source+"."))
	}
	return strings.TrimRight(b.String(), "\n")
}

func protection() string {
	var b strings.Builder
	for _, l := range verdict.ProtectionLevels {
		fmt.Fprintf(&b, "  %-8s DGP over %.2f in at most %g %% of the usage time\n", l.Name, l.DGP, 100*l.TimeShare)
	}
	return strings.TrimRight(b.String(), "\n")
}

func provision() string {
	var b strings.Builder
	for _, l := range daylight.ProvisionLevels {
		fmt.Fprintf(&b, "  %-8s %g lx on %g %% and %g lx on %g %% of the plane,\n           for %g %% of the daylight hours\n",
			l.Name, l.TargetLx, 100*l.TargetShare, l.MinimumLx, 100*l.MinimumShare, 100*l.TimeShare)
	}
	return strings.TrimRight(b.String(), "\n")
}

func roofs() string {
	var b strings.Builder
	for _, l := range daylight.RoofProvisionLevels {
		fmt.Fprintf(&b, "  %-8s %g lx on %g %% of the plane, for %g %% of the daylight hours\n", l.Name, l.TargetLx, 100*l.TargetShare, 100*l.TimeShare)
	}
	return strings.TrimRight(b.String(), "\n")
}

func viewLevels() string {
	var b strings.Builder
	for _, l := range verdict.ViewLevels {
		layers := [4]string{1: "the landscape", 2: "the landscape and ground or sky", 3: "landscape, ground and sky"}[l.Layers]
		fmt.Fprintf(&b, "  %-8s %2g degrees, %2g m, %s\n", l.Name, l.AngleDeg, l.DistanceM, layers)
	}
	return strings.TrimRight(b.String(), "\n")
}

func sunLevels() string {
	var b strings.Builder
	for _, l := range verdict.SunLevels {
		fmt.Fprintf(&b, "  %-8s %g h\n", l.Name, l.Hours)
	}
	return strings.TrimRight(b.String(), "\n")
}

func statusList(list []Status) string {
	var b strings.Builder
	for _, s := range list {
		b.WriteString(Hang(fmt.Sprintf("  %3d  %-9s  ", s.Code, s.Name), s.Meaning))
	}
	return strings.TrimRight(b.String(), "\n")
}
