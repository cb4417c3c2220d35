package engine_test

import (
	"bytes"
	"context"
	"encoding/csv"
	"encoding/json"
	"fmt"
	"math/big"
	"math/rand/v2"
	"strings"
	"testing"

	"spanwright/estimate/document"
	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/sheet"
	"spanwright/estimate/spread"
	"spanwright/estimate/workbook"
)

// printed is what the recomputation reads of a document: texts only, through a
// decoder that knows nothing of the project's types.
type printed struct {
	Totals     struct{ Base, Contingency, AtConfidence string } `json:"-"`
	Lines      []map[string]any                                 `json:"lines"`
	Categories []map[string]any                                 `json:"categories"`
	Groups     []map[string]any                                 `json:"groups"`
	Raw        map[string]any                                   `json:"totals"`
}

func rat(tb testing.TB, v any) *big.Rat {
	tb.Helper()
	r, ok := new(big.Rat).SetString(fmt.Sprint(v))
	if !ok {
		tb.Fatalf("%v is not a number", v)
	}
	return r
}

// roundRat rounds half away from zero to a number of decimals, in rationals.
func roundRat(x *big.Rat, places int) *big.Rat {
	scale := new(big.Rat).SetInt(new(big.Int).Exp(big.NewInt(10), big.NewInt(int64(places)), nil))
	y := new(big.Rat).Mul(x, scale)
	sign := y.Sign()
	y.Abs(y)
	y.Add(y, big.NewRat(1, 2))
	n := new(big.Int).Quo(y.Num(), y.Denom())
	if sign < 0 {
		n.Neg(n)
	}
	return new(big.Rat).Quo(new(big.Rat).SetInt(n), scale)
}

// recompute multiplies every line from its printed text and returns the amounts
// by line, by category and in total, and how many lines were exact ties.
func recompute(tb testing.TB, p printed, places int) (lines, cats map[string]*big.Rat, total *big.Rat, ties int) {
	tb.Helper()
	lines, cats, total = map[string]*big.Rat{}, map[string]*big.Rat{}, new(big.Rat)
	half := new(big.Rat).Quo(big.NewRat(1, 2), new(big.Rat).SetInt(new(big.Int).Exp(big.NewInt(10), big.NewInt(int64(places)), nil)))
	for _, l := range p.Lines {
		price := big.NewRat(1, 1)
		for _, part := range l["rate_parts"].([]any) {
			price.Mul(price, rat(tb, part.(map[string]any)["value"]))
		}
		if price.Cmp(rat(tb, l["rate"])) != 0 {
			tb.Errorf("%s: the parts of the rate make %s, not %s", l["id"], price.FloatString(8), l["rate"])
		}
		for _, m := range l["multipliers"].([]any) {
			price.Mul(price, rat(tb, m.(map[string]any)["value"]))
		}
		unit := places + 2
		if l["driver"] == "cost of categories" {
			unit = 6
		}
		price = roundRat(roundRat(price, 8), unit)
		if price.Cmp(rat(tb, l["unit_price"])) != 0 {
			tb.Errorf("%s: the unit price is %s, recomputed %s", l["id"], l["unit_price"], price.FloatString(8))
		}
		product := new(big.Rat).Mul(rat(tb, l["quantity"]), price)
		amount := roundRat(product, places)
		if diff := new(big.Rat).Sub(amount, product); diff.Abs(diff).Cmp(half) == 0 {
			ties++
		}
		lines[l["id"].(string)] = amount
		c := l["category"].(string)
		if cats[c] == nil {
			cats[c] = new(big.Rat)
		}
		cats[c].Add(cats[c], amount)
		total.Add(total, amount)
	}
	return lines, cats, total, ties
}

// tieBook makes products that end in exactly half a minor unit: no allowances, a
// reference price of 1001 and ratios of 1 on half tonnes.
func tieBook(tb testing.TB, currency string) ratebook.Book {
	tb.Helper()
	b := ratebook.Ratio()
	b.Currency = currency
	places := map[string]string{"JPY": "1001", "EUR": "10.01", "KWD": "1.001"}
	b.ReferencePrice = decimal(tb, places[currency])
	b.MaterialPrice.Spread = spread.NewFixed(b.ReferencePrice.Float64())
	zero := spread.NewFixed(0)
	b.Bolts.Spread = zero
	for _, m := range []map[string]ratebook.Figure{b.Growth, b.Waste, b.Connections} {
		for k, f := range m {
			f.Spread = zero
			m[k] = f
		}
	}
	for k, f := range b.Ratios {
		f.Spread = spread.NewTriangular(0.5, 1, 3)
		b.Ratios[k] = f
	}
	return b
}

func TestIndependentRecomputationInRationals(t *testing.T) {
	ties := 0
	for i := range 1000 {
		r := rand.New(rand.NewPCG(uint64(i), 99))
		rows := randomRows(r, 1+r.IntN(4))
		var book ratebook.Book
		if i%4 == 0 {
			book = tieBook(t, []string{"JPY", "EUR", "KWD"}[i/4%3])
			rows = append([][]string{header}, tieRow())
		} else {
			book = variedBook(t, r)
		}
		s := readCSV(t, toCSV(rows), table("Project", "P", "Scheme", "S", "Currency", book.Currency, "Base date", "2026-06-01"))
		d := run(t, freeze(t, s, book, nil, quick))
		ties += checkDocument(t, d)
		if t.Failed() {
			t.Fatalf("job %d", i)
		}
	}
	if ties < 200 {
		t.Errorf("only %d exact ties were met, want 200 or more", ties)
	}
}

func tieRow() []string {
	row := make([]string, len(header))
	for i, h := range header {
		row[i] = map[string]string{"Mark": "T1", "Group": "Ties", "Kind": "handrail", "Quantity": "1", "Length (m)": "10", "Support": "not sized", "Mass if not sized (kg/m)": "50"}[h]
	}
	return row
}

func checkDocument(t *testing.T, d document.Document) int {
	t.Helper()
	data, _, err := d.Canonical()
	if err != nil {
		t.Fatal(err)
	}
	var p printed
	dec := json.NewDecoder(bytes.NewReader(data))
	dec.UseNumber()
	if err := dec.Decode(&p); err != nil {
		t.Fatal(err)
	}
	currency, err := money.FindCurrency(d.Job.Currency)
	if err != nil {
		t.Fatal(err)
	}
	lines, cats, total, ties := recompute(t, p, currency.MinorDigits)
	same := func(what string, got any, want *big.Rat) {
		t.Helper()
		if rat(t, got).Cmp(want) != 0 {
			t.Errorf("%s: %v, recomputed %s", what, got, want.FloatString(6))
		}
	}
	for _, l := range p.Lines {
		same("JSON "+l["id"].(string), l["amount"], lines[l["id"].(string)])
	}
	for _, c := range p.Categories {
		same("JSON category "+c["category"].(string), c["amount"], cats[c["category"].(string)])
	}
	same("JSON base", p.Raw["base"], total)
	same("JSON contingency", p.Raw["contingency"], new(big.Rat).Sub(rat(t, p.Raw["at_confidence"]), total))
	groups := new(big.Rat)
	for _, g := range p.Groups {
		groups.Add(groups, rat(t, g["amount"]))
	}
	same("sum of the groups", groups.FloatString(8), total)
	checkCSV(t, d, lines, total)
	checkXLSX(t, d, lines, total)
	return ties
}

func checkCSV(t *testing.T, d document.Document, lines map[string]*big.Rat, total *big.Rat) {
	t.Helper()
	data, err := workbook.CSV(d)
	if err != nil {
		t.Fatal(err)
	}
	r := csv.NewReader(bytes.NewReader(data))
	r.FieldsPerRecord = -1
	rows, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	checkTable(t, "CSV", rows, lines, total)
}

func checkXLSX(t *testing.T, d document.Document, lines map[string]*big.Rat, total *big.Rat) {
	t.Helper()
	data, err := workbook.XLSX(d)
	if err != nil {
		t.Fatal(err)
	}
	book, err := sheet.Open(data, "priced.xlsx", "", sheet.DefaultLimits())
	if err != nil {
		t.Fatal(err)
	}
	var rows [][]string
	err = book.Rows(context.Background(), "Lines", func(_ int, cells []sheet.Cell) error {
		row := make([]string, 40)
		for _, c := range cells {
			if c.Column <= len(row) {
				row[c.Column-1] = c.Text
			}
		}
		rows = append(rows, row)
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	checkTable(t, "XLSX", rows, lines, total)
}

// checkTable finds the amount column by its head, and each line by its id.
func checkTable(t *testing.T, what string, rows [][]string, lines map[string]*big.Rat, total *big.Rat) {
	t.Helper()
	amount, seen, base := -1, 0, false
	for _, row := range rows {
		for k, c := range row {
			if strings.HasPrefix(strings.ToLower(c), "amount") {
				amount = k
			}
		}
		if amount < 0 || len(row) <= amount || row[amount] == "" {
			continue
		}
		first := strings.TrimPrefix(row[0], "'")
		if want, ok := lines[first]; ok {
			seen++
			if rat(t, row[amount]).Cmp(want) != 0 {
				t.Errorf("%s %s: %s, recomputed %s", what, first, row[amount], want.FloatString(6))
			}
		}
		if strings.HasPrefix(strings.ToLower(first), "base") {
			base = true
			if rat(t, row[amount]).Cmp(total) != 0 {
				t.Errorf("%s base: %s, recomputed %s", what, row[amount], total.FloatString(6))
			}
		}
	}
	if seen != len(lines) || !base {
		t.Errorf("%s: found %d of %d lines, base found: %v", what, seen, len(lines), base)
	}
}
