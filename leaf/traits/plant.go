package traits

// Plant is a seedling of common stock with its respiration and turnover.
type Plant struct {
	Height                         float64 // m
	LeafArea                       float64 // m2, hemisurface
	LeafMass, StemMass, RootMass   float64 // g dry
	CrownLAI, Chi, Absorptance     float64
	StemRate, RootRate             float64 // nmol CO2 g-1 s-1 at OrganTRef
	OrganTRef                      float64 // deg C
	StemQ10, RootQ10               float64
	LeafLifespan, FineRootLifespan float64 // y
	FineRootShare                  float64 // of root mass
	ConstructionCost               float64 // g C per g dry mass, tissue carbon plus growth respiration
}

// Plant is the default seedling of the species.
func (s *Species) Plant() Plant {
	return Plant{
		Height: s.get("plant_height"), LeafArea: s.get("leaf_area"),
		LeafMass: s.get("leaf_mass"), StemMass: s.get("stem_mass"), RootMass: s.get("root_mass"),
		CrownLAI: s.get("crown_lai"), Chi: s.get("chi"), Absorptance: s.get("absorptance"),
		StemRate: s.get("stem_rate"), RootRate: s.get("root_rate"), OrganTRef: s.get("organ_t_ref"),
		StemQ10: s.get("stem_q10"), RootQ10: s.get("root_q10"),
		LeafLifespan: s.get("leaf_lifespan"), FineRootLifespan: s.get("fine_root_lifespan"),
		FineRootShare: s.get("fine_root_share"), ConstructionCost: s.get("construction_cost"),
	}
}
