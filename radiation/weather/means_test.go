package weather

import (
	"math"
	"testing"
	"time"

	"shadeledger/radiation"
)

// The normals of a series made from normals are these again: temperatures to what smoothing the months takes, radiation to a thousandth, whether PAR
// comes from radiation or was measured.
func TestNormalsOfASeries(t *testing.T) {
	n := Normals{}
	for m := range 12 {
		x := -math.Cos(2 * math.Pi * (float64(m) + 0.5) / 12)
		n.Mean[m], n.Min[m], n.Max[m] = 8+12*x, 2+11*x, 14+13*x
		n.Global[m], n.SunshineShare[m], n.DiffuseShare[m] = 12+8*x, math.NaN(), math.NaN()
	}
	site := radiation.Site{Latitude: 44 * math.Pi / 180, Longitude: -72 * math.Pi / 180, UTCOffset: -5}
	par := Par{Fraction: 0.45}
	s := n.Series(site, time.Hour/2, par)
	for _, ratio := range []float64{s.ParRatio, 0} {
		s.ParRatio = ratio
		again := s.Normals(par)
		for m := range 12 {
			if math.Abs(again.Global[m]/n.Global[m]-1) > 1e-3 || math.Abs(again.Mean[m]-n.Mean[m]) > 0.1 || math.Abs(again.Min[m]-n.Min[m]) > 1.5 || math.Abs(again.Max[m]-n.Max[m]) > 1.5 {
				t.Errorf("%s: %.3f MJ for %.3f, mean %.2f for %.2f, from %.2f for %.2f to %.2f for %.2f", time.Month(m+1), again.Global[m], n.Global[m],
					again.Mean[m], n.Mean[m], again.Min[m], n.Min[m], again.Max[m], n.Max[m])
			}
		}
	}
	rows := s.Daily(par)
	sum := 0.0
	for _, r := range rows {
		sum += r.Global / float64(len(rows))
	}
	want := 0.0
	for m, g := range n.Global {
		want += g * float64(time.Date(2025, time.Month(m+2), 0, 0, 0, 0, 0, time.UTC).Day()) / 365
	}
	if len(rows) != 365 || math.Abs(sum/want-1) > 1e-3 {
		t.Errorf("%d rows of %.3f MJ in the mean, %.3f wanted", len(rows), sum, want)
	}
}
