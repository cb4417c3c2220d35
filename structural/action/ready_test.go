package action

import (
	"math"
	"strings"
	"testing"
)

func near(got, want, relative float64) bool { return math.Abs(got-want) <= relative*math.Abs(want) }

func fullSite(c Code) Site {
	s := Site{Code: c, Width: 1.2, Belt: 1, Density: 1000, Height: 10, Face: 0.5, WindSpeed: 26, Terrain: "II", GroundSnow: 1000}
	if c == ASCE {
		s.Terrain = "C"
	}
	return s
}

func TestReadyLoadsByHand(t *testing.T) {
	for _, tc := range []struct {
		use    Use
		code   Code
		label  string
		want   float64 // N/m
		nature Nature
		free   bool
	}{
		// EN 1991-1-1:2002 table 6.2 and ASCE 7-22 table 4.3-1, from memory, over 1.2 m;
		// 60 psf = 2.87 kN/m², 125 psf = 6.00 kN/m² (the table's own rounding)
		{Walkway, EN, "walkway people", 3600, Variable, true},
		{Walkway, ASCE, "walkway people", 2.87e3 * 1.2, Variable, true},
		{Platform, EN, "platform people", 6000, Variable, true},
		{Platform, ASCE, "platform people", 6.0e3 * 1.2, Variable, true},
		{Walkway, EN, "walkway deck", 480, Permanent, false}, // common practice, no source
		// 1 m belt of 1000 kg/m³: 0.11 m² × 1000 × 9.80665
		{Conveyor, EN, "conveyor burden", 1078.7, Variable, true},
		{Conveyor, EN, "conveyor spillage", 323.6, Variable, true},
		{Conveyor, EN, "conveyor machinery", 1500, Permanent, false},
		// 0.8 and 0.84 of 1 kN/m² over 1.2 m (EN 1991-1-3:2003 5.3.2, ASCE 7-22 7.3)
		{Snow, EN, "snow", 960, Variable, false},
		{Snow, ASCE, "snow", 1008, Variable, false},
		// EN 1991-1-4:2005 figure 4.2: ce = 2.35 at 10 m in category II; qb = ½·1.25·26²
		{Wind, EN, "wind", 2.35 * 422.5 * 2 * 0.5, Variable, false},
		// ASCE 7-22 table 26.10-1: Kz = 1.00 at 33 ft (10 m), exposure C
		{Wind, ASCE, "wind", 0.613 * 26 * 26 * 0.85 * 0.85 * 2 * 0.5, Variable, false},
	} {
		set, err := Ready(tc.use, fullSite(tc.code))
		if err != nil {
			t.Errorf("%s %v: %v", tc.use, tc.code, err)
			continue
		}
		found := false
		for _, s := range set {
			if s.Action.Label != tc.label {
				continue
			}
			found = true
			if !near(s.Action.Value, tc.want, 0.005) || s.Action.Nature != tc.nature || s.Action.Free != tc.free {
				t.Errorf("%s %v: %s %v N/m, %v, free %v; want %v, %v, %v", tc.use, tc.code, tc.label, s.Action.Value, s.Action.Nature, s.Action.Free, tc.want, tc.nature, tc.free)
			}
		}
		if !found {
			t.Errorf("%s %v: no %q among %+v", tc.use, tc.code, tc.label, set)
		}
	}
}

// NPS 8 schedule 40 is 219.1 × 8.18 mm (ASME B36.10M): steel at 7850 kg/m³, water at
// 1000 kg/m³, one pipe every 15 in.
func TestPipeLevelIsFullOfEightInchPipes(t *testing.T) {
	const d, wall, centres = 0.2191, 0.00818, 15 * 0.0254
	bore := d - 2*wall
	steel := 7850 * math.Pi / 4 * (d*d - bore*bore) * 9.80665 / centres
	water := 1000 * math.Pi / 4 * bore * bore * 9.80665 / centres
	full, err := Ready(PipeFull, Site{Width: 1})
	if err != nil || len(full) != 2 {
		t.Fatalf("%+v, %v", full, err)
	}
	if !near(full[0].Action.Value, steel, 0.01) || !near(full[1].Action.Value, water, 0.01) {
		t.Errorf("steel %v, water %v N/m², want %v and %v", full[0].Action.Value, full[1].Action.Value, steel, water)
	}
	empty, err := Ready(PipeEmpty, Site{Width: 1})
	if err != nil || len(empty) != 1 || empty[0].Action.Nature != Permanent || empty[0].Action.Value != full[0].Action.Value {
		t.Errorf("empty level: %+v, %v", empty, err)
	}
}

// ce(z) of EN 1991-1-4:2005, worked by hand from (4.4), (4.5), (4.7) and (4.8), the
// formulas that figure 4.2 is drawn from, as category II at 30 m: ln(30/0.05) = 6.397,
// cr = 1.2154, ce = (1 + 7/6.397)·1.2154² = 3.09; Kz of ASCE 7-22 table 26.10-1, from
// memory.
func TestWindGrowsWithHeightAsPublished(t *testing.T) {
	for _, tc := range []struct {
		code    Code
		terrain string
		height  float64
		want    float64 // ce(z) or Kz
	}{
		{EN, "0", 10, 2.98}, {EN, "I", 10, 2.76}, {EN, "II", 10, 2.35}, {EN, "III", 10, 1.71}, {EN, "IV", 10, 1.18},
		{EN, "II", 1, 1.42}, {EN, "II", 30, 3.09}, {EN, "III", 5, 1.28},
		{ASCE, "B", 10, 0.71}, {ASCE, "C", 10, 1.00}, {ASCE, "D", 10, 1.18}, {ASCE, "C", 2, 0.85}, {ASCE, "C", 30, 1.25},
	} {
		s := fullSite(tc.code)
		s.Terrain, s.Height, s.Face = tc.terrain, tc.height, 0.5
		set, err := Ready(Wind, s)
		if err != nil {
			t.Fatal(err)
		}
		basic := 0.5 * 1.25 * 26 * 26 * 2 * 0.5
		if tc.code == ASCE {
			basic = 0.613 * 26 * 26 * 0.85 * 0.85 * 2 * 0.5
		}
		if got := set[0].Action.Value / basic; math.Abs(got-tc.want) > 0.01 {
			t.Errorf("%v %s at %v m: %v, want %v", tc.code, tc.terrain, tc.height, got, tc.want)
		}
		s.Round = true
		round, err := Ready(Wind, s)
		if err != nil || !near(round[0].Action.Value, 0.6*set[0].Action.Value, 1e-12) {
			t.Errorf("round face: %+v, %v, want 1.2/2.0 of the sharp one", round, err)
		}
	}
}

func TestEveryReadyLoadFitsAMemberAndSaysWhereItComesFrom(t *testing.T) {
	for _, u := range Uses() {
		for _, c := range []Code{EN, ASCE} {
			set, err := Ready(u, fullSite(c))
			if err != nil || len(set) == 0 {
				t.Errorf("%s %v: %+v, %v", u, c, set, err)
			}
			for _, s := range set {
				if err := s.Action.Validate(6); err != nil {
					t.Errorf("%s %v: %v", u, c, err)
				}
				sourced := strings.HasPrefix(s.Source, "EN 1991-") || strings.HasPrefix(s.Source, "ASCE 7-22 ") || strings.HasPrefix(s.Source, "common practice, no source")
				if !sourced || s.Action.Label == "" || !(s.Action.Value > 0) {
					t.Errorf("%s %v: %+v", u, c, s)
				}
				if (s.Action.Direction == Horizontal) != (u == Wind) {
					t.Errorf("%s is %v", u, s.Action.Direction)
				}
			}
		}
	}
}

func TestReadyRefusesWhatIsMissing(t *testing.T) {
	nan := math.NaN()
	for _, tc := range []struct {
		use    Use
		change func(*Site)
		want   string
	}{
		{Walkway, func(s *Site) { s.Width = 0 }, "width (m) is 0"},
		{Platform, func(s *Site) { s.Width = nan }, "width (m) is NaN"},
		{Conveyor, func(s *Site) { s.Belt = -1 }, "belt (m) is -1"},
		{Conveyor, func(s *Site) { s.Density = nan }, "density (kg/m³) is NaN"},
		{PipeFull, func(s *Site) { s.Width = math.Inf(1) }, "width (m) is +Inf"},
		{Wind, func(s *Site) { s.Height = 0 }, "height (m) is 0"},
		{Wind, func(s *Site) { s.Face = nan }, "face (m) is NaN"},
		{Wind, func(s *Site) { s.WindSpeed = 500 }, "wind speed (m/s) is 500"},
		{Wind, func(s *Site) { s.Terrain = "V" }, `category "V"; accepted are 0, I, II, III and IV`},
		{Wind, func(s *Site) { s.Code = ASCE }, `exposure "II"; accepted are B, C and D`},
		{Snow, func(s *Site) { s.GroundSnow = 0 }, "ground snow (N/m²) is 0"},
		{Snow, func(s *Site) { s.Code = 7 }, "code 7; accepted are EN and ASCE"},
		{"hay", func(*Site) {}, `use "hay"; accepted are walkway, platform`},
	} {
		s := fullSite(EN)
		tc.change(&s)
		if set, err := Ready(tc.use, s); err == nil || !strings.Contains(err.Error(), tc.want) {
			t.Errorf("%s: %+v, error %v, want one with %q", tc.use, set, err, tc.want)
		}
	}
	if u, err := ParseUse("  Pipe Level Full "); err != nil || u != PipeFull {
		t.Errorf("parsed %q, %v", u, err)
	}
	if EN.String() != "EN 1991" || ASCE.String() != "ASCE 7-22" || Code(9).String() != "code 9" {
		t.Error("names of codes")
	}
}
