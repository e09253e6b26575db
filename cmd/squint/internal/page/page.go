package page

import (
	_ "embed"

	"bytes"
	"cmp"
	"crypto/sha256"
	"encoding/base64"
	"encoding/json"
	"errors"
	"fmt"
	"html/template"
	"io"
	"slices"
	"strings"

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
	// Pictures names the alternative that the page opens with, and whose pictures
	// of any hour are the finest; "" for the one that [Chosen] takes.
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
	var text bytes.Buffer
	err = t.Execute(&text, shown{Policy: policy(script, style), Style: template.CSS(style), Chosen: chosen, Designs: data.Designs, First: first,
		Compare: len(all) > 1, Trade: tradeOff(data.Designs, chosen)})
	if err != nil {
		return err
	}
	// JSON blocks are not run by browsers. The JSON has no "<" (encoding/json
	// escapes it), so that no text can end a block.
	// Texts stand in the page already.
	lean := data
	lean.Designs = nil
	for _, d := range data.Designs {
		c := *d
		c.Words = Words{Alternative: d.Alternative, Worst: d.Worst}
		lean.Designs = append(lean.Designs, &c)
	}
	block, err := json.Marshal(lean)
	if err != nil {
		return err
	}
	fmt.Fprintf(&text, "<script type=\"application/json\" id=\"data\">%s</script>\n", block)
	held, err := hold(all, chosen, text.Len()+len(script))
	if err != nil {
		return err
	}
	if _, err := w.Write(text.Bytes()); err != nil {
		return err
	}
	for _, b := range held {
		if _, err := fmt.Fprintf(w, blobBlock, b.id, asText(b.packed)); err != nil {
			return err
		}
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

// mostFailing is how many verdicts that are not met are shown at once. Own choice.
const mostFailing = 12

// failing are the verdicts that are not met: the worst few, and the rest. Those
// of no viewpoint come first, then viewpoints by their hours over the limit.
func failing(d *Design) (out [2][]Verdict) {
	var all []Verdict
	for _, v := range d.Verdicts {
		if v.Outcome != "met" {
			all = append(all, v)
		}
	}
	if len(all) <= mostFailing {
		return [2][]Verdict{all, nil}
	}
	over := map[string]float64{}
	for _, v := range d.Views {
		over[v.Subject] = v.Over
	}
	slices.SortStableFunc(all, func(a, b Verdict) int {
		x, isX := over[a.Subject]
		y, isY := over[b.Subject]
		switch {
		case isX != isY && isY:
			return -1
		case isX != isY:
			return 1
		}
		return cmp.Compare(y, x)
	})
	return [2][]Verdict{all[:mostFailing], all[mostFailing:]}
}

func metOnly(all []Verdict) (out []Verdict) {
	for _, v := range all {
		if v.Outcome == "met" {
			out = append(out, v)
		}
	}
	return out
}
