package ratebook

// PricedRates returns the rates that price a job in either kind of book: those of
// a unit-rate book, or the material price and the ratios of a ratio book as rates
// per purchased and delivered tonne.
func (b Book) PricedRates() []Rate {
	if b.Kind != KindRatio {
		return b.Rates
	}
	var out []Rate
	for _, c := range Categories() {
		if c == Material && b.MaterialPrice != nil {
			out = append(out, Rate{ID: c, Category: c, Driver: PurchasedTonnes, Figure: *b.MaterialPrice})
		}
		if f, ok := b.Ratios[c]; ok {
			out = append(out, Rate{ID: c, Category: c, Driver: DeliveredTonnes, Figure: f, OfReference: true})
		}
	}
	return out
}

// DefaultLimits are the envelopes taken where a book gives none. The bath is that
// of the brief; the road limits are 2.55 m wide, 4.0 m high (Directive
// 96/53/EC as amended, annex I, from memory) and 25 t of load (common practice, no
// source). Local rules govern.
func DefaultLimits() Limits {
	road := Vehicle{Envelope: Envelope{Length: 13.6, Width: 2.55, Height: 4}, Mass: 25_000, Source: "Directive 96/53/EC, annex I (from memory); load by common practice, no source; local rules govern"}
	carried := road
	carried.Height = 2.7 // above a deck 1.3 m high
	return Limits{
		ShopCrane: 20_000, SiteCrane: 40_000,
		Bath:     Envelope{Length: 12.5, Width: 1.8, Height: 2.8},
		PaintBay: Envelope{Length: 24, Width: 4, Height: 4},
		Vehicle:  carried, Permit: road,
	}
}

// AmericanLimits are the road limits of the United States: 8.5 ft wide (23 CFR
// 658.15, from memory), 13.5 ft high and 48,000 lb of load (common practice, no
// source), on a trailer of 48 ft. State rules govern.
func AmericanLimits() Limits {
	l := DefaultLimits()
	const foot, pound = 0.3048, 0.45359237
	l.Permit = Vehicle{Envelope: Envelope{Length: 48 * foot, Width: 8.5 * foot, Height: 13.5 * foot}, Mass: 48_000 * pound,
		Source: "23 CFR 658.15 for the width (from memory); height and load by common practice, no source; state rules govern"}
	l.Vehicle = l.Permit
	l.Vehicle.Height = 8.5 * foot // above a deck 5 ft high
	return l
}
