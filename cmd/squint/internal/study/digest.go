package study

import (
	"crypto/sha256"
	"encoding/binary"
	"encoding/hex"
	"hash"
	"math"
	"reflect"
	"time"
)

// digest is the SHA-256, hexadecimal, of everything that the values hold,
// whatever it is named and behind whatever pointer, so that a field that is
// added later is in it without a word. It is "" where something has no content
// to compare, such as a function.
func digest(values ...any) string {
	d := digester{sum: sha256.New()}
	for _, v := range values {
		d.add(reflect.ValueOf(v))
	}
	if d.failed {
		return ""
	}
	d.flush()
	return hex.EncodeToString(d.sum.Sum(nil))
}

type digester struct {
	sum    hash.Hash
	buf    []byte
	failed bool
}

func (d *digester) flush() {
	d.sum.Write(d.buf)
	d.buf = d.buf[:0]
}

func (d *digester) number(x uint64) {
	if len(d.buf) > 1<<16 {
		d.flush()
	}
	d.buf = binary.LittleEndian.AppendUint64(d.buf, x)
}

func (d *digester) text(s string) {
	d.number(uint64(len(s)))
	d.buf = append(d.buf, s...)
}

func (d *digester) add(v reflect.Value) {
	if !v.IsValid() {
		d.text("nil")
		return
	}
	switch v.Kind() {
	case reflect.Float32, reflect.Float64:
		d.number(math.Float64bits(v.Float()))
	case reflect.Int, reflect.Int8, reflect.Int16, reflect.Int32, reflect.Int64:
		d.number(uint64(v.Int()))
	case reflect.Uint, reflect.Uint8, reflect.Uint16, reflect.Uint32, reflect.Uint64:
		d.number(v.Uint())
	case reflect.Bool:
		d.number(map[bool]uint64{true: 1}[v.Bool()])
	case reflect.String:
		d.text(v.String())
	case reflect.Slice, reflect.Array:
		d.number(uint64(v.Len()))
		for i := range v.Len() {
			d.add(v.Index(i))
		}
	case reflect.Struct:
		// A time is a moment: its location is a pointer to tables.
		if v.Type() == reflect.TypeFor[time.Time]() && v.CanInterface() {
			d.number(uint64(v.Interface().(time.Time).UnixNano()))
			return
		}
		for i := range v.NumField() {
			d.add(v.Field(i))
		}
	case reflect.Pointer, reflect.Interface:
		if v.IsNil() {
			d.text("nil")
			return
		}
		d.text(v.Elem().Type().String())
		d.add(v.Elem())
	default:
		d.failed = true
	}
}
