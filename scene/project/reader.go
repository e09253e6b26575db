package project

import (
	"fmt"
	"math"
)

// reader collects the problems of one file.
type reader struct {
	file      string
	dir       string // of the project file, from the root of the file system
	problems  Problems
	refs      []reference
	finishes  []*node // of Project.Finishes, in step
	shelves   []*node // of Project.LightShelves, in step
	sills     []*node
	rollers   []*node
	blinds    []*node
	louvres   []*node
	openings  []*node
	anidolic  []*node // of Project.AnidolicCeilings, in step
	controls  []*node
	limits    []*node
	rooms     []*node // of Project.Rooms, in step
	viewGrids []*node // of Project.ViewGrids, in step
}

// reference is a name that must exist.
type reference struct {
	line      int
	key, noun string
	name      string
	types     []string // of a finish; nil for any
	at        *node    // marked bad where the name does not exist; or nil
}

func (r *reader) add(line int, key, format string, args ...any) {
	r.problems = append(r.problems, Problem{File: r.file, Line: line, Key: key, Message: fmt.Sprintf(format, args...)})
}

// reject reports a problem of a table's key and marks both.
func (r *reader) reject(table *node, section, key, format string, args ...any) {
	table.bad = true
	if child := table.table[key]; child != nil {
		child.bad = true
	}
	r.add(table.lineOf(key), dotted(section, key), format, args...)
}

func dotted(section, key string) string {
	switch {
	case section == "":
		return key
	case key == "":
		return section
	}
	return section + "." + key
}

// decode fills dst from a table: what is written, else the default.
func decode[T any](r *reader, n *node, section string, keys []key[T], dst *T) {
	for i := range keys {
		k := &keys[i]
		field := k.field(dst)
		child := n.table[k.name]
		switch {
		case child != nil:
			if why := r.set(child, dotted(section, k.name), &k.spec, field); why != "" {
				r.reject(n, section, k.name, "%s", why)
			} else if child.bad {
				n.bad = true
			}
		case k.required:
			r.reject(n, section, k.name, "missing; want %s", k.want(field))
		case k.def != "":
			// TestDefaults proves that every default can be read.
			if def, problem := parse([]byte("v = " + k.def)); problem == nil {
				r.set(def.table["v"], "", &k.spec, field)
			}
		}
	}
}

// unknown reports the keys that a table must not have.
func (r *reader) unknown(n *node, section string, known []string) {
	in := make(map[string]bool, len(known))
	for _, k := range known {
		in[k] = true
	}
	for _, k := range n.keys {
		if !in[k] {
			r.reject(n, section, k, "unknown key; %s", DidYouMean(k, known))
		}
	}
}

func names[T any](keys []key[T]) []string {
	list := make([]string, len(keys))
	for i, k := range keys {
		list[i] = k.name
	}
	return list
}

// set converts a value and puts it into the field. It returns what is wrong.
func (r *reader) set(n *node, key string, s *spec, field any) string {
	wrong := func() string { return "got " + n.got() + ", want " + s.want(field) }
	switch f := field.(type) {
	case *string:
		text, ok := n.value.(string)
		if !ok {
			return wrong()
		}
		return r.text(n, key, s, text, f)
	case *bool:
		v, ok := n.value.(bool)
		if !ok {
			return wrong()
		}
		*f = v
	case *float64:
		if s.form == clock {
			v, ok := clockTime(n)
			if !ok {
				return wrong()
			}
			*f = v
			return ""
		}
		v, ok := number(n, s.in)
		if !ok {
			return wrong()
		}
		*f = v
	case **float64:
		v, ok := number(n, s.in)
		if !ok {
			return wrong()
		}
		*f = &v
	case *int:
		v, ok := n.value.(int64)
		if !ok || !s.in.holds(float64(v)) {
			return wrong()
		}
		*f = int(v)
	case *uint64:
		v, ok := n.value.(int64)
		if !ok || v < 0 {
			return wrong()
		}
		*f = uint64(v)
	case *[3]float64:
		return fill(n, s, field, f[:])
	case **[3]float64:
		var v [3]float64
		if why := fill(n, s, field, v[:]); why != "" {
			return why
		}
		*f = &v
	case *[12]float64:
		if s.form == everyMonth {
			v, ok := number(n, s.in)
			if !ok {
				return wrong()
			}
			for i := range f {
				f[i] = v
			}
			return ""
		}
		return fill(n, s, field, f[:])
	case *[4][3]float64:
		if len(n.list) != len(f) {
			return wrong()
		}
		for i, row := range n.list {
			if why := fill(row, s, &f[i], f[i][:]); why != "" {
				return fmt.Sprintf("corner %d: %s", i+1, why)
			}
		}
	case *[]float64:
		if n.list == nil {
			return wrong()
		}
		if len(n.list) == 0 {
			return "got no numbers, want at least one"
		}
		v := make([]float64, len(n.list))
		if why := fill(n, s, field, v); why != "" {
			return why
		}
		*f = v
	case *[][2]float64:
		rows, why := rowsOf(n, s, field, 2)
		for _, row := range rows {
			*f = append(*f, [2]float64(row))
		}
		return why
	case *[][3]float64:
		rows, why := rowsOf(n, s, field, 3)
		for _, row := range rows {
			*f = append(*f, [3]float64(row))
		}
		return why
	case *[]HorizonPoint:
		rows, why := rowsOf(n, s, field, 2)
		for _, row := range rows {
			*f = append(*f, HorizonPoint{row[0], row[1]})
		}
		return why
	case *[7]bool:
		return weekdays(n, wrong, f)
	case *[]MonthDay:
		if n.list == nil {
			return wrong()
		}
		for i, item := range n.list {
			d, ok := monthDay(item)
			if !ok {
				return fmt.Sprintf("item %d: got %s, want a day such as %q, month first", i+1, item.got(), "12-25")
			}
			*f = append(*f, d)
		}
	case **MonthDay:
		d, ok := monthDay(n)
		if !ok {
			return wrong()
		}
		*f = &d
	case *[]SlatState:
		return r.slatStates(n, key, wrong, f)
	case *[]string:
		return r.nameList(n, key, s, wrong, f)
	case *[]ControlPeriod:
		return r.periods(n, key, wrong, f)
	case *[]Assignment:
		if n.table == nil {
			return wrong()
		}
		for _, name := range n.keys {
			child := n.table[name]
			finish, ok := child.value.(string)
			if !ok {
				n.bad = true
				r.add(child.line, dotted(key, name), "got %s, want a finish's name in quotes", child.got())
				continue
			}
			*f = append(*f, Assignment{Name: name, Finish: finish, Line: child.line})
			r.refs = append(r.refs, reference{line: child.line, key: dotted(key, name), noun: "finish", name: finish})
		}
	}
	return ""
}

// number is a finite number within the range.
func number(n *node, in within) (float64, bool) {
	var x float64
	switch v := n.value.(type) {
	case int64:
		x = float64(v)
	case float64:
		x = v
	default:
		return 0, false
	}
	if math.IsNaN(x) || math.IsInf(x, 0) {
		return 0, false
	}
	return x, in.holds(x)
}
