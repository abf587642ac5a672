package inventory

import "shadeledger/leaf/traits"

// Sheet is a stand table as it was read.
type Sheet struct {
	Rows   []Row
	Plots  []string // names in the order of the sheet; empty where it has none
	Totals []Total  // the sheet's own totals, kept beside what its rows add to
	Notes  []Note   // what was taken how, for the list of assumptions
}

// Row is one line of a sheet: Class values are per hectare of the whole stand, not of the row's plot.
type Row struct {
	Class             // DBH and PerHa are NaN where the sheet gives basal area alone
	Line      int     // of the sheet, from 1
	BasalArea float64 // m2/ha of the whole stand
	Plot      string  // "" where the sheet has none
}

// Total is a totals row of the sheet: NaN where it does not say.
type Total struct {
	Line             int
	Species          *traits.Species // nil for the whole stand
	PerHa, BasalArea float64         // trees/ha, m2/ha
}

// Note is a reading that was not written in so many words.
type Note struct {
	Line int
	Text string
}

// Fault is what keeps a sheet from being read.
type Fault struct {
	Line   int    // from 1; 0 for the whole sheet
	Column string // its heading; "" for the whole row
	Value  string
	Fix    string // what would be right
}

// SheetOptions say what a sheet may leave to its reader.
type SheetOptions struct {
	BasalArea float64 // m2/ha of the stand, for sheets in percent; NaN where not known
	Area      float64 // ha of the stand, for counts of all its trees; NaN where not known
}
