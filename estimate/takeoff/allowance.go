package takeoff

import (
	"fmt"
	"strconv"

	"spanwright/estimate/assumption"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
)

// Allowances are those of one job, by what they act on.
type Allowances struct {
	SizingBias  Allowance
	Connections map[string]Allowance // by connection class
	Bolts       Allowance
	Growth      Allowance
	Waste       map[string]Allowance // by kind of waste
	Norms       *NormAllowances      // nil where the book has none
}

// NormAllowances are the norms of a book as factors of quantities.
type NormAllowances struct {
	ShopHours    map[string]Allowance // h per delivered tonne, by connection class
	SiteHours    map[string]Allowance
	Joints       map[string]JointAllowances // by kind of joint
	Surface      Allowance                  // on the members' surface
	RowSurface   *Allowance                 // m² per net tonne of rows by mass; nil where the book has none
	LoadUse      Allowance
	LiftDays     Allowance
	Crew         Allowance
	WeekHours    Allowance
	HaulDistance Allowance // km
	Zinc         []ratebook.ZincNorm
}

// JointAllowances are the norms of one counted joint.
type JointAllowances struct {
	Mass, Bolts          Allowance // kg
	ShopHours, SiteHours Allowance // h
}

// Ids of the register entries of allowances, norms, limits and defaults.
const (
	BiasID          = "allowance/sizing bias"
	BoltsID         = "allowance/bolts"
	SurfaceID       = "norm/surface of connections"
	RowSurfaceID    = "norm/surface of rows by mass"
	ZincID          = "norm/zinc"
	LoadUseID       = "norm/load use"
	LiftDaysID      = "norm/crane days per lift"
	CrewID          = "norm/crew"
	WeekHoursID     = "norm/week hours"
	HaulID          = "norm/haul distance"
	HaulInputID     = "input/haul distance" // of the job; entered by the schedule
	VehicleID       = "limit/vehicle"
	PermitID        = "limit/permit loads"
	SplicesID       = "default/site splices"
	RollingMarginID = "default/rolling margin"
	WeldID          = "default/weld throat"
)

// ConnectionID is the id of the allowance for a connection class.
func ConnectionID(class string) string {
	return "allowance/connections/" + assumption.Segment(class)
}

// WasteID is the id of the allowance for a kind of waste.
func WasteID(kind string) string { return "allowance/waste/" + assumption.Segment(kind) }

// GrowthID is the id of the allowance for growth in an estimate class.
func GrowthID(class int) string { return "allowance/growth/class " + strconv.Itoa(class) }

// ShopHoursID is the id of the norm of shop hours of a connection class.
func ShopHoursID(class string) string { return "norm/shop hours/" + assumption.Segment(class) }

// SiteHoursID is the id of the norm of site hours of a connection class.
func SiteHoursID(class string) string { return "norm/site hours/" + assumption.Segment(class) }

// JointID is the id of a norm of a kind of joint: mass, bolts, shop hours or site
// hours.
func JointID(kind, what string) string { return "norm/joint/" + assumption.Segment(kind) + "/" + what }

// FromBook picks the allowances and norms that a job takes from its book. A book
// without growth for the job's estimate class is an error.
func FromBook(b ratebook.Book, s schedule.Settings) (Allowances, error) {
	class := strconv.Itoa(s.EstimateClass)
	growth, ok := b.Growth[class]
	if !ok {
		return Allowances{}, fmt.Errorf("the rate book %q has no figures for estimate class %s", b.Name, class)
	}
	a := Allowances{
		SizingBias:  factor(BiasID, b.SizingBias),
		Bolts:       addition(BoltsID, b.Bolts),
		Growth:      addition(GrowthID(s.EstimateClass), growth),
		Connections: map[string]Allowance{},
		Waste:       map[string]Allowance{},
	}
	for class, f := range b.Connections {
		a.Connections[class] = addition(ConnectionID(class), f)
	}
	for kind, f := range b.Waste {
		a.Waste[kind] = addition(WasteID(kind), f)
	}
	if b.Norms != nil {
		a.Norms = norms(*b.Norms)
	}
	return a, nil
}

func norms(n ratebook.Norms) *NormAllowances {
	out := &NormAllowances{
		ShopHours: map[string]Allowance{}, SiteHours: map[string]Allowance{}, Joints: map[string]JointAllowances{},
		Surface: addition(SurfaceID, n.Surface), LoadUse: factor(LoadUseID, n.LoadUse), LiftDays: factor(LiftDaysID, n.LiftDays),
		Crew: factor(CrewID, n.Crew), WeekHours: factor(WeekHoursID, n.WeekHours), HaulDistance: factor(HaulID, n.HaulDistance),
		Zinc: n.Zinc,
	}
	if n.SurfaceByMass != nil {
		perTonne := factor(RowSurfaceID, *n.SurfaceByMass)
		out.RowSurface = &perTonne
	}
	for class, f := range n.ShopHours {
		out.ShopHours[class] = factor(ShopHoursID(class), f)
	}
	for class, f := range n.SiteHours {
		out.SiteHours[class] = factor(SiteHoursID(class), f)
	}
	for kind, j := range n.Joints {
		out.Joints[kind] = JointAllowances{
			Mass: factor(JointID(kind, "mass"), j.Mass), Bolts: factor(JointID(kind, "bolts"), j.Bolts),
			ShopHours: factor(JointID(kind, "shop hours"), j.ShopHours), SiteHours: factor(JointID(kind, "site hours"), j.SiteHours),
		}
	}
	return out
}

func factor(id string, f ratebook.Figure) Allowance {
	return Allowance{ID: id, Spread: f.Spread, Group: f.Group}
}

func addition(id string, f ratebook.Figure) Allowance {
	return Allowance{ID: id, Spread: f.Spread, Offset: 1, Group: f.Group}
}

// Counted tells whether the joints of the row are counted one by one, in place of
// the allowance of its connection class. A book without norms knows no joints: its
// allowance stands.
func (a Allowances) Counted(p Piece) bool { return a.Norms != nil && len(p.Member.Joints) > 0 }

// class is the connection class under which the row is counted.
func (a Allowances) class(p Piece) string {
	if a.Counted(p) {
		return CountedJoints
	}
	return p.Member.ConnectionClass
}

// designed are the factors from drawn mass to mass as designed with connections
// and growth: what delivered and purchased mass share.
func (a Allowances) designed(p Piece) []Allowance {
	var list []Allowance
	if p.Member.Treatment == schedule.SizeFromFamily {
		list = append(list, a.SizingBias)
	}
	if conn, ok := a.Connections[a.class(p)]; ok && !a.Counted(p) {
		list = append(list, conn)
	}
	return append(list, a.Growth)
}

// delivered are the factors from drawn to delivered mass. The bolts of counted
// joints are counted with them.
func (a Allowances) delivered(p Piece) []Allowance {
	list := a.designed(p)
	if a.Counted(p) {
		return list
	}
	return append(list, a.Bolts)
}

func product(start float64, factors []Allowance) float64 {
	for _, f := range factors {
		start *= f.Value()
	}
	return start
}
