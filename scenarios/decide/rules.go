package decide

// Rule is something that may speak against a treatment beside its light.
type Rule struct {
	Key     string
	Caution string // the caution of the plan that it belongs to
	Says    string // the rule, in words
	Source  string
	Change  string // what would change the finding
	Of, To  string // what the figure found and the limit are
}

// unsourced is a rule that foresters go by and for which no publication is claimed.
const unsourced = "trade rule, unsourced"

// Own is the source of limits of the plan.
const Own = "your limit"

// Numbers of the rules.
const (
	frostView    = 0.3  // of the sky, cosine-weighted, 0..1 (Groot & Carlson 1996)
	slender      = 80.0 // H:D, caution (trade rule, unsourced)
	verySlender  = 95.0 // H:D, great danger (trade rule, unsourced)
	leastStaying = 0.4  // of the basal area that a thinning leaves (trade rule, unsourced)
	invaded      = 2023 // m2, half an acre (University of New Hampshire Extension, from memory)
)

// The rules that are computed.
var (
	ruleFrost = Rule{"frost", "frost", "leaves come out before the last frost where more than 30 % of the sky is seen",
		"Groot & Carlson 1996 for the sky view, white spruce in Ontario; the date is a trade rule, unsourced; sky view is with leaves on, a stand still bare shields less",
		"a smaller or narrower opening, a spot nearer the edge, later-leafing stock, an evergreen nurse", "sky view", "limit"}
	ruleWind = Rule{"windthrow", "windthrow", "cutting where height over diameter of the leading species is above 80, with great danger above 95",
		unsourced, "no cut on exposed ground, several light steps, shorter edges; measured heights and diameters", "H:D", "limit"}
	ruleHeavy = Rule{"heavy thinning", "windthrow", "a thinning leaves less than 40 % of the basal area at once", unsourced, "two steps some years apart", "basal area that stays", "least"}
	ruleShrub = Rule{"shrubs above", "competing vegetation", "an understory that stays is taller than the seedling", "light is taken at the seedling's own height, so the figures hold the shade of its leaves now; that shrubs gain from the cut too is a trade rule, unsourced",
		"remove it (treatments[].understory), or plant taller stock", "its top", "seedling"}
	ruleRival = Rule{"outgrown", "competing vegetation", "another seedling grows faster where this one does best, by net carbon over what the plant is made of",
		"computed, and less sure than who survives; that the faster wins is a trade rule, unsourced", "a smaller opening (shadeledger size with size.against), release cuts, taller stock; size.against names the rival that counts", "rival grows", "itself"}
	ruleEdge = Rule{"dark edge", "model limits", "the third of the opening towards the equator is below the threshold of a seedling that is comfortable elsewhere in it",
		"computed; southern parts were measured 25 to 50 % darker (Prevost & Raymond 2012)", "plant another seedling there, turn or widen the opening", "leaf-on light", "threshold"}
	ruleSpring = Rule{"spring window", "model limits", "the year is above zero only by what the seedling gains before the stand's full leaf",
		"computed; that early leaves carry such seedlings: Augspurger 2008, Lee & Ibanez 2021", "more summer light; mind that an early spring of the stand, or a late one of the seedling, takes it", "gain before full leaf", "whole year"}
	ruleLate = Rule{"late leaf-out", "model limits", "the seedling comes into leaf after the stand above it", "dates of the plan; Augspurger 2008", "earlier-leafing stock; check both dates in the stand", "", ""}
	ruleDry  = Rule{"dry quarter", "drought and roots", "evaporation less rain of the quarter is more than the soil holds for plants",
		"Turc 1961 for evaporation, from memory; Thornthwaite & Mather 1957 for the balance", "the shaded side, spots away from the border's roots, a measured water capacity (site.soil.water_capacity)", "evaporation less rain", "soil holds"}
	ruleInvaded = Rule{"small openings and invasives", "invasive plants", "openings of less than half an acre were found to gain most invasive plants where their seed is near",
		"field note of the University of New Hampshire Extension, from memory", "scout and treat first; set cautions.invasive plants once that is done", "opening", "rule"}
)

// The rules that the plan's limits make.
var (
	limitOpening   = Rule{"opening", "law and certification", "largest area of one opening, stem to stem; openings that touch are one", Own, "a smaller opening", "opening", "limit"}
	limitShare     = Rule{"total share", "law and certification", "largest share of the stand in openings of one entry", Own, "fewer or smaller openings", "in openings", "limit"}
	limitResidual  = Rule{"residual basal area", "law and certification", "least basal area that stays between openings", Own, "a lighter thinning (shadeledger thin)", "stays", "least"}
	limitCover     = Rule{"residual cover", "law and certification", "least crown cover that stays between openings, crowns standing at random", Own, "a lighter thinning (shadeledger thin)", "stays", "least"}
	limitAdjacency = Rule{"adjacency", "law and certification", "largest area of one opening and the unsecured regeneration that adjoins it", Own, "a smaller opening, or wait until the young growth is secured", "together", "limit"}
	limitBuffer    = Rule{"buffer", "water", "least distance of border stems from it", Own, "move or leave out these openings", "nearest", "least"}
	limitNoCut     = Rule{"no felling", "nesting and protected species", "no felling in these periods", Own, "fell in the months that are left", "", ""}
)
