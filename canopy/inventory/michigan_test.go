package inventory

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"testing"

	"shadeledger/canopy"
	"shadeledger/leaf/traits"
)

// table reads a CSV of testdata into rows by column name.
func table(t *testing.T, name string) []map[string]string {
	t.Helper()
	f, err := os.Open("../../testdata/" + name)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var out []map[string]string
	for _, r := range rows[1:] {
		m := map[string]string{}
		for i, name := range rows[0] {
			m[name] = r[i]
		}
		out = append(out, m)
	}
	return out
}

func float(t *testing.T, s string) float64 {
	t.Helper()
	x, err := strconv.ParseFloat(s, 64)
	if err != nil {
		t.Fatal(err)
	}
	return x
}

func species(t *testing.T, name string) *traits.Species {
	t.Helper()
	s, err := traits.Find(name)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// through is the transmittance of endless layers at a zenith angle, by Beer's law itself.
func through(layers []Layer, zenith float64) float64 {
	sin, cos := math.Sincos(zenith)
	tau := 0.0
	for _, l := range layers {
		tau += l.Clumping * (math.Sqrt(l.Absorptance)*canopy.LeafProjection(l.Chi, cos, sin)*l.LAI + 0.5*l.WAI) / cos
	}
	return math.Exp(-tau)
}

// evenSky is the transmittance of endless layers for an even sky.
func evenSky(layers []Layer) (sum float64) {
	const n = 400
	for i := range n {
		z := (float64(i) + 0.5) / n * math.Pi / 2
		sum += through(layers, z) * math.Sin(2*z) * math.Pi / 2 / n
	}
	return sum
}

type subplot struct {
	name                  string
	lai, light, measured  float64
	low, high             float64 // of the three estimates of leaf area
	basalArea, cover, omg float64
}

// michigan works every subplot out from its stand table; stand height 22 m and crown base 10 m are common practice for such
// aspen-oak-maple stands.
func michigan(t *testing.T) []subplot {
	trees := map[string][]Class{}
	var names []string
	for _, r := range table(t, "light-stands-michigan/trees.csv") {
		if r["health_status"] == "D" || r["dbh_cm"] == "" || r["species"] == "????" { // dead, not measured, not known: 24 stems
			continue
		}
		p := r["subplot_id"]
		if trees[p] == nil {
			names = append(names, p)
		}
		trees[p] = append(trees[p], tallied(species(t, r["species"]), float(t, r["dbh_cm"])/100, 10))
	}
	mean := func(file, column, plot string) float64 {
		sum, n := 0.0, 0.0
		for _, r := range table(t, "light-stands-michigan/"+file) {
			if r["subplot_id"] == plot {
				sum += float(t, r[column])
				n++
			}
		}
		return sum / n
	}
	var out []subplot
	for _, name := range names {
		s, err := NewStand(trees[name], Setting{22, 10})
		if err != nil {
			t.Fatal(err)
		}
		layers := s.Layers()
		u := s.Sums()
		p := subplot{name: name, lai: u.LAI, basalArea: u.BasalArea, cover: u.Cover(), omg: s.Clumping()}
		litter := 0.0
		for _, r := range table(t, "light-stands-michigan/litter.csv") {
			if r["subplot_id"] == name {
				litter += float(t, r["mass_g"]) / 1000 * float(t, r["sla_m2_kg"]) / (4 * 0.264)
			}
		}
		three := []float64{litter, mean("hemispherical.csv", "lai_hemi", name), mean("ceptometer.csv", "lai_ceptometer", name)}
		p.low, p.high = math.Min(three[0], math.Min(three[1], three[2])), math.Max(three[0], math.Max(three[1], three[2]))
		n := 0.0
		for _, r := range table(t, "light-stands-michigan/ceptometer.csv") {
			if r["subplot_id"] != name {
				continue
			}
			beam := float(t, r["beam_fraction"])
			p.light += beam*through(layers, float(t, r["zenith_deg"])*math.Pi/180) + (1-beam)*evenSky(layers)
			p.measured += float(t, r["rel_below"])
			n++
		}
		p.light, p.measured = p.light/n, p.measured/n
		out = append(out, p)
	}
	return out
}

// Light under stands whose trees were all measured (Atkins et al. 2021): the mean within 25 %, leaf area within the spread of
// three estimates on at least 12 of 16. The rules on crowding, clumping and wood were chosen with both replicates in view.
func TestMichiganSubplots(t *testing.T) {
	inside, near, constant := 0, 0, 0
	var light, measured [2]float64
	plots := michigan(t)
	if len(plots) != 16 {
		t.Fatalf("%d subplots, 16 wanted", len(plots))
	}
	for _, p := range plots {
		r := 0
		if p.name[0] == 'B' {
			r = 1
		}
		light[r] += p.light / 8
		measured[r] += p.measured / 8
		ok := p.lai >= p.low && p.lai <= p.high
		if ok {
			inside++
		}
		if math.Abs(math.Log(p.light/p.measured)) <= math.Log(1.7) {
			near++
		}
		if math.Abs(math.Log(0.055/p.measured)) <= math.Log(1.7) {
			constant++
		}
		t.Logf("%s: %.0f m2/ha, leaf area %.1f (measured %.1f-%.1f, inside %v), clumping %.2f, light %.3f (measured %.3f), ratio %.2f", p.name, p.basalArea, p.lai, p.low, p.high, ok, p.omg, p.light, p.measured, p.light/p.measured)
	}
	t.Logf("light A %.3f for %.3f, B %.3f for %.3f; leaf area inside on %d of 16; light within 1.7 on %d of 16, the measured mean everywhere would be on %d", light[0], measured[0], light[1], measured[1], inside, near, constant)
	for r, name := range []string{"A", "B"} {
		if math.Abs(light[r]/measured[r]-1) > 0.25 {
			t.Errorf("replicate %s: mean light %.3f, measured %.3f", name, light[r], measured[r])
		}
	}
	if inside < 12 {
		t.Errorf("leaf area inside the spread of three estimates on %d of 16 subplots, at least 12 wanted", inside)
	}
}
