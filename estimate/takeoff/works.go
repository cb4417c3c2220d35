package takeoff

import (
	"slices"

	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
)

func roundTonnes(t float64) (money.Decimal, error) {
	return money.FromFloat(t, ratebook.NetTonnes.Places())
}

// unique sorts the ids, each once.
func unique(ids []string) []string {
	slices.Sort(ids)
	return slices.Compact(ids)
}

// haul states tonne-kilometres of what weighs tonnes times factors.
func (b *builder) haul(a Allowances, s Settings, tonnes float64, factors []Allowance) {
	if s.Haul > 0 {
		b.put(ratebook.TonneKilometres, tonnes*s.Haul, factors, "delivered mass × the job's haul distance", HaulInputID)
		return
	}
	b.put(ratebook.TonneKilometres, tonnes, with(factors, a.Norms.HaulDistance), "delivered mass × haul distance")
}

// weeks states the time on site of hours = measured · Π factors.
func (b *builder) weeks(n *NormAllowances, measured float64, factors []Allowance) {
	if perWeek := n.Crew.Value() * n.WeekHours.Value(); perWeek > 0 {
		b.put(ratebook.Weeks, measured/perWeek, factors, "site hours ÷ (persons × hours of a person per week)", CrewID, WeekHoursID)
	}
}
