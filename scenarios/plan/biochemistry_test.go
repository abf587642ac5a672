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

// area_basis scales what the plan gives per leaf area, and nothing else: not the slope of the stomata, not the library's values.
func TestAreaBasisOfCapacities(t *testing.T) {
	type leafOf struct{ vcmax, jmax, rd, g1, lma float64 }
	read := func(seedling string) leafOf {
		p, faults := seedlingOf(t, seedling)
		if p == nil {
			t.Fatal(seedling, faults)
		}
		b := p.Seedlings[0].Chemistry.Leaf
		return leafOf{b.Vcmax, b.Jmax, b.Rd, b.G1, p.Seedlings[0].Traits.At(50).LMA}
	}
	const spruce = "{species: Picea rubens, height: 0.5 m, leaf: {biochemistry: {vcmax: 40, jmax: 70, rd: 0.7, g1: 2.4%s, growth_light: 50}%s}}"
	library := read(fmt.Sprintf(spruce, "", ", area_basis: half")).lma
	for word, scale := range map[string]float64{"half": 1, "projected": 2 / (1 + math.Pi/2), "all": 2} {
		got := read(fmt.Sprintf(spruce, ", lma: 150", ", area_basis: "+word))
		want := leafOf{40 * scale, 70 * scale, 0.7 * scale, 2.4, 150 * scale}
		for _, v := range [][2]float64{{got.vcmax, want.vcmax}, {got.jmax, want.jmax}, {got.rd, want.rd}, {got.g1, want.g1}, {got.lma, want.lma}} {
			if math.Abs(v[0]/v[1]-1) > 1e-12 {
				t.Errorf("%s: %+v, want %+v", word, got, want)
			}
		}
		if got := read(fmt.Sprintf(spruce, "", ", area_basis: "+word)).lma; got != library {
			t.Errorf("%s: the library's lma becomes %g from %g", word, got, library)
		}
	}
	const birch = "{species: Betula alleghaniensis, height: 0.5 m, leaf: {biochemistry: {rd: 0.6}, area_basis: %s}}"
	half, flat, all := read(fmt.Sprintf(birch, "half")), read(fmt.Sprintf(birch, "projected")), read(fmt.Sprintf(birch, "all"))
	if flat != half || all.rd != 1.2 || all.vcmax != half.vcmax || all.lma != half.lma {
		t.Errorf("flat leaves: half %+v, projected %+v, all %+v", half, flat, all)
	}
}

// Needles need the area their own values are per; where none is given per area there is nothing to say it of.
func TestAreaBasisFaults(t *testing.T) {
	for seedling, want := range map[string]string{
		"{species: Picea rubens, height: 0.5 m, leaf: {biochemistry: {vcmax: 40, jmax: 70}}}":                                "area_basis: missing; give area that rates, capacities and lma are per",
		"{species: Betula alleghaniensis, height: 0.5 m, leaf: {biochemistry: {g1: 4}, area_basis: all}}":                    "area_basis: all; nothing here is given per leaf area",
		"{species: Picea rubens, height: 0.5 m, leaf: {area_basis: projected}}":                                              "area_basis: projected; nothing here is given per leaf area",
		"{species: Picea rubens, height: 0.5 m, leaf: {biochemistry: {vcmax: 40, jmax: 70, lma: 150}, area_basis: needles}}": "area_basis: needles;",
	} {
		p, faults := seedlingOf(t, seedling)
		if p != nil || len(faults) != 1 || !strings.Contains(faults[0].Error(), want) {
			t.Errorf("%s: %v, want %q", seedling, faults, want)
		}
	}
}
