package mesh

import (
	"bytes"
	"errors"
	"fmt"
	"strconv"

	"gonum.org/v1/gonum/spatial/r3"
)

// readASCIISTL reads any number of solids. Words may be in any case and layout.
func readASCIISTL(b *builder, data []byte) error {
	r := asciiSTL{builder: b, stlScanner: stlScanner{data: data, line: 1}, same: map[string]int{}}
	for {
		word := r.next()
		switch {
		case word == nil:
			if r.open {
				return r.cut()
			}
			if r.solids > 1 {
				b.notef("%d solids, each a group of its own", r.solids)
			}
			if len(r.empty) > 0 {
				b.notef("%s without facets, the first called %q", plural(len(r.empty), "solid"), r.empty[0])
			}
			if r.renamed > 0 {
				b.notef("%s bearing a name already used: a number was added", plural(r.renamed, "solid"))
			}
			return nil
		case r.isWord(word, "solid"):
			r.begin()
		case r.isEnd(word, "solid"):
			r.restOfLine()
			r.leave()
		case r.isWord(word, "facet"):
			if err := r.facet(); err != nil {
				return err
			}
		default:
			return r.expected("facet or endsolid", word)
		}
	}
}

type asciiSTL struct {
	*builder
	stlScanner
	open    bool   // between solid and endsolid
	name    string // of the solid
	group   int32  // of the solid, -1 before its first facet
	solids  int
	renamed int
	same    map[string]int // solids so far by their own name
	empty   []string
}

// begin starts a solid; its name is the rest of the line.
func (r *asciiSTL) begin() {
	r.leave()
	name := r.builder.name(r.restOfLine())
	if name == "" {
		name = baseName(r.mesh.File)
	}
	r.solids++
	r.same[name]++
	if n := r.same[name]; n > 1 {
		own := name
		for r.same[name] > 0 {
			name = fmt.Sprintf("%s %d", own, n)
			n++
		}
		r.same[own] = n - 1
		r.same[name] = 1
		r.renamed++
	}
	r.open, r.name, r.group = true, name, -1
}

// leave ends a solid, with endsolid or where the next one starts without it.
func (r *asciiSTL) leave() {
	if r.open && r.group < 0 {
		r.empty = append(r.empty, r.name)
	}
	r.open = false
}

// facet reads from after the word facet to endfacet. The normal is skipped:
// exporters write anything there, and the order of the vertices says it.
func (r *asciiSTL) facet() error {
	if !r.open {
		return &ParseError{File: r.mesh.File, Line: r.line, Key: "facet",
			Problem: "got a facet outside a solid, want a line \"solid NAME\" before it"}
	}
	if err := r.want("normal"); err != nil {
		return err
	}
	for range 3 {
		if r.next() == nil {
			return r.cut()
		}
	}
	if err := r.want("outer"); err != nil {
		return err
	}
	if err := r.want("loop"); err != nil {
		return err
	}
	var v [3]r3.Vec
	for i := range v {
		if err := r.want("vertex"); err != nil {
			return err
		}
		var err error
		if v[i], err = r.vertex(); err != nil {
			return err
		}
	}
	for _, word := range []string{"loop", "facet"} {
		got := r.next()
		if got == nil {
			return r.cut()
		}
		if r.isWord(got, "vertex") {
			return &ParseError{File: r.mesh.File, Line: r.line, Key: "vertex", Problem: "got a fourth vertex, want three; an STL facet is a triangle"}
		}
		if !r.isEnd(got, word) {
			return r.expected("end"+word, got)
		}
	}
	if r.group < 0 {
		r.group = r.builder.group(r.name)
	}
	r.add(v, r.group, -1)
	return nil
}

func (r *asciiSTL) vertex() (r3.Vec, error) {
	var c [3]float64
	line := r.line
	for i := range c {
		word := r.next()
		if word == nil {
			return r3.Vec{}, r.cut()
		}
		line = r.line
		var problem string
		if c[i], problem = parseNumber(word); problem != "" {
			return r3.Vec{}, &ParseError{File: r.mesh.File, Line: line, Key: "vertex", Problem: problem}
		}
	}
	p, ok := r.point(c[0], c[1], c[2])
	if !ok {
		return p, &ParseError{File: r.mesh.File, Line: line, Key: "vertex", Problem: badPoint(c[0], c[1], c[2]), Err: ErrNotFinite}
	}
	return p, nil
}

func (r *asciiSTL) want(word string) error {
	got := r.next()
	if got == nil {
		return r.cut()
	}
	if !r.isWord(got, word) {
		return r.expected(word, got)
	}
	return nil
}

func (r *asciiSTL) expected(want string, got []byte) error {
	return &ParseError{File: r.mesh.File, Line: r.line, Problem: fmt.Sprintf("got %q, want %s; the file is damaged, export it again", quoted(got), want)}
}

func (r *asciiSTL) cut() error {
	return &ParseError{File: r.mesh.File, Line: r.line, Err: ErrTruncated,
		Problem: "got the end of the file, want endsolid; it was cut short, export it again"}
}

// quoted shortens a word for a message.
func quoted(word []byte) string {
	s, _ := cleanName(word[:min(len(word), 40)])
	if len(word) > 40 {
		s += "..."
	}
	return s
}

// parseNumber reads a number and says what is wrong with it. Numbers that are
// not finite are passed on: the caller knows the whole point.
func parseNumber(word []byte) (x float64, problem string) {
	x, err := strconv.ParseFloat(string(word), 64)
	switch {
	case err == nil || isRange(err):
		return x, ""
	case bytes.IndexByte(word, ',') >= 0:
		return 0, fmt.Sprintf("got %q, want a number with a decimal point; the file has commas, set the exporter's language or number format to one with points", quoted(word))
	}
	return 0, fmt.Sprintf("got %q, want a number", quoted(word))
}

func isRange(err error) bool { return errors.Is(err, strconv.ErrRange) }

// stlScanner splits text into words and counts lines. It keeps no more than a
// position, so no layout makes it recurse or grow.
type stlScanner struct {
	data []byte
	pos  int
	line int // of the word last returned, from 1
}

func blank(c byte) bool {
	return c == ' ' || c == '\n' || c == '\t' || c == '\r' || c == '\v' || c == '\f'
}

// next returns the next word, nil at the end.
func (s *stlScanner) next() []byte {
	for s.pos < len(s.data) && blank(s.data[s.pos]) {
		if s.data[s.pos] == '\n' {
			s.line++
		}
		s.pos++
	}
	start := s.pos
	for s.pos < len(s.data) && !blank(s.data[s.pos]) {
		s.pos++
	}
	if start == s.pos {
		return nil
	}
	return s.data[start:s.pos]
}

// restOfLine returns what follows on this line, up to the words "facet
// normal": a whole file may stand on one line. After endsolid these then count
// as a facet outside a solid: nothing is lost without a word.
func (s *stlScanner) restOfLine() []byte {
	start := s.pos
	for s.pos < len(s.data) && s.data[s.pos] != '\n' {
		s.pos++
	}
	rest := s.data[start:s.pos]
	for at := 0; at < len(rest); {
		word := stlScanner{data: rest, pos: at}
		first := word.next()
		at = word.pos
		if s.isWord(first, "facet") && s.isWord(word.next(), "normal") {
			s.pos = start + at - len(first)
			return rest[:at-len(first)]
		}
	}
	return rest
}

// isWord compares without regard to case.
func (s *stlScanner) isWord(word []byte, want string) bool {
	return len(word) == len(want) && foldEqual(word, want)
}

// isEnd accepts "endloop" and "end loop" for loop, having read the first word.
func (s *stlScanner) isEnd(word []byte, want string) bool {
	if s.isWord(word, "end"+want) {
		return true
	}
	if !s.isWord(word, "end") {
		return false
	}
	back := *s
	if s.isWord(s.next(), want) {
		return true
	}
	*s = back
	return false
}

func foldEqual(word []byte, lower string) bool {
	for i := range word {
		c := word[i]
		if 'A' <= c && c <= 'Z' {
			c += 'a' - 'A'
		}
		if c != lower[i] {
			return false
		}
	}
	return true
}
