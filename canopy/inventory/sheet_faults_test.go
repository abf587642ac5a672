package inventory

import (
	"fmt"
	"math"
	"strings"
	"testing"
)

// faulty are sheets that must not load: the faults they must have, as line, column and a piece of what would be right.
var faulty = []struct {
	name, sheet string
	faults      []string
}{
	{"nothing", "", []string{"0||a row of headings"}},
	{"no table", "hello\nworld\n", []string{"0||a row of headings"}},
	{"misspelt", "species,dbh [in],trees/ac\nRed oka,10,20\nsuger mapel,8,3\n", []string{"2|species|red oak (Quercus rubra)", "3|species|sugar maple"}},
	{"misspelt heading of a species", "dbh [in],Red oka,ACSA3,trees/ac\n4,1,24,25\n", []string{"2|Red oka|red oak (Quercus rubra)"}},
	{"names of two species", "species,dbh [cm],N/ha\nEiche,12,125\nbeech,30,4\nQURU - red maple,12,3\n", []string{
		"2|species|Quercus petraea (sessile oak) or Quercus robur", "3|species|Fagus grandifolia (American beech) or Fagus sylvatica", "4|species|red maple"}},
	{"a code without its number", "species,dbh [cm],N/ha\nACSA,12,125\n", []string{"2|species|ACSA3 (Acer saccharum)"}},
	{"code and name disagree", "code,species,dbh [in],trees/ac\nACRU,sugar maple,10,20\n", []string{"2|species|names both Acer rubrum and Acer saccharum"}},
	{"units of a metric sheet", "species,dbh,trees/ha\nBuche,10,20\n", []string{"1|dbh|\"dbh [cm]\" is likely"}},
	{"units of an acre sheet", "species,dbh,trees/ac,height\nred oak,10,20,60\n", []string{"1|dbh|\"dbh [in]\" is likely", "1|height|\"height [ft]\" is likely"}},
	{"all units and a name", "species,dbh,trees\nred oka,10,20\n", []string{"1|dbh|dbh [cm]", "1|trees|per_area [trees/ha]", "2|species|red oak"}},
	{"species columns without a unit", "DBH (in),QURU,ACSA3\n4,1,24\n", []string{"1|QURU|trees/ac is likely"}},
	{"acre and hectare disagree", "species,dbh [in],trees/ac,stems/ha\nred oak,10,20,49.4\nred oak,12,20,60\n", []string{"3|stems/ha|within 2 %"}},
	{"feet and metres disagree", "species,dbh [in],trees/ac,height [ft],height [m]\nred oak,10,20,60,20\n", []string{"2|height [m]|within 2 %"}},
	{"a title of another unit", "Stand 3, dbh in inches\nspecies,dbh [cm],trees/ha\nBuche,10,20\n", []string{"2|dbh [cm]|a line above says in"}},
	{"two units in a column", "species,dbh [cm],trees/ha\nBuche,10 in,20\n", []string{"2|dbh [cm]|a number in cm"}},
	{"stout", "species,dbh [cm],trees/ha\nBuche,300,10\nBuche,30,10\n", []string{"2|dbh [cm]|which unit was meant"}},
	{"thin", "species,dbh [mm],trees/ha\nBuche,12,10\nBuche,15,10\n", []string{"0|dbh [mm]|which unit was meant"}},
	{"tall", "species,dbh [cm],trees/ha,height [m]\nBuche,30,10,95\n", []string{"2|height [m]|were feet meant?"}},
	{"low", "species,dbh [cm],trees/ha,height [m]\nBuche,30,10,1.2\n", []string{"2|height [m]|above 1.3 m"}},
	{"crown above the tree", "species,dbh [cm],trees/ha,height [m],crown base [m]\nBuche,30,10,22,40\n", []string{"2|crown base [m]|below the height"}},
	{"dense", "species,dbh [in],trees/ac\nred oak,20,400\n", []string{"0||were feet meant"}},
	{"dense by basal area", "species,BA [m2/ha]\nred oak,70\nred maple,60\n", []string{"0||were feet meant"}},
	{"counts of no area", "species,dbh [cm],tree_count\nBuche,20,30\nFichte,25,10\n", []string{"0|tree_count|plot_area [ac]"}},
	{"one plot, two areas", "plot,plot_area [ac],species,dbh [in],tree_count\n1,0.1,red oak,10,3\n1,0.2,red oak,12,3\n", []string{"3|plot_area [ac]|one area for plot 1"}},
	{"a line of no plot", "plot,species,dbh [cm],trees/ha\n1,Bu,20,100\n,Fi,20,30\n", []string{"0|plot|the plot on every line"}},
	{"percent of nothing", "species,percent\nBuche,60\nFichte,40\n", []string{"0|percent|the basal area of the stand"}},
	{"percent of 90", "species,percent,BA [m2/ha]\nBuche,60,\nFichte,30,\nTotal,,30\n", []string{"0|percent|100 %"}},
	{"a mark with two meanings", "Art;BHD [cm];N/ha\nBuche;20;1.250\n", []string{"2|N/ha|1250 or 1.250"}},
	{"decimal commas between commas", "species,dbh [cm],N/ha\nBuche,12,5,125\n", []string{"2||semicolons or tabs"}},
	{"thousands without quotes", "species,dbh [cm],N/ha,height [m]\nBuche,6,1,045\n", []string{"2|height [m]|quotation marks"}},
	{"no number", "species,dbh [in],trees/ac\nred oak,ten,20\nred oak,30+,2\nred oak,-4,3\nred oak,12-Oct,5\nred oak,12-10,5\n", []string{
		"2|dbh [in]|a number", "3|dbh [in]|mid-point", "4|dbh [in]|0 or more", "5|dbh [in]|a spreadsheet has made a date", "6|dbh [in]|smaller end"}},
	{"ends of a class", "species,dbh [cm],dbh_to [cm],N/ha\nBuche,18,14,125\n", []string{"2|dbh_to [cm]|the larger end"}},
	{"what is missing", "species,dbh [cm],trees/ha\nBuche,,200\nBuche,12,\n,,220\n", []string{"2|dbh [cm]|the diameter", "3|trees/ha|how many trees", "4|species|or total"}},
	{"a species from a total", "species,dbh [in],trees/ac\nred oak,10,20\nTotal,,20\n,12,5\n", []string{"4|species|or total"}},
	{"dead trees", "species,dbh [in],trees/ac,status\nred oak,10,20,L\nred oak,12,5,D\n", []string{"3|status|living trees"}},
	{"an open quote", "species,dbh [in],trees/ac\n\"red oak,10,20\nsugar maple,8,40\n", []string{"2||close it"}},
	{"two tables", "species,dbh [in],trees/ac\nred oak,10,20\nspecies,height [ft],trees/ac\nred oak,60,20\n", []string{"3||one table a sheet"}},
	{"no diameters", "species,girth [cm],trees/ha\nBuche,110,200\n", []string{"1||a column of diameters"}},
	{"no trees", "species,dbh [cm]\nBuche,10\n", []string{"1||how many trees"}},
	{"twice the same", "species,dbh [cm],trees/ha,stems/ha\nBuche,10,20,20\nBuche,12,20,22\n", []string{"3|stems/ha|the same number"}},
	{"two columns of a species", "dbh [cm],QURU [N/ha],833 [N/ha]\n10,20,20\n", []string{"1|833 [N/ha]|one column of Quercus rubra"}},
	{"only zeros", "species,dbh [cm],trees/ha\nBuche,10,0\n", []string{"0||at least one line"}},
}

func TestSheetFaults(t *testing.T) {
	for _, c := range faulty {
		_, faults := ReadSheet([]byte(c.sheet), bareOptions)
		if len(faults) != len(c.faults) {
			t.Errorf("%s: %d faults, want %d: %+v", c.name, len(faults), len(c.faults), faults)
			continue
		}
		for i, f := range faults {
			w := strings.SplitN(c.faults[i], "|", 3)
			if fmt.Sprint(f.Line) != w[0] || f.Column != w[1] || !strings.Contains(f.Fix, w[2]) {
				t.Errorf("%s: %+v, want %s", c.name, f, c.faults[i])
			}
		}
	}
}

// TestUnitsOfSheets compares with published factors to half their last digit.
func TestUnitsOfSheets(t *testing.T) {
	for text, want := range map[string]float64{
		"in": 0.0254, "inches": 0.0254, `"`: 0.0254, "ft": 0.3048, "feet": 0.3048, "mm": 0.001, "cm": 0.01, "m": 1,
		"trees/ac": 2.471053815, "stems per acre": 2.471053815, "TPA": 2.471053815, "/ac": 2.471053815, "trees ac-1": 2.471053815,
		"N/ha": 1, "Stk/ha": 1, "je ha": 1, "stems ha⁻¹": 1, "ft2/ac": 0.229568411, "sq. ft. per acre": 0.229568411, "ft² ac⁻¹": 0.229568411,
		"m²/ha": 1, "qm/ha": 1, "ac": 0.40468564224, "ha": 1, "m2": 1e-4, "%": 1,
	} {
		u, ok := unitOf(text)
		if !ok || math.Abs(u.factor-want) > 2.5e-9*want {
			t.Errorf("%q: %+v, want %g", text, u, want)
		}
	}
	for _, text := range []string{"", "furlong", "ft2/ha", "m2/ac", "trees", "m3/ha", "kg/ha", "cords/ac"} {
		if u, ok := unitOf(text); ok {
			t.Errorf("%q is read as %+v", text, u)
		}
	}
	if math.Abs(BasalUS-0.229568411) > 1e-9 {
		t.Errorf("1 ft2/ac is %.10g m2/ha", BasalUS)
	}
}
