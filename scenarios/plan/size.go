package plan

import (
	"strings"

	"shadeledger/scenarios"
)

// What openings are sought for where the plan does not say.
const usualShare, usualUpTo = 0.5, 3.0 // of the area; tree heights

// size reads what openings are sought for.
func (r *reader) size(v val, p *scenarios.Plan) {
	f := r.fields(v)
	p.Size = scenarios.SizeWish{Share: usualShare, UpTo: usualUpTo * p.Stand.Height}
	if x, ok := r.quantity(f["share"]); ok {
		p.Size.Share = x
	}
	if x, ok := r.quantity(f["up_to"]); ok {
		p.Size.UpTo = x
	}
	name, ok := r.text(f["against"])
	if !ok {
		return
	}
	var names []string
	for _, s := range p.Seedlings {
		if s.Name == name {
			p.Size.Against = name
			return
		}
		names = append(names, s.Name)
	}
	r.fault(f["against"], "", "a seedling of the plan: "+strings.Join(names, ", "))
}
