package inventory

import (
	"math"
	"strconv"
	"strings"
	"testing"
)

// readable are small sheets that load. Each row is typed by hand: line, botanical name, dbh cm, trees/ha, m2/ha; 1 ac is
// 0.40468564224 ha, 1 in 2.54 cm, 1 ft2/ac 0.229568411 m2/ha.
var readable = []struct {
	name, sheet string
	options     SheetOptions
	rows        []string
}{
	{"one column a species", "dbh class [in],N. red oak,316 ,ACSA3,White pine,trees/ac,BA [ft2/ac]\n6,0,,10,2,12,2.4\n8,5,1,,-,6,2.1\nAll,5,1,10,2,18,4.5\n", bareOptions, []string{
		"2|Acer saccharum|15.24|24.71|0.451", "2|Pinus strobus|15.24|4.942|0.0902", "3|Quercus rubra|20.32|12.36|0.401", "3|Acer rubrum|20.32|2.471|0.0801"}},
	{"unit of the species columns in a title", "Trees per acre by species\nDBH (in),QURU,ACSA3,Total\n4,-,24,24\n**,0,24,24\n", bareOptions, []string{
		"3|Acer saccharum|10.16|59.31|0.481"}},
	{"species under a merged heading", "DBH class,Trees per acre,,Total\n(in),Red oak,Am. beech,\n4,1,2,3\n", bareOptions, []string{
		"3|Quercus rubra|10.16|2.471|0.0200", "3|Fagus grandifolia|10.16|4.942|0.0401"}},
	{"basal area by class and species", "Basal area in ft2/ac by species\nDBH (in),QURU,ACSA3\n8,10,0\n", bareOptions, []string{
		"3|Quercus rubra|20.32|70.79|2.296"}},
	{"basal area alone", "species,basal_area [ft2/ac]\nred oak,60\nsugar maple,40\nTotal,100\n", bareOptions, []string{
		"2|Quercus rubra|||13.774", "3|Acer saccharum|||9.183"}},
	{"basal area and trees", "species,trees/ha,ba [m2/ha]\nBuche,100,4.909\n", bareOptions, []string{"2|Fagus sylvatica|25.0|100|4.909"}},
	{"both ends of a class", "species,dbh [cm],dbh_to [cm],N/ha\nBuche,10,14,125\nBuche,30,,10\n", bareOptions, []string{
		"2|Fagus sylvatica|12|125|1.414", "3|Fagus sylvatica|30|10|0.707"}},
	{"counts with the stand's area", "species,dbh [cm],tree_count\nBuche,20,30\nFichte,25,10\n", SheetOptions{math.NaN(), 0.5}, []string{
		"2|Fagus sylvatica|20|60|1.885", "3|Picea abies|25|20|0.982"}},
	{"counts on plots", "plot,plot_area [m2],species,dbh [cm],tree_count\nA,500,Buche,20,30\nB,250,Fichte,25,6\nC,250,,,0\n", bareOptions, []string{
		"2|Fagus sylvatica|20|300|9.425", "3|Picea abies|25|60|2.945"}},
	{"one tree a line", "tree no,plot,plot area [ac],species,dbh [in]\n1,1,0.1,red oak,10\n2,2,0.1,red oak,12\n", bareOptions, []string{
		"2|Quercus rubra|25.4|12.36|0.626", "3|Quercus rubra|30.48|12.36|0.902"}},
	{"a plot without trees", "plot,species,dbh [cm],trees/ha\n1,Fi,20,400\n2,-,-,-\n", bareOptions, []string{"2|Picea abies|20|200|6.283"}},
	{"percent of a given basal area", "species,percent\nBuche,60\nFichte,40\n", SheetOptions{29, math.NaN()}, []string{
		"2|Fagus sylvatica|||17.4", "3|Picea abies|||11.6"}},
	{"percent of a basal area in the title", "Stand 9: basal area 30.5 m2/ha\nspecies,percent\nBuche,60\nFichte,40\n", bareOptions, []string{
		"3|Fagus sylvatica|||18.3", "4|Picea abies|||12.2"}},
	{"thousands point beside a decimal comma", "Art;BHD [cm];N/ha\nBuche;12,5;1.250\n", bareOptions, []string{"2|Fagus sylvatica|12.5|1250|15.34"}},
	{"thousands apart", "Art;BHD [cm];N/ha\nBuche;12,5;1 250\nBuche;6,5;1'800\n", bareOptions, []string{
		"2|Fagus sylvatica|12.5|1250|15.34", "3|Fagus sylvatica|6.5|1800|5.973"}},
	{"units below the heading", "species,dbh,trees,height\n,in,per acre,ft\nred oak,10,20,60\n", bareOptions, []string{"3|Quercus rubra|25.4|49.42|2.504"}},
	{"units in names", "species,dbh_in,trees_per_acre,height_ft,ba_ft2_ac\nred oak,10,20,60,10.9\n", bareOptions, []string{"2|Quercus rubra|25.4|49.42|2.504"}},
	{"species for the lines below", "species,dbh [in],trees/ac\nRed oak,,\n,10,20\nRed maple,,\n,12,5\n", bareOptions, []string{
		"3|Quercus rubra|25.4|49.42|2.504", "5|Acer rubrum|30.48|12.36|0.902"}},
	{"a heading again, a remark, averages", "species,dbh [in],trees/ac\nred oak,10,20\nMean,10,20\nspecies,dbh [in],trees/ac\nred maple,10,20\nby the east crew\n", bareOptions, []string{
		"2|Quercus rubra|25.4|49.42|2.504", "5|Acer rubrum|25.4|49.42|2.504"}},
	{"units in a row above", ",inches,trees per acre\nspecies,dbh,trees\nred oak,10,20\n", bareOptions, []string{"3|Quercus rubra|25.4|49.42|2.504"}},
	{"units in a sentence", "Stand table with dbh in inches and trees per acre\nspecies,dbh,trees\nred oak,10,20\n", bareOptions, []string{"3|Quercus rubra|25.4|49.42|2.504"}},
	{"units in brackets above", "Stand 12 (dbh in cm; N per ha)\nspecies,dbh,N\nBuche,20,100\n", bareOptions, []string{"3|Fagus sylvatica|20|100|3.142"}},
	{"German headings", "Ø (cm);Baumart;Stammzahl/ha;Ho\u0308he in m\n20;La\u0308rche;100;18,5\n", bareOptions, []string{"2|Larix decidua|20|100|3.142"}},
	{"names turned and shortened", "species,dbh [cm],N/ha\n\"Oak, northern red\",20,100\nQ. alba,20,100\nPIST-white pine,20,100\nQuercus rubra L.,20,100\n", bareOptions, []string{
		"2|Quercus rubra|20|100|3.142", "3|Quercus alba|20|100|3.142", "4|Pinus strobus|20|100|3.142", "5|Quercus rubra|20|100|3.142"}},
	{"thousands by the other numbers", "Art;BHD [cm];N/ha\nBuche;6;1.250\nBuche;10;640\n", bareOptions, []string{"2|Fagus sylvatica|6|1250|3.534", "3|Fagus sylvatica|10|640|5.027"}},
	{"three decimals", "species,dbh [in],TPA\nred oak,10,6.018\n", bareOptions, []string{"2|Quercus rubra|25.4|14.87|0.7535"}},
	{"acre and hectare rounded", "species,dbh [in],trees/ac,stems/ha\nred oak,10,3,7\n", bareOptions, []string{"2|Quercus rubra|25.4|7.413|0.3756"}},
	{"class beside its middle", "Species,DBH,,Trees\n,class (in),mid (in),per acre\nred oak,9-11,10,20\n", bareOptions, []string{"3|Quercus rubra|25.4|49.42|2.504"}},
	{"shares of one", "Basal area (m2/ha),30\nspecies,proportion\nBuche,0.6\nFichte,0.4\n", bareOptions, []string{"3|Fagus sylvatica|||18", "4|Picea abies|||12"}},
	{"remarks with the word of a total", "species,dbh [in],trees/ac,notes\nred oak,10,20,all\n", bareOptions, []string{"2|Quercus rubra|25.4|49.42|2.504"}},
	{"UTF-16", "\xff\xfes\x00p\x00e\x00c\x00i\x00e\x00s\x00;\x00B\x00A\x00 \x00m\x002\x00/\x00h\x00a\x00\n\x00B\x00u\x00;\x009\x00\n\x00", bareOptions, []string{"2|Fagus sylvatica|||9"}},
}

// typedNumber compares to 0.2 %, the rounding of what was typed; "" wants NaN.
func typedNumber(t *testing.T, got float64, want string) bool {
	t.Helper()
	if want == "" {
		return math.IsNaN(got)
	}
	x, err := strconv.ParseFloat(want, 64)
	if err != nil {
		t.Fatal(err)
	}
	return math.Abs(got-x) <= 2e-3*x
}

func TestSheetsLoad(t *testing.T) {
	for _, c := range readable {
		sheet, faults := ReadSheet([]byte(c.sheet), c.options)
		if len(faults) > 0 || len(sheet.Rows) != len(c.rows) {
			t.Errorf("%s: %d rows, want %d, faults %+v", c.name, len(sheet.Rows), len(c.rows), faults)
			continue
		}
		for i, row := range sheet.Rows {
			w := strings.Split(c.rows[i], "|")
			if strconv.Itoa(row.Line) != w[0] || row.Species.Botanical != w[1] || !typedNumber(t, 100*row.DBH, w[2]) ||
				!typedNumber(t, row.PerHa, w[3]) || !typedNumber(t, row.BasalArea, w[4]) {
				t.Errorf("%s: got %d %s %g %g %g, want %s", c.name, row.Line, row.Species.Botanical, 100*row.DBH, row.PerHa, row.BasalArea, c.rows[i])
			}
		}
	}
}

func TestPlotsAreNamedInTheirOrder(t *testing.T) {
	sheet, faults := ReadSheet([]byte("plot,species,dbh [cm],trees/ha\n7,Fi,20,400\n3,Fi,20,100\n5,,,0\n"), bareOptions)
	if len(faults) > 0 || strings.Join(sheet.Plots, " ") != "7 3 5" || sheet.Rows[1].Plot != "3" {
		t.Errorf("plots %v, rows %+v, faults %+v", sheet.Plots, sheet.Rows, faults)
	}
}

// TestSheetNotes wants what was not written in so many words among the notes, and no notes where all is written.
func TestSheetNotes(t *testing.T) {
	for _, c := range []struct{ name, sheet, note string }{
		{"a total that its rows miss", "species,dbh [in],trees/ac\nred oak,10,20\nred maple,8,30\nTotal,,60\n", "60 trees/ac, the trees on its lines make 50"},
		{"basal area its rows miss", "species,dbh [in],trees/ac,BA [ft2/ac]\nred oak,10,20,\nTotal,,20,30\n", "30 ft2/ac, the trees on its lines make 10.91"},
		{"a line its species miss", "dbh [cm],Buche [N/ha],Fichte [N/ha],Summe\n20,100,50,155\n", "155 trees/ha, the trees on its lines make 150"},
		{"a plot its rows miss", "plot,species,dbh [in],trees/ac\n1,red oak,10,20\n2,red oak,10,40\n2,Total,,45\n", "45 trees/ac, the trees on its lines make 40"},
		{"a species from above", "species,dbh [cm],N/ha\nBuche,10,14\n,12,20\n", "taken as Fagus sylvatica from line 2"},
		{"a column not read", "species,dbh [cm],N/ha,age\nBuche,10,14,90\n", `column "age" not read`},
		{"a unit from the title", "dbh in inches, trees per acre\nspecies,dbh,trees\nred oak,10,20\n", `column "dbh": in, as the lines about the table say`},
		{"a total of several species", "species,dbh [in],trees/ac\nred oak,10,20\nTotal hardwoods,,20\n", `a total of "hardwoods", not read as a class`},
		{"trees from basal area", "species,dbh [in],BA [ft2/ac]\nred oak,10,20\n", treesDerived},
		{"diameters from basal area", "species,trees/ha,BA [m2/ha]\nred oak,100,5\n", dbhDerived},
		{"letters", "Art;BHD [cm];N/ha\nWei\xdftanne;20;14\n", "Windows-1252"},
		{"", "species,dbh [in],trees/ac\nred oak,10,20\nred maple,8,30\nTotal,,50.9\n", ""},
	} {
		sheet, faults := ReadSheet([]byte(c.sheet), bareOptions)
		found := c.note == "" && len(sheet.Notes) == 0
		for _, n := range sheet.Notes {
			found = found || c.note != "" && strings.Contains(n.Text, c.note)
		}
		if len(faults) > 0 || !found {
			t.Errorf("%s: notes %+v, faults %+v, want %q", c.name, sheet.Notes, faults, c.note)
		}
	}
}
