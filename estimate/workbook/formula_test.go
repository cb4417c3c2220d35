package workbook

import (
	"regexp"
	"strings"
	"testing"

	"spanwright/estimate/document"
)

// sheetsOf joins the sheets of a workbook's file.
func sheetsOf(t *testing.T, data []byte) string {
	t.Helper()
	xml := parts(t, data, "xl/worksheets/sheet")
	all := ""
	for _, name := range sortedKeys(xml) {
		all += string(xml[name])
	}
	return all
}

// The formulas are what the sheet's reader sees: a product is rounded to eight
// places first, then to its own.
func TestFormulas(t *testing.T) {
	d := estimate(t, "EUR", []plainLine{
		{"boom", "material", "81.915", "900", nil},
		{"boom", "fabrication", "0.005", "1", []string{"0.9999", "1.01"}},
		{"boom", "fabrication", "1234567890.125", "1", nil},
	})
	all := sheetsOf(t, write(t, d))
	for _, want := range []string{
		"<f>rate_material</f><v>900</v>",
		"<f>multiplier_1_group_boom</f><v>0.9999</v>",
		"<f>ROUND(ROUND(G2,8),4)</f><v>900</v>",
		"<f>ROUND(ROUND(G3*H3*I3,8),4)</f><v>1.0099</v>",
		"<f>ROUND(ROUND(E2*J2,8),2)</f><v>73723.5</v>",
		"<f>ROUND(ROUND(E3*J3,8),2)</f><v>0.01</v>",
		"<f>ROUND(ROUND(E4*J4,5),2)</f><v>1234567890.13</v>",
		"<f>ROUND(SUM(K2:K4),2)</f><v>1234641613.64</v>",
		"<f>ROUND(SUMIF(Lines!$C$2:$C$4,A2,Lines!$K$2:$K$4),2)</f><v>73723.5</v>",
		"<f>Lines!K5</f><v>1234641613.64</v>",
	} {
		if !strings.Contains(all, want) {
			t.Errorf("no %s in the sheets", want)
		}
	}
}

// The formulas of a unit-rate document: a take-off with factors, a rate of parts,
// a percentage of other lines, carbon, and the names of their cells.
func TestFormulasOfUnitRates(t *testing.T) {
	d, _ := unitRate(t, 4, "EUR", nil)
	data := write(t, d)
	all := sheetsOf(t, data)
	for _, want := range []string{
		"<f>1+allowance_growth_4</f>", "<f>allowance_sizing_bias</f>", "<f>ROUND(C3*D3*E3*F3*G3,3)</f>", "<f>&#39;Take-off&#39;!I4</f>",
		"<f>E11*F11*G11*H11</f>", "<f>exchange_usd</f>", "<f>rate_site_labour</f>",
		"<f>ROUND(SUM(K3,K8:K9),2)</f>", "<f>ROUND(ROUND(G10*H10,8),6)</f>", "<f>carbon_a1_a3</f>", "<f>ROUND(ROUND(E2*G2,8),0)</f>",
		"<f>ROUND(B14-B15,2)</f>",
	} {
		if !strings.Contains(all, want) {
			t.Errorf("no %s in the sheets", want)
		}
	}
	where := map[string]string{}
	for _, m := range definedName.FindAllStringSubmatch(string(parts(t, data, "xl/workbook.xml")["xl/workbook.xml"]), -1) {
		where[m[1]] = m[2]
	}
	for name, want := range map[string]string{
		NameBase: `^Summary!\$B`, NameBaseAsPriced: `^Summary!\$B`, NameBaseDifference: `^Summary!\$B`, NameContingency: `^Summary!\$B`,
		NameAtConfidence: `^Summary!\$B`, "percentile_10": `^Summary!\$B`, "percentile_90": `^Summary!\$B`,
		"multiplier_height_project": `^Multipliers!\$D`, "allowance_growth_4": `^Allowances!\$D`, "carbon_a4": `^&#39;Carbon factors&#39;!\$D`,
		"price_site_labour": `^Rates!\$`, "rate_site_labour": `^Rates!\$`, "exchange_usd": `^Conversions!\$D`, "fraction_margin": `^Rates!\$`,
	} {
		if !regexp.MustCompile(want).MatchString(where[name]) {
			t.Errorf("the name %s is %q, want %s", name, where[name], want)
		}
	}
}

// Names are made of ids, and no two are alike.
func TestNames(t *testing.T) {
	n := newNamer()
	for _, c := range []struct{ prefix, id, want string }{
		{"multiplier", "multiplier/height/group/boom", "multiplier_height_group_boom"}, {"multiplier", "multiplier/Height/group/Boom", "multiplier_height_group_boom_2"},
		{"allowance", "norm/shop hours/lattice", "allowance_norm_shop_hours_lattice"}, {"rate", "", "rate"}, {"price", "Höhe %2F", "price_h_he_2f"},
		{"base", "", "base_2"}, {"rate", strings.Repeat("x", 300), "rate_" + strings.Repeat("x", 75)},
	} {
		if got := n.name(c.prefix, c.id); got != c.want {
			t.Errorf("%s %s is named %s, want %s", c.prefix, c.id, got, c.want)
		}
	}
}

// A percentage of more scattered lines than one SUM takes is added up in parts.
func TestLongSums(t *testing.T) {
	var lines []plainLine
	for range 700 {
		lines = append(lines, plainLine{"boom", "material", "1.5", "100", nil}, plainLine{"boom", "coating", "1", "10", nil})
	}
	d := estimate(t, "EUR", lines)
	l := d.Lines[0]
	l.ID, l.Item, l.Category, l.Driver, l.RateID, l.Unit = "line/whole structure/overhead", "", "erection", ofCategories, "rate/overhead", ""
	for _, x := range d.Lines {
		if x.Category == "material" {
			l.Of = append(l.Of, x.ID)
		}
	}
	l.Quantity, l.Rate, l.UnitPrice, l.Amount = decimal(t, "105000.00"), decimal(t, "0.1"), decimal(t, "0.1"), decimal(t, "10500.00")
	d.Lines = append(d.Lines, l)
	d.Totals.Base = d.Totals.Base.Add(l.Amount)
	d.Categories = append(d.Categories, document.Category{Category: "erection", Amount: l.Amount})
	data := write(t, d)
	if all := sheetsOf(t, data); !strings.Contains(all, "<f>ROUND(SUM(&#39;Part sums&#39;!A2:A5),2)</f><v>105000</v>") {
		t.Error("no sum of four parts")
	}
	got := recalculate(t, map[string][]byte{"long": data})["long"][linesSheet]
	if a := got[len(got)-2][8]; a != "10500" {
		t.Errorf("LibreOffice calculates %q, want 10500", a)
	}
}
