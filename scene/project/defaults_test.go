package project

import (
	"slices"
	"strings"
	"testing"
)

// TestDefaults wants each default to be readable, and to have a source.
func TestDefaults(t *testing.T) {
	if n := len(Defaults()); n < 30 {
		t.Errorf("got %d defaults, want those of all tables", n)
	}
	check := func(table string, keys []described) {
		for _, k := range keys {
			what := dotted(table, k.name)
			if k.about == "" {
				t.Errorf("%s: says nothing about itself", what)
			}
			if k.want(k.field) == "another value" {
				t.Errorf("%s: spec.want does not know %T", what, k.field)
			}
			if len(valueSchema(k)) == 0 {
				t.Errorf("%s: valueSchema does not know %T", what, k.field)
			}
			if (k.def == "") != (k.source == "") {
				t.Errorf("%s: got default %q with source %q, want both or neither", what, k.def, k.source)
			}
			if k.required && k.def != "" {
				t.Errorf("%s: required and with a default", what)
			}
			if k.def == "" {
				continue
			}
			def, problem := parse([]byte("v = " + k.def))
			if problem != nil {
				t.Errorf("%s: default %s: %v", what, k.def, problem)
				continue
			}
			r := &reader{}
			if why := r.set(def.table["v"], "", k.spec, k.field); why != "" {
				t.Errorf("%s: default %s: %s", what, k.def, why)
			}
		}
	}
	check("", describe(projectKeys))
	for _, s := range sections() {
		check(s.name, s.keys)
		for _, v := range s.variants {
			check(s.name+" "+v.name, v.keys)
		}
	}
}

// TestKeys wants keys in snake case, once each, and no key outside the tables.
func TestKeys(t *testing.T) {
	seen := map[string]bool{}
	for _, k := range Keys() {
		id := k.Table + " " + k.Type + " " + k.Name
		if seen[id] {
			t.Errorf("%s: twice", id)
		}
		seen[id] = true
		if strings.ToLower(k.Name) != k.Name || strings.ContainsAny(k.Name, "- .") {
			t.Errorf("%s: not in snake case", id)
		}
	}
	var tables []string
	for _, k := range Keys() {
		if !slices.Contains(tables, k.Table) {
			tables = append(tables, k.Table)
		}
	}
	want := []string{"", "alternative", "site", "weather", "ground", "horizon", "occupancy", "room", "mesh", "finish", "opening", "light_shelf", "sill", "roller", "blind", "louvres", "anidolic_ceiling", "control", "viewpoint", "view_grid", "work_plane", "criteria", "limit", "simulation"}
	if !slices.Equal(tables, want) {
		t.Errorf("tables: got %q, want %q", tables, want)
	}
}
