package ratebook

// Norms turn masses and counts into hours, loads, days and weeks. A book of the
// kind ratio needs none.
type Norms struct {
	ShopHours map[string]Figure    `json:"shop_hours" doc:"h per delivered tonne, by connection class; counted joints, optional, is the steel between them"`
	SiteHours map[string]Figure    `json:"site_hours" doc:"h per delivered tonne, by connection class; counted joints, optional, is the steel between them"`
	Joints    map[string]JointNorm `json:"joints" doc:"of one counted joint, by kind; shop splice, optional, joins bars that are longer than the longest stock"`
	// Surface is the allowance on the members' surface for that of connections.
	Surface Figure `json:"surface"`
	// SurfaceByMass is the surface to be coated of rows by mass per metre, with their
	// fixings; without it rows by mass have no surface.
	SurfaceByMass *Figure `json:"surface_by_mass,omitempty" doc:"m² per net tonne of rows by mass per metre; rows by mass per area have twice their area"`
	// Zinc is what galvanising takes up by thickness of steel, rising.
	Zinc []ZincNorm `json:"zinc"`
	// LoadUse is vehicles needed over vehicles filled to their limits: above 1.
	LoadUse Figure `json:"load_use"`
	// LiftDays is crane days for one lift.
	LiftDays Figure `json:"lift_days"`
	// Crew and WeekHours make weeks on site of site hours.
	Crew      Figure `json:"crew" doc:"persons on site"`
	WeekHours Figure `json:"week_hours" doc:"hours of one person per week"`
	// HaulDistance is taken where the job gives none, km.
	HaulDistance Figure `json:"haul_distance_km"`
}

// JointNorm is what one counted joint takes.
type JointNorm struct {
	Mass      Figure `json:"mass_kg" doc:"plates and stiffeners of one joint"`
	Bolts     Figure `json:"bolts_kg"`
	ShopHours Figure `json:"shop_hours"`
	SiteHours Figure `json:"site_hours"`
}

// ZincNorm is the mean coating mass of steel up to a thickness.
type ZincNorm struct {
	UpTo   float64 `json:"up_to_mm" doc:"thickness of steel; 0 in the last is no limit"`
	Mass   float64 `json:"g_m2" doc:"mean coating mass"`
	Source string  `json:"source"`
}

// Limits are the envelopes that pieces are held against. Zero is no limit.
type Limits struct {
	ShopCrane float64  `json:"shop_crane_kg"`
	SiteCrane float64  `json:"site_crane_kg"`
	Bath      Envelope `json:"galvanising_bath"`
	PaintBay  Envelope `json:"paint_bay"`
	Vehicle   Vehicle  `json:"vehicle"`
	Permit    Vehicle  `json:"permit" doc:"beyond these a load needs a permit; local rules govern"`
}

// Envelope is a space that a piece must fit into, m.
type Envelope struct {
	Length float64 `json:"length_m"`
	Width  float64 `json:"width_m"`
	Height float64 `json:"height_m"`
}

// Vehicle is what a vehicle carries or the road allows; 0 is no limit.
type Vehicle struct {
	Envelope
	Mass   float64 `json:"mass_kg"`
	Source string  `json:"source"`
}
