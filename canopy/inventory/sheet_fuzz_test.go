package inventory

import (
	"math"
	"os"
	"path/filepath"
	"testing"
)

// FuzzSheet wants no panic from any text, and rows that a stand can have from any sheet without a fault.
func FuzzSheet(f *testing.F) {
	files, err := filepath.Glob(filepath.Join("testdata", "sheets", "[0-9][0-9]-*.csv"))
	if err != nil || len(files) == 0 {
		f.Fatalf("no sheets: %v", err)
	}
	for _, file := range files {
		data, err := os.ReadFile(file)
		if err != nil {
			f.Fatal(err)
		}
		f.Add(data)
	}
	f.Add([]byte("dbh [in],Red oak,QURU,833,trees/ac\n4,1,2,3,6\n**,1,2,3,6\n"))
	f.Add([]byte("plot;plot_area [m2];species;dbh;tree_count\nA;500;Buche;20 cm;3\nB;500;;;0\n"))
	f.Fuzz(func(t *testing.T, data []byte) {
		for _, o := range []SheetOptions{bareOptions, {BasalArea: 30, Area: 2}} {
			sheet, faults := ReadSheet(data, o)
			if len(faults) > 0 {
				continue
			}
			basal := 0.0
			for _, row := range sheet.Rows {
				wantRow(t, row)
				basal += row.BasalArea
			}
			if !(basal > 0 && basal <= densest) {
				t.Errorf("%g m2/ha in all", basal)
			}
		}
	})
}

func wantRow(t *testing.T, row Row) {
	t.Helper()
	above := func(x float64) bool { return x > 0 && !math.IsInf(x, 0) }
	alone := math.IsNaN(row.DBH) && math.IsNaN(row.PerHa)
	if row.Species == nil || row.Line < 1 || !above(row.BasalArea) || !alone && !(above(row.DBH) && above(row.PerHa)) {
		t.Errorf("row %+v", row)
	}
	if row.DBH > stoutest || row.Height > tallest || row.CrownBase >= row.Height {
		t.Errorf("row %+v is not plausible", row)
	}
	if !alone && math.Abs(row.Class.BasalArea()-row.BasalArea) > 1e-9*row.BasalArea {
		t.Errorf("row %+v: trees make %g m2/ha", row, row.Class.BasalArea())
	}
}
