package ratebook

// TypicalBand is what ranges of estimates of one class usually are in one industry:
// how far P10 lies below the estimate and P90 above it, as fractions of P50. Each
// end is itself a range.
type TypicalBand struct {
	Industry string
	LowFrom  float64 // P10/P50 − 1 of a narrow range
	LowTo    float64 // of a wide one
	HighFrom float64 // P90/P50 − 1 of a narrow range
	HighTo   float64 // of a wide one
	Source   string
}

var typicalBands = []struct {
	industry, source string
	percent          [5][4]float64 // by class 1 to 5: low narrow, low wide, high narrow, high wide
}{
	{"process plant", "AACE 18R-97, Table 1 (from memory)", [5][4]float64{
		{-3, -10, 3, 15}, {-5, -15, 5, 20}, {-10, -20, 10, 30}, {-15, -30, 20, 50}, {-20, -50, 30, 100},
	}},
	{"building", "AACE 56R-08, Table 1 (from memory)", [5][4]float64{
		{-3, -5, 3, 10}, {-5, -10, 5, 15}, {-5, -15, 10, 20}, {-10, -20, 20, 30}, {-20, -30, 30, 50},
	}},
}

// TypicalBands returns the published typical ranges of an estimate class, 5 to 1:
// of process plant (18R-97) and of buildings (56R-08). They hold a range against
// what is usual; a class never follows from them. For another class it returns nil.
func TypicalBands(class int) []TypicalBand {
	if class < 1 || class > 5 {
		return nil
	}
	var out []TypicalBand
	for _, t := range typicalBands {
		p := t.percent[class-1]
		out = append(out, TypicalBand{t.industry, p[0] / 100, p[1] / 100, p[2] / 100, p[3] / 100, t.source})
	}
	return out
}
