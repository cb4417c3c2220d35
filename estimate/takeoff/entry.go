package takeoff

import (
	"fmt"
	"maps"
	"slices"
	"strconv"

	"spanwright/estimate/assumption"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/estimate/spread"
)

// Entry is what the register says of an allowance, a norm, a limit or a default of
// the take-off. Value stands where there is no spread.
type Entry struct {
	ID        string
	Kind      assumption.Kind // allowance, or default for what no book says
	Statement string
	Value     string
	Unit      string
	Figure    ratebook.Figure
}

// Entries returns what the take-off of a job may depend on, by rising id. Those
// that it does depend on are in Used.
func Entries(b ratebook.Book, job schedule.Settings) []Entry {
	list := slices.Concat(allowanceEntries(b, job), limitEntries(SettingsOf(b, job).Limits, b))
	if b.Norms != nil {
		list = append(list, normEntries(*b.Norms)...)
	}
	slices.SortFunc(list, func(x, y Entry) int {
		if x.ID < y.ID {
			return -1
		}
		return 1
	})
	return list
}

func sortedKeys[V any](m map[string]V) []string { return slices.Sorted(maps.Keys(m)) }

func entry(id, statement, unit string, f ratebook.Figure) Entry {
	return Entry{ID: id, Kind: assumption.Allowance, Statement: statement, Unit: unit, Figure: f}
}

func allowanceEntries(b ratebook.Book, job schedule.Settings) []Entry {
	class := strconv.Itoa(job.EstimateClass)
	list := []Entry{
		entry(BoltsID, "Bolts, on net mass with connections and growth", "fraction", b.Bolts),
		entry(BiasID, "Mass as it will be designed over mass as sized here, for the conservatism of the checks", "fraction", b.SizingBias),
	}
	if growth, ok := b.Growth[class]; ok {
		list = append(list, entry(GrowthID(job.EstimateClass), "Growth of the design until it is built, estimate class "+class, "fraction", growth))
	}
	for _, c := range sortedKeys(b.Connections) {
		list = append(list, entry(ConnectionID(c), "Connections, on net mass, for "+c, "fraction", b.Connections[c]))
	}
	for _, w := range sortedKeys(b.Waste) {
		list = append(list, entry(WasteID(w), "Waste in buying "+w+", on delivered mass less bolts", "fraction", b.Waste[w]))
	}
	return list
}

func normEntries(n ratebook.Norms) []Entry {
	list := []Entry{
		entry(SurfaceID, "Surface of connections, on that of the members", "fraction", n.Surface),
		entry(LoadUseID, "Vehicles needed over vehicles filled to their limits", "", n.LoadUse),
		entry(LiftDaysID, "Crane days for one lift; each delivered part is one lift, and growth adds lifts", "days", n.LiftDays),
		entry(CrewID, "Persons on site, at the likely value in every trial", "persons", n.Crew),
		entry(WeekHoursID, "Hours of one person per week, at the likely value in every trial", "h", n.WeekHours),
		entry(HaulID, "The way from shop to site, where the job names none", "km", n.HaulDistance),
	}
	if n.SurfaceByMass != nil {
		list = append(list, entry(RowSurfaceID, "Surface to be coated of rows by mass per metre, with their fixings, per net tonne; rows of connection class "+ReadyMade+" are delivered coated and have none", "m²/t", *n.SurfaceByMass))
	}
	for _, c := range sortedKeys(n.ShopHours) {
		list = append(list, entry(ShopHoursID(c), "Shop hours per delivered tonne, for "+c, "h/t", n.ShopHours[c]))
	}
	for _, c := range sortedKeys(n.SiteHours) {
		list = append(list, entry(SiteHoursID(c), "Site hours per delivered tonne, for "+c, "h/t", n.SiteHours[c]))
	}
	for _, kind := range sortedKeys(n.Joints) {
		j := n.Joints[kind]
		list = append(list,
			entry(JointID(kind, "mass"), "Plates and stiffeners of one joint, "+kind, "kg", j.Mass),
			entry(JointID(kind, "bolts"), "Bolts of one joint, "+kind, "kg", j.Bolts),
			entry(JointID(kind, "shop hours"), "Shop hours of one joint, "+kind, "h", j.ShopHours),
			entry(JointID(kind, "site hours"), "Site hours of one joint, "+kind, "h", j.SiteHours))
	}
	for _, z := range n.Zinc {
		list = append(list, entry(zincID(z), "Zinc on steel "+zincWords(z), "g/m²", known(z.Mass, z.Source)))
	}
	return list
}

// zincID is the id of a norm of zinc.
func zincID(z ratebook.ZincNorm) string { return ZincID + "/" + zincWords(z) }

func zincWords(z ratebook.ZincNorm) string {
	if z.UpTo == 0 {
		return "of any greater thickness"
	}
	return "up to " + plain(z.UpTo, 3) + " mm"
}

// known is a figure without a spread that no person of the job set.
func known(value float64, source string) ratebook.Figure {
	return ratebook.Figure{Spread: spread.NewFixed(value), Source: source, Author: "Spanwright", Confidence: string(assumption.Medium)}
}

func limitEntries(l ratebook.Limits, b ratebook.Book) []Entry {
	const practice = "common practice, no source"
	said := func(source string) ratebook.Figure {
		if source == "" {
			source = "rate book " + b.Name
		}
		return ratebook.Figure{Source: source, Author: "Spanwright", Confidence: string(assumption.Medium)}
	}
	list := []Entry{
		{ID: VehicleID, Kind: assumption.Default, Statement: "What a vehicle carries.", Value: vehicleWords(l.Vehicle), Figure: said(l.Vehicle.Source)},
		{ID: PermitID, Kind: assumption.Default, Statement: "Beyond these a load needs a permit; local rules govern.", Value: vehicleWords(l.Permit), Figure: said(l.Permit.Source)},
		{ID: SplicesID, Kind: assumption.Default, Statement: "Pieces longer than a vehicle are delivered in equal parts with site splices between them, rows by mass in parts without splices; parts longer than the longest stock length are joined in the shop.",
			Value: "one splice fewer than parts", Figure: said(practice)},
		{ID: RollingMarginID, Kind: assumption.Default, Statement: "Pieces weigh more than their nominal mass when they are lifted and carried; this is not priced as steel.",
			Value: plain(rollingMargin, 3), Unit: "fraction", Figure: said(practice)},
		{ID: WeldID, Kind: assumption.Default, Statement: "Sections welded from plates have fillets on both sides, with a throat of half the web, at least 3 mm.",
			Value: plain(throatOfWall, 3), Unit: "of the web", Figure: said("EN 1993-1-8:2005, 4.5.2(2) for the least throat; else " + practice)},
	}
	return list
}

func vehicleWords(v ratebook.Vehicle) string {
	return fmt.Sprintf("%s × %s × %s m, %s t; 0 is no limit", plain(v.Length, 3), plain(v.Width, 3), plain(v.Height, 3), plain(v.Mass/1000, 3))
}
