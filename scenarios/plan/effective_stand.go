package plan

import (
	"fmt"
	"math"
	"strings"

	"shadeledger/leaf"
	"shadeledger/scenarios"
)

func (w *writer) stand(p *scenarios.Plan) {
	s := p.Stand
	w.line(0, "stand", "")
	w.line(1, "height", w.given("stand.height", s.Height, metres))
	w.line(1, "crown_base", w.given("stand.crown_base", s.CrownBase, metres))
	w.line(1, "crown_radius", w.given("stand.crown_radius", s.CrownRadius, metres))
	if !math.IsNaN(s.Area) {
		w.line(1, "area", exact(s.Area, s.Area, func(v float64) float64 { return v * 1e4 / 1e4 })+" ha")
	}
	if !math.IsNaN(s.Age) {
		w.line(1, "age", w.given("stand.age", s.Age, number))
	}
	w.block(p, 1, "stand.site_index")
	w.facts(p, 1, "stand.smallest_dbh")
	w.readings(s.Readings)
	w.line(1, "layers", w.layers(s.Layers, "stand.layers"))
	if len(s.Understory) == 0 {
		return
	}
	w.line(1, "understory", "")
	for i, u := range s.Understory {
		w.b.WriteString("    - {name: " + quote(u.Name) + ", " + w.layer(u.Layer, "base", "height", fmt.Sprintf("stand.understory[%d]", i)) + "}\n")
	}
}

// readings writes what corrects the leaf area.
func (w *writer) readings(r scenarios.Readings) {
	if r.File != "" {
		w.line(1, "readings", quote(r.File))
	}
	if len(r.Openness) == 0 {
		return
	}
	var values []string
	for _, x := range r.Openness {
		values = append(values, exact(x, 100*x, func(v float64) float64 { return v / 100 }))
	}
	w.line(1, "closure_readings", fmt.Sprintf("{kind: open, instrument: %s, values: [%s]}", quote(r.Instrument), strings.Join(values, ", ")))
}

// layers is a list of layers in flow form.
func (w *writer) layers(list []scenarios.Layer, path string) string {
	var out []string
	for i, l := range list {
		at := fmt.Sprintf("%s[%d]", path, i)
		if _, ok := w.doubts["stand.lai"]; ok && len(list) == 1 && path == "stand.layers" {
			w.moveDoubts("stand", at)
		}
		out = append(out, "{"+w.layer(l, "from", "to", at)+"}")
	}
	return "[" + strings.Join(out, ", ") + "]"
}

// moveDoubts carries doubt of keys beside stand.lai to the one layer that stands for them.
func (w *writer) moveDoubts(from, to string) {
	for _, k := range []string{"lai", "wai", "chi", "clumping", "absorptance"} {
		if d, ok := w.doubts[join(from, k)]; ok {
			w.doubts[join(to, k)] = d
		}
	}
}

func (w *writer) layer(l scenarios.Layer, bottom, top, path string) string {
	plain := func(key string, x float64) string { return key + ": " + w.given(join(path, key), x, number) }
	parts := []string{
		bottom + ": " + w.given(join(path, bottom), l.Bottom, metres), top + ": " + w.given(join(path, top), l.Top, metres),
		plain("lai", l.LAI), plain("wai", l.WAI), plain("chi", l.Chi), plain("clumping", l.Clumping), plain("absorptance", l.Absorptance),
	}
	if l.Species != "" {
		parts = append(parts, "species: "+quote(l.Species))
	}
	return strings.Join(append(parts, "leaves: "+leaves(l.Calendar)), ", ")
}

func leaves(c leaf.Calendar) string {
	if d, ok := c.(leaf.Deciduous); ok {
		return fmt.Sprintf("{out: %s, full: %s, colour: %s, bare: %s}", d.Out, d.Full, d.Colour, d.Bare)
	}
	return "evergreen"
}
