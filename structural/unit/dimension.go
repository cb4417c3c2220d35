package unit

// Dimension is the kind of a quantity. Stress and AreaLoad are both Pa and
// stand in for each other when a text is parsed; all others are kept apart.
type Dimension uint8

// The dimensions, with the SI unit in which Parse answers.
const (
	Number       Dimension = iota // 1, no unit
	Percent                       // 1, written in hundredths: "5 %" is 0.05
	Length                        // m
	Area                          // m²
	Volume                        // m³, section moduli too
	SecondMoment                  // m⁴, second moments of area
	Mass                          // kg
	Force                         // N
	Moment                        // N·m
	Stress                        // Pa
	LineLoad                      // N/m
	AreaLoad                      // Pa = N/m²
	LineMass                      // kg/m
	AreaMass                      // kg/m²
	Frequency                     // Hz
	dimensions                    // how many there are
)

var dimensionNames = [dimensions]string{
	"number", "percentage", "length", "area", "volume", "second moment of area",
	"mass", "force", "moment", "stress", "load per length", "load per area",
	"mass per length", "mass per area", "frequency",
}

// String is the dimension in plain words, as error texts use it.
func (d Dimension) String() string {
	if d >= dimensions {
		return "unknown dimension"
	}
	return dimensionNames[d]
}

// Accepts tells whether a quantity in units of dimension e can be read where d
// is wanted: the same dimension, or the pair Stress and AreaLoad (both Pa).
func (d Dimension) Accepts(e Dimension) bool {
	pascal := func(x Dimension) bool { return x == Stress || x == AreaLoad }
	return d == e || pascal(d) && pascal(e)
}
