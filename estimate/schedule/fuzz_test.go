package schedule

import (
	"context"
	"errors"
	"strings"
	"testing"

	"spanwright/estimate/sheet"
)

// FuzzReadJSON posts any bytes: the answer is a schedule, whose risks and members can
// be worked with, or an error with a place and a remedy for each fault.
func FuzzReadJSON(f *testing.F) {
	f.Add([]byte(annexJSON))
	f.Add([]byte(`{"rows":[` + strings.Replace(oneRow, `{`, `{"Joints":[{"kind":"moment","count":2}],"Concrete (m³)":2.4,`, 1) + `],
		"job":{"Stock lengths (m)":"12; 15","Kerf (mm)":5,"Purchase":"first fit","Money":"outturn","Spend date":"2027-06-30","Site conditions":"tidal; height",
		"Haul distance (km)":"75 mi","Tax (%)":20,"Owner's costs":true,"Management reserve":"150,000"}}`))
	f.Add([]byte(`{"rows":[{"Mark":"F1","Quantity":1,"Length (m)":0,"Section or family":"foundation","Concrete":"3 yd3","Joints":"2 moment"}],"risks":[{}],"definition":[{"Item":[]}]}`))
	f.Fuzz(func(t *testing.T, data []byte) {
		s, err := ReadJSON(context.Background(), data, Options{})
		var faults sheet.Faults
		switch {
		case errors.As(err, &faults):
			for _, one := range faults {
				if one.Problem == "" || one.Remedy == "" {
					t.Fatalf("a fault without problem or remedy: %+v", one)
				}
			}
		case err != nil:
		case len(s.Members) == 0:
			t.Fatal("neither members nor faults")
		default:
			checkRead(t, s)
		}
	})
}

// checkRead holds what every schedule that is read keeps.
func checkRead(t *testing.T, s Schedule) {
	t.Helper()
	for _, r := range s.Risks {
		if err := r.Impact.Validate(); err != nil || r.Name == "" || !(r.Probability > 0 && r.Probability < 1) {
			t.Fatalf("risk %+v: %v", r, err)
		}
	}
	for _, m := range s.Members {
		for i, j := range m.Joints {
			if !(j.Count > 0) || i > 0 && !(m.Joints[i-1].Kind < j.Kind) {
				t.Fatalf("joints %+v", m.Joints)
			}
		}
		if !(m.Length > 0 || m.LineMass == 0) || !(m.Concrete >= 0) {
			t.Fatalf("member %+v", m)
		}
	}
	if plan := s.Settings.Purchase != PurchaseWaste; plan && len(s.Settings.StockLengths) == 0 || s.Settings.Money == MoneyOutturn && s.Settings.SpendDate == "" {
		t.Fatalf("settings %+v", s.Settings)
	}
	if s.Settings.ManagementReserve.Sign() < 0 || !(s.Settings.EstimateClass >= 1 && s.Settings.EstimateClass <= 5) {
		t.Fatalf("settings %+v", s.Settings)
	}
}
