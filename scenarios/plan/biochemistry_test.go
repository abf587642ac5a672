package plan

import (
	"encoding/csv"
	"fmt"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"shadeledger/leaf"
	"shadeledger/scenarios"
)

// seedlingOf reads the sound plan with one seedling in place of its own.
func seedlingOf(t testing.TB, seedling string) (*scenarios.Plan, []Fault) {
	t.Helper()
	text := strings.Replace(string(sound(t, "")), "{species: Quercus rubra, height: 0.5 m}", seedling, 1)
	return parse("plan.yaml", []byte(text), Options{}, nil)
}

// workedRow is one worked value of biochemistry.
type workedRow struct {
	id, topic, output, mode string
	in                      map[string]float64
	want                    float64
}

func workedRows(t *testing.T) (out []workedRow) {
	t.Helper()
	f, err := os.Open("../../testdata/leaf/biochemistry.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	records, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	for _, r := range records[1:] {
		w := workedRow{id: r[0], topic: r[1], output: r[3], in: map[string]float64{}}
		for _, pair := range strings.Split(r[2], ";") {
			k, v, _ := strings.Cut(pair, "=")
			if k == "mode" {
				w.mode = v
				continue
			}
			if w.in[k], err = strconv.ParseFloat(v, 64); err != nil && v != "" {
				t.Fatal(err)
			}
		}
		if w.want, err = strconv.ParseFloat(r[4], 64); err != nil {
			t.Fatal(err)
		}
		out = append(out, w)
	}
	return out
}

// A plan with fixed capacities respires by night what the worked values say from 5 to 40 deg C, and nets by day what they say at 25 and what the
// coupled solution of Bernacchi's terms says elsewhere.
func TestFixedCapacitiesAreBernacchis(t *testing.T) {
	nights, days, rd25 := 0, 0, 0.0
	rows := workedRows(t)
	for _, w := range rows {
		if w.output == "Rd/Rd25" && w.in["T_C"] == 25 {
			rd25 = w.want
		}
	}
	for _, w := range rows {
		night := w.output == "Rd/Rd25"
		day := w.topic == "coupled FvCB + stomata" && w.output == "A" && w.mode == "Bernacchi" && w.in["g0"] == 0
		if !night && !day {
			continue
		}
		v, j, rd, g1 := 50.0, 90.0, 0.8, 4.45
		if day {
			v, j, rd, g1 = w.in["Vcmax25"], w.in["Jmax25"], w.in["Rd25"], w.in["g1"]
		}
		p, faults := seedlingOf(t, fmt.Sprintf("{species: Quercus rubra, height: 0.5 m, leaf: {biochemistry: {vcmax: %g, jmax: %g, rd: %g, g1: %g, capacities: fixed}}}", v, j, rd, g1))
		if p == nil {
			t.Fatal(faults)
		}
		s := p.Seedlings[0]
		set, T := s.Chemistry.Leaf.Set(60), w.in["T_C"]
		breath := set.Rd * s.Temperature.RdFactor(T)
		got, want := breath/rd, w.want/rd25
		if day {
			days++
			k := leaf.Kinetics{G1: g1, Heat: leaf.Bernacchi{}}.Ratios(leaf.Air{Temperature: T, CO2: w.in["Ca"], VPD: w.in["D_kPa"]})
			got, want = leaf.Set{Ag: set.Ag * k.Ag, Phi: set.Phi * k.Phi, Cap: set.Cap * k.Cap, Theta: set.Theta}.Gross(w.in["I"])-breath, w.want
			for _, T := range []float64{2, 12, 33} {
				air := leaf.Air{PPFD: w.in["I"], Temperature: T, CO2: w.in["Ca"], VPD: w.in["D_kPa"]}
				e := s.Chemistry.Leaf.Assimilate(air)
				if net := e.Gross - set.Rd*s.Temperature.RdFactor(T); math.Abs(net-e.Net) > 1e-9 {
					t.Errorf("%s at %g C: net %g, %g coupled", w.id, T, net, e.Net)
				}
			}
		} else {
			nights++
		}
		if !(math.Abs(got-want) <= 1e-6*math.Max(1e-2, math.Abs(want))) {
			t.Errorf("%s %v: %.8g, worked %.8g", w.id, w.in, got, want)
		}
	}
	t.Logf("%d of respiration alone, %d of net assimilation", nights, days)
	if nights != 8 || days != 9 { // all that there are
		t.Errorf("%d worked values of respiration and %d of net assimilation", nights, days)
	}
}

// Acclimated capacities keep the respiration of Heskel et al. (2016).
func TestAcclimatedCapacitiesBreatheAsHeskel(t *testing.T) {
	p, faults := seedlingOf(t, "{species: Betula alleghaniensis, height: 0.5 m, leaf: {biochemistry: {}}}")
	if p == nil {
		t.Fatal(faults)
	}
	want := math.Exp(0.1012*(10-25) - 0.0005*(10*10-25*25))
	if got := p.Seedlings[0].Temperature.RdFactor(10); math.Abs(got/want-1) > 1e-12 {
		t.Errorf("%g at 10 C, %g by Heskel et al.", got, want)
	}
}
