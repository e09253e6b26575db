package main

import (
	"bytes"
	_ "embed"
	"fmt"
	"text/template"
)

//go:embed demo.tmpl
var demoTemplate string

type pane struct {
	Name, Group, Corners string
	Number               int
}

type view struct{ Name, Note, Position, Azimuth, Toward string }

// northDeg is the azimuth of the model's +y axis: the windows look along -y,
// 15 degrees east of south.
const northDeg = 345

// demoProject writes the demo's project file from the same dimensions as its
// geometry.
func demoProject() ([]byte, error) {
	t, err := template.New("demo").Parse(demoTemplate)
	if err != nil {
		return nil, err
	}
	var data struct {
		North        int
		Windows      []pane
		Clerestories []pane
		Lowered      []pane // clerestories under the mouths of ducts
		Mouths       []pane
		Rollers      []pane
		Views        []view
	}
	data.North = northDeg
	for bay := range bays {
		group := "lower west"
		if bay >= bays/2 {
			group = "lower east"
		}
		x0, x1 := bay*bayMM+glassFrom, bay*bayMM+glassTo
		w := pane{fmt.Sprintf("window %d", bay+1), group, corners(x0, x1, windowSill, windowHead), bay + 1}
		data.Windows = append(data.Windows, w)
		if group == "lower west" {
			data.Rollers = append(data.Rollers, w)
		}
		above := func(to *[]pane, name, group string, z0, z1 int) {
			*to = append(*to, pane{fmt.Sprintf("%s %d", name, bay+1), group, corners(x0, x1, z0, z1), bay + 1})
		}
		above(&data.Clerestories, "clerestory", "clerestories", clerestorySill, clerestoryHead)
		above(&data.Lowered, "clerestory", "clerestories", clerestorySill, lowHead)
		above(&data.Mouths, "mouth", "mouths", mouthSill, clerestoryHead)
	}
	for _, d := range desks() {
		v := view{Name: fmt.Sprintf("desk %d", d.number), Note: d.note, Position: triple(d.eye())}
		if d.screen {
			v.Toward = triple(d.screenAt())
		} else {
			v.Azimuth = fmt.Sprint(azimuth(d.facing))
		}
		data.Views = append(data.Views, v)
	}
	var b bytes.Buffer
	if err := t.Execute(&b, data); err != nil {
		return nil, err
	}
	return b.Bytes(), nil
}

// azimuth is the compass azimuth of a step along x or y of the model.
func azimuth(step [2]int) int {
	model := 0 // +y
	switch step {
	case [2]int{1, 0}:
		model = 90
	case [2]int{0, -1}:
		model = 180
	case [2]int{-1, 0}:
		model = 270
	}
	return (model + northDeg) % 360
}

func triple(p point) string {
	return fmt.Sprintf("[%s, %s, %s]", metres(p[0]), metres(p[1]), metres(p[2]))
}

// corners of a pane in the window wall, counter-clockwise seen from outdoors.
func corners(x0, x1, z0, z1 int) string {
	return fmt.Sprintf("[%s, %s, %s, %s]", triple(point{x0, glassY, z0}), triple(point{x1, glassY, z0}),
		triple(point{x1, glassY, z1}), triple(point{x0, glassY, z1}))
}
