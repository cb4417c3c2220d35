package schedule

import (
	"context"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
	"github.com/xuri/excelize/v2"

	"spanwright/estimate/money"
)

// costKeys are the keys of purchase, money and site, in texts that all encodings hold.
var costKeys = [][]string{
	{"Key", "Value"},
	{"Stock lengths (m)", "15.1; 12.1"}, {"Kerf (mm)", "4"}, {"Purchase", "Least stock"},
	{"Base date", "2026-01-01"}, {"Money", "OUTTURN"}, {"Spend date", "2027-06-30"},
	{"Site conditions", "weather; over water;Tidal"}, {"Haul distance (km)", "120.5"},
	{"Tax (%)", "20"}, {"Owner's costs", "yes"}, {"Management reserve", "150000.5"}, {"Currency", "EUR"},
}

func decimal(t *testing.T, text string) money.Decimal {
	t.Helper()
	d, err := money.Parse(text)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

// costs keeps of settings what costKeys give.
func costs(s Settings) Settings {
	return Settings{
		StockLengths: s.StockLengths, Kerf: s.Kerf, Purchase: s.Purchase, BaseDate: s.BaseDate, Money: s.Money, SpendDate: s.SpendDate,
		SiteConditions: s.SiteConditions, HaulDistance: s.HaulDistance, TaxRate: s.TaxRate, OwnerCosts: s.OwnerCosts, ManagementReserve: s.ManagementReserve,
	}
}

func TestCostKeysInAllEncodings(t *testing.T) {
	want := Settings{
		StockLengths: []float64{12.1, 15.1}, Kerf: 0.004, Purchase: PurchaseLeastStock, BaseDate: "2026-01-01", Money: MoneyOutturn, SpendDate: "2027-06-30",
		SiteConditions: []string{SiteOverWater, SiteTidal, SiteWeather}, HaulDistance: 120500, TaxRate: 0.2, OwnerCosts: true, ManagementReserve: decimal(t, "150000.50"),
	}
	check := func(name string, s Schedule, err error) {
		t.Helper()
		if err != nil {
			t.Errorf("%s: %v", name, err)
			return
		}
		if diff := cmp.Diff(want, costs(s.Settings)); diff != "" {
			t.Errorf("%s (-want +got):\n%s", name, diff)
		}
		if got := s.Settings.ManagementReserve.String(); got != "150000.50" {
			t.Errorf("%s: reserve prints as %s: its form is not one for all encodings", name, got)
		}
		for _, id := range []string{"default/kerf", "default/purchase", "default/money", "default/owner costs"} {
			if _, taken := entriesByID(s)[id]; taken {
				t.Errorf("%s: %s is taken although the job names it", name, id)
			}
		}
	}
	s, err := readCSV(t, oneBeam, Options{JobTable: []byte(csvOf(costKeys...))})
	check("CSV", s, err)
	var lines []string
	for _, r := range costKeys {
		lines = append(lines, r[0]+";\""+strings.ReplaceAll(r[1], ".", ",")+"\"")
	}
	s, err = readCSV(t, oneBeam, Options{JobTable: []byte(strings.Join(lines, "\r\n"))})
	check("CSV with decimal commas", s, err)
	s, err = Read(context.Background(), workbook(t, everyColumn, costKeys, func(f *excelize.File) {
		_ = f.SetCellValue("Job", "B7", time.Date(2027, 6, 30, 0, 0, 0, 0, time.UTC)) // checked by the date read
		_ = f.SetCellBool("Job", "B11", true)
	}), Options{})
	check("XLSX", s, err)
	s, err = ReadJSON(context.Background(), toJSON(t, everyColumn, costKeys), Options{})
	check("JSON", s, err)
}

// Bare lengths take the unit of the last one; a unit in the key wins.
func TestUnitsOfStockLengths(t *testing.T) {
	for text, want := range map[string][]float64{
		"Stock lengths,12; 15 m":         {12, 15},
		"Stock lengths,40; 60 ft":        {12.192, 18.288},
		"Stock lengths,40 ft; 15 m":      {12.192, 15},
		"Stock lengths (m),12; 60 ft":    {12, 18.288},
		"Stock lengths (mm),12100;15100": {12.1, 15.1},
		"stock lengths (m),12":           {12},
	} {
		key, value, _ := strings.Cut(text, ",")
		s := mustRead(t, oneBeam, Options{JobTable: oneKey(key, value)})
		if diff := cmp.Diff(want, s.Settings.StockLengths); diff != "" {
			t.Errorf("%s (-want +got):\n%s", text, diff)
		}
	}
}

// 1 mi is 1609.344 m (NIST SP 811, appendix B).
func TestUnitsOfHaulDistance(t *testing.T) {
	for text, want := range map[string]float64{"120": 120e3, "120 km": 120e3, "75 mi": 120700.8, "800 m": 800, "80000 m": 80e3, "50000": 5e7, "0": 0} {
		s := mustRead(t, oneBeam, Options{JobTable: []byte("Haul distance (km)," + text + "\n")})
		if got := s.Settings.HaulDistance; got != want {
			t.Errorf("%s: %v m, want %v", text, got, want)
		}
	}
}

func TestAmountsOfReserve(t *testing.T) {
	for _, c := range []struct{ currency, text, want string }{
		{"EUR", "150,000", "150000.00"}, {"EUR", "150 000.5", "150000.50"}, {"EUR", "123456789012.34", "123456789012.34"},
		{"JPY", "150000", "150000"}, {"KWD", "150000.125", "150000.125"}, {"EUR", "0", "0.00"},
	} {
		s, err := readCSV(t, oneBeam, Options{JobTable: []byte(csvOf([]string{"Currency", c.currency}, []string{"Management reserve", c.text}))})
		if err != nil || s.Settings.ManagementReserve.String() != c.want {
			t.Errorf("%s %s: %s, error %v, want %s", c.currency, c.text, s.Settings.ManagementReserve, err, c.want)
		}
	}
}

func TestSpendDateAgainstBaseDate(t *testing.T) {
	for spend, faulty := range map[string]bool{"2025-12-31": true, "2026-01-01": false, "2027-01-01": false} {
		_, err := readCSV(t, oneBeam, Options{JobTable: []byte("Base date,2026-01-01\nSpend date," + spend + "\n")})
		faults := faultsOf(t, err)
		if (len(faults) == 1) != faulty || faulty && (faults[0].Address.String() != "Job!B2" || !strings.Contains(faults[0].Problem, "before the base date, 2026-01-01")) {
			t.Errorf("%s: faults %v, want one: %v", spend, err, faulty)
		}
	}
}

// The default kerf matters only where a plan is cut.
func TestKerfByDefault(t *testing.T) {
	for text, entered := range map[string]bool{"": false, "Stock lengths,12 m\n": false, "Stock lengths,12 m\nPurchase,first fit\n": true} {
		s := mustRead(t, oneBeam, Options{JobTable: []byte("Project,P\n" + text)})
		e, taken := entriesByID(s)["default/kerf"]
		if s.Settings.Kerf != 0.005 || taken != entered || taken && e.Source != noSource {
			t.Errorf("%q: kerf %v m, in the register %v as %+v", text, s.Settings.Kerf, taken, e)
		}
	}
}

// A faulty stock length is one fault: the plan that needs it is not blamed.
func TestFaultyStockLengthsAreOneFault(t *testing.T) {
	for _, text := range []string{"Stock lengths (m),long\n", "Stok lengths (m),12\n"} {
		_, err := readCSV(t, oneBeam, Options{JobTable: []byte(text + "Kerf (mm),5\nPurchase,first fit\n")})
		if faults := faultsOf(t, err); len(faults) != 1 {
			t.Errorf("%q: %d faults, want 1: %v", text, len(faults), err)
		}
	}
}
