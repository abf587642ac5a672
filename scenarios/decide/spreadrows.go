package decide

import "shadeledger/scenarios/decide/draws"

// summary makes the ranges of every row.
func (s *sample) summary() []SpreadRow {
	out := make([]SpreadRow, s.rows)
	for t := range s.p.Treatments {
		for i := range s.p.Seedlings {
			for k, at := range s.at[t] {
				r := s.row(t, i, k)
				out[r] = s.rangesOf(r)
				out[r].Treatment, out[r].Station, out[r].Species = s.p.Treatments[t].Name, at.Name, s.p.Seedlings[i].Name
				out[r].Class = s.full[r].Class
			}
		}
	}
	return out
}

func (s *sample) rangesOf(r int) (out SpreadRow) {
	get := func(of func(*drawnSpot) float64) Range {
		var v []float64
		for i := range s.draw {
			if s.finished[i] {
				v = append(v, of(&s.draw[i].spots[r]))
			}
		}
		x := draws.NewSpread(v)
		return Range{x.Low, x.Median, x.High}
	}
	out.Light = get(func(x *drawnSpot) float64 { return x.light })
	out.LeafOn = get(func(x *drawnSpot) float64 { return x.leafOn })
	out.Net = get(func(x *drawnSpot) float64 { return x.net })
	out.Ratio = get(func(x *drawnSpot) float64 { return x.ratio })
	out.BreakEven = get(func(x *drawnSpot) float64 { return x.breakEven })
	out.Threshold = get(func(x *drawnSpot) float64 { return x.threshold })
	n := 0.0
	for i := range s.draw {
		if s.finished[i] {
			out.Chance[s.draw[i].spots[r].class()]++
			n++
		}
	}
	for c := range out.Chance {
		out.Chance[c] /= n
	}
	return out
}
