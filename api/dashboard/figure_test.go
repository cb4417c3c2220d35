package dashboard

import (
	"fmt"
	"math"
	"regexp"
	"strconv"
	"testing"

	"spanwright/estimate/money"
	"spanwright/estimate/spread"
)

func TestExact(t *testing.T) {
	for text, want := range map[string]string{
		"0": "0", "12.50": "12.50", "1234.5": "1234.5", "12345": "12\u00a0345", "766439.82": "766\u00a0439.82",
		"-1234567.89": "−1\u00a0234\u00a0567.89", "0.003": "0.003",
	} {
		d, err := money.Parse(text)
		if err != nil {
			t.Fatal(err)
		}
		if got := exact(d); got != want {
			t.Errorf("exact(%s) = %q, want %q", text, got, want)
		}
	}
}

// TestRoundingKeepsTheVerdict: what fails never reads 1.00, nor does a ratio that
// is unsafe; a zero has no sign.
func TestRoundingKeepsTheVerdict(t *testing.T) {
	for _, c := range []struct {
		write func(float64) string
		x     float64
		want  string
	}{
		{utilisation, 0.789, "0.79"}, {utilisation, 0.999, "1.00"}, {utilisation, 1, "1.00"}, {utilisation, 1 + 1e-10, "1.00"},
		{utilisation, 1.0001, "1.01"}, {utilisation, 1.16, "1.16"}, {utilisation, math.NaN(), "–"}, {utilisation, math.Inf(1), "–"},
		{ratio, 0.999, "0.99"}, {ratio, 0.8, "0.80"}, {ratio, 0.799999999999, "0.80"}, {ratio, 0.949999999999, "0.95"}, {ratio, 1, "1.00"},
		{ratio, 1 - 1e-12, "1.00"}, {ratio, 1.004, "1.00"}, {ratio, -0.001, "0.00"}, {ratio, -0.5, "−0.50"}, {ratio, 12345.678, "12\u00a0345.68"},
	} {
		if got := c.write(c.x); got != c.want {
			t.Errorf("%g is written %q, want %q", c.x, got, c.want)
		}
	}
}

func TestPercentiles(t *testing.T) {
	for p, want := range map[float64]string{0: "P0", 0.1: "P10", 0.8: "P80", 0.975: "P97.5", 1: "P100", 1.1: "–", -0.1: "–"} {
		if got := percentile(p); got != want {
			t.Errorf("percentile(%g) = %q, want %q", p, got, want)
		}
	}
	for p, want := range map[float64]string{0: "below P1", 0.004: "below P1", 0.44: "at\u00a0P44", 0.994: "at\u00a0P99", 1: "above P99", 2: "at an unknown percentile"} {
		if got := lies(p); got != want {
			t.Errorf("lies(%g) = %q, want %q", p, got, want)
		}
	}
	if got := percentile(math.NaN()) + lies(math.NaN()); got != "–at an unknown percentile" {
		t.Errorf("NaN gives %q", got)
	}
}

func TestBelieved(t *testing.T) {
	for _, c := range []struct {
		s              spread.Spread
		factor         float64
		numbers, shape string
	}{
		{spread.NewFixed(900), 1, "900", "fixed"},
		{spread.NewUniform(0.9, 1.1), 1, "0.9 / 1.1", "uniform"},
		{spread.NewTriangular(0.01, 0.02, 0.07), 100, "1 / 2 / 7", "triangular"},
		{spread.NewPERT(45, 0, 75), 1, "45 / 0 / 75", "beta-PERT"},
		{spread.NewLognormal(0.793994073556, 1.25945524445), 1, "0.794 / 1.26", "lognormal, ends are P10 and P90"},
		{spread.Spread{Distribution: spread.Triangular, Low: 1, Likely: 2, High: 3, Bounds: spread.BoundsPercentiles}, 1, "1 / 2 / 3", "triangular, ends are P10 and P90"},
		{spread.NewPERT(123456, 1234567, 12345678), 1, "123\u00a0456 / 1\u00a0230\u00a0000 / 12\u00a0300\u00a0000", "beta-PERT"},
	} {
		numbers, shape := believed(c.s, c.factor)
		numbers = regexp.MustCompile("\u00a0/ ").ReplaceAllString(numbers, " / ")
		if numbers != c.numbers || shape != c.shape {
			t.Errorf("believed(%+v) = %q, %q, want %q, %q", c.s, numbers, shape, c.numbers, c.shape)
		}
	}
}

// TestContrast checks the page's own colours on the grounds that they stand on,
// 4.5 : 1 for text (WCAG 2.2, 1.4.3, with its definition of relative luminance).
func TestContrast(t *testing.T) {
	a, err := newAssets()
	if err != nil {
		t.Fatal(err)
	}
	declared := regexp.MustCompile(`--([a-z-]+):\s*(#[0-9a-f]{6})`).FindAllStringSubmatch(string(a.files[a.style[len("/static/"):]].data), -1)
	themes := []map[string]string{{}, {}}
	for _, d := range declared { // the first declaration is the light one, the second the dark one
		if _, ok := themes[0][d[1]]; !ok {
			themes[0][d[1]] = d[2]
		} else {
			themes[1][d[1]] = d[2]
		}
	}
	for i, theme := range themes {
		for _, pair := range [][2]string{
			{"link", "chart-paper"}, {"link", "ground"}, {"link", "chart-soft"}, {"link", "unsafe-tint"}, {"link", "doubt-tint"}, {"chart-ink", "ground"},
			{"chart-ink", "chart-soft"}, {"chart-ink", "unsafe-tint"}, {"chart-ink", "doubt-tint"}, {"chart-muted", "ground"}, {"chart-muted", "chart-paper"},
			{"unsafe", "chart-paper"}, {"unsafe", "unsafe-tint"}, {"unsafe", "chart-soft"}, {"doubt", "chart-paper"}, {"doubt", "doubt-tint"}, {"chart-accent", "chart-paper"},
		} {
			if got := contrast(t, theme[pair[0]], theme[pair[1]]); !(got >= 4.5) {
				t.Errorf("theme %d: %s on %s has a contrast of %.2f, want 4.5 or more", i, pair[0], pair[1], got)
			}
		}
	}
}

func contrast(t *testing.T, a, b string) float64 {
	t.Helper()
	x, y := luminance(t, a), luminance(t, b)
	return (max(x, y) + 0.05) / (min(x, y) + 0.05)
}

func luminance(t *testing.T, hex string) float64 {
	t.Helper()
	sum := 0.0
	for i, weight := range []float64{0.2126, 0.7152, 0.0722} {
		if len(hex) != 7 {
			t.Fatalf("colour %q", hex)
		}
		n, err := strconv.ParseUint(hex[1+2*i:3+2*i], 16, 8)
		if err != nil {
			t.Fatal(fmt.Errorf("colour %q: %w", hex, err))
		}
		c := float64(n) / 255
		if c <= 0.04045 {
			c /= 12.92
		} else {
			c = math.Pow((c+0.055)/1.055, 2.4)
		}
		sum += weight * c
	}
	return sum
}

// A statement is named by what it is about; its reason stands in the register.
func TestBrief(t *testing.T) {
	for statement, want := range map[string]string{
		"Multiplier “tides”: work stops outside the window": "Multiplier “tides”",
		"Crane days for one lift; growth adds lifts":        "Crane days for one lift",
		"Rate “site labour” of erection":                    "Rate “site labour” of erection",
	} {
		if got := brief(statement); got != want {
			t.Errorf("%s: got %q, want %q", statement, got, want)
		}
	}
}
