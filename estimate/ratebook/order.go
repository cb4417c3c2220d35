package ratebook

import (
	"slices"
	"strings"
)

// CycleError says that percentages of categories come back to where they began.
type CycleError struct {
	Categories []string // the first one stands again at the end
}

// Error names the cycle, such as inspection → margin → inspection.
func (e *CycleError) Error() string {
	return "percentages in a circle: " + strings.Join(e.Categories, " → ")
}

// CategoryOrder returns all categories in an order in which they can be priced:
// each after those that its rates with the driver cost of categories are taken of,
// else as in Categories. Categories that Validate refuses are left out. The error
// is a *CycleError.
func CategoryOrder(rates []Rate) ([]string, error) {
	v := orderVisit{of: map[string][]string{}, done: map[string]bool{}}
	for _, r := range rates {
		if r.Driver == CostOf {
			v.of[r.Category] = append(v.of[r.Category], r.Of...)
		}
	}
	for _, c := range Categories() {
		if err := v.visit(c); err != nil {
			return nil, err
		}
	}
	return v.order, nil
}

type orderVisit struct {
	of    map[string][]string
	done  map[string]bool
	path  []string
	order []string
}

func (v *orderVisit) visit(category string) error {
	if i := slices.Index(v.path, category); i >= 0 {
		return &CycleError{append(slices.Clone(v.path[i:]), category)}
	}
	if v.done[category] {
		return nil
	}
	v.path = append(v.path, category)
	for _, c := range Categories() {
		if !slices.Contains(v.of[category], c) {
			continue
		}
		if err := v.visit(c); err != nil {
			return err
		}
	}
	v.path = v.path[:len(v.path)-1]
	v.done[category] = true
	v.order = append(v.order, category)
	return nil
}
