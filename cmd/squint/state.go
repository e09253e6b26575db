package main

import (
	"fmt"
	"slices"
	"strings"

	"squint/scene/project"
)

// stateFlag is the help of the flag that every command with a scene has.
const stateFlag = "`NAME=STATE`: let that blind, louvre or roller stand\nso, whatever it follows; repeat it for several"

// hold lets systems stand in the states of the command line, each NAME=STATE.
// The same name in several alternatives is held in all that have it.
func hold(all []*project.Project, pairs []string) ([]*project.Project, error) {
	if len(pairs) == 0 {
		return all, nil
	}
	out := make([]*project.Project, len(all))
	used := make([]bool, len(pairs))
	var names []string
	for i, p := range all {
		choice := map[string]string{}
		moving := project.Movables(p)
		for _, m := range moving {
			names = append(names, m.Name)
		}
		for k, pair := range pairs {
			name, state, ok := strings.Cut(pair, "=")
			if !ok {
				return nil, usageError{fmt.Errorf("--state: got %q, want NAME=STATE", pair)}
			}
			for _, m := range moving {
				if m.Name != name {
					continue
				}
				used[k] = true
				if !slices.Contains(m.States, state) {
					return nil, usageError{fmt.Errorf("--state %s: got state %q, want one of %s", name, state, strings.Join(m.States, ", "))}
				}
				if before, twice := choice[name]; twice && before != state {
					return nil, usageError{fmt.Errorf("--state %s: got %q and %q, want one of them", name, before, state)}
				}
				choice[name] = state
			}
		}
		out[i] = project.HoldStates(p, choice)
	}
	for k, pair := range pairs {
		if !used[k] {
			name, _, _ := strings.Cut(pair, "=")
			return nil, usageError{fmt.Errorf("--state: got %q, want the name of a system that moves; %s", name, project.DidYouMean(name, names))}
		}
	}
	return out, nil
}
