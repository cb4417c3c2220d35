package ratebook

// Driver is the quantity that a rate multiplies.
type Driver string

// The drivers.
const (
	NetTonnes       Driver = "net tonnes"
	DeliveredTonnes Driver = "delivered tonnes"
	PurchasedTonnes Driver = "purchased tonnes"
	Metres          Driver = "metres"
	Pieces          Driver = "pieces"
	SquareMetres    Driver = "square metres" // to be coated
	CubicMetres     Driver = "cubic metres"  // of concrete
	ZincKilograms   Driver = "kg of zinc"
	WeldKilograms   Driver = "kg of weld metal"
	ShopHours       Driver = "shop hours"
	SiteHours       Driver = "site hours"
	Truckloads      Driver = "truckloads"
	PermitLoads     Driver = "permit loads"
	TonneKilometres Driver = "tonne-kilometres"
	CraneDays       Driver = "crane days"
	Weeks           Driver = "weeks"
	Lump            Driver = "lump"
	CostOf          Driver = "cost of categories"
)

// driverUnits are the units, and the decimal places that a take-off states.
var driverUnits = []struct {
	driver Driver
	unit   string
	places int
}{
	{NetTonnes, "t", 3}, {DeliveredTonnes, "t", 3}, {PurchasedTonnes, "t", 3},
	{Metres, "m", 2}, {Pieces, "pcs", 0}, {SquareMetres, "m²", 2}, {CubicMetres, "m³", 2},
	{ZincKilograms, "kg", 1}, {WeldKilograms, "kg", 1}, {ShopHours, "h", 1}, {SiteHours, "h", 1},
	{Truckloads, "loads", 2}, {PermitLoads, "loads", 0}, {TonneKilometres, "t·km", 1},
	{CraneDays, "days", 2}, {Weeks, "weeks", 2}, {Lump, "sum", 0}, {CostOf, "", 2},
}

// Drivers returns every driver, in the order in which a take-off states them.
func Drivers() []Driver {
	out := make([]Driver, len(driverUnits))
	for i, d := range driverUnits {
		out[i] = d.driver
	}
	return out
}

// Unit returns the unit of a quantity of the driver; empty for CostOf, whose
// quantity is money, and for an unknown driver.
func (d Driver) Unit() string {
	for _, u := range driverUnits {
		if u.driver == d {
			return u.unit
		}
	}
	return ""
}

// Places returns the decimal places that a take-off states of the driver.
func (d Driver) Places() int {
	for _, u := range driverUnits {
		if u.driver == d {
			return u.places
		}
	}
	return 3
}
