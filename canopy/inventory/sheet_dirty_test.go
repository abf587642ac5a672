package inventory

import (
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
)

// nothing given beside the sheet.
var bareOptions = SheetOptions{BasalArea: math.NaN(), Area: math.NaN()}

// typed reads one of the tables that were typed by hand, by sheet.
func typed(t *testing.T, name string) map[string][][]string {
	t.Helper()
	f, err := os.Open(filepath.Join("testdata", "sheets", name))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	records, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	bySheet := map[string][][]string{}
	for _, r := range records[1:] {
		bySheet[r[0]] = append(bySheet[r[0]], r)
	}
	return bySheet
}

// sameTyped compares with a typed number to half its last digit and 0.1 % (the typed number is rounded); an empty cell wants NaN.
func sameTyped(t *testing.T, got float64, cell string) bool {
	t.Helper()
	if cell == "" {
		return math.IsNaN(got)
	}
	want, err := strconv.ParseFloat(cell, 64)
	if err != nil {
		t.Fatal(err)
	}
	digits := 0
	if _, tail, found := strings.Cut(cell, "."); found {
		digits = len(tail)
	}
	return math.Abs(got-want) <= 0.501*math.Pow(10, -float64(digits))+1e-3*want
}

func rowFits(t *testing.T, row Row, want []string) bool {
	t.Helper()
	return strconv.Itoa(row.Line) == want[1] && row.Species.Botanical == want[2] && sameTyped(t, 100*row.DBH, want[3]) &&
		sameTyped(t, row.PerHa, want[4]) && sameTyped(t, row.BasalArea, want[5]) && sameTyped(t, row.Height, want[6]) && sameTyped(t, row.CrownBase, want[7])
}

// TestDirtySheets reads twenty sheets with a defect or two each: at least 18 load as they are and none is misread.
func TestDirtySheets(t *testing.T) {
	files, err := filepath.Glob(filepath.Join("testdata", "sheets", "[0-9][0-9]-*.csv"))
	if err != nil || len(files) != 20 {
		t.Fatalf("%d sheets, want 20 (%v)", len(files), err)
	}
	expected, totals := typed(t, "expected.csv"), typed(t, "totals.csv")
	loaded := 0
	for _, file := range files {
		name := strings.TrimSuffix(filepath.Base(file), ".csv")
		data, err := os.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		sheet, faults := ReadSheet(data, bareOptions)
		want := expected[name]
		if len(want) == 0 {
			t.Errorf("%s: no values were typed", name)
			continue
		}
		if want[0][2] == "fault" {
			sheetFaults(t, name, faults, want)
			continue
		}
		if len(faults) > 0 {
			t.Errorf("%s: %+v", name, faults)
			continue
		}
		loaded++
		sheetRows(t, name, sheet, want)
		sheetTotals(t, name, sheet, totals[name])
	}
	t.Logf("%d of %d load", loaded, len(files))
	if loaded < 18 {
		t.Errorf("%d of %d sheets load, want 18", loaded, len(files))
	}
}

func sheetRows(t *testing.T, name string, sheet Sheet, want [][]string) {
	t.Helper()
	if len(sheet.Rows) != len(want) {
		t.Errorf("%s: %d rows, want %d", name, len(sheet.Rows), len(want))
		return
	}
	for i, row := range sheet.Rows {
		if !rowFits(t, row, want[i]) {
			t.Errorf("%s: got line %d %s %.4g cm %.5g/ha %.4g m2/ha %.4g m %.4g m, want %v", name, row.Line,
				row.Species.Botanical, 100*row.DBH, row.PerHa, row.BasalArea, row.Height, row.CrownBase, want[i])
		}
	}
}

func sheetTotals(t *testing.T, name string, sheet Sheet, want [][]string) {
	t.Helper()
	if len(sheet.Totals) != len(want) {
		t.Errorf("%s: %d totals, want %d: %+v", name, len(sheet.Totals), len(want), sheet.Totals)
		return
	}
	for i, total := range sheet.Totals {
		species := ""
		if total.Species != nil {
			species = total.Species.Botanical
		}
		if strconv.Itoa(total.Line) != want[i][1] || species != want[i][2] || !sameTyped(t, total.PerHa, want[i][3]) || !sameTyped(t, total.BasalArea, want[i][4]) {
			t.Errorf("%s: total %+v, want %v", name, total, want[i])
		}
	}
}

func sheetFaults(t *testing.T, name string, faults []Fault, want [][]string) {
	t.Helper()
	if len(faults) != len(want) {
		t.Errorf("%s: %d faults, want %d: %+v", name, len(faults), len(want), faults)
		return
	}
	for i, f := range faults {
		if strconv.Itoa(f.Line) != want[i][1] || !strings.Contains(f.Column, want[i][3]) || !strings.Contains(f.Fix, want[i][4]) {
			t.Errorf("%s: fault %+v, want %v", name, f, want[i])
		}
	}
}
