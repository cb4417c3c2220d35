package schedule

import (
	"slices"
	"strings"
	"time"

	"spanwright/estimate/assumption"
	"spanwright/estimate/money"
	"spanwright/estimate/sheet"
	"spanwright/structural/unit"
)

var (
	taxes    = span{0, 1, true, "a tax from 0 to 100 %"}
	reserves = span{0, 1e12, true, "an amount from 0 to 1,000,000,000,000"}
)

func moneys() []string { return []string{MoneyBaseDate, MoneyOutturn} }

// readSpending reads what lies about the base estimate: the date of its money, tax,
// the owner's costs and the reserve. Currency and base date are read before.
func (r *reader) readSpending() {
	s := &r.job.Settings
	s.SpendDate = r.spendDate()
	s.Money = r.jobWord(jobMoney, moneys(), "is no money of an estimate")
	switch {
	case s.Money == MoneyOutturn && !r.job.given[jobSpendDate]:
		r.jobFault(jobMoney, &complaint{s.Money, "needs the Spend date, which is blank", "enter the mid-point of spending in Spend date, yyyy-mm-dd, or base date here"})
	case s.Money == "":
		s.Money = MoneyBaseDate
		if !r.job.given[jobMoney] {
			r.setting("default/money", MoneyBaseDate, "The estimate is in money of the base date: nothing is escalated to the time of spending.", assumption.Medium)
		}
	}
	s.TaxRate = r.jobQuantity(jobTax, unit.Percent, taxes).value
	s.OwnerCosts = r.ownerCosts()
	s.ManagementReserve = r.reserve()
}

// spendDate reads the mid-point of spending, which is not before a base date that
// the job names; against that of the rate book it cannot be held here.
func (r *reader) spendDate() string {
	day := r.jobDate(jobSpendDate)
	if base := r.job.BaseDate; day != "" && isDay(day) && isDay(base) && day < base {
		r.jobFault(jobSpendDate, &complaint{day, "is before the base date, " + base, "the mid-point of spending, on or after the base date"})
	}
	return day
}

func isDay(text string) bool {
	_, err := time.Parse(time.DateOnly, text)
	return err == nil
}

func (r *reader) ownerCosts() bool {
	e := &r.job.entries[jobOwner]
	if e.cell.Kind == sheet.Boolean {
		e.cell.Kind, e.cell.Text = sheet.Text, map[string]string{"TRUE": "yes", "FALSE": "no"}[e.cell.Text]
	}
	word := r.jobWord(jobOwner, []string{"yes", "no"}, "is neither yes nor no")
	if word == "" && !r.job.given[jobOwner] {
		r.setting("default/owner costs", "no", "The owner's own costs are excluded.", assumption.Medium)
	}
	return word == "yes"
}

// reserve reads an amount in the job's currency, with at most its places.
func (r *reader) reserve() money.Decimal {
	e := r.job.entries[jobReserve]
	n := r.jobQuantity(jobReserve, unit.Number, reserves)
	if n.state != given {
		return money.Zero
	}
	d, err := money.Parse(plainNumber(e.cell.Text, e.comma && e.cell.Kind == sheet.Text))
	if err != nil {
		r.jobFault(jobReserve, &complaint{shorten(e.cell.Text), "is no plain amount", "digits with at most one decimal sign, such as 150000"})
		return money.Zero
	}
	c, err := money.FindCurrency(r.job.Currency)
	if err != nil {
		return money.Zero // the fault of the currency is reported
	}
	if !c.Round(d).Equal(d) {
		r.jobFault(jobReserve, &complaint{shorten(e.cell.Text), "has more places than " + c.Code + " has", "an amount in whole minor units"})
	}
	return c.Round(d)
}

// plainNumber takes the signs that group thousands out of a number that is read
// already, and makes its decimal sign the point.
func plainNumber(text string, comma bool) string {
	group, decimal := ",", "."
	if comma {
		group, decimal = ".", ","
	}
	text = strings.ReplaceAll(text, group, "")
	text = strings.Join(strings.FieldsFunc(text, func(r rune) bool { return r == ' ' || r == '\u00a0' || r == '\u2007' || r == '\u2009' || r == '\u202f' }), "")
	return strings.Replace(text, decimal, ".", 1)
}

// jobWord reads a value that is one of the words, whatever its letter case; empty
// where it is blank or faulty.
func (r *reader) jobWord(id jobID, words []string, problem string) string {
	found := r.jobText(id)
	if found == "" {
		return ""
	}
	i := slices.IndexFunc(words, func(w string) bool { return fold(w) == fold(found) })
	if i < 0 {
		r.jobFault(id, &complaint{shorten(found), problem, didYouMean(near(found, words), "one of "+strings.Join(words, ", "))})
		return ""
	}
	return words[i]
}
