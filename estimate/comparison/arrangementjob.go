package comparison

import (
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"maps"
	"slices"
	"strings"

	"spanwright/estimate/schedule"
	"spanwright/estimate/sheet"
)

// settled are the keys of the Job sheet that the study decides or that no row of an
// arrangement asks for, in lower case.
var settled = []string{"standard", "factor", "grade", "deflection limit", "frequency floor", "restraint", "connection class", "scheme"}

// ReadArrangementJob reads the settings of an arrangement study as a Job sheet has them:
// values by key, such as "Currency": "EUR". Design basis, grade and factor (0 for none)
// are those of the study, and keys that the study decides are refused. The schedule has
// settings, their defaults and possible omissions; its members only stand in for those
// of the arrangements. The error is sheet.Faults whose headers are the keys, or that of
// the context.
func ReadArrangementJob(ctx context.Context, keys map[string]any, basis, grade string, factor float64) (schedule.Schedule, error) {
	var faults sheet.Faults
	for _, key := range slices.Sorted(maps.Keys(keys)) {
		if at := slices.IndexFunc(settled, func(s string) bool { return strings.HasPrefix(strings.ToLower(strings.TrimSpace(key)), s) }); at >= 0 {
			faults = append(faults, sheet.Fault{Address: sheet.Address{Sheet: "job"}, Header: key, Found: fmt.Sprint(keys[key]),
				Problem: "is decided by the study", Remedy: "leave the key out"})
		}
	}
	data, err := json.Marshal(map[string]any{"job": keys, "rows": standIns()})
	if err != nil {
		return schedule.Schedule{}, fmt.Errorf("comparison: settings: %w", err)
	}
	o := schedule.Options{Overrides: map[string]string{"Standard": basis, "Grade": grade}}
	if basis == "allowable" {
		o.Overrides["Factor"] = fmt.Sprint(factor)
	}
	if len(keys) == 0 {
		data, _ = json.Marshal(map[string]any{"rows": standIns()})
	}
	out, err := schedule.ReadJSON(ctx, data, o)
	var more sheet.Faults
	if errors.As(err, &more) {
		err = nil
	}
	if faults = append(faults, more...); len(faults) > 0 {
		return schedule.Schedule{}, faults
	}
	return out, err
}

// standIns are rows of the kinds that arrangements have, so that the reader asks for
// what is missing beside them and for nothing else.
func standIns() []map[string]any {
	const kind, description, concrete = "Kind", "Description", "Concrete (m³)"
	common := func(mark string) map[string]any {
		return map[string]any{"Mark": mark, "Group": foundationGroup, "Quantity": 1, "Support": notSized, "Connection class": plainClass}
	}
	steel, base := common("1"), common("2")
	steel["Section or family"], steel["Length (m)"], steel["Mass if not sized (kg/m)"] = "bracing", 1, 1
	steel[kind], steel[description] = "bracing", "bracing, head and base plates"
	base["Section or family"], base[kind], base[concrete] = schedule.KindFoundation, schedule.KindFoundation, 1
	return []map[string]any{steel, base}
}
