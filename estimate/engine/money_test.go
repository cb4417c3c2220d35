package engine_test

import (
	"context"
	"errors"
	"strings"
	"testing"

	"spanwright/estimate/document"
	"spanwright/estimate/engine"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/estimate/spread"
)

// In outturn money every category with an index costs what its index says more, and
// the document says in which money it is.
func TestOutturnMoneyFollowsEachIndex(t *testing.T) {
	base := run(t, unitJob(t))
	spent := run(t, unitJob(t, "Money", "outturn", "Spend date", "2028-06-01"))
	if !strings.Contains(spent.Job.Money, "outturn money") || !strings.Contains(base.Job.Money, "base-date money") {
		t.Errorf("the money is %q and %q", base.Job.Money, spent.Job.Money)
	}
	price := func(d document.Document, id string) document.Line {
		for _, l := range d.Lines {
			if l.RateID == id {
				return l
			}
		}
		t.Fatalf("no line of %s", id)
		return document.Line{}
	}
	book := ratebook.UnitRate()
	e, err := book.Escalation(ratebook.Material, "2026-06-01", "2027-12-01") // spent six months early
	if err != nil || !e.OK {
		t.Fatal(err)
	}
	before, after := price(base, "rate/steel sections"), price(spent, "rate/steel sections")
	if want := before.Rate.Float64() * e.Value.Float64(); after.Rate.Float64() < 0.99999*want || after.Rate.Float64() > 1.00001*want {
		t.Errorf("the rate is %s in base-date and %s in outturn money; the index says %s", before.Rate, after.Rate, e.Value)
	}
	parts := after.RateParts[len(after.RateParts)-1]
	if !strings.HasPrefix(parts.Assumption, "escalation/steel/") {
		t.Errorf("the last part of the rate is %+v", parts)
	}
}

// A price past its date is never silent: it is escalated where an index covers its
// category, else flagged.
func TestAnExpiredPriceIsNeverSilent(t *testing.T) {
	s := readCSV(t, []byte(unitSchedule), table("Project", "P", "Scheme", "S", "Base date", "2026-08-01", "Standard", "en1993", "Coating", "C4 high"))
	book := ratebook.UnitRate()
	for i := range book.Rates {
		if book.Rates[i].ID == "shop labour" || book.Rates[i].ID == "margin" {
			book.Rates[i].ValidUntil = "2026-06-30"
		}
	}
	d := run(t, freeze(t, s, book, nil, quick))
	said := ""
	for _, f := range d.Findings {
		if strings.HasPrefix(f.Code, "rate-expired") || f.Code == "not-escalated" {
			said += f.Message + "\n"
		}
	}
	for _, want := range []string{"shop labour", "margin", "2026-06-30"} {
		if !strings.Contains(said, want) {
			t.Errorf("no finding names %s:\n%s", want, said)
		}
	}
}

// A date that an index does not reach, a currency without a rate and a category
// that is taken of itself are refused by name.
func TestRefusalsOfRates(t *testing.T) {
	short := ratebook.UnitRate()
	for i := range short.Indices {
		short.Indices[i].Growth = nil
	}
	circle := ratebook.UnitRate()
	for i := range circle.Rates {
		if circle.Rates[i].ID == "inspection EXC2" {
			circle.Rates[i].Of = append(circle.Rates[i].Of, ratebook.Margin)
		}
	}
	foreign := ratebook.UnitRate()
	foreign.Rates[0].Currency = "CHF"
	for name, c := range map[string]struct {
		book  ratebook.Book
		pairs []string
		want  []string
	}{
		"an index without the date": {short, []string{"Money", "outturn", "Spend date", "2030-01-01"}, []string{"steel", "2029-07-01"}},
		"a circular percentage":     {circle, nil, []string{"inspection", "margin"}},
		"a currency without a rate": {foreign, nil, []string{"CHF"}},
	} {
		s := readCSV(t, []byte(unitSchedule), table(append([]string{"Project", "P", "Scheme", "S", "Base date", "2026-06-01", "Standard", "en1993", "Coating", "C4 high"}, c.pairs...)...))
		j := unitJob(t)
		j.Settings, j.Members, j.Book = s.Settings, s.Members, c.book
		_, err := engine.Run(context.Background(), j, nil)
		var rates *engine.RatesError
		if !errors.As(err, &rates) {
			t.Errorf("%s: got %v, want an error of the rates", name, err)
			continue
		}
		for _, w := range c.want {
			if !strings.Contains(err.Error(), w) {
				t.Errorf("%s: %v does not name %s", name, err, w)
			}
		}
	}
}

// A coating that the book has no rate for is the row's fault, with what would do.
func TestAnUnknownCoatingNamesTheRow(t *testing.T) {
	s := readCSV(t, []byte(unitSchedule), table("Project", "P", "Scheme", "S", "Base date", "2026-06-01", "Standard", "en1993", "Coating", "C4 high"))
	s.Members[1].Coating = "whitewash"
	_, err := engine.Run(context.Background(), freeze(t, s, ratebook.UnitRate(), nil, quick), nil)
	var faults *engine.FaultsError
	if !errors.As(err, &faults) || len(faults.Faults) != 1 || faults.Faults[0].Mark != s.Members[1].Mark || !strings.Contains(faults.Faults[0].Remedy, "C5 high") {
		t.Errorf("got %v", err)
	}
}

// Discrete risks stand outside the base and every category; what they may cost is in
// the contingency, which is shared out to the cent.
func TestContingencyIsSharedOutToTheCent(t *testing.T) {
	j := unitJob(t)
	d := run(t, j)
	sum, shares := d.Totals.Contingency.Sub(d.Totals.Contingency), 0.0
	for _, c := range d.Categories {
		sum, shares = sum.Add(c.Contingency), shares+float64(c.Share)
	}
	for _, k := range d.Range.Risks {
		sum, shares = sum.Add(k.Contingency), shares+float64(k.Share)
	}
	if !sum.Equal(d.Totals.Contingency) || shares < 1-1e-6 || shares > 1+1e-6 {
		t.Errorf("the parts add up to %s of %s, the shares to %g", sum, d.Totals.Contingency, shares)
	}
	calm := deepCopy(t, j)
	calm.Risks = nil
	if !run(t, calm).Totals.Base.Equal(d.Totals.Base) {
		t.Error("risks move the base")
	}
	if d.Totals.Tax.Sign() <= 0 {
		t.Error("no tax line, though the job states a rate")
	}
}

// The checklist suggests a class; the stated one stands, and a finding says that they
// differ.
func TestClassAndChecklist(t *testing.T) {
	j := unitJob(t)
	j.Settings.Definition = []schedule.DefinitionEntry{{Item: "loads and actions", State: schedule.StateDefined}}
	j.Settings.EstimateClass = 2
	d := run(t, j)
	if d.Class.Stated != 2 || d.Class.Suggested != 4 || len(d.Class.Typical) == 0 {
		t.Errorf("the class is %+v", d.Class)
	}
	found := false
	for _, f := range d.Findings {
		found = found || f.Code == "class-differs"
	}
	if !found {
		t.Error("no finding says that the checklist suggests another class")
	}
}

// The premium of the split method in money is what a job with its sections costs
// more: three spans of 6 m, whose inner moments the method takes too large.
func TestSplitPremiumIsPriced(t *testing.T) {
	const rows = "Mark,Quantity,Length (m),Support positions (m),Permanent load (kN/m),Variable load (kN/m),Section or family,Grade\nB1,40,18,0; 6; 12; 18,2,9,IPE,S275\n"
	settings := table("Project", "P", "Scheme", "S", "Base date", "2026-06-01", "Standard", "en1993", "Coating", "C4 high")
	j := freeze(t, readCSV(t, []byte(rows), settings), ratebook.UnitRate(), nil, quick)
	d := run(t, j)
	if d.Split == nil || d.Split.Difference == nil || d.Split.Members[0].Split == d.Split.Members[0].Exact {
		t.Fatalf("no premium: %+v", d.Split)
	}
	given := deepCopy(t, j)
	given.Members[0].Treatment, given.Members[0].Section = schedule.CheckSection, d.Split.Members[0].Split
	bias := given.Book.SizingBias // acts on sized rows alone, at 1
	bias.Spread = spread.NewFixed(1)
	given.Book.SizingBias = bias
	if want := run(t, given).Totals.Base.Sub(d.Totals.Base); !d.Split.Difference.Equal(want) {
		t.Errorf("the premium is %s; a job with the section %s costs %s more", d.Split.Difference, d.Split.Members[0].Split, want)
	}
}
