package project

import (
	"bytes"
	"errors"
	"fmt"
	"slices"
	"strconv"
	"strings"

	"github.com/pelletier/go-toml/v2"
	"github.com/pelletier/go-toml/v2/unstable"
)

// node is one value of the file with the line it stands on. go-toml decoded
// into structs would cut and pad arrays and match keys in any case, silently;
// decoded into a map it does neither, but knows no lines, so the lines are
// taken from its parser and joined to the values here.
type node struct {
	line  int
	table map[string]*node // of a table
	keys  []string         // of a table, in the file's order
	list  []*node          // of an array
	value any              // of anything else: string, int64, float64, bool, date or time
	bad   bool             // a problem was reported of it
}

// lineOf is the line of a key, or of the table where it is missing.
func (n *node) lineOf(key string) int {
	if child := n.table[key]; child != nil {
		return child.line
	}
	return n.line
}

// has is whether the key was written.
func (n *node) has(key string) bool { return n.table[key] != nil }

// good is whether none of the keys, written or not, has a problem.
func (n *node) good(keys ...string) bool {
	for _, k := range keys {
		if child := n.table[k]; child != nil && child.bad {
			return false
		}
	}
	return true
}

const byteOrderMark = "\xef\xbb\xbf"

// parse reads TOML. The error is a Problem without File, or nil.
func parse(data []byte) (*node, *Problem) {
	if bytes.HasPrefix(data, []byte("\xff\xfe")) || bytes.HasPrefix(data, []byte("\xfe\xff")) {
		return nil, &Problem{Line: 1, Message: "got text in UTF-16, want UTF-8; save the file as UTF-8"}
	}
	data = bytes.TrimPrefix(data, []byte(byteOrderMark))
	values := map[string]any{}
	if err := toml.Unmarshal(data, &values); err != nil {
		return nil, syntaxProblem(err)
	}
	pos := positions{at: map[string]place{"": {line: 1}}, count: map[string]int{}}
	if err := pos.read(data); err != nil {
		return nil, syntaxProblem(err)
	}
	return pos.join("", values, 1), nil
}

func syntaxProblem(err error) *Problem {
	p := &Problem{Message: strings.TrimPrefix(err.Error(), "toml: "), Err: err}
	var de *toml.DecodeError
	if errors.As(err, &de) {
		p.Line, _ = de.Position()
		p.Key = strings.Join(de.Key(), ".")
	}
	if strings.Contains(p.Message, "escape") || strings.Contains(p.Message, "hexadecimal") {
		p.Message += "; in double quotes a backslash starts a code: write paths with /"
	}
	return p
}

// place is where a value stands.
type place struct{ line, order int }

// positions maps the path of each value to its place. A path joins its parts
// by NUL, which no key of ours and no printed name holds; the part of an
// array's element is # and its index.
type positions struct {
	at    map[string]place
	count map[string]int // elements so far of each array of tables
	lines []int          // offset of each line's first byte
}

func (p *positions) read(data []byte) error {
	p.lines = []int{0}
	for i, c := range data {
		if c == '\n' {
			p.lines = append(p.lines, i+1)
		}
	}
	var parser unstable.Parser
	parser.Reset(data)
	table := ""
	for parser.NextExpression() {
		e := parser.Expression()
		switch e.Kind {
		case unstable.Table:
			table = p.walk("", e.Key(), false)
		case unstable.ArrayTable:
			table = p.walk("", e.Key(), true)
		case unstable.KeyValue:
			p.keyValue(table, e)
		}
	}
	return parser.Error()
}

// walk goes along a dotted key and notes each part that is new.
func (p *positions) walk(path string, keys unstable.Iterator, element bool) string {
	for keys.Next() {
		k := keys.Node()
		path = join(path, string(k.Data))
		p.note(path, p.line(k))
		if n := p.count[path]; n > 0 && !(element && k.Next() == nil) {
			path = join(path, "#"+strconv.Itoa(n-1))
		} else if element && k.Next() == nil {
			p.count[path] = n + 1
			path = join(path, "#"+strconv.Itoa(n))
			p.note(path, p.line(k))
		}
	}
	return path
}

func (p *positions) keyValue(table string, e *unstable.Node) {
	keys := e.Key()
	line := 0
	for keys.Next() {
		table = join(table, string(keys.Node().Data))
		line = p.line(keys.Node())
		p.note(table, line)
	}
	p.inside(table, e.Value(), line)
}

func (p *positions) inside(path string, v *unstable.Node, line int) {
	if v.Raw.Length > 0 && v.Kind != unstable.Array {
		line = p.line(v)
	}
	p.note(path, line)
	switch v.Kind {
	case unstable.Array:
		it := v.Children()
		for i := 0; it.Next(); i++ {
			p.inside(join(path, "#"+strconv.Itoa(i)), it.Node(), line)
		}
	case unstable.InlineTable:
		it := v.Children()
		for it.Next() {
			p.keyValue(path, it.Node())
		}
	}
}

func (p *positions) note(path string, line int) {
	if _, ok := p.at[path]; !ok {
		p.at[path] = place{line: line, order: len(p.at)}
	}
}

func (p *positions) line(n *unstable.Node) int {
	i, found := slices.BinarySearch(p.lines, int(n.Raw.Offset))
	if !found {
		return i
	}
	return i + 1
}

// join makes the tree of a decoded value.
func (p *positions) join(path string, v any, line int) *node {
	n := &node{line: line}
	if at, ok := p.at[path]; ok {
		n.line = at.line
	}
	switch v := v.(type) {
	case map[string]any:
		n.table = make(map[string]*node, len(v))
		for k, child := range v {
			n.table[k] = p.join(join(path, k), child, n.line)
			n.keys = append(n.keys, k)
		}
		slices.SortFunc(n.keys, func(a, b string) int {
			return p.at[join(path, a)].order - p.at[join(path, b)].order
		})
	case []any:
		n.list = []*node{}
		for i, child := range v {
			n.list = append(n.list, p.join(join(path, "#"+strconv.Itoa(i)), child, n.line))
		}
	default:
		n.value = v
	}
	return n
}

func join(path, part string) string { return path + "\x00" + part }

// got is a value as a message shows it.
func (n *node) got() string {
	switch {
	case n.table != nil:
		return "a table"
	case n.list != nil:
		return count(len(n.list), "value")
	}
	switch v := n.value.(type) {
	case string:
		return quote(v)
	case float64:
		s := strconv.FormatFloat(v, 'g', -1, 64)
		if !strings.ContainsAny(s, ".enN") {
			s += ".0"
		}
		return s
	}
	return fmt.Sprint(n.value)
}

// quote shortens what is too long for a message.
func quote(s string) string {
	if r := []rune(s); len(r) > 60 {
		s = string(r[:57]) + "..."
	}
	return strconv.Quote(s)
}

func count(n int, what string) string {
	if n == 1 {
		return "1 " + what
	}
	return fmt.Sprintf("%d %ss", n, what)
}
