package material

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"math"
	"os"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// allNames are the grades in the order of the data.
var allNames = []string{
	"S235", "S275", "S355", "S275N", "S355N", "S420N", "S460N", "S275M", "S355M", "S420M", "S460M",
	"S235H", "S275H", "S355H", "S275NH", "S355NH", "S420NH", "S460NH", "S275MH", "S355MH", "S420MH", "S460MH",
	"A36", "A572 42", "A572 50", "A572 55", "A572 60", "A572 65", "A588", "A992", "A500 A", "A500 B", "A500 C", "A500 D", "A53 B", "A106 B",
	"1.4301", "1.4401", "1.4462",
}

// Yield and tensile strength in MPa by thickness in mm, from memory, at each edge
// of the bands: EN 10025-2:2004 table 7, EN 10025-3 and -4:2004 tables 4 and 5, EN
// 10210-1:2006 tables A.3 and B.3, EN 10219-1:2006 tables A.3 and B.5; ASTM values
// in ksi from the standards' tensile tables; EN 1993-1-4 table 2.1.
func TestStrength(t *testing.T) {
	const in = 25.4
	for _, c := range []struct {
		grade     string
		thickness float64 // mm
		fy, fu    float64 // MPa
	}{
		{"S235", 1, 235, 360}, {"S235", 16, 235, 360}, {"S235", 16.1, 225, 360}, {"S235", 40, 225, 360}, {"S235", 63, 215, 360},
		{"S235", 80, 215, 360}, {"S235", 100, 215, 360}, {"S235", 150, 195, 350}, {"S235", 200, 185, 340}, {"S235", 250, 175, 340},
		{"S275", 16, 275, 410}, {"S275", 40, 265, 410}, {"S275", 63, 255, 410}, {"S275", 63.5, 245, 410}, {"S275", 80, 245, 410},
		{"S275", 100, 235, 410}, {"S275", 150, 225, 400}, {"S275", 200, 215, 380}, {"S275", 250, 205, 380},
		{"S355", 10.7, 355, 470}, {"S355", 16, 355, 470}, {"S355", 16.01, 345, 470}, {"S355", 40, 345, 470}, {"S355", 40.5, 335, 470},
		{"S355", 63, 335, 470}, {"S355", 80, 325, 470}, {"S355", 100, 315, 470}, {"S355", 150, 295, 450}, {"S355", 200, 285, 450}, {"S355", 250, 275, 450},
		{"A36", 0.5 * in, 248.211, 399.896}, {"A36", 8 * in, 248.211, 399.896}, // 36 and 58 ksi
		{"A53 B", 0.375 * in, 241.317, 413.685}, {"A106 B", 1 * in, 241.317, 413.685}, // 35 and 60 ksi
		{"S275N", 16, 275, 370}, {"S275N", 100, 235, 370}, {"S275N", 150, 225, 350}, {"S355N", 40, 345, 470}, {"S355N", 63, 335, 470},
		{"S420N", 16, 420, 520}, {"S420N", 63, 390, 520}, {"S420N", 100, 360, 520}, {"S460N", 16, 460, 540}, {"S460N", 40, 440, 540},
		{"S460N", 63, 430, 540}, {"S460N", 80, 410, 540}, {"S460N", 100, 400, 540}, {"S460N", 200, 370, 530},
		{"S275M", 63, 255, 360}, {"S355M", 16, 355, 470}, {"S355M", 40, 345, 470}, {"S355M", 63, 335, 450}, {"S355M", 120, 320, 430},
		{"S420M", 16, 420, 520}, {"S420M", 40, 400, 520}, {"S420M", 80, 380, 480}, {"S460M", 16, 460, 540}, {"S460M", 63, 430, 530}, {"S460M", 100, 400, 500},
		{"S235H", 16, 235, 360}, {"S235H", 40, 225, 360}, {"S275H", 16, 275, 410}, {"S355H", 16, 355, 470}, {"S355H", 40, 345, 470}, {"S355H", 63, 335, 470},
		{"S275NH", 65, 255, 370}, {"S355NH", 40, 345, 470}, {"S420NH", 16, 420, 520}, {"S460NH", 16, 460, 540}, {"S460NH", 65, 430, 540},
		{"S275MH", 16, 275, 360}, {"S355MH", 40, 345, 470}, {"S420MH", 16, 420, 500}, {"S460MH", 40, 440, 530},
		{"A992", 1 * in, 344.738, 448.159}, {"A572 50", 1 * in, 344.738, 448.159}, // 50 and 65 ksi
		{"A572 42", 6 * in, 289.580, 413.685}, {"A572 65", 1.25 * in, 448.159, 551.581}, // 42, 60; 65, 80 ksi
		{"A588", 4 * in, 344.738, 482.633}, {"A588", 5 * in, 317.159, 461.949}, // 50, 70; 46, 67 ksi
		{"A500 B", 0.5 * in, 289.580, 399.896}, {"A500 C", 0.5 * in, 317.159, 427.475}, // round: 42, 58; 46, 62 ksi
		{"1.4301", 20, 190, 500}, {"1.4401", 20, 200, 500}, {"1.4462", 20, 450, 640},
		{"A106 B", 59.54, 241.317, 413.685}, // NPS 24 schedule 160, the thickest wall of ASME B36.10M in our sizes
	} {
		g, err := Find(c.grade)
		if err != nil {
			t.Fatal(err)
		}
		fy, fu, err := g.Strength(c.thickness / 1000)
		if err != nil || !(math.Abs(fy/1e6-c.fy) < 1e-3) || !(math.Abs(fu/1e6-c.fu) < 1e-3) {
			t.Errorf("%s at %g mm: %.3f, %.3f MPa, %v; want %.3f, %.3f", c.grade, c.thickness, fy/1e6, fu/1e6, err, c.fy, c.fu)
		}
	}
}

func TestStrengthRefuses(t *testing.T) {
	g, err := Find("S355")
	if err != nil {
		t.Fatal(err)
	}
	for thickness, want := range map[float64]string{
		0.251:       "grade S355 (EN 10025-2:2004): thickness 251 mm is over the limit of 250 mm; take a thinner part or another grade",
		0:           "grade S355: thickness 0 mm is not above zero",
		-0.01:       "grade S355: thickness -10 mm is not above zero",
		math.Inf(1): "grade S355 (EN 10025-2:2004): thickness +Inf mm is over the limit of 250 mm; take a thinner part or another grade",
	} {
		if _, _, err := g.Strength(thickness); err == nil || err.Error() != want {
			t.Errorf("Strength(%g): got %v\nwant %s", thickness, err, want)
		}
	}
	if _, _, err := g.Strength(math.NaN()); err == nil {
		t.Errorf("Strength(NaN): no error")
	}
	if _, _, err := (Grade{}).Strength(0.01); err == nil {
		t.Errorf("Strength of an empty grade: no error")
	}
}

// E and G of EN 1993-1-1 3.2.6 and, as 29,000 and 11,200 ksi, of AISC 360-22;
// density of EN 1991-1-1 table A.4. Stainless: EN 1993-1-4 2.1.3, EN 10088-1.
func TestConstants(t *testing.T) {
	for _, name := range Names() {
		g, err := Find(name)
		if err != nil {
			t.Fatal(err)
		}
		e, shear := 210e9, 81e9
		density := 7850.0
		if strings.HasPrefix(name, "A") {
			e, shear = 199.948e9, 77.221e9
		}
		if rho, ok := map[string]float64{"1.4301": 7900, "1.4401": 8000, "1.4462": 7800}[name]; ok {
			e, shear, density = 200e9, 76.9e9, rho
		}
		if !(math.Abs(g.E/e-1) < 1e-5) || !(math.Abs(g.G/shear-1) < 1e-5) || g.Density != density {
			t.Errorf("%s: E %.6g, G %.6g Pa, %g kg/m³; want %.6g, %.6g, %g", name, g.E, g.G, g.Density, e, shear, density)
		}
		if g.Name != name || g.Standard == "" || g.Source == "" {
			t.Errorf("%s: name %q, standard %q, source %q", name, g.Name, g.Standard, g.Source)
		}
		for i, b := range g.Bands {
			if !(b.Ultimate > b.Yield && b.Yield > 0) || i > 0 && !(b.UpTo > g.Bands[i-1].UpTo && b.Yield <= g.Bands[i-1].Yield) {
				t.Errorf("%s: band %d: %+v", name, i, b)
			}
		}
	}
}

func TestFindSpellings(t *testing.T) {
	for spelling, want := range map[string]string{
		"S355": "S355", "s 355": "S355", "S-355": "S355", "S355J2": "S355", "S355 J2+N": "S355", "S355J0": "S355", "S355JO": "S355",
		"S355K2": "S355", "S355J2H": "S355H", "S355NH": "S355NH", "S275JR": "S275", "S275J0H": "S275H", "S235JRH": "S235H", "S235JR+AR": "S235",
		"S355N": "S355N", "S355+N": "S355", "S355NL": "S355N", "S 460 M": "S460M", "S460ML": "S460M", "S420NLH": "S420NH", "s355mlh": "S355MH",
		"S355J2N": "S355", "EN 10025-3 S355N": "S355N", "S460M EN 10025-4:2019": "S460M", "EN 10210-1 S355J2H": "S355H", "S355H+N": "S355H",
		"S420": "", "S460": "", "S355Q": "",
		"A572 Gr 50": "A572 50", "A572-50": "A572 50", "ASTM A572/A572M Grade 50": "A572 50", "A57250": "A572 50", "A572": "", "A572 Gr 36": "",
		"A992": "A992", "ASTM A992/A992M": "A992", "A588": "A588", "A500 Gr. C": "A500 C", "A500B": "A500 B", "ASTM A500 grade B": "A500 B", "A500": "",
		"1.4301": "1.4301", "EN 1.4462": "", "EN 10088-2 1.4401": "1.4401", "EN 10088 1.4301": "1.4301", "X5CrNi18-10 1.4301": "1.4301", "304": "",
		"EN 10025-2 S355J2": "S355", "S235 EN 10025-2:2004": "S235", "S355 to": "",
		"A36": "A36", "a 36": "A36", "ASTM A36": "A36", "A36/A36M": "A36", "A36M": "A36", "ASTM A-36": "A36",
		"A53 B": "A53 B", "A53B": "A53 B", "A53 Gr. B": "A53 B", "A53 Gr B": "A53 B", "A53 grade B": "A53 B", "ASTM A53-B": "A53 B", "A53/A53M Gr.B": "A53 B",
		"A106B": "A106 B", "A106 Gr. B": "A106 B", "SA-106 B": "A106 B", "astm a106 grade b": "A106 B",
		"A53": "", "A53 A": "", "A106 C": "", "A": "", "": "", "355": "", "S3555": "",
	} {
		g, err := Find(spelling)
		if want == "" {
			var unknown *UnknownError
			if !errors.As(err, &unknown) || unknown.Found != spelling {
				t.Errorf("Find(%q) = %s, %v; want an *UnknownError", spelling, g.Name, err)
			}
			continue
		}
		if err != nil || g.Name != want {
			t.Errorf("Find(%q) = %s, %v; want %s", spelling, g.Name, err, want)
		}
	}
}

func TestNearMisses(t *testing.T) {
	for found, want := range map[string]string{
		"S345":    "S355",
		"S365":    "S355",
		"A53":     "A53 B",
		"A106 C":  "A106 B",
		"S460":    "S460N",
		"A572":    "A572 42",
		"A500":    "A500 A",
		"304":     "1.4301",
		"SA106 C": "A106 B",
		"S355Q":   "S355",
		"St 37-2": "S235",
		"St52-3":  "S355",
		"Fe 430":  "S275",
	} {
		_, err := Find(found)
		var unknown *UnknownError
		if !errors.As(err, &unknown) || len(unknown.Near) == 0 || unknown.Near[0] != want {
			t.Errorf("Find(%q): %v; want a suggestion of %s first", found, err, want)
		}
	}
	var unknown *UnknownError
	if _, err := Find("S999"); !errors.As(err, &unknown) || len(unknown.Near) != 0 {
		t.Errorf("Find(S999): %v; want no suggestion", err)
	}
	_, err := Find("St 52-3")
	if want := `unknown steel grade "St 52-3"; did you mean S355?`; err == nil || err.Error() != want {
		t.Errorf("got %v\nwant %s", err, want)
	}
	_, err = Find("unobtainium")
	if want := `unknown steel grade "unobtainium"; known grades are ` + strings.Join(allNames, ", "); err == nil || err.Error() != want {
		t.Errorf("got %v\nwant %s", err, want)
	}
}

func TestDataIsNotShared(t *testing.T) {
	g, err := Find("S355")
	if err != nil {
		t.Fatal(err)
	}
	g.Bands[0].Yield = 1
	Names()[0] = "changed"
	again, err := Find("S355")
	if err != nil {
		t.Fatal(err)
	}
	if again.Bands[0].Yield != 355e6 {
		t.Errorf("a caller's change reached the grade: %g Pa", again.Bands[0].Yield)
	}
	if d := cmp.Diff(allNames, Names()); d != "" {
		t.Errorf("Names (-want +got):\n%s", d)
	}
}

func TestDataHash(t *testing.T) {
	h := sha256.New()
	for _, name := range []string{"grades.csv", "suits.csv"} {
		text, err := os.ReadFile(name)
		if err != nil {
			t.Fatal(err)
		}
		h.Write(text)
	}
	if got, want := DataHash(), hex.EncodeToString(h.Sum(nil)); got != want {
		t.Errorf("DataHash() = %s, the files give %s", got, want)
	}
}

const goodHead = "grade,standard,stress,length,E,G,density,up_to,yield,ultimate,families,source\n"

func TestReadGradesRefuses(t *testing.T) {
	for name, c := range map[string]struct{ rows, want string }{
		"no rows":           {"", "want a header"},
		"short row":         {"S1,EN,MPa\n", "fields"},
		"stress unit":       {"S1,EN,bar,mm,1,1,1,1,1,1,,s\n", `"bar"`},
		"length unit":       {"S1,EN,MPa,ft,1,1,1,1,1,1,,s\n", `"ft"`},
		"NaN":               {"S1,EN,MPa,mm,NaN,1,1,1,1,1,,s\n", `"NaN"`},
		"infinite":          {"S1,EN,MPa,mm,1,Inf,1,1,1,1,,s\n", `"Inf"`},
		"zero":              {"S1,EN,MPa,mm,1,1,0,1,1,1,,s\n", `"0"`},
		"bands upside down": {"S1,EN,MPa,mm,1,1,1,40,1,1,,s\nS1,EN,MPa,mm,1,1,1,16,1,1,,s\n", "does not follow"},
		"variant first":     {"S1,EN,MPa,mm,1,1,1,16,1,1,HSS,s\n", "want the row of all families first"},
		"variant's bands":   {"S1,EN,MPa,mm,1,1,1,16,1,1,,s\nS1,EN,MPa,mm,1,1,1,40,2,2,HSS,s\nS1,EN,MPa,mm,1,1,1,16,2,2,HSS,s\n", "does not follow"},
	} {
		d := &data{grades: map[string]Grade{}}
		if err := d.readGrades([]byte(goodHead + c.rows)); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v, want an error with %q", name, err, c.want)
		}
	}
}
