package comparison

import (
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"maps"
	"slices"
	"strconv"
	"strings"

	"spanwright/estimate/schedule"
)

// settled are the keys of the Job sheet that the study decides or that no row of an
// arrangement asks for, in lower case.
var settled = []string{"standard", "factor", "grade", "deflection limit", "frequency floor", "restraint", "connection class", "scheme"}

// SettledError lists keys of the Job sheet that an arrangement study decides.
type SettledError struct {
	Keys  []string // as written
	Found []string // their values
}

// Remedy is what would be accepted in place of a settled key.
func (e *SettledError) Remedy() string { return "leave the key out: the study decides it" }

// Error names the keys.
func (e *SettledError) Error() string {
	return "settings: found " + strings.Join(e.Keys, ", ") + "; " + e.Remedy()
}

// ReadArrangementJob reads the settings of an arrangement study as a Job sheet has them:
// values by key, such as "Currency": "EUR". Design basis, grade and factor (0 for none)
// are those of the study. The schedule has settings, their defaults and possible
// omissions; its members only stand in for those of the arrangements. The error joins a
// *SettledError and what schedule.ReadJSON reports: sheet.Faults whose headers are the
// keys, or that of the context.
func ReadArrangementJob(ctx context.Context, keys map[string]any, basis, grade string, factor float64) (schedule.Schedule, error) {
	posted := map[string]any{"rows": standIns()}
	var refused error
	own := map[string]any{}
	for _, key := range slices.Sorted(maps.Keys(keys)) {
		if !isSettled(key) {
			own[key] = keys[key]
			continue
		}
		var e *SettledError
		if !errors.As(refused, &e) {
			e = &SettledError{}
			refused = e
		}
		e.Keys, e.Found = append(e.Keys, key), append(e.Found, fmt.Sprint(keys[key]))
	}
	if len(own) > 0 {
		posted["job"] = own
	}
	data, err := json.Marshal(posted)
	if err != nil {
		return schedule.Schedule{}, fmt.Errorf("comparison: settings: %w", err)
	}
	o := schedule.Options{Overrides: map[string]string{"Standard": basis, "Grade": grade}}
	if basis == "allowable" {
		o.Overrides["Factor"] = strconv.FormatFloat(factor, 'f', -1, 64)
	}
	out, err := schedule.ReadJSON(ctx, data, o)
	if err = errors.Join(refused, err); err != nil {
		return schedule.Schedule{}, err
	}
	return out, nil
}

func isSettled(key string) bool {
	low := strings.ToLower(strings.TrimSpace(key))
	return slices.ContainsFunc(settled, func(s string) bool { return strings.HasPrefix(low, s) })
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
