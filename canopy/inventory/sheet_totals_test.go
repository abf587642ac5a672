package inventory

import (
	"fmt"
	"math"
	"strings"
	"testing"
)

// TestTotalsAreNoClasses writes a totals row in many ways below two classes; none may become a class.
func TestTotalsAreNoClasses(t *testing.T) {
	for _, label := range []string{"Total", "TOTALS", "total:", "All", "All species", "Sum", "Summe", "gesamt", "Insgesamt", "**", "*** ", "Grand total", "Stand total", "Total**", "Total / all species", "TOTAL (all)", "Total trees per ha"} {
		for _, form := range []string{"%s,,70", "%s,8.9,70", ",%s,70"} {
			text := "species,dbh [cm],trees/ha\nBuche,20,30\nFichte,10,40\n" + fmt.Sprintf(form, label) + "\n"
			sheet, faults := ReadSheet([]byte(text), bareOptions)
			if len(faults) > 0 || len(sheet.Rows) != 2 || len(sheet.Totals) != 1 {
				t.Errorf("%q: %d rows, totals %+v, faults %+v", label, len(sheet.Rows), sheet.Totals, faults)
				continue
			}
			if got := sheet.Totals[0]; got.Species != nil || got.Line != 4 || got.PerHa != 70 || !math.IsNaN(got.BasalArea) {
				t.Errorf("%q: total %+v", label, got)
			}
		}
	}
}

func TestTotalsOfSpecies(t *testing.T) {
	for _, line := range []string{"Buche Summe,,50", "Total Buche,,50", "Buche,Total,50", "Buche,all,50", "Subtotal,,50", "Buche **,,50", "Total,,50"} {
		text := "species,dbh [cm],trees/ha\nBuche,20,30\nBuche,24,20\n" + line + "\nFichte,10,40\nTotal,,90\n"
		sheet, faults := ReadSheet([]byte(text), bareOptions)
		if len(faults) > 0 || len(sheet.Rows) != 3 || len(sheet.Totals) != 2 {
			t.Errorf("%q: %d rows, totals %+v, faults %+v", line, len(sheet.Rows), sheet.Totals, faults)
			continue
		}
		first, last := sheet.Totals[0], sheet.Totals[1]
		if first.Species == nil || first.Species.Botanical != "Fagus sylvatica" || first.PerHa != 50 || last.Species != nil || last.PerHa != 90 {
			t.Errorf("%q: totals %+v", line, sheet.Totals)
		}
		if len(sheet.Notes) > 0 {
			t.Errorf("%q: notes %+v of totals that fit", line, sheet.Notes)
		}
	}
}

// TestTotalsOverPlots takes a total for the sum over plots only where the sum fits the rows.
func TestTotalsOverPlots(t *testing.T) {
	for stated, want := range map[string]float64{"60": 30, "30": 30, "40": 40} {
		sheet, faults := ReadSheet([]byte("plot,species,dbh [cm],trees/ha\n1,Buche,20,20\n2,Buche,20,40\nTotal,,,"+stated+"\n"), bareOptions)
		if len(faults) > 0 || len(sheet.Totals) != 1 || sheet.Totals[0].PerHa != want || len(sheet.Plots) != 2 {
			t.Errorf("%s: %+v, faults %+v", stated, sheet, faults)
			continue
		}
		if noted := len(sheet.Notes) > 0; noted != (want == 40) {
			t.Errorf("%s: notes %+v", stated, sheet.Notes)
		}
	}
}

func TestTotalsOfAWideTable(t *testing.T) {
	sheet, faults := ReadSheet([]byte("dbh [in],Red oak,Red maple,trees/ac,BA [ft2/ac]\n6,10,20,30,5.9\n8,5,0,5,1.7\nAll,15,20,35,7.6\n"), bareOptions)
	if len(faults) > 0 || len(sheet.Totals) != 3 {
		t.Fatalf("totals %+v, faults %+v", sheet.Totals, faults)
	}
	var got []string
	for _, total := range sheet.Totals {
		name := "stand"
		if total.Species != nil {
			name = total.Species.Botanical
		}
		got = append(got, fmt.Sprintf("%s %.1f %.2f", name, total.PerHa, total.BasalArea))
	}
	if text := strings.Join(got, ", "); text != "Quercus rubra 37.1 NaN, Acer rubrum 49.4 NaN, stand 86.5 1.74" {
		t.Error(text)
	}
}
