package engine

import (
	"strconv"
	"strings"

	"spanwright/estimate/assumption"
	"spanwright/estimate/job"
	"spanwright/estimate/schedule"
)

// given tells for each input of a schedule whether a member has it from its own
// row. An input that is not named here counts as given.
var given = map[string]func(schedule.Member) bool{
	"input/permanent load":          func(m schedule.Member) bool { return hasLoad(m, "permanent", "uniform", "") },
	"input/variable load":           func(m schedule.Member) bool { return hasLoad(m, "variable", "uniform", "") },
	"input/area load":               func(m schedule.Member) bool { return hasLoad(m, "variable", "uniform", "area") },
	"input/tributary width":         func(m schedule.Member) bool { return hasLoad(m, "variable", "uniform", "area") },
	"input/point load":              func(m schedule.Member) bool { return hasLoad(m, "variable", "point", "") },
	"input/point position":          func(m schedule.Member) bool { return hasLoad(m, "variable", "point", "") },
	"input/axial load":              func(m schedule.Member) bool { return m.Axial != 0 },
	"input/overhang":                func(m schedule.Member) bool { return m.Arrangement == "overhang" },
	"input/support positions":       func(m schedule.Member) bool { return m.Arrangement == "positions" },
	"input/restraint spacing":       func(m schedule.Member) bool { return m.Restraint > 0 && m.Defaults["restraint_m"] == "" },
	"input/effective length factor": func(m schedule.Member) bool { return m.LengthFactor > 0 && m.Defaults["length_factor"] == "" },
	"input/deflection limit":        func(m schedule.Member) bool { return m.DeflectionLimit > 0 && m.Defaults["deflection_limit"] == "" },
	"input/mass if not sized":       func(m schedule.Member) bool { return m.Treatment == schedule.ByMass },
	"input/area":                    func(m schedule.Member) bool { return m.Area > 0 },
	"input/joints":                  func(m schedule.Member) bool { return len(m.Joints) > 0 },
	"input/concrete":                func(m schedule.Member) bool { return m.Concrete > 0 },
}

// stated tells for each input of the Job sheet that has no default whether the job
// has it.
var stated = map[string]func(job.Job) bool{
	"input/stock lengths":      func(j job.Job) bool { return len(j.Settings.StockLengths) > 0 },
	"input/kerf":               func(j job.Job) bool { return len(j.Settings.StockLengths) > 0 },
	"input/haul distance":      func(j job.Job) bool { return j.Settings.HaulDistance > 0 },
	"input/spend date":         func(j job.Job) bool { return j.Settings.SpendDate != "" },
	"input/tax":                func(j job.Job) bool { return j.Settings.TaxRate > 0 },
	"input/management reserve": func(j job.Job) bool { return j.Settings.ManagementReserve.Sign() > 0 },
	"input/risk probability":   func(j job.Job) bool { return len(j.Risks) > 0 },
	"input/risk amount":        func(j job.Job) bool { return len(j.Risks) > 0 },
}

func hasLoad(m schedule.Member, nature, kind, label string) bool {
	for _, l := range m.Loads {
		if l.Nature == nature && l.Kind == kind && strings.Contains(strings.ToLower(l.Label), label) {
			return true
		}
	}
	return false
}

// occurs tells whether the job was given an input, so that the register lists
// what was posted and nothing else.
func occurs(id string, j job.Job) bool {
	for _, e := range j.Defaults {
		if strings.TrimPrefix(id, "input/") == strings.TrimPrefix(e.ID, "default/") {
			return false // the job took the default
		}
	}
	if has, ok := stated[id]; ok {
		return has(j)
	}
	has, ok := given[id]
	if !ok {
		return true
	}
	for _, m := range j.Members {
		if has(m) {
			return true
		}
	}
	return false
}

// withResizing marks the entries that feed a check: a check near its limit
// chooses another section when they move.
func withResizing(entries []assumption.Entry) []assumption.Entry {
	for i := range entries {
		for _, f := range entries[i].Feeds {
			entries[i].Resizes = entries[i].Resizes || strings.HasPrefix(f, "member/") && strings.Contains(f, "/check/")
		}
	}
	return entries
}

// inputValue is the value of an input of the Job sheet, as a reader would write it.
func inputValue(id string, s schedule.Settings) string {
	number := func(x float64) string { return strconv.FormatFloat(x, 'g', 12, 64) }
	switch id {
	case "input/haul distance":
		return number(s.HaulDistance / 1000)
	case "input/tax":
		return number(s.TaxRate * 100)
	case "input/kerf":
		return number(s.Kerf * 1000)
	case "input/stock lengths":
		return strings.TrimSuffix(lengths(s.StockLengths), " m")
	case "input/spend date":
		return s.SpendDate
	case "input/management reserve":
		return s.ManagementReserve.String()
	}
	return ""
}
