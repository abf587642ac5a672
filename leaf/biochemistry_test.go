package leaf

import (
	"encoding/csv"
	"math"
	"os"
	"strings"
	"testing"
)

// Every worked value of biochemistry: kinetics over temperature, acclimated peaks, stomata, coupled assimilation and quantum yield.
func TestWorkedBiochemistry(t *testing.T) {
	f, err := os.Open("../testdata/leaf/biochemistry.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	records, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	seen, worst := map[string]int{}, 0.0
	for _, r := range records[1:] {
		in, mode := map[string]float64{}, ""
		for _, pair := range strings.Split(r[2], ";") {
			k, v, _ := strings.Cut(pair, "=")
			if k == "mode" {
				mode = v
				continue
			}
			if v != "" { // no growth temperature where nothing is acclimated
				in[k] = atof(t, v)
			}
		}
		got, want := workedOut(t, r[1], r[3], in, mode), atof(t, r[4])
		off := math.Abs(got/want - 1)
		if !(off <= atof(t, r[6])) {
			t.Errorf("%s %s %s %s: %.10g, %.10g wanted", r[0], r[1], r[2], r[3], got, want)
		}
		worst = math.Max(worst, off)
		seen[r[1]]++
	}
	t.Logf("%v, worst %.1e", seen, worst)
	for _, topic := range []string{"FvCB temperature", "peaked Arrhenius", "coupled FvCB + stomata", "stomata", "quantum yield"} {
		if seen[topic] == 0 {
			t.Errorf("no row of %s", topic)
		}
	}
}

// workedOut works one row out.
func workedOut(t *testing.T, topic, output string, in map[string]float64, mode string) float64 {
	T := in["T_C"]
	switch topic {
	case "FvCB temperature":
		if output == "Kc*(1+O/Ko)" {
			return Biochemistry{Vcmax: 1, Jmax: 1, Heat: Bernacchi{}}.at(Air{Temperature: T}).rubisco
		}
		return map[string]arrhenius{"Kc": carboxylation, "Ko": oxygenation, "Gamma*": compensation,
			"Vcmax/Vcmax25": rubiscoHeat, "Jmax/Jmax25": electronHeat, "Rd/Rd25": breathHeat}[output].at(T)
	case "peaked Arrhenius":
		h := Acclimated{in["Tgrowth_C"]}
		if output == "Vcmax/Vcmax25" {
			return h.vcmax(T)
		}
		return h.jmax(T)
	case "quantum yield":
		if ci := 400 * 4.45 / 5.45; math.Abs(ci-in["Ci"]) < 1e-3 {
			return QuantumYield(ci, T) // the table prints six digits of it
		}
	case "stomata":
		b := Biochemistry{Vcmax: 50, Jmax: 90, Rd: 0.5, G1: in["g1"], Heat: Bernacchi{}}
		return b.Assimilate(Air{PPFD: 500, Temperature: 25, CO2: 400, VPD: in["D_kPa"]}).Ci / 400
	case "coupled FvCB + stomata":
		b := Biochemistry{Vcmax: in["Vcmax25"], Jmax: in["Jmax25"], Rd: in["Rd25"], G1: in["g1"], G0: in["g0"], Heat: Bernacchi{}}
		if mode != "Bernacchi" {
			b.Heat = Acclimated{in["Tgrowth_C"]}
		}
		if err := b.Check(); err != nil {
			t.Fatal(err)
		}
		e := b.Assimilate(Air{PPFD: in["I"], Temperature: T, CO2: in["Ca"], VPD: in["D_kPa"]})
		switch output {
		case "A":
			return e.Net
		case "Ci":
			return e.Ci
		case "gsw":
			return e.Conductance
		}
	}
	t.Fatalf("%s, %s: no such row known", topic, output)
	return 0
}

// In darkness a leaf breathes, more light and more CO2 never harm, and with a residual conductance the three equations hold together.
func TestBiochemistryLaws(t *testing.T) {
	b := Biochemistry{Vcmax: 60, Jmax: 105, Rd: 0.8, G1: 4.45, Heat: Acclimated{18}}
	if e := b.Assimilate(Air{PPFD: 0, Temperature: 20, CO2: 400, VPD: 1}); e.Gross != 0 || e.Net >= 0 {
		t.Errorf("darkness: %+v", e)
	}
	for _, g0 := range []float64{0, 0.01} {
		b.G0 = g0
		last := math.Inf(-1)
		for _, I := range []float64{0, 20, 100, 400, 1500} {
			a := Air{PPFD: I, Temperature: 22, CO2: 400, VPD: 1.2}
			e := b.Assimilate(a)
			if e.Net < last {
				t.Errorf("g0 %g: %g at %g umol, %g at less light", g0, e.Net, I, last)
			}
			last = e.Net
			if e.Net > 0 {
				if off := math.Abs(e.Conductance/waterOverCarbon*(a.CO2-e.Ci) - e.Net); off > 1e-6 {
					t.Errorf("g0 %g at %g umol: the stomata pass %g more than is fixed", g0, I, off)
				}
				if richer := b.Assimilate(Air{PPFD: I, Temperature: 22, CO2: 600, VPD: 1.2}); richer.Net < e.Net {
					t.Errorf("at 600 ppm %g, at 400 ppm %g", richer.Net, e.Net)
				}
				if drier := b.Assimilate(Air{PPFD: I, Temperature: 22, CO2: 400, VPD: 2.5}); drier.Ci > e.Ci {
					t.Errorf("CO2 within %g in dry air, %g in moist", drier.Ci, e.Ci)
				}
			}
		}
	}
}
