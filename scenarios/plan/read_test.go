package plan

import "testing"

func TestExamplesAreSound(t *testing.T) {
	for _, name := range Examples() {
		p, faults := ReadExample(name, Options{})
		for _, f := range faults {
			t.Error(f.Error())
		}
		if p == nil {
			continue
		}
		if len(p.Treatments) == 0 || len(p.Seedlings) == 0 || p.Weather == nil || p.Stand.Height <= 0 {
			t.Errorf("%s: parts are missing: %d treatments, %d seedlings", name, len(p.Treatments), len(p.Seedlings))
		}
		for _, a := range p.Assumed {
			if a.Key == "" || a.Value == "" || a.Source == "" {
				t.Errorf("%s: an assumed value without key, value or source: %+v", name, a)
			}
		}
	}
}
