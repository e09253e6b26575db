package mesh

import "bytes"

// lineReader returns the lines of a text, those that end in a backslash joined
// with the next, except comments: they may end in the path of a folder.
type lineReader struct {
	data   []byte
	line   int // where the line last returned started, from 1
	after  int // lines read so far
	joined []byte
}

func (r *lineReader) next() (line []byte, ok bool) {
	line, ok = r.single()
	r.line = r.after
	if !ok || !continues(line) {
		return line, ok
	}
	if key, _ := field(line); len(key) > 0 && key[0] == '#' {
		return line, true
	}
	r.joined = r.joined[:0]
	for ok && continues(line) {
		r.joined = append(append(r.joined, line[:len(line)-1]...), ' ')
		line, ok = r.single()
	}
	r.joined = append(r.joined, line...)
	return r.joined, true
}

// single returns the next line of the file without its end.
func (r *lineReader) single() ([]byte, bool) {
	if len(r.data) == 0 {
		return nil, false
	}
	r.after++
	line := r.data
	if i := bytes.IndexByte(r.data, '\n'); i >= 0 {
		line, r.data = r.data[:i], r.data[i+1:]
	} else {
		r.data = nil
	}
	return bytes.TrimSuffix(line, []byte{'\r'}), true
}

func continues(line []byte) bool { return len(line) > 0 && line[len(line)-1] == '\\' }

// field returns the first word of line and what follows it.
func field(line []byte) (word, rest []byte) {
	start := 0
	for start < len(line) && blank(line[start]) {
		start++
	}
	end := start
	for end < len(line) && !blank(line[end]) {
		end++
	}
	return line[start:end], line[end:]
}
