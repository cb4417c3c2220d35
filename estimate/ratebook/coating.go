package ratebook

// CoatingSystem is a ready system of corrosion protection, as rows and rates name
// it.
type CoatingSystem struct {
	Name        string // in the Coating column, and in the rates' selections
	Corrosivity string // category of the place, ISO 12944-2; empty where the zinc's life is for the place to say
	Durability  string // low, medium, high or very high, to the first large repair
	Years       string // of that durability
	Paint       string // what the thickness is of
	Coats       int    // least number of coats; 0 for no paint
	Thickness   int    // µm, nominal dry film of all coats
	Zinc        bool   // hot-dip galvanised
	Priced      bool   // whether the starting book of the kind unit-rate prices it
	Source      string
}

const (
	paintTable = "ISO 12944-5:2018, Table B.2, blast-cleaned carbon steel (from memory)"
	zincPaint  = "ISO 12944-5:2018, Table B.4, hot-dip galvanised steel (from memory)"
	alkyd      = "alkyd or acrylic"
	epoxy      = "epoxy or polyurethane, primer without much zinc"
	noPaint    = "none"
)

// durability are the years of ISO 12944-1:2018, 5.5 (from memory).
var durability = map[string]string{"low": "up to 7", "medium": "7 to 15", "high": "15 to 25", "very high": "more than 25"}

// paintSystems are the least numbers of coats and nominal thicknesses. Where the
// table has none for a low durability, the system of the next higher one that it
// has stands.
var paintSystems = []struct {
	corrosivity, durability, paint string
	coats, thickness               int
}{
	{"C2", "low", alkyd, 1, 100}, {"C2", "medium", alkyd, 1, 100}, {"C2", "high", epoxy, 1, 120}, {"C2", "very high", epoxy, 2, 180},
	{"C3", "low", alkyd, 1, 100}, {"C3", "medium", epoxy, 1, 120}, {"C3", "high", epoxy, 2, 180}, {"C3", "very high", epoxy, 2, 240},
	{"C4", "low", epoxy, 1, 120}, {"C4", "medium", epoxy, 2, 180}, {"C4", "high", epoxy, 2, 240}, {"C4", "very high", epoxy, 2, 300},
	{"C5", "low", epoxy, 2, 180}, {"C5", "medium", epoxy, 2, 240}, {"C5", "high", epoxy, 2, 300}, {"C5", "very high", epoxy, 3, 360},
}

// CoatingSystems returns the ready systems: paint by corrosivity C2 to C5 of ISO
// 12944-2 and durability of ISO 12944-1, galvanising to ISO 1461 with and without
// paint, none, and CX (offshore), which is noted and not priced.
func CoatingSystems() []CoatingSystem {
	var out []CoatingSystem
	for _, p := range paintSystems {
		out = append(out, CoatingSystem{
			Name: p.corrosivity + " " + p.durability, Corrosivity: p.corrosivity, Durability: p.durability, Years: durability[p.durability],
			Paint: p.paint, Coats: p.coats, Thickness: p.thickness, Priced: true, Source: paintTable,
		})
	}
	out = append(out, CoatingSystem{
		Name: "CX", Corrosivity: "CX", Durability: "high", Years: durability["high"], Paint: "epoxy or polyurethane on a primer rich in zinc",
		Coats: 3, Thickness: 280, Source: "ISO 12944-9:2018, Table 3 (from memory): to be specified and tested for the job",
	}, CoatingSystem{
		Name: "hot-dip galvanised", Paint: noPaint, Zinc: true, Priced: true, Source: "ISO 1461:2022, Table 3; its life by ISO 14713-1 (from memory)",
	})
	for _, p := range []struct {
		corrosivity string
		thickness   int
	}{{"C4", 160}, {"C5", 200}} {
		out = append(out, CoatingSystem{
			Name: "galvanised and painted " + p.corrosivity + " high", Corrosivity: p.corrosivity, Durability: "high", Years: durability["high"],
			Paint: epoxy, Coats: 2, Thickness: p.thickness, Zinc: true, Priced: true, Source: zincPaint,
		})
	}
	return append(out, CoatingSystem{Name: noPaint, Paint: noPaint, Priced: true, Source: "bare steel, on purpose"})
}

const zincTable = "ISO 1461:2022, Table 3, parts that are not centrifuged: mean thickness "

// ZincMasses returns the mean coating masses of hot-dip galvanising by thickness of
// steel (ISO 1461:2022, Table 3, from memory; mass = thickness · 7.2 g/cm³, rounded
// to 5 g/m²). A limit belongs to the thinner steel.
func ZincMasses() []ZincNorm {
	return []ZincNorm{
		{UpTo: 1.5, Mass: 325, Source: zincTable + "45 µm (from memory)"},
		{UpTo: 3, Mass: 395, Source: zincTable + "55 µm (from memory)"},
		{UpTo: 6, Mass: 505, Source: zincTable + "70 µm (from memory)"},
		{UpTo: 0, Mass: 610, Source: zincTable + "85 µm (from memory)"},
	}
}
