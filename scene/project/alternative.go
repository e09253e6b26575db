package project

import (
	"slices"
)

// Alternative is one of the designs that a project compares. Every table of a
// list may say with the key only in which alternatives it is there; without
// the key it is in all.
type Alternative struct {
	Name  string
	About string // one line; "" for none
	Line  int
}

var alternativeKeys = []key[Alternative]{
	{spec{name: "name", about: "by which only calls it, shown in results", required: true, form: itemName}, func(a *Alternative) any { return &a.Name }},
	{spec{name: "about", about: "what it is, in one line"}, func(a *Alternative) any { return &a.About }},
}

func checkAlternative(_ *reader, n *node, a *Alternative) { a.Line = n.line }

// onlyKey names the alternatives of a table.
const onlyKey = "only"

// only is the key of every table that an alternative may have or not have.
var onlySpec = described{&spec{name: onlyKey, about: "names of the alternatives that have this; without it, all", in: within{}}, new([]string)}

// optional is whether tables of the section may be of some alternatives only.
func (s section) optional() bool { return s.list && s.name != alternativeTable }

const alternativeTable = "alternative"

// choose removes from the tree what the alternative does not have, and the
// key that says so. alternative "" is that of a file without any.
func (r *reader) choose(root *node, alternative string, known []string) {
	for _, s := range sections() {
		list := root.table[s.name]
		if !s.optional() || list == nil {
			continue
		}
		list.list = slices.DeleteFunc(list.list, func(item *node) bool {
			only := item.table[onlyKey]
			if only == nil {
				return false
			}
			delete(item.table, onlyKey)
			item.keys = slices.DeleteFunc(item.keys, func(k string) bool { return k == onlyKey })
			here := false
			if len(only.list) == 0 {
				r.add(only.line, dotted(s.name, onlyKey), "got %s, want a list of names of alternatives", only.got())
				return false
			}
			for _, name := range only.list {
				text, ok := name.value.(string)
				if !ok || !slices.Contains(known, text) {
					r.add(name.line, dotted(s.name, onlyKey), "got %s, want the name of an alternative; %s", name.got(), DidYouMean(text, known))
				}
				here = here || ok && text == alternative
			}
			return !here
		})
		// A list of which nothing is left is as if it had not been written.
		if list.list != nil && len(list.list) == 0 {
			delete(root.table, s.name)
			root.keys = slices.DeleteFunc(root.keys, func(k string) bool { return k == s.name })
		}
	}
}

// alternativesOf are the names of the file's alternatives, in its order.
func alternativesOf(root *node) (list []string) {
	n := root.table[alternativeTable]
	if n == nil {
		return nil
	}
	for _, item := range n.list {
		if item.table == nil || item.table["name"] == nil {
			continue
		}
		if name, ok := item.table["name"].value.(string); ok && !slices.Contains(list, name) {
			list = append(list, name)
		}
	}
	return list
}
