package main

import (
	"fmt"
	"io/fs"
	"slices"

	"github.com/spf13/pflag"

	"squint/cmd/squint/demo"
	"squint/scene/project"
)

// pick says which project, which of its alternatives, and how its systems
// stand: what every command with a scene asks for.
type pick struct {
	Project      string   // "" for the demo
	Alternatives []string // nil for all
	States       []string // NAME=STATE
}

func (o *pick) flags(f *pflag.FlagSet, all string) {
	f.StringArrayVar(&o.Alternatives, "alternative", nil, "`name` of the alternative, "+all+";\nrepeat it for several")
	f.StringArrayVar(&o.States, "state", nil, stateFlag)
}

// designs are the picked alternatives of a project, read and checked.
type designs struct {
	fsys    fs.FS
	all     []*project.Project // at least one
	explain func(error) error  // puts the names of files as the user typed them
}

func (o pick) open() (designs, error) {
	d := designs{fsys: demo.FS(), explain: func(err error) error { return err }}
	name := demo.Project
	if o.Project != "" {
		s, err := openSource(o.Project)
		if err != nil {
			return d, inputError{err}
		}
		d.fsys, name, d.explain = s, s.name, s.explain
	}
	all, err := project.LoadAll(d.fsys, name)
	if err != nil {
		return d, inputError{d.explain(err)}
	}
	var names []string
	for _, p := range all {
		if p.Alternative != "" {
			names = append(names, p.Alternative)
		}
	}
	for _, a := range o.Alternatives {
		if !slices.Contains(names, a) {
			return d, usageError{fmt.Errorf("--alternative: got %q, want an alternative of the project; %s", a, project.DidYouMean(a, names))}
		}
	}
	for _, p := range all {
		if o.Alternatives == nil || slices.Contains(o.Alternatives, p.Alternative) {
			d.all = append(d.all, p)
		}
	}
	d.all, err = hold(d.all, o.States)
	return d, err
}
