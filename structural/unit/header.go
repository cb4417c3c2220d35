package unit

import (
	"errors"
	"strings"
)

// Header parts a column head into name and unit: "Length (m)", "Permanent load
// [kN/m]", "Length, ft". Spaces are tidied. The bool is false where the head names
// no unit: "Length", "Size, as built".
//
// Brackets at the end that hold no known unit give the name without them and an
// error; a caller whose own heads hold other brackets ("Axial load (compression
// +)") compares the whole head first.
func Header(text string) (string, Unit, bool, error) {
	text = strings.Join(strings.Fields(tidy(text)), " ")
	if name, symbol, ok := cutBrackets(text); ok {
		u, err := Lookup(symbol)
		return name, u, err == nil, err
	}
	comma := strings.LastIndexByte(text, ',')
	if comma < 0 {
		return text, Unit{}, false, nil
	}
	name, symbol := strings.TrimSpace(text[:comma]), strings.TrimSpace(text[comma+1:])
	if name == "" || symbol == "" {
		return text, Unit{}, false, nil
	}
	u, err := Lookup(symbol)
	var e *Error
	if errors.As(err, &e) && e.Problem == unknown {
		return text, Unit{}, false, nil
	}
	return name, u, err == nil, err
}

// cutBrackets parts "name (inner)" or "name [inner]".
func cutBrackets(text string) (name, inner string, ok bool) {
	for _, pair := range []string{"()", "[]"} {
		open := strings.LastIndexByte(text, pair[0])
		if open > 0 && text[len(text)-1] == pair[1] {
			name = strings.TrimSpace(text[:open])
			inner = strings.TrimSpace(text[open+1 : len(text)-1])
			return name, inner, name != "" && inner != ""
		}
	}
	return "", "", false
}
