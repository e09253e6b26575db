package page

import (
	_ "embed"

	"bytes"
	"crypto/sha256"
	"encoding/base64"
	"encoding/json"
	"errors"
	"fmt"
	"html/template"
	"io"
	"strings"

	"compress/flate"

	"squint/glare/falsecolour"
)

// bundle is web/ as one script, made by "go generate".
//
//go:generate go run ./bundle
//go:embed bundle.js
var bundle string

//go:embed page.css
var style string

//go:embed page.html
var frame string

// Options choose what a page holds.
type Options struct {
	// Pictures names the alternative whose views can be seen at any hour; "" for
	// the one that [Chosen] takes.
	Pictures string
}

// ErrNoAlternative is wrapped where Options name none of the designs.
var ErrNoAlternative = errors.New("no such alternative")

// Chosen is the design that the page opens with: the fewest viewpoints that
// fail, then the most light at the rear, then the first. Own choice.
func Chosen(all []*Archive) int {
	best := 0
	for i, a := range all {
		x, y := a.Design.Row, all[best].Design.Row
		failX, failY := x.Views-x.ViewsMet, y.Views-y.ViewsMet
		if failX < failY || failX == failY && x.RearDA > y.RearDA {
			best = i
		}
	}
	return best
}

// pageData is what the scripts read.
type pageData struct {
	Chosen  int               `json:"chosen"`
	Designs []*Design         `json:"designs"`
	Maps    map[string]string `json:"maps"` // 256 colours, six digits each
}

// shown is what the frame's template reads.
type shown struct {
	Policy  string
	Style   template.CSS
	Chosen  int
	Designs []*Design
	First   *Design // the chosen one
	Compare bool
	Trade   template.HTML
}

// Write writes the page of one or several designs of a project.
func Write(w io.Writer, all []*Archive, o Options) error {
	if len(all) == 0 {
		return errors.New("page: got no design, want at least one")
	}
	chosen := Chosen(all)
	if o.Pictures != "" {
		chosen = -1
		var names []string
		for i, a := range all {
			if names = append(names, a.Design.Alternative); a.Design.Alternative == o.Pictures {
				chosen = i
			}
		}
		if chosen < 0 {
			return fmt.Errorf("%w: got %q, want one of %s", ErrNoAlternative, o.Pictures, strings.Join(names, ", "))
		}
	}
	data := pageData{Chosen: chosen, Maps: map[string]string{}}
	for _, m := range []falsecolour.Map{falsecolour.Inferno, falsecolour.Cividis, falsecolour.Viridis} {
		data.Maps[m.String()] = hexMap(m)
	}
	for _, a := range all {
		data.Designs = append(data.Designs, &a.Design)
	}
	t, err := template.New("page").Funcs(template.FuncMap{"share": share, "id": ids(), "failing": failing, "viewOf": viewOf, "met": metOnly, "num": number}).Parse(frame)
	if err != nil {
		return err
	}
	script := "\n" + bundle
	first := data.Designs[chosen]
	err = t.Execute(w, shown{Policy: policy(script, style), Style: template.CSS(style), Chosen: chosen, Designs: data.Designs, First: first,
		Compare: len(all) > 1, Trade: tradeOff(data.Designs, chosen)})
	if err != nil {
		return err
	}
	if err := writeData(w, data, all, chosen); err != nil {
		return err
	}
	_, err = io.WriteString(w, "<script>"+script+"</script>\n</body>\n</html>\n")
	return err
}

// policy lets the page load nothing, and run no script but its own.
func policy(script, style string) string {
	hash := func(s string) string {
		sum := sha256.Sum256([]byte(s))
		return "'sha256-" + base64.StdEncoding.EncodeToString(sum[:]) + "'"
	}
	return "default-src 'none'; script-src " + hash(script) + "; style-src " + hash(style) + "; img-src data:; base-uri 'none'; form-action 'none'"
}

// writeData writes the data as JSON blocks, which browsers do not run. The
// JSON has no "<" (encoding/json escapes it), so that no text can end a block.
func writeData(w io.Writer, data pageData, all []*Archive, chosen int) error {
	text, err := json.Marshal(data)
	if err != nil {
		return err
	}
	if _, err := fmt.Fprintf(w, "<script type=\"application/json\" id=\"data\">%s</script>\n", text); err != nil {
		return err
	}
	written := map[string]bool{}
	for i, a := range all {
		for _, id := range a.needed(i == chosen) {
			if written[id] {
				continue
			}
			written[id] = true
			packed, err := a.deflated(id)
			if err != nil {
				return err
			}
			if _, err := fmt.Fprintf(w, "<script type=\"application/json\" id=\"n-%s\">%q</script>\n", id, base64.StdEncoding.EncodeToString(packed)); err != nil {
				return err
			}
		}
	}
	return nil
}

// needed lists the blobs that the page reads, in a fixed order; the pictures
// of any hour only of the chosen design.
func (a *Archive) needed(pictures bool) []string {
	d := &a.Design
	list := []string{d.Records.ID, d.Days.ID, d.Moments.ID, d.Room.Fabric.Numbers.ID, d.Room.Systems.Numbers.ID}
	for i := range d.Planes {
		list = append(list, d.Planes[i].Points.ID, d.Planes[i].Mean.ID, d.Planes[i].Shots.Numbers.ID)
	}
	for i := range d.Views {
		v := &d.Views[i]
		list = append(list, v.Series.ID, v.WorstShot.ID, v.Seen.ID)
		if pictures {
			list = append(list, v.Shots.Numbers.ID)
		}
	}
	out := list[:0]
	for _, id := range list {
		if id != "" {
			out = append(out, id)
		}
	}
	return out
}

// deflated is a blob as the zip file holds it.
func (a *Archive) deflated(id string) ([]byte, error) {
	b, ok := a.blobs[id]
	if !ok {
		return nil, fmt.Errorf("page data: numbers %s are missing; run squint check again", id)
	}
	if b.packed != nil {
		return b.packed, nil
	}
	var out bytes.Buffer
	z, err := flate.NewWriter(&out, flate.BestCompression)
	if err != nil {
		return nil, err
	}
	if _, err := z.Write(b.raw); err != nil {
		return nil, err
	}
	if err := z.Close(); err != nil {
		return nil, err
	}
	return out.Bytes(), nil
}

func hexMap(m falsecolour.Map) string {
	var b strings.Builder
	for i := range 256 {
		c := m.At(float64(i) / 255)
		fmt.Fprintf(&b, "%02x%02x%02x", c.R, c.G, c.B)
	}
	return b.String()
}

// share writes a share in percent; a negative one does not exist.
func share(x float64) string {
	if x < 0 {
		return "-"
	}
	return fmt.Sprintf("%.1f\u00a0%%", 100*x)
}

// viewOf finds a viewpoint by its name; nil where the design has none such.
func viewOf(d *Design, name string) *View {
	for i := range d.Views {
		if d.Views[i].Name == name {
			return &d.Views[i]
		}
	}
	return nil
}

// number tells the template which columns are numbers.
func number(t Table, column int) bool { return column < len(t.Numbers) && t.Numbers[column] }

// ids numbers what needs an id of its own.
func ids() func() int {
	n := 0
	return func() int { n++; return n }
}

func failing(all []Verdict) (out []Verdict) {
	for _, v := range all {
		if v.Outcome != "met" {
			out = append(out, v)
		}
	}
	return out
}

func metOnly(all []Verdict) (out []Verdict) {
	for _, v := range all {
		if v.Outcome == "met" {
			out = append(out, v)
		}
	}
	return out
}
