package plan

import (
	"fmt"
	"math"

	"go.yaml.in/yaml/v4"

	"shadeledger/canopy"
	"shadeledger/canopy/inventory"
	"shadeledger/scenarios"
)

func (r *reader) treatments(v val, p *scenarios.Plan, stand map[string]val) {
	if v.node == nil {
		return
	}
	items := r.items(v)
	if len(items) == 0 && v.node.Kind == yaml.SequenceNode {
		r.fault(v, " ", "at least one treatment, such as name: No action")
	}
	seen := map[string]int{}
	for _, item := range items {
		f := r.fields(item)
		var t scenarios.Treatment
		t.Name, _ = r.text(r.need(item, f, "name"))
		r.unique(f["name"], t.Name, seen)
		t.Matrix, t.Trees = p.Stand.Layers, p.Stand.Trees
		if f["matrix"].present() {
			t.Matrix, t.Trees = r.matrix(f["matrix"], p, stand["leaves"]), inventory.Stand{}
		}
		t.Understory = r.keep(f["understory"], p)
		t.Opening = r.opening(item, f, p, stand["leaves"])
		r.count(item, f, p, &t)
		if f["thin"].present() {
			r.alone(f, "thin", "matrix", "steps")
			r.thin(f["thin"], p, &t)
		}
		if f["steps"].present() {
			r.alone(f, "steps", "matrix")
			p.Treatments = append(p.Treatments, r.steps(f["steps"], p, t)...)
			continue
		}
		p.Treatments = append(p.Treatments, t)
	}
}

// matrix is the stand between openings: the uncut one, scaled to an LAI, or stated layers.
func (r *reader) matrix(v val, p *scenarios.Plan, leaves val) []scenarios.Layer {
	uncut := p.Stand.Layers
	f := r.fields(v)
	if f["layers"].present() {
		if f["lai"].present() {
			r.fault(f["lai"], "", "lai or layers, not both")
		}
		return r.layers(f["layers"], leaves)
	}
	lai, ok := r.number(r.need(v, f, "lai"))
	total := 0.0
	for _, l := range uncut {
		total += l.LAI
	}
	if !ok || total == 0 {
		return uncut
	}
	if lai > total*(1+1e-9) {
		r.fault(f["lai"], "", fmt.Sprintf("no more than the uncut stand's leaf area index, %.4g; state layers to add leaves", total))
		return uncut
	}
	out := make([]scenarios.Layer, len(uncut))
	for i, l := range uncut {
		l.LAI *= lai / total
		l.WAI *= lai / total
		out[i] = l
	}
	return out
}

// keep lists the understory that a treatment leaves.
func (r *reader) keep(v val, p *scenarios.Plan) []scenarios.Understory {
	all := p.Stand.Understory
	if v.scalar() {
		switch v.node.Value {
		case "keep":
		case "remove":
			return nil
		default:
			r.fault(v, "", "keep, remove, or {NAME: remove}")
		}
		return all
	}
	if !v.present() {
		return all
	}
	gone := map[string]bool{}
	var names []string
	for _, u := range all {
		names = append(names, u.Name)
	}
	if v.node.Kind != yaml.MappingNode {
		r.fault(v, describe(v.node), "keep, remove, or {NAME: remove}")
		return all
	}
	for i := 0; i+1 < len(v.node.Content); i += 2 {
		k, n := v.node.Content[i], v.node.Content[i+1]
		at := val{node: k, path: join(v.path, k.Value)}
		if !contains(names, k.Value) {
			r.fault(at, "", fmt.Sprintf("no such understory; there is %v", names))
		}
		switch n.Value {
		case "remove":
			gone[k.Value] = true
		case "keep":
		default:
			r.fault(val{node: n, path: at.path}, describe(n), "remove or keep")
		}
	}
	var out []scenarios.Understory
	for _, u := range all {
		if !gone[u.Name] {
			out = append(out, u)
		}
	}
	return out
}

// opening reads the outline and what stands in it.
func (r *reader) opening(item val, f map[string]val, p *scenarios.Plan, leaves val) scenarios.Opening {
	v := f["opening"]
	if !v.present() {
		for _, k := range []string{"measured", "inside", "count", "centres"} {
			if f[k].present() {
				r.fault(f[k], describe(f[k].node), "goes with an opening only")
			}
		}
		return scenarios.NoOpening{}
	}
	o := r.fields(v)
	taped := r.outline(v, o)
	measured, given := r.choice(f["measured"])
	if !given && !f["measured"].present() {
		r.assume(item.path+".measured", "stems", "sizes are taped from stem to stem")
	}
	var c scenarios.Cleared
	if o["polygon"].scalar() {
		c.File = o["polygon"].node.Value
	}
	if taped == nil {
		r.inside(f["inside"], leaves, p, 1)
		return c
	}
	radius := p.Stand.CrownRadius
	var err error
	if measured == "crowns" {
		c.Crowns = taped
		c.Stems, err = canopy.Outset(taped, radius)
	} else {
		c.Stems = taped
		c.Crowns, err = canopy.Inset(taped, radius)
	}
	if err != nil {
		why := ""
		if _, drawn := taped.(canopy.Polygon); drawn {
			why = " (" + err.Error() + ")"
		}
		r.fault(v, " ", fmt.Sprintf("smaller than the crowns that reach %.3g m into it from every side%s; make it larger, or give measured: crowns", radius, why))
		return scenarios.NoOpening{}
	}
	c.Inside = r.inside(f["inside"], leaves, p, c.Stems.Area())
	return c
}

// inside reads what stands in an opening of a stem area, m2.
func (r *reader) inside(v, leaves val, p *scenarios.Plan, stemArea float64) []scenarios.Layer {
	if !v.present() {
		return nil
	}
	if v.scalar() {
		if v.node.Value != "bare" {
			r.fault(v, "", "bare, or a block with layers or keep")
		}
		return nil
	}
	f := r.fields(v)
	if f["keep"].present() {
		r.alone(f, "keep", "layers")
		return r.kept(f["keep"], p, stemArea)
	}
	return r.layers(f["layers"], leaves)
}

// outline reads the one shape of an opening.
func (r *reader) outline(v val, o map[string]val) canopy.Outline {
	if len(o) != 1 {
		r.fault(v, " ", "one of circle, ellipse, strip and polygon")
		return nil
	}
	before := len(r.faults)
	var shape canopy.Outline
	var err error
	switch {
	case o["circle"].present():
		shape, err = r.circle(o["circle"])
	case o["ellipse"].present():
		shape, err = r.ellipse(o["ellipse"])
	case o["strip"].present():
		f := r.fields(o["strip"])
		length, _ := r.quantity(r.need(o["strip"], f, "length"))
		width, _ := r.quantity(r.need(o["strip"], f, "width"))
		bearing, _ := r.bearing(r.need(o["strip"], f, "bearing"))
		shape, err = canopy.NewStrip(length, width, bearing)
	default:
		shape = r.polygon(o["polygon"])
	}
	if len(r.faults) > before {
		return nil
	}
	if err != nil {
		r.fault(v, " ", err.Error())
		return nil
	}
	return shape
}

func (r *reader) circle(v val) (canopy.Outline, error) {
	f := r.fields(v)
	if f["area"].present() {
		if f["diameter"].present() {
			r.fault(f["area"], "", "diameter or area, not both")
		}
		a, _ := r.quantity(f["area"])
		return canopy.NewCircle(math.Sqrt(4 * a / math.Pi))
	}
	d, _ := r.quantity(r.need(v, f, "diameter"))
	return canopy.NewCircle(d)
}

func (r *reader) ellipse(v val) (canopy.Outline, error) {
	f := r.fields(v)
	bearing, _ := r.bearing(r.need(v, f, "bearing"))
	if f["area"].present() || f["ratio"].present() {
		for _, k := range []string{"length", "width"} {
			if f[k].present() {
				r.fault(f[k], "", "length and width, or area and ratio, not both")
			}
		}
		a, _ := r.quantity(r.need(v, f, "area"))
		q, _ := r.number(r.need(v, f, "ratio"))
		length := math.Sqrt(4 * a / math.Pi * q)
		return canopy.NewEllipse(length, length/q, bearing)
	}
	length, _ := r.quantity(r.need(v, f, "length"))
	width, _ := r.quantity(r.need(v, f, "width"))
	return canopy.NewEllipse(length, width, bearing)
}
