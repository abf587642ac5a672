package decide

import (
	"shadeledger/scenarios"
	"shadeledger/scenarios/decide/draws"
)

// closingInputs are what draws of a later year vary besides: how fast border crowns come in and thinned canopies get their leaves back.
func closingInputs(p *scenarios.Plan) (out []Input) {
	closing := p.Years.Closing
	if opens(p) && closing[1] > 0 && closing[0] < closing[2] {
		out = append(out, Input{Key: "years.side_closure", Label: "speed of border crowns", Unit: "m/y", Source: "the plan, or its region", Seedling: -1,
			Doubt: draws.Doubt{Low: closing[0], Best: closing[1], High: closing[2]}, vary: func(c *change, x float64) { c.closing = x / closing[1] }})
	}
	back := draws.Doubt{Low: regrowthPace[Early], Best: regrowthPace[Likely], High: regrowthPace[Late]}
	if r := p.Years.Regrowth; r[1] > 0 && r[0] < r[2] {
		back = draws.Doubt{Low: r[0] / r[1], Best: 1, High: r[2] / r[1]}
	}
	return append(out, Input{Key: "years.leaf_regrowth", Label: "years until leaves are back", Unit: "x likely", Source: "Beaudet et al. 2004, Chan et al. 2006", Seedling: -1,
		Doubt: back, vary: func(c *change, x float64) { c.regrowth = x }})
}

// aged is a plan some years after the cut: crowns come in and leaves come back at the drawn pace, seedlings are new stock of the plan's size.
func (c *change) aged(p *scenarios.Plan, years float64) *scenarios.Plan {
	if years <= 0 {
		return p
	}
	for i := range p.Treatments {
		t := &p.Treatments[i]
		course := courseOf(p, t)
		course.closing[Likely].Speed *= c.closing
		course.span[Likely] *= c.regrowth
		if grown, err := later(p, t, course.at(Likely, years)); err == nil {
			*t = *grown
		}
	}
	return p
}
