package schedule

import (
	"context"
	"strings"
	"testing"
)

const oneRow = `{"Mark":"B1","Quantity":2,"Length (m)":6,"Section or family":"IPE","Permanent load (kN/m)":1,"Variable load (kN/m)":2}`

func TestFaultsOfJSON(t *testing.T) {
	for _, c := range []struct{ name, data, at, header, problem string }{
		{"bad value", strings.Replace(oneRow, `:6`, `:-6`, 1), "rows!1", "Length (m)", "out of bounds"},
		{"blank value", strings.Replace(oneRow, `:6`, `:null`, 1), "rows!1", "Length (m)", "length is blank"},
		{"key absent in a later row", oneRow + `,{"Mark":"B2","Quantity":2,"Section or family":"IPE","Permanent load (kN/m)":1,"Variable load (kN/m)":2}`, "rows!2", "Length (m)", "length is blank"},
		{"key absent everywhere", strings.Replace(oneRow, `"Length (m)":6,`, ``, 1), "rows", "Length (m)", "column is missing"},
		{"unknown key", strings.Replace(oneRow, `{`, `{"Lngth (m)":6,`, 1), "rows!1", "", "not known"},
		{"key twice in a row", strings.Replace(oneRow, `{`, `{"Mark":"B0",`, 1), "rows!1", "Mark", "twice"},
		{"column in two spellings", oneRow + "," + strings.NewReplacer("B1", "B2", "Length (m)", "Length (ft)").Replace(oneRow), "rows!2", "Length (m)", "second column"},
		{"truth value", strings.Replace(oneRow, `:6`, `:true`, 1), "rows!1", "Length (m)", "truth value"},
		{"nested value", strings.Replace(oneRow, `:6`, `:{"value":6}`, 1), "rows!1", "Length (m)", "no single value"},
		{"list", strings.Replace(oneRow, `"IPE"`, `["IPE","HEA"]`, 1), "rows!1", "Section or family", "no single value"},
		{"number beyond all bounds", strings.Replace(oneRow, `:6`, `:1e400`, 1), "rows!1", "Length (m)", "too large"},
		{"mark twice", oneRow + "," + oneRow, "rows!2", "Mark", "mark of row 1 already"},
	} {
		t.Run(c.name, func(t *testing.T) {
			_, err := ReadJSON(context.Background(), []byte(`{"rows":[`+c.data+`]}`), Options{})
			faults := faultsOf(t, err)
			if len(faults) != 1 {
				t.Fatalf("%d faults, want 1: %v", len(faults), err)
			}
			f := faults[0]
			if f.Address.String() != c.at || f.Header != c.header || !strings.Contains(f.Problem, c.problem) {
				t.Errorf("fault %+v (%s), want at %s (%s): %s", f, f.Address, c.at, c.header, c.problem)
			}
		})
	}
}

func TestFaultsOfJSONJob(t *testing.T) {
	for _, c := range []struct{ job, header, problem string }{
		{`{"Factor":1}`, "Factor", "out of bounds"},
		{`{"Fator":3}`, "Fator", "not known"},
		{`{"Grade":"S355","grade":"S235"}`, "grade", "twice"},
		{`{"Grade":{"name":"S355"}}`, "Grade", "no single value"},
		{`{"Base date":true}`, "Base date", "truth value"},
	} {
		_, err := ReadJSON(context.Background(), []byte(`{"rows":[`+oneRow+`],"job":`+c.job+`}`), Options{})
		faults := faultsOf(t, err)
		if len(faults) != 1 || faults[0].Address.String() != "job" || faults[0].Header != c.header || !strings.Contains(faults[0].Problem, c.problem) {
			t.Errorf("%s: faults %v, want one at job (%s): %s", c.job, err, c.header, c.problem)
		}
	}
}

func TestRefusedJSON(t *testing.T) {
	for _, c := range []struct{ data, says string }{
		{``, "ends early"},
		{`[]`, "object in braces is wanted"},
		{`{"rows":{}}`, "array in square brackets is wanted"},
		{`{"rows":[1]}`, "object in braces is wanted"},
		{`{"rows":[` + oneRow + `]`, "EOF"},
		{`{"rows":[` + oneRow + `]} {}`, "follows the end"},
		{`{"rows":[],"rows":[]}`, "stands twice"},
		{`{"members":[]}`, `not known; accepted are "rows", "job", "definition" and "risks"`},
		{`{"rows":[{"Mark":tru}]}`, "invalid character"},
		{`{"rows":[{` + manyKeys(201) + `}]}`, "more than 200 different keys"},
	} {
		_, err := ReadJSON(context.Background(), []byte(c.data), Options{})
		if err == nil || !strings.Contains(err.Error(), c.says) {
			t.Errorf("%s: error %v, want %q", shorten(c.data), err, c.says)
		}
	}
}

func manyKeys(n int) string {
	var keys []string
	for i := range n {
		keys = append(keys, `"k`+strings.Repeat("x", i)+`":1`)
	}
	return strings.Join(keys, ",")
}

func TestEmptyJSON(t *testing.T) {
	for _, data := range []string{`{}`, `{"rows":[]}`, `{"rows":[{}]}`, `{"rows":[{"Mark":null}]}`} {
		_, err := ReadJSON(context.Background(), []byte(data), Options{})
		if faults := faultsOf(t, err); len(faults) == 0 {
			t.Errorf("%s is accepted", data)
		}
	}
}

// The order of the parts of a posting does not matter.
func TestJobBeforeRows(t *testing.T) {
	s, err := ReadJSON(context.Background(), []byte(`{"job":{"Grade":"S275"},"rows":[`+oneRow+`]}`), Options{})
	if err != nil || s.Members[0].Grade != "S275" {
		t.Errorf("members %+v, error %v", s.Members, err)
	}
}
