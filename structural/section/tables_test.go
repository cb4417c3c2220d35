package section

import (
	"math"
	"strconv"
	"strings"
	"testing"
)

// published is a block of printed tables: one line of column names, then one
// section a line; "-" is not compared. Every value here is recalled from memory
// of the table named as source.
type published struct {
	source string
	inches bool // in, lb/ft; else cm, kg/m (Iw in 10³ cm⁶)
	design bool // of the design wall, AISC 360-22 B4.2
	text   string
}

var publishedTables = []published{
	{source: "EN 10365, IPE and HE tables", text: `
section mass A Iy Wely Wply Ry Iz Welz Wplz Rz J Iw
IPE_100 8.1 10.3 171.0 34.20 39.41 4.07 15.92 5.79 9.15 1.24 1.20 0.35
IPE_200 22.4 28.48 1943 194.3 220.6 8.26 142.4 28.47 44.61 2.24 6.98 12.99
IPE_240 30.7 39.12 3892 324.3 366.6 9.97 283.6 47.27 73.92 2.69 12.88 37.39
IPE_300 42.2 53.81 8356 557.1 628.4 12.46 603.8 80.50 125.2 3.35 20.12 125.9
IPE_360 57.1 72.73 16270 903.6 1019 14.95 1043 122.8 191.1 3.79 37.32 313.6
IPE_400 66.3 84.46 23130 1156 1307 16.55 1318 146.4 229.0 3.95 51.08 490.0
IPE_500 90.7 115.5 48200 1928 2194 20.43 2142 214.2 335.9 4.31 89.29 1249
IPE_600 122 156.0 92080 3069 3512 24.30 3387 307.9 485.6 4.66 165.4 2846
HEA_100 16.7 21.24 349.2 72.76 83.01 4.06 133.8 26.76 41.14 2.51 5.24 2.58
HEA_200 42.3 53.83 3692 388.6 429.5 8.28 1336 133.6 203.8 4.98 20.98 108.0
HEA_300 88.3 112.5 18260 1260 1383 12.74 6310 420.6 641.2 7.49 85.17 1200
HEA_400 125 159.0 45070 2311 2562 16.84 8564 570.9 872.9 7.34 189.0 2942
HEB_100 20.4 26.04 449.5 89.91 104.2 4.16 167.3 33.45 51.42 2.53 9.25 3.38
HEB_200 61.3 78.08 5696 569.6 642.5 8.54 2003 200.3 305.8 5.07 59.28 171.1
HEB_300 117 149.1 25170 1678 1869 12.99 8563 570.9 870.1 7.58 185.0 1688
HEB_400 155 197.8 57680 2884 3232 17.08 10820 721.3 1104 7.40 355.7 3817
HEB_500 187 238.6 107200 4287 4815 21.19 12620 841.6 1292 7.27 538.4 7018
HEM_100 41.8 53.24 1143 190.4 235.8 4.63 399.2 75.31 116.3 2.74 68.21 9.93
HEM_200 103 131.3 10640 967.4 1135 9.00 3651 354.5 543.2 5.27 259.4 346.3
HEM_300 238 303.1 59200 3482 4078 13.98 19400 1252 1913 8.00 1408 4386
`},
	{source: "DIN 1026-1 and EN 10365, UPN tables", text: `
section mass A Iy Wely Ry Iz Welz Rz Yc Wply J Iw
UPN_80 8.64 11.0 106 26.5 3.10 19.4 6.36 1.33 1.45 - 2.16 0.18
UPN_100 10.6 13.5 206 41.2 3.91 29.3 8.49 1.47 1.55 49.0 2.81 0.41
UPN_140 16.0 20.4 605 86.4 5.45 62.7 14.8 1.75 1.75 103 5.68 1.80
UPN_160 18.8 24.0 925 116 6.21 85.3 18.3 1.89 1.84 138 7.39 3.26
UPN_200 25.3 32.2 1910 191 7.70 148 27.0 2.14 2.01 228 11.9 9.07
UPN_300 46.2 58.8 8030 535 11.7 495 67.8 2.90 2.70 632 37.4 69.1
UPN_400 71.8 91.5 20350 1020 14.9 846 102 3.04 2.65 1240 81.6 221
`},
	{source: "EN 10365, UPE tables", text: `
section mass A Iy Wely Ry Iz Welz Rz Wply J
UPE_80 7.90 10.1 107 26.8 3.26 25.5 8.00 1.59 31.2 1.47
UPE_100 9.82 12.5 207 41.4 4.07 38.3 10.6 1.75 48.0 2.01
UPE_160 17.0 21.7 911 114 6.48 107 22.6 2.22 132 5.20
UPE_200 22.8 29.0 1909 191 8.11 187 34.5 2.54 220 8.89
UPE_240 30.2 38.5 3599 300 9.67 311 50.1 2.84 347 15.1
UPE_300 44.4 56.6 7823 522 11.8 538 75.6 3.08 613 31.5
`},
	{source: "EN 10056-1, angle tables", text: `
section mass A Zc Yc Iy Wely Ry Iz Welz Rz Rv
L_50x50x5 3.77 4.80 1.40 1.40 11.0 3.05 1.51 11.0 3.05 1.51 0.973
L_60x60x6 5.42 6.91 1.69 1.69 22.8 5.29 1.82 22.8 5.29 1.82 1.17
L_80x80x8 9.63 12.3 2.26 2.26 72.2 12.6 2.43 72.2 12.6 2.43 1.56
L_100x100x10 15.0 19.2 2.82 2.82 177 24.6 3.04 177 24.6 3.04 1.95
L_120x120x12 21.6 27.5 3.40 3.40 368 42.7 3.65 368 42.7 3.65 2.35
L_150x150x15 33.8 43.0 4.25 4.25 898 83.5 4.57 898 83.5 4.57 2.93
L_200x200x20 59.9 76.3 5.68 5.68 2850 199 6.11 2850 199 6.11 3.92
L_75x50x6 5.65 7.19 2.44 1.21 40.5 8.01 2.37 14.4 3.81 1.42 1.08
L_100x50x8 8.97 11.4 3.60 1.13 116 18.2 3.19 19.7 5.08 1.31 1.06
L_100x75x10 13.0 16.6 3.19 1.95 162 23.8 3.12 77.6 14.0 2.16 1.59
L_125x75x8 12.2 15.5 4.14 1.68 247 29.6 4.00 67.6 11.6 2.09 1.63
L_150x75x10 17.0 21.7 5.31 1.61 501 51.6 4.81 85.6 14.5 1.99 1.60
L_200x100x12 27.3 34.8 7.03 2.10 1440 111 6.43 247 31.3 2.67 2.14
`},
	{source: "EN 10056-1, angle tables, principal axes", text: `
section Iu Ru Iv Rv
L_50x50x5 17.4 1.90 4.55 0.973
L_80x80x8 115 3.06 29.9 1.56
L_100x100x10 280 3.83 73.0 1.95
L_120x120x12 584 4.60 152 2.35
L_150x150x15 1430 5.76 370 2.93
L_200x200x20 4530 7.70 1170 3.92
`},
	{source: "EN 10210-2 and EN 10219-2, hollow section tables", text: `
section mass A Iy Wely Wply Ry J
CHS_114.3x5 13.5 17.2 257 45.0 59.8 3.87 514
CHS_168.3x6.3 25.2 32.1 1053 125 165 5.73 2107
CHS_219.1x10 51.6 65.7 3598 328 438 7.40 7197
CHS_273x10 64.9 82.6 7154 524 692 9.31 14308
CHS_323.9x10 77.4 98.6 12158 751 986 11.1 24317
CHS_508x16 194 247 74909 2949 3874 17.4 149818
SHS_50x4 5.45 6.95 23.7 9.49 11.7 1.85 40.4
SHS_100x5 14.4 18.4 271 54.2 64.6 3.84 441
SHS_150x6 26.4 33.6 1146 153 180 5.84 1833
SHS_200x10 57.0 72.6 4251 425 508 7.65 7072
SHS_100x5_EN_10210-2 14.7 18.7 279 55.9 66.4 3.86 439
RHS_120x80x5 14.4 18.4 353 58.9 72.4 4.39 402
RHS_200x100x8 33.9 43.2 2091 209 267 6.95 1811
RHS_300x200x10 72.7 92.6 11313 754 921 11.1 -
`},
	{source: "AISC Steel Construction Manual 15th ed. table 1-1", inches: true, text: `
section A Iy Wely Ry Wply Iz Welz Rz Wplz J Iw
W44x335 98.5 31100 1410 17.8 1620 1200 150 3.49 236 74.7 535000
W40x149 43.8 9800 513 15.0 598 229 38.8 2.29 62.2 9.36 80000
W36x150 44.3 9040 504 14.3 581 270 45.1 2.47 70.9 10.1 82200
W33x118 34.7 5900 359 13.0 415 187 32.6 2.32 51.3 5.30 48300
W30x99 29.0 3990 269 11.7 312 128 24.5 2.10 38.6 3.77 26800
W27x84 24.7 2850 213 10.7 244 106 21.2 2.07 33.2 2.81 17900
W24x76 22.4 2100 176 9.69 200 82.5 18.4 1.92 28.6 2.68 11100
W24x68 20.1 1830 154 9.55 177 70.4 15.7 1.87 24.5 1.87 9430
W24x55 16.2 1350 114 9.11 134 29.1 8.30 1.34 13.3 1.18 3870
W21x50 14.7 984 94.5 8.18 110 24.9 7.64 1.30 12.2 1.14 2570
W21x44 13.0 843 81.6 8.06 95.4 20.7 6.37 1.26 10.2 0.770 2110
W18x50 14.7 800 88.9 7.38 101 40.1 10.7 1.65 16.6 1.24 3040
W18x35 10.3 510 57.6 7.04 66.5 15.3 5.12 1.22 8.06 0.506 1140
W16x31 9.13 375 47.2 6.41 54.0 12.4 4.49 1.17 7.03 0.461 739
W16x26 7.68 301 38.4 6.26 44.2 9.59 3.49 1.12 5.48 0.262 565
W14x132 38.8 1530 209 6.28 234 548 74.5 3.76 113 12.3 25500
W14x90 26.5 999 143 6.14 157 362 49.9 3.70 75.6 4.06 16000
W14x22 6.49 199 29.0 5.54 33.2 7.00 2.80 1.04 4.39 0.208 314
W12x65 19.1 533 87.9 5.28 96.8 174 29.1 3.02 44.1 2.18 5780
W12x50 14.6 391 64.2 5.18 71.9 56.3 13.9 1.96 21.3 1.71 1880
W12x26 7.65 204 33.4 5.17 37.2 17.3 5.34 1.51 8.17 0.300 607
W10x49 14.4 272 54.6 4.35 60.4 93.4 18.7 2.54 28.3 1.39 2070
W10x33 9.71 171 35.0 4.19 38.8 36.6 9.20 1.94 14.0 0.583 791
W10x12 3.54 53.8 10.9 3.90 12.6 2.18 1.10 0.785 1.74 0.0547 50.9
W8x31 9.13 110 27.5 3.47 30.4 37.1 9.27 2.02 14.1 0.536 530
W8x24 7.08 82.7 20.9 3.42 23.1 18.3 5.63 1.61 8.57 0.346 259
W8x18 5.26 61.9 15.2 3.43 17.0 7.97 3.04 1.23 4.66 0.172 122
W6x15 4.43 29.1 9.72 2.56 10.8 9.32 3.11 1.45 4.75 0.101 76.5
`},
	{source: "AISC Steel Construction Manual 15th ed. table 1-5", inches: true, text: `
section A Iy Wely Ry Wply Iz Welz Rz Yc Wplz J Iw
C15x50 14.7 404 53.8 5.24 68.5 11.0 3.77 0.865 0.799 8.14 2.65 492
C15x33.9 10.0 315 42.0 5.61 50.8 8.07 3.09 0.901 0.788 6.19 1.01 358
C12x20.7 6.08 129 21.5 4.61 25.6 3.86 1.72 0.797 0.698 3.47 0.369 112
C10x20 5.87 78.9 15.8 3.67 19.4 2.80 1.31 0.690 0.606 2.70 0.368 56.9
C8x11.5 3.37 32.5 8.14 3.11 9.63 1.31 0.775 0.623 0.572 1.57 0.130 16.5
C6x8.2 2.39 13.1 4.35 2.34 5.16 0.687 0.488 0.536 0.512 0.987 0.0736 4.70
`},
	{source: "AISC Steel Construction Manual 15th ed. tables 1-11 and 1-12", inches: true, design: true, text: `
section A Iy Wely Ry Wply J
HSS12x12x1/2 20.9 457 76.2 4.68 89.6 728
HSS8x8x1/2 13.5 125 31.2 3.04 37.5 204
HSS6x6x3/8 7.58 39.5 13.2 2.28 15.8 64.6
HSS4x4x1/4 3.37 7.80 3.90 1.52 4.69 12.8
HSS8x4x3/8 7.58 58.7 14.7 2.78 18.8 -
HSS10x6x3/8 10.4 137 27.4 3.63 33.8 -
`},
	{source: "AISC Steel Construction Manual 15th ed. table 1-13", inches: true, design: true, text: `
section A Iy Wely Ry Wply J
HSS6.625x0.280 5.20 26.4 7.96 2.25 10.5 52.7
HSS8.625x0.322 7.85 68.1 15.8 2.95 20.8 136
HSS10.000x0.500 13.9 159 31.7 3.38 42.3 317
`},
}

// printed is a property in the table's unit: the power of length that it has.
var printed = map[string]struct {
	power int
	of    func(Section) float64
}{
	"A": {2, func(s Section) float64 { return s.A }}, "Iy": {4, func(s Section) float64 { return s.Iy }},
	"Iz": {4, func(s Section) float64 { return s.Iz }}, "Iu": {4, func(s Section) float64 { return s.Iu }},
	"Iv": {4, func(s Section) float64 { return s.Iv }}, "Wely": {3, func(s Section) float64 { return s.Wely }},
	"Welz": {3, func(s Section) float64 { return s.Welz }}, "Wply": {3, func(s Section) float64 { return s.Wply }},
	"Wplz": {3, func(s Section) float64 { return s.Wplz }}, "Ry": {1, func(s Section) float64 { return s.Ry }},
	"Rz": {1, func(s Section) float64 { return s.Rz }}, "Ru": {1, func(s Section) float64 { return s.Ru }},
	"Rv": {1, func(s Section) float64 { return s.Rv }}, "Yc": {1, func(s Section) float64 { return s.Yc }},
	"Zc": {1, func(s Section) float64 { return s.Zc }}, "J": {4, func(s Section) float64 { return s.J }},
	"Iw": {6, func(s Section) float64 { return s.Iw }},
}

// tableValue returns the property in the unit that the table prints.
func tableValue(p published, name string, s Section) float64 {
	if name == "mass" {
		return s.Mass
	}
	unit := 0.01
	if p.inches {
		unit = 0.0254
	}
	x := printed[name].of(s) / math.Pow(unit, float64(printed[name].power))
	if name == "Iw" && !p.inches {
		x /= 1000
	}
	return x
}

// tableExceptions are the values beyond the general tolerance, by how much at
// the most, and why.
//
//   - UPN: the tables go back to DIN 1026 and were rounded by hand; sections.json
//     has the same differences against its polygons;
//   - C: A6 fixes no fillets; ours follow the rolling practice named in c.csv;
//   - C: the American tables print Iw of parallel flanges of the mean thickness;
//     ours has the taper in it, lies 19 to 24 % lower (safe) and within 1.6 % of
//     the finite-element model of UPN;
//   - HSS6.625x0.280: the table rounds the design wall to 0.260 in.
var tableExceptions = map[string]float64{
	"UPN 80 Iw": 0.07, "UPN 100 Iz": 0.006, "UPN 140 Welz": 0.006, "UPN 400 Iz": 0.0065, "UPN 400 Yc": 0.011,
	"C15x50 Iz": 0.008, "C15x33.9 Iz": 0.008, "C8x11.5 Iz": 0.008, "C6x8.2 Iz": 0.008,
	"C15x50 Welz": 0.008, "C15x33.9 Welz": 0.008, "C8x11.5 Welz": 0.008, "C6x8.2 Welz": 0.008,
	"C15x50 Iw": 0.21, "C15x33.9 Iw": 0.20, "C12x20.7 Iw": 0.22, "C10x20 Iw": 0.24, "C8x11.5 Iw": 0.23, "C6x8.2 Iw": 0.22,
	"HSS6.625x0.280 Wply": 0.006,
}

// A, I, W, i within 0.5 %, Iw 1 %, J 3 %, or half the last printed digit.
func TestAgainstPrintedTables(t *testing.T) {
	families, sections, values := map[string]bool{}, map[string]bool{}, 0
	for _, p := range publishedTables {
		lines := strings.Split(strings.TrimSpace(p.text), "\n")
		columns := strings.Fields(lines[0])
		for _, line := range lines[1:] {
			cells := strings.Fields(line)
			s, err := Find(strings.ReplaceAll(cells[0], "_", " "))
			if err != nil || len(cells) != len(columns) {
				t.Errorf("%s: %d cells, want %d; %v", cells[0], len(cells), len(columns), err)
				continue
			}
			families[s.Family], sections[s.Designation] = true, true
			if p.design {
				s = s.Design()
			}
			for i, name := range columns[1:] {
				if cells[i+1] == "-" {
					continue
				}
				values++
				checkPrinted(t, p, s, name, cells[i+1])
			}
		}
	}
	if len(sections) < 60 || len(families) < 10 || values < 700 {
		t.Errorf("compared %d values of %d sections of %d families; want at least 700 of 60 of 10", values, len(sections), len(families))
	}
}

func checkPrinted(t *testing.T, p published, s Section, name, text string) {
	t.Helper()
	want, err := strconv.ParseFloat(text, 64)
	if err != nil {
		t.Fatal(err)
	}
	share := map[string]float64{"J": 0.03, "Iw": 0.01}[name]
	if share == 0 {
		share = 0.005
	}
	if wider, ok := tableExceptions[s.Designation+" "+name]; ok {
		share = wider
	}
	got := tableValue(p, name, s)
	if off := math.Abs(got - want); !(off <= share*want || off <= halfDigit(text)) {
		t.Errorf("%s: %s = %.5g (%+.2f %%), %s prints %s", s.Designation, name, got, (got/want-1)*100, p.source, text)
	}
}

// halfDigit is half a unit of the last digit printed; tables print at the most
// three or four significant digits, so trailing zeros of 31100 are not digits.
func halfDigit(text string) float64 {
	_, decimals, point := strings.Cut(text, ".")
	if point {
		return 0.5 * math.Pow(10, -float64(len(decimals)))
	}
	return 0.5 * math.Pow(10, float64(len(text)-len(strings.TrimRight(text, "0"))))
}

// The whole table is the yardstick of halfDigit's own reading.
func TestHalfDigit(t *testing.T) {
	for text, want := range map[string]float64{"0.973": 0.0005, "10.3": 0.05, "1943": 0.5, "31100": 50, "2850": 5} {
		if got := halfDigit(text); math.Abs(got-want) > 1e-12 {
			t.Errorf("halfDigit(%s) = %g, want %g", text, got, want)
		}
	}
}
