package money

import (
	"encoding/json"
	"errors"
	"math"
	"math/big"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

func mustParse(t testing.TB, text string) Decimal {
	t.Helper()
	d, err := Parse(text)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

func TestParseKeepsPlaces(t *testing.T) {
	for in, want := range map[string]string{
		"0": "0", "-0.00": "0.00", "+7": "7", "1.50": "1.50", ".5": "0.5", "5.": "5",
		"-12.345": "-12.345", "0001.20": "1.20",
		"123456789012345678901234567890": "123456789012345678901234567890",
		"0.00000000000000000000000001":   "0.00000000000000000000000001",
	} {
		if got := mustParse(t, in).String(); got != want {
			t.Errorf("Parse(%q) = %s, want %s", in, got, want)
		}
	}
}

func TestParseRefuses(t *testing.T) {
	for _, in := range []string{
		"", "-", ".", "1e5", "1E-3", "NaN", "Inf", "-Infinity", "1,000", " 1", "1 ", "1.2.3", "--1",
		"0x10", "1_000", "٣", strings.Repeat("9", MaxDigits+1), strings.Repeat("x", 1000),
	} {
		d, err := Parse(in)
		if err == nil {
			t.Errorf("Parse(%.40q) = %s, want an error", in, d)
			continue
		}
		if !strings.Contains(err.Error(), "accepted") || len(err.Error()) > 250 {
			t.Errorf("Parse(%.40q): error %q does not say what is accepted, or is long", in, err)
		}
	}
}

// decimals generates decimals of up to 30 digits.
func decimals() *rapid.Generator[Decimal] {
	return rapid.Custom(func(t *rapid.T) Decimal {
		d, err := Parse(rapid.StringMatching(`-?[0-9]{1,18}(\.[0-9]{1,12})?`).Draw(t, "text"))
		if err != nil {
			t.Fatal(err)
		}
		return d
	})
}

// Reference: exact fractions of math/big.
func TestArithmeticAgainstFractions(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		a, b := decimals().Draw(t, "a"), decimals().Draw(t, "b")
		x, y := a.Rat(), b.Rat()
		ops := []struct {
			name string
			got  Decimal
			want *big.Rat
		}{
			{"add", a.Add(b), new(big.Rat).Add(x, y)},
			{"sub", a.Sub(b), new(big.Rat).Sub(x, y)},
			{"mul", a.Mul(b), new(big.Rat).Mul(x, y)},
			{"neg", a.Neg(), new(big.Rat).Neg(x)},
			{"mul of mul", a.Mul(b).Mul(a), new(big.Rat).Mul(new(big.Rat).Mul(x, y), x)},
		}
		for _, op := range ops {
			if op.got.Rat().Cmp(op.want) != 0 {
				t.Errorf("%s of %s and %s = %s, want %s", op.name, a, b, op.got, op.want)
			}
			if strings.HasPrefix(op.got.String(), "-") && op.got.Sign() == 0 {
				t.Errorf("%s of %s and %s is a negative zero", op.name, a, b)
			}
		}
		if got, want := a.Cmp(b), x.Cmp(y); got != want {
			t.Errorf("Cmp(%s, %s) = %d, want %d", a, b, got, want)
		}
		if got, want := a.Sign(), x.Sign(); got != want {
			t.Errorf("Sign(%s) = %d, want %d", a, got, want)
		}
	})
}

// Reference: big.Rat.FloatString, which rounds half away from zero.
func TestRoundAgainstFractions(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		a := decimals().Draw(t, "a")
		places := rapid.IntRange(0, 14).Draw(t, "places")
		got, want := a.Round(places).String(), a.Rat().FloatString(places)
		if a.Round(places).Sign() == 0 {
			want = strings.TrimPrefix(want, "-")
		}
		if got != want {
			t.Errorf("%s rounded to %d = %s, want %s", a, places, got, want)
		}
	})
}

func TestRoundTies(t *testing.T) {
	for _, c := range []struct {
		in     string
		places int
		want   string
	}{
		{"2.5", 0, "3"}, {"-2.5", 0, "-3"}, {"1.005", 2, "1.01"}, {"-1.005", 2, "-1.01"},
		{"1.0049999", 2, "1.00"}, {"9.995", 2, "10.00"}, {"0.5", 0, "1"}, {"0.4", 0, "0"},
		{"-0.004", 2, "0.00"}, {"7", 2, "7.00"}, {"1500", -3, "2000"}, {"1499", -3, "1000"},
		{"0.05", 0, "0"}, {"99.5", 0, "100"}, {"0", 2, "0.00"},
	} {
		if got := mustParse(t, c.in).Round(c.places).String(); got != c.want {
			t.Errorf("%s to %d places = %s, want %s", c.in, c.places, got, c.want)
		}
	}
}

func TestOperandsStayAsTheyWere(t *testing.T) {
	a, b := mustParse(t, "123456789012345678901234567.89"), mustParse(t, "987654321098765432109876543.21")
	big := a.Mul(b) // needs more than the inline words
	before := big.String()
	_, _, _, _ = big.Add(a), big.Neg(), big.Round(1), big.Mul(big)
	if a.String() != "123456789012345678901234567.89" || big.String() != before {
		t.Errorf("an operand changed: %s, %s", a, big)
	}
}

func TestFromFloat(t *testing.T) {
	for _, c := range []struct {
		x      float64
		places int
		want   string
	}{
		{1.005, 2, "1.01"}, {-1.005, 2, "-1.01"}, {0.1, 3, "0.100"}, {2.675, 2, "2.68"},
		{1e-7, 6, "0.000000"}, {5e-7, 6, "0.000001"}, {123456.789, 0, "123457"}, {1e15, 2, "1000000000000000.00"},
		{math.SmallestNonzeroFloat64, 4, "0.0000"}, {math.Copysign(0, -1), 1, "0.0"},
	} {
		got, err := FromFloat(c.x, c.places)
		if err != nil || got.String() != c.want {
			t.Errorf("FromFloat(%v, %d) = %s, %v, want %s", c.x, c.places, got, err, c.want)
		}
	}
	for _, x := range []float64{math.NaN(), math.Inf(1), math.Inf(-1), 1e20, -1e300} {
		if got, err := FromFloat(x, 2); err == nil {
			t.Errorf("FromFloat(%v) = %s, want an error", x, got)
		}
	}
	for _, places := range []int{-1, MaxDigits + 1, MaxDigits} {
		if got, err := FromFloat(123.4, places); err == nil {
			t.Errorf("FromFloat to %d places = %s, want an error", places, got)
		}
	}
}

func TestFloat64IsNearest(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		x := rapid.Float64Range(-1e12, 1e12).Draw(t, "x")
		d, err := FromFloat(x, 0)
		if err != nil {
			t.Fatal(err)
		}
		if got, want := d.Float64(), math.Round(x); got != want {
			t.Errorf("%v through 0 places = %v, want %v", x, got, want)
		}
	})
	if got := mustParse(t, "0.1").Float64(); got != 0.1 {
		t.Errorf("0.1 as a float = %v", got)
	}
}

func TestProduct(t *testing.T) {
	for _, c := range []struct {
		factors []string
		want    string
	}{
		{nil, "1"}, {[]string{"12.345", "2"}, "24.690"}, {[]string{"1000000", "1000000", "1000000"}, "1000000000000000000"},
		{[]string{"1.5000000000", "1.2000000000"}, "1.80000000000000000000"}, {[]string{"999999999999999"}, "999999999999999"},
		{[]string{"0", "123456789.123456789123"}, "0.000000000000"},
	} {
		var factors []Decimal
		for _, f := range c.factors {
			factors = append(factors, mustParse(t, f))
		}
		got, err := Product(factors...)
		if err != nil || got.String() != c.want {
			t.Errorf("product of %v = %s, %v, want %s", c.factors, got, err, c.want)
		}
	}
}

func TestProductNamesItself(t *testing.T) {
	_, err := Product(mustParse(t, "12345.678"), mustParse(t, "1.0000001"), mustParse(t, "3.1"))
	if !errors.Is(err, ErrDigits) {
		t.Fatalf("error %v, want ErrDigits", err)
	}
	for _, part := range []string{"12345.678 × 1.0000001 × 3.1", "16 significant digits", "at most 15"} {
		if !strings.Contains(err.Error(), part) {
			t.Errorf("error %q lacks %q", err, part)
		}
	}
}

func TestJSON(t *testing.T) {
	type amount struct {
		Total Decimal `json:"total"`
		Part  Decimal `json:"part,omitzero"`
	}
	out, err := json.Marshal(amount{Total: mustParse(t, "-1234.50")})
	if want := `{"total":"-1234.50"}`; err != nil || string(out) != want {
		t.Errorf("got %s, %v, want %s", out, err, want)
	}
	var in amount
	if err := json.Unmarshal([]byte(`{"total":"0.10","part":"3"}`), &in); err != nil || in.Total.String() != "0.10" || in.Part.String() != "3" {
		t.Errorf("got %v, %v", in, err)
	}
	for _, bad := range []string{`1234.50`, `null`, `"1e3"`, `"NaN"`, `""`, `{}`, `"1\u0030"`} {
		if err := json.Unmarshal([]byte(`{"total":`+bad+`}`), &in); err == nil || !strings.Contains(err.Error(), "accepted") {
			t.Errorf("total %s: error %v, want one that says what is accepted", bad, err)
		}
	}
	keyed, err := json.Marshal(map[Decimal]int{mustParse(t, "1.5"): 1})
	if err != nil || string(keyed) != `{"1.5":1}` {
		t.Errorf("as a key: %s, %v", keyed, err)
	}
}

func TestOrdinaryArithmeticDoesNotAllocate(t *testing.T) {
	a, b := mustParse(t, "123456.78"), mustParse(t, "1.0825")
	var r Decimal
	if n := testing.AllocsPerRun(100, func() { r = a.Add(b).Mul(b).Sub(a).Round(2) }); n != 0 {
		t.Errorf("%v allocations, want 0 (result %s)", n, r)
	}
}

func BenchmarkAdd(b *testing.B) {
	x, y := mustParse(b, "123456.78"), mustParse(b, "9.12")
	b.ReportAllocs()
	for b.Loop() {
		x.Add(y)
	}
}

func BenchmarkMulRound(b *testing.B) {
	x, y := mustParse(b, "123456.78"), mustParse(b, "1.0825")
	b.ReportAllocs()
	for b.Loop() {
		x.Mul(y).Round(2)
	}
}

func FuzzParse(f *testing.F) {
	for _, seed := range []string{"1.50", "-0", "1e9", "NaN", ".", "999999999999999999999999999999.9", ".999999999970000000000000000091"} {
		f.Add(seed)
	}
	f.Fuzz(func(t *testing.T, text string) {
		d, err := Parse(text)
		if err != nil {
			return
		}
		want, ok := new(big.Rat).SetString(text)
		if !ok || d.Rat().Cmp(want) != 0 {
			t.Errorf("Parse(%q) = %s, want %v", text, d, want)
		}
		again, err := Parse(d.String())
		if err != nil || again.String() != d.String() {
			t.Errorf("%q prints as %s, which reads as %s, %v", text, d, again, err)
		}
	})
}
