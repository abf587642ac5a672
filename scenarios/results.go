package scenarios

import (
	"shadeledger/radiation/weather"
	"shadeledger/scenarios/ledger"
)

// Results is what a run found, in the plan's order of treatments, stations, seedlings.
type Results struct {
	Plan       *Plan
	Series     *weather.Series
	Stations   []TreatmentStations // by treatment
	Light      []LightRow
	Balance    []BalanceRow
	Gains      []StandGain    // by treatment, where asked for
	Neutral    []NeutralShade // by seedling, where break-evens were asked for
	Correction Correction     // of the leaf area by readings; the plan here is the corrected one
	Warnings   []Warning      // of the plan and of the run
	Assumed    []Assumed
}

// NeutralShade is a seedling's break-even where sun and sky are dimmed alike all year: it depends on species and site only.
type NeutralShade struct {
	Seedling  string
	BreakEven ledger.BreakEven
}

// TreatmentStations names the stations of a treatment in their order.
type TreatmentStations struct {
	Treatment *Treatment
	Names     []string
	Inside    []bool // within the crown outline; true without an opening
}

// LightRow is one row of `light`.
type LightRow struct {
	Treatment, Station string
	X, Y, Height       float64 // m
	Period             string  // season, year, leaf-on, 2025-07, 07, 07-14
	Light              float64 // percent of full light
	PAR                float64 // mol m-2 d-1
	Sunfleck           float64 // percent of PAR that comes as unscattered beam
	SkyView            float64 // percent
	// Years holds the percent of full light over the season of every calendar year, in order.
	Years []float64
}

// BalanceRow is one row of `balance`: one seedling at one station for one period.
type BalanceRow struct {
	Treatment, Station, Species, Botanical, Period string

	Light       float64 // percent of full light over the season
	LightLeafOn float64 // percent over the leaf-on period
	PAR         float64 // mol m-2 d-1 over the season
	SkyView     float64 // percent
	Lines       ledger.Lines
	BreakEven   ledger.BreakEven
	Class       ledger.Class // by the year's net and the leaf-on light, the same for every period
	// Spring is what it gains in a mean year, g C, on those days of the half year before the stand's full leaf on which it gains; 0 where
	// the overstory is not deciduous for the most part.
	Spring float64
	// Years holds the year's net of every calendar year, g C, in order.
	Years []float64
}
